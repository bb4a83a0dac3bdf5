package check

import (
	"fmt"
	"hash/fnv"
	"math"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/roster"
	"evenfall/targets/stage"
)

// Lives is an invented sky for tests of the diagram: lines of about the shape
// of real ones, and a place for most targets near the line of their stage. Not
// one figure of it is true of any star.
type Lives struct{}

// table is a function given by points with x falling.
type table [][2]float64

func (t table) at(x float64) float64 {
	for i := 1; i < len(t); i++ {
		if x >= t[i][0] || i == len(t)-1 {
			f := (x - t[i][0]) / (t[i-1][0] - t[i][0])
			return t[i][1] + f*(t[i-1][1]-t[i][1])
		}
	}
	return t[0][1]
}

var (
	zeroAge = table{{4.62, 5.2}, {4.48, 4.3}, {4.27, 3.0}, {4.08, 1.9}, {3.95, 1.15}, {3.85, 0.55}, {3.76, -0.1}, {3.68, -0.7}, {3.60, -1.2}, {3.53, -1.8}, {3.46, -2.8}}
	colours = table{{5.4, -0.8}, {4.6, -0.5}, {4.3, -0.35}, {4, 0}, {3.9, 0.3}, {3.8, 0.6}, {3.75, 0.85}, {3.7, 1.05}, {3.65, 1.3}, {3.6, 1.7}, {3.55, 2.2}, {3.5, 2.9}, {3.45, 3.6}, {3.38, 4.6}}
	bolos   = table{{5.4, -8}, {4.6, -3.4}, {4.3, -1.8}, {4, -0.2}, {3.85, 0.05}, {3.76, 0}, {3.65, -0.4}, {3.6, -0.8}, {3.5, -2}, {3.38, -4}}
)

// point makes one with its colour and magnitude.
func point(logT, logL float64) stage.Point {
	return stage.Point{LogT: logT, LogL: logL, Colour: colours.at(logT), AbsG: 4.74 - 2.5*logL - bolos.at(logT)}
}

func line(sort stage.Sort, name string, pts ...[2]float64) stage.Curve {
	c := stage.Curve{Sort: sort, Name: name, Source: "invented for tests"}
	for i, p := range pts {
		if i == 0 {
			c.Points = append(c.Points, point(p[0], p[1]))
			continue
		}
		const parts = 12
		was := pts[i-1]
		for k := 1; k <= parts; k++ {
			f := float64(k) / parts
			c.Points = append(c.Points, point(was[0]+f*(p[0]-was[0]), was[1]+f*(p[1]-was[1])))
		}
	}
	return c
}

// life invents the life of a mass.
func life(m float64) stage.Curve {
	l := math.Log10(m)
	l0 := math.Min(3.9*l-0.05, 5)
	t0 := 3.76 + 0.55*l
	core := math.Min(0.5+0.08*m, 1.2)
	type part struct {
		s    targets.Stage
		to   [2]float64
		mass float64
	}
	tip := math.Max(3.4, l0+0.6)
	parts := []part{{targets.MS, [2]float64{t0 - 0.03, l0 + 0.35}, m}, {targets.SG, [2]float64{3.70, l0 + 0.5}, m}, {targets.RGB, [2]float64{3.55, math.Max(3.3, l0+0.8)}, m},
		{targets.RC, [2]float64{3.67, math.Max(1.7, l0+0.5)}, m}, {targets.EAGB, [2]float64{3.54, math.Max(3.3, l0+0.9)}, m}, {targets.TPAGB, [2]float64{3.43, tip + 0.4}, core + 0.1},
		{targets.PAGB, [2]float64{4.5, tip + 0.4}, core}, {targets.CSPN, [2]float64{5.1, tip + 0.2}, core}, {targets.Dwarf, [2]float64{4.9, 1.4}, core}, {targets.Dwarf, [2]float64{4.4, -1.2}, core}, {targets.Dwarf, [2]float64{3.7, -4}, core}}
	c := stage.Curve{Sort: stage.Life, Name: fmt.Sprintf("%.2g Msun", m), Source: "invented for tests"}
	was := [2]float64{t0, l0}
	for _, p := range parts {
		piece := line(stage.Life, "", was, p.to)
		for _, q := range piece.Points {
			q.Stage, q.MassMsun = p.s, p.mass
			c.Points = append(c.Points, q)
		}
		was = p.to
	}
	return c
}

// Curves returns the invented lines.
func (Lives) Curves(_ *roster.Roster, massMsun, _ float64) []stage.Curve {
	out := []stage.Curve{line(stage.ZeroAge, "zero-age main sequence", zeroAge...),
		line(stage.ClumpBox, "red clump", [2]float64{3.70, 1.9}, [2]float64{3.66, 1.9}, [2]float64{3.66, 1.55}, [2]float64{3.70, 1.55}, [2]float64{3.70, 1.9}),
		line(stage.Strip, "pulsation strip", [2]float64{3.72, 4.6}, [2]float64{3.87, 1}), line(stage.Strip, "pulsation strip", [2]float64{3.80, 4.6}, [2]float64{3.93, 1}),
		line(stage.Strip, "DAV", [2]float64{4.10, -2.3}, [2]float64{4.08, -2.9}), line(stage.Strip, "DAV", [2]float64{4.04, -2.3}, [2]float64{4.02, -3.1})}
	for _, m := range []float64{0.6, 1} {
		c := line(stage.Cooling, fmt.Sprintf("%.1f Msun", m), [2]float64{4.95, 1.1 - 2*(m-0.6)}, [2]float64{4.5, -0.9 - 1.2*(m-0.6)}, [2]float64{4.1, -2.6 - (m - 0.6)}, [2]float64{3.7, -4 - (m - 0.6)})
		for i := range c.Points {
			c.Points[i].MassMsun = m
		}
		for k, mark := range map[int]string{10: "1 Myr", 18: "100 Myr", 25: "1 Gyr", 33: "5 Gyr"} {
			if m < 1 {
				c.Points[k].Mark = mark
			}
		}
		out = append(out, c)
	}
	for _, m := range []float64{1, 2, 4} {
		out = append(out, life(m))
	}
	if massMsun > 0 {
		out = append(out, life(massMsun))
	}
	return out
}

// spots are where the stages are at home: temperature, luminosity, spread,
// mass.
var homes = map[string][5]float64{"SG": {3.74, 0.6, 0.03, 0.2, 1.2}, "RGB": {3.63, 2.2, 0.03, 0.6, 1.2}, "RC": {3.68, 1.72, 0.012, 0.08, 1.4}, "HB": {3.9, 1.7, 0.12, 0.08, 0.6},
	"EAGB": {3.57, 2.9, 0.02, 0.3, 1.5}, targets.Merged: {3.61, 2.6, 0.03, 0.4, 1.3}, "TPAGB": {3.47, 3.8, 0.04, 0.25, 1.8}, "PAGB": {3.95, 3.7, 0.2, 0.2, 0.6}, "PN": {4.95, 3.2, 0.15, 0.4, 0.6},
	"CSPN": {4.95, 3.2, 0.15, 0.4, 0.6}, "SDB": {4.45, 1.35, 0.05, 0.2, 0.47}, "RSG": {3.56, 4.9, 0.02, 0.2, 15}, "ACC": {4.2, 0, 0.4, 0.8, 0.9}}

// Verdict returns the roster's judgement with an invented place.
func (Lives) Verdict(r *roster.Roster, row int) *stage.Verdict {
	v := r.Prepared(row).Verdict
	h := fnv.New64a()
	h.Write([]byte(r.Entry(row).Target.Name))
	seed := h.Sum64()
	draw := func() float64 { // -1 to 1, towards the middle
		seed = seed*6364136223846793005 + 1442695040888963407
		a := float64(seed>>40) / (1 << 24)
		seed = seed*6364136223846793005 + 1442695040888963407
		return a + float64(seed>>40)/(1<<24) - 1
	}
	if draw() > 0.7 {
		v.Place = stage.Placing{Why: "no parallax"}
		return &v
	}
	var t, l float64
	switch home, ok := homes[v.Best]; {
	case ok:
		t, l, v.MassMsun = home[0]+home[2]*draw(), home[1]+home[3]*draw(), home[4]*(1+0.3*draw())
	case v.Best == string(targets.Dwarf):
		t = 4.2 + 0.5*draw()
		l, v.MassMsun = 4*(t-4.1)-2.6+0.15*draw(), 0.62+0.15*draw()
	default:
		t = 3.8 + 0.2*draw()
		l, v.MassMsun = zeroAge.at(t)+0.25+0.2*draw(), math.Pow(10, (t-3.76)/0.55)
	}
	dt, dl := 0.01+0.02*math.Abs(draw()), 0.04+0.12*math.Abs(draw())
	q := point(t, l)
	around := func(x, d float64) astro.Interval {
		return astro.Interval{Lo: x - d, Mid: x, Hi: x + 1.2*d, Level: stage.Level}
	}
	v.Place = stage.Placing{HROK: true, LogT: around(t, dt), LogL: around(l, dl), CMDOK: true, Colour: around(q.Colour, 0.05), AbsG: around(q.AbsG, 2.5*dl)}
	if draw() > 0.6 {
		v.Place.HROK, v.Place.Why = false, "no temperature"
	}
	v.FeH = 0.3 * draw()
	return &v
}
