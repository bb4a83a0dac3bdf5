package numeric

import "math"

// Simpson integrates f from a to b over an even number of equal panels.
//
//	h/3 [f0 + 4 f1 + 2 f2 + ... + 4 f(n-1) + fn]
//
// Given:
//   - panels: rounded up to an even number, at least 2.
//
// Returns:
//   - the integral; b < a changes its sign.
//   - [ErrNotANumber] where f is not finite at a node, with not a number.
//
// Notes:
//  1. Exact for cubics; otherwise the error falls as the fourth power of h
//     while f has four derivatives.
//
// Source: [cite.AbramowitzStegun1964], 25.4.6.
//
// Checked: TestIntegrals, against testdata/astro/integrals.csv.
func Simpson(f func(float64) float64, a, b float64, panels int) (float64, error) {
	n := max(2, panels+panels%2)
	h := (b - a) / float64(n)
	sum := f(a) + f(b)
	for i := 1; i < n; i++ {
		w := 2.0
		if i%2 == 1 {
			w = 4
		}
		sum += w * f(a+float64(i)*h)
	}
	v := sum * h / 3
	if !finite(v) {
		return math.NaN(), ErrNotANumber
	}
	return v, nil
}

// gaussMost is the largest Gauss-Legendre rule on offer, gaussSteps the limit
// of Newton's method on one node, which takes 3 to 6.
const (
	gaussMost  = 256
	gaussSteps = 50
)

// Gauss is a Gauss-Legendre rule: nodes on -1 to 1 and their weights. It does
// not change once made and may be shared.
type Gauss struct{ node, weight []float64 }

// NewGauss makes the rule of n nodes; it integrates polynomials up to degree
// 2n-1 exactly.
//
//	nodes: the zeros of Pn; weights: 2 / [(1 - x²) Pn'(x)²]
//
// Given:
//   - n: 1 to 256; anything else is a caller's bug and panics.
//
// Source: [cite.AbramowitzStegun1964], 25.4.29; the zeros by Newton's method
// from the estimate of 22.16.6.
//
// Checked: TestGaussNodes, against table 25.4 there; TestIntegrals.
func NewGauss(n int) *Gauss {
	if n < 1 || n > gaussMost {
		panic("numeric: NewGauss wants 1 to 256 nodes")
	}
	g := &Gauss{make([]float64, n), make([]float64, n)}
	for i := range (n + 1) / 2 {
		x := math.Cos(math.Pi * (float64(i) + 0.75) / (float64(n) + 0.5))
		var slope float64
		for range gaussSteps {
			var p float64
			p, slope = legendre(n, x)
			dx := p / slope
			x -= dx
			if math.Abs(dx) < 1e-15 {
				break
			}
		}
		if 2*i+1 == n {
			x = 0
		}
		_, slope = legendre(n, x)
		w := 2 / ((1 - x*x) * slope * slope)
		g.node[i], g.node[n-1-i] = -x, x
		g.weight[i], g.weight[n-1-i] = w, w
	}
	return g
}

// legendre returns Pn(x) and its derivative, |x| < 1, by the three-term
// recurrence.
func legendre(n int, x float64) (p, slope float64) {
	before := 0.0
	p = 1
	for k := 1; k <= n; k++ {
		before, p = p, (float64(2*k-1)*x*p-float64(k-1)*before)/float64(k)
	}
	return p, float64(n) * (x*p - before) / (x*x - 1)
}

// Over integrates f from a to b.
//
// Returns:
//   - the integral; b < a changes its sign.
//   - [ErrNotANumber] where f is not finite at a node, with not a number. The
//     ends are no nodes, so f may be infinite there.
//
// Checked: TestIntegrals, against testdata/astro/integrals.csv.
func (g *Gauss) Over(f func(float64) float64, a, b float64) (float64, error) {
	mid, half := (a+b)/2, (b-a)/2
	sum := 0.0
	for i, x := range g.node {
		sum += g.weight[i] * f(mid+half*x)
	}
	if v := sum * half; finite(v) {
		return v, nil
	}
	return math.NaN(), ErrNotANumber
}
