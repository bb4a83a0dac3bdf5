package roster

import (
	"context"
	"errors"
	"math"
	"math/rand"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/moment"
	"evenfall/targets/sweep"
)

// sharedModels are made once for all tests of the package.
var sharedModels = sync.OnceValue(moment.NewModels)

var site = astro.Site{Lat: astro.Deg(-29.26), Lon: astro.Deg(-70.73), HeightM: 2400, Air: astro.DefaultWeather(2400)}

func scene(t testing.TB, utc string) moment.Scene {
	t.Helper()
	n, err := moment.NewNight(site, astro.Date{Year: 2026, Month: 12, Day: 1}, targets.DefaultLimits(), targets.Conditions{})
	if err != nil {
		t.Fatal(err)
	}
	tt, err := time.Parse(time.RFC3339, utc)
	if err != nil {
		t.Fatal(err)
	}
	at, err := timescale.At(tt)
	if err != nil {
		t.Fatal(err)
	}
	return moment.NewScene(n, at)
}

func builtinRoster(t testing.TB) *Roster {
	t.Helper()
	return builtinOnce()
}

// builtinOnce is the built-in list, made once; a roster never changes.
var builtinOnce = sync.OnceValue(func() *Roster {
	stars, err := builtin.Stars()
	if err != nil {
		panic(err)
	}
	var list []Entry
	for _, s := range stars {
		list = append(list, Entry{Target: s, Want: moment.Want{Weight: 1, Level: 0.8}})
	}
	return New(list, sharedModels(), nil)
})

// many makes a list of random white dwarfs all over the sky.
func many(n int) *Roster {
	r := rand.New(rand.NewSource(3))
	list := make([]Entry, n)
	for i := range list {
		list[i] = Entry{Want: moment.Want{Weight: 1, Level: 0.8}, Target: targets.Target{Name: "s", Kind: targets.WD,
			Place: targets.Place{RA: astro.Deg(360 * r.Float64()), Dec: astro.Rad(math.Asin(2*r.Float64() - 1)), EpochJyr: 2016, EpochGiven: true,
				PMRA: targets.Known(100 * r.NormFloat64()), PMDec: targets.Known(100 * r.NormFloat64())},
			Mags: map[targets.Band]targets.Measure{"G": targets.Known(12 + 8*r.Float64())}}}
	}
	return New(list, sharedModels(), nil)
}

func TestSnapshotRanks(t *testing.T) {
	r := builtinRoster(t)
	s, err := r.Snapshot(context.Background(), Ask{Scene: scene(t, "2026-12-02T04:00:00Z")})
	if err != nil {
		t.Fatal(err)
	}
	if len(s.Order) != 256 || s.Bulk {
		t.Fatalf("%d rows, bulk %v", len(s.Order), s.Bulk)
	}
	for place, i := range s.Order {
		m := s.Row(int(i))
		if m.InCan != (m.Rank == place+1) {
			t.Errorf("place %d has rank %d", place, m.Rank)
		}
	}
}

// The sweep's classes and ends of windows are those of the exact moments: the
// ends to a minute and a half, the classes but at their very edges.
func TestSweepRanksLikeMoments(t *testing.T) {
	for _, at := range []string{"2026-12-02T04:00:00Z", "2026-12-01T20:00:00Z", "2026-12-02T00:10:00Z"} {
		t.Run(at, func(t *testing.T) { sweepRanksLikeMoments(t, scene(t, at)) })
	}
}

func sweepRanksLikeMoments(t *testing.T, sc moment.Scene) {
	r := many(Bulk + 1)
	s, err := r.Snapshot(context.Background(), Ask{Scene: sc})
	if err != nil || !s.Bulk {
		t.Fatal(err, s.Bulk)
	}
	b := boundsOf(&sc)
	k := r.night(sc.Night)
	wrong, worst, opened, late := 0, 0.0, 0, 0
	for i := 0; i < r.Len(); i += 9 {
		cols := sweepColumns(k, &sc, r.Len())
		q := b.judge(&sc.Frame, sc.Sun.Dir, k.sky.Direction(i), cols, i)
		m := r.Moment(&sc, i)
		class := uint8(2)
		if m.InShould {
			class = 0
		} else if m.InCan {
			class = 1
		}
		if class != q.class {
			wrong++
			continue
		}
		if class == 2 {
			// the sweep leaves Moon, Sun and the profile of the horizon out
			if open := m.NextOpen(); open != nil && !math.IsInf(float64(q.hours), 1) && len(m.BlockedBy) > 0 && m.BlockedBy[0].Code != "moon" {
				opened++
				if d := math.Abs(open.Sub(sc.Instant).Minutes() - float64(q.hours)*60); d > 1.5 {
					late++
				}
			}
		}
		if class < 2 {
			d := math.Abs(m.Left.Minutes() - float64(q.hours)*60)
			worst = math.Max(worst, d)
			check.Near(t, d, 0, 1.5, "minutes left of star %d", i)
		}
	}
	if wrong > 2 {
		t.Errorf("%d of %d in another class", wrong, r.Len()/9)
	}
	if late > opened/50 || opened < 30 {
		t.Errorf("%d of %d open at another time", late, opened)
	}
	t.Logf("windows end within %.2f min", worst)
}

func TestFilter(t *testing.T) {
	r := builtinRoster(t)
	sc := scene(t, "2026-12-02T04:00:00Z")
	for line, want := range map[string]func(x *targets.Target, m *moment.Moment) bool{
		"":               func(*targets.Target, *moment.Moment) bool { return true },
		"kind=wd alt>35": func(x *targets.Target, m *moment.Moment) bool { return x.Kind == targets.WD && m.Apparent.Deg() > 35 },
		"kind!=wd x<=1.5": func(x *targets.Target, m *moment.Moment) bool {
			return x.Kind != targets.WD && m.AirOK && m.Airmass <= 1.5
		},
		"stage=TPAGB moon>90": func(x *targets.Target, m *moment.Moment) bool { return m.Stage.Best == "TPAGB" && m.MoonSep.Deg() > 90 },
	} {
		f, err := ParseFilter(line)
		if err != nil {
			t.Fatal(err)
		}
		s, err := r.Snapshot(context.Background(), Ask{Scene: sc, Filter: f})
		if err != nil {
			t.Fatal(err)
		}
		for i := range r.Len() {
			m := s.Row(i)
			if got := slices.Contains(s.Order, int32(i)); got != want(&r.Entry(i).Target, m) {
				t.Errorf("%q: %s passes %v", line, r.Entry(i).Target.Name, got)
			}
		}
	}
	for _, bad := range []string{"alt>high", "colour=red", "kind>wd", "V<"} {
		if _, err := ParseFilter(bad); err == nil {
			t.Errorf("%q is taken", bad)
		}
	}
}

func TestSort(t *testing.T) {
	r := builtinRoster(t)
	sc := scene(t, "2026-12-02T04:00:00Z")
	for _, key := range SortKeys {
		up, err := r.Snapshot(context.Background(), Ask{Scene: sc, Sort: Sort{Key: key}})
		if err != nil {
			t.Fatal(err)
		}
		for k := 1; k < len(up.Order); k++ {
			if absent, c := up.compare(key, nil, int(up.Order[k-1]), int(up.Order[k])); key != "next" && (absent > 0 || absent == 0 && c > 0) {
				t.Fatalf("%s: place %d stands after %d", key, k-1, k)
			}
		}
		down, err := r.Snapshot(context.Background(), Ask{Scene: sc, Sort: Sort{Key: key, Reverse: true}})
		if err != nil {
			t.Fatal(err)
		}
		for k := 1; k < len(down.Order); k++ {
			if absent, c := down.compare(key, nil, int(down.Order[k-1]), int(down.Order[k])); absent > 0 || absent == 0 && c < 0 {
				t.Fatalf("%s reversed: place %d stands after %d", key, k-1, k)
			}
		}
	}
}

// A long list stands in each order as its exact rows would have it, to what
// the sweep resolves.
func TestSortBulk(t *testing.T) {
	r, sc := many(Bulk+500), scene(t, "2026-12-02T04:00:00Z")
	keys := SortKeys
	if testing.Short() {
		keys = keys[5:7]
	}
	for _, key := range keys {
		for _, reverse := range []bool{false, true} {
			s, err := r.Snapshot(context.Background(), Ask{Scene: sc, Sort: Sort{key, reverse}})
			if err != nil {
				if !strings.Contains(err.Error(), "filter to") {
					t.Fatal(err)
				}
				continue
			}
			if len(s.Order) != r.Len() {
				t.Fatalf("%s: %d rows", key, len(s.Order))
			}
			for k := 7; k < len(s.Order); k += 7 {
				a, b := s.Row(int(s.Order[k-7])), s.Row(int(s.Order[k]))
				bad := 0.0
				switch key {
				case "alt":
					bad = b.Apparent.Deg() - a.Apparent.Deg()
				case "moon":
					bad = b.MoonSep.Deg() - a.MoonSep.Deg()
				case "dec":
					bad = a.Dec.Deg() - b.Dec.Deg()
				}
				if reverse {
					bad = -bad
				}
				if bad > 0.01 {
					t.Fatalf("%s, reversed %v: place %d off by %g", key, reverse, k, bad)
				}
			}
		}
	}
	f, err := ParseFilter("alt>60 G<16")
	if err != nil {
		t.Fatal(err)
	}
	s, err := r.Snapshot(context.Background(), Ask{Scene: sc, Filter: f, Sort: Sort{Key: "best"}})
	if err != nil || len(s.Order) == 0 || len(s.Order) > 1000 {
		t.Fatalf("%d rows, %v", len(s.Order), err)
	}
	for _, i := range s.Order {
		if m := s.Row(int(i)); m.Apparent.Deg() < 59.99 {
			t.Errorf("altitude %v passes alt>60", m.Apparent)
		}
	}
}

// A kept order is shown, the new one stands beside it.
func TestKeep(t *testing.T) {
	r := builtinRoster(t)
	a, err := r.Snapshot(context.Background(), Ask{Scene: scene(t, "2026-12-02T01:30:00Z")})
	if err != nil {
		t.Fatal(err)
	}
	b, err := r.Snapshot(context.Background(), Ask{Scene: scene(t, "2026-12-02T05:00:00Z"), Keep: a.Order})
	if err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(a.Order, b.Order) || slices.Equal(b.Order, b.Fresh) || !b.Stale || a.Stale {
		t.Error("the order shown is not the one kept, or the new one is the same")
	}
}

func TestMarks(t *testing.T) {
	r, sc := builtinRoster(t), scene(t, "2026-12-02T04:00:00Z")
	marks := map[int]bool{3: true, 17: true}
	for line, want := range map[string]int{"mark=yes": 2, "mark=no": 254, "mark!=yes": 254} {
		f, err := ParseFilter(line)
		if err != nil {
			t.Fatal(err)
		}
		s, err := r.Snapshot(context.Background(), Ask{Scene: sc, Filter: f, Marks: marks})
		if err != nil || len(s.Order) != want {
			t.Errorf("%s: %d rows, %v", line, len(s.Order), err)
		}
	}
}

func TestCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := builtinRoster(t).Snapshot(ctx, Ask{Scene: scene(t, "2026-12-02T04:00:00Z")}); !errors.Is(err, context.Canceled) {
		t.Errorf("after cancelling: %v", err)
	}
}

func TestWith(t *testing.T) {
	r := builtinRoster(t)
	n := r.With(Entry{Target: targets.Target{Name: "new", Kind: targets.WD}, Session: true})
	if r.Len() != 256 || n.Len() != 257 || !n.Entry(256).Session {
		t.Errorf("%d and %d targets", r.Len(), n.Len())
	}
}

func BenchmarkSnapshotBulk(b *testing.B) {
	r := many(360_000)
	sc := scene(b, "2026-12-02T04:00:00Z")
	for b.Loop() {
		if _, err := r.Snapshot(context.Background(), Ask{Scene: sc}); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkSnapshotExact(b *testing.B) {
	r := builtinRoster(b)
	sc := scene(b, "2026-12-02T04:00:00Z")
	for b.Loop() {
		if _, err := r.Snapshot(context.Background(), Ask{Scene: sc}); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkSnapshotBulkFiltered(b *testing.B) {
	r, sc := many(360_000), scene(b, "2026-12-02T04:00:00Z")
	f, err := ParseFilter("alt>35 G<16")
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := r.Snapshot(context.Background(), Ask{Scene: sc, Filter: f}); err != nil {
			b.Fatal(err)
		}
	}
}

func sweepColumns(k *nightly, sc *moment.Scene, n int) *sweep.Columns {
	cols := sweep.NewColumns(n)
	k.sky.At(&sc.Frame, sc.Moon.Dir, cols)
	return cols
}
