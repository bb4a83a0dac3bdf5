package check

import (
	"testing"

	"evenfall/targets/builtin"
	"evenfall/targets/exposure"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/targets/run"
	"evenfall/tui/desk"
)

// Equipped is the source with the instruments of the demonstration: each star
// is wanted as its kind is by default.
func Equipped(t testing.TB, every int) desk.Source {
	t.Helper()
	src := Source(t, every)
	r, _ := run.Open(builtin.Demo(), "demonstration")
	list := make([]roster.Entry, src.Roster.Len())
	for i := range list {
		list[i] = *src.Roster.Entry(i)
		q, ok := r.Config.DefaultRequest(list[i].Target.Kind)
		if !ok {
			continue
		}
		w := moment.Want{Weight: 1, Level: 0.8, Request: &q}
		w.Instrument, _ = r.Config.Instrument(q.Instrument)
		w.Mode, _ = w.Instrument.Mode(q.Mode)
		g, err := exposure.GoalOf(&q, w.Instrument.Kind)
		if err != nil {
			t.Fatal(err)
		}
		w.Goal = &g
		list[i].Want = w
	}
	src.Roster = roster.New(list, models(), nil)
	return src
}
