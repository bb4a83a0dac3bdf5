package degenerate

import (
	"math"
	"strings"
	"testing"

	"evenfall/astro/check"
	"evenfall/astro/numeric"
)

// Rows of the distributed tables of Bedard et al. 2020 at 0.6 solar masses, one
// of them between the temperatures that the program carries.
func TestTables(t *testing.T) {
	m := models()
	for _, c := range []struct {
		c                                          Composition
		teff, logG, mbol, mv, mg, colour, age, tol float64
	}{
		{Hydrogen, 5000, 8.033, 14.914, 15.163, 14.898, 1.091, 6.39e9, 0.0006},
		{Hydrogen, 6000, 8.020, 14.091, 14.201, 14.039, 0.744, 2.418e9, 0.0006},
		{Hydrogen, 7500, 8.011, 13.100, 13.270, 13.183, 0.429, 1.334e9, 0.003},
		{Hydrogen, 10000, 8.000, 11.821, 12.170, 12.173, 0.134, 6.328e8, 0.0006},
		{Hydrogen, 20000, 7.957, 8.704, 10.699, 10.722, -0.281, 5.866e7, 0.0006},
	} {
		v, err := m.At(c.teff, 0.6, c.c)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, v.LogG, c.logG, c.tol, "log g, %g K", c.teff)
		check.Near(t, v.MbolMag, c.mbol, c.tol, "Mbol, %g K", c.teff)
		check.Near(t, v.MVMag, c.mv, c.tol, "M_V, %g K", c.teff)
		check.Near(t, v.MGMag, c.mg, c.tol, "M_G, %g K", c.teff)
		check.Near(t, v.BPRPMag, c.colour, c.tol, "BP-RP, %g K", c.teff)
		check.Near(t, v.CoolingAgeYr/c.age, 1, 2*c.tol, "age, %g K", c.teff)
	}
	for _, c := range []struct{ teff, mg, age float64 }{{10000, 12.308, 6.87e8}, {20000, 10.650, 6.65e7}} {
		v, err := m.At(c.teff, 0.6, Helium)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, v.MGMag, c.mg, 0.0006, "helium M_G, %g K", c.teff)
		check.Near(t, v.CoolingAgeYr/c.age, 1, 0.001, "helium age, %g K", c.teff)
	}
	// Radii at 0.6 solar masses over that of the exact cold star, printed from
	// gravities rounded to 0.001, so good to 0.0012 more than their digits.
	for _, c := range []struct{ teff, logG, factor, tol float64 }{
		{6000, 8.020, 0.985, 0.0017}, {10000, 8.000, 1.008, 0.0017}, {20000, 7.957, 1.06, 0.005}, {50000, 7.814, 1.25, 0.005}, {100000, 7.373, 2.07, 0.01}} {
		v, err := m.At(c.teff, 0.6, Hydrogen)
		if err != nil {
			t.Fatal(err)
		}
		cold, err := ColdOfMass(0.6, 2)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, v.LogG, c.logG, 0.0006, "log g, %g K", c.teff)
		check.Near(t, v.RadiusRsun/cold.RadiusRsun, c.factor, c.tol, "swollen by, %g K", c.teff)
		// Stefan's law ties radius, temperature and luminosity.
		check.Near(t, v.LumLsun/math.Pow(10, 0.4*(tableSunMbol-v.MbolMag)), 1, 0.002, "L over that of Mbol, %g K", c.teff)
	}
	for _, bad := range [][2]float64{{2999, 0.6}, {1e5 + 1, 0.6}, {1e4, 0.19}, {1e4, 1.31}, {5e4, 0.2}} {
		if _, err := m.At(bad[0], bad[1], Hydrogen); err != ErrOffTable {
			t.Errorf("%g K, %g: %v", bad[0], bad[1], err)
		}
	}
	for _, bad := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if _, err := m.At(bad, 0.6, Hydrogen); err != ErrNotANumber {
			t.Errorf("%g K: %v", bad, err)
		}
	}
}

// A typical white dwarf has about a hundredth of the Sun's radius: a fact of the
// trade.
func TestTypicalRadius(t *testing.T) {
	v, err := models().At(12000, 0.6, Hydrogen)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, v.RadiusRsun, 0.01, 0.004, "radius")
}

func TestFromGravity(t *testing.T) {
	m := models()
	for _, c := range []Composition{Hydrogen, Helium} {
		for _, teff := range []float64{4000, 9500, 26000, 70000} {
			for _, mass := range []float64{0.45, 0.6, 0.873, 1.25} {
				want, err := m.At(teff, mass, c)
				if err != nil {
					t.Fatal(err)
				}
				got, err := m.FromGravity(teff, want.LogG, c)
				if err != nil {
					t.Fatalf("%g K, log g %g: %v", teff, want.LogG, err)
				}
				check.Near(t, got.MassMsun, mass, 1e-6, "mass, %g K", teff)
			}
		}
	}
	for _, g := range []float64{5, 9.9} {
		if _, err := m.FromGravity(10000, g, Hydrogen); err != ErrOffTable {
			t.Errorf("log g %g: %v", g, err)
		}
	}
}

// The sequences of Bedard et al. 2020 with thick hydrogen, at every model of
// theirs from 4000 to 60 000 K.
func TestModelsAgainstSequences(t *testing.T) {
	m := models()
	const erg = 33.582744 // log of the Sun's luminosity, 3.828e33 erg/s
	var dG, dR, dAge, dL []float64
	for _, r := range outside(t, "data/wd_cooling_bedard2020_thick.csv") {
		teff, mass := math.Pow(10, value(t, r, "logT")), value(t, r, "Mass")
		if teff < 4000 || teff > 60000 {
			continue
		}
		v, err := m.At(teff, mass, Hydrogen)
		if err != nil {
			t.Fatalf("%g K, %g: %v", teff, mass, err)
		}
		dG = append(dG, v.LogG-value(t, r, "logg"))
		dR = append(dR, math.Log10(v.RadiusRsun)-value(t, r, "logR"))
		dL = append(dL, math.Log10(v.LumLsun)-(value(t, r, "logL")-erg))
		dAge = append(dAge, math.Log10(v.CoolingAgeYr)-value(t, r, "logtau"))
	}
	for _, c := range []struct {
		name        string
		x           []float64
		median, p95 float64
	}{{"log g", dG, 0.002, 0.005}, {"log R", dR, 0.001, 0.003}, {"log L", dL, 0.002, 0.006}, {"log age", dAge, 0.005, 0.03}} {
		abs := make([]float64, len(c.x))
		for k, x := range c.x {
			abs[k] = math.Abs(x)
		}
		q, err := numeric.Quantiles(abs, 0.5, 0.95, 1)
		if err != nil {
			t.Fatal(err)
		}
		t.Logf("%s, %d models: median %.4f, 95 %% %.4f, most %.4f", c.name, len(abs), q[0], q[1], q[2])
		if q[0] > c.median || q[1] > c.p95 {
			t.Errorf("%s: median %.4f, 95 per cent %.4f; at most %g, %g", c.name, q[0], q[1], c.median, c.p95)
		}
	}
}

// The group's own tables at whole gravities, all magnitudes: mass, then M_G, V,
// BP-RP and age of the model with that gravity.
func TestModelsAgainstPhotometry(t *testing.T) {
	m := models()
	for _, c := range []struct {
		c    Composition
		file string
	}{{Hydrogen, "data/wd_montreal_gaiaDR3_DA.csv"}, {Helium, "data/wd_montreal_gaiaDR3_DB.csv"}} {
		diff := map[string][]float64{}
		for _, r := range outside(t, c.file) {
			teff, g := value(t, r, "Teff"), value(t, r, "logg")
			if teff < 4500 || teff > 40000 || g < 7.5 {
				continue
			}
			v, err := m.FromGravity(teff, g, c.c)
			if err != nil {
				continue
			}
			add := func(name string, x float64) { diff[name] = append(diff[name], math.Abs(x)) }
			add("mass", v.MassMsun-value(t, r, "mass"))
			add("M_G", v.MGMag-value(t, r, "M_G3"))
			add("V", v.MVMag-value(t, r, "V"))
			add("BP-RP", v.BPRPMag-(value(t, r, "M_BP3")-value(t, r, "M_RP3")))
			add("log age", math.Log10(v.CoolingAgeYr/value(t, r, "age_yr")))
		}
		for name, limit := range map[string][2]float64{"mass": {0.004, 0.02}, "M_G": {0.006, 0.03}, "V": {0.006, 0.03}, "BP-RP": {0.005, 0.02}, "log age": {0.015, 0.1}} {
			q, err := numeric.Quantiles(diff[name], 0.5, 0.95, 1)
			if err != nil {
				t.Fatal(err)
			}
			t.Logf("%s, %s, %d models: median %.4f, 95 %% %.4f, most %.4f", c.c, name, len(diff[name]), q[0], q[1], q[2])
			if q[0] > limit[0] || q[1] > limit[1] {
				t.Errorf("%s %s: median %.4f, 95 per cent %.4f; at most %g", c.c, name, q[0], q[1], limit)
			}
		}
	}
}

// Tables that cannot be used are refused, each for its own reason.
func TestReadRowsRefuses(t *testing.T) {
	for _, bad := range []string{"", "a\n", "a,b\n1\n", "a\nx\n", "b\n1\n"} {
		if _, err := readRows(bad, "a"); err == nil {
			t.Errorf("%q passed", bad)
		}
	}
	if _, err := readSheet(strings.ReplaceAll(hydrogenCSV, "3500", "3000")); err == nil {
		t.Error("temperatures out of order passed")
	}
	if err := (&Models{}).readFrozen("mass,frac,teff\n0.5,0,5000\n"); err == nil {
		t.Error("one row passed")
	}
}
