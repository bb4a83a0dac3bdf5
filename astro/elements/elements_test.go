package elements

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro/check"
)

func ephemeris(t testing.TB, el Elements) *Ephemeris {
	t.Helper()
	e, err := New(el)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

// P = 0.1 d, Pdot = -1e-11, E = 1e5: the quadratic term is -432 s.
func TestQuadratic(t *testing.T) {
	el := Elements{Scale: BJDTDB, Epoch: Value{2455000, 1e-6, false}, Period: Value{0.1, 1e-12, false}}
	line := ephemeris(t, el)
	el.Pdot = Value{Value: -1e-11}
	curve := ephemeris(t, el)
	check.Near(t, (curve.days(1e5)-line.days(1e5))*86400, -432, 1e-4, "quadratic term, P Pdot E^2/2, s")
	check.Near(t, line.Date(1e5), 2465000, 1e-9, "linear date")
}

// s0 = 2e-6 d, sP = 3e-11 d, E = 1e5: 0.31 s. The other terms by hand.
func TestSigma(t *testing.T) {
	el := Elements{Scale: BJDTDB, Epoch: Value{2455000, 2e-6, false}, Period: Value{0.1, 3e-11, false}}
	check.Near(t, ephemeris(t, el).Sigma(1e5)*86400, 0.31, 0.005, "0.31 s after 1e5 cycles")
	el.Cov, el.CovKnown = -6e-17, true // wholly correlated: |s0 - E sP| = 1e-6 d
	check.Near(t, ephemeris(t, el).Sigma(1e5)*86400, 0.0864, 1e-6, "with a covariance")
	check.Near(t, ephemeris(t, el).Sigma(-1e5)*86400, 0.432, 1e-6, "and before the epoch")
	el.CovKnown, el.Middle = false, 2455000+0.1*1e5
	check.Near(t, ephemeris(t, el).Sigma(1e5)*86400, 0.1728, 1e-6, "at the middle of the data")
	check.Near(t, ephemeris(t, el).Sigma(0)*86400, math.Hypot(2, 3)*0.0864, 1e-6, "at the epoch, far from it")
	el.Middle, el.Pdot = 0, Value{0, 2e-15, false} // 0.5 0.1 1e10 2e-15 = 1e-6 d
	check.Near(t, ephemeris(t, el).Sigma(1e5)*86400, math.Sqrt(4+9+1)*0.0864, 1e-6, "with an error of Pdot")
	el.Pdot, el.Jitter = Value{}, 5 // 1e4 d are 2.738 decades: 13.69 s
	check.Near(t, ephemeris(t, el).Sigma(1e5)*86400, 13.69, 0.02, "with 5 s per decade")
	el.Jitter, el.Scale = 0, HJD
	check.Near(t, ephemeris(t, el).Sigma(0)*86400, 35, 0.01, "HJD without its scale")
	for name, want := range map[string]float64{"V471 Tau": 100, "nn_ser": 50, "RX J1": 5} {
		if got := JitterOf(name); got != want {
			t.Errorf("%s: %g s per decade", name, got)
		}
	}
}

// P = 331.96 d, s0 = 3 d, sP = 0.3 d: sigma of maxima 0, 1, 3, 10 cycles on,
// with e = 0.02 P and with the mean 0.0136 P of Turner et al. 2009.
func TestWalk(t *testing.T) {
	const p = 331.96
	for walk, want := range map[float64][4]float64{0.02 * p: {3.00, 7.29, 11.92, 21.42}, WalkOf(p): {3.00, 5.43, 8.42, 14.89}} {
		e := ephemeris(t, Elements{Scale: JDUTC, Epoch: Value{2444839, 3, false}, Period: Value{p, 0.3, false}, Walk: walk})
		for i, n := range []float64{0, 1, 3, 10} {
			check.Near(t, e.Sigma(n), want[i], 0.006, "sigma after %g cycles with e %.2f d", n, walk)
			check.Near(t, e.Sigma(-n), want[i], 0.006, "sigma %g cycles before", n)
		}
		// n e^2 > (P/4)^2: n = 156.25 for 0.02
		if walk > 5 && (e.Lost(156) || !e.Lost(157)) {
			t.Error("lost not between 156 and 157 cycles")
		}
	}
	if WalkOf(math.NaN()) != 0 || WalkSource == "" {
		t.Error("walk of no period")
	}
}

func TestStatus(t *testing.T) {
	el := Elements{Scale: BJDTDB, Epoch: Value{2455000, 1e-6, false}, Period: Value{0.1, 1e-7, false}}
	e := ephemeris(t, el) // sigma over a tenth of 0.1 d after 1e5 cycles
	if s := e.StatusOf(9.9e4); s != Good {
		t.Error(s)
	}
	if s := e.StatusOf(-1.001e5); s != Expired {
		t.Error(s)
	}
	el.Period = Value{Value: 0.1300801417}
	if e := ephemeris(t, el); e.StatusOf(10) != Assumed || len(e.Assumed) != 1 || !strings.Contains(e.Assumed[0], "period") {
		t.Errorf("%s: %v", e.StatusOf(10), e.Assumed)
	}
}

func TestAssumed(t *testing.T) {
	e := ephemeris(t, Elements{Epoch: Value{Value: 2443727.93729}, Period: Value{Value: 0.0736472031}})
	el := e.Elements()
	check.Near(t, el.Epoch.Err, 5e-6, 1e-12, "half a unit of the epoch's last digit")
	check.Near(t, el.Period.Err, 5e-11, 1e-17, "of the period's")
	if len(e.Assumed) != 2 || el.Scale != HJD {
		t.Errorf("%v, %s", e.Assumed, el.Scale)
	}
}

func TestHalfUnit(t *testing.T) {
	for text, want := range map[string]float64{"2443727.93729": 5e-6, "70": 0.5, "1.5e-3": 5e-5, "0.130": 5e-4, " 331.96 ": 5e-3, "2E2": 50, "-1.": 0.5} {
		got, ok := HalfUnit(text)
		if !ok || math.Abs(got/want-1) > 1e-12 {
			t.Errorf("%q: %g, want %g", text, got, want)
		}
	}
	for _, text := range []string{"", "x", "NaN", "inf", "1e999", "0x1p-2", "1_0", "1e-400"} {
		if got, ok := HalfUnit(text); ok {
			t.Errorf("%q: %g", text, got)
		}
	}
}

func TestNewRefuses(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	good := Elements{Scale: HJD, Epoch: Value{Value: 2450000}, Period: Value{Value: 1}}
	for name, spoil := range map[string]func(*Elements){
		"epoch":      func(e *Elements) { e.Epoch.Value = 50000 },
		"epoch nan":  func(e *Elements) { e.Epoch.Value = nan },
		"period 0":   func(e *Elements) { e.Period.Value = 0 },
		"period -1":  func(e *Elements) { e.Period.Value = -1 },
		"period nan": func(e *Elements) { e.Period.Value = nan },
		"period inf": func(e *Elements) { e.Period.Value = inf },
		"pdot":       func(e *Elements) { e.Pdot.Value = 1 },
		"error inf":  func(e *Elements) { e.Epoch.Err = inf },
		"cov":        func(e *Elements) { e.Cov, e.CovKnown = 1, true },
		"cov nan":    func(e *Elements) { e.Cov, e.CovKnown = nan, true },
		"middle":     func(e *Elements) { e.Middle = 5 },
		"middle nan": func(e *Elements) { e.Middle = nan },
	} {
		el := good
		spoil(&el)
		if _, err := New(el); !errors.Is(err, ErrElements) {
			t.Errorf("%s: %v", name, err)
		}
	}
	good.Scale = "TAI"
	if _, err := New(good); !errors.Is(err, ErrScale) {
		t.Errorf("scale: %v", err)
	}
}

func drawElements(r *rapid.T) Elements {
	p := math.Pow(10, rapid.Float64Range(-3, 3).Draw(r, "log period"))
	return Elements{
		Scale: rapid.SampledFrom(Scales).Draw(r, "scale"),
		Epoch: Value{rapid.Float64Range(2415000, 2465000).Draw(r, "epoch"), 1e-5, false}, Period: Value{p, p * 1e-9, false},
		Pdot: Value{Value: rapid.Float64Range(-1e-8, 1e-8).Draw(r, "pdot")},
	}
}

// The cycle of a cycle's date is that cycle.
func TestInverse(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		el := drawElements(r)
		e := ephemeris(t, el)
		cycle := rapid.Float64Range(-50000, 50000).Draw(r, "days") / e.p
		if e.turned(cycle) {
			return
		}
		back, err := e.CycleAt(e.Date(cycle))
		if err != nil || math.Abs(back-cycle)*e.p > 2e-9+1e-8*e.p {
			r.Fatalf("%g came back as %g, %v", cycle, back, err)
		}
	})
}

// Next is the first after: later than the date, the one before is not, and
// the next after it is one cycle on.
func TestNext(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		e := ephemeris(t, drawElements(r))
		phase := rapid.Float64Range(-3, 3).Draw(r, "phase")
		jd := rapid.Float64Range(2400000, 2500000).Draw(r, "jd")
		n, err := e.Next(jd, phase)
		if err != nil {
			r.Fatal(err)
		}
		if !(e.Date(n) > jd) || e.Date(n-1) > jd+1e-8 {
			r.Fatalf("%g: %g to %g", jd, e.Date(n-1), e.Date(n))
		}
		if off := math.Mod(n-phase, 1); math.Abs(off-math.Round(off)) > 1e-6 {
			r.Fatalf("phase %g gives cycle %g", phase, n)
		}
		if after, err := e.Next(e.Date(n)+1e-8, phase); err != nil || math.Abs(after-n-1) > 1e-6 {
			r.Fatalf("after %g comes %g, %v", n, after, err)
		}
	})
	// an epoch itself, and large counts of either sign
	e := ephemeris(t, Elements{Scale: JDUTC, Epoch: Value{Value: 2455000.5}, Period: Value{Value: 0.25}})
	for jd, want := range map[float64]float64{2455000.5: 1, 2455000.499: 0, 2455000.25: 0, 2455000.24: -1, 2455250.5: 1001, 2400000.5: -219999} {
		if n, err := e.Next(jd, 0); err != nil || n != want {
			t.Errorf("after %g: %g, %v; want %g", jd, n, err, want)
		}
	}
	// dates that the quadratic term turns back
	e = ephemeris(t, Elements{Scale: JDUTC, Epoch: Value{Value: 2455000.5}, Period: Value{Value: 1}, Pdot: Value{Value: -0.01}})
	if n, err := e.Next(2455051, 0); !errors.Is(err, ErrNoCycle) {
		t.Errorf("behind the turning point: %g, %v", n, err)
	}
	if _, err := e.Next(math.NaN(), 0); !errors.Is(err, ErrNoCycle) {
		t.Error(err)
	}
	if _, err := e.Next(2455000, math.Inf(1)); !errors.Is(err, ErrNoCycle) {
		t.Error(err)
	}
}

func TestParseScale(t *testing.T) {
	for text, want := range map[string]Scale{"": HJD, " hjd_utc ": HJDUTC, "BJD_TDB": BJDTDB} {
		if got, err := ParseScale(text); err != nil || got != want {
			t.Errorf("%q: %s, %v", text, got, err)
		}
	}
	if _, err := ParseScale("MJD"); !errors.Is(err, ErrScale) {
		t.Error(err)
	}
}
