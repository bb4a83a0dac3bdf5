package air

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/meeusfence"
)

// formulas are the functions of testdata/astro/airmass.csv by altitude.
var formulas = map[string]func(astro.Angle) (astro.Airmass, error){
	"mass":      Mass,
	"raytrace":  Mass,
	"young":     MassYoung,
	"pickering": MassPickering,
	"plane":     PlaneParallel,
	"thin":      ThinLayer,
	"vanrhijn":  VanRhijn,
	"young_apparent": func(apparent astro.Angle) (astro.Airmass, error) {
		return MassYoung(apparent.Minus(meeusfence.BennettRefined(apparent)))
	},
	"plane_excess": func(apparent astro.Angle) (astro.Airmass, error) {
		x, err := PlaneParallel(apparent)
		return x - 1.9939, err // the ray trace of the same table
	},
}

func TestAirmass(t *testing.T) {
	seen := map[string]bool{}
	for _, row := range check.Table(t, "testdata/astro/airmass.csv").Rows() {
		name := row.String("formula")
		f := formulas[name]
		if f == nil {
			t.Fatalf("%s: no formula %q", row.Where(), name)
		}
		seen[name] = true
		x, err := f(astro.Deg(90 - row.Float("z")))
		if err != nil {
			t.Errorf("%s: %v", row.Where(), err)
		}
		check.Near(t, float64(x), row.Float("x"), row.Float("tol"), "%s: %s at z = %v", row.Where(), name, row.String("z"))
	}
	for name := range formulas {
		if !seen[name] {
			t.Errorf("%s is not in the table", name)
		}
	}
}

// TestMistakenAltitude: what a true altitude in place of an apparent one costs,
// by the notes of Mass: 2.7 per cent at 5 degrees.
func TestMistakenAltitude(t *testing.T) {
	w := astro.Weather{PressureHPa: 1013.25, TemperatureC: 10, Colour: astro.Micron(0.55)}
	right, err := Mass(Refract(astro.Deg(5), w))
	if err != nil {
		t.Fatal(err)
	}
	wrong, err := Mass(astro.Deg(5))
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, float64(wrong/right-1), 0.027, 0.001, "relative error at 5 degrees")
}

func TestBelowHorizon(t *testing.T) {
	below := map[string]float64{"mass": -1e-9, "pickering": -1e-9, "thin": -1e-9, "vanrhijn": -1e-9, "plane": 0, "young": -0.61}
	for name, hDeg := range below {
		for _, h := range []float64{hDeg, -5, -90} {
			x, err := formulas[name](astro.Deg(h))
			if !errors.Is(err, ErrBelowHorizon) || !math.IsNaN(float64(x)) {
				t.Errorf("%s at %v: %v, %v; want not a number, below the horizon", name, h, x, err)
			}
		}
		if x, err := formulas[name](astro.Deg(math.NaN())); !errors.Is(err, ErrNotANumber) || !math.IsNaN(float64(x)) {
			t.Errorf("%s nowhere: %v, %v", name, x, err)
		}
	}
}

// TestAirmassProperty: from 0 to 90 degrees each is a number, at least 1, and
// does not rise with altitude.
func TestAirmassProperty(t *testing.T) {
	for _, name := range []string{"mass", "young", "pickering", "thin", "vanrhijn", "plane"} {
		f := formulas[name]
		rapid.Check(t, func(rt *rapid.T) {
			a := rapid.Float64Range(1e-6, 90).Draw(rt, "a")
			b := rapid.Float64Range(1e-6, 90).Draw(rt, "b")
			low, err := f(astro.Deg(min(a, b)))
			if err != nil {
				rt.Fatal(err)
			}
			high, err := f(astro.Deg(max(a, b)))
			if err != nil {
				rt.Fatal(err)
			}
			if !(high >= 1 && low >= high*(1-1e-15)) {
				rt.Fatalf("%s: %v at %v, %v at %v deg", name, low, min(a, b), high, max(a, b))
			}
		})
	}
}

func BenchmarkMass(b *testing.B) {
	h := astro.Deg(41.3)
	for b.Loop() {
		if _, err := Mass(h); err != nil {
			b.Fatal(err)
		}
	}
}
