package degenerate

import (
	"errors"
	"math"
	"strings"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
)

// placed is a star of an absolute magnitude and colour at 100 pc, without dust,
// its distance known to a thousandth.
func placed(absG, colour float64) Seen {
	return Seen{GMag: absG + 5, GErrMag: 0.001, HasBPRP: true, BPRPMag: colour, BPRPErrMag: 0.001, ParallaxMas: 10, ParallaxErrMas: 0.01}
}

func says(a Answer, words string) bool {
	return strings.Contains(strings.Join(a.Notes, "\n"), words)
}

// Two rows of the tables of Bedard et al. 2020, found again.
func TestFitCheckValues(t *testing.T) {
	m := models()
	a, err := m.Fit(placed(12.173, 0.134), FlatPrior, Hydrogen)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, a.TeffK.Mid, 10000, 50, "Teff")
	check.Near(t, a.MassMsun.Mid, 0.60, 0.005, "mass")
	check.Near(t, a.LogG.Mid, 8.00, 0.01, "log g")
	check.Near(t, a.CoolingAgeYr.Mid/1e9, 0.63, 0.01, "age, Gyr")
	check.Near(t, a.RadiusRsun.Mid, 0.0128, 0.0001, "radius")
	check.Near(t, math.Log10(a.LumLsun.Mid), -2.83, 0.01, "log L")
	check.Near(t, a.AbsMag, 12.173, 0.002, "M_G")
	check.Near(t, a.BPRP0Mag, 0.134, 1e-9, "colour")
	check.Near(t, a.DistancePc, 100, 0.01, "distance")
	for _, i := range []astro.Interval{a.TeffK, a.MassMsun, a.LogG, a.RadiusRsun, a.LumLsun, a.CoolingAgeYr} {
		if !i.Valid() || i.Level != 0.68 {
			t.Errorf("%+v", i)
		}
	}
	// 0.01 mag in colour is 1.0 per cent at 10 000 K, with 0.014 solar masses.
	check.Near(t, (a.TeffK.Hi-a.TeffK.Lo)/2/a.TeffK.Mid, 0.010, 0.0015, "error of Teff")
	check.Near(t, (a.MassMsun.Hi-a.MassMsun.Lo)/2, 0.016, 0.003, "error of the mass")
	if len(a.Solutions) != 1 || a.HeliumCore || a.IntervalOnly || !says(a, "cannot tell DA from DB") || !says(a, "helium fit beside") {
		t.Errorf("%+v", a)
	}
	a, err = m.Fit(placed(13.205, 0.147), FlatPrior, Hydrogen)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, a.TeffK.Mid, 10000, 50, "Teff of the heavy one")
	check.Near(t, a.MassMsun.Mid, 1.0, 0.005, "mass of the heavy one")
	check.Near(t, a.CoolingAgeYr.Mid/1e9, 2.0, 0.06, "age of the heavy one, Gyr")
}

// The wide prior moves a star of 0.75 solar masses down by no more than a
// narrow one would, and a typical one hardly at all.
func TestPriors(t *testing.T) {
	m := models()
	for _, c := range []struct{ mass, least, most float64 }{{0.6, -0.006, 0.006}, {0.75, -0.03, 0}, {1.1, -0.03, 0.01}} {
		s := star(t, m, Hydrogen, 12000, c.mass, 150, 0.1)
		flat, err := m.Fit(s, FlatPrior, Hydrogen)
		if err != nil {
			t.Fatal(err)
		}
		wide, err := m.Fit(s, WidePrior, Hydrogen)
		if err != nil {
			t.Fatal(err)
		}
		if d := wide.MassMsun.Mid - flat.MassMsun.Mid; d < c.least || d > c.most {
			t.Errorf("%g solar masses: moved by %.4f, want %g to %g", c.mass, d, c.least, c.most)
		}
	}
}

func TestFitSaysWhatItMust(t *testing.T) {
	m := models()
	fit := func(s Seen, c Composition) Answer {
		t.Helper()
		a, err := m.Fit(s, WidePrior, c)
		if err != nil {
			t.Fatal(err)
		}
		return a
	}
	a := fit(star(t, m, Hydrogen, 9000, 0.35, 60, 0.03), Hydrogen)
	if !a.HeliumCore || !says(a, "He core, mass +-0.06, age not given") || a.CoolingAgeYr.Valid() ||
		a.MassMsun.Hi-a.MassMsun.Mid < 0.06 || a.MassMsun.Mid-a.MassMsun.Lo < 0.06 {
		t.Errorf("helium core: %+v", a)
	}
	a = fit(star(t, m, Hydrogen, 40000, 0.6, 60, 0.03), Hydrogen)
	if !a.IntervalOnly || !says(a, "above 30 000 K") || a.TeffK.Hi/a.TeffK.Lo < 1.05 {
		t.Errorf("hot: %+v", a)
	}
	a = fit(star(t, m, Hydrogen, 3300, 0.6, 20, 0.05), Hydrogen)
	if len(a.Solutions) != 2 || !says(a, "2 solutions") {
		t.Fatalf("turn: %+v", a)
	}
	if s := a.Solutions; s[0].TeffK > 3400 || s[1].TeffK < 3500 || math.Abs(s[0].Share+s[1].Share-1) > 0.02 || s[0].MassMsun >= s[1].MassMsun {
		t.Errorf("turn: %+v", s)
	}
	a = fit(star(t, m, Hydrogen, 9000, 0.8, 60, 0.03), Hydrogen)
	if !says(a, "helium-rich DC") {
		t.Errorf("DC hint: %q", a.Notes)
	}
	a = fit(star(t, m, Helium, 9000, 0.6, 60, 0.03), Helium)
	if !says(a, FromMemory) || says(a, "DA from DB") {
		t.Errorf("helium: %q", a.Notes)
	}
	// Far too faint for its colour, but not out of reach.
	s := star(t, m, Hydrogen, 9000, 1.29, 60, 0.03)
	s.GMag += 0.25
	if a, err := m.Fit(s, WidePrior, Hydrogen); err != nil || !says(a, "no model fits well") {
		t.Errorf("poor fit: %v, chi² %.1f, %q", err, a.Chi2, a.Notes)
	}
}

func TestDCHint(t *testing.T) {
	ratio, words, ok := DCHint(8000, 0.8)
	if !ok || ratio != 4 || !strings.Contains(words, "mass 0.7-0.9 if hydrogen; a helium-rich DC of normal mass fits too") {
		t.Errorf("%g %q %v", ratio, words, ok)
	}
	for _, c := range [][2]float64{{8000, 0.6}, {5000, 0.8}, {12000, 0.8}, {8000, 1.1}, {math.NaN(), 0.8}, {8000, math.NaN()}} {
		if _, _, ok := DCHint(c[0], c[1]); ok {
			t.Errorf("%v passed", c)
		}
	}
}

// Other ways in: V with spectra, spectra alone, G with a temperature.
func TestFitFromSpectra(t *testing.T) {
	m := models()
	v, err := m.At(15000, 0.72, Hydrogen)
	if err != nil {
		t.Fatal(err)
	}
	for name, s := range map[string]Seen{
		"spectra alone":                 {TeffK: 15000, TeffErrK: 150, LogG: v.LogG, LogGErr: 0.04},
		"V and temperature":             {VMag: v.MVMag + 2.5, VErrMag: 0.02, ParallaxMas: 1000 / math.Pow(10, 1.5), ParallaxErrMas: 0.05, TeffK: 15000, TeffErrK: 150},
		"G and temperature":             {GMag: v.MGMag + 2.5, GErrMag: 0.003, ParallaxMas: 1000 / math.Pow(10, 1.5), ParallaxErrMas: 0.05, TeffK: 15000, TeffErrK: 150},
		"colour and gravity":            {HasBPRP: true, BPRPMag: v.BPRPMag, BPRPErrMag: 0.005, LogG: v.LogG, LogGErr: 0.05},
		"spectra, G without a distance": {GMag: 15, TeffK: 15000, TeffErrK: 150, LogG: v.LogG, LogGErr: 0.04},
		"all": {GMag: v.MGMag + 2.5, ParallaxMas: 1000 / math.Pow(10, 1.5), ParallaxErrMas: 0.05, HasBPRP: true, BPRPMag: v.BPRPMag,
			TeffK: 15000, TeffErrK: 150, LogG: v.LogG, LogGErr: 0.04},
	} {
		a, err := m.Fit(s, FlatPrior, Hydrogen)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		check.Near(t, a.TeffK.Mid, 15000, 100, "%s: Teff", name)
		check.Near(t, a.MassMsun.Mid, 0.72, 0.006, "%s: mass", name)
		check.Near(t, a.CoolingAgeYr.Mid/v.CoolingAgeYr, 1, 0.06, "%s: age", name)
		if len(a.Solutions) != 1 || !a.MassMsun.Valid() {
			t.Errorf("%s: %+v", name, a)
		}
	}
}

// A posterior given as distances says the same as the parallax it came from,
// also where its steps are coarse: 300 of them from 1 pc to 30 kpc.
func TestFitFromDistances(t *testing.T) {
	m := models()
	s := star(t, m, Hydrogen, 11000, 0.65, 180, 0.3)
	want, err := m.Fit(s, FlatPrior, Hydrogen)
	if err != nil {
		t.Fatal(err)
	}
	for k := range 300 {
		r := math.Pow(10, 4.477*float64(k)/299)
		d := (s.ParallaxMas - 1000/r) / s.ParallaxErrMas
		s.Distances = append(s.Distances, Distance{r, math.Exp(-d*d/2) / r}) // normal in the parallax, per log r
	}
	got, err := m.Fit(s, FlatPrior, Hydrogen)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, got.TeffK.Mid/want.TeffK.Mid, 1, 0.003, "Teff")
	check.Near(t, got.MassMsun.Mid, want.MassMsun.Mid, 0.005, "mass")
	check.Near(t, (got.MassMsun.Hi-got.MassMsun.Lo)/(want.MassMsun.Hi-want.MassMsun.Lo), 1, 0.05, "width")
	s.Distances = []Distance{{180, 1}}
	if a, err := m.Fit(s, FlatPrior, Hydrogen); err != nil || math.Abs(a.MassMsun.Mid-0.65) > 0.01 {
		t.Errorf("one distance: %+v %v", a.MassMsun, err)
	}
}

func TestFitRefuses(t *testing.T) {
	m := models()
	good := placed(12.173, 0.134)
	for name, c := range map[string]struct {
		change func(*Seen)
		want   error
	}{
		"no colour":        {func(s *Seen) { s.HasBPRP = false }, ErrTooLittle},
		"nothing":          {func(s *Seen) { *s = Seen{} }, ErrTooLittle},
		"no distance":      {func(s *Seen) { s.ParallaxErrMas = 0 }, ErrDistance},
		"no weight":        {func(s *Seen) { s.Distances = []Distance{{100, 0}} }, ErrDistance},
		"empty":            {func(s *Seen) { s.Distances = []Distance{} }, ErrDistance},
		"magnitude NaN":    {func(s *Seen) { s.GMag = math.NaN() }, ErrNotANumber},
		"colour infinite":  {func(s *Seen) { s.BPRPMag = math.Inf(1) }, ErrNotANumber},
		"a negative error": {func(s *Seen) { s.GErrMag = -1 }, ErrNotANumber},
		"the Sun":          {func(s *Seen) { s.GMag, s.BPRPMag = 9.67, 0.82 }, ErrNoModel},
		"absurd":           {func(s *Seen) { s.BPRPMag = 9 }, ErrNoModel},
	} {
		s := good
		c.change(&s)
		if _, err := m.Fit(s, WidePrior, Hydrogen); !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
	if _, err := m.Fit(good, Prior(7), Hydrogen); err != ErrNotANumber {
		t.Errorf("no such prior: %v", err)
	}
	if _, err := m.Fit(good, FlatPrior, Composition(-1)); err != ErrNotANumber {
		t.Errorf("no such composition: %v", err)
	}
}

func TestDust(t *testing.T) {
	plane, pole := Dust(astro.Deg(0)), Dust(astro.Deg(-90))
	check.Near(t, plane(1000), 0.5, 1e-9, "a kiloparsec in the plane")
	check.Near(t, pole(1e6), 0.0625, 1e-9, "all of it at the pole")
	check.Near(t, pole(125), 0.0625*(1-1/math.E), 1e-9, "a scale height up")
	check.Near(t, Dust(astro.Deg(1e-9))(300), 0.15, 1e-9, "almost in the plane")
	if plane(-1) != 0 || plane(math.NaN()) != 0 || Dust(astro.Deg(math.NaN()))(100) != 0 {
		t.Error("no distance, no dust")
	}
	check.Near(t, Uniform(0.1)(5), 0.31, 1e-12, "E(B-V) 0.1")
	ag, e := GaiaExtinction(1)
	check.Near(t, ag, 0.87, 1e-12, "A_G")
	check.Near(t, e, 0.49*0.87, 1e-12, "E(BP-RP)")
	if Uniform(-1)(5) != 0 || Uniform(math.NaN())(5) != 0 {
		t.Error("no reddening, no dust")
	}
}

// Places with known latitudes: the Galaxy's centre (Sgr A*), its north pole, and
// the pole of the sky, b = 27.1283.
func TestGalacticLatitude(t *testing.T) {
	for _, c := range []struct{ ra, dec, b, tol float64 }{
		{266.41683, -29.00781, -0.0462, 0.0002}, {192.85948, 27.12825, 90, 0.001}, {0, 90, 27.12825, 1e-6},
		{86.40499, 28.93617, 0, 0.0003}, {12.85948, -27.12825, -90, 0.001}} {
		check.Near(t, GalacticLatitude(astro.Deg(c.ra), astro.Deg(c.dec)).Deg(), c.b, c.tol, "b of %g %g", c.ra, c.dec)
	}
}

func TestFromParallax(t *testing.T) {
	mean := func(all []Distance) (r, sum float64) {
		for k, d := range all {
			r += d.Pc * d.Weight
			sum += d.Weight
			if k > 0 && d.Pc <= all[k-1].Pc {
				t.Errorf("out of order at %d", k)
			}
		}
		return r, sum
	}
	all, err := FromParallax(10, 0.05)
	if err != nil {
		t.Fatal(err)
	}
	r, sum := mean(all)
	check.Near(t, sum, 1, 1e-12, "sum")
	check.Near(t, r, 100*(1+0.005*0.005), 1e-3, "mean at 200 sigma")
	// The weak form keeps the mode of r³/L - 2r² + w r/s² - 1/s² = 0, r in kpc.
	for _, c := range []struct{ w, s float64 }{{5, 1}, {1, 0.5}, {-0.5, 0.5}, {0, 1}, {20, 3}} {
		all, err := FromParallax(c.w, c.s)
		if err != nil {
			t.Fatal(err)
		}
		best, at := 0.0, 0.0
		for k := range all {
			if p := all[k].Weight / all[k].Pc; p > best {
				best, at = p, all[k].Pc/1000
			}
		}
		l := 0.2
		f := func(r float64) float64 { return r*r*r/l - 2*r*r + c.w*r/(c.s*c.s) - 1/(c.s*c.s) }
		if f(at*0.9) > 0 || f(at*1.1) < 0 {
			t.Errorf("parallax %g +- %g: mode %.4f kpc is not the root: %.4g, %.4g", c.w, c.s, at, f(at*0.9), f(at*1.1))
		}
	}
	for _, bad := range [][2]float64{{10, 0}, {10, -1}, {math.NaN(), 1}, {10, math.Inf(1)}, {10, math.NaN()}} {
		if _, err := FromParallax(bad[0], bad[1]); err != ErrDistance {
			t.Errorf("%v: %v", bad, err)
		}
	}
}

// Whatever is given, a fit answers with valid intervals or an error.
func FuzzFit(f *testing.F) {
	f.Add(17.1, 0.13, 10.0, 0.1, 0.0, 0.0, 0.3, uint8(0))
	f.Add(15.0, -0.5, 0.3, 0.3, 12000.0, 8.0, -0.1, uint8(3))
	f.Add(12.0, 1.6, 200.0, 1e-9, 0.0, 9.4, 1.5, uint8(1))
	f.Add(1e300, 0.1, 1e-300, 1e-300, 1e5, 6.5, 0.0, uint8(2))
	f.Fuzz(func(t *testing.T, g, colour, plx, plxErr, teff, logG, b float64, kind uint8) {
		m := models()
		s := Seen{GMag: g, GErrMag: 0.003, HasBPRP: kind&4 == 0, BPRPMag: colour, BPRPErrMag: 0.01, ParallaxMas: plx, ParallaxErrMas: plxErr,
			TeffK: teff, TeffErrK: 200, LogG: logG, LogGErr: 0.05, AV: Dust(astro.Rad(b))}
		if kind&8 != 0 {
			s.GMag, s.VMag, s.VErrMag = 0, g, 0.02
		}
		a, err := m.Fit(s, Prior(kind&1), Composition(kind>>1&1))
		if err != nil {
			return
		}
		for name, i := range map[string]astro.Interval{"Teff": a.TeffK, "mass": a.MassMsun, "log g": a.LogG, "radius": a.RadiusRsun, "L": a.LumLsun} {
			if !i.Valid() {
				t.Errorf("%s: %+v", name, i)
			}
		}
		if a.CoolingAgeYr.Valid() == a.HeliumCore || len(a.Solutions) == 0 || !finite(a.Chi2, a.AbsMag, a.BPRP0Mag) {
			t.Errorf("%+v", a)
		}
	})
}
