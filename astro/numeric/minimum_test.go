package numeric

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro/check"
)

func TestMinimum(t *testing.T) {
	for _, c := range []struct {
		name         string
		f            func(float64) float64
		a, b         float64
		wantX, wantF float64 // closed forms
	}{
		{"parabola", func(x float64) float64 { return (x-1)*(x-1) + 3 }, -4, 5, 1, 3},
		{"ends swapped", func(x float64) float64 { return (x-1)*(x-1) + 3 }, 5, -4, 1, 3},
		{"x ln x", func(x float64) float64 { return x * math.Log(x) }, 0.01, 2, 1 / math.E, -1 / math.E},
		{"cosine", math.Cos, 2, 4, math.Pi, -1},
		{"a corner", func(x float64) float64 { return math.Abs(x - 0.3) }, -1, 1, 0.3, 0},
		{"at an end", func(x float64) float64 { return x }, 2, 3, 2, 2},
		{"at zero", func(x float64) float64 { return x * x }, -1, 1.5, 0, 0},
	} {
		calls := 0
		x, fx, err := Minimum(func(x float64) float64 { calls++; return c.f(x) }, c.a, c.b, 1e-8)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
		}
		check.Near(t, x, c.wantX, 5e-8, "%s: place", c.name)
		check.Near(t, fx, c.wantF, 5e-8, "%s: value", c.name)
		if calls > 100 {
			t.Errorf("%s: %d calls", c.name, calls)
		}
	}
}

func TestMinimumFailures(t *testing.T) {
	nan := math.NaN()
	line := func(x float64) float64 { return x }
	if x, _, err := Minimum(line, 1, 1, 1e-9); !errors.Is(err, ErrInterval) || !math.IsNaN(x) {
		t.Errorf("one point: %v %v", x, err)
	}
	if _, _, err := Minimum(line, math.Inf(-1), 1, 1e-9); !errors.Is(err, ErrInterval) {
		t.Errorf("no end: %v", err)
	}
	if x, _, err := Minimum(func(float64) float64 { return nan }, 0, 1, 1e-9); !errors.Is(err, ErrNotANumber) || !math.IsNaN(x) {
		t.Errorf("undefined: %v %v", x, err)
	}
	if _, _, err := Minimum(func(x float64) float64 { return math.Log(x - 0.5) }, 0, 2, 1e-9); !errors.Is(err, ErrNotANumber) {
		t.Errorf("undefined within: %v", err)
	}
}

// TestMinimumProperty holds the method against a fine grid on curves with one
// minimum.
func TestMinimumProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		x0 := rapid.Float64Range(-0.9, 0.9).Draw(rt, "x0")
		left := rapid.Float64Range(0.1, 5).Draw(rt, "left")
		right := rapid.Float64Range(0.1, 5).Draw(rt, "right")
		f := func(x float64) float64 {
			if x < x0 {
				return left * (x - x0) * (x - x0)
			}
			return right * math.Abs(x-x0)
		}
		x, _, err := Minimum(f, -1, 1, 1e-7)
		if err != nil {
			rt.Fatal(err)
		}
		best := -1.0
		for i := range 2001 {
			if g := -1 + float64(i)*1e-3; f(g) < f(best) {
				best = g
			}
		}
		if math.Abs(x-best) > 1.1e-3 {
			rt.Fatalf("got %v, grid %v", x, best)
		}
	})
}

func TestVertex(t *testing.T) {
	// y = 3 - 2 (x - 1.5)^2, worked by hand.
	p, err := Vertex(Point{0, -1.5}, Point{1, 2.5}, Point{3, -1.5})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, p.X, 1.5, 1e-15, "vertex, x")
	check.Near(t, p.Y, 3, 1e-15, "vertex, y")
	for name, c := range map[string]struct {
		p    [3]Point
		want error
	}{
		"on a line":    {[3]Point{{0, 0}, {1, 1}, {2, 2}}, ErrStraight},
		"level":        {[3]Point{{0, 4}, {1, 4}, {2, 4}}, ErrStraight},
		"two at one x": {[3]Point{{0, 0}, {0, 1}, {2, 2}}, ErrStraight},
		"no number":    {[3]Point{{0, 0}, {1, math.NaN()}, {2, 2}}, ErrNotANumber},
	} {
		if p, err := Vertex(c.p[0], c.p[1], c.p[2]); !errors.Is(err, c.want) || !math.IsNaN(p.X) {
			t.Errorf("%s: %v, %v; want %v", name, p, err, c.want)
		}
	}
}

// TestVertexProperty: the vertex of a parabola is found from any three points
// of it, in any order.
func TestVertexProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		x0 := rapid.Float64Range(-10, 10).Draw(rt, "x0")
		y0 := rapid.Float64Range(-10, 10).Draw(rt, "y0")
		k := rapid.Float64Range(0.5, 4).Draw(rt, "k")
		at := func(x float64) Point { return Point{x, y0 + k*(x-x0)*(x-x0)} }
		xs := rapid.Permutation([]float64{-1, 0.5, 3}).Draw(rt, "order")
		p, err := Vertex(at(xs[0]), at(xs[1]), at(xs[2]))
		if err != nil {
			rt.Fatal(err)
		}
		if math.Abs(p.X-x0) > 1e-11 || math.Abs(p.Y-y0) > 1e-10 {
			rt.Fatalf("vertex %v, want %v %v", p, x0, y0)
		}
	})
}
