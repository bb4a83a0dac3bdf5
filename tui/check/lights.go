package check

import (
	"hash/fnv"
	"math"
	"time"

	"evenfall/astro"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
)

// Lights is an invented sky for tests of light curves and dates: eclipses of
// interacting binaries, maxima of Miras, magnitudes of the past year. Not one
// figure of it is true of any star.
type Lights struct{}

// draw returns a number from 0 to 1 that depends on a name and a count alone.
func draw(name string, n int) float64 {
	h := fnv.New64a()
	h.Write([]byte(name))
	h.Write([]byte{byte(n), byte(n >> 8)})
	return float64(h.Sum64()>>11) / (1 << 53)
}

func instant(t time.Time) astro.Instant {
	at, err := timescale.At(t)
	if err != nil {
		panic("check: " + err.Error())
	}
	return at
}

// rhythm is the kind of event of a target, its period and the first one after
// Start.
func rhythm(t *targets.Target) (kind string, period, first time.Duration) {
	name := t.Name
	switch t.Kind {
	case targets.Interacting:
		kind, period = "eclipse", time.Duration((0.1+3*draw(name, 0))*86400)*time.Second
	case targets.LPV:
		kind, period = "maximum", time.Duration(150+300*draw(name, 0))*24*time.Hour
	default:
		return "", 0, 0
	}
	return kind, period, time.Duration(draw(name, 1) * float64(period)).Round(time.Second)
}

// Events dates what a target does.
func (Lights) Events(p *moment.Prepared, _ astro.Site, _, from, until astro.Instant) []light.Event {
	kind, period, first := rhythm(&p.Target)
	if period == 0 {
		return nil
	}
	at := instant(Start).Add(first)
	for k := math.Floor(float64(from.Sub(at)) / float64(period)); ; k++ {
		e := light.Event{Kind: kind, At: at.Add(time.Duration(k) * period), Status: light.EventGood, SigmaS: math.Round(200 * draw(p.Target.Name, 2))}
		if !e.At.Before(until) {
			return nil
		}
		if e.At.Before(from) {
			continue
		}
		return append([]light.Event{complete(e, p.Target.Name)}, rest(e, p.Target.Name, period, until)...)
	}
}

func rest(e light.Event, name string, period time.Duration, until astro.Instant) []light.Event {
	var out []light.Event
	for {
		e.At = e.At.Add(period)
		if !e.At.Before(until) {
			return out
		}
		out = append(out, complete(e, name))
	}
}

// complete fills in what an event is besides its time.
func complete(e light.Event, name string) light.Event {
	e.BJDTDB = e.At.JDTT()
	switch u := draw(name, 3); {
	case e.Kind == "maximum":
		e.SigmaS, e.Words = 86400*math.Round(4+20*u), "invented for tests"
		if u > 0.7 {
			e.Status = light.EventExpired
		}
	case u > 0.8:
		e.Status, e.SigmaS = light.EventExpired, 4000
	case u > 0.4:
		e.Status = light.EventAssumed
	}
	if e.Kind == "eclipse" {
		from, until := e.At.Add(-6*time.Minute), e.At.Add(6*time.Minute)
		e.Start, e.End = &from, &until
	}
	return e
}

// Next dates the next event.
func (l Lights) Next(p *moment.Prepared, from astro.Instant) []light.Event {
	list := l.Events(p, Site, from, from, from.Add(500*24*time.Hour))
	return list[:min(len(list), 1)]
}

// bright is the invented magnitude of a target so many days after Start.
func bright(t *targets.Target, days float64) float64 {
	_, period, first := rhythm(t)
	mean := 7 + 6*draw(t.Name, 4)
	if t.Kind != targets.LPV {
		return mean
	}
	return mean - 2*math.Cos(2*math.Pi*(days-first.Hours()/24)/(period.Hours()/24))
}

// Chart returns an invented forecast, the vaguer the further ahead.
func (Lights) Chart(p *moment.Prepared, at []astro.Instant, ask light.Ask) []light.Forecast {
	out := make([]light.Forecast, len(at))
	band := ask.Band
	if band == "" {
		band = "V"
	}
	for i := range at {
		days := at[i].Sub(instant(Start)).Hours() / 24
		m, wide := bright(&p.Target, days), 0.1
		if p.Target.Kind == targets.LPV {
			wide = 0.3 + 0.7*math.Min(math.Max(days, 0)/200, 1)
		}
		out[i] = light.Forecast{Band: band, Known: p.Target.Kind != targets.PN, Mag: astro.Mags(m), Lo: astro.Mags(m - wide), Hi: astro.Mags(m + wide),
			Level: 0.8, Basis: "18 invented magnitudes of the past year put maximum where the test wants it"}
	}
	return out
}

// Past returns invented magnitudes of the year before Start, and what was
// entered.
func (Lights) Past(p *moment.Prepared) []light.Seen {
	var out []light.Seen
	if p.Target.Kind != targets.LPV {
		return append(out, p.Light.Past()...)
	}
	for k := range 18 {
		days := -310 + 17*float64(k) + 10*draw(p.Target.Name, 10+k)
		at := instant(Start).Add(time.Duration(days * 86400e9))
		s := light.Seen{At: at, Used: true, Magnitude: targets.Magnitude{Target: p.Target.Name, JD: at.JDUTC(), Band: "V", Mag: bright(&p.Target, days) + 0.6*(draw(p.Target.Name, 30+k)-0.5)}}
		switch k {
		case 5:
			s.Limit, s.Mag = true, s.Mag-0.5
		case 9:
			s.Unlikely, s.Mag = true, s.Mag-1.5
		case 12:
			s.Band = "B"
		case 14:
			s.Used, s.Why = false, "invented reason"
		}
		out = append(out, s)
	}
	return append(out, p.Light.Past()...)
}
