package nebular

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/numeric"
	"evenfall/astro/stellar"
)

// formulas are the functions of testdata/astro/nebular.csv.
var formulas = map[string]func(a, b float64) (float64, error){
	"mag5007":       func(a, _ float64) (float64, error) { m, err := Mag5007(a); return m.Mags(), err },
	"ha_c":          func(a, _ float64) (float64, error) { d, err := Balmer(Ha, a, 0); return d.C, err },
	"hg_c":          func(a, _ float64) (float64, error) { d, err := Balmer(Hg, a, 0); return d.C, err },
	"hd_c":          func(a, _ float64) (float64, error) { d, err := Balmer(Hd, a, 0); return d.C, err },
	"ha_ebv":        func(a, _ float64) (float64, error) { d, err := Balmer(Ha, a, 0); return d.EBV, err },
	"c_from_ebv":    func(a, _ float64) (float64, error) { return CFromEBV(a), nil },
	"hb_dereddened": func(a, b float64) (float64, error) { return Dereddened(Hb, a, b) },
	"ha_dereddened": func(a, b float64) (float64, error) { return Dereddened(Ha, a, b) },
	"log_surface":   LogSurface,
	"frew_radius": func(a, b float64) (float64, error) {
		d, err := DistanceFromHa(a, b, DepthUnknown)
		return d.RadiusPc, err
	},
	"frew_distance": func(a, b float64) (float64, error) {
		d, err := DistanceFromHa(a, b, DepthUnknown)
		return d.DistancePc, err
	},
	"stanghellini_log_radius": func(a, b float64) (float64, error) {
		d, err := DistanceFromHb(a, b)
		return math.Log10(d.RadiusPc), err
	},
	"age_default": func(a, _ float64) (float64, error) { t, err := AgeByDefault(a); return t.Yr, err },
	"age_angle": func(a, b float64) (float64, error) {
		t, err := AgeByDefault(a * b / arcsecPerRad)
		return t.Yr, err
	},
	"hot_mv":         CentralStarMV,
	"m5007_limit":    func(a, _ float64) (float64, error) { m, err := M5007Limit(a); return m.Mags(), err },
	"excitation_o3":  func(a, _ float64) (float64, error) { e, _, err := Excitation(a, math.NaN()); return e, err },
	"excitation_he2": func(a, _ float64) (float64, error) { e, _, err := Excitation(15, a); return e, err },
}

func TestNebulae(t *testing.T) {
	seen := map[string]bool{}
	for _, row := range check.Table(t, "testdata/astro/nebular.csv").Rows() {
		f := formulas[row.String("formula")]
		if f == nil {
			t.Fatalf("%s: no formula %q", row.Where(), row.String("formula"))
		}
		seen[row.String("formula")] = true
		b := math.NaN()
		if !row.Empty("b") {
			b = row.Float("b")
		}
		got, err := f(row.Float("a"), b)
		if err != nil {
			t.Errorf("%s: %v", row.Where(), err)
		}
		check.Near(t, got, row.Float("want"), row.Float("tol"), "%s: %s", row.Where(), row.String("formula"))
	}
	for name := range formulas {
		if !seen[name] {
			t.Errorf("%s is not in the table", name)
		}
	}
}

// TestLines: f of each line against the law itself.
func TestLines(t *testing.T) {
	hb, err := stellar.Law(lineData[Hb].um, 3.1)
	if err != nil {
		t.Fatal(err)
	}
	for l := Hb; l < lineCount; l++ {
		k, err := stellar.Law(lineData[l].um, 3.1)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, l.F(), k/hb-1, 1e-4, "f of %v", l)
	}
	if Line(-1).String() != "no line" || !math.IsNaN(lineCount.F()) {
		t.Error("a line that is none has a name")
	}
	check.Near(t, perEBV, 0.4*3.1*hb, 0.001, "c per E(B-V)")
}

// TestBalmer: noise is no negative dust, an error is carried, and a ratio made
// with dust gives the dust back whichever line is used.
func TestBalmer(t *testing.T) {
	d, err := Balmer(Ha, 2.5, 0.1)
	if err != nil || d.C != 0 || d.EBV != 0 || !(d.RawC < 0) {
		t.Errorf("a ratio under case B: %+v, %v", d, err)
	}
	check.Near(t, d.CErr, 3.361*0.1/2.5/math.Ln10, 1e-4, "error of c")
	for _, l := range []Line{Ha, Hg, Hd} {
		const c = 0.7
		d, err := Balmer(l, lineData[l].caseB*math.Pow(10, -c*l.F()), 0)
		if err != nil {
			t.Error(err)
		}
		check.Near(t, d.C, c, 1e-12, "c from %v", l)
		check.Near(t, CFromEBV(d.EBV), c, 1e-12, "and back through E(B-V)")
	}
	for _, l := range []Line{Hb, OIII5007, -1, 99} {
		if _, err := Balmer(l, 3, 0); !errors.Is(err, ErrInput) {
			t.Errorf("%v: %v", l, err)
		}
	}
	for _, r := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if _, err := Balmer(Ha, r, 0); !errors.Is(err, ErrInput) {
			t.Errorf("ratio %v: %v", r, err)
		}
	}
}

// TestSurface: what is plain geometry and definition.
func TestSurface(t *testing.T) {
	must := func(v float64, err error) float64 {
		t.Helper()
		if err != nil {
			t.Error(err)
		}
		return v
	}
	check.Near(t, must(RadiusArcsec(20, 0)), 10, 1e-12, "one axis")
	check.Near(t, must(RadiusArcsec(20, 5)), 5, 1e-12, "two axes")
	s, err := SurfaceMag(astro.Mags(10), 10/math.Sqrt(math.Pi))
	check.Near(t, must(s.MagArcsec2(), err), 15, 1e-12, "100 square seconds are 5 magnitudes")
	v, err := CentralStarV(2.03, 1000, 0.5)
	check.Near(t, must(v.Mags(), err), 12.53, 1e-12, "V of a central star")
	abs, bad, err := TooBright(astro.Mags(5.0), 1000)
	check.Near(t, must(abs, err), -5, 1e-12, "M(5007)")
	if !bad {
		t.Error("M = -5 passes")
	}
	if _, bad, _ = TooBright(astro.Mags(5.3), 1000); bad {
		t.Error("M = -4.7 does not pass")
	}
	if LuminosityFunction(-5) != 0 || !(LuminosityFunction(-2) > LuminosityFunction(-4)) || !math.IsNaN(LuminosityFunction(math.NaN())) {
		t.Error("the luminosity function does not rise from nothing")
	}
	check.Near(t, LuminosityFunction(0), 1-math.Exp(3*-4.47), 1e-12, "the luminosity function at 0")
	if !PreferParallax(1, 0.19) || PreferParallax(1, 0.21) || PreferParallax(math.NaN(), 1) || PreferParallax(1, 0) {
		t.Error("a parallax of five errors is the border")
	}
}

// TestDepths: the thin law at the Helix by hand: -(-4.0089+5.73)/3.75 =
// -0.4590, 0.3476 pc; the thick one -(-4.0089+4.97)/3.32 = -0.2895, 0.5134 pc.
func TestDepths(t *testing.T) {
	for depth, want := range map[Depth][2]float64{Thin: {0.3476, 0.18}, Thick: {0.5134, 0.28}} {
		d, err := DistanceFromHa(-8.89, 422, depth)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, d.RadiusPc, want[0], 0.0002, "radius, depth %d", depth)
		check.Near(t, d.RelErr, want[1], 0, "scatter, depth %d", depth)
		if !strings.Contains(d.Note, FromMemory) {
			t.Errorf("depth %d: %q", depth, d.Note)
		}
	}
	if _, err := DistanceFromHa(-8.89, 422, 7); !errors.Is(err, ErrInput) {
		t.Error(err)
	}
}

// TestAges: bounds in order; a line's velocity counts 1.7 times.
func TestAges(t *testing.T) {
	a, err := AgeByDefault(0.9)
	b, err2 := AgeFromLine(0.9, 42/1.7)
	if err != nil || err2 != nil {
		t.Fatal(err, err2)
	}
	check.Near(t, b.Yr, a.Yr, 1e-6, "from a line at the edge's velocity")
	for _, x := range []Age{a, b} {
		if !(x.LoYr < x.Yr && x.Yr < x.HiYr) {
			t.Errorf("%+v is out of order", x)
		}
	}
}

// TestIonisedMass: at T = 1e4 K the handbook has 11.06 in place of 11.4.
func TestIonisedMass(t *testing.T) {
	m, err := IonisedMass(-11, 1, 1000)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, m, 11.4e-3, 1e-9, "suns")
	check.Near(t, m, 11.06e-3, 0.04*11.06e-3, "the handbook's form")
}

// TestZanstra: the sum against quadrature and its known value at 0, 2 ζ(3);
// the ratio against values worked out by another program; it rises all the
// way; and a temperature comes back.
func TestZanstra(t *testing.T) {
	check.Near(t, lymanIntegral(1e-9), 2.404113806319, 1e-6, "2 zeta(3)")
	for _, x0 := range []float64{0.3, 1.579, 5.26, 10} {
		want, err := numeric.Simpson(func(x float64) float64 { return x * x / math.Expm1(x) }, x0, x0+60, 20000)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, lymanIntegral(x0), want, 1e-9, "integral from %g", x0)
	}
	for teff, want := range map[float64]float64{3e4: 0.4357859, 5e4: 3.7688454, 1e5: 27.9957780, 2e5: 134.337765} {
		check.Near(t, photonRatio(teff)/want, 1, 1e-7, "ratio at %g K", teff)
	}
	last := 0.0
	for teff := zanstraLoK; teff <= zanstraHiK; teff *= 1.005 {
		r := photonRatio(teff)
		if !(r > last) {
			t.Fatalf("the ratio does not rise at %g K", teff)
		}
		last = r
	}
	rapid.Check(t, func(rt *rapid.T) {
		teff := rapid.Float64Range(16e3, 490e3).Draw(rt, "teff")
		v := rapid.Float64Range(8, 22).Draw(rt, "v")
		logF := math.Log10(photonRatio(teff)*hbHz*zeroFluxV/photonsPerHb) - 0.4*v
		got, err := ZanstraHI(logF, astro.Mags(v))
		if err != nil || math.Abs(got/teff-1) > 1e-6 {
			rt.Fatalf("%g K came back as %g, %v", teff, got, err)
		}
	})
	for _, f := range []float64{-30, 0, math.NaN(), math.Inf(1)} {
		if v, err := ZanstraHI(f, astro.Mags(15)); !errors.Is(err, ErrInput) || !math.IsNaN(v) {
			t.Errorf("log flux %v: %v, %v", f, v, err)
		}
	}
}

// TestExcitation: the two forms, and what is said without He II.
func TestExcitation(t *testing.T) {
	for _, c := range []struct {
		o3, he2, want float64
		atLeast       bool
	}{{0, math.NaN(), 0, false}, {11, 0.3, 4.95, false}, {12, math.NaN(), 5, true}, {12, 0, 5, false}, {15, 2, 10, false}} {
		got, atLeast, err := Excitation(c.o3, c.he2)
		if err != nil || atLeast != c.atLeast {
			t.Errorf("%+v: %v %v %v", c, got, atLeast, err)
		}
		check.Near(t, got, c.want, 1e-12, "%+v", c)
	}
	for _, bad := range [][2]float64{{-1, 0}, {math.NaN(), 0}, {5, -1}, {math.Inf(1), 0}} {
		if _, _, err := Excitation(bad[0], bad[1]); !errors.Is(err, ErrInput) {
			t.Errorf("%v: %v", bad, err)
		}
	}
}

func TestWords(t *testing.T) {
	for code, want := range map[string]string{
		"E": "elliptical", "Bmps": "bipolar; multiple shells, point-symmetric, internal structure",
		"Ra?": "round; asymmetric in brightness", "S": "star-like", "I": "irregular", "A/r": "asymmetric; ring",
	} {
		if got, ok := Morphology(code); !ok || got != want {
			t.Errorf("%s: %q, %v", code, got, ok)
		}
	}
	for _, code := range []string{"", "e", "Ex", "Emm", "EB", "?", "Eamprsa"} {
		if got, ok := Morphology(code); ok {
			t.Errorf("%q means %q", code, got)
		}
	}
	if s, ok := Status("T"); !ok || s != "true planetary nebula" {
		t.Error(s)
	}
	if _, ok := Status("X"); ok {
		t.Error("X is a status")
	}
}

func TestMimics(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		r     Ratios
		words []string
	}{
		{Ratios{nan, nan, nan}, nil},
		{Ratios{0.3, 0.1, 0.2}, nil},
		{Ratios{0.8, 0.9, 0.2}, []string{"supernova remnant"}},
		{Ratios{nan, 0.9, nan}, []string{"supernova remnant"}},
		{Ratios{3, 0.2, 0.2}, []string{"rich in nitrogen"}},
		{Ratios{0.2, 0.1, 4}, []string{"H II region"}},
		{Ratios{0.8, 0.9, 4}, []string{"supernova remnant", "H II region"}},
		{Ratios{math.Inf(1), -1, -2}, nil},
	} {
		got := Mimics(c.r)
		if len(got) != len(c.words) {
			t.Errorf("%+v: %v", c.r, got)
			continue
		}
		for i, w := range got {
			if !strings.Contains(w.Text, c.words[i]) || w.Source == "" {
				t.Errorf("%+v: %v", c.r, w)
			}
		}
	}
}

// FuzzNebula: whatever a list holds, no panic, and every number that comes
// without an error is one.
func FuzzNebula(f *testing.F) {
	f.Add(-8.89, 422.0, 3.5, 0.9, 1000.0, 3.7, 1e5, 1, "Bmps")
	f.Add(math.NaN(), math.Inf(1), -1.0, 0.0, 1e300, -1e300, 1e-300, -7, "E")
	f.Add(1e9, 1e-300, 1e300, 1e-12, 5e-324, 60.0, 2e4, 99, "Bé")
	f.Fuzz(func(t *testing.T, logF, th, ratio, r, d, logL, teff float64, line int, code string) {
		number := func(what string, v float64, err error) {
			if err == nil && !finite(v) {
				t.Errorf("%s is %v, and nothing is said", what, v)
			}
		}
		m, err := Mag5007(logF)
		number("m5007", m.Mags(), err)
		dust, err := Balmer(Line(line), ratio, r)
		number("dust", dust.C+dust.EBV+dust.CErr, err)
		v, err := Dereddened(Line(line), logF, r)
		number("flux", v, err)
		v, err = LogSurface(logF, th)
		number("surface", v, err)
		s, err := SurfaceMag(astro.Mags(logF), th)
		number("surface", s.MagArcsec2(), err)
		v, err = RadiusArcsec(th, r)
		number("radius", v, err)
		x, err := DistanceFromHa(logF, th, Depth(line))
		number("distance", x.DistancePc+x.RadiusPc, err)
		x, err = DistanceFromHb(logF, th)
		number("distance", x.DistancePc+x.RadiusPc, err)
		a, err := AgeByDefault(r)
		number("age", a.HiYr, err)
		a, err = AgeFromLine(r, d)
		number("age", a.HiYr, err)
		v, err = IonisedMass(logF, d, ratio)
		number("mass", v, err)
		v, err = ZanstraHI(logF, astro.Mags(ratio))
		number("Zanstra", v, err)
		v, err = CentralStarMV(logL, teff)
		number("M_V", v, err)
		mv, err := CentralStarV(logL, d, ratio)
		number("V", mv.Mags(), err)
		v, _, err = TooBright(astro.Mags(logF), d)
		number("M5007", v, err)
		v, _, err = Excitation(ratio, r)
		number("class", v, err)
		LuminosityFunction(logF)
		Morphology(code)
		Status(code)
		for _, w := range Mimics(Ratios{ratio, r, d}) {
			if w.Text == "" {
				t.Error("a warning without words")
			}
		}
		_ = Line(line).String()
	})
}

// BenchmarkNebula: dust, distance, age and the star's temperature.
func BenchmarkNebula(b *testing.B) {
	for b.Loop() {
		dust, err := Balmer(Ha, 3.5, 0)
		if err != nil {
			b.Fatal(err)
		}
		hb, err := Dereddened(Hb, -11, dust.C)
		if err != nil {
			b.Fatal(err)
		}
		d, err := DistanceFromHa(hb+math.Log10(2.86), 15, DepthUnknown)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := AgeByDefault(d.RadiusPc); err != nil {
			b.Fatal(err)
		}
		if _, err := ZanstraHI(hb, astro.Mags(16)); err != nil {
			b.Fatal(err)
		}
	}
}
