package light

import (
	"errors"
	"math"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/elements"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/stage"
)

var site = astro.Site{Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), HeightM: 2400}

func eclipser(period, epoch float64, scale string) targets.Target {
	return targets.Target{Name: "a", Kind: targets.Interacting, Place: targets.Place{RA: astro.Deg(60), Dec: astro.Deg(17), EpochJyr: 2000},
		Var: targets.Variability{Type: "EA/WD", MagMax: targets.Known(10), MagMin: targets.Known(12), TimeScale: scale,
			PeriodD: targets.KnownErr(period, 1e-9), EpochMinJD: targets.KnownErr(epoch, 1e-5)}}
}

// Events at the site as astropy has them, within 0.05 s.
func TestEvents(t *testing.T) {
	worst := 0.0
	for _, r := range check.Table(t, "testdata/astro/ephemeris_events.csv").Rows() {
		star := targets.Target{Name: "x", Kind: targets.Interacting, Place: targets.Place{RA: astro.Deg(r.Float("ra")), Dec: astro.Deg(r.Float("dec")), EpochJyr: 2000},
			Var: targets.Variability{Type: "EA", TimeScale: r.String("scale"), PeriodD: targets.KnownErr(r.Float("period"), 1e-12),
				EpochMinJD: targets.KnownErr(r.Float("epoch"), 1e-6), PdotDD: targets.Known(r.Float("pdot"))}}
		at, err := timescale.At(time.Unix(int64((r.Float("utc_day")-2440587.5)*86400), 0).Add(time.Duration(math.Round(r.Float("utc_s") * 1e9))))
		if err != nil {
			t.Fatal(err)
		}
		where := astro.Site{Lat: astro.Deg(r.Float("lat")), Lon: astro.Deg(r.Float("lon")), HeightM: r.Float("h_m")}
		s := NewState(star, stage.Verdict{}, nil)
		found := 0
		for _, ev := range s.Events(where, at.Add(-time.Minute), at.Add(time.Minute)) {
			if ev.Kind != "eclipse" {
				continue
			}
			found++
			off := ev.At.Sub(at).Seconds()
			worst = math.Max(worst, math.Abs(off))
			check.Near(t, off, 0, 0.05, "eclipse, s, %s", r.Where())
			check.Near(t, (ev.BJDTDB-r.Float("utc_day"))*86400-r.Float("utc_s"), r.Float("bjd_minus_utc_s"), 0.05, "BJD_TDB less UTC, s, %s", r.Where())
		}
		if found != 1 {
			t.Errorf("%s: %d eclipses", r.Where(), found)
		}
	}
	t.Logf("worst %.4f s", worst)
}

// Ingress and egress half the duration either side, quadratures a quarter of a
// period away, all in order; an assumed error is said; sigma by hand: 2e-6 d and
// 1e5 cycles of 3e-11 d make 0.31 s, the jitter of 5 s per decade aside.
func TestEclipses(t *testing.T) {
	star := eclipser(0.5, now.JDUTC()-1000.125, "JD_UTC")
	star.Var.EclipseMin = targets.Known(40)
	list := NewState(star, stage.Verdict{}, nil).Events(site, now, now.Add(24*time.Hour))
	kinds := ""
	for i, e := range list {
		kinds += e.Kind[:1]
		if i > 0 && e.At.Before(list[i-1].At) {
			t.Errorf("out of order: %v after %v", e.At.UTC(), list[i-1].At.UTC())
		}
		if e.Kind == "eclipse" {
			check.Near(t, e.At.Sub(*e.Start).Minutes(), 20, 1e-3, "ingress to middle, min")
			check.Near(t, e.End.Sub(e.At).Minutes(), 20, 1e-3, "middle to egress, min")
		}
	}
	if kinds != "qqeqqeqq" && kinds != "qeqqeqqe" && kinds != "qeqqeq" && kinds != "qqeqqe" && kinds != "eqqeqq" {
		t.Errorf("a day of a binary of half a day: %s", kinds)
	}
	under := now.Add(-time.Duration(0.125 * 86400e9)).Add(10 * time.Minute) // within an eclipse
	if l := NewState(star, stage.Verdict{}, nil).Events(site, under, under.Add(time.Minute)); len(l) != 1 || l[0].Kind != "eclipse" {
		t.Errorf("an eclipse under way is not listed: %+v", l)
	}
	p := eclipser(0.1, now.JDUTC()-10000, "JD_UTC")
	p.Var.PeriodD, p.Var.EpochMinJD = targets.KnownErr(0.1, 3e-11), targets.KnownErr(now.JDUTC()-10000, 2e-6)
	e := NewState(p, stage.Verdict{}, nil).Next(now.Add(-time.Minute))[0]
	check.Near(t, e.SigmaS, math.Hypot(0.31, 5*10000/3652.5), 0.02, "sigma of cycle 1e5, s")
	p.Var.PeriodD = targets.Measure{Value: 0.1, Known: true, Err: 5e-8, Assumed: true}
	if e := NewState(p, stage.Verdict{}, nil).Next(now)[0]; e.Status != EventAssumed || e.Words == "" {
		t.Errorf("%+v", e)
	}
	p.Var.PeriodD = targets.KnownErr(0.1, 1e-6)
	if e := NewState(p, stage.Verdict{}, nil).Next(now)[0]; e.Status != EventExpired {
		t.Errorf("%+v", e)
	}
}

// The next event is the next: at most a period ahead, at phase zero, and the
// one after it a period later. The next maximum of a Mira is where its elements
// or its magnitudes put it.
func TestNext(t *testing.T) {
	s := NewState(eclipser(0.37, 2455000.123, "BJD_TDB"), stage.Verdict{}, nil)
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

	max := NewState(aMira(150), stage.Verdict{}, nil).Next(now)
	if len(max) != 1 || max[0].Kind != "maximum" {
		t.Fatalf("%+v", max)
	}
	check.Near(t, max[0].At.Sub(now).Hours()/24, 150, 10, "days to the next maximum, by elements half a cycle old")
	max = NewState(aMira(300*44), stage.Verdict{}, miraMags(60, 5, "V")).Next(now)
	check.Near(t, max[0].At.Sub(now).Hours()/24, 150, 12, "days to the next maximum, by magnitudes")
	if max[0].Status != EventGood || max[0].SigmaS > 20*86400 {
		t.Errorf("%+v", max[0])
	}
	if e := NewState(aMira(300*80), stage.Verdict{}, nil).Next(now); len(e) != 1 || e[0].Status != EventExpired {
		t.Errorf("80 cycles on: %+v", e)
	}
	bare := aMira(0)
	bare.Var.EpochMaxJD = targets.Measure{}
	if e := NewState(bare, stage.Verdict{}, nil).Next(now); len(e) != 0 {
		t.Errorf("without an epoch: %+v", e)
	}
}

// Two years of a Mira of 300 d: maxima and minima in turn, a period apart.
func TestWanderingEvents(t *testing.T) {
	list := NewState(aMira(300*44), stage.Verdict{}, miraMags(60, 5, "V")).Events(site, now, now.Add(days(730)))
	var last astro.Instant
	maxima := 0
	for i, e := range list {
		if i > 0 && e.Kind == list[i-1].Kind {
			t.Errorf("%s after %s", e.Kind, list[i-1].Kind)
		}
		if e.Kind == "maximum" {
			maxima++
			if !last.IsZero() {
				check.Near(t, e.At.Sub(last).Hours()/24, 300, 15, "days between maxima")
			}
			last = e.At
		}
	}
	if maxima != 2 || len(list) < 4 {
		t.Errorf("%d maxima of %d events", maxima, len(list))
	}
}

// The window 0.9 to 0.1 of a half-day binary lasts 2.4 h about mid-eclipse.
func TestPhaseWindows(t *testing.T) {
	s := NewState(eclipser(0.5, now.JDUTC()-1000.125, "JD_UTC"), stage.Verdict{}, nil)
	list, err := s.PhaseWindows(site, 0.9, 0.1, now, now.Add(24*time.Hour))
	if err != nil || len(list) != 2 {
		t.Fatalf("%d windows, %v", len(list), err)
	}
	for _, w := range list {
		check.Near(t, w.End.Sub(*w.Start).Hours(), 2.4, 1e-4, "hours of the window")
		phase := (w.At.JDUTC() - now.JDUTC() + 1000.125) / 0.5
		check.Near(t, phase, math.Round(phase), 1e-5, "phase of its middle")
	}
	if _, err := s.PhaseWindows(site, 0.3, 0.3, now, now.Add(time.Hour)); !errors.Is(err, elements.ErrHappening) {
		t.Errorf("equal phases: %v", err)
	}
	m := NewState(aMira(300*44), stage.Verdict{}, miraMags(60, 5, "V"))
	list, err = m.PhaseWindows(site, 0.8, 0.2, now, now.Add(days(300)))
	if err != nil || len(list) != 1 {
		t.Fatalf("Mira: %d windows, %v", len(list), err)
	}
	check.Near(t, list[0].End.Sub(*list[0].Start).Hours()/24, 120, 0.01, "days of the window")
	if _, err := NewState(targets.Target{Name: "c", Kind: targets.WD}, stage.Verdict{}, nil).PhaseWindows(site, 0, 0.5, now, now.Add(time.Hour)); !errors.Is(err, ErrNoPhase) {
		t.Errorf("a steady star: %v", err)
	}
}

// Every built-in target's events of a day are in order and inside it.
func TestBuiltinEvents(t *testing.T) {
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	count, until := 0, now.Add(24*time.Hour)
	for _, s := range stars {
		list := NewState(s, stage.Verdict{}, nil).Events(site, now, until)
		for i, e := range list {
			count++
			begin, end := e.At, e.At
			if e.Start != nil {
				begin, end = *e.Start, *e.End
			}
			if end.Before(now) || begin.After(until) || i > 0 && e.At.Before(list[i-1].At) || !(e.SigmaS > 0) || e.Status == "" {
				t.Errorf("%s: %+v", s.Name, e)
			}
		}
	}
	if count < 100 {
		t.Errorf("%d events in a day", count)
	}
}
