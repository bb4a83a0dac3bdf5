package numeric

import (
	"math"
	"sort"
)

// Curve is a function given at points and read between them. It is never
// extrapolated. A curve does not change once made and may be shared.
type Curve struct {
	x, y  []float64
	slope []float64 // at each point; nil: straight lines
}

// Linear makes a curve of straight lines through points.
//
// Returns:
//   - [ErrData] unless there are two points or more, as many ordinates as
//     abscissae, and the abscissae increase; [ErrNotANumber].
func Linear(x, y []float64) (*Curve, error) {
	if len(x) != len(y) || len(x) < 2 {
		return nil, ErrData
	}
	if !finite(x...) || !finite(y...) {
		return nil, ErrNotANumber
	}
	for i := 1; i < len(x); i++ {
		if x[i] <= x[i-1] {
			return nil, ErrData
		}
	}
	return &Curve{x: append([]float64(nil), x...), y: append([]float64(nil), y...)}, nil
}

// Monotone makes a smooth curve through points: a cubic in each stretch that
// rises where the points rise, falls where they fall, and never overshoots.
//
// Returns:
//   - errors as for [Linear].
//
// Notes:
//  1. At the ends the slope is that of the outermost stretch.
//
// Source: [cite.FritschCarlson1980], with the slopes of their section 4 kept
// inside the circle of radius 3. The paper was not at hand.
//
// Checked: TestMonotone; TestMonotoneProperty.
func Monotone(x, y []float64) (*Curve, error) {
	c, err := Linear(x, y)
	if err != nil {
		return nil, err
	}
	n := len(x)
	secant := make([]float64, n-1)
	for i := range secant {
		secant[i] = (y[i+1] - y[i]) / (x[i+1] - x[i])
	}
	m := make([]float64, n)
	m[0], m[n-1] = secant[0], secant[n-2]
	for i := 1; i < n-1; i++ {
		if secant[i-1]*secant[i] > 0 {
			m[i] = (secant[i-1] + secant[i]) / 2
		}
	}
	for i, s := range secant {
		if s == 0 {
			m[i], m[i+1] = 0, 0
			continue
		}
		a, b := m[i]/s, m[i+1]/s
		if r := math.Hypot(a, b); r > 3 {
			m[i], m[i+1] = 3*a/r*s, 3*b/r*s
		}
	}
	c.slope = m
	return c, nil
}

// Range returns the first and the last abscissa.
func (c *Curve) Range() (lo, hi float64) { return c.x[0], c.x[len(c.x)-1] }

// At returns the curve's value at x.
//
// Returns:
//   - the value and true between the ends, ends included.
//   - the value of the nearer end and false outside; not a number and false
//     where x is not a number.
func (c *Curve) At(x float64) (float64, bool) {
	n := len(c.x)
	switch {
	case math.IsNaN(x):
		return x, false
	case x < c.x[0]:
		return c.y[0], false
	case x > c.x[n-1]:
		return c.y[n-1], false
	}
	i := sort.SearchFloat64s(c.x, x) // the first point at x or beyond
	if c.x[i] == x {
		return c.y[i], true
	}
	i--
	h := c.x[i+1] - c.x[i]
	t := (x - c.x[i]) / h
	if c.slope == nil {
		return c.y[i] + t*(c.y[i+1]-c.y[i]), true
	}
	u := 1 - t
	return u*u*(1+2*t)*c.y[i] + t*t*(3-2*t)*c.y[i+1] +
		h*t*u*(u*c.slope[i]-t*c.slope[i+1]), true
}
