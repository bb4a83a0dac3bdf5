package numeric

import "math"

const (
	// minimumSteps limits Minimum; golden section alone takes 77 from any
	// interval to the spacing of doubles.
	minimumSteps = 300
	// golden is the part of an interval that golden section gives up, (3-√5)/2.
	golden = 0.38196601125010515
)

// Minimum returns where f is least between a and b, and how small it is there.
//
// Given:
//   - f: with one minimum between a and b; of several a local one is found.
//   - a, b: two ends in either order; the minimum may lie at an end.
//   - tol: closeness in the units of a. Below about 1e-8 of the size of x it
//     gains nothing, since f is flat there, and that much is added.
//
// Returns:
//   - x and f(x).
//   - [ErrInterval], [ErrNotANumber] with x not a number; [ErrLimit] with the
//     best so far after 300 steps.
//
// Notes:
//  1. For a maximum pass -f.
//  2. The answer keeps off the ends by up to tol; ask f there where it matters.
//
// Source: [cite.Brent1973], chapter 5: golden section and parabolas. The book
// was not at hand; the algorithm is as commonly printed.
//
// Checked: TestMinimum; TestMinimumProperty, against a grid.
func Minimum(f func(float64) float64, a, b, tol float64) (x, fx float64, err error) {
	if !finite(a, b, b-a) || a == b {
		return math.NaN(), math.NaN(), ErrInterval
	}
	if a > b {
		a, b = b, a
	}
	tol = notNegative(tol)
	x = a + golden*(b-a)
	fx = f(x)
	if math.IsNaN(fx) {
		return math.NaN(), fx, ErrNotANumber
	}
	g := minimumPoints{a: a, b: b, x: x, w: x, v: x, fx: fx, fw: fx, fv: fx}
	var d, e float64
	for range minimumSteps {
		mid := (g.a + g.b) / 2
		near := 1e-8*math.Abs(g.x) + tol/3 + math.SmallestNonzeroFloat64
		if math.Abs(g.x-mid) <= 2*near-(g.b-g.a)/2 {
			return g.x, g.fx, nil
		}
		step, ok := minimumStep(g, e, near)
		if ok && g.x+step > g.a && g.x+step < g.b {
			e, d = d, step
			if u := g.x + d; u-g.a < 2*near || g.b-u < 2*near {
				d = math.Copysign(near, mid-g.x)
			}
		} else {
			e = g.b - g.x
			if g.x >= mid {
				e = g.a - g.x
			}
			d = golden * e
		}
		u := g.x + d
		if math.Abs(d) < near {
			u = g.x + math.Copysign(near, d)
		}
		fu := f(u)
		if math.IsNaN(fu) {
			return math.NaN(), fu, ErrNotANumber
		}
		g.add(u, fu)
	}
	return g.x, g.fx, ErrLimit
}

// minimumPoints is the bracket, the best, the second best and the third guess,
// and f at the guesses.
type minimumPoints struct{ a, b, x, w, v, fx, fw, fv float64 }

// add takes a new guess in, and narrows the bracket.
func (g *minimumPoints) add(u, fu float64) {
	if fu <= g.fx {
		if u >= g.x {
			g.a = g.x
		} else {
			g.b = g.x
		}
		g.v, g.fv, g.w, g.fw, g.x, g.fx = g.w, g.fw, g.x, g.fx, u, fu
		return
	}
	if u < g.x {
		g.a = u
	} else {
		g.b = u
	}
	if fu <= g.fw || g.w == g.x {
		g.v, g.fv, g.w, g.fw = g.w, g.fw, u, fu
	} else if fu <= g.fv || g.v == g.x || g.v == g.w {
		g.v, g.fv = u, fu
	}
}

// minimumStep proposes the step from x to the vertex through three points, and
// tells whether it is less than half the step before last.
func minimumStep(g minimumPoints, before, near float64) (float64, bool) {
	if math.Abs(before) <= near {
		return 0, false
	}
	r := (g.x - g.w) * (g.fx - g.fv)
	q := (g.x - g.v) * (g.fx - g.fw)
	p := (g.x-g.v)*q - (g.x-g.w)*r
	q = 2 * (q - r)
	if q > 0 {
		p = -p
	}
	q = math.Abs(q)
	if math.Abs(p) < math.Abs(q*before/2) {
		return p / q, true
	}
	return 0, false
}

// Point is a point of a curve.
type Point struct{ X, Y float64 }

// Vertex returns the top or bottom of the parabola through three points.
//
// Returns:
//   - the vertex; it may lie outside the three.
//   - [ErrStraight] for points on a line or two at one X, [ErrNotANumber].
//
// Source: Newton's divided differences.
//
// Checked: TestVertex.
func Vertex(a, b, c Point) (Point, error) {
	if !finite(a.X, a.Y, b.X, b.Y, c.X, c.Y) {
		return Point{math.NaN(), math.NaN()}, ErrNotANumber
	}
	ab := (b.Y - a.Y) / (b.X - a.X)
	bc := (c.Y - b.Y) / (c.X - b.X)
	bend := (bc - ab) / (c.X - a.X)
	size := math.Abs(ab) + math.Abs(bc)
	if !finite(bend) || math.Abs(bc-ab) <= 4*epsilon*size {
		return Point{math.NaN(), math.NaN()}, ErrStraight
	}
	// Y = b.Y + s (X - b.X) + bend (X - b.X)^2, s the slope at b.
	s := ab + bend*(b.X-a.X)
	dx := -s / (2 * bend)
	return Point{b.X + dx, b.Y + s*dx/2}, nil
}
