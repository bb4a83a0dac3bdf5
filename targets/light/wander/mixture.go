package wander

import (
	"math"

	"evenfall/astro/numeric"
)

// part is one normal component of a mixture.
type part struct{ p, mean, sd float64 }

// mixture is a sum of normal components whose weights sum to 1.
type mixture []part

const (
	// Components whose means differ by less than a fifth of their standard
	// deviation are joined, keeping mean and variance; that moves no quantile by
	// as much as 0.002 mag.
	joinMean   = 0.2
	joinLnSD   = 0.15
	mostMeans  = 400
	mostSDs    = 24
	joinedFrom = 150  // fewer components are left as they are
	reachSD    = 7.0  // standard deviations, where a mixture ends
	closeness  = 1e-4 // mag, of a quantile
)

// joined returns a mixture of few components that is as good as m.
func (m mixture) joined() mixture {
	if len(m) < joinedFrom {
		return m
	}
	lo, hi, small, large := math.Inf(1), math.Inf(-1), math.Inf(1), 0.0
	for _, c := range m {
		lo, hi = math.Min(lo, c.mean), math.Max(hi, c.mean)
		small, large = math.Min(small, c.sd), math.Max(large, c.sd)
	}
	width := math.Max(joinMean*small, (hi-lo)/(mostMeans-1))
	wide := math.Max(joinLnSD, math.Log(large/small)/(mostSDs-1))
	if !(width > 0) || math.IsInf(width, 0) || math.IsNaN(wide) || math.IsInf(wide, 0) {
		return m
	}
	sds := int(math.Log(large/small)/wide) + 1
	cells := make([]struct{ p, first, second float64 }, (int((hi-lo)/width)+1)*sds)
	for _, c := range m {
		cell := &cells[int((c.mean-lo)/width)*sds+int(math.Log(c.sd/small)/wide)]
		d := c.mean - lo
		cell.p += c.p
		cell.first += c.p * d
		cell.second += c.p * (d*d + c.sd*c.sd)
	}
	var out mixture
	for _, c := range cells {
		if c.p > 0 {
			d := c.first / c.p
			out = append(out, part{c.p, lo + d, math.Sqrt(math.Max(c.second/c.p-d*d, small*small))})
		}
	}
	return out
}

// cdf returns the probability of a value below x.
func (m mixture) cdf(x float64) float64 {
	sum := 0.0
	for _, c := range m {
		switch z := (x - c.mean) / c.sd; {
		case z > reachSD:
			sum += c.p
		case z > -reachSD:
			sum += c.p * numeric.NormalCDF(z)
		}
	}
	return sum
}

// density returns the probability per magnitude at x.
func (m mixture) density(x float64) float64 {
	sum := 0.0
	for _, c := range m {
		if z := (x - c.mean) / c.sd; math.Abs(z) < reachSD {
			sum += c.p * math.Exp(-z*z/2) / (c.sd * math.Sqrt(2*math.Pi))
		}
	}
	return sum
}

// ends returns where the mixture begins and ends.
func (m mixture) ends() (lo, hi float64) {
	lo, hi = math.Inf(1), math.Inf(-1)
	for _, c := range m {
		lo, hi = math.Min(lo, c.mean-reachSD*c.sd), math.Max(hi, c.mean+reachSD*c.sd)
	}
	return lo, hi
}

// quantile returns the value below which a fraction q lies; not a number where
// there is none.
func (m mixture) quantile(q float64) float64 {
	if !(q > 0 && q < 1) || len(m) == 0 {
		return math.NaN()
	}
	lo, hi := m.ends()
	x, err := numeric.Root(func(x float64) float64 { return m.cdf(x) - q }, lo, hi, closeness)
	if err != nil {
		return math.NaN()
	}
	return x
}

const (
	humpCells = 80
	// Two humps count as two where the dip between them falls under so much of
	// the lower, and either holds so much of the probability. A choice.
	humpDip, humpShare = 0.8, 0.15
)

// twoHumped tells whether the density has two humps worth telling apart.
func (m mixture) twoHumped() bool {
	lo, hi := m.quantile(0.01), m.quantile(0.99)
	if !(hi > lo) {
		return false
	}
	var d [humpCells]float64
	step := (hi - lo) / (humpCells - 1)
	for i := range d {
		d[i] = m.density(lo + float64(i)*step)
	}
	// highest so far from the left, and from the right
	var left, right [humpCells]float64
	for i := range d {
		left[i], right[humpCells-1-i] = d[i], d[humpCells-1-i]
		if i > 0 {
			left[i] = math.Max(left[i], left[i-1])
			right[humpCells-1-i] = math.Max(right[humpCells-1-i], right[humpCells-i])
		}
	}
	for i := range d {
		if d[i] < humpDip*math.Min(left[i], right[i]) {
			if p := m.cdf(lo + float64(i)*step); p > humpShare && p < 1-humpShare {
				return true
			}
		}
	}
	return false
}
