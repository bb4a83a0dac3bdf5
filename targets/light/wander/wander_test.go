package wander

import (
	"errors"
	"math"
	"strings"
	"testing"

	"evenfall/astro/check"
	"evenfall/astro/numeric"
)

var mira = Elements{Class: Mira, PeriodD: 280, MagMax: 8, MagMin: 14, Band: BandV}

// Level and half amplitude as the measurement on 236 Miras and 52
// semiregulars was published with this project's data, two or three decimals;
// the stars are worked by hand. h = 3 and P = 280 leave the constants alone.
func TestPrior(t *testing.T) {
	with := func(change func(*Elements)) Elements {
		e := mira
		change(&e)
		return e
	}
	lp := math.Log10(400.0 / 280)
	for name, c := range map[string]struct {
		e                  Elements
		level, sd, a, aSD  float64
		driftU1, jitter, w float64
	}{
		"V":           {mira, 11 + 0.112, 0.38, 1.998, 0.29, 0.149 * 1.998 / 2, 0.076, 0.204},
		"V, h 2, 400": {with(func(e *Elements) { e.MagMin, e.PeriodD = 12, 400 }), 10 + 0.112 + 0.046 + 1.085*lp, 0.38, 1.998 - 0.617 - 0.173*lp, 0.29, 0.149 * 1.354 / 2, 0.076, 0.204},
		"p":           {with(func(e *Elements) { e.Band = BandPhotographic }), 11 - 1.746, 0.93, 1.557, 0.40, 0.149 * 1.557 / 2, 0.076, 0.204},
		"p, h 4":      {with(func(e *Elements) { e.Band, e.MagMin = BandPhotographic, 16 }), 12 - 1.746 - 0.131, 0.93, 1.557 + 0.230, 0.40, 0.149 * 1.787 / 2, 0.076, 0.204},
		"no minimum":  {with(func(e *Elements) { e.NoMin = true }), 8 + 2.79, 0.91, 1.606, 0.59, 0.149 * 1.606 / 2, 0.076, 0.204},
		"a limit":     {with(func(e *Elements) { e.MinIsLimit, e.PeriodD = true, 400 }), 8 + 2.79, 0.91, 1.606 + 0.524*lp, 0.59, 0.149 * 1.687 / 2, 0.076, 0.204},
		"p, a limit":  {with(func(e *Elements) { e.MinIsLimit, e.Band = true, BandPhotographic }), 8 + 0.42, 1.08, 1.606, 0.59, 0.149 * 1.606 / 2, 0.076, 0.204},
		"reversed":    {with(func(e *Elements) { e.MagMin = 7 }), 8 + 2.79, 0.91, 1.606, 0.59, 0.149 * 1.606 / 2, 0.076, 0.204},
		"carbon":      {with(func(e *Elements) { e.Carbon = true }), 11 + 0.112 - 1.09, 0.55, 1.998 - 0.35, 0.29, 0.149 * 1.648 / 2, 0.076, 0.204},
		"shallow":     {with(func(e *Elements) { e.MagMin = 8.4 }), 8.2 + 0.112 + 0.046*2.8, 0.38, 0.4, 0.29, 0.149 * 0.4 / 2, 0.076, 0.204},
		"semiregular": {with(func(e *Elements) { e.Class, e.MagMin = Semiregular, 10 }), 9 - 0.615 + 0.277*2, 0.26, 0.653 + 0.075*2, 0.21, 0.14, 0.068, 0.12},
		"SR, clamped": {with(func(e *Elements) { e.Class, e.Band, e.MagMin = Semiregular, BandPhotographic, 16 }), 12 - 2.801 - 0.603, 0.66, 1.3, 0.22, 0.14, 0.068, 0.12},
		"a level":     {with(func(e *Elements) { e.NoMax, e.HasLevel, e.LevelMag = true, true, 9.5 }), 9.5, 1.5, 1.606, 0.6, 0.149 * 1.606 / 2, 0.076, 0.204},
	} {
		m, err := newModel(c.e, BandV)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		const printed = 0.006 // half the last digit of the least precise
		check.Near(t, m.mean[0], c.level, printed, "level, %s", name)
		check.Near(t, math.Sqrt(m.cov[0][0]), c.sd, printed, "its deviation, %s", name)
		check.Near(t, m.mean[1], c.a, printed, "half amplitude, %s", name)
		check.Near(t, math.Sqrt(m.cov[1][1]), c.aSD, printed, "its deviation, %s", name)
		check.Near(t, m.driftSD[1], c.driftU1, 0.001, "phase wander, %s", name)
		check.Near(t, m.driftSD[2], c.w, 1e-9, "fast drift, %s", name)
		check.Near(t, m.jitter, c.jitter, 1e-9, "jitter, %s", name)
		slow, tau := 0.274, [2]float64{0.50, 0.21}
		if c.e.Class == Semiregular {
			slow, tau = 0.18, [2]float64{0.53, 0.10}
		}
		check.Near(t, m.driftSD[0], slow, 1e-9, "slow drift, %s", name)
		check.Near(t, m.tauD[1]/c.e.PeriodD, tau[0], 1e-9, "its time, %s", name)
		check.Near(t, m.tauD[2]/c.e.PeriodD, tau[1], 1e-9, "time of the fast drift, %s", name)
	}
}

// Harmonics of a Mira with A = 2 + 0.617, P = 400 and a rise of 40 per cent.
func TestPriorHarmonics(t *testing.T) {
	e := mira
	e.MagMin, e.PeriodD = 16, 400
	lp := math.Log10(400.0 / 280)
	a := 1.998 + 0.617 - 0.173*lp
	printed := [...][4]float64{{-0.117, -0.432, -0.007, 0.031}, {0.126, 0.150, 0.110, -0.068}, {-0.051, -0.208, 0.012, -0.030}, {0.054, 0.211, 0.028, -0.034}}
	for _, rise := range []float64{0, 0.40} {
		e.RiseFraction = rise
		m, err := newModel(e, BandV)
		if err != nil {
			t.Fatal(err)
		}
		for i, c := range printed {
			want := c[0] + c[1]*lp + c[2]*(a-2)
			if rise > 0 {
				want += c[3] * a * (40 - 44.6 + 8.3*lp) / 10
			}
			check.Near(t, m.mean[2+i], want, 0.002, "%s with rise %g", harmonicNames[i], rise)
			check.Near(t, m.cov[1][2+i], c[2]*0.294*0.294, 0.0002, "its covariance with the amplitude")
		}
		check.Near(t, m.cov[2][2], 0.1050*a*a/4+0.007*0.007*0.086, 0.001, "variance of a2")
		check.Near(t, m.cov[2][3], -0.0160*a*a/4-0.007*0.110*0.086, 0.0003, "covariance of a2 and b2")
		check.Near(t, m.cov[5][5], 0.0160*a*a/4, 0.0003, "variance of b3")
		for i := range nFixed {
			for j := range nFixed {
				check.Near(t, m.cov[i][j], m.cov[j][i], 0, "symmetry")
			}
		}
		check.Near(t, m.tauD[0], 200, 1e-9, "time of the slow drifts, half a period")
		check.Near(t, m.tauD[2], 84, 1e-9, "time of the fast one, 0.21 of a period")
	}
}

// 0.75 N(0, 0.009) + 0.25 N(0, 0.028) by hand, but for the root of 2 pi; a
// period's own error adds in quadrature.
func TestPeriodDensity(t *testing.T) {
	check.Near(t, periodDensity(0, 0), 0.75/0.009+0.25/0.028, 1e-9, "at the listed period")
	check.Near(t, periodDensity(-0.028, 0), 0.75/0.009*math.Exp(-4.8395062)+0.25/0.028*math.Exp(-0.5), 1e-6, "2.8 per cent off")
	check.Near(t, periodDensity(0, 0.012), 0.75/0.015+0.25/math.Hypot(0.028, 0.012), 1e-9, "a period found to 1.2 per cent")
}

func TestRefusals(t *testing.T) {
	for name, c := range map[string]struct {
		change func(*Elements)
		want   error
	}{
		"no period":    {func(e *Elements) { e.PeriodD = 0 }, ErrPeriod},
		"NaN":          {func(e *Elements) { e.PeriodD = math.NaN() }, ErrPeriod},
		"endless":      {func(e *Elements) { e.PeriodD = math.Inf(1) }, ErrPeriod},
		"no magnitude": {func(e *Elements) { e.NoMax = true }, ErrLevel},
		"absurd":       {func(e *Elements) { e.MagMax = 1e9 }, ErrElements},
		"no number":    {func(e *Elements) { e.MagMin = math.NaN() }, ErrElements},
		"no date":      {func(e *Elements) { e.HasEpoch, e.EpochMaxJD = true, math.NaN() }, ErrElements},
		"a rise of 2":  {func(e *Elements) { e.RiseFraction = 2 }, ErrElements},
	} {
		e := mira
		c.change(&e)
		if _, err := New(e, BandV, Grid{}); !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
	if _, err := New(mira, BandV, Grid{TrefJD: math.NaN()}); !errors.Is(err, ErrGrid) {
		t.Errorf("a grid at no date: %v", err)
	}
	f, err := New(mira, BandV, Grid{})
	if err != nil {
		t.Fatal(err)
	}
	for _, o := range []Obs{{JD: math.NaN(), Mag: 10}, {Mag: math.Inf(1)}, {Mag: 10, Err: math.NaN()}, {Mag: 10, Err: -1}, {Mag: 99}} {
		if err := f.Update(o); !errors.Is(err, ErrObs) {
			t.Errorf("%+v: %v", o, err)
		}
	}
	if err := errors.Join(f.Update(Obs{JD: 5, Mag: 10}), f.Update(Obs{JD: 5, Mag: 10.1})); err != nil {
		t.Error(err)
	}
	before := f.Clone()
	if err := f.Update(Obs{JD: 4, Mag: 10}); !errors.Is(err, ErrOrder) {
		t.Errorf("an older magnitude: %v", err)
	}
	if a, b := median(t, f, 50), median(t, before, 50); a != b {
		t.Errorf("a refused magnitude moved the forecast from %v to %v", b, a)
	}
	if _, err := Fit(mira, BandV, []Obs{{JD: 5, Mag: 10}, {JD: 4, Mag: 10}}, 0); !errors.Is(err, ErrOrder) {
		t.Errorf("magnitudes out of order: %v", err)
	}
	if _, err := f.At(math.NaN()); !errors.Is(err, ErrDate) {
		t.Errorf("no date: %v", err)
	}
}

func median(t *testing.T, f *Filter, jd float64) float64 {
	t.Helper()
	fc, err := f.At(jd)
	if err != nil {
		t.Fatal(err)
	}
	return fc.Median()
}

// An error quoted counts as 0.05 at least, an estimate by eye as 0.15, a mean
// of such as 0.12: common practice.
func TestSigma(t *testing.T) {
	for _, c := range []struct {
		o    Obs
		want float64
	}{{Obs{Err: 0.01}, 0.05}, {Obs{}, 0.05}, {Obs{Err: 0.3}, 0.3}, {Obs{Visual: true}, 0.15}, {Obs{Visual: true, Err: 0.02}, 0.12}, {Obs{Visual: true, Err: 0.4}, 0.4}} {
		check.Near(t, c.o.sigma(), c.want, 0, "error of %+v", c.o)
	}
}

// Phi(-10) = 7.619853024160526e-24, Phi(-8.5) = 9.479534822203318e-18 and
// pdf/Phi by them: Abramowitz & Stegun 1964, table 26.1 and 26.2; the asymptote
// meets the exact value where it takes over.
func TestLowerTail(t *testing.T) {
	for z, phi := range map[float64]float64{-10: 7.619853024160526e-24, -8.5: 9.479534822203318e-18, 0: 0.5, 1: 0.8413447460685429} {
		ln, r := lowerTail(z)
		check.Near(t, ln, math.Log(phi), 1e-5, "ln Phi(%g)", z)
		check.Near(t, r/(math.Exp(-z*z/2)/math.Sqrt(2*math.Pi)/phi), 1, 1e-5, "pdf/Phi at %g", z)
	}
	a, ra := lowerTail(-8)
	b, rb := lowerTail(math.Nextafter(-8, -9))
	check.Near(t, a, b, 1e-4, "ln Phi where the asymptote begins")
	check.Near(t, ra, rb, 1e-3, "pdf/Phi there")
	if ln, r := lowerTail(-1e6); math.IsInf(ln, 0) || math.IsNaN(r) {
		t.Errorf("far down: %v, %v", ln, r)
	}
}

// With one node and no wide component's share a measurement is Kalman's: gain
// s/S1; a limit far fainter than expected teaches nothing, one far brighter
// than what is there moves the mean to it.
func TestComponents(t *testing.T) {
	u := measured(0, 1)
	p := 0.98 / (0.98 + 0.02/math.Sqrt(1+1.5*1.5))
	check.Near(t, u.p, p, 1e-12, "narrow component of what was expected")
	check.Near(t, u.shrink, p+(1-p)/3.25, 1e-12, "shrink of what was expected")
	check.Near(t, measured(8, 1).p, 0, 1e-4, "narrow component of 8 sigma")
	if u := fainterThan(9, 14, 0.25); u.p < 0.96 || math.Abs(u.gain) > 1e-9 {
		t.Errorf("a limit that says nothing: %+v", u)
	}
	// z = 0: Phi = 1/2, pdf = 0.39894, r = 0.79788, p = 0.485/0.515.
	u = fainterThan(12, 12, 0.25)
	check.Near(t, u.p, 0.485/0.515, 1e-12, "part of the limit")
	check.Near(t, u.gain, 0.485/0.515*0.7978846/0.5, 1e-6, "gain of a limit")
	check.Near(t, u.lnL, math.Log(0.515), 1e-12, "likelihood of a limit")
}

// Joining components moves no quantile by as much as 0.002 mag, a fifth of the
// digit shown.
func TestJoined(t *testing.T) {
	for _, n := range []int{0, 1, 3, 30} {
		for _, jd := range []float64{30, 700} {
			mix := sampleFilter(t, n).spread(jd).mix
			few := mix.joined()
			for _, q := range []float64{0.05, 0.1, 0.5, 0.9, 0.95} {
				check.Near(t, few.quantile(q), mix.quantile(q), 0.002, "quantile %g, %d magnitudes, day %g, %d of %d components", q, n, jd, len(few), len(mix))
			}
		}
	}
}

// One magnitude in mid-branch leaves two humps; a second, fading, closes it.
func TestTwoHumped(t *testing.T) {
	f := sampleFilter(t, 0)
	must(t, f.Update(Obs{JD: -10, Mag: 11, Err: 0.05}))
	one := at(t, f, 45)
	if !one.TwoHumped() || one.Rising != 0 || one.PhaseStatus != PhaseUnknown {
		t.Errorf("one magnitude: two-humped %v, rising %v (%.2f), phase %s", one.TwoHumped(), one.Rising, one.RisingP, one.PhaseStatus)
	}
	if w := one.Words(); !strings.Contains(w, "rising or falling not known") || !strings.Contains(w, "1 magnitude used, 55 d old") {
		t.Error(w)
	}
	must(t, f.Update(Obs{JD: 0, Mag: 11.5, Err: 0.05}))
	two := at(t, f, 10)
	if two.TwoHumped() || two.Rising != -1 || two.Median() < 11.4 {
		t.Errorf("fading: two-humped %v, rising %v, median %.2f", two.TwoHumped(), two.Rising, two.Median())
	}
}

func must(t *testing.T, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

func at(t *testing.T, f *Filter, jd float64) Forecast {
	t.Helper()
	out, err := f.At(jd)
	must(t, err)
	return out
}

// A magnitude 3 mag off after thirty good ones goes to the wide component, is
// flagged, and moves the forecast by less than its scatter.
func TestOutlier(t *testing.T) {
	f := sampleFilter(t, 30)
	before := median(t, f, 30)
	for _, j := range f.Used() {
		if j.Outlier() {
			t.Errorf("flagged: %+v", j)
		}
	}
	must(t, f.Update(Obs{JD: 5, Mag: median(t, f, 5) - 3, Err: 0.1}))
	used := f.Used()
	if last := used[len(used)-1]; !last.Outlier() || last.NarrowP > 0.01 {
		t.Errorf("not flagged: %+v", last)
	}
	check.Near(t, median(t, f, 30), before, 0.3, "median after an outlier; the 80 %% interval is 0.8 wide")
}

// "Fainter than 12" of a star that is at 12.5 or 9.5 by what was known takes
// the bright half away.
func TestLimit(t *testing.T) {
	f := sampleFilter(t, 0)
	before := at(t, f, 0).CDF(11.5)
	must(t, f.Update(Obs{JD: 0, Mag: 12, Limit: true}))
	after := at(t, f, 0)
	if after.CDF(11.5) > 0.1 || before < 0.5 {
		t.Errorf("brighter than 11.5 with probability %.2f before and %.2f after", before, after.CDF(11.5))
	}
	if p := at(t, f, 150).CDF(11.5); p < 0.7 {
		t.Errorf("half a period later it is brighter than 11.5 with probability %.2f only", p)
	}
}

// Errors add in quadrature: a normal distribution of 0.3 read with 0.4 is one
// of 0.5.
func TestMeasured(t *testing.T) {
	f := Forecast{mix: mixture{{1, 10, 0.3}}}
	lo, hi := f.Measured(0.4).Interval(0.8)
	check.Near(t, hi-lo, 2*1.2815516*0.5, 1e-3, "width of 80 %%")
	check.Near(t, f.Measured(math.NaN()).Quantile(0.9), f.Quantile(0.9), 0, "an error that is none")
	check.Near(t, f.CDF(10.3), numeric.NormalCDF(1), 1e-12, "chance to be brighter")
	if !math.IsNaN(f.Quantile(2)) || !math.IsNaN((Forecast{}).Median()) {
		t.Error("quantiles where there are none")
	}
}

func TestWords(t *testing.T) {
	e := mira
	e.HasEpoch, e.EpochMaxJD = true, 2451000
	f, err := Fit(e, BandV, nil, 2451000+280*44.5)
	must(t, err)
	fc := at(t, f, 2451000+280*44.5)
	check.Near(t, fc.CyclesSinceEpoch, 44.5, 1e-9, "cycles")
	if w := fc.Words(); w != "phase unknown, the range only; no magnitudes used; 44.5 cycles since the catalogue's maximum" {
		t.Error(w)
	}
	f, err = Fit(mira, "I", nil, 2451000)
	must(t, err)
	if w := at(t, f, 2451000).Words(); !strings.HasSuffix(w, "; band not calibrated") {
		t.Error(w)
	}
}

// In another band phase and period stay, level and amplitude start anew, and
// three magnitudes calibrate it.
func TestInBand(t *testing.T) {
	v := sampleFilter(t, 30)
	v.m.elements = Elements{PeriodD: 300, MagMax: 8, MagMin: 14, Band: BandV}
	f, err := v.InBand("I", 7)
	must(t, err)
	first := at(t, f, 30)
	check.Near(t, first.R, at(t, v, 30).R, 1e-6, "resultant")
	lo, hi := first.Interval(0.8)
	if hi-lo < 3.8 || first.Calibrated || first.N != 0 || first.NOther != 30 {
		t.Errorf("%.2f wide, %+v", hi-lo, first)
	}
	for _, o := range []Obs{{JD: -40, Mag: 5.1, Err: 0.05}, {JD: -20, Mag: 5.4, Err: 0.05}, {JD: 0, Mag: 5.7, Err: 0.05}} {
		must(t, f.Update(o))
	}
	got := at(t, f, 10)
	if lo, hi := got.Interval(0.8); hi-lo > 1 || !got.Calibrated || math.Abs(got.Median()-5.8) > 0.4 {
		t.Errorf("%.2f, %.2f to %.2f: %+v", got.Median(), lo, hi, got)
	}
	same, err := v.InBand(BandVisual, math.NaN())
	must(t, err)
	check.Near(t, median(t, same, 30), median(t, v, 30), 0, "visual is V")
	if _, err := v.InBand("I", math.Inf(1)); !errors.Is(err, ErrElements) {
		t.Errorf("an infinite level: %v", err)
	}
}

// Magnitudes one at a time give what they give at once, a clone goes its own
// way, and a grid that was made for less says so.
func TestAdvance(t *testing.T) {
	var obs []Obs
	for i := range 40 {
		jd := float64(10 * i)
		obs = append(obs, Obs{JD: jd, Mag: 11 - 2*math.Cos(2*math.Pi*jd/280), Err: 0.1})
	}
	whole, err := Fit(mira, BandV, obs, 0)
	must(t, err)
	part, err := Fit(mira, BandV, obs[:30], 0)
	must(t, err)
	kept := part.Clone()
	before := median(t, kept, 420)
	for _, o := range obs[30:] {
		must(t, part.Update(o))
	}
	check.Near(t, median(t, part, 420), median(t, whole, 420), 0.05, "median; the grids differ by a third of a cycle in span")
	check.Near(t, median(t, kept, 420), before, 0, "a clone")
	fresh, err := New(mira, BandV, Grid{})
	must(t, err)
	for _, o := range obs {
		must(t, fresh.Update(o))
	}
	long := Obs{JD: 3000, Mag: 11}
	if fresh.Outgrown() || part.Outgrown() {
		t.Error("outgrown within 400 days")
	}
	must(t, fresh.Update(long))
	if !fresh.Outgrown() {
		t.Error("a grid for a night serves eleven cycles")
	}
}

// The last three cycles or the newest hundred, whichever are more.
func TestRecent(t *testing.T) {
	line := func(n int, step float64) []Obs {
		var out []Obs
		for i := range n {
			out = append(out, Obs{JD: step * float64(i)})
		}
		return out
	}
	for _, c := range []struct {
		n    int
		step float64
		want int
	}{{50, 100, 50}, {300, 10, 100}, {3000, 1, 841}, {300, 100, 100}, {0, 1, 0}} {
		if got := recent(line(c.n, c.step), 280); len(got) != c.want {
			t.Errorf("%d of %d magnitudes every %g d, want %d", len(got), c.n, c.step, c.want)
		}
	}
}
