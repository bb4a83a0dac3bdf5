package roster

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
)

// everyHours dates an event each so many hours for every third row, the last
// first.
func everyHours(hours int) Dates {
	return func(row int, from, until astro.Instant) []light.Event {
		var out []light.Event
		if row%3 != 0 {
			return nil
		}
		for at := from.Add(time.Duration(row) * time.Minute); at.Before(until.Add(5 * time.Hour)); at = at.Add(time.Duration(hours) * time.Hour) {
			out = append(out, light.Event{Kind: "eclipse", At: at, SigmaS: 10, Status: light.EventGood})
		}
		slices.Reverse(out)
		return out
	}
}

func rowsOf(r *Roster) []int32 {
	out := make([]int32, r.Len())
	for i := range out {
		out[i] = int32(i)
	}
	return out
}

// Happenings stand in the order of time, within the span, each in its night;
// the work can be ended.
func TestHappenings(t *testing.T) {
	r := builtinRoster(t)
	sc := scene(t, "2026-12-02T04:00:00Z")
	span := astro.Span{From: sc.Night.Span.From, Until: sc.Night.Span.From.Add(72 * time.Hour)}
	list, err := r.Happenings(context.Background(), rowsOf(r), site, span, everyHours(7))
	if err != nil || len(list) < 500 {
		t.Fatalf("%d happenings, %v", len(list), err)
	}
	nights := map[astro.Date]int{}
	for i := range list {
		if i > 0 && list[i].At.Before(list[i-1].At) {
			t.Fatalf("happening %d comes before the one before it", i)
		}
		if !span.Contains(list[i].At) {
			t.Errorf("happening %d lies outside", i)
		}
		nights[list[i].Night]++
	}
	if len(nights) != 3 || nights[astro.Date{Year: 2026, Month: 12, Day: 1}] == 0 || nights[astro.Date{Year: 2026, Month: 12, Day: 4}] != 0 {
		t.Errorf("nights %v", nights)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := r.Happenings(ctx, rowsOf(r), site, span, everyHours(7)); !errors.Is(err, context.Canceled) {
		t.Errorf("a cancelled call ends with %v", err)
	}
	if list, err := r.Happenings(context.Background(), rowsOf(r), site, span, nil); err != nil || len(list) == 0 {
		t.Errorf("by the targets' own forecasts %d, %v", len(list), err)
	}
}

// Where a target stands at an event is what its moment says, and nights ahead
// push out nothing that is kept.
func TestStand(t *testing.T) {
	r := builtinRoster(t)
	sc := scene(t, "2026-12-02T04:00:00Z")
	first := r.Course(sc.Night, 0)
	list, err := r.Happenings(context.Background(), rowsOf(r), site, sc.Night.Span, everyHours(5))
	if err != nil {
		t.Fatal(err)
	}
	if err := r.Stand(context.Background(), sc.Night, list); err != nil {
		t.Fatal(err)
	}
	can := 0
	for i := 0; i < len(list); i += 7 {
		h := &list[i]
		s := moment.NewScene(sc.Night, h.At)
		m := r.Moment(&s, int(h.Row))
		if !h.Placed || h.Altitude != m.Place.Alt || h.Airmass != m.Airmass || h.AirOK != m.AirOK || h.Can != m.InCan || h.Can == (h.Why != "") {
			t.Errorf("%d: %+v, moment %v %v %v", i, h, m.Place.Alt, m.Airmass, m.InCan)
		}
		if h.Can {
			can++
		}
	}
	if can == 0 {
		t.Error("none can be observed")
	}
	if r.Course(sc.Night, 0) != first {
		t.Error("the night's courses were made anew")
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if err := r.Stand(ctx, sc.Night, list); !errors.Is(err, context.Canceled) {
		t.Errorf("a cancelled call ends with %v", err)
	}
}

// Other magnitudes renew one target's forecast and leave all else.
func TestWithMagnitudes(t *testing.T) {
	r := builtinRoster(t)
	sc := scene(t, "2026-12-02T04:00:00Z")
	p0, p1, c1 := r.Prepared(0), r.Prepared(1), r.Course(sc.Night, 1)
	mags := []targets.Magnitude{{Target: r.Entry(0).Target.Name, JD: 2461376.5, TimeScale: "JD_UTC", Band: "V", Mag: 8.1}}
	n := r.WithMagnitudes(map[int][]targets.Magnitude{0: mags})
	if n.Prepared(0) == p0 || n.Prepared(1) != p1 || n.Course(sc.Night, 1) != c1 {
		t.Error("not just the one target was made anew")
	}
	if len(r.Entry(0).Magnitudes) != 0 || len(n.Entry(0).Magnitudes) != 1 || r.Prepared(0) != p0 {
		t.Error("the roster before is another one now")
	}
	if n.Len() != r.Len() || n.byName[3] != r.byName[3] {
		t.Error("another list")
	}
}

// A request's window of phase is dated, with its beginning and end.
func TestHappeningsPhases(t *testing.T) {
	list := []Entry{{Want: moment.Want{Weight: 1, Level: 0.8}, Phases: [][2]float64{{0.9, 0.1}},
		Target: targets.Target{Name: "a", Kind: targets.Interacting, Place: targets.Place{RA: astro.Deg(50), Dec: astro.Deg(-20), EpochJyr: 2000},
			Var: targets.Variability{Type: "EA", PeriodD: targets.KnownErr(0.5, 1e-9), EpochMinJD: targets.KnownErr(2461000.25, 1e-5), TimeScale: "BJD_TDB"}}}}
	r := New(list, sharedModels(), nil)
	site := astro.Site{Lat: astro.Deg(-29), Lon: astro.Deg(-70), HeightM: 2400, Air: astro.DefaultWeather(2400)}
	from, err := timescale.At(time.Date(2026, 12, 1, 17, 0, 0, 0, time.UTC))
	if err != nil {
		t.Fatal(err)
	}
	got, err := r.Happenings(context.Background(), []int32{0}, site, astro.Span{From: from, Until: from.Add(24 * time.Hour)}, nil)
	if err != nil {
		t.Fatal(err)
	}
	phases := 0
	for _, h := range got {
		if h.Kind != "phase" {
			continue
		}
		phases++
		if h.Start == nil || h.End == nil || math.Abs(h.End.Sub(*h.Start).Hours()-0.2*12) > 0.01 {
			t.Errorf("window %+v", h)
		}
	}
	if phases < 2 || phases > 3 {
		t.Errorf("%d windows of phase in a day of two cycles", phases)
	}
}
