package stage

import (
	"fmt"
	"math"

	"evenfall/astro/cite"
	"evenfall/astro/stellar"
	"evenfall/targets"
)

// release returns where a parallax comes from, by the epoch where the list
// does not say.
func release(t *targets.Target) stellar.Release {
	switch r := stellar.Release(t.Place.PlxFrom); r {
	case stellar.GaiaDR3, stellar.GaiaDR2, stellar.Hipparcos, stellar.Corrected:
		return r
	case "":
	default:
		return stellar.Other
	}
	switch {
	case !t.Place.EpochGiven:
		return stellar.Other
	case sameEpoch(t.Place.EpochJyr, 2016):
		return stellar.GaiaDR3
	case sameEpoch(t.Place.EpochJyr, 2015.5):
		return stellar.GaiaDR2
	case sameEpoch(t.Place.EpochJyr, 1991.25):
		return stellar.Hipparcos
	}
	return stellar.Other
}

func sameEpoch(a, b float64) bool { return math.Abs(a-b) < 0.01 }

// far works out the distance: from the parallax as a distribution, from the
// list's own, or from the period of a Mira.
func (s *sight) far(t *targets.Target) {
	s.releaseIs = release(t)
	plx := t.Place.Plx
	switch {
	case !finite(plx):
		s.farOtherwise(t, "no parallax")
		return
	case plx.Err <= 0:
		plx.Err = assumedPlxErr * math.Max(math.Abs(plx.Value), 0.1)
		s.lack("no error of the parallax: 2 %% assumed")
	}
	g := math.NaN()
	if finite(t.Mags["G"]) {
		g = t.Mags["G"].Value
	} else if s.releaseIs == stellar.GaiaDR3 {
		s.releaseIs = stellar.Other
		s.lack("no G magnitude: the parallax keeps its zero point")
	}
	right, err := stellar.Correct(plx.Value, plx.Err, stellar.Solution{Release: s.releaseIs, GMag: g, Giant: t.Kind == targets.Giant || t.Kind == targets.LPV,
		SinBeta: stellar.SinEclipticLatitude(t.Place.RA, t.Place.Dec), LongPeriod: t.Kind == targets.LPV})
	if err != nil {
		s.farOtherwise(t, "the parallax cannot be used")
		return
	}
	if s.keep {
		s.step("parallax without its zero point", "plx - Z, error k times the listed one and the floor",
			fmt.Sprintf("listed %.4f +- %.4f mas; %s", plx.Value, plx.Err, right.Zero.Why),
			fmt.Sprintf("%.4f +- %.4f mas", right.Mas, right.ErrMas), sourceOf(right.Zero.Source, right.Zero.Note))
	}
	if right.Mas < goodParallax*right.ErrMas && s.farByPeriod(t) {
		return
	}
	scale := stellar.SkyScaleKpc
	if t.Kind == targets.WD {
		scale = stellar.WhiteDwarfScaleKpc
	}
	d, err := stellar.Distance(stellar.DistancePrior{PlxMas: right.Mas, ErrMas: right.ErrMas, ScaleKpc: scale})
	if err != nil {
		s.farOtherwise(t, "the parallax cannot be used")
		return
	}
	if d.Doubtful {
		s.farOtherwise(t, "the parallax is negative by more than 5 of its errors, so it is not used")
		return
	}
	s.poor = right.Mas < fewParallaxErr*right.ErrMas
	switch {
	case right.Mas <= 0:
		s.lack("parallax not positive: the distance, %.0f to %.0f pc, is mostly that of stars in general", 1000*d.Q16, 1000*d.Q84)
	case s.poor:
		s.lack("parallax only %.1f times its error: distance %.0f to %.0f pc, from it and from how stars are spread", right.Mas/right.ErrMas, 1000*d.Q16, 1000*d.Q84)
	}
	how := "parallax with a prior that falls off over " + fmt.Sprintf("%.2g kpc", scale)
	if most := brightestDistance(t); s.poor && most < d.Q95 {
		d, how = nearer(d, most), how+", no farther than the brightest of stars would be"
	}
	s.set(d, how, cite.BailerJones2015.String())
}

// set takes a distance.
func (s *sight) set(d stellar.Distances, how, source string) {
	s.distance, s.distanceOK, s.distanceBy, s.distanceOf = d, true, how, source
	s.farErr = math.Log10(d.Q84/d.Q16) / 2
	if s.keep {
		s.step("distance", "median of p(r | plx) ~ r^2 exp(-r/L) exp(-(plx-1/r)^2/2s^2), or as listed", fmt.Sprintf("plx %.4f +- %.4f mas; %s", d.PlxMas, d.ErrMas, how),
			fmt.Sprintf("%.1f pc, 68 %%: %.1f to %.1f", 1000*d.Q50, 1000*d.Q16, 1000*d.Q84), source)
	}
}

// farOtherwise takes the listed distance, or the one that a period gives.
func (s *sight) farOtherwise(t *targets.Target, why string) {
	if s.farByPeriod(t) {
		return
	}
	const unsaid = 0.2 // of a distance without an error
	if d := t.Physics.DistPc; finite(d) && d.Value > 0 {
		e := d.Err
		if e <= 0 {
			e = unsaid * d.Value
		}
		s.set(around(d.Value/1000, math.Min(e, 0.9*d.Value)/1000), "as listed", "the list")
		return
	}
	s.lack("%s: how luminous it is is not known from it", why)
}

// around is a distance known to be d, with one sigma e, kpc.
func around(d, e float64) stellar.Distances {
	const nodes, reach = 21, 2.5
	out := stellar.Distances{PlxMas: 1 / d, ErrMas: e / d / d, Q05: math.Max(d-1.645*e, 0.05*d), Q16: d - e, Q50: d, Q84: d + e, Q95: d + 1.645*e, ModeKpc: d}
	sum := 0.0
	for i := range nodes {
		z := reach * (2*float64(i)/(nodes-1) - 1)
		if r := d + z*e; r > 0.02*d {
			out.R, out.W = append(out.R, r), append(out.W, math.Exp(-z*z/2))
			sum += math.Exp(-z * z / 2)
		}
	}
	for i := range out.W {
		out.W[i] /= sum
	}
	return out
}

// byModulus is a distance whose modulus is known with an error, mag.
func byModulus(mu, sd float64) stellar.Distances {
	const nodes, reach = 21, 2.5
	at := func(z float64) float64 { return math.Pow(10, (mu+z*sd-10)/5) }
	out := stellar.Distances{PlxMas: 1 / at(0), ErrMas: sd / modulusPerRelative / at(0), Q05: at(-1.645), Q16: at(-1), Q50: at(0), Q84: at(1), Q95: at(1.645), ModeKpc: at(0)}
	sum := 0.0
	for i := range nodes {
		z := reach * (2*float64(i)/(nodes-1) - 1)
		out.R, out.W = append(out.R, at(z)), append(out.W, math.Exp(-z*z/2))
		sum += math.Exp(-z * z / 2)
	}
	for i := range out.W {
		out.W[i] /= sum
	}
	return out
}

// Absolute magnitudes that no star of the lists passes; common practice, no
// source.
var brightestStar = map[targets.Band]float64{"V": -9, "G": -9, "K": -12}

// brightestAGB is the same for stars listed as long-period variables, in K.
const brightestAGB = -10.0

// brightestDistance returns how far a star may be before it would be brighter
// than any, kpc.
func brightestDistance(t *targets.Target) float64 {
	most := math.Inf(1)
	for band, limit := range brightestStar {
		if t.Kind == targets.LPV && band == "K" {
			limit = brightestAGB
		}
		if m := t.Mags[band]; finite(m) {
			most = math.Min(most, math.Pow(10, (m.Value-limit-10)/5))
		}
	}
	return most
}

// nearer is a distance of which nothing beyond r is left.
func nearer(d stellar.Distances, r float64) stellar.Distances {
	n := 0
	sum := 0.0
	for n < len(d.R) && d.R[n] <= r {
		sum += d.W[n]
		n++
	}
	if n < 2 || sum <= 0 {
		return d
	}
	out := stellar.Distances{PlxMas: d.PlxMas, ErrMas: d.ErrMas, ScaleKpc: d.ScaleKpc, ModeKpc: math.Min(d.ModeKpc, r), R: d.R[:n], W: make([]float64, n)}
	below := 0.0
	marks := []struct {
		p    float64
		into *float64
	}{{0.05, &out.Q05}, {0.16, &out.Q16}, {0.5, &out.Q50}, {0.84, &out.Q84}, {0.95, &out.Q95}}
	for i := range n {
		out.W[i] = d.W[i] / sum
		below += out.W[i]
		for _, m := range marks {
			if *m.into == 0 && below >= m.p {
				*m.into = d.R[i]
			}
		}
	}
	return out
}

// farByPeriod takes the distance of a Mira from its period and its mean K.
func (s *sight) farByPeriod(t *targets.Target) bool {
	k := t.Mags["K"]
	if t.Kind != targets.LPV || !isMira(t) || !finite(k) || !finite(t.Var.PeriodD) {
		return false
	}
	carbon := isCarbon(t)
	absK, err := periodLuminosity(t.Var.PeriodD.Value, carbon)
	if err != nil {
		return false
	}
	e, _ := excess(t)
	mu := k.Value - absK.Value - extinctionK*e
	s.set(byModulus(mu, math.Hypot(absK.Err, miraMeanErr)), fmt.Sprintf("period-luminosity relation of Miras, M_K = %.2f +- %.2f", absK.Value, absK.Err), cite.WhitelockEtAl2008.String())
	return true
}
