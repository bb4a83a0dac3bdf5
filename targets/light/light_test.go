package light

import (
	"math"
	"sync"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/stage"
)

var now = astro.InstantFrom(time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC), 37, 0, false)

func forecast(t targets.Target, ask Ask) Forecast {
	return NewState(t, stage.Verdict{}, nil).At(now, ask)
}

// The curve of the methods' section 3.3: brightest 3.4, faintest 9.3, rise
// 0.38; six values as printed there, 0.001 mag.
func TestCurve(t *testing.T) {
	for phase, want := range map[float64]float64{0: 3.400, 0.25: 5.467, 0.50: 8.771, 0.62: 9.300, 0.80: 6.594, 0.90: 4.352} {
		check.Near(t, 3.4+(9.3-3.4)*Curve(phase, 0.38), want, 0.0006, "magnitude at phase %g", phase)
	}
}

// The normal distribution: the central 80 % lie within 1.2816 sigma.
func TestConstant(t *testing.T) {
	star := targets.Target{Name: "a", Kind: targets.WD, Mags: map[targets.Band]targets.Measure{"V": targets.KnownErr(13, 0.1)}}
	f := forecast(star, Ask{})
	check.Near(t, f.Mag.Mags(), 13, 1e-5, "median")
	check.Near(t, f.Lo.Mags(), 13-0.12816, 1e-4, "brighter end")
	check.Near(t, f.Hi.Mags(), 13+0.12816, 1e-4, "fainter end")
	if f.Level != 0.8 || f.Band != "V" || f.Basis == "" {
		t.Errorf("%+v", f)
	}
	if f := forecast(star, Ask{Band: "K"}); f.Known || f.Basis == "" {
		t.Errorf("K of a star with V alone: %+v", f)
	}
}

// Riello et al. 2021, appendix C, as worked in sky-and-exposure section 6:
// G = 10 and BP-RP = 0.82 give V = 10.152; outside the range no value.
func TestVisualFromGaia(t *testing.T) {
	star := targets.Target{Name: "a", Kind: targets.Giant, Mags: map[targets.Band]targets.Measure{
		"G": targets.Known(10), "BP": targets.Known(10.40), "RP": targets.Known(9.58)}}
	check.Near(t, forecast(star, Ask{Band: "V"}).Mag.Mags(), 10.152, 0.0006, "V")
	star.Mags["RP"] = targets.Known(5)
	if f := forecast(star, Ask{Band: "V"}); f.Known || f.Basis == "" {
		t.Errorf("BP-RP = 5.4 gives V = %v", f.Mag)
	}
}

// M giants vary: table giants_by_type.csv has M5 at 0.23 mag in Hp.
func TestGiantsVary(t *testing.T) {
	star := targets.Target{Name: "a", Kind: targets.Giant, Physics: targets.Physics{SpType: "M5III"},
		Mags: map[targets.Band]targets.Measure{"V": targets.KnownErr(4, 0.01)}}
	f := forecast(star, Ask{Level: 0.9})
	width := f.Hi.Minus(f.Lo)
	if width < 0.2 || width > 0.4 {
		t.Errorf("90 %% of an M5 giant lie within %.2f mag", width)
	}
}

// Bands follow by published relations with route, error and source, or are
// absent with the reason: never for stars with emission lines.
func TestCarriedBands(t *testing.T) {
	star := targets.Target{Name: "a", Kind: targets.Giant, Physics: targets.Physics{SpType: "M2III"},
		Mags: map[targets.Band]targets.Measure{"V": targets.KnownErr(6, 0.01)}}
	f := forecast(star, Ask{Band: "I"})
	// V-I of M2 giants in the Hipparcos catalogue (ESA 1997): 2.03 +- 0.23
	if !f.Known || math.Abs(f.Mag.Mags()-(6-2.03)) > 0.23 || f.Hi.Minus(f.Lo) < 0.1 {
		t.Errorf("I of an M2 giant of V = 6: %v, %v..%v", f.Mag, f.Lo, f.Hi)
	}
	if s := f.Steps[0]; s.What != "carried to I" || s.Source == "" || s.Inputs == "" {
		t.Errorf("working %+v", s)
	}
	if f := forecast(star, Ask{Band: "W1"}); f.Known || f.Basis == "" {
		t.Errorf("W1: %+v", f)
	}
	star.Kind, star.Var.Type = targets.Interacting, "ZAND"
	if f := forecast(star, Ask{Band: "I"}); f.Known || f.Basis == "" {
		t.Errorf("I of a symbiotic star: %+v", f)
	}
}

// One state serves several goroutines.
func TestTogether(t *testing.T) {
	s := NewState(aMira(150), stage.Verdict{}, miraMags(10, -30, "V"))
	want := s.At(now, Ask{}).Mag
	var all sync.WaitGroup
	for i := range 8 {
		all.Go(func() {
			s.At(now.Add(time.Duration(i)*24*time.Hour), Ask{Band: "B"})
			s.Past()
			s.Next(now)
			if got := s.At(now, Ask{}).Mag; got != want {
				t.Errorf("%v, alone %v", got, want)
			}
		})
	}
	all.Wait()
}

// log F = -10 is magnitude 11.26 (Jacoby 1989, as in stages-and-brightness
// 5.1); over a disc of 20 arcsec, pi 10^2 square arcsec, 6.243 fainter.
func TestNebula(t *testing.T) {
	pn := targets.Target{Name: "n", Kind: targets.PN, Nebula: targets.Nebula{LogF5007: targets.Known(-10), DiamArcsec: targets.Known(20)}}
	f := forecast(pn, Ask{})
	check.Near(t, f.Mag.Mags(), 11.26, 0.001, "line magnitude")
	check.Near(t, f.SB.Value.MagArcsec2(), 11.26+2.5*math.Log10(math.Pi*100), 0.001, "surface brightness")
	check.Near(t, f.Hi.Minus(f.Mag), 1.2816*0.25, 0.001, "0.1 dex is 0.25 mag")
	if f.Band != LineO3 {
		t.Errorf("band %s", f.Band)
	}
	if f := forecast(pn, Ask{Band: "V"}); f.Band != LineO3 || !f.Known {
		t.Errorf("asked in V a nebula answers %+v", f)
	}
	if f := forecast(targets.Target{Kind: targets.PN}, Ask{}); f.Known || f.Basis == "" {
		t.Errorf("a nebula without flux: %+v", f)
	}
}

// Every built-in target gets a forecast or a reason, in order and at its level.
func TestBuiltinForecasts(t *testing.T) {
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	m, silent := stage.NewModels(), 0
	for _, s := range stars {
		f := NewState(s, m.Judge(s), nil).At(now, Ask{})
		if f.Basis == "" {
			t.Errorf("%s: no basis", s.Name)
		}
		if !f.Known {
			silent++
			t.Logf("%s: %s", s.Name, f.Basis)
			continue
		}
		if f.Lo.Mags() > f.Mag.Mags() || f.Mag.Mags() > f.Hi.Mags() {
			t.Errorf("%s: %v outside %v..%v", s.Name, f.Mag, f.Lo, f.Hi)
		}
		if len(f.Steps) == 0 {
			t.Errorf("%s: no working", s.Name)
		}
	}
	if silent > 10 {
		t.Errorf("nothing is said of %d of %d", silent, len(stars))
	}
}

func TestMixtureQuantiles(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		var m mixture
		n := rapid.IntRange(1, 6).Draw(r, "n")
		for range n {
			m = append(m, part{1 / float64(n), rapid.Float64Range(-5, 25).Draw(r, "mean"), rapid.Float64Range(0.01, 3).Draw(r, "sd")})
		}
		q := rapid.Float64Range(0.01, 0.99).Draw(r, "q")
		if x := m.Quantile(q); math.Abs(m.CDF(x)-q) > 1e-4 {
			r.Fatalf("cdf(quantile(%g)) = %g", q, m.CDF(x))
		}
	})
}

func FuzzLight(f *testing.F) {
	f.Add("lpv", "M", 6.0, 13.0, 300.0, 2460000.0, 5.0, 0.8, "V")
	f.Add("interacting", "UGSU+EA", 8.0, 14.0, 0.07, 2450000.0, 1e300, 2.0, "")
	f.Add("pn", "", math.NaN(), math.Inf(1), -1.0, 0.0, 0.0, -1.0, "V")
	f.Fuzz(func(t *testing.T, kind, vt string, max, min, period, epoch, x, level float64, band string) {
		k := targets.Known
		star := targets.Target{Name: "x", Kind: targets.Kind(kind), Mags: map[targets.Band]targets.Measure{"V": k(x), "G": k(max), "BP": k(min), "RP": k(x)},
			Var: targets.Variability{Type: vt, MagMax: k(max), MagMin: k(min), PeriodD: targets.KnownErr(period, x), EpochMaxJD: k(epoch), EpochMinJD: k(epoch), EclipseMin: k(x),
				RiseFraction: k(x), AmplitudeMag: k(x), MagBand: band},
			Nebula: targets.Nebula{LogFHb: k(x), DiamArcsec: k(max), Diam2Arcsec: k(min)}}
		mags := []targets.Magnitude{{JD: x, Band: targets.Band(band), Mag: max, Err: min}, {JD: now.JDUTC() - math.Abs(level), Band: "V", Mag: min, Err: period, Limit: max > 5},
			{JD: epoch, TimeScale: vt, Band: "B", Mag: x}, {JD: now.JDUTC() - 3, Band: "vis", Mag: max}}
		s := NewState(star, stage.Verdict{}, mags)
		if len(s.Past()) != len(mags) {
			t.Fatal("a magnitude is lost")
		}
		for _, e := range s.Next(now) {
			if math.IsNaN(e.SigmaS) || e.At.IsZero() {
				t.Fatalf("%+v", e)
			}
		}
		s.PhaseWindows(astro.Site{}, level, max, now, now.Add(time.Hour))
		got := s.At(now, Ask{Band: targets.Band(band), Level: level})
		if p, ok := got.CDF(astro.Mags(x)); ok && !(p >= 0 && p <= 1) {
			t.Fatalf("CDF %g", p)
		}
		if got.Basis == "" || got.Level <= 0 || got.Level >= 1 {
			t.Fatalf("%+v", got)
		}
		if got.Known && math.IsNaN(got.Mag.Mags()+got.Lo.Mags()+got.Hi.Mags()) {
			t.Fatalf("NaN: %+v", got)
		}
		if got.Known && got.Lo.Mags() > got.Hi.Mags() {
			t.Fatalf("bounds in disorder: %+v", got)
		}
	})
}
