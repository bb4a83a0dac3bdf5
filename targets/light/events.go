package light

import (
	"errors"
	"fmt"
	"math"
	"sort"

	"evenfall/astro"
	"evenfall/astro/elements"
	"evenfall/astro/timescale"
)

// How far an event's date can be trusted.
const (
	EventGood    = string(elements.Good)
	EventAssumed = string(elements.Assumed) // an error of the elements was taken from their last digit
	EventExpired = string(elements.Expired) // uncertain by more than a tenth of the period
)

// Event is a dated happening of a target.
type Event struct {
	Kind   string // eclipse, maximum, minimum, quadrature, phase
	At     astro.Instant
	BJDTDB float64 // the same at the barycentre, day
	SigmaS float64
	Status string
	Start  *astro.Instant // ingress, or where a window begins; nil: an instant alone
	End    *astro.Instant
	Words  string // what is to be said beside it
}

// ErrNoPhase is returned where a target has nothing that phases count from.
var ErrNoPhase = errors.New("no elements and no magnitudes that date the phases of this target")

// minimumScatter is how far a minimum lies from where the rise time puts it,
// cycle. Common practice, no source.
const minimumScatter = 0.05

// Next returns the next eclipse and the next maximum after an instant, as far
// as elements or magnitudes date them, seen from the Earth's centre, 21 ms from
// any site.
//
// Notes:
//  1. Maxima of long-period variables come from their filter, which the
//     magnitudes up to the instant taught.
//
// Checked: TestNext.
func (s *State) Next(t astro.Instant) []Event {
	var out []Event
	for i := range s.timed {
		x := &s.timed[i]
		if x.kind == kindMinimum {
			continue
		}
		if ev, ok := x.clock.Next(x.what[0], t); ok {
			out = append(out, eventOf(ev))
		}
	}
	if m := s.nextMaximum(t, t); m != nil {
		out = append(out, s.dated(nil, kindMaximum, m.jd, m.sigmaD, m)...)
	}
	return out
}

// Events returns the dated happenings of a target from one instant until
// another as they are seen from a site, in order of time: eclipses from ingress
// to egress, quadratures, maxima and minima.
//
// Given:
//   - from, until: an event counts if it, or any of the stretch from its start
//     to its end, lies between them. Magnitudes later than from teach nothing;
//     see [State.EventsAsOf].
//
// Notes:
//  1. Expired events are given too, and say so. A period of an hour makes some
//     30 000 events a year.
//
// Checked: TestEvents, against testdata/astro/ephemeris_events.csv, 0.05 s.
func (s *State) Events(site astro.Site, from, until astro.Instant) []Event {
	return s.EventsAsOf(site, from, from, until)
}

// EventsAsOf returns the dated happenings of a target as [State.Events] does,
// as the magnitudes up to an instant date them.
//
// Given:
//   - asOf: no magnitude later than this teaches; it may come before from or
//     after it.
//   - site, from, until: as for [State.Events].
//
// Notes:
//  1. All maxima and minima of a long-period variable are of one row, which the
//     same magnitudes always lay the same: [State.Next] of asOf gives its next.
//
// Checked: TestEventsAsOf.
func (s *State) EventsAsOf(site astro.Site, asOf, from, until astro.Instant) []Event {
	var out []Event
	for i := range s.timed {
		for ev := range s.timed[i].at(site).Events(s.timed[i].what, from, until) {
			out = append(out, eventOf(ev))
		}
	}
	out = append(out, s.wandering(site, asOf, from, until)...)
	sort.SliceStable(out, func(i, j int) bool { return out[i].At.Before(out[j].At) })
	return out
}

// PhaseWindows returns when a target is between two phases.
//
// Given:
//   - site, from, until: as for [State.Events].
//   - phaseFrom, phaseTo: cycles, 0 to 1; from above to goes over phase 0, as
//     0.9 to 0.1 does. Phase 0 is mid-eclipse, or maximum, or where the
//     elements count from minimum, minimum.
//
// Returns:
//   - windows with Start and End, in order of time.
//   - [ErrNoPhase], [elements.ErrHappening] for phases that are none.
//
// Checked: TestPhaseWindows.
func (s *State) PhaseWindows(site astro.Site, phaseFrom, phaseTo float64, from, until astro.Instant) ([]Event, error) {
	if len(s.timed) > 0 {
		x := &s.timed[0]
		h, err := x.clock.Ephemeris.Window(phaseFrom, phaseTo)
		if err != nil {
			return nil, fmt.Errorf("phase window: %w", err)
		}
		var out []Event
		for ev := range x.at(site).Events([]elements.Happening{h}, from, until) {
			out = append(out, eventOf(ev))
		}
		return out, nil
	}
	if !(phaseFrom >= -1 && phaseFrom <= 2 && phaseTo >= -1 && phaseTo <= 2) || phaseFrom == phaseTo {
		return nil, fmt.Errorf("phase window %g to %g: %w", phaseFrom, phaseTo, elements.ErrHappening)
	}
	m := s.nextMaximum(from, from)
	if m == nil {
		return nil, ErrNoPhase
	}
	width := phaseTo - phaseFrom
	if width -= math.Floor(width); width == 0 {
		width = 1
	}
	var out []Event
	// from two cycles before, so that no window under way is missed
	for jd := m.jd + (phaseFrom-math.Floor(phaseFrom)-2)*m.periodD; jd < until.JDUTC(); jd += m.periodD {
		end := jd + width*m.periodD
		if end < from.JDUTC() {
			continue
		}
		for _, ev := range s.dated(&site, elements.KindPhase, (jd+end)/2, m.sigmaD, m) {
			a, err1 := timescale.FromJD(jd, "JD_UTC")
			b, err2 := timescale.FromJD(end, "JD_UTC")
			if err1 == nil && err2 == nil {
				ev.Start, ev.End = &a, &b
				out = append(out, ev)
			}
		}
	}
	return out, nil
}

// at returns the clock of a site.
func (x *timed) at(site astro.Site) *elements.Clock {
	c := x.clock
	c.Sight.Site = site
	return &c
}

func eventOf(ev elements.Event) Event {
	out := Event{Kind: ev.Kind, At: ev.At, BJDTDB: ev.BJDTDB, SigmaS: ev.SigmaS, Status: string(ev.Status), Words: ev.Words}
	if !ev.Start.IsZero() {
		out.Start = &ev.Start
	}
	if !ev.End.IsZero() {
		out.End = &ev.End
	}
	return out
}

// dated makes an event of a long-period variable; none where the date is none.
func (s *State) dated(site *astro.Site, kind string, jd, sigmaD float64, m *maximum) []Event {
	at, err := timescale.FromJD(jd, "JD_UTC")
	if err != nil {
		return nil
	}
	sight := elements.Sight{Star: starOf(&s.t)}
	if site != nil {
		sight.Site = *site
	}
	ev := Event{Kind: kind, At: at, BJDTDB: sight.Date(at, elements.BJDTDB), SigmaS: sigmaD * 86400, Status: EventGood, Words: "phase " + m.status}
	if sigmaD > expiredCycles*m.periodD || m.status == PhaseUnknown {
		ev.Status = EventExpired
		ev.Words += fmt.Sprintf(": uncertain by %.2g of a period", sigmaD/m.periodD)
	}
	return []Event{ev}
}
