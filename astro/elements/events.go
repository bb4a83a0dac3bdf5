package elements

import (
	"errors"
	"fmt"
	"iter"
	"math"
	"slices"
	"strings"

	"evenfall/astro"
)

// Happening is what is to be dated: a phase, alone or with a stretch of time
// around it.
type Happening struct {
	Kind   string  // in the words of the caller: eclipse, maximum, phase, quadrature, ...
	Phase  float64 // of the event itself, cycles from the epoch
	Before float64 // how long before the event it starts, days; 0 with After 0: a moment
	After  float64 // how long after the event it ends, days
}

// The kinds that this package names itself.
const (
	KindEclipse    = "eclipse"
	KindMaximum    = "maximum"
	KindMinimum    = "minimum"
	KindQuadrature = "quadrature"
	KindPhase      = "phase"
)

// ErrHappening is returned for a stretch of time that no cycle holds.
var ErrHappening = errors.New("no such stretch within a cycle")

// Moment returns a happening without length.
func Moment(kind string, phase float64) Happening { return Happening{Kind: kind, Phase: phase} }

// Eclipse returns the eclipse at a phase, from ingress to egress.
//
// Given:
//   - phase: of mid-eclipse, cycles.
//   - minutes: the whole duration, first to last contact; 0: not known, the
//     eclipse is a moment.
//
// Returns:
//   - [ErrHappening] for a duration that is negative, not a number, or not
//     shorter than the period.
//
// Checked: TestEclipse.
func (e *Ephemeris) Eclipse(phase, minutes float64) (Happening, error) {
	days := minutes / 1440
	if !(days >= 0 && days < e.p) {
		return Happening{}, fmt.Errorf("eclipse of %g min in a period of %g d: %w", minutes, e.p, ErrHappening)
	}
	return Happening{Kind: KindEclipse, Phase: phase, Before: days / 2, After: days / 2}, nil
}

// Window returns the stretch between two phases.
//
// Given:
//   - from, to: phases, cycles; a window with from above to goes over phase 0,
//     as 0.9 to 0.1 does.
//
// Returns:
//   - the happening, dated by its middle.
//   - [ErrHappening] for phases outside -1 to 2, that are no numbers, or equal.
//
// Checked: TestWindow.
func (e *Ephemeris) Window(from, to float64) (Happening, error) {
	if !(from >= -1 && from <= 2 && to >= -1 && to <= 2) || from == to {
		return Happening{}, fmt.Errorf("phases %g to %g: %w", from, to, ErrHappening)
	}
	width := to - from
	if width -= math.Floor(width); width == 0 {
		width = 1
	}
	return Happening{Kind: KindPhase, Phase: from + width/2, Before: width / 2 * e.p, After: width / 2 * e.p}, nil
}

// Quadratures returns phases 0.25 and 0.75, the epoch being that of a
// conjunction.
func Quadratures() []Happening {
	return []Happening{Moment(KindQuadrature, 0.25), Moment(KindQuadrature, 0.75)}
}

// Extremes returns the maximum and the minimum of a pulsating star.
//
// Given:
//   - epochIsMax: phase 0 is maximum; else it is minimum.
//   - rise: time from minimum to maximum over the period, above 0 and below 1;
//     anything else leaves out the one that is not at the epoch.
func Extremes(epochIsMax bool, rise float64) []Happening {
	at, other, away := KindMinimum, KindMaximum, rise
	if epochIsMax {
		at, other, away = KindMaximum, KindMinimum, 1-rise
	}
	out := []Happening{Moment(at, 0)}
	if rise > 0 && rise < 1 {
		out = append(out, Moment(other, away))
	}
	return out
}

// Event is a dated happening.
type Event struct {
	Kind       string
	Cycle      float64       // count from the epoch, phase included
	Phase      float64       // 0 to below 1
	At         astro.Instant // at the site
	BJDTDB     float64       // day
	SigmaS     float64       // one sigma, seconds
	Start, End astro.Instant // zero for a moment
	Status     Status
	Words      string // what was assumed, what is expired; may be empty
}

// Clock dates the happenings of one star at one site.
type Clock struct {
	Sight     Sight
	Ephemeris *Ephemeris
}

// Events yields the happenings that overlap an interval, in order of time.
//
// Given:
//   - what: the happenings; those whose numbers cannot be used yield nothing.
//   - from, until: an event is given if its middle, or any of the stretch from
//     its start to its end, lies between them, ends included.
//
// Returns:
//   - events ordered by At, by kind where they coincide.
//
// Notes:
//  1. Nothing is worked out before it is asked for, so that a caller who has
//     seen enough may stop; a period of minutes makes a hundred thousand events
//     a year.
//  2. Expired events are given too, and say so.
//  3. Dates outside 1860 to 2150 end the list.
//
// Checked: TestEvents, TestEventsProperties, against
// testdata/astro/ephemeris_events.csv, 0.05 s.
func (c *Clock) Events(what []Happening, from, until astro.Instant) iter.Seq[Event] {
	return func(yield func(Event) bool) {
		queue := c.queue(what, from, until)
		for len(queue) > 0 {
			k := 0
			for i := range queue {
				if queue[i].next.before(&queue[k].next) {
					k = i
				}
			}
			if !yield(queue[k].next) {
				return
			}
			if !c.advance(queue[k], until) {
				queue = slices.Delete(queue, k, k+1)
			}
		}
	}
}

// course is one happening on its way through an interval.
type course struct {
	what  Happening
	cycle float64
	next  Event
}

// queue sets every happening to its first event in the interval.
func (c *Clock) queue(what []Happening, from, until astro.Instant) []*course {
	if c.Ephemeris == nil || from.IsZero() {
		return nil
	}
	var out []*course
	date := c.Sight.Date(from, c.Ephemeris.el.Scale)
	for _, h := range what {
		if !(h.Before >= 0 && h.After >= 0 && h.Before+h.After <= c.Ephemeris.p*(1+1e-9)) {
			continue
		}
		cycle, err := c.Ephemeris.Next(date-h.After-resolution, h.Phase)
		if err != nil {
			continue
		}
		for range 3 { // the dates' resolution may put the first before
			ev, err := c.event(h, cycle)
			if err != nil || ev.begins().After(until) {
				break
			}
			if !ev.ends().Before(from) {
				out = append(out, &course{h, cycle, ev})
				break
			}
			cycle++
		}
	}
	return out
}

// advance moves a happening on by a cycle; false: there is no more.
func (c *Clock) advance(q *course, until astro.Instant) bool {
	q.cycle++
	if c.Ephemeris.turned(q.cycle) {
		return false
	}
	ev, err := c.event(q.what, q.cycle)
	if err != nil || !ev.At.After(q.next.At) || ev.begins().After(until) {
		return false
	}
	q.next = ev
	return true
}

// before orders events by time, then by kind.
func (ev *Event) before(other *Event) bool {
	if ev.At.Before(other.At) || other.At.Before(ev.At) {
		return ev.At.Before(other.At)
	}
	return ev.Kind < other.Kind
}

func (ev *Event) begins() astro.Instant {
	if ev.Start.IsZero() {
		return ev.At
	}
	return ev.Start
}

func (ev *Event) ends() astro.Instant {
	if ev.End.IsZero() {
		return ev.At
	}
	return ev.End
}

// event dates a happening of a cycle.
func (c *Clock) event(h Happening, cycle float64) (Event, error) {
	e, scale := c.Ephemeris, c.Ephemeris.el.Scale
	date := e.Date(cycle)
	at, err := c.Sight.Instant(date, scale)
	if err != nil {
		return Event{}, err
	}
	ev := Event{Kind: h.Kind, Cycle: cycle, Phase: cycle - math.Floor(cycle), At: at, SigmaS: e.Sigma(cycle) * 86400, Status: e.StatusOf(cycle)}
	ev.BJDTDB = date
	if scale != BJDTDB {
		ev.BJDTDB = c.Sight.Date(at, BJDTDB)
	}
	if h.Before > 0 || h.After > 0 {
		if ev.Start, err = c.near(at, date, -h.Before); err != nil {
			return Event{}, err
		}
		if ev.End, err = c.near(at, date, h.After); err != nil {
			return Event{}, err
		}
	}
	ev.Words = e.words(cycle, ev.Status)
	return ev, nil
}

// near returns the instant some days from one whose date is known.
func (c *Clock) near(at astro.Instant, date, days float64) (astro.Instant, error) {
	guess, err := shift(at, days)
	if err != nil {
		return guess, err
	}
	return c.Sight.closeIn(guess, date+days, c.Ephemeris.el.Scale)
}

// words says what a reader must know of an event's date.
func (e *Ephemeris) words(cycle float64, s Status) string {
	list := slices.Clone(e.Assumed)
	if s == Expired {
		list = append([]string{fmt.Sprintf("ephemeris expired: uncertain by %.2g of a period", e.Sigma(cycle)/e.p)}, list...)
	}
	if e.el.Scale == HJD {
		list = append(list, "epoch in HJD without UTC or TT: 35 s in quadrature, read as UTC")
	}
	return strings.Join(list, "; ")
}

// Next returns the first event of a happening after an instant.
//
// Returns:
//   - ok false where no cycle falls there, or outside 1860 to 2150.
//
// Notes:
//  1. It is the middle that comes after the instant, not the start.
//
// Checked: TestEventsProperties: next after t is after t.
func (c *Clock) Next(h Happening, t astro.Instant) (Event, bool) {
	if c.Ephemeris == nil || t.IsZero() {
		return Event{}, false
	}
	cycle, err := c.Ephemeris.Next(c.Sight.Date(t, c.Ephemeris.el.Scale)-resolution, h.Phase)
	if err != nil {
		return Event{}, false
	}
	for range 3 { // the date's own resolution may put the first at or before t
		ev, err := c.event(h, cycle)
		if err != nil {
			return Event{}, false
		}
		if ev.At.After(t) {
			return ev, true
		}
		cycle++
	}
	return Event{}, false
}

// resolution is how closely dates are known, days.
const resolution = 2e-9

// PhaseAt returns the cycle, and the phase within it, at an instant at the
// site.
//
// Returns:
//   - cycle: with its fraction; phase: 0 to below 1; sigma: uncertainty of the
//     phase, cycles.
//   - [ErrNoCycle].
func (c *Clock) PhaseAt(t astro.Instant) (cycle, phase, sigma float64, err error) {
	if cycle, err = c.Ephemeris.CycleAt(c.Sight.Date(t, c.Ephemeris.el.Scale)); err != nil {
		return 0, 0, 0, err
	}
	return cycle, cycle - math.Floor(cycle), c.Ephemeris.Sigma(cycle) / c.Ephemeris.p, nil
}
