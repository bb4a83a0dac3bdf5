package light

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/numeric"
)

// part is one normal component of a mixture.
type part struct{ p, mean, sd float64 }

// mixture is a sum of normal components whose weights sum to 1.
type mixture []part

// cdf returns the probability of a value below x.
func (m mixture) cdf(x float64) float64 {
	sum := 0.0
	for _, c := range m {
		sum += c.p * 0.5 * math.Erfc((c.mean-x)/(c.sd*math.Sqrt2))
	}
	return sum
}

// quantile returns the value below which a fraction q lies, exact to 1e-6 mag;
// not a number where the components are none.
func (m mixture) quantile(q float64) float64 {
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, c := range m {
		lo, hi = math.Min(lo, c.mean-9*c.sd), math.Max(hi, c.mean+9*c.sd)
	}
	x, err := numeric.Root(func(x float64) float64 { return m.cdf(x) - q }, lo, hi, 1e-6)
	if err != nil {
		return math.NaN()
	}
	return x
}

// interval fills median and bounds of a forecast from a mixture.
func (m mixture) interval(f *Forecast, level float64) {
	f.Known = true
	f.Mag = astro.Mags(m.quantile(0.5))
	f.Lo = astro.Mags(m.quantile(0.5 - level/2))
	f.Hi = astro.Mags(m.quantile(0.5 + level/2))
}
