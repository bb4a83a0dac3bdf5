package stage

import (
	"math"
	"strings"
	"testing"

	"evenfall/astro/check"
	"evenfall/astro/stellar"
	"evenfall/targets"
)

func studied(t testing.TB, m *Models, tg targets.Target) (Verdict, Study) {
	t.Helper()
	v := m.Judge(tg)
	sums(t, v)
	st := m.Study(tg, &v)
	for _, q := range st.Quantities {
		if q.Method == "" || q.Source == "" || q.Words == "" || math.IsNaN(q.Value) || math.IsInf(q.Value, 0) {
			t.Errorf("%s: quantity without value, words, method or source: %+v", tg.Name, q)
		}
		if !math.IsNaN(q.Lo) && (q.Lo > q.Value+1e-9 || q.Hi < q.Value-1e-9) {
			t.Errorf("%s: %s = %g lies outside %g..%g", tg.Name, q.Key, q.Value, q.Lo, q.Hi)
		}
	}
	for _, s := range st.Steps {
		if s.What == "" || s.Formula == "" || s.Inputs == "" || s.Result == "" || s.Source == "" {
			t.Errorf("%s: a step lacks a part: %+v", tg.Name, s)
		}
	}
	return v, st
}

func near2(t testing.TB, st *Study, key string, want, tol float64) {
	t.Helper()
	q, ok := st.Get(key)
	if !ok {
		t.Errorf("no %s", key)
		return
	}
	check.Near(t, q.Value, want, tol, "%s", key)
}

// TestStudyGiant: a clump giant worked by hand from the published relations:
// G = 9.00, parallax 2.000, A_G 0.10, (BP-RP)0 1.20, solar metals: M_G 0.405,
// 4773.8 K (Mucciarelli et al. 2021), BC_G -0.109 (Andrae et al. 2018), L 59.9,
// R 11.32. Here the extinction comes from E(B-V), so tolerances are those of
// A_G and of the colour.
func TestStudyGiant(t *testing.T) {
	tg := targets.Target{Name: "clump giant", Kind: targets.Giant,
		Place:   targets.Place{Plx: targets.KnownErr(2, 0.02), PlxFrom: "corrected"},
		Physics: targets.Physics{EBV: targets.Known(0.10 / 2.45), FeH: targets.KnownErr(0, 0.05)},
		Mags:    map[targets.Band]targets.Measure{"G": targets.Known(9.00), "BP": targets.Known(10.00), "RP": targets.Known(8.745)}}
	m := NewModels()
	v, st := studied(t, m, tg)
	near2(t, &st, "abs_g_mag", 0.405, 0.02)
	near2(t, &st, "teff_k", 4773.8, 25)
	near2(t, &st, "lum_lsun", 59.9, 1.5)
	near2(t, &st, "radius_rsun", 11.32, 0.2)
	near2(t, &st, "dist_pc", 500, 1)
	if v.Best != "RC" || v.P[targets.RC] < 0.8 || !v.Place.HROK || !v.Place.CMDOK {
		t.Errorf("comes out as %s with p(RC) = %.2f", v.Best, v.P[targets.RC])
	}
	q, _ := st.Get("mass_msun")
	if q.Lo < 0.7 || q.Hi > 3 || q.Lo >= q.Hi {
		t.Errorf("mass %+v", q)
	}
	// a giant of the old populations is likelier to be of the branch
	old := NewModelsFor(targets.PopulationOld).Judge(tg)
	if !(old.P[targets.RC] < v.P[targets.RC]) {
		t.Errorf("p(RC) %.3f among old stars, %.3f in the field", old.P[targets.RC], v.P[targets.RC])
	}
}

// TestStudyDwarf: models of Bédard et al. 2020 as printed: M_G 12.173 at
// BP-RP 0.134 is 10,000 K, 0.60 solar masses, log g 8.00, 0.633 Gyr.
func TestStudyDwarf(t *testing.T) {
	tg := targets.Target{Name: "white dwarf", Place: targets.Place{Plx: targets.KnownErr(20, 0.02), PlxFrom: "corrected"},
		Physics: targets.Physics{EBV: targets.Known(0)},
		Mags: map[targets.Band]targets.Measure{"G": targets.KnownErr(12.173+5*math.Log10(5), 0.005), "BP": targets.KnownErr(15.7, 0.004),
			"RP": targets.KnownErr(15.566, 0.004)}}
	m := NewModels()
	v, st := studied(t, m, tg)
	if v.Best != "WD" || v.P[targets.Dwarf] < 0.95 {
		t.Errorf("comes out as %s, p(WD) = %.2f", v.Best, v.P[targets.Dwarf])
	}
	near2(t, &st, "teff_k", 10000, 100)
	near2(t, &st, "mass_msun", 0.60, 0.01)
	near2(t, &st, "logg", 8.00, 0.02)
	near2(t, &st, "cooling_age_gyr", 0.633, 0.02)
	near2(t, &st, "mass_limit_msun", 1.456, 0.001)   // Chandrasekhar, two nucleons for each electron
	near2(t, &st, "grav_redshift_kms", 0.6363*47, 1) // 0.6363 M/R, of the models' radius
	born, okBorn := st.Get("progenitor_msun")
	age, okAge := st.Get("total_age_gyr")
	if !okBorn || !okAge || born.Lo >= born.Hi || age.Lo >= age.Hi || age.Hi < 2*age.Lo {
		t.Errorf("progenitor %+v, age %+v: they are known as wide intervals alone", born, age)
	}
	if !v.Place.HROK || math.Abs(v.Place.LogT.Mid-4) > 0.01 || math.Abs(v.MassMsun-0.6) > 0.02 {
		t.Errorf("place %+v, mass %.2f", v.Place, v.MassMsun)
	}
	if !strings.Contains(strings.Join(st.Decide, " "), "hydrogen or helium") {
		t.Errorf("nothing says that the atmosphere is not known: %v", st.Decide)
	}
}

// TestStudyNebula: the Helix: log F(Halpha) = -8.89, radius 422 arcsec: log S
// = -4.01, r = 0.430 pc, 210 pc by the relation of Frew et al. 2016; 200 pc by
// parallax. M_V and luminosity of its star by Vacca et al. 1996.
func TestStudyNebula(t *testing.T) {
	tg := targets.Target{Name: "nebula", Kind: targets.PN, Physics: targets.Physics{DistPc: targets.KnownErr(200, 4), TeffK: targets.Known(104000)},
		Nebula: targets.Nebula{DiamArcsec: targets.Known(844), LogFHa: targets.Known(-8.89), CHb: targets.Known(0), CspnV: targets.Known(13.53),
			LogF5007: targets.Known(-8.9), LogFHb: targets.Known(-9.37)}}
	v, st := studied(t, NewModels(), tg)
	if v.Best != "PN" {
		t.Errorf("comes out as %s", v.Best)
	}
	near2(t, &st, "log_surface_halpha", -4.01, 0.01)
	near2(t, &st, "dist_statistical_pc", 210, 3)
	near2(t, &st, "dist_pc", 200, 1)
	near2(t, &st, "radius_pc", 0.409, 0.005)
	// 977,790 yr r/v with the mean edge of 42 km/s (Jacob et al. 2013)
	near2(t, &st, "expansion_age_kyr", 977.79*0.409/42, 0.15)
	near2(t, &st, "abs_v_mag", 13.53-5*math.Log10(20), 0.01)
	if q, _ := st.Get("dist_statistical_pc"); !strings.Contains(q.Source, "from memory") {
		t.Errorf("coefficients from memory are not marked: %s", q.Source)
	}
	near2(t, &st, "excitation_class", 0.45*math.Pow(10, 0.47), 0.01) // Dopita & Meatheringham 1990, 0.45 F(5007)/F(Hbeta)
}

// Whitelock et al. 2008: -7.745 at 332 d, -5.92 at 100 d.
func TestPeriodLuminosity(t *testing.T) {
	for _, c := range []struct{ p, k float64 }{{332, -7.745}, {100, -5.92}} {
		m, err := periodLuminosity(c.p, false)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, m.Value, c.k, 0.005, "M_K at %g d", c.p)
	}
	carbon, _ := periodLuminosity(332, true)
	long, _ := periodLuminosity(600, false)
	if carbon.Err < 0.35 || long.Err < 0.5 {
		t.Errorf("errors %.2f of a carbon star, %.2f beyond 400 d", carbon.Err, long.Err)
	}
	for _, p := range []float64{0, 50, 5000, math.NaN()} {
		if _, err := periodLuminosity(p, false); err == nil {
			t.Errorf("a period of %g d has a luminosity", p)
		}
	}
}

// Limits of Lebzelter et al. 2018: carbon rich above W_RP - W_K = 0.9.
func TestInfrared(t *testing.T) {
	lpv := func(j, k, bp, rp float64) targets.Target {
		return targets.Target{Name: "x", Kind: targets.LPV, Mags: map[targets.Band]targets.Measure{
			"J": targets.Known(j), "K": targets.Known(k), "BP": targets.Known(bp), "RP": targets.Known(rp)}}
	}
	carbon := lpv(5.5, 4.0, 9, 6.5) // W_RP 3.25, W_K 2.971: D = 0.28 at this colour
	if _, ok := infraredOf(&carbon); ok {
		t.Error("an oxygen-rich star is called carbon rich")
	}
	carbon = lpv(6.0, 4.2, 9, 7.2) // W_RP 4.86, W_K 2.965: D = 1.89
	f, ok := infraredOf(&carbon)
	if !ok || f.weight[targets.TPAGB]/f.rest != 5 {
		t.Errorf("evidence %+v, want 5 to 1", f)
	}
	dusty := lpv(8, 5, 14, 11)
	if f, ok := infraredOf(&dusty); !ok || !strings.Contains(f.what, "dust") {
		t.Errorf("a star behind its dust: %+v", f)
	}
}

// The lines drawn: each sort is there, each point is a place, lives run in age.
func TestCurves(t *testing.T) {
	m := NewModels()
	sorts := map[Sort]int{}
	for _, c := range m.Curves(1.3, -0.2) {
		sorts[c.Sort]++
		if c.Source == "" || c.Name == "" || len(c.Points) < 2 {
			t.Errorf("curve %q of %d points, source %q", c.Name, len(c.Points), c.Source)
		}
		for i, p := range c.Points {
			if math.IsNaN(p.LogT+p.LogL) || p.LogT < 3 || p.LogT > 6 {
				t.Errorf("%s: point %+v", c.Name, p)
			}
			if c.Sort == Life && i > 0 && p.AgeYr < c.Points[i-1].AgeYr {
				t.Errorf("%s runs back in age", c.Name)
			}
		}
	}
	if sorts[ZeroAge] != 1 || sorts[ClumpBox] != 1 || sorts[Life] < 3 || sorts[Cooling] < 3 || sorts[Strip] < 4 {
		t.Errorf("sorts of curves: %v", sorts)
	}
}

// TestDwarfsRecognised: the 1,503 white dwarfs of Gentile Fusillo et al. 2021
// with spectra; no kind is given.
func TestDwarfsRecognised(t *testing.T) {
	m, found, all := NewModels(), 0, 0
	for _, r := range open(t, "data/wd_gaia_open.csv") {
		plx := number(t, r, "Plx")
		tg := targets.Target{Name: "x", Place: targets.Place{Plx: targets.KnownErr(plx, plx/50), PlxFrom: "corrected"},
			Physics: targets.Physics{EBV: targets.Known(0)}, Mags: map[targets.Band]targets.Measure{"G": targets.Known(number(t, r, "Gmag")),
				"BP": targets.Known(number(t, r, "BPmag")), "RP": targets.Known(number(t, r, "RPmag"))}}
		all++
		s := &sight{abs: map[targets.Band]stellar.Measure{}}
		s.far(&tg)
		s.redden(&tg)
		s.magnitudes(&tg)
		s.below(&tg)
		if s.dwarf && all%50 == 0 {
			if v := m.Judge(tg); v.Best != "WD" {
				t.Errorf("%+v comes out as %s", r, v.Best)
			}
		}
		if s.dwarf {
			found++
		}
	}
	t.Logf("%d of %d recognised", found, all)
	if float64(found) < 0.995*float64(all) {
		t.Errorf("only %d of %d white dwarfs recognised", found, all)
	}
}

// Columns that make no sense widen the answer and are named.
func TestAbsurdColumns(t *testing.T) {
	m := NewModels()
	for _, c := range []struct {
		tg   targets.Target
		says string
	}{
		{targets.Target{Name: "a", Place: targets.Place{Plx: targets.KnownErr(-3, 0.2), PlxFrom: "corrected"}, Mags: map[targets.Band]targets.Measure{"G": targets.Known(12)}}, "negative"},
		{targets.Target{Name: "b", Place: targets.Place{Plx: targets.KnownErr(-0.1, 0.2), PlxFrom: "corrected"}, Mags: map[targets.Band]targets.Measure{"G": targets.Known(12)}}, "not positive"},
		{targets.Target{Name: "c", Kind: targets.Giant, Mags: map[targets.Band]targets.Measure{"BP": targets.Known(20), "RP": targets.Known(10)}}, "no calibration"},
		{targets.Target{Name: "d", Physics: targets.Physics{TeffK: targets.Known(5)}}, "not one of a star"},
		{targets.Target{Name: "e", Physics: targets.Physics{LogG: targets.Known(40)}}, "not one of a star"},
	} {
		v, st := studied(t, m, c.tg)
		if !strings.Contains(strings.Join(v.Missing, "; "), c.says) {
			t.Errorf("%s: nothing says %q: %v", c.tg.Name, c.says, v.Missing)
		}
		if v.Sureness() > 0.9 || len(st.Decide) == 0 {
			t.Errorf("%s: too sure (%.2f), or nothing would settle it: %v", c.tg.Name, v.Sureness(), st.Decide)
		}
	}
}

// A giant of a cluster as old as 1.5 Gyr is likelier in the clump than one of
// the field, and one of 4 Gyr is not: giants above the flash mass climb the
// branch fast. Members of an unknown cluster are judged as the field is.
func TestCluster(t *testing.T) {
	m := NewModels()
	giant := func(cluster string) targets.Target {
		return targets.Target{Name: "x", Kind: targets.Giant, Place: targets.Place{Plx: targets.KnownErr(2, 0.02), PlxFrom: "corrected"},
			Physics: targets.Physics{EBV: targets.Known(0.05), TeffK: targets.KnownErr(4700, 80), FeH: targets.KnownErr(0, 0.05), Cluster: cluster},
			Mags:    map[targets.Band]targets.Measure{"G": targets.Known(9.2), "K": targets.Known(7.0)}}
	}
	field, _ := studied(t, m, giant(""))
	young, _ := studied(t, m, giant("NGC 6811"))
	old, _ := studied(t, m, giant("M 67"))
	other, _ := studied(t, m, giant("nowhere"))
	if !(young.P[targets.RC] > field.P[targets.RC]) || !(old.P[targets.RC] < young.P[targets.RC]) || other.P[targets.RC] != field.P[targets.RC] {
		t.Errorf("p(RC): field %.3f, 1 Gyr %.3f, 4 Gyr %.3f, unknown cluster %.3f", field.P[targets.RC], young.P[targets.RC], old.P[targets.RC], other.P[targets.RC])
	}
	for name, want := range map[string]float64{"m67": 1.4, "hyades": 2.6, "pleiades": 5} { // turn-off giants, common practice, no source
		check.Near(t, m.clusters()[name].turnoff, want, 0.2*want, "mass of the giants of %s", name)
	}
	// white dwarfs of the Hyades come from some 3 solar masses: common practice, no source
	dwarf := targets.Target{Name: "d", Kind: targets.WD, Physics: targets.Physics{Cluster: "Hyades", TeffK: targets.KnownErr(20000, 300), LogG: targets.KnownErr(8.1, 0.05)}}
	_, st := studied(t, m, dwarf)
	if q, ok := st.Get("progenitor_cluster_msun"); !ok || q.Value < 2.4 || q.Value > 3.5 || q.Lo >= q.Hi {
		t.Errorf("progenitor in the Hyades: %+v", q)
	}
}

// Gravity beside a place: 28,000 K at log L = 1.2 with log g 5.5 is a hot
// subdwarf, the same with 4.2 a star of the main sequence's mass; a giant's
// place with a dwarf's gravity is named a contradiction.
func TestGravityHere(t *testing.T) {
	m := NewModels()
	star := func(teff, logg, v float64) targets.Target {
		return targets.Target{Name: "x", Place: targets.Place{Plx: targets.KnownErr(2, 0.02), PlxFrom: "corrected"}, Mags: map[targets.Band]targets.Measure{"V": targets.Known(v)},
			Physics: targets.Physics{EBV: targets.Known(0), TeffK: targets.KnownErr(teff, 0.02*teff), LogG: targets.KnownErr(logg, 0.1)}}
	}
	v, _ := studied(t, m, star(28000, 5.5, 12.9))
	if v.Best != "SDB" {
		t.Errorf("a hot subdwarf comes out as %s, %v", v.Best, v.P)
	}
	v, _ = studied(t, m, star(4800, 4.6, 8.5))
	if len(v.Evidence) == 0 || !strings.HasPrefix(v.Evidence[0].What, "contradiction: log g") {
		t.Errorf("nothing names the gravity: %v", v.Evidence)
	}
}

// A place between main sequence and white dwarfs at a blue colour, without a
// temperature: hot subdwarfs of Geier et al. 2019.
func TestHotSubdwarf(t *testing.T) {
	v, _ := studied(t, NewModels(), targets.Target{Name: "x", Place: targets.Place{Plx: targets.KnownErr(2, 0.04), PlxFrom: "corrected"}, Physics: targets.Physics{EBV: targets.Known(0)},
		Mags: map[targets.Band]targets.Measure{"G": targets.Known(12.9), "BP": targets.Known(12.72), "RP": targets.Known(13.15)}})
	if v.Best != "SDB" {
		t.Errorf("comes out as %s %v", v.Best, v.P)
	}
}

// Wood, Bessell & Fox 1983: -6.608 at 300 d; a star of M_bol -8 is massive.
func TestAboveAGB(t *testing.T) {
	m := NewModels()
	tg := targets.Target{Name: "x", Kind: targets.LPV, Place: targets.Place{Plx: targets.KnownErr(1, 0.02), PlxFrom: "corrected"}, Physics: targets.Physics{EBV: targets.Known(0), SpType: "M4", TeffK: targets.Known(3600)},
		Var: targets.Variability{PeriodD: targets.Known(300)}, Mags: map[targets.Band]targets.Measure{"K": targets.Known(-1)}}
	v, _ := studied(t, m, tg)
	if v.Best != "RSG" {
		t.Errorf("comes out as %s %v", v.Best, v.P)
	}
	tg.Mags["K"] = targets.Known(2)
	if v, _ = studied(t, m, tg); v.P[targets.RSG] > 0.3 {
		t.Errorf("at M_K = -8 the same is taken for massive: %v", v.P)
	}
}
