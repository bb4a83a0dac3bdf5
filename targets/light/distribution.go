package light

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/numeric"
)

// distribution is the whole of what a forecast says of a magnitude.
type distribution interface {
	Quantile(p float64) float64 // NaN outside 0 to 1
	CDF(mag float64) float64
}

// Quantile returns the magnitude that the star is brighter than with a
// probability.
//
// Given:
//   - p: above 0 and below 1; 0.1 gives the bright end of the 80 % interval.
//
// Returns:
//   - the magnitude, to 1e-4 mag; ok false where nothing is forecast, or p is
//     no such probability.
//
// Notes:
//  1. Of every kind of forecast: normal, states, long-period. Where there are
//     states the quantiles are those of all of them together, which may lie in
//     the gap between two: take the median of a state from States.
//
// Checked: TestQuantiles, TestMixtureQuantiles.
func (f *Forecast) Quantile(p float64) (m astro.Mag, ok bool) {
	if !f.Known || f.dist == nil {
		return astro.Mag{}, false
	}
	q := f.dist.Quantile(p)
	return astro.Mags(q), !math.IsNaN(q)
}

// CDF returns the probability that the star is brighter than a magnitude.
//
// Returns:
//   - 0 to 1; ok false where nothing is forecast, or for no magnitude.
//
// Checked: TestQuantiles.
func (f *Forecast) CDF(m astro.Mag) (p float64, ok bool) {
	if !f.Known || f.dist == nil || math.IsNaN(m.Mags()) {
		return 0, false
	}
	return math.Max(0, math.Min(1, f.dist.CDF(m.Mags()))), true
}

// fill sets median and bounds of a forecast from a distribution.
func (f *Forecast) fill(d distribution, level float64) {
	f.bounds(d, level)
	f.Mag = astro.Mags(d.Quantile(0.5))
}

// bounds sets the bounds alone.
func (f *Forecast) bounds(d distribution, level float64) {
	f.Known, f.dist = true, d
	f.Lo = astro.Mags(d.Quantile(0.5 - level/2))
	f.Hi = astro.Mags(d.Quantile(0.5 + level/2))
}

// part is one normal component of a mixture.
type part struct{ p, mean, sd float64 }

// mixture is a sum of normal components whose weights sum to 1.
type mixture []part

// CDF returns the probability of a value below x.
func (m mixture) CDF(x float64) float64 {
	sum := 0.0
	for _, c := range m {
		sum += c.p * numeric.NormalCDF((x-c.mean)/c.sd)
	}
	return sum
}

// Quantile returns the value below which a fraction q lies, exact to 1e-6 mag;
// not a number where there is none.
func (m mixture) Quantile(q float64) float64 {
	if !(q > 0 && q < 1) {
		return math.NaN()
	}
	if len(m) == 1 {
		return m[0].mean + m[0].sd*math.Sqrt2*math.Erfinv(2*q-1)
	}
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, c := range m {
		if c.p > 0 {
			lo, hi = math.Min(lo, c.mean-9*c.sd), math.Max(hi, c.mean+9*c.sd)
		}
	}
	x, err := numeric.Root(func(x float64) float64 { return m.CDF(x) - q }, lo, hi, 1e-6)
	if err != nil {
		return math.NaN()
	}
	return x
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

// The likelihood of a measured magnitude has a second, wide component: the
// whole treatment of outliers.
const (
	narrowWeight = 0.98
	wideSD       = 1.5  // mag
	limitWeight  = 0.97 // of "fainter than"
	limitSD      = 0.15
	unlikelyP    = 0.1 // under which a magnitude is marked
)

// likelihood returns how likely a magnitude is where a normal brightness was
// expected, and that share of it which is not an outlier's.
func likelihood(r *reading, mean, sd float64) (all, narrow float64) {
	e := r.sigma()
	if r.Limit {
		n := limitWeight * numeric.NormalCDF((mean-r.Mag)/math.Hypot(sd, limitSD))
		return n + 1 - limitWeight, n
	}
	s := math.Hypot(sd, e)
	n := narrowWeight * normal(r.Mag-mean, s)
	return n + (1-narrowWeight)*normal(r.Mag-mean, math.Hypot(s, wideSD)), n
}

// normal is the density of a normal distribution.
func normal(x, sd float64) float64 {
	z := x / sd
	return math.Exp(-z*z/2) / (sd * math.Sqrt(2*math.Pi))
}
