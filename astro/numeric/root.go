package numeric

import "math"

// rootSteps limits Root. Bisection alone takes 1075 steps across all doubles
// and some 50 across an interval of interest; the method needs 5 to 15.
const rootSteps = 300

// Root returns where f passes through zero between a and b.
//
// Given:
//   - f: continuous between a and b; a jump across zero is found as if it were
//     a root.
//   - a, b: two ends, in either order, where f has opposite signs, or is zero.
//   - tol: how far the answer may lie from the root, in the units of a; the
//     spacing of doubles there is added. 0 asks for all that doubles give.
//
// Returns:
//   - x between a and b.
//   - [ErrNoBracket], [ErrInterval], [ErrNotANumber] with x not a number;
//     [ErrLimit] with the best x after 300 steps.
//
// Notes:
//  1. Of several roots between the ends one is found, always the same.
//
// Source: [cite.Brent1973], chapter 4: inverse quadratic interpolation, secant
// and bisection. The book was not at hand; the algorithm is as commonly printed.
//
// Checked: TestRoot, to 1e-12; TestRootProperty, against bisection.
func Root(f func(float64) float64, a, b, tol float64) (float64, error) {
	if !finite(a, b, b-a) || a == b {
		return math.NaN(), ErrInterval
	}
	fa, fb := f(a), f(b)
	switch {
	case math.IsNaN(fa) || math.IsNaN(fb):
		return math.NaN(), ErrNotANumber
	case fa == 0:
		return a, nil
	case fb == 0:
		return b, nil
	case (fa > 0) == (fb > 0):
		return math.NaN(), ErrNoBracket
	}
	tol = notNegative(tol)
	c, fc, d, e := a, fa, b-a, b-a
	for range rootSteps {
		if (fb > 0) == (fc > 0) {
			c, fc, d, e = a, fa, b-a, b-a
		}
		if math.Abs(fc) < math.Abs(fb) {
			a, b, c = b, c, b
			fa, fb, fc = fb, fc, fb
		}
		near := 2*epsilon*math.Abs(b) + tol/2
		half := (c - b) / 2
		if math.Abs(half) <= near || fb == 0 {
			return b, nil
		}
		step, ok := rootStep(rootPoints{a, b, c, fa, fb, fc}, e, near)
		if ok {
			e, d = d, step
		} else {
			d, e = half, half
		}
		a, fa = b, fb
		if math.Abs(d) > near {
			b += d
		} else {
			b += math.Copysign(near, half)
		}
		if fb = f(b); math.IsNaN(fb) {
			return math.NaN(), ErrNotANumber
		}
	}
	return b, ErrLimit
}

// rootPoints is the last guess a, the best guess b, the other side c, and f there.
type rootPoints struct{ a, b, c, fa, fb, fc float64 }

// rootStep proposes a step from b by interpolation, and tells whether it may
// be trusted: well inside the bracket, and less than half the step before last.
func rootStep(g rootPoints, before, near float64) (float64, bool) {
	if math.Abs(before) < near || math.Abs(g.fa) <= math.Abs(g.fb) {
		return 0, false
	}
	half := (g.c - g.b) / 2
	s := g.fb / g.fa
	var p, q float64
	if g.a == g.c {
		p, q = 2*half*s, 1-s
	} else {
		r, u := g.fb/g.fc, g.fa/g.fc
		p = s * (2*half*u*(u-r) - (g.b-g.a)*(r-1))
		q = (u - 1) * (r - 1) * (s - 1)
	}
	if p > 0 {
		q = -q
	} else {
		p = -p
	}
	if 2*p < min(3*half*q-math.Abs(near*q), math.Abs(before*q)) {
		return p / q, true
	}
	return 0, false
}
