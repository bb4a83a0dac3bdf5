package light

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/light/wander"
	"evenfall/targets/stage"
)

func aMira(epochAgo float64) targets.Target {
	return targets.Target{Name: "m", Kind: targets.LPV, Var: targets.Variability{Type: "M", PeriodD: targets.Known(300),
		EpochMaxJD: targets.Known(now.JDUTC() - epochAgo), MagMax: targets.Known(6), MagMin: targets.Known(13), MagBand: "V"}}
}

// miraMags follows a Mira every ten days up to some days ago.
func miraMags(n int, last float64, band targets.Band) []targets.Magnitude {
	var out []targets.Magnitude
	for i := range n {
		age := last + 10*float64(n-1-i)
		m := magsAt(band, age, 9.8-2.5*math.Cos(2*math.Pi*(150-age)/300)+0.05*math.Sin(float64(i*i)))
		out = append(out, m)
	}
	return out
}

// Fresh elements leave the phase uncertain at best, old ones unknown; the
// interval of every level lies within that of a higher one.
func TestLongPeriod(t *testing.T) {
	f := forecast(aMira(150), Ask{})
	if f.Phase.Status != PhaseUncertain || math.Abs(f.Phase.Value-0.5) > 0.03 {
		t.Errorf("phase %+v", f.Phase)
	}
	if f.Mag.Mags() < 10.5 || f.Mag.Mags() > 12.3 {
		t.Errorf("near minimum: median %v", f.Mag)
	}
	if f := forecast(aMira(300*60), Ask{}); f.Phase.Status != PhaseUnknown || !f.Known || !strings.Contains(f.Basis, "elements 60 cycles old: phase lost") {
		t.Errorf("60 cycles on: %+v, %s", f.Phase, f.Basis)
	}
	if f := forecast(aMira(300*2), Ask{}); !strings.Contains(f.Basis, "elements 2 cycles old: phase known to 0.1") {
		t.Errorf("two cycles on: %s", f.Basis)
	}
	last := Forecast{}
	for i, level := range []float64{0.3, 0.5, 0.8, 0.95} {
		f := forecast(aMira(150), Ask{Level: level})
		if i > 0 && (f.Lo.Mags() > last.Lo.Mags() || f.Hi.Mags() < last.Hi.Mags()) {
			t.Errorf("level %g: %v..%v does not hold %v..%v", level, f.Lo, f.Hi, last.Lo, last.Hi)
		}
		last = f
	}
}

// The forecast is that of the filter, at the tick's instant.
func TestLongPeriodIsTheFilters(t *testing.T) {
	mags := miraMags(30, 5, "V")
	got := NewState(aMira(300*44), stage.Verdict{}, mags).At(now, Ask{})
	var obs []wander.Obs
	for _, m := range mags {
		obs = append(obs, wander.Obs{JD: m.JD, Mag: m.Mag, Err: m.Err})
	}
	e := wander.Elements{PeriodD: 300, EpochMaxJD: now.JDUTC() - 300*44, HasEpoch: true, MagMax: 6, MagMin: 13, Band: "V"}
	filter, err := wander.Fit(e, "V", obs, now.JDUTC())
	if err != nil {
		t.Fatal(err)
	}
	want, err := filter.At(now.JDUTC())
	if err != nil {
		t.Fatal(err)
	}
	lo, hi := want.Interval(0.8)
	check.Near(t, got.Mag.Mags(), want.Median(), 0.01, "median")
	check.Near(t, got.Lo.Mags(), lo, 0.01, "bright end")
	check.Near(t, got.Hi.Mags(), hi, 0.01, "faint end")
	if got.Phase.Status != PhaseKnown || !strings.Contains(got.Basis, "30 magnitudes since") || !strings.Contains(got.Basis, "put maximum at") {
		t.Errorf("%+v: %s", got.Phase, got.Basis)
	}
}

// A magnitude later than the instant, or than AsOf, teaches nothing.
func TestNothingFromTheFuture(t *testing.T) {
	mags := miraMags(30, -200, "V") // half of them yet to come
	s := NewState(aMira(300*44), stage.Verdict{}, mags)
	past := 0
	for _, m := range mags {
		if m.JD <= now.JDUTC() {
			past++
		}
	}
	if past == 0 || past == len(mags) {
		t.Fatal("no magnitude on either side")
	}
	alone := NewState(aMira(300*44), stage.Verdict{}, mags[:past])
	a, b := s.At(now, Ask{}), alone.At(now, Ask{})
	if a.Mag != b.Mag || a.Lo != b.Lo || a.Hi != b.Hi {
		t.Errorf("%v %v..%v with the future, %v %v..%v without", a.Mag, a.Lo, a.Hi, b.Mag, b.Lo, b.Hi)
	}
	if !strings.Contains(a.Basis, "later than this not used") {
		t.Errorf("not said: %s", a.Basis)
	}
	later := now.Add(days(150))
	a, b = s.At(later, Ask{AsOf: now}), alone.At(later, Ask{})
	if a.Mag != b.Mag || a.Hi != b.Hi {
		t.Errorf("as of now: %v, %v", a.Mag, b.Mag)
	}
	if c := s.At(later, Ask{}); c.Hi.Minus(c.Lo) > a.Hi.Minus(a.Lo) {
		t.Errorf("more magnitudes made %v..%v of %v..%v", c.Lo, c.Hi, a.Lo, a.Hi)
	}
	at := make([]astro.Instant, 12)
	for i := range at {
		at[i] = now.Add(days(float64(20*i - 100)))
	}
	for i, f := range s.Chart(at, Ask{AsOf: now}) {
		if g := s.At(at[i], Ask{AsOf: now}); f.Mag != g.Mag {
			t.Errorf("chart %v, at %v", f.Mag, g.Mag)
		}
	}
}

// Other bands keep the phase, start their level anew, and say so until three
// magnitudes are in; magnitudes of V are not averaged into them.
func TestOtherBands(t *testing.T) {
	star := aMira(300 * 44)
	star.Mags = map[targets.Band]targets.Measure{"B": targets.Known(11.5), "K": targets.Known(1.2)}
	mags := miraMags(30, 5, "V")
	s := NewState(star, stage.Verdict{}, mags)
	f := s.At(now, Ask{Band: "B"})
	if !strings.Contains(f.Basis, "band not calibrated until 3 magnitudes") || f.Hi.Minus(f.Lo) < 2 || f.Phase.Status != PhaseKnown {
		t.Errorf("B by V alone: %v %v..%v, %s", f.Mag, f.Lo, f.Hi, f.Basis)
	}
	for _, age := range []float64{60, 40, 20} {
		mags = append(mags, magsAt("B", age, 14-0.01*age))
	}
	f = NewState(star, stage.Verdict{}, mags).At(now, Ask{Band: "B"})
	check.Near(t, f.Mag.Mags(), 14, 0.6, "B by three magnitudes in B")
	if strings.Contains(f.Basis, "not calibrated") {
		t.Errorf("three magnitudes: %s", f.Basis)
	}
	if k := s.At(now, Ask{Band: "K"}); !k.Known || k.Lo.Mags() > 0.5 || k.Hi.Mags() < 1.9 || k.Hi.Mags() > 2.3 {
		t.Errorf("K: %v..%v, %s", k.Lo, k.Hi, k.Basis)
	}
	if i := s.At(now, Ask{Band: "z"}); i.Known || i.Basis == "" {
		t.Errorf("z of a star without a type: %+v", i)
	}
}

// A star without elements gets its period from its magnitudes, and says so;
// from few it does not.
func TestPeriodFound(t *testing.T) {
	star := targets.Target{Name: "new", Kind: targets.LPV}
	f := NewState(star, stage.Verdict{}, miraMags(90, 5, "V")).At(now, Ask{})
	if !f.Known || !strings.Contains(f.Basis, "found from the magnitudes") || f.Phase.Status == PhaseUnknown {
		t.Errorf("%v..%v: %s", f.Lo, f.Hi, f.Basis)
	}
	check.Near(t, f.Mag.Mags(), 12.3, 0.5, "at minimum")
	f = NewState(star, stage.Verdict{}, miraMags(8, 5, "V")).At(now, Ask{})
	if strings.Contains(f.Basis, "found from") {
		t.Errorf("eight magnitudes: %s", f.Basis)
	}
}

// What is bad is set aside with a reason, what is unlikely stays and is marked.
func TestPast(t *testing.T) {
	mags := miraMags(30, 5, "V")
	bad := []targets.Magnitude{magsAt("V", 12, 99), magsAt("V", 13, -3), magsAt("Q", 14, 10), {JD: math.NaN(), Band: "V", Mag: 10},
		{JD: 5, Band: "V", Mag: 10}, mags[7], {JD: now.JDUTC(), TimeScale: "GPS", Band: "V", Mag: 10}, magsAt("V", 15, math.NaN())}
	outlier := magsAt("V", 7, 6.0) // expected near 12
	later := magsAt("V", -20, 12)
	all := append(append(append([]targets.Magnitude{}, mags...), bad...), outlier, later)
	s := NewState(aMira(300*44), stage.Verdict{}, all)
	used, aside, unlikely := 0, 0, 0
	for i, x := range s.Past() {
		switch {
		case x.Used && x.Unlikely:
			unlikely++
			check.Near(t, x.Mag, 6, 0, "the unlikely one")
		case x.Used:
			used++
		case x.Why == "":
			t.Errorf("%d set aside without reason: %+v", i, x)
		default:
			aside++
		}
	}
	if used != 31 || aside != len(bad) || unlikely != 1 {
		t.Errorf("%d used, %d aside, %d unlikely", used, aside, unlikely)
	}
	for _, x := range s.PastAt(now) {
		if x.JD == later.JD && (x.Used || x.Why == "") {
			t.Errorf("the later one as of now: %+v", x)
		}
	}
	if f := s.At(now, Ask{}); !strings.Contains(f.Basis, "magnitudes set aside") {
		t.Errorf("not said: %s", f.Basis)
	}
	steady := NewState(targets.Target{Name: "c", Kind: targets.Standard, Mags: map[targets.Band]targets.Measure{"V": targets.KnownErr(10, 0.02)}}, stage.Verdict{},
		[]targets.Magnitude{magsAt("V", 3, 10.02), magsAt("V", 2, 13)})
	if p := steady.Past(); !p[0].Used || p[0].Unlikely || !p[1].Unlikely {
		t.Errorf("%+v", p)
	}
	check.Near(t, steady.At(now, Ask{}).Mag.Mags(), 10.005, 0.01, "a steady star with an outlier")
}

// Heliocentric dates come into UTC: at the ecliptic, up to 8.3 min.
func TestReadingScales(t *testing.T) {
	star := aMira(0)
	for _, scale := range []string{"JD_UTC", "", "HJD_UTC", "BJD_TDB"} {
		m := magsAt("V", 1, 10)
		m.TimeScale = scale
		off := math.Abs(readingsOf(&star, []targets.Magnitude{m})[0].jd-m.JD) * 86400
		if (scale == "JD_UTC" || scale == "") != (off < 0.001) || off > 600 {
			t.Errorf("%q: %g s", scale, off)
		}
	}
}

// Quantiles rise with their probability, CDF is their inverse, Lo and Hi are
// those of the level: for every kind of forecast there is.
func TestQuantiles(t *testing.T) {
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	stars = append(stars, aMira(150), targets.Target{Name: "Nova", Kind: targets.Interacting, Var: targets.Variability{Type: "NA",
		EpochMaxJD: targets.Known(now.JDUTC() - 40), MagMax: targets.Known(5), MagMin: targets.Known(18), MagBand: "V"}})
	states := make([]*State, len(stars))
	for i := range stars {
		var mags []targets.Magnitude
		if i%2 == 0 {
			mags = []targets.Magnitude{magsAt("V", 3, 11), magsAt("V", 40, 9)}
		}
		states[i] = NewState(stars[i], stage.Verdict{}, mags)
	}
	rapid.Check(t, func(r *rapid.T) {
		i := rapid.IntRange(0, len(states)-1).Draw(r, "star")
		level := rapid.SampledFrom([]float64{0.5, 0.8, 0.9}).Draw(r, "level")
		f := states[i].At(now, Ask{Level: level})
		if !f.Known {
			if _, ok := f.Quantile(0.5); ok {
				r.Fatalf("%s: a quantile of nothing", stars[i].Name)
			}
			return
		}
		p := rapid.Float64Range(0.001, 0.99).Draw(r, "p")
		q := p + rapid.Float64Range(0.001, 0.009).Draw(r, "more")
		a, ok1 := f.Quantile(p)
		b, ok2 := f.Quantile(q)
		if !ok1 || !ok2 || a.Mags() > b.Mags()+1e-4 {
			r.Fatalf("%s: quantiles %g %v and %g %v", stars[i].Name, p, a, q, b)
		}
		back, ok := f.CDF(a)
		// a quantile is right to 1e-4 mag; where the density is high that counts
		near, _ := f.CDF(a.Fainter(2e-4))
		far, _ := f.CDF(a.Fainter(-2e-4))
		if !ok || p > near+1e-4 || p < far-1e-4 {
			r.Fatalf("%s: CDF(Quantile(%g)) = %g", stars[i].Name, p, back)
		}
		lo, _ := f.Quantile(0.5 - level/2)
		hi, _ := f.Quantile(0.5 + level/2)
		if math.Abs(lo.Minus(f.Lo)) > 2e-4 || math.Abs(hi.Minus(f.Hi)) > 2e-4 {
			r.Fatalf("%s: ends %v %v, quantiles %v %v", stars[i].Name, f.Lo, f.Hi, lo, hi)
		}
	})
	for _, p := range []float64{0, 1, -1, math.NaN()} {
		f := states[0].At(now, Ask{})
		if _, ok := f.Quantile(p); ok {
			t.Errorf("quantile of %g", p)
		}
	}
}

// An RV Tauri star's minima are foreseen by the mean of the last three, 0.4 mag
// either way.
func TestRVTauri(t *testing.T) {
	star := targets.Target{Name: "rv", Kind: targets.PostAGB, Var: targets.Variability{Type: "RVA", PeriodD: targets.Known(80), TimeScale: "JD_UTC",
		EpochMinJD: targets.KnownErr(now.JDUTC()-160, 0.5), MagMax: targets.Known(7), MagMin: targets.Known(9.5), MagBand: "V"}}
	var mags []targets.Magnitude
	for age := 200.0; age > 70; age -= 4 {
		mags = append(mags, magsAt("V", age, 7+2*(1+math.Cos(2*math.Pi*age/40))/2))
	}
	f := NewState(star, stage.Verdict{}, mags).At(now, Ask{})
	check.Near(t, f.Mag.Mags(), 9, 0.15, "at minimum")
	check.Near(t, f.Hi.Minus(f.Mag)/1.2816, 0.4, 0.05, "sigma")
	if !strings.Contains(f.Basis, "last 3 minima") {
		t.Errorf("%s", f.Basis)
	}
	star.Var.EpochMinJD = targets.Measure{}
	if f := forecast(star, Ask{}); f.Phase.Status != PhaseUnknown || f.Hi.Minus(f.Lo) < 1 {
		t.Errorf("without an epoch %v..%v", f.Lo, f.Hi)
	}
}

// Pulsators say period, cadence and smearing: P/8 of 213.13 s is 26.6 s, which
// keeps 0.974 of the amplitude, P/4 0.900.
func TestPulsators(t *testing.T) {
	star := targets.Target{Name: "R548", Kind: targets.WD, Mags: map[targets.Band]targets.Measure{"V": targets.Known(14.16)},
		Physics: targets.Physics{SpType: "DA4.1"}, Var: targets.Variability{Type: "ZZA", PulsationS: targets.Known(213.13)}}
	f := forecast(star, Ask{})
	said := f.Basis
	for _, s := range f.Steps {
		said += "; " + s.Result + "; " + s.Inputs
	}
	for _, want := range []string{"213.1 s", "26.6 s", "0.974", "0.900", "2.0 h"} {
		if !strings.Contains(said, want) {
			t.Errorf("%q is not in %s", want, said)
		}
	}
	star.Var = targets.Variability{}
	star.Physics.TeffK, star.Physics.LogG = targets.KnownErr(11500, 200), targets.Known(8)
	if f := forecast(star, Ask{}); !strings.Contains(f.Basis, "may be a pulsating") {
		t.Errorf("in the strip: %s", f.Basis)
	}
	star.Physics.TeffK = targets.KnownErr(20000, 200)
	if f := forecast(star, Ask{}); strings.Contains(f.Basis, "pulsating") {
		t.Errorf("far from the strip: %s", f.Basis)
	}
}

// States are found again by content.
func TestShelf(t *testing.T) {
	h := NewShelf()
	mags := miraMags(3, 5, "V")
	a := h.State(aMira(150), stage.Verdict{}, mags)
	moved := miraMags(3, 5, "V")
	moved[0].At.Line = 7
	if h.State(aMira(150), stage.Verdict{}, moved) != a {
		t.Error("the same content makes another state")
	}
	moved[0].Mag += 0.1
	if h.State(aMira(150), stage.Verdict{}, moved) == a || h.State(aMira(151), stage.Verdict{}, mags) == a {
		t.Error("other content finds the same state")
	}
}

func BenchmarkNewState(b *testing.B) {
	stars, err := builtin.Stars()
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		for i := range stars {
			NewState(stars[i], stage.Verdict{}, nil).At(now, Ask{})
		}
	}
}

func BenchmarkForecast100(b *testing.B) {
	star, mags := aMira(300*44), miraMags(100, 5, "V")
	for b.Loop() {
		NewState(star, stage.Verdict{}, mags).At(now, Ask{})
	}
}

func BenchmarkAt(b *testing.B) {
	s := NewState(aMira(150), stage.Verdict{}, miraMags(100, 5, "V"))
	for b.Loop() {
		s.At(now, Ask{})
	}
}

func BenchmarkAtStates(b *testing.B) {
	star := targets.Target{Name: "a", Kind: targets.Interacting, Var: targets.Variability{Type: "UGSU+E", MagMax: targets.Known(7.7), MagMin: targets.Known(12.4), MagBand: "V",
		TimeScale: "HJD", PeriodD: targets.Known(0.0736472031), EpochMinJD: targets.Known(2443727.93729), EclipseMin: targets.Known(6)}}
	s := NewState(star, stage.Verdict{}, nil)
	for b.Loop() {
		s.At(now, Ask{})
	}
}
