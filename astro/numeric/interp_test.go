package numeric

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro/check"
)

func TestLinear(t *testing.T) {
	c, err := Linear([]float64{0, 1, 3}, []float64{10, 20, 0})
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range []struct {
		x, want float64
		inside  bool
	}{
		{0, 10, true}, {0.25, 12.5, true}, {1, 20, true}, {2.5, 5, true}, {3, 0, true},
		{-0.1, 10, false}, {3.1, 0, false}, {math.Inf(1), 0, false},
	} {
		got, inside := c.At(p.x)
		check.Near(t, got, p.want, 1e-14, "line at %v", p.x)
		if inside != p.inside {
			t.Errorf("at %v: inside %v", p.x, inside)
		}
	}
	if v, inside := c.At(math.NaN()); !math.IsNaN(v) || inside {
		t.Errorf("at no number: %v %v", v, inside)
	}
	if lo, hi := c.Range(); lo != 0 || hi != 3 {
		t.Errorf("range %v to %v", lo, hi)
	}
}

func TestCurveFailures(t *testing.T) {
	for name, c := range map[string]struct {
		x, y []float64
		want error
	}{
		"one point":  {[]float64{1}, []float64{1}, ErrData},
		"lengths":    {[]float64{1, 2}, []float64{1}, ErrData},
		"not rising": {[]float64{1, 1}, []float64{1, 2}, ErrData},
		"no number":  {[]float64{1, 2}, []float64{1, math.NaN()}, ErrNotANumber},
		"infinite":   {[]float64{1, math.Inf(1)}, []float64{1, 2}, ErrNotANumber},
	} {
		if curve, err := Monotone(c.x, c.y); !errors.Is(err, c.want) || curve != nil {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
}

func TestMonotone(t *testing.T) {
	// By hand: squares at 0..3 have slopes 1, 2, 4, 5 at the points, all inside
	// the circle; a cubic with the right slopes at both ends is the parabola.
	c, err := Monotone([]float64{0, 1, 2, 3}, []float64{0, 1, 4, 9})
	if err != nil {
		t.Fatal(err)
	}
	got, _ := c.At(1.5)
	check.Near(t, got, 2.25, 1e-15, "between squares")
	// A step: level, up, level. The slopes at the corners are 0, so the middle
	// is the smooth step 3t²-2t³.
	c, err = Monotone([]float64{0, 1, 2, 3}, []float64{0, 0, 1, 1})
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range []struct{ x, want float64 }{{0.5, 0}, {1.25, 0.15625}, {1.5, 0.5}, {2.7, 1}} {
		got, _ := c.At(p.x)
		check.Near(t, got, p.want, 1e-15, "step at %v", p.x)
	}
	// Fritsch & Carlson's own example (RPN 14, from memory): an unlimited spline
	// overshoots 1 there.
	x := []float64{7.99, 8.09, 8.19, 8.7, 9.2, 10, 12, 15, 20}
	y := []float64{0, 2.76429e-5, 4.37498e-2, 0.169183, 0.469428, 0.943740, 0.998636, 0.999919, 0.999994}
	if c, err = Monotone(x, y); err != nil {
		t.Fatal(err)
	}
	before := -1.0
	for i := range 1202 {
		v, _ := c.At(7.99 + float64(i)/100)
		if v < before || v < 0 || v > 0.999994 {
			t.Fatalf("falls to %v at step %d", v, i)
		}
		before = v
	}
}

// TestMonotoneProperty: through every point, never past the neighbours, and
// monotone wherever the points are.
func TestMonotoneProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		n := rapid.IntRange(2, 9).Draw(rt, "n")
		x, y := make([]float64, n), make([]float64, n)
		for i := range n {
			x[i] = rapid.Float64Range(0.01, 3).Draw(rt, "dx")
			if i > 0 {
				x[i] += x[i-1]
			}
			y[i] = rapid.Float64Range(-5, 5).Draw(rt, "y")
		}
		c, err := Monotone(x, y)
		if err != nil {
			rt.Fatal(err)
		}
		for i := 1; i < n; i++ {
			sign := math.Copysign(1, y[i]-y[i-1])
			before := y[i-1]
			for k := range 51 {
				v, inside := c.At(min(x[i-1]+(x[i]-x[i-1])*float64(k)/50, x[i]))
				if !inside || sign*(v-before) < -1e-12 {
					rt.Fatalf("stretch %d turns back from %v to %v", i, before, v)
				}
				before = v
			}
			if math.Abs(before-y[i]) > 1e-12 {
				rt.Fatalf("point %d: %v, want %v", i, before, y[i])
			}
		}
	})
}
