package numeric

import (
	"errors"
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro/check"
)

func TestQuantiles(t *testing.T) {
	// Hyndman & Fan's definition 7, by hand: h = (n-1) p.
	sample := []float64{9, 1, 3, 7, 5}
	got, err := Quantiles(sample, 0, 0.1, 0.25, 0.5, 0.9, 1)
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []float64{1, 1.8, 3, 5, 8.2, 9} {
		check.Near(t, got[i], want, 1e-14, "quantile %d", i)
	}
	if !slices.Equal(sample, []float64{9, 1, 3, 7, 5}) {
		t.Error("the sample was put in another order")
	}
	if one, err := Quantiles([]float64{4}, 0.3); err != nil || one[0] != 4 {
		t.Errorf("a sample of one: %v %v", one, err)
	}
	for name, c := range map[string]struct {
		sample []float64
		p      float64
		want   error
	}{
		"empty":      {nil, 0.5, ErrData},
		"p below 0":  {sample, -0.1, ErrData},
		"p above 1":  {sample, 1.1, ErrData},
		"p nowhere":  {sample, math.NaN(), ErrData},
		"not number": {[]float64{1, math.NaN()}, 0.5, ErrNotANumber},
	} {
		if v, err := Quantiles(c.sample, c.p); !errors.Is(err, c.want) || v != nil {
			t.Errorf("%s: %v %v, want %v", name, v, err, c.want)
		}
	}
}

// TestNormal: Abramowitz & Stegun 1964, table 26.1 and 26.5 to their digits;
// the further ones from erfc in 25-digit arithmetic.
func TestNormal(t *testing.T) {
	for _, c := range []struct{ x, p, tol float64 }{
		{0, 0.5, 1e-16},
		{1, 0.841344746068543, 1e-15},
		{-1, 0.158655253931457, 1e-15},
		{3, 0.998650101968370, 1e-15},
		{-1.959963984540054, 0.025, 1e-16},
		{-10, 7.619853024160526e-24, 1e-37},
	} {
		check.Near(t, NormalCDF(c.x), c.p, c.tol, "chance below %v sigma", c.x)
	}
	// table 26.1 again
	check.Near(t, NormalDensity(0), 0.398942280401433, 1e-15, "density at 0")
	check.Near(t, NormalDensity(-1), 0.241970724519143, 1e-15, "density at -1")
	for _, c := range []struct{ p, x float64 }{
		{0.5, 0}, {0.1, -1.2815515655446004}, {0.9, 1.2815515655446004}, {0.16, -0.9944578832097532},
		{0.025, -1.959963984540054}, {0.001, -3.0902323061678136},
		{1e-10, -6.361340902404056}, {1e-20, -9.262340089798408}, {1e-300, -37.0470962993612},
	} {
		check.Near(t, NormalQuantile(c.p), c.x, 1e-13*max(1, math.Abs(c.x)), "quantile of %v", c.p)
	}
	if !math.IsInf(NormalQuantile(0), -1) || !math.IsInf(NormalQuantile(1), 1) {
		t.Error("certainty lies at infinity")
	}
	for _, p := range []float64{-0.1, 1.1, math.NaN()} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("probability %v was taken", p)
				}
			}()
			NormalQuantile(p)
		}()
	}
}

// TestNormalProperty: the quantile undoes the distribution, down to the
// smallest doubles.
func TestNormalProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		x := rapid.Float64Range(-37, 8).Draw(rt, "x")
		p := NormalCDF(x)
		if p == 1 {
			return
		}
		// What half a unit in the last place of p is worth in x.
		density := math.Exp(-x*x/2) / math.Sqrt(2*math.Pi)
		tol := 1e-12 + 4*epsilon*p/density
		if got := NormalQuantile(p); math.Abs(got-x) > tol {
			rt.Fatalf("quantile of %v: %v, want %v within %v", p, got, x, tol)
		}
	})
}
