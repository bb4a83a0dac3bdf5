package numeric

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro/check"
)

func TestRoot(t *testing.T) {
	for _, c := range []struct {
		name string
		f    func(float64) float64
		a, b float64
		want float64 // closed form
	}{
		{"sqrt 2", func(x float64) float64 { return x*x - 2 }, 0, 2, math.Sqrt2},
		{"ends swapped", func(x float64) float64 { return x*x - 2 }, 2, 0, math.Sqrt2},
		{"cos x = x, the Dottie number", func(x float64) float64 { return math.Cos(x) - x }, 0, 1, 0.7390851332151607},
		{"ln x", math.Log, 0.1, 9, 1},
		{"ninth power, flat", func(x float64) float64 { return math.Pow(x-1, 9) }, 0, 2.5, 1},
		{"at the first end", func(x float64) float64 { return x - 3 }, 3, 4, 3},
		{"at the second end", func(x float64) float64 { return x - 4 }, 3, 4, 4},
		{"jump", func(x float64) float64 { return math.Copysign(1, x-0.3) }, 0, 1, 0.3},
		{"pole at one end", func(x float64) float64 { return 1/x - 2 }, 0, 3, 0.5},
		{"steep", func(x float64) float64 { return math.Expm1(50 * (x - 0.2)) }, -1, 1, 0.2},
	} {
		calls := 0
		got, err := Root(func(x float64) float64 { calls++; return c.f(x) }, c.a, c.b, 1e-13)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
		}
		check.Near(t, got, c.want, 1e-12, "%s", c.name)
		if calls > 150 {
			t.Errorf("%s: %d calls", c.name, calls)
		}
	}
}

func TestRootFailures(t *testing.T) {
	line := func(x float64) float64 { return x }
	nan := math.NaN()
	for _, c := range []struct {
		name string
		f    func(float64) float64
		a, b float64
		want error
	}{
		{"no change of sign", func(x float64) float64 { return x*x + 1 }, -1, 1, ErrNoBracket},
		{"one point", line, 1, 1, ErrInterval},
		{"no end", line, -1, math.Inf(1), ErrInterval},
		{"not a number", line, nan, 1, ErrInterval},
		{"undefined at an end", func(x float64) float64 { return math.Log(x) }, -1, 2, ErrNotANumber},
		{"undefined within", func(x float64) float64 {
			if math.Abs(x) < 0.5 {
				return nan
			}
			return x
		}, -1, 2, ErrNotANumber},
	} {
		x, err := Root(c.f, c.a, c.b, 1e-9)
		if !errors.Is(err, c.want) || !math.IsNaN(x) {
			t.Errorf("%s: %v, %v; want not a number, %v", c.name, x, err, c.want)
		}
	}
	if _, err := Root(line, -1, 2, nan); err != nil {
		t.Errorf("a tolerance that is no number counts as 0: %v", err)
	}
}

// TestRootProperty holds the method against plain bisection on cubics that rise.
func TestRootProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		c3 := rapid.Float64Range(0, 5).Draw(rt, "c3")
		c1 := rapid.Float64Range(0.01, 5).Draw(rt, "c1")
		x0 := rapid.Float64Range(-9, 9).Draw(rt, "x0")
		f := func(x float64) float64 { d := x - x0; return c3*d*d*d + c1*d }
		got, err := Root(f, -10, 10, 1e-10)
		if err != nil {
			rt.Fatal(err)
		}
		a, b := -10.0, 10.0
		for range 60 {
			if m := (a + b) / 2; f(m) < 0 {
				a = m
			} else {
				b = m
			}
		}
		if math.Abs(got-a) > 1e-10+1e-14 {
			rt.Fatalf("got %v, bisection %v", got, a)
		}
	})
}

func BenchmarkRoot(b *testing.B) {
	f := func(x float64) float64 { return math.Cos(x) - x }
	for b.Loop() {
		if _, err := Root(f, 0, 1, 1e-12); err != nil {
			b.Fatal(err)
		}
	}
}

func FuzzRoot(f *testing.F) {
	f.Add(0.0, 1.0, 0.5, 1e-9)
	f.Add(-1e308, 1e308, 0.0, 0.0)
	f.Add(1.0, 1.0, 1.0, -1.0)
	f.Fuzz(func(t *testing.T, a, b, x0, tol float64) {
		x, err := Root(func(x float64) float64 { return x - x0 }, a, b, tol)
		if (err == nil || errors.Is(err, ErrLimit)) == math.IsNaN(x) {
			t.Fatalf("x %v with error %v", x, err)
		}
		if err == nil && (x < min(a, b) || x > max(a, b)) {
			t.Fatalf("x %v lies outside %v..%v", x, a, b)
		}
	})
}
