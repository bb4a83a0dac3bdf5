package light

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"evenfall/astro"
	"evenfall/astro/cite"
	"evenfall/targets"
)

//go:embed giants_by_type.csv
var giantsCSV string

// giantRange is the 5-95 % range of brightness of giants by spectral type, Hp
// magnitudes over three years.
//
// Source: the Hipparcos catalogue, [cite.ESA1997]; medians by type of this
// project's table giants_by_type.csv.
var giantRange = loadGiants()

func loadGiants() map[string]float64 {
	r := csv.NewReader(strings.NewReader(giantsCSV))
	r.Comment, r.FieldsPerRecord = '#', -1
	rows, err := r.ReadAll()
	if err != nil || len(rows) < 2 {
		panic("light: the embedded table of giants cannot be read")
	}
	column := -1
	for i, h := range rows[0] {
		if h == "hp_range" {
			column = i
		}
	}
	out := map[string]float64{}
	for _, row := range rows[1:] {
		v, err := strconv.ParseFloat(row[column], 64)
		if err != nil {
			continue
		}
		out[row[0]] = v
	}
	return out
}

const (
	// assumedErr stands in for a missing error of a catalogue magnitude.
	// Common practice, no source.
	assumedErr = 0.03
	// vPerHp is how much more M giants vary in V than in Hp. Common practice,
	// no source.
	vPerHp = 1.3
	// rangeSigmas is the width of a normal 5-95 % range in standard deviations.
	rangeSigmas = 3.29
)

// constant is a star that is as its catalogue says.
type constant struct {
	t         targets.Target
	intrinsic float64 // one sigma, mag
	why       string
}

var giantClass = regexp.MustCompile(`^([GKM])(\d).*III`)

func newConstant(t targets.Target) model {
	c := &constant{t: t}
	if m := giantClass.FindStringSubmatch(t.Physics.SpType); m != nil {
		if r, ok := giantRange[m[1]+m[2]]; ok {
			c.intrinsic = r * vPerHp / rangeSigmas
			c.why = fmt.Sprintf("giants of type %s%s vary by %.2f mag (5-95 %%)", m[1], m[2], r*vPerHp)
		}
	}
	if a := t.Var.AmplitudeMag; usable(a) && a.Value > 0 {
		c.intrinsic = math.Hypot(c.intrinsic, a.Value/(2*math.Sqrt2))
		c.why = fmt.Sprintf("amplitude %.3g mag", a.Value)
	}
	return c
}

// preferred is the order in which a band is chosen where none is asked.
var preferred = []targets.Band{"V", "G", "B", "R", "I", "r", "g", "i", "z", "u", "U", "J", "H", "K", "BP", "RP", "W1", "W2"}

func (c *constant) at(_ astro.Instant, band targets.Band, level float64) Forecast {
	if band == "" {
		for _, b := range preferred {
			if usable(c.t.Mags[b]) {
				band = b
				break
			}
		}
	}
	if m := c.t.Mags[band]; usable(m) {
		return c.listed(band, m, level)
	}
	if v, sd, ok := c.visualFromGaia(); ok && band == "V" {
		f := c.interval("V", v, sd, level, "V from G and BP-RP, sigma 0.03 mag")
		f.Steps = append(f.Steps, Step{"V from Gaia", "V = G + 0.02704 - 0.01424 c + 0.2156 c^2 - 0.01426 c^3, c = BP-RP",
			fmt.Sprintf("G %.3f, c %.3f", c.t.Mags["G"].Value, c.t.Mags["BP"].Value-c.t.Mags["RP"].Value),
			fmt.Sprintf("V = %.3f +- %.3f", v, sd), cite.RielloEtAl2021.String()})
		return f
	}
	if m := c.t.Var.MagMax; band == "" && usable(m) {
		return c.listed(targets.Band(c.t.Var.MagBand), m, level)
	}
	if band == "" {
		return unknown("", "no magnitude listed")
	}
	return unknown(band, fmt.Sprintf("no magnitude listed in %s, and no relation that reaches it", band))
}

func (c *constant) listed(band targets.Band, m targets.Measure, level float64) Forecast {
	sd, basis := m.Err, fmt.Sprintf("catalogue magnitude, error %.3g mag", m.Err)
	if !(sd > 0 && sd < 10) {
		sd, basis = assumedErr, fmt.Sprintf("catalogue magnitude, error of %.2f mag assumed", assumedErr)
	}
	return c.interval(band, m.Value, sd, level, basis)
}

func (c *constant) interval(band targets.Band, mag, sd, level float64, basis string) Forecast {
	if c.why != "" {
		basis += "; " + c.why
	}
	total := math.Hypot(sd, c.intrinsic)
	f := Forecast{Band: band, Basis: basis}
	mixture{{1, mag, total}}.interval(&f, level)
	f.Steps = []Step{{"expected brightness", "catalogue magnitude; sigma^2 = error^2 + intrinsic^2",
		fmt.Sprintf("%s = %.3f, error %.3f, intrinsic %.3f", band, mag, sd, c.intrinsic),
		fmt.Sprintf("%.3f, %.3f to %.3f", f.Mag.Mags(), f.Lo.Mags(), f.Hi.Mags()), "the list"}}
	return f
}

// visualFromGaia returns V from Gaia photometry inside the relation's range.
//
//	G - V = -0.02704 + 0.01424 c - 0.2156 c^2 + 0.01426 c^3     c = BP - RP, -0.5 to 5.0
//
// Notes:
//  1. White dwarfs only up to c = 0.5; not for stars with emission lines.
//
// Source: [cite.RielloEtAl2021], appendix C; sigma 0.030.
//
// Checked: TestVisualFromGaia: G = 10, c = 0.82 gives 10.152.
func (c *constant) visualFromGaia() (v, sd float64, ok bool) {
	g, bp, rp := c.t.Mags["G"], c.t.Mags["BP"], c.t.Mags["RP"]
	if !usable(g) || !usable(bp) || !usable(rp) {
		return 0, 0, false
	}
	x := bp.Value - rp.Value
	if x < -0.5 || x > 5 || (c.t.Kind == targets.WD && x > 0.5) {
		return 0, 0, false
	}
	return g.Value - (-0.02704 + x*(0.01424+x*(-0.2156+x*0.01426))), math.Hypot(0.030, g.Err), true
}

// between is a variable of no predictable kind: anywhere in its range.
type between struct{ t targets.Target }

func newRange(t targets.Target) model {
	if !usable(t.Var.MagMax) || !usable(t.Var.MagMin) {
		return newConstant(t)
	}
	return &between{t}
}

func (b *between) at(_ astro.Instant, band targets.Band, level float64) Forecast {
	own := bandOf(b.t.Var.MagBand)
	if band != "" && band != own {
		return (&constant{t: b.t}).at(astro.Instant{}, band, level)
	}
	f := Forecast{Band: own, Basis: fmt.Sprintf("variable of type %s: anywhere between its extremes", b.t.Var.Type)}
	spread(b.t.Var.MagMax.Value, b.t.Var.MagMin.Value).interval(&f, level)
	f.Steps = []Step{{"expected brightness", "uniform between the extremes", fmt.Sprintf("%.2f to %.2f", b.t.Var.MagMax.Value, b.t.Var.MagMin.Value),
		fmt.Sprintf("%.2f, %.2f to %.2f", f.Mag.Mags(), f.Lo.Mags(), f.Hi.Mags()), "the list"}}
	return f
}

// spread is a nearly uniform mixture between two magnitudes.
func spread(bright, faint float64) mixture {
	const n = 12
	var m mixture
	w := math.Abs(faint-bright) / n
	for i := range n {
		m = append(m, part{1.0 / n, math.Min(bright, faint) + w*(float64(i)+0.5), math.Max(w/2, 0.02)})
	}
	return m
}

// bandOf turns the band of a catalogue's extremes into one of ours: visual
// estimates stand for V, photographic ones keep their own name.
func bandOf(b string) targets.Band {
	switch b {
	case "v", "":
		return "V"
	}
	return targets.Band(b)
}
