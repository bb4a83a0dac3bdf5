package tracks

import (
	"errors"
	"math"
	"testing"

	"evenfall/astro/check"
)

func formulas(t testing.TB, z float64) *Formulas {
	t.Helper()
	f, err := NewFormulas(z)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func near(t *testing.T, got, want, rel float64, what string, args ...any) {
	t.Helper()
	check.Near(t, got, want, rel*math.Abs(want), what, args...)
}

// The table was computed alongside by a separate implementation of the same
// formulas: it checks transcription, not physics.
func TestReference(t *testing.T) {
	for _, r := range check.Table(t, "testdata/stage/formulas.csv").Rows() {
		z, m := r.Float("z"), r.Float("m")
		f := formulas(t, z)
		l0, r0 := f.ZAMS(m)
		tms := f.MainSequenceTime(m)
		lMid, rMid, err := f.MainSequence(m, tms/2)
		if err != nil {
			t.Fatal(err)
		}
		lEnd, rEnd, err := f.MainSequence(m, tms)
		if err != nil {
			t.Fatal(err)
		}
		lI, lA, core := f.ignition(m), f.baseAGB(m), f.ignitionCore(m)
		for name, got := range map[string]float64{
			"l_zams": l0, "r_zams": r0, "t_bgb": f.GiantBaseTime(m), "t_ms": tms, "l_mid": lMid, "r_mid": rMid,
			"l_tms": lEnd, "r_tms": rEnd, "l_bgb": f.baseGiant(m), "l_hei": lI, "mc_hei": core,
			"r_gb_at_lhei": f.giantRadius(m, lI), "t_he": f.heliumTime(m, core), "l_bagb": lA,
			"mc_bagb": f.baseAGBCore(m), "r_agb_at_lbagb": f.agbRadius(m, lA),
		} {
			near(t, got, r.Float(name), 1e-4, "%s of %g Msun at Z %g", name, m, z)
		}
	}
}

// Regression numbers that the formulas' authors ship with their own program,
// Hurley et al., for Z = 0.02.
func TestAuthorsProgram(t *testing.T) {
	f := formulas(t, 0.02)
	for m, want := range map[float64]float64{1: 0.8882494502, 2: 1.610210385, 3: 1.979134445} {
		_, r := f.ZAMS(m)
		near(t, r, want, 1e-9, "radius of %g Msun at age zero", m)
	}
	l, _ := f.ZAMS(1)
	near(t, l, 0.69771657, 1e-8, "luminosity of 1 Msun at age zero")
	near(t, f.MainSequenceTime(1), 11003.13, 1e-6, "main sequence of 1 Msun")
}

// Values of the formulas at solar metallicity as given with them.
func TestDivides(t *testing.T) {
	f := formulas(t, 0.02)
	hook, flash, giant := f.Divides()
	near(t, hook, 1.0185, 1e-9, "hook mass")
	near(t, flash, 1.995, 1e-9, "flash mass")
	near(t, giant, 13.048/1.0012, 1e-9, "giant mass")
	near(t, f.GiantBaseTime(1), 11582.24, 1e-6, "base of the giant branch of 1 Msun")
}

// Spot coefficients typed from Hurley, Pols & Tout 2000, appendix A, and Tout
// et al. 1996: at Z = 0.02 the polynomials are their first terms.
func TestCoefficients(t *testing.T) {
	f := formulas(t, 0.02)
	near(t, f.a[1], 1593.890, 1e-6, "a1")
	near(t, f.a[6], 19.49814, 1e-6, "a6")
	near(t, f.b[1], 0.397, 1e-9, "b1")
	near(t, f.b[9], 2751.631, 1e-9, "b9")
	near(t, f.lum[0], 0.3970417, 1e-9, "alpha")
	near(t, f.rad[0], 1.715359, 1e-9, "theta")
	for i, v := range f.lum {
		if v == 0 {
			t.Errorf("luminosity coefficient %d is missing", i)
		}
	}
	for i, v := range f.rad {
		if v == 0 {
			t.Errorf("radius coefficient %d is missing", i)
		}
	}
}

// The Sun today, Z = 0.02: the fit is 4 per cent faint.
func TestSun(t *testing.T) {
	l, r, err := formulas(t, 0.02).MainSequence(1, 4570)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, l, 0.956, 0.001, "luminosity")
	check.Near(t, r, 0.985, 0.001, "radius")
	check.Near(t, pow10(logTeff(math.Log10(l), math.Log10(r))), 5752, 2, "temperature")
}

func TestRefusals(t *testing.T) {
	for _, z := range []float64{0, -1, 0.04, math.NaN(), math.Inf(1)} {
		if _, err := NewFormulas(z); !errors.Is(err, ErrMetallicity) {
			t.Errorf("Z %g: %v", z, err)
		}
	}
	f := formulas(t, 0.02)
	for _, m := range []float64{0, -1, 0.05, 51, math.NaN(), math.Inf(1)} {
		if _, _, err := f.MainSequence(m, 1); !errors.Is(err, ErrMass) {
			t.Errorf("mass %g: %v", m, err)
		}
	}
}
