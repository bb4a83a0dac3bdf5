package stellar

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
)

// TestReddening: the numbers of the works named, and that the two scales keep
// apart.
func TestReddening(t *testing.T) {
	for _, c := range []struct {
		what      string
		got, want float64
	}{
		{"true scale, Schlafly & Finkbeiner 2011", float64(MapEBV(1).True()), 0.86},
		{"there and back", float64(TrueEBV(0.43).Map().True()), 0.43},
		{"A_V", TrueEBV(1).AV(), 3.1},
		{"A_V of a map", MapEBV(1).AV(), 2.742},
		{"A_I of a map", MapEBV(1).AI(), 1.505},
		{"A_Ks of a map", MapEBV(1).AKs(), 0.310},
		{"A_Ks of a map, Casagrande et al. 2021", MapEBV(1).AKsCasagrande(), 0.306},
		{"R_G, Casagrande & VandenBerg 2018", TrueEBV(1).Simple().AG, 2.740},
		{"R_BP", TrueEBV(1).Simple().ABP, 3.374},
		{"R_RP", TrueEBV(1).Simple().ARP, 2.035},
		{"E(BP-RP)/E(B-V)", TrueEBV(1).Simple().EBPRP(), 1.339},
		{"column in the plane", ColumnFraction(3, 0), 0},
		{"column at one height", ColumnFraction(0.125, 1), 1 - math.Exp(-1)},
		{"column to the south", ColumnFraction(0.25, -0.5), 1 - math.Exp(-1)},
		{"whole column", ColumnFraction(1e9, 1), 1},
	} {
		check.Near(t, c.got, c.want, 1e-12, "%s", c.what)
	}
	check.Near(t, MapEBV(1).EGK(math.NaN()), 1.827, 0.00051, "E(G-Ks) of the clump")
	rows(t, 1, "egk_per_map")
}

func TestCoefficients(t *testing.T) {
	rows(t, 8, "dr2_", "dr3_")
	inside, ok := Coefficients(GaiaDR3, 2.5, 20)
	outside, ok2 := Coefficients(GaiaDR3, 4, 30)
	if inside != outside || !ok || ok2 {
		t.Errorf("beyond the range: %v %v, at its end %v %v", outside, ok2, inside, ok)
	}
}

func TestDereddened(t *testing.T) {
	// With k_BP - k_RP = 0.3924 at x = 1.25, A0 = 0.5 a star of that colour is
	// seen at 1.25 + 0.1962, and A_G is 0.8051/2.
	d, err := Dereddened(GaiaDR3, 1.4462, TrueEBV(0.5/3.1))
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, d.BPRP0, 1.25, 0.0001, "colour without reddening")
	check.Near(t, d.A.AG, 0.40255, 0.0001, "A_G")
	if !d.InRange || !d.Settled || d.Steps > 6 {
		t.Errorf("%+v", d)
	}
	for _, v := range []float64{math.NaN(), math.Inf(1)} {
		if _, err := Dereddened(GaiaDR3, v, 0.1); !errors.Is(err, ErrInput) {
			t.Errorf("colour %v: %v", v, err)
		}
		if _, err := Dereddened(GaiaDR3, 1, TrueEBV(v)); !errors.Is(err, ErrInput) {
			t.Errorf("reddening %v: %v", v, err)
		}
	}
}

// TestDereddenedProperty: where it settles in range, reddening the star again
// gives what was observed; and it does settle for common reddenings.
func TestDereddenedProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		r := rapid.SampledFrom([]Release{GaiaDR2, GaiaDR3}).Draw(rt, "release")
		x := rapid.Float64Range(-0.05, 2.4).Draw(rt, "x")
		e := TrueEBV(rapid.Float64Range(0, 1.5).Draw(rt, "e"))
		k, _ := Coefficients(r, x, e.AV())
		d, err := Dereddened(r, x+k.EBPRP()*e.AV(), e)
		if err != nil || !d.Settled || math.Abs(d.BPRP0-x) > 1e-5 {
			rt.Fatalf("%+v, want %g; %v", d, x, err)
		}
	})
}

func TestLaw(t *testing.T) {
	rows(t, 5, "law")
	var no *NoCalibration
	for _, um := range []float64{0.2, 5, math.NaN(), 0, -1} {
		if _, err := Law(um, 3.1); !errors.As(err, &no) {
			t.Errorf("at %g um: %v", um, err)
		}
	}
	if _, err := LawPerEBV(0.5, 1); !errors.As(err, &no) {
		t.Errorf("R_V = 1: %v", err)
	}
	lo, err := Law(lawSplitUm, 3.1)
	hi, err2 := Law(lawSplitUm*(1+1e-12), 3.1)
	if err != nil || err2 != nil || math.Abs(lo-hi) > 0.005 {
		t.Errorf("the pieces of the law part by %g: %v %v", lo-hi, err, err2)
	}
}

func TestTeff(t *testing.T) {
	rows(t, 12, "bprp_", "bv_", "vk_")
	type relation func(colour, feH Measure, giant bool) (TeffEstimate, error)
	for _, c := range []struct {
		name   string
		f      relation
		giant  bool
		lo, hi float64
	}{
		{"BP-RP dwarfs", TeffFromBPRP, false, 0.39, 1.50},
		{"BP-RP giants", TeffFromBPRP, true, 0.33, 1.81},
		{"B-V dwarfs", TeffFromBV, false, 0.310, 1.507},
		{"B-V giants", TeffFromBV, true, 0.20, 1.90},
		{"V-K dwarfs", TeffFromVK, false, 0.896, 3.360},
		{"V-K giants", TeffFromVK, true, 0.20, 4.90},
		{"G-K giants", func(x, f Measure, _ bool) (TeffEstimate, error) { return TeffFromGK(x, math.NaN(), f) }, true, 0.20, 3.90},
	} {
		solar := Measured(0, 0)
		for _, x := range []float64{c.lo, c.hi} {
			if _, err := c.f(Measured(x, 0), solar, c.giant); err != nil {
				t.Errorf("%s at %g: %v", c.name, x, err)
			}
		}
		for _, x := range []float64{c.lo - 0.001, c.hi + 0.001, math.NaN()} {
			_, err := c.f(Measured(x, 0), solar, c.giant)
			var no *NoCalibration
			if !errors.As(err, &no) || no.Lo != c.lo || no.Hi != c.hi || no.Reason == "" {
				t.Errorf("%s at %g: %v", c.name, x, err)
			}
		}
		if _, err := c.f(Measured(c.lo+0.1, 0), Measured(7, 0), c.giant); !errors.Is(err, ErrInput) {
			t.Errorf("%s, [Fe/H] = 7: %v", c.name, err)
		}
	}
}

// TestTeffErrors: scatter, and what colour and metals add to it, in quadrature.
func TestTeffErrors(t *testing.T) {
	at := func(x, f float64) float64 {
		e, err := TeffFromBPRP(Measured(x, 0), Measured(f, 0), true)
		if err != nil {
			t.Fatal(err)
		}
		return e.TeffK
	}
	e, err := TeffFromBPRP(Measured(1.2, 0.02), Measured(-0.3, 0.1), true)
	if err != nil {
		t.Fatal(err)
	}
	want := math.Sqrt(83*83 + math.Pow(0.02*(at(1.21, -0.3)-at(1.19, -0.3))/0.02, 2) + math.Pow(0.1*(at(1.2, -0.25)-at(1.2, -0.35))/0.1, 2))
	check.Near(t, e.SigmaK, want, 0.02, "error of a giant's temperature")
	check.Near(t, e.WithModelFloor().SigmaK, math.Hypot(e.SigmaK, 80), 1e-9, "with the floor of models")
	unknown, err := TeffFromBPRP(Measured(1.2, 0.02), Measure{}, true)
	if err != nil || !(unknown.SigmaK > 83) || unknown.TeffK != at(1.2, 0) {
		t.Errorf("without [Fe/H]: %v, %v", unknown, err)
	}
	k, err := TeffFromVK(Measured(3, 0), Measured(0, 0), true)
	if err != nil || !(k.SigmaK > 25 && k.SigmaK < 40) || k.Note == "" {
		t.Errorf("V-K of a giant: %v, %v; its system of K is from memory", k, err)
	}
}

func TestGK(t *testing.T) { rows(t, 4, "gk_") }

// TestInverseProperty: colour and magnitude come back, and over its whole range
// each relation that is inverted falls.
func TestInverseProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		f := Measured(rapid.Float64Range(-1, 0.4).Draw(rt, "F"), 0)
		g := rapid.Float64Range(1.5, 3.4).Draw(rt, "g")
		c := rapid.Float64Range(1, 3.4).Draw(rt, "c")
		e, err := TeffFromGK(Measured(c, 0), g, f)
		if err != nil {
			rt.Fatal(err)
		}
		back, err := GKFromTeff(e.TeffK, g, f)
		if err != nil || math.Abs(back-c) > 1e-6 {
			rt.Fatalf("G-K %g at g %g, F %g came back as %g, %v", c, g, f.Value, back, err)
		}
		giant := rapid.Bool().Draw(rt, "giant")
		x := rapid.Float64Range(0.4, 1.49).Draw(rt, "x")
		e, err = TeffFromBPRP(Measured(x, 0), f, giant)
		if err != nil {
			rt.Fatal(err)
		}
		if back, err = BPRPFromTeff(e.TeffK, f, giant); err != nil || math.Abs(back-x) > 1e-6 {
			rt.Fatalf("BP-RP %g came back as %g, %v", x, back, err)
		}
		teff, l := rapid.Float64Range(3300, 8000).Draw(rt, "teff"), rapid.Float64Range(-3, 5).Draw(rt, "l")
		mg, err := AbsGFromLogL(l, teff)
		lg, _, err2 := LogLFromG(mg, teff)
		mv, err3 := AbsVFromLogL(l, teff)
		lv, err4 := LogLFromV(mv, teff)
		if err := errors.Join(err, err2, err3, err4); err != nil || math.Abs(lg-l) > 1e-9 || math.Abs(lv-l) > 1e-9 {
			rt.Fatalf("log L %g at %g K came back as %g, %g: %v", l, teff, lg, lv, err)
		}
	})
}

func TestTeffFromColours(t *testing.T) {
	solar := Measured(0, 0.1)
	all := Colours{BPRP: Measured(1.2, 0.01), GK: Measured(2.13, 0.03), VK: Measured(2.4, 0.03), BV: Measured(1.0, 0.02)}
	e, tried, err := TeffFromColours(all, solar, true)
	if err != nil || len(tried) != 4 {
		t.Fatalf("%v, %v", tried, err)
	}
	for _, x := range tried {
		if x.Err != nil || x.Teff.SigmaK < e.SigmaK || x.String() == "" {
			t.Errorf("chosen %v, tried %v", e, x)
		}
	}
	if e.Method != "V-K of giants" {
		t.Errorf("chosen: %v", e)
	}
	all.VK = Measured(2.4, 0.3)
	if e, _, _ = TeffFromColours(all, solar, true); e.Method != "G-Ks of giants" {
		t.Errorf("with a poor V: %v", e)
	}
	e, tried, err = TeffFromColours(Colours{BPRP: Measured(0.82, 0.01), GK: Measured(1.4, 0.01)}, solar, false)
	if err != nil || e.Method != "BP-RP of dwarfs" || tried[1].Err == nil {
		t.Errorf("a dwarf: %v %v %v", e, tried, err)
	}
	e, tried, err = TeffFromColours(Colours{BPRP: Measured(4, 0.01), VK: Measured(7, 0.1)}, solar, true)
	if !errors.Is(err, ErrNoTeff) || len(tried) != 4 || e.TeffK != 0 {
		t.Errorf("too red: %v %v %v", e, tried, err)
	}
}

// TestMType: the scale as printed, halves, ranges, and what it is not for.
func TestMType(t *testing.T) {
	for sp, want := range map[string]float64{
		"M0III": 3895, "M1": 3810, "M2 III": 3735, "M3III": 3640, "M4IIIa": 3560, "M5": 3420, "M6III": 3250, "M7e": 3100, "M8III": 2900,
		"M6.5": 3175, "M3-4III": 3600, "M5-M6": 3335, " M2 II-III": 3735, "M5v": 3420,
	} {
		e, err := TeffFromMType(sp)
		if err != nil {
			t.Errorf("%s: %v", sp, err)
		}
		check.Near(t, e.TeffK, want, 0.51, "%s", sp)
		if e.Note != FromMemory || e.SigmaK != 100 {
			t.Errorf("%s: %v", sp, e)
		}
	}
	for _, sp := range []string{"", "M", "K5III", "M5V", "M2Iab", "M9", "M8.5", "M1IV", "S6", "Mira", "M99999999999", "M-1"} {
		var no *NoCalibration
		if e, err := TeffFromMType(sp); !errors.As(err, &no) {
			t.Errorf("%q: %v %v", sp, e, err)
		}
	}
	check.Near(t, TeffOfMira().TeffK, 2900, 0, "a Mira")
	check.Near(t, TeffOfMira().SigmaK, 800/math.Sqrt(12), 1e-9, "evenly spread")
	check.Near(t, TeffOfCarbonStar().TeffK, 2900, 0, "a carbon star")
}

func TestBCG(t *testing.T) {
	rows(t, 6, "bcg")
	for teff := 3300.0; teff <= 8000; teff += 10 {
		if _, s, err := BCG(teff); err != nil || !(s > 0 && s < 1) {
			t.Errorf("sigma of BC_G at %g K is %g, %v", teff, s, err)
		}
	}
	for _, teff := range []float64{3299, 8001, math.NaN()} {
		if _, _, err := BCG(teff); err == nil {
			t.Errorf("BC_G at %g K", teff)
		}
	}
}

func TestBCV(t *testing.T) {
	rows(t, 5, "bcv")
	sun, err := LogLFromV(4.81, 5772) // 4.73 + 0.08
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, sun, 0, 0.0005, "log L of the Sun from V")
	for _, teff := range []float64{3299, 60000, math.NaN(), -1} {
		if _, err := BCV(teff); err == nil {
			t.Errorf("BC_V at %g K", teff)
		}
	}
}

// TestLongPeriodBCG: the constant, and the parabola at C = 2 by hand:
// 0.2438 - 0.5031 - 0.45732 = -0.71662.
func TestLongPeriodBCG(t *testing.T) {
	mira, err := LongPeriodBCG(math.NaN(), 4)
	small, err2 := LongPeriodBCG(2, math.NaN())
	if err != nil || err2 != nil {
		t.Fatal(err, err2)
	}
	check.Near(t, mira, -2.2, 0, "Mira-like")
	check.Near(t, small, -0.71662, 1e-9, "small amplitude")
	if _, err := LongPeriodBCG(math.NaN(), 1); !errors.Is(err, ErrInput) {
		t.Errorf("no colour: %v", err)
	}
}

func TestAGBLimit(t *testing.T) {
	rows(t, 2, "agb_limit")
	if _, err := AGBLimit(2000); err == nil {
		t.Error("the parabola was read beyond its turn")
	}
}

// TestWorkedStar: G = 9.00, parallax 2.000 mas, A_G = 0.10, (BP-RP)0 = 1.20,
// solar: M_G 0.405, 4773.8 K, BC_G -0.109, Mbol 0.296, L 59.9, R 11.32, log g
// 2.410 for 1.2 suns. Worked from the formulas by an independent program.
func TestWorkedStar(t *testing.T) {
	absG := 9.00 - ModulusAt(1/2.000) - 0.10
	check.Near(t, absG, 0.405, 0.00051, "M_G")
	teff, err := TeffFromBPRP(Measured(1.20, 0), Measured(0, 0), true)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, teff.TeffK, 4773.8, 0.051, "Teff")
	bc, _, err := BCG(teff.TeffK)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, bc, -0.109, 0.00051, "BC_G")
	check.Near(t, absG+bc, 0.296, 0.00051, "Mbol")
	logL, _, err := LogLFromG(absG, teff.TeffK)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, logL, LogLFromMbol(absG+bc), 1e-12, "log L")
	check.Near(t, math.Pow(10, logL), 59.9, 0.051, "L")
	check.Near(t, Radius(logL, teff.TeffK), 11.32, 0.0051, "R")
	g := LogG(Measured(1.2, 0.4), logL, teff.TeffK)
	check.Near(t, g.Value, 2.410, 0.00051, "log g")
	check.Near(t, g.Err, 0.4/1.2/math.Ln10, 1e-9, "its error, 0.15 in round numbers")
	if LogG(Measure{}, logL, teff.TeffK) != g {
		t.Error("a field giant is not 1.2 +- 0.4 suns")
	}
	if !math.IsNaN(Radius(1, 0)) || LogG(Measured(-1, 0), 1, 5000).Known {
		t.Error("a size was made of nothing")
	}
}

// TestOscillations: the Sun by definition; a giant by hand: at numax 30.9, dnu
// 1.351·√10 and solar temperature M = 1e-6/(1e-8·100) = 1, R = 0.01/1e-3 = 10.
func TestOscillations(t *testing.T) {
	sun, err := Oscillations(Measured(3090, 0), Measured(135.1, 0), Measured(5777, 0))
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range []Measure{sun.Mass, sun.Radius} {
		check.Near(t, m.Value, 1, 1e-12, "the Sun")
	}
	check.Near(t, sun.LogG.Value, 4.438, 1e-12, "log g of the Sun")
	g, err := Oscillations(Measured(30.9, 0.309), Measured(1.351*math.Sqrt(10), 0), Measured(5777, 0))
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, g.Mass.Value, 1, 1e-9, "mass")
	check.Near(t, g.Radius.Value, 10, 1e-9, "radius")
	check.Near(t, g.LogG.Value, 2.438, 1e-9, "log g")
	check.Near(t, g.Mass.Err, 0.03, 1e-9, "error of the mass")
	check.Near(t, g.Radius.Err, 0.1, 1e-9, "error of the radius")
	alone, err := Oscillations(Measured(30.9, 0), Measure{}, Measured(5777, 0))
	if err != nil || alone.Mass.Known || !alone.LogG.Known {
		t.Errorf("without the separation: %+v, %v", alone, err)
	}
	for _, bad := range []Measure{{}, Measured(-1, 0), Measured(0, 0)} {
		if _, err := Oscillations(bad, Measured(1, 0), Measured(5000, 0)); !errors.Is(err, ErrInput) {
			t.Errorf("numax %v: %v", bad, err)
		}
	}
}

// FuzzStar: whatever a catalogue holds, no panic, and every number that comes
// without an error is one.
func FuzzStar(f *testing.F) {
	f.Add("gaia_dr3", 2.0, 0.05, 9.0, 1.3, 2.2, 0.1, 0.0, 1.45, 0.5, "M5III", true)
	f.Add("gaia_dr2", -1.0, 0.2, 12.0, 0.8, 1.4, 0.0, -0.5, 0.0, -1.0, "M", false)
	f.Add("other", math.NaN(), math.Inf(1), 1e300, -1e300, math.Inf(-1), math.NaN(), 1e9, -1.0, 7.0, "M-5", true)
	f.Fuzz(func(t *testing.T, release string, plx, e, g, bprp, gk, ebv, feH, nu, sinB float64, sp string, giant bool) {
		number := func(what string, v float64, err error) {
			if err == nil && !finite(v) {
				t.Errorf("%s is %v, and nothing is said", what, v)
			}
		}
		s := Solution{Release: Release(release), GMag: g, NuEff: nu, SinBeta: sinB, Giant: giant, LongPeriod: giant}
		p, err := Correct(plx, e, s)
		number("parallax", p.Mas+p.ErrMas, err)
		d, err := Distance(DistancePrior{PlxMas: plx, ErrMas: e, ScaleKpc: nu})
		number("distance", d.ModeKpc+d.Q05+d.Q50+d.Q95, err)
		if err == nil && !(d.Q05 <= d.Q50 && d.Q50 <= d.Q95 && d.ModeKpc > 0) {
			t.Errorf("distances %v %v %v, mode %v of %v +- %v", d.Q05, d.Q50, d.Q95, d.ModeKpc, plx, e)
		}
		u, err := Dereddened(s.Release, bprp, TrueEBV(ebv))
		number("colour", u.BPRP0+u.A.AG, err)
		c := Colours{BPRP: Measured(bprp, e), GK: Measured(gk, e), VK: Measured(gk, e), BV: Measured(bprp, e)}
		teff, _, err := TeffFromColours(c, Measured(feH, e), giant)
		number("Teff", teff.TeffK+teff.SigmaK, err)
		l, sl, err := LogLFromG(g, teff.TeffK)
		number("log L", l+sl, err)
		l, err = LogLFromV(g, gk)
		number("log L", l, err)
		m, err := TeffFromMType(sp)
		number("Teff", m.TeffK, err)
		q, err := Oscillations(Measured(plx, e), Measured(g, e), Measured(gk, e))
		number("log g", q.LogG.Value, err)
		col, err := GKFromTeff(gk, bprp, Measured(feH, e))
		number("G-K", col, err)
		col, err = BPRPFromTeff(gk, Measured(feH, e), giant)
		number("BP-RP", col, err)
		v, err := Law(gk, bprp)
		number("law", v, err)
		LogG(Measured(plx, e), g, gk)
		ColumnFraction(plx, sinB)
	})
}

// BenchmarkStar: a star from its catalogue to log g; 30 microseconds are
// allowed.
func BenchmarkStar(b *testing.B) {
	for name, errMas := range map[string]float64{"good parallax": 0.03, "poor parallax": 0.4} {
		b.Run(name, func(b *testing.B) {
			sinBeta := SinEclipticLatitude(astro.Deg(280), astro.Deg(40))
			for b.Loop() {
				p, err := Correct(2, errMas, Solution{Release: GaiaDR3, GMag: 9, NuEff: 1.4, SinBeta: sinBeta})
				if err != nil {
					b.Fatal(err)
				}
				d, err := Distance(DistancePrior{PlxMas: p.Mas, ErrMas: p.ErrMas})
				if err != nil {
					b.Fatal(err)
				}
				ebv := MapEBV(0.2 * ColumnFraction(d.Q50, 0.3)).True()
				u, err := Dereddened(GaiaDR3, 1.4, ebv)
				if err != nil {
					b.Fatal(err)
				}
				c := Colours{BPRP: Measured(u.BPRP0, 0.01), GK: Measured(2.5-ebv.Map().EGK(u.BPRP0), 0.03)}
				teff, _, err := TeffFromColours(c, Measured(-0.1, 0.1), true)
				if err != nil {
					b.Fatal(err)
				}
				l, _, err := LogLFromG(9-d.Modulus().Value-u.A.AG, teff.TeffK)
				if err != nil {
					b.Fatal(err)
				}
				LogG(Measure{}, l, teff.TeffK)
			}
		})
	}
}
