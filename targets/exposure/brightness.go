package exposure

import (
	"math"

	"evenfall/astro"
	"evenfall/targets/light"
)

// Brightness is how bright something may be: a distribution of magnitudes (or
// of magnitudes per square second of arc, for a surface).
type Brightness interface {
	// Quantile returns the magnitude that is brighter than with probability 1-p:
	// small p is the bright end. Not a number where nothing is known.
	Quantile(p float64) astro.Mag
	// CDF returns the probability of being brighter than a magnitude.
	CDF(m astro.Mag) float64
}

// part is a bell curve with two widths about its median, of some weight.
type part struct{ weight, mid, bright, faint float64 }

func (p part) cdf(m float64) float64 {
	d, s := m-p.mid, p.faint
	if d < 0 {
		s = p.bright
	}
	if !(s > 0) {
		switch {
		case d < 0:
			return 0
		case d > 0:
			return 1
		}
		return 0.5
	}
	return 0.5 * math.Erfc(-d/(s*math.Sqrt2))
}

func (p part) quantile(q float64) float64 {
	z := math.Sqrt2 * math.Erfinv(2*q-1)
	if z < 0 {
		return p.mid + z*p.bright
	}
	return p.mid + z*p.faint
}

// Spread is a brightness of one or several bell curves, each with a width of
// its own on either side. The zero value is no brightness.
type Spread struct{ parts []part }

// Steady is a brightness known exactly.
func Steady(m astro.Mag) Spread { return Normal(m, 0) }

// Normal is a brightness with a one-sigma error in magnitudes; an error below 0
// or not a number counts as 0.
func Normal(m astro.Mag, sigma float64) Spread {
	if !(sigma > 0) {
		sigma = 0
	}
	return Spread{[]part{{1, m.Mags(), sigma, sigma}}}
}

// FromForecast turns a forecast into a distribution: its median and the ends of
// its interval, with the shape of a bell curve on either side; one such curve
// for each state where the star has states.
//
// Returns:
//   - no brightness, all quantiles not a number, where the forecast knows none.
//
// Checked: TestSpread.
func FromForecast(f light.Forecast) Spread {
	if !f.Known || !(f.Level > 0 && f.Level < 1) {
		return Spread{}
	}
	z := math.Sqrt2 * math.Erfinv(f.Level)
	bell := func(w float64, mid, lo, hi astro.Mag) part {
		return part{w, mid.Mags(), math.Max(0, mid.Minus(lo)/z), math.Max(0, hi.Minus(mid)/z)}
	}
	var s Spread
	total := 0.0
	for _, st := range f.States {
		if st.P > 0 {
			s.parts = append(s.parts, bell(st.P, st.Mag, st.Lo, st.Hi))
			total += st.P
		}
	}
	if len(s.parts) == 0 {
		return Spread{[]part{bell(1, f.Mag, f.Lo, f.Hi)}}
	}
	for i := range s.parts {
		s.parts[i].weight /= total
	}
	return s
}

// CDF returns the probability of being brighter than m.
func (s Spread) CDF(m astro.Mag) float64 {
	sum := 0.0
	for _, p := range s.parts {
		sum += p.weight * p.cdf(m.Mags())
	}
	return sum
}

// Quantile returns the magnitude that is brighter than m with probability 1-p.
//
// Given:
//   - p: above 0 and below 1.
//
// Checked: TestSpread: [Spread.CDF] undoes it.
func (s Spread) Quantile(p float64) astro.Mag {
	if len(s.parts) == 0 || !(p > 0 && p < 1) {
		return astro.Mags(math.NaN())
	}
	if len(s.parts) == 1 {
		return astro.Mags(s.parts[0].quantile(p))
	}
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, b := range s.parts {
		lo, hi = math.Min(lo, b.quantile(p)), math.Max(hi, b.quantile(p))
	}
	for range 60 { // it lies between those of the parts
		mid := (lo + hi) / 2
		if hi-lo < 1e-9 {
			break
		}
		if s.CDF(astro.Mags(mid)) < p {
			lo = mid
		} else {
			hi = mid
		}
	}
	return astro.Mags((lo + hi) / 2)
}

// WithMeasured returns the setting with the brightness that was measured, e.g.
// at the acquisition, in the place of the forecast.
//
// Given:
//   - m: in the band of the source.
//   - err: one sigma, magnitudes.
//
// Checked: TestMeasured.
func (s Setting) WithMeasured(m astro.Mag, err float64) Setting {
	s.Source.Light, s.Source.Measured = Normal(m, err), true
	return s
}
