package wander

import (
	"math"
	"testing"

	"evenfall/astro/check"
	"evenfall/astro/numeric"
)

func TestStatus(t *testing.T) {
	for r, want := range map[float64]string{0: PhaseUnknown, 0.59: PhaseUnknown, 0.6: PhaseUncertain, 0.9: PhaseUncertain, 0.91: PhaseKnown, 1: PhaseKnown} {
		if got := Status(r); got != want {
			t.Errorf("R = %g is %s, want %s", r, got, want)
		}
	}
	if Status(math.NaN()) != PhaseUnknown {
		t.Error("not a number is known")
	}
}

// sd^2 = 0.030^2 + 0.012^2 N + (0.0048 N)^2 by hand.
func TestEpochSigma(t *testing.T) {
	for n, want := range map[float64]float64{0: 0.0300, 1: 0.03266, 3: 0.03923, 10: 0.06815, -10: 0.06815, 20: 0.11400, 40: 0.20862, 100: 0.49568} {
		check.Near(t, EpochSigma(n), want, 0.00001, "deviation after %g cycles", n)
	}
}

// What 336 Miras did: the median of |O-C| was 0.026 cycle below 3 cycles (29
// stars), 0.037 from 3 to 10 (13 stars), 0.14 to 0.18 from 20 to 60, and 0.23
// beyond 60, where 0.25 is no knowledge. A median of n stars is good to about
// 1.25 sd/sqrt n: 0.009 and 0.02 for the first two.
func TestEpochResiduals(t *testing.T) {
	e := mira
	e.HasEpoch, e.EpochMaxJD = true, 0
	m, err := newModel(e, BandV)
	must(t, err)
	medianOC := func(cycles float64) float64 {
		sd := EpochSigma(cycles)
		x, err := numeric.Root(func(x float64) float64 {
			inside := 0.0
			for turn := -4.0; turn <= 4; turn++ {
				inside += numeric.NormalCDF((turn+x)/sd) - numeric.NormalCDF((turn-x)/sd)
			}
			return 0.71*inside + 0.29*2*x - 0.5
		}, 0, 0.5, 1e-6)
		must(t, err)
		return x
	}
	for _, c := range []struct{ cycles, want, tol float64 }{{1.5, 0.026, 0.009}, {6, 0.037, 0.02}, {30, 0.16, 0.03}, {45, 0.16, 0.03}, {80, 0.23, 0.015}} {
		check.Near(t, medianOC(c.cycles), c.want, c.tol, "median residual after %g cycles", c.cycles)
	}
	// The density on the grid sums to 1 and lies where the epoch puts it.
	for _, cycles := range []float64{0.3, 5.3, 20.3, -7.7} {
		ln := m.epochLnDensity(cycles * 280)
		sum, best := 0.0, 0
		for i := range ln {
			sum += math.Exp(ln[i]) / nPhase
			if ln[i] > ln[best] {
				best = i
			}
		}
		check.Near(t, sum, 1, 2e-3, "sum of the density after %g cycles", cycles)
		check.Near(t, gridPhase(best), 0.3, 0.5/nPhase+1e-9, "its peak")
	}
	if ln := m.epochLnDensity(1e6); ln[3] != 0 {
		t.Error("after 3600 cycles the epoch still says something")
	}
	e.HasEpoch = false
	if m, _ := newModel(e, BandV); m.epochLnDensity(5) != [nPhase]float64{} {
		t.Error("no epoch, and yet a phase")
	}
}

// sd = 0.015 sqrt G beyond one cycle, none before: nine copies to 2.4 sd have
// 0.957 of the variance of a whole normal distribution.
func TestGapShifts(t *testing.T) {
	f := sampleFilter(t, 3)
	if got := f.gapShifts(300); len(got) != 1 || got[0] != (shift{0, 1}) {
		t.Errorf("one cycle: %v", got)
	}
	got := f.gapShifts(1200)
	if len(got) != 9 {
		t.Fatalf("%d copies", len(got))
	}
	sum, square := 0.0, 0.0
	for _, s := range got {
		sum += s.weight
		square += s.weight * s.cycles * s.cycles
	}
	check.Near(t, sum, 1, 1e-12, "weights")
	check.Near(t, got[8].cycles, 2.4*0.03, 1e-12, "outermost copy after four cycles")
	check.Near(t, math.Sqrt(square), 0.03, 0.002, "spread")
	if near, far := at(t, f, 290), at(t, f, 1490); far.R >= near.R {
		t.Errorf("R grows in a gap, from %.3f to %.3f", near.R, far.R)
	}
}

// The worked star's period is 303 d and its maximum falls at phase 0: of the
// curve cos 2 pi (t/303 + 0.2), next on day 242.4.
func TestMaximum(t *testing.T) {
	fc := at(t, sampleFilter(t, 100), 30)
	check.Near(t, fc.MaximumJD, 242.4, fc.MaximumSigmaD, "next maximum")
	if fc.PhaseStatus != PhaseKnown || fc.MaximumSigmaD < 12 || fc.MaximumSigmaD > 20 {
		t.Errorf("phase %s, maximum +- %.1f d", fc.PhaseStatus, fc.MaximumSigmaD)
	}
	check.Near(t, fc.Phase, 0.2+30.0/303, 0.04, "phase")
	if fc.Rising != -1 {
		t.Errorf("rising %d at phase 0.3", fc.Rising)
	}
	if up := at(t, sampleFilter(t, 100), 200); up.Rising != 1 {
		t.Errorf("rising %d (%.2f) at phase 0.86", up.Rising, up.RisingP)
	}
	loose := at(t, sampleFilter(t, 0), 30)
	if loose.PhaseStatus != PhaseUnknown || loose.MaximumSigmaD < 60 || loose.Rising != 0 {
		t.Errorf("nothing known: %+v", loose)
	}
}
