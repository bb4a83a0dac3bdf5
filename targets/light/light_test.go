package light

import (
	"math"
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

// sd^2 = 0.030^2 + 0.012^2 N + (0.0048 N)^2: by hand for N = 0, 10, 44.
func TestPhaseError(t *testing.T) {
	for n, want := range map[float64]float64{0: 0.0300, 10: math.Sqrt(0.0009 + 0.00144 + 0.002304), -44: math.Sqrt(0.0009 + 0.006336 + 0.04460544)} {
		check.Near(t, PhaseError(n), want, 1e-9, "phase error after %g cycles", n)
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
	if f := forecast(star, Ask{Band: "V"}); f.Known {
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

// States are told apart and never averaged.
func TestStates(t *testing.T) {
	for _, c := range []struct{ vartype, likeliest string }{
		{"UGSU", "quiescence"}, {"UGZ", "quiescence"}, {"NR", "quiescence"}, {"AM/XRM", "high state"}, {"NL", "high state"}, {"ZAND", "quiescence"},
	} {
		star := targets.Target{Name: "a", Kind: targets.Interacting, Var: targets.Variability{Type: c.vartype, MagMax: targets.Known(9), MagMin: targets.Known(14), MagBand: "V"}}
		f := forecast(star, Ask{})
		sum := 0.0
		best := f.States[0]
		for _, s := range f.States {
			sum += s.P
			if s.P > best.P {
				best = s
			}
		}
		check.Near(t, sum, 1, 1e-12, "probabilities of %s", c.vartype)
		if best.Name != c.likeliest || f.Mag != best.Mag || len(f.States) < 2 {
			t.Errorf("%s: likeliest %s at %v, median %v", c.vartype, best.Name, best.Mag, f.Mag)
		}
		if f.Lo.Mags() > f.Mag.Mags() || f.Hi.Mags() < f.Mag.Mags() {
			t.Errorf("%s: %v outside %v..%v", c.vartype, f.Mag, f.Lo, f.Hi)
		}
	}
}

// In mid-eclipse by the clock the eclipse is all but certain, a quarter of a
// cycle later all but excluded.
func TestEclipseByTheClock(t *testing.T) {
	star := targets.Target{Name: "a", Kind: targets.Interacting, Place: targets.Place{RA: astro.Deg(60), Dec: astro.Deg(17), EpochJyr: 2000},
		Var: targets.Variability{Type: "EA/WD", MagMax: targets.Known(10), MagMin: targets.Known(12), MagBand: "V", TimeScale: "JD_UTC",
			PeriodD: targets.KnownErr(0.5, 1e-9), EpochMinJD: targets.KnownErr(now.JDUTC()-1000, 1e-5), EclipseMin: targets.Known(40)}}
	f := forecast(star, Ask{})
	if f.States[len(f.States)-1].P < 0.99 {
		t.Errorf("in mid-eclipse: %+v", f.States)
	}
	star.Var.EpochMinJD = targets.KnownErr(now.JDUTC()-1000.125, 1e-5)
	if f := forecast(star, Ask{}); f.States[len(f.States)-1].P > 0.01 {
		t.Errorf("a quarter of a cycle later: %+v", f.States)
	}
	star.Var.PeriodD = targets.KnownErr(0.5, 1e-3) // 2000 cycles: lost
	if f := forecast(star, Ask{}); math.Abs(f.States[len(f.States)-1].P-40.0/720) > 0.01 {
		t.Errorf("an expired ephemeris gives %+v", f.States)
	}
}

// Mira: fresh elements leave the phase uncertain at best, old ones unknown;
// the interval of every level lies within that of a higher one.
func TestLongPeriod(t *testing.T) {
	mira := targets.Target{Name: "m", Kind: targets.LPV, Var: targets.Variability{Type: "M", PeriodD: targets.Known(300),
		EpochMaxJD: targets.Known(now.JDUTC() - 150), MagMax: targets.Known(6), MagMin: targets.Known(13), MagBand: "V"}}
	f := forecast(mira, Ask{})
	if f.Phase.Status != PhaseUncertain || math.Abs(f.Phase.Value-0.5) > 1e-9 {
		t.Errorf("phase %+v", f.Phase)
	}
	if f.Mag.Mags() < 10.5 || f.Mag.Mags() > 12.3 {
		t.Errorf("near minimum, mean 12.08: median %v", f.Mag)
	}
	mira.Var.EpochMaxJD = targets.Known(now.JDUTC() - 300*60)
	if f := forecast(mira, Ask{}); f.Phase.Status != PhaseUnknown || !f.Known {
		t.Errorf("60 cycles on: %+v", f.Phase)
	}
	last := Forecast{}
	for i, level := range []float64{0.3, 0.5, 0.8, 0.95} {
		f := forecast(mira, Ask{Level: level})
		if i > 0 && (f.Lo.Mags() > last.Lo.Mags() || f.Hi.Mags() < last.Hi.Mags()) {
			t.Errorf("level %g: %v..%v does not hold %v..%v", level, f.Lo, f.Hi, last.Lo, last.Hi)
		}
		last = f
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
		if x := m.quantile(q); math.Abs(m.cdf(x)-q) > 1e-4 {
			r.Fatalf("cdf(quantile(%g)) = %g", q, m.cdf(x))
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
		got := NewState(star, stage.Verdict{}, nil).At(now, Ask{Band: targets.Band(band), Level: level})
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

func BenchmarkAt(b *testing.B) {
	mira := targets.Target{Name: "m", Kind: targets.LPV, Var: targets.Variability{Type: "M", PeriodD: targets.Known(300),
		EpochMaxJD: targets.Known(now.JDUTC() - 150), MagMax: targets.Known(6), MagMin: targets.Known(13), MagBand: "V"}}
	s := NewState(mira, stage.Verdict{}, nil)
	for b.Loop() {
		s.At(now, Ask{})
	}
}

// The next event is the next: at most a period ahead, at phase zero, and the
// one after it a period later.
func TestEvents(t *testing.T) {
	star := targets.Target{Name: "a", Kind: targets.Interacting, Place: targets.Place{RA: astro.Deg(60), Dec: astro.Deg(17), EpochJyr: 2000},
		Var: targets.Variability{Type: "EA/WD", MagMax: targets.Known(10), MagMin: targets.Known(12), TimeScale: "BJD_TDB",
			PeriodD: targets.KnownErr(0.37, 1e-9), EpochMinJD: targets.KnownErr(2455000.123, 1e-5)}}
	s := NewState(star, stage.Verdict{}, nil)
	first := s.Next(now)
	if len(first) != 1 || first[0].Kind != "eclipse" || first[0].Status != EventGood {
		t.Fatalf("%+v", first)
	}
	ahead := first[0].At.Sub(now).Hours() / 24
	if ahead < 0 || ahead > 0.3701 {
		t.Errorf("next eclipse %.4f d ahead with a period of 0.37 d", ahead)
	}
	cycles := (first[0].BJDTDB - 2455000.123) / 0.37
	check.Near(t, cycles, math.Round(cycles), 1e-6, "cycles from the epoch to the event")
	second := s.Next(first[0].At.Add(time.Minute))
	check.Near(t, (second[0].BJDTDB-first[0].BJDTDB)/0.37, 1, 1e-6, "periods between two events")

	mira := targets.Target{Name: "m", Kind: targets.LPV, Var: targets.Variability{Type: "M", PeriodD: targets.Known(300),
		EpochMaxJD: targets.Known(now.JDUTC() - 150), MagMax: targets.Known(6), MagMin: targets.Known(13)}}
	max := NewState(mira, stage.Verdict{}, nil).Next(now)
	if len(max) != 1 || max[0].Kind != "maximum" {
		t.Fatalf("%+v", max)
	}
	check.Near(t, max[0].At.Sub(now).Hours()/24, 150, 0.01, "days to the next maximum")
}
