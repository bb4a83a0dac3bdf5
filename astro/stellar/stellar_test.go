package stellar

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
)

// inputs are the cells of one row of testdata/astro/stellar.csv.
type inputs struct {
	t       *testing.T
	row     check.Row
	a, b, c float64
}

// solid fails the test on an error.
func (in inputs) solid(v float64, err error) float64 {
	in.t.Helper()
	if err != nil {
		in.t.Errorf("%s: %v", in.row.Where(), err)
	}
	return v
}

// got evaluates one row.
func got(t *testing.T, row check.Row) float64 {
	num := func(name string) float64 {
		if row.Empty(name) {
			return math.NaN()
		}
		return row.Float(name)
	}
	in := inputs{t, row, num("a"), num("b"), num("c")}
	if v, ok := in.place(row.String("formula")); ok {
		return v
	}
	if v, ok := in.physics(row.String("formula")); ok {
		return v
	}
	t.Fatalf("%s: no formula %q", row.Where(), row.String("formula"))
	return math.NaN()
}

// place is distance and dust.
func (in inputs) place(formula string) (float64, bool) {
	a, b, c, solid := in.a, in.b, in.c, in.solid
	switch formula {
	case "zeropoint_uas":
		z, err := ZeroPoint(Solution{Release: GaiaDR3, GMag: a, NuEff: b, SinBeta: c})
		return solid(1000*z.Mas, err), true
	case "distance_mode":
		d, err := Distance(DistancePrior{PlxMas: a, ErrMas: b})
		return solid(d.ModeKpc, err), true
	case "distance_q":
		d, err := Distance(DistancePrior{PlxMas: a, ErrMas: b})
		return solid(d.Quantile(c), err), true
	case "dr2_kg", "dr2_kbp_krp", "dr3_kg", "dr3_kbp_krp":
		release := map[string]Release{"dr2": GaiaDR2, "dr3": GaiaDR3}[formula[:3]]
		k, ok := Coefficients(release, a, b)
		if !ok {
			in.t.Errorf("%s: out of range", in.row.Where())
		}
		if strings.HasSuffix(formula, "_kg") {
			return k.AG, true
		}
		return k.EBPRP(), true
	case "law_per_ebv":
		return solid(LawPerEBV(a, 3.1)), true
	case "law":
		return solid(Law(a, 3.1)), true
	case "egk_per_map":
		return MapEBV(1).EGK(a), true
	}
	return 0, false
}

// physics is temperatures and luminosities.
func (in inputs) physics(formula string) (float64, bool) {
	a, b, c, solid := in.a, in.b, in.c, in.solid
	teff := func(e TeffEstimate, err error) float64 { return solid(e.TeffK, err) }
	colour, feH := Measured(a, 0), Measured(b, 0)
	switch formula {
	case "bprp_dwarf":
		return teff(TeffFromBPRP(colour, feH, false)), true
	case "bprp_giant":
		return teff(TeffFromBPRP(colour, feH, true)), true
	case "bv_giant":
		return teff(TeffFromBV(colour, feH, true)), true
	case "vk_giant":
		return teff(TeffFromVK(colour, feH, true)), true
	case "bv_dwarf_plain":
		return teff(TeffFromBV(colour, feH, false)) - poly(a, bvDwarf.extra...), true
	case "vk_dwarf_plain":
		return teff(TeffFromVK(colour, feH, false)) - poly(a, vkDwarf.extra...), true
	case "bv_dwarf_gain":
		plain := bvDwarf
		plain.extra = nil
		return teff(TeffFromBV(colour, feH, false)) - plain.teff(a, b), true
	case "vk_dwarf_gain":
		plain := vkDwarf
		plain.extra = nil
		return teff(TeffFromVK(colour, feH, false)) - plain.teff(a, b), true
	case "gk_giant":
		return teff(TeffFromGK(colour, b, Measured(c, 0))), true
	case "gk_inverse":
		return solid(GKFromTeff(a, b, Measured(c, 0))), true
	case "bcg":
		bc, _, err := BCG(a)
		return solid(bc, err), true
	case "bcg_step":
		warm, _, err := BCG(a)
		cool, _, err2 := BCG(a - 1e-9)
		return math.Abs(solid(warm, err) - solid(cool, err2)), true
	case "bcv":
		return solid(BCV(a)), true
	case "agb_limit":
		return solid(AGBLimit(a)), true
	}
	return 0, false
}

// rows checks the rows of testdata/astro/stellar.csv for some formulas.
func rows(t *testing.T, least int, prefixes ...string) {
	t.Helper()
	n := 0
	for _, row := range check.Table(t, "testdata/astro/stellar.csv").Rows() {
		for _, p := range prefixes {
			if strings.HasPrefix(row.String("formula"), p) {
				n++
				check.Near(t, got(t, row), row.Float("want"), row.Float("tol"), "%s: %s", row.Where(), row.String("formula"))
			}
		}
	}
	if n < least {
		t.Errorf("%d rows of %v, want %d", n, prefixes, least)
	}
}

func TestZeroPoint(t *testing.T) {
	rows(t, 3, "zeropoint_uas")
	for _, c := range []struct {
		s         Solution
		mas, eMas float64
	}{
		{Solution{Release: GaiaDR2, GMag: 12}, -0.040, 0.0115},
		{Solution{Release: GaiaDR2, GMag: 12, KeplerField: true}, -0.052, 0.0115},
		{Solution{Release: Hipparcos}, 0, 0},
		{Solution{Release: Corrected}, 0, 0},
		{Solution{Release: Other}, 0, 0},
		{Solution{Release: GaiaDR3, GMag: 10, SinBeta: 0.5, Giant: true}, -0.03224, 0.015}, // 1.45 assumed
		{Solution{Release: GaiaDR3, GMag: 10, SinBeta: 0.5, NuEff: math.NaN(), Giant: true}, -0.03224, 0.015},
	} {
		z, err := ZeroPoint(c.s)
		if err != nil {
			t.Errorf("%+v: %v", c.s, err)
		}
		check.Near(t, z.Mas, c.mas, 6e-6, "zero point of %+v", c.s)
		check.Near(t, z.ErrMas, c.eMas, 1e-12, "error of the zero point of %+v", c.s)
	}
	other, err := ZeroPoint(Solution{Release: GaiaDR3, GMag: 10, SinBeta: 0.5})
	same, err2 := ZeroPoint(Solution{Release: GaiaDR3, GMag: 10, SinBeta: 0.5, NuEff: 1.6})
	if err != nil || err2 != nil || other.Mas != same.Mas || other.ErrMas != 0.015 || same.ErrMas != 0 {
		t.Errorf("a star of unknown colour: %+v %v; with 1.6: %+v %v", other, err, same, err2)
	}
	for _, s := range []Solution{{}, {Release: "gaia"}, {Release: GaiaDR3, GMag: math.NaN()}, {Release: GaiaDR3, GMag: 10, SinBeta: 1.5}} {
		if z, err := ZeroPoint(s); !errors.Is(err, ErrInput) {
			t.Errorf("%+v: %+v, %v", s, z, err)
		}
	}
}

// TestErrorFactor: the values that Maiz Apellaniz 2022 gives, his ranges, and
// the least factors for long-period variables.
func TestErrorFactor(t *testing.T) {
	for _, c := range []struct {
		s    Solution
		want float64
	}{
		{Solution{Release: GaiaDR3, GMag: 3}, 2.62},
		{Solution{Release: GaiaDR3, GMag: 8.5}, 2.06},
		{Solution{Release: GaiaDR3, GMag: 9}, 1.86},
		{Solution{Release: GaiaDR3, GMag: 12.75}, 1.92},
		{Solution{Release: GaiaDR3, GMag: 21}, 1.14},
		{Solution{Release: GaiaDR3, GMag: 17.75, SixParameter: true}, 1.425},
		{Solution{Release: GaiaDR3, GMag: math.NaN()}, 1},
		{Solution{Release: GaiaDR3, GMag: 7.5, LongPeriod: true}, 2.38}, // k is larger
		{Solution{Release: GaiaDR3, GMag: 15.75, LongPeriod: true}, 1.5},
		{Solution{Release: GaiaDR2, GMag: 7, LongPeriod: true}, 2},
		{Solution{Release: GaiaDR2, GMag: 12}, 1},
		{Solution{Release: Hipparcos, GMag: 7, LongPeriod: true}, 1},
	} {
		check.Near(t, ErrorFactor(c.s), c.want, 1e-12, "factor of %+v", c.s)
	}
	for _, r := range []struct{ lo, hi, least, most float64 }{{9.5, 11, 1.1, 1.7}, {13.3, 17, 1.1, 1.7}, {11.2, 12.9, 1.7, 2.0}, {3, 8.6, 2, 3}} {
		for g := r.lo; g <= r.hi; g += 0.1 {
			if k := ErrorFactor(Solution{Release: GaiaDR3, GMag: g}); k < r.least || k > r.most {
				t.Errorf("k(%g) = %g is outside the abstract's %g to %g", g, k, r.least, r.most)
			}
		}
	}
	p, err := Correct(1, 0.02, Solution{Release: GaiaDR3, GMag: 17.75, NuEff: 1.5})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, p.ErrMas, math.Hypot(0.0228, 0.0103), 1e-12, "error with factor and floor")
	check.Near(t, p.Mas, 1-p.Zero.Mas, 1e-15, "the zero point is taken off")
	if p, err = Correct(1, 0.02, Solution{Release: Corrected}); err != nil || p.Mas != 1 || p.ErrMas != 0.02 {
		t.Errorf("a corrected parallax: %+v, %v", p, err)
	}
	for _, e := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if _, err := Correct(1, e, Solution{Release: Other}); !errors.Is(err, ErrInput) {
			t.Errorf("error of %g mas: %v", e, err)
		}
	}
}

// TestSinEclipticLatitude: the poles, the equinox, the solstice.
func TestSinEclipticLatitude(t *testing.T) {
	for _, c := range []struct{ ra, dec, deg float64 }{
		{0, 0, 0}, {180, 0, 0}, {90, 23.4392911, 0}, {270, 90 - 23.4392911, 90}, {90, -(90 - 23.4392911), -90}, {0, 90, 90 - 23.4392911},
	} {
		check.Near(t, SinEclipticLatitude(astro.Deg(c.ra), astro.Deg(c.dec)), math.Sin(c.deg*math.Pi/180), 1e-9, "sin(beta) at %v %v", c.ra, c.dec)
	}
}

func TestDistance(t *testing.T) {
	rows(t, 20, "distance")
	d, err := Distance(DistancePrior{PlxMas: -5, ErrMas: 0.2})
	if err != nil || !d.Doubtful {
		t.Errorf("a parallax of -25 errors: %+v, %v", d.Doubtful, err)
	}
	for _, p := range []DistancePrior{{}, {PlxMas: 1}, {PlxMas: 1, ErrMas: -1}, {PlxMas: math.NaN(), ErrMas: 1},
		{PlxMas: 1, ErrMas: math.Inf(1)}, {PlxMas: 1, ErrMas: 1, ScaleKpc: -1}, {PlxMas: 1, ErrMas: 1, ScaleKpc: math.NaN()}} {
		if _, err := Distance(p); !errors.Is(err, ErrInput) {
			t.Errorf("%+v: %v", p, err)
		}
	}
	if v := (Distances{}).Quantile(0.5); !math.IsNaN(v) {
		t.Errorf("the median of nothing is %v", v)
	}
	if i := d.Interval(0.9); !i.Valid() || i.Lo != d.Quantile((1-0.9)/2) {
		t.Errorf("interval %+v", i)
	}
}

// brute returns quantiles of the posterior from 30,000 distances.
func brute(p DistancePrior, probs ...float64) []float64 {
	const n = 30000
	step := math.Log(3e4) / (n - 1)
	density := make([]float64, n)
	most := math.Inf(-1)
	for i := range density {
		x := math.Log(1e-3) + step*float64(i)
		r := math.Exp(x)
		d := (p.PlxMas - 1/r) / p.ErrMas
		density[i] = 3*x - r/p.ScaleKpc - d*d/2
		most = math.Max(most, density[i])
	}
	cum := make([]float64, n)
	for i := range density {
		density[i] = math.Exp(density[i] - most)
		if i > 0 {
			cum[i] = cum[i-1] + (density[i-1]+density[i])/2
		}
	}
	out := make([]float64, len(probs))
	for k, q := range probs {
		i := 1
		for cum[i] < q*cum[n-1] {
			i++
		}
		f := (q*cum[n-1] - cum[i-1]) / (cum[i] - cum[i-1])
		out[k] = math.Exp(math.Log(1e-3) + step*(float64(i-1)+f))
	}
	return out
}

// TestDistanceProperty holds the grids against one a hundred times as fine:
// within a thirtieth of the half-width, and the peak is one.
func TestDistanceProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		p := DistancePrior{
			PlxMas:   rapid.Float64Range(-0.5, 5).Draw(rt, "plx"),
			ErrMas:   math.Exp(rapid.Float64Range(math.Log(0.008), 0).Draw(rt, "ln err")),
			ScaleKpc: rapid.Float64Range(0.1, 3).Draw(rt, "scale"),
		}
		d, err := Distance(p)
		if err != nil {
			rt.Fatal(err)
		}
		if d.Doubtful {
			return // it all piles up at the far end of the grid
		}
		want := brute(p, 0.05, 0.16, 0.5, 0.84, 0.95)
		tol := (want[3]-want[1])/60 + 1e-4*want[2]
		for i, v := range []float64{d.Q05, d.Q16, d.Q50, d.Q84, d.Q95} {
			if !(math.Abs(v-want[i]) <= tol) {
				rt.Fatalf("%+v: quantile %d is %g, want %g within %g", p, i, v, want[i], tol)
			}
		}
		lnP := func(r float64) float64 {
			x := (p.PlxMas - 1/r) / p.ErrMas
			return 2*math.Log(r) - r/p.ScaleKpc - x*x/2
		}
		m := d.ModeKpc
		if !(m > 0) || lnP(m) < lnP(m*1.001)-1e-9 || lnP(m) < lnP(m/1.001)-1e-9 {
			rt.Fatalf("%+v: %g kpc is no peak", p, m)
		}
		sum := 0.0
		for i, w := range d.W {
			sum += w
			if i > 0 && !(d.R[i] > d.R[i-1]) {
				rt.Fatalf("distances do not increase at %d", i)
			}
		}
		if math.Abs(sum-1) > 1e-12 {
			rt.Fatalf("weights sum to %g", sum)
		}
	})
}

// TestExpect: for a good parallax the modulus is that of 1/w give or take
// 2.17 err/w; a constant comes out as itself.
func TestExpect(t *testing.T) {
	d, err := Distance(DistancePrior{PlxMas: 10, ErrMas: 0.05})
	if err != nil {
		t.Fatal(err)
	}
	m := d.Modulus()
	check.Near(t, m.Value, 5, 0.001, "modulus at 100 pc")
	check.Near(t, m.Err, 2.1715*0.005, 2e-5, "its error")
	poor, err := Distance(DistancePrior{PlxMas: 1, ErrMas: 0.3})
	if err != nil {
		t.Fatal(err)
	}
	fast, slow := poor.Modulus(), poor.Expect(ModulusAt)
	check.Near(t, fast.Value, slow.Value, 1e-9, "modulus of a poor parallax")
	check.Near(t, fast.Err, slow.Err, 1e-9, "its error")
	c := d.Expect(func(float64) float64 { return 7 })
	check.Near(t, c.Value, 7, 1e-12, "a constant")
	check.Near(t, c.Err, 0, 1e-9, "its spread")
	if d.Expect(func(float64) float64 { return math.NaN() }).Known {
		t.Error("not a number was taken for one")
	}
	if (Distances{}).Modulus().Known {
		t.Error("no grid has a modulus")
	}
}
