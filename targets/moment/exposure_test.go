package moment

import (
	"math"
	"strings"
	"sync"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/check"
	"evenfall/astro/frame"
	"evenfall/astro/photon"
	"evenfall/astro/skyglow"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/exposure"
	"evenfall/targets/light"
	"evenfall/targets/run"
)

// demo is the demonstration run, read once.
var demo = sync.OnceValue(func() *run.Config {
	r, _ := run.Open(builtin.Demo(), "demonstration")
	return r.Config
})

// wantOf is the default request of a kind.
func wantOf(t testing.TB, kind targets.Kind) (Want, bool) {
	t.Helper()
	q, ok := demo().DefaultRequest(kind)
	if !ok {
		return Want{}, false
	}
	w := Want{Weight: 1, Level: 0.8, Request: &q}
	w.Instrument, _ = demo().Instrument(q.Instrument)
	w.Mode, _ = w.Instrument.Mode(q.Mode)
	g, err := exposure.GoalOf(&q, w.Instrument.Kind)
	if err != nil {
		t.Fatal(err)
	}
	w.Goal = &g
	return w, true
}

// The exposure of a moment is what the exposure's own package answers to the
// parts put together by hand.
func TestExposureAgrees(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	n.Seeing = 1.3
	at := testInstant(t, "2026-12-02T04:00:00Z")
	s := NewScene(n, at)
	done := 0
	for i := range stars {
		p := &stars[i]
		w, ok := wantOf(t, p.Target.Kind)
		if !ok {
			continue
		}
		c := Tonight(n, p, w)
		m := Of(&s, p, &c, w)
		if !m.AirOK {
			if m.ExposureOK || m.ExposureWhy == "" {
				t.Errorf("%s is below the horizon and has an exposure", p.Target.Name)
			}
			continue
		}
		band := w.Mode.Band
		if w.Instrument.Kind == "slit" {
			band = ""
		}
		f := p.Light.At(at, light.Ask{Band: band, Level: w.Level})
		if !f.Known {
			f = p.Light.At(at, light.Ask{Level: w.Level})
		}
		g := *w.Goal
		if g.SlitArcsec == 0 {
			g.SlitArcsec = c.slit
		}
		g.CycleS, g.Level = exposure.CycleOf(&p.Target), w.Level
		want := exposure.Solve(exposure.Setting{Instrument: w.Instrument, Mode: w.Mode, Goal: g,
			Source: exposure.SourceOf(&p.Target, f.Band, spreadOf(f), exposure.ColoursOf(&p.Target)),
			Sky: func(b skyglow.Band) (skyglow.Brightness, error) {
				return s.Sky.At(skyglow.Direction{Dir: m.Place.Dir, Alt: m.Place.Alt}, b)
			},
			Extinction: n.Sky.Extinction(), Airmass: m.Airmass, SeeingArcsec: 1.3, HeightM: testSite.HeightM,
			Pointing: &exposure.Pointing{Lat: testSite.Lat, Dec: m.Place.Dec, HourAngle: m.Place.HourAngle}, Vapour: photon.VapourOf(testSite.Air)})
		if m.ExposureOK != (want.Err == nil) || (want.Err != nil && m.ExposureWhy != want.Err.Error()) {
			t.Errorf("%s: %v %q, exposure says %v", p.Target.Name, m.ExposureOK, m.ExposureWhy, want.Err)
			continue
		}
		a := m.Exposure
		if a.BookedS != want.BookedS || a.Frames != want.Frames || a.UpToS != want.UpToS || a.PReached != want.PReached ||
			a.SaturatesAt != want.SaturatesAt || a.LimitedBy != want.LimitedBy || a.SlitPA != want.SlitPA || a.SNR != want.SNR {
			t.Errorf("%s: %+v, exposure says %+v", p.Target.Name, a, want)
		}
		if !m.ExposureOK {
			continue
		}
		if done++; done > 5 {
			continue
		}
		st := p.Study(Models{Stage: sharedModels().Stage})
		steps, own := Steps(&s, p, &m, &st), m.Exposure.Steps()
		for k, x := range own {
			if got := steps[len(steps)-len(own)+k]; got != Step(x) || x.What == "" || x.Formula == "" || x.Inputs == "" || x.Result == "" || x.Source == "" {
				t.Errorf("%s: step %+v", p.Target.Name, got)
			}
		}
	}
	t.Logf("%d exposures", done)
	if done < 60 {
		t.Errorf("only %d exposures", done)
	}
}

// Best is where a search every minute finds the least exposure time, and none
// of the wished-for windows holds a cheaper moment.
func TestBestByExposure(t *testing.T) {
	n, stars := testNight(t, targets.DefaultLimits()), testStars(t)
	by := 0
	for i := range stars {
		p := &stars[i]
		w, ok := wantOf(t, p.Target.Kind)
		if !ok || i%9 != 0 {
			continue
		}
		c := Tonight(n, p, w)
		if c.BestS == 0 {
			continue
		}
		by++
		tr := tracker{night: n, star: &p.Star}
		least := math.Inf(1)
		for _, span := range c.windows() {
			for at := span.From; at.Before(span.Until); at = at.Add(3 * time.Minute) {
				f := frame.At(n.Site, at)
				if q := tr.cost(p, w.with(c.slit), look{f.Look(f.Observed(&p.Star)), &f, nil}, at); q.err == nil {
					least = math.Min(least, q.clockS)
				}
			}
		}
		if c.BestS > least*1.01 {
			t.Errorf("%s: best costs %.2f s, the least is %.2f s", p.Target.Name, c.BestS, least)
		}
		s := NewScene(n, *c.Best)
		m := Of(&s, p, &c, w)
		check.Near(t, m.Exposure.ClockS, c.BestS, 1e-9*c.BestS, "exposure of %s at its best, s", p.Target.Name)
		check.Near(t, air.Refract(m.Place.Alt, testSite.Air).Deg(), c.BestAltitude.Deg(), 1e-9, "altitude then")
	}
	t.Logf("%d by exposure", by)
	if by < 5 {
		t.Errorf("only %d stars have a best moment by exposure", by)
	}
}

// overhead is a steady star that passes high at midnight, clear of the zenith.
func overhead(n *Night, mag float64) Prepared {
	star := targets.Target{Name: "x", Kind: targets.Other, Mags: map[targets.Band]targets.Measure{"V": targets.Known(mag), "B": targets.Known(mag + 1)}}
	star.Place.RA, star.Place.Dec = n.nodes[len(n.nodes)/2].frame.LST, testSite.Lat.Plus(astro.Deg(10))
	return Prepare(star, nil, sharedModels())
}

// Limits of a request on sky and air are limits with their codes.
func TestAskedLimits(t *testing.T) {
	night := testNight(t, targets.DefaultLimits())
	at := night.Midnight
	p := overhead(night, 12)
	for _, c := range []struct {
		code       targets.Code
		q          targets.Request
		conditions targets.Conditions
		blocked    bool
	}{
		{targets.CodeSeeing, targets.Request{MaxSeeingArcsec: targets.Known(1.2)}, targets.Conditions{Seeing: targets.Known(1.5)}, true},
		{targets.CodeSeeing, targets.Request{MaxSeeingArcsec: targets.Known(1.2)}, targets.Conditions{}, false},
		{targets.CodeExtinction, targets.Request{Photometric: true}, targets.Conditions{Hazy: true}, true},
		{targets.CodeExtinction, targets.Request{MaxExtinctionMag: targets.Known(0.3)}, targets.Conditions{Extinction: targets.Known(0.5)}, true},
		{targets.CodeExtinction, targets.Request{MaxExtinctionMag: targets.Known(0.3)}, targets.Conditions{Extinction: targets.Known(0.2)}, false},
		{targets.CodeSky, targets.Request{SkyAtLeast: targets.Known(23)}, targets.Conditions{}, true},
		{targets.CodeSky, targets.Request{SkyAtLeast: targets.Known(16)}, targets.Conditions{}, false},
	} {
		w, _ := wantOf(t, targets.LPV)
		w.Request = &c.q
		n, err := NewNight(testSite, night.Date, targets.DefaultLimits(), c.conditions)
		if err != nil {
			t.Fatal(err)
		}
		s := NewScene(n, at)
		course := Tonight(n, &p, w)
		m := Of(&s, &p, &course, w)
		found := false
		for _, b := range m.BlockedBy {
			found = found || b.Code == c.code && strings.Contains(b.Words, ",")
		}
		if found != c.blocked || m.InCan == c.blocked {
			t.Errorf("%s %+v: blocked by %+v, can %v", c.code, c.conditions, m.BlockedBy, m.InCan)
		}
	}
}

// What saturates in the shortest exposure, or is too faint for what is wanted
// whenever it is up, is blocked with a reason.
func TestNothingToExpose(t *testing.T) {
	n := testNight(t, targets.DefaultLimits())
	for _, c := range []struct {
		mag  float64
		code targets.Code
	}{{-12, targets.CodeSaturates}, {12, ""}} {
		p := overhead(n, c.mag)
		w, ok := wantOf(t, targets.LPV)
		if !ok {
			t.Fatal("no request")
		}
		course := Tonight(n, &p, w)
		s := NewScene(n, n.Midnight)
		m := Of(&s, &p, &course, w)
		codes := ""
		for _, b := range m.BlockedBy {
			codes += string(b.Code)
		}
		if codes != string(c.code) || m.InCan != (c.code == "") {
			t.Errorf("V %.0f: blocked by %+v, exposure %v %q", c.mag, m.BlockedBy, m.ExposureOK, m.ExposureWhy)
		}
	}
}

func BenchmarkOfExposure(b *testing.B) {
	n, stars := testNight(b, targets.DefaultLimits()), testStars(b)
	s := NewScene(n, testInstant(b, "2026-12-02T04:00:00Z"))
	courses, wants := make([]Course, len(stars)), make([]Want, len(stars))
	for i := range stars {
		wants[i], _ = wantOf(b, stars[i].Target.Kind)
		courses[i] = Tonight(n, &stars[i], wants[i])
	}
	for i := 0; b.Loop(); i++ {
		k := i % len(stars)
		Of(&s, &stars[k], &courses[k], wants[k])
	}
}

func BenchmarkTonightExposure(b *testing.B) {
	n, stars := testNight(b, targets.DefaultLimits()), testStars(b)
	wants := make([]Want, len(stars))
	for i := range stars {
		wants[i], _ = wantOf(b, stars[i].Target.Kind)
	}
	for i := 0; b.Loop(); i++ {
		k := i % len(stars)
		Tonight(n, &stars[k], wants[k])
	}
}
