package light

import (
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/stage"
)

func firstMaximum(list []Event) (at astro.Instant, ok bool) {
	for _, e := range list {
		if e.Kind == kindMaximum {
			return e.At, true
		}
	}
	return astro.Instant{}, false
}

// One row of maxima, whatever is asked: of a Mira with two magnitudes the next
// maximum is the same by Next, by the events as of the instant from then on or
// from later, and a day later; magnitudes later than asOf teach nothing.
func TestEventsAsOf(t *testing.T) {
	for _, mags := range [][]targets.Magnitude{{magsAt("V", 40, 9.1), magsAt("V", 9, 10.4)}, miraMags(30, 5, "V"), {magsAt("B", 20, 9)}, nil} {
		s := NewState(aMira(300*44+70), stage.Verdict{}, mags)
		next, ok := firstMaximum(s.Next(now))
		if !ok {
			t.Fatalf("no maximum with %d magnitudes", len(mags))
		}
		later := next.Add(-100 * time.Hour)
		for _, list := range [][]Event{s.EventsAsOf(site, now, now, now.Add(days(700))), s.Events(site, now, now.Add(days(700))),
			s.EventsAsOf(site, now, later, now.Add(days(700))), s.EventsAsOf(site, now, now.Add(-days(50)), now.Add(days(700))), s.Next(later)} {
			got, _ := firstMaximum(list)
			if d := got.Sub(next).Hours() / 24; d < -1 { // one before now
				got, _ = firstMaximum(list[2:])
			}
			check.Near(t, got.Sub(next).Hours()/24, 0, 0.01, "days between the next maximum by one way and by another, %d magnitudes", len(mags))
		}
	}
	early := now.Add(-days(20))
	with := NewState(aMira(150), stage.Verdict{}, []targets.Magnitude{magsAt("V", 40, 9.1), magsAt("V", 9, 12)})
	without := NewState(aMira(150), stage.Verdict{}, []targets.Magnitude{magsAt("V", 40, 9.1)})
	a, _ := firstMaximum(with.EventsAsOf(site, early, now, now.Add(days(400))))
	b, _ := firstMaximum(without.EventsAsOf(site, early, now, now.Add(days(400))))
	check.Near(t, a.Sub(b).Hours(), 0, 0.01, "hours that a magnitude after asOf moves the maximum by")
}
