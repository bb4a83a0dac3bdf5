package stage

import (
	"fmt"
	"math"

	"evenfall/astro/cite"
	"evenfall/astro/degenerate"
	"evenfall/astro/stellar"
	"evenfall/targets"
	"evenfall/targets/stage/tracks"
)

// Masses, Msun, and ages, yr, that the curves are drawn for.
var (
	coolingMasses = []float64{0.4, 0.6, 1.0}
	coolingMarks  = []struct {
		yr   float64
		mark string
	}{{1e7, "10 Myr"}, {1e8, "100 Myr"}, {1e9, "1 Gyr"}, {3e9, "3 Gyr"}, {1e10, "10 Gyr"}}
	usualLives = []float64{1, 2, 5}
)

// markedMass is the mass whose cooling line carries ages.
const markedMass = 0.6

// Curves returns the lines that the judgement rests on, for drawing: the
// zero-age main sequence, the red clump, lives of some masses, cooling lines
// of white dwarfs with ages, and the strips of instability.
//
// Given:
//   - massMsun: a mass whose life is wanted among them, Msun; 0: none beyond
//     the usual ones. Where it is given it comes first among the lives.
//   - feh: metallicity of the lives, dex.
//
// Notes:
//  1. Some ten milliseconds; keep the answer.
//
// Checked: TestCurves.
func (m *Models) Curves(massMsun, feh float64) []Curve {
	z := math.Min(math.Max(solarZ*math.Pow(10, feh), tracks.LeastZ), tracks.MostZ)
	f := mustFormulas(z)
	out := []Curve{zeroAge(f), clumpBox()}
	masses := usualLives
	if massMsun > 0 {
		masses = append([]float64{massMsun}, usualLives...)
	}
	for i, mass := range masses {
		if i > 0 && massMsun > 0 && math.Abs(mass-massMsun) < 0.15*mass {
			continue
		}
		if c, ok := life(f, mass); ok {
			out = append(out, c)
		}
	}
	for _, mass := range coolingMasses {
		out = append(out, m.cooling(mass))
	}
	return append(out, strips()...)
}

// placeOf completes a point by colour and magnitude where calibrations hold.
func placeOf(p Point, dwarf bool) Point {
	p.Colour, p.AbsG = math.NaN(), math.NaN()
	teff := math.Pow(10, p.LogT)
	if g, err := stellar.AbsGFromLogL(p.LogL, teff); err == nil {
		p.AbsG = g
	}
	if c, err := stellar.BPRPFromTeff(teff, stellar.Measured(0, 0), !dwarf); err == nil {
		p.Colour = c
	}
	return p
}

// zeroAge is the line where stars begin.
func zeroAge(f *tracks.Formulas) Curve {
	c := Curve{Sort: ZeroAge, Name: "zero age", Source: cite.ToutEtAl1996.String()}
	const lightest, heaviest, steps = 0.12, 12.0, 60
	last := 0.0
	for i := range steps + 1 {
		mass := lightest * math.Pow(heaviest/lightest, float64(i)/steps)
		lum, radius := f.ZAMS(mass)
		mark := ""
		for _, whole := range []float64{0.5, 1, 2, 5, 10} {
			if last < whole && mass >= whole {
				mark = fmt.Sprintf("%g", whole)
			}
		}
		last = mass
		logT := math.Log10(stellar.TeffSunK) + (math.Log10(lum)-2*math.Log10(radius))/4
		c.Points = append(c.Points, placeOf(Point{LogT: logT, LogL: math.Log10(lum), MassMsun: mass, Stage: targets.MS, Mark: mark}, true))
	}
	return c
}

// life is one star's way.
func life(f *tracks.Formulas, mass float64) (Curve, bool) {
	tr, err := f.Track(mass, windFactor)
	if err != nil {
		return Curve{}, false
	}
	c := Curve{Sort: Life, Name: fmt.Sprintf("%.2g Msun", mass), Source: cite.HurleyPolsTout2000.String()}
	for i, q := range tr.Points {
		if n := len(c.Points); n > 0 && i+1 < len(tr.Points) && math.Hypot(c.Points[n-1].LogT-q.LogT, (c.Points[n-1].LogL-q.LogL)/4) < fine {
			continue
		}
		code := q.Phase.Stage(mass)
		c.Points = append(c.Points, placeOf(Point{LogT: q.LogT, LogL: q.LogL, AgeYr: 1e6 * q.AgeMyr, MassMsun: q.Mass, Stage: code}, code == targets.MS))
	}
	return c, len(c.Points) > 0
}

// windFactor is that of the population grid; fine is the step, dex of
// temperature, below which points of a life are left out.
const windFactor, fine = 0.4, 0.004

// clumpBox outlines the red clump: 1.6 sigma of its spread each way.
//
// Source: [cite.HawkinsEtAl2017] for M_G; temperatures of [cite.ElsworthEtAl2019].
func clumpBox() Curve {
	c := Curve{Sort: ClumpBox, Name: "clump", Source: cite.HawkinsEtAl2017.String()}
	for _, corner := range [][2]float64{{4600, 0.15}, {4980, 0.15}, {4980, 0.75}, {4600, 0.75}, {4600, 0.15}} {
		logL, _, err := stellar.LogLFromG(corner[1], corner[0])
		if err != nil {
			continue
		}
		c.Points = append(c.Points, placeOf(Point{LogT: math.Log10(corner[0]), LogL: logL, Stage: targets.RC}, false))
	}
	return c
}

// cooling is the way of a white dwarf of one mass.
func (m *Models) cooling(mass float64) Curve {
	c := Curve{Sort: Cooling, Name: fmt.Sprintf("%.1f Msun", mass), Source: cite.BedardEtAl2020.String()}
	last := 0.0
	const hottest, coolest, steps = 5.0, 3.5, 90
	for i := range steps + 1 {
		logT := hottest + (coolest-hottest)*float64(i)/steps
		q, err := m.dwarfs().At(math.Pow(10, logT), mass, degenerate.Hydrogen)
		if err != nil {
			continue
		}
		p := Point{LogT: logT, LogL: math.Log10(q.LumLsun), Colour: q.BPRPMag, AbsG: q.MGMag, AgeYr: q.CoolingAgeYr, MassMsun: mass, Stage: targets.Dwarf}
		for _, age := range coolingMarks {
			if mass == markedMass && last > 0 && last < age.yr && p.AgeYr >= age.yr {
				p.Mark = age.mark
			}
		}
		last = p.AgeYr
		c.Points = append(c.Points, p)
	}
	return c
}

// strips are the edges of the ranges where stars pulsate: of white dwarfs by
// the models' gravity, and of the variables of the horizontal branch.
func strips() []Curve {
	var out []Curve
	edge := func(name, source string, at [][2]float64) {
		c := Curve{Sort: Strip, Name: name, Source: source}
		for _, p := range at {
			c.Points = append(c.Points, placeOf(Point{LogT: math.Log10(p[0]), LogL: p[1]}, true))
		}
		out = append(out, c)
	}
	for _, s := range degenerate.Strips(8) {
		switch s.Name {
		case degenerate.StripDAV, degenerate.StripDBV:
			for _, t := range []float64{s.BlueK, s.RedK} {
				edge(s.Name, s.Source, [][2]float64{{t, dwarfLogL(t) - 0.5}, {t, dwarfLogL(t) + 0.5}})
			}
		}
	}
	edge("RR Lyr", memory, [][2]float64{{7400, 1.4}, {7200, 1.95}})
	edge("RR Lyr", memory, [][2]float64{{6150, 1.4}, {5950, 1.95}})
	return out
}

// dwarfLogL is the luminosity of a white dwarf of usual size.
func dwarfLogL(teffK float64) float64 {
	const usualRadius = 0.0127 // Rsun, of 0.6 Msun
	return 2*math.Log10(usualRadius) + 4*math.Log10(teffK/stellar.TeffSunK)
}
