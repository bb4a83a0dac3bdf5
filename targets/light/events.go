package light

import (
	"math"
	"time"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/astro/timescale"
)

// How far an event's date can be trusted.
const (
	EventGood    = "good"
	EventAssumed = "assumed" // an error of the elements was taken from their last digit
	EventExpired = "expired" // uncertain by more than a tenth of the period
)

// Event is a dated happening of a target.
type Event struct {
	Kind   string // eclipse, maximum
	At     astro.Instant
	BJDTDB float64 // the same at the barycentre, day
	SigmaS float64
	Status string
	Start  *astro.Instant // ingress, or where a window begins; nil: an instant alone
	End    *astro.Instant
	Words  string // what is to be said beside it
}

// Next returns the next eclipse and the next maximum after an instant, as far
// as the list's elements date them.
//
// Notes:
//  1. Maxima of long-period variables wander: their uncertainty is that of the
//     phase, see [PhaseError]. Beyond a tenth of a period an event is expired.
//
// Checked: TestEvents.
func (s *State) Next(t astro.Instant) []Event {
	var out []Event
	if e := s.eclipse; e != nil {
		if ev, ok := e.next(t); ok {
			out = append(out, ev)
		}
	}
	if l := s.maximum; l != nil && !math.IsNaN(l.epoch) && !math.IsNaN(l.periodD) {
		cycles := math.Ceil((t.JDUTC() - l.epoch) / l.periodD)
		jd := l.epoch + cycles*l.periodD
		if at, err := timescale.FromJD(jd, "JD_UTC"); err == nil {
			sigma := PhaseError(cycles)
			ev := Event{Kind: "maximum", At: at, BJDTDB: at.JDTT(), SigmaS: sigma * l.periodD * 86400, Status: EventGood}
			if sigma > expiredCycles {
				ev.Status = EventExpired
			}
			out = append(out, ev)
		}
	}
	return out
}

// next dates the first mid-eclipse after an instant.
func (e *eclipse) next(t astro.Instant) (Event, bool) {
	at := t
	for range 4 { // the light-time changes little while it is closed in on
		now := e.at(at)
		ahead := -now.phase
		if ahead < -1e-9 && at.Sub(t) <= 0 {
			ahead++
		}
		step := ahead * e.period * 86400e9
		if math.Abs(step) > 3e17 { // ten years: no event worth dating
			return Event{}, false
		}
		at = at.Add(time.Duration(step))
	}
	if _, err := timescale.At(at.UTC()); err != nil {
		return Event{}, false
	}
	now := e.at(at)
	earth := frame.EarthAt(at)
	const auDays = 499.004783836 / 86400
	bjd := 2451545 + at.DaysTT() + timescale.TDBMinusTT(at)/86400 + earth.Bary.Dot(e.star.Direction(at))*auDays
	ev := Event{Kind: "eclipse", At: at, BJDTDB: bjd, SigmaS: now.sigma * e.period * 86400, Status: EventGood}
	switch {
	case now.sigma > expiredCycles:
		ev.Status = EventExpired
	case e.assumed:
		ev.Status = EventAssumed
	}
	return ev, true
}
