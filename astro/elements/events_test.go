package elements

import (
	"errors"
	"math"
	"slices"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/frame"
	"evenfall/astro/timescale"
)

func instant(t testing.TB, jdDay, seconds float64) astro.Instant {
	t.Helper()
	midnight := time.Unix(int64((jdDay-2440587.5)*86400), 0)
	at, err := timescale.At(midnight.Add(time.Duration(math.Round(seconds * 1e9))))
	if err != nil {
		t.Fatal(err)
	}
	return at
}

func sightOf(r check.Row) Sight {
	return Sight{Star: frame.NewStar(frame.Catalogue{RA: astro.Deg(r.Float("ra")), Dec: astro.Deg(r.Float("dec")), EpochJyr: 2000}),
		Site: astro.Site{Lat: astro.Deg(r.Float("lat")), Lon: astro.Deg(r.Float("lon")), HeightM: r.Float("h_m")}}
}

// Every scale reads what astropy says, and the instant of that reading is the
// one it was read at.
func TestScales(t *testing.T) {
	worst := map[Scale]float64{}
	for _, r := range check.Table(t, "testdata/astro/light_time.csv").Rows() {
		s := sightOf(r)
		at := instant(t, r.Float("jd_day"), r.Float("jd_frac")*86400)
		for scale, col := range map[Scale]string{BJDTDB: "bjd_tdb_s", HJDTT: "hjd_tt_s", HJDUTC: "hjd_utc_s", HJD: "hjd_utc_s"} {
			date := s.Date(at, scale)
			got := (s.days(at, scale) - s.days(at, JDUTC)) * 86400
			worst[scale] = math.Max(worst[scale], math.Abs(got-r.Float(col)))
			check.Near(t, got, r.Float(col), 0.05, "%s less JD_UTC, s, %s", scale, r.Where())
			back, err := s.Instant(date, scale)
			if err != nil {
				t.Fatal(err)
			}
			check.Near(t, back.Sub(at).Seconds(), 0, 1e-4, "%s there and back, s, %s", scale, r.Where())
		}
	}
	t.Logf("worst, s: %v", worst)
}

func TestEvents(t *testing.T) {
	worst, worstBJD := 0.0, 0.0
	for _, r := range check.Table(t, "testdata/astro/ephemeris_events.csv").Rows() {
		e := ephemeris(t, Elements{Scale: Scale(r.String("scale")), Epoch: Value{Value: r.Float("epoch")}, Period: Value{Value: r.Float("period")}, Pdot: Value{Value: r.Float("pdot")}})
		c := Clock{sightOf(r), e}
		want := instant(t, r.Float("utc_day"), r.Float("utc_s"))
		half := durationOf(e.p / 2)
		got := slices.Collect(c.Events([]Happening{Moment(KindEclipse, 0)}, want.Add(-half+time.Second), want.Add(half-time.Second)))
		if len(got) != 1 {
			t.Fatalf("%s: %d events within half a period", r.Where(), len(got))
		}
		ev := got[0]
		off := ev.At.Sub(want).Seconds()
		worst = math.Max(worst, math.Abs(off))
		check.Near(t, off, 0, 0.05, "event, s, %s", r.Where())
		bjd := (ev.BJDTDB-r.Float("utc_day"))*86400 - r.Float("utc_s") - r.Float("bjd_minus_utc_s")
		worstBJD = math.Max(worstBJD, math.Abs(bjd))
		check.Near(t, bjd, 0, 0.05, "BJD_TDB, s, %s", r.Where())
		if ev.Cycle != r.Float("cycle") {
			t.Errorf("%s: cycle %g, want %g", r.Where(), ev.Cycle, r.Float("cycle"))
		}
	}
	t.Logf("worst %.4f s, BJD_TDB %.4f s", worst, worstBJD)
}

// TDB - UTC is 69.184 s in 2017-2026: a star at the pole of the ecliptic has
// next to no light-time.
func TestTDBMinusUTC(t *testing.T) {
	s := Sight{Star: frame.NewStar(frame.Catalogue{RA: astro.Hours(18), Dec: astro.Deg(66.5607), EpochJyr: 2000})}
	at := instant(t, 2459000.5, 0)
	check.Near(t, (s.days(at, HJDTT)-s.days(at, HJDUTC))*86400, 69.184, 1e-5, "TT-UTC")
	check.Near(t, (s.days(at, BJDTDB)-s.days(at, JDUTC))*86400, 69.184, 5, "TDB-UTC and what light-time is left")
	if !math.IsNaN(s.Date(at, "X")) {
		t.Error("a scale that is none reads something")
	}
	if _, err := s.Instant(2459000, "X"); !errors.Is(err, ErrScale) {
		t.Error(err)
	}
	for _, jd := range []float64{math.NaN(), 0, 1e9, math.Inf(1)} {
		if _, err := s.Instant(jd, BJDTDB); !errors.Is(err, timescale.ErrRange) {
			t.Errorf("%g: %v", jd, err)
		}
	}
}

func clockOf(t testing.TB, el Elements) *Clock {
	t.Helper()
	return &Clock{Sight{Star: frame.NewStar(frame.Catalogue{RA: astro.Deg(60), Dec: astro.Deg(17), EpochJyr: 2000}),
		Site: astro.Site{Lat: astro.Deg(28.8), Lon: astro.Deg(-17.9), HeightM: 2400}}, ephemeris(t, el)}
}

var night = struct{ from, until astro.Instant }{
	astro.InstantFrom(time.Date(2026, 12, 1, 20, 0, 0, 0, time.UTC), 37, 0, false),
	astro.InstantFrom(time.Date(2026, 12, 2, 6, 0, 0, 0, time.UTC), 37, 0, false),
}

var binary = Elements{Scale: BJDTDB, Epoch: Value{2455000.123, 1e-6, false}, Period: Value{0.13, 1e-11, false}}

// 49 minutes of eclipse: ingress and egress 24.5 minutes before and after.
func TestEclipse(t *testing.T) {
	c := clockOf(t, binary)
	h, err := c.Ephemeris.Eclipse(0, 49)
	if err != nil {
		t.Fatal(err)
	}
	n := 0
	for ev := range c.Events([]Happening{h}, night.from, night.until) {
		n++
		check.Near(t, ev.At.Sub(ev.Start).Minutes(), 24.5, 0.01, "ingress to middle, min")
		check.Near(t, ev.End.Sub(ev.At).Minutes(), 24.5, 0.01, "middle to egress, min")
		cycles := (ev.BJDTDB - 2455000.123) / 0.13
		check.Near(t, cycles, math.Round(cycles), 1e-6, "whole cycles from the epoch")
		if ev.Status != Good || ev.Kind != KindEclipse || ev.Phase != 0 || ev.Words != "" {
			t.Errorf("%+v", ev)
		}
	}
	if n < 3 || n > 4 { // ten hours of 3.12 hours
		t.Errorf("%d eclipses", n)
	}
	for _, minutes := range []float64{-1, math.NaN(), 0.13 * 1440, math.Inf(1)} {
		if _, err := c.Ephemeris.Eclipse(0, minutes); !errors.Is(err, ErrHappening) {
			t.Errorf("%g min: %v", minutes, err)
		}
	}
	// one under way at the start and one at the end are there
	first := slices.Collect(c.Events([]Happening{h}, night.from, night.until))[0]
	in := slices.Collect(c.Events([]Happening{h}, first.End.Add(-time.Second), first.End.Add(time.Second)))
	out := slices.Collect(c.Events([]Happening{h}, first.End.Add(time.Second), first.End.Add(2*time.Second)))
	if len(in) != 1 || len(out) != 0 {
		t.Errorf("%d under way, %d after egress", len(in), len(out))
	}
}

// From 0.9 to 0.1 is a fifth of the period around phase 0, from 0.1 to 0.9
// the rest.
func TestWindow(t *testing.T) {
	c := clockOf(t, binary)
	for _, w := range []struct{ from, to, mid, width float64 }{{0.9, 0.1, 0, 0.2}, {0.1, 0.9, 0.5, 0.8}, {-0.05, 0.05, 0, 0.1}, {0, 1, 0.5, 1}, {0.4, 0.6, 0.5, 0.2}} {
		h, err := c.Ephemeris.Window(w.from, w.to)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, math.Mod(h.Phase+1e-12, 1), w.mid, 1e-9, "middle of %g to %g", w.from, w.to)
		ev, ok := c.Next(h, night.from)
		if !ok {
			t.Fatalf("%+v: none", w)
		}
		check.Near(t, ev.End.Sub(ev.Start).Hours()/24, w.width*0.13, 1e-4, "length of %g to %g, d", w.from, w.to)
		if n := len(slices.Collect(c.Events([]Happening{h}, night.from, night.until))); n < 3 || n > 5 {
			t.Errorf("%+v: %d windows", w, n)
		}
	}
	for _, w := range [][2]float64{{0.3, 0.3}, {math.NaN(), 0.5}, {0, 5}} {
		if _, err := c.Ephemeris.Window(w[0], w[1]); !errors.Is(err, ErrHappening) {
			t.Errorf("%v: %v", w, err)
		}
	}
}

// A year of a Mira: maximum, then minimum 0.62 of a period on, as it rises in
// 0.38; quadratures of a binary fall between its eclipses.
func TestExtremes(t *testing.T) {
	c := clockOf(t, Elements{Scale: JDUTC, Epoch: Value{2461000, 3, false}, Period: Value{331.96, 0.3, false}, Walk: WalkOf(331.96)})
	var max, min Event
	for ev := range c.Events(Extremes(true, 0.38), night.from, night.from.Add(340*24*time.Hour)) {
		switch ev.Kind {
		case KindMaximum:
			max = ev
		case KindMinimum:
			min = ev
		}
	}
	d := min.Cycle - max.Cycle
	check.Near(t, d-math.Floor(d), 0.62, 1e-9, "phase of minimum")
	if max.SigmaS < 5*86400 || max.Status != Good {
		t.Errorf("%+v", max)
	}
	if h := Extremes(false, 0.38); h[0].Kind != KindMinimum || h[1].Phase != 0.38 {
		t.Errorf("%+v", h)
	}
	if h := Extremes(true, math.NaN()); len(h) != 1 {
		t.Errorf("%+v", h)
	}
	c = clockOf(t, binary)
	list := slices.Collect(c.Events(append(Quadratures(), Moment(KindEclipse, 0)), night.from, night.until))
	for i := 1; i < len(list); i++ {
		step := list[i].Cycle - list[i-1].Cycle
		if math.Abs(step-0.25) > 1e-9 && math.Abs(step-0.5) > 1e-9 {
			t.Errorf("%s at %g after %s at %g", list[i].Kind, list[i].Phase, list[i-1].Kind, list[i-1].Phase)
		}
	}
	if len(list) < 9 {
		t.Errorf("%d events", len(list))
	}
}

// Expired and assumed elements still date events, and say so.
func TestEventWords(t *testing.T) {
	c := clockOf(t, Elements{Scale: HJD, Epoch: Value{Value: 2443727.937}, Period: Value{Value: 0.0736472}})
	ev, ok := c.Next(Moment(KindEclipse, 0), night.from)
	if !ok || ev.Status != Expired || ev.SigmaS < 636 || ev.Words == "" {
		t.Errorf("%+v, %v", ev, ok)
	}
	c = clockOf(t, Elements{Scale: HJD, Epoch: Value{Value: 2443727.93729}, Period: Value{Value: 0.0736472031}})
	if ev, _ := c.Next(Moment(KindEclipse, 0), night.from); ev.Status != Assumed || ev.SigmaS < 35 || ev.Words == "" {
		t.Errorf("%+v", ev)
	}
}

// Next after t is after t and no more than a period away; a list is in order,
// within its interval, and holds what Next gives one by one.
func TestEventsProperties(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		el := drawElements(r)
		el.Pdot.Value /= 1e3
		c := clockOf(t, el)
		at := night.from.Add(time.Duration(rapid.Int64Range(-3e8, 6e8).Draw(r, "seconds")) * time.Second)
		at, _ = timescale.At(at.UTC())
		h := Moment(KindEclipse, rapid.Float64Range(0, 1).Draw(r, "phase"))
		ev, ok := c.Next(h, at)
		if !ok || !ev.At.After(at) || ev.At.Sub(at) > durationOf(el.Period.Value*1.001)+time.Millisecond {
			r.Fatalf("next after %v: %+v, %v", at.UTC(), ev, ok)
		}
		h.Before, h.After = rapid.Float64Range(0, 0.4).Draw(r, "before")*c.Ephemeris.p, 0.1*c.Ephemeris.p
		until := at.Add(durationOf(10.3 * el.Period.Value))
		list := slices.Collect(c.Events([]Happening{h, Moment("b", 0.3)}, at, until))
		if len(list) < 19 || len(list) > 23 {
			r.Fatalf("%d events in 10.3 periods", len(list))
		}
		for i, ev := range list {
			if ev.ends().Before(at) || ev.begins().After(until) || i > 0 && ev.At.Before(list[i-1].At) || !(ev.SigmaS > 0) {
				r.Fatalf("%+v", ev)
			}
		}
	})
}

func FuzzElements(f *testing.F) {
	f.Add("HJD", 2455000.5, 0.1, 1e-11, 1e-5, 0.0, 0.3, 30.0, 0.9, 0.1)
	f.Add("", 2443727.93729, 331.96, -1e-3, math.NaN(), 2450000.0, -7.0, math.Inf(1), math.NaN(), 2.0)
	f.Fuzz(func(t *testing.T, scale string, epoch, period, pdot, err, middle, phase, minutes, from, to float64) {
		e, bad := New(Elements{Scale: Scale(scale), Epoch: Value{epoch, err, false}, Period: Value{period, err, false}, Pdot: Value{pdot, err, false}, Middle: middle, Jitter: err, Walk: err})
		if bad != nil {
			if !errors.Is(bad, ErrElements) && !errors.Is(bad, ErrScale) {
				t.Fatal(bad)
			}
			return
		}
		c := Clock{Sight{Star: frame.NewStar(frame.Catalogue{EpochJyr: 2000})}, e}
		what := []Happening{Moment("a", phase)}
		if h, err := e.Eclipse(phase, minutes); err == nil {
			what = append(what, h)
		}
		if h, err := e.Window(from, to); err == nil {
			what = append(what, h)
		}
		n := 0
		last := night.from.Add(-24 * 400 * time.Hour)
		for ev := range c.Events(what, night.from, night.until) {
			if ev.At.Before(last) || math.IsNaN(ev.BJDTDB+ev.SigmaS) || ev.Status == "" {
				t.Fatalf("%+v after %v", ev, last.UTC())
			}
			if last = ev.At; n > 30 {
				break
			}
			n++
		}
		if ev, ok := c.Next(what[0], night.from); ok && !ev.At.After(night.from) {
			t.Fatalf("%+v is not after %v", ev, night.from.UTC())
		}
	})
}

func BenchmarkEvents(b *testing.B) {
	c := clockOf(b, binary)
	h, _ := c.Ephemeris.Eclipse(0, 49)
	for b.Loop() {
		for range c.Events([]Happening{h}, night.from, night.until) {
		}
	}
}
