package logbook

import (
	"context"
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/targets"
	"evenfall/targets/store"
)

var (
	ctx   = context.Background()
	night = time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC)
)

func book(t testing.TB) *Book {
	t.Helper()
	db, err := store.Memory()
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { db.Close() })
	return Open(db, func() time.Time { return night }, "observer 1")
}

// What is read back is what was written, every field of it.
func TestRoundTrip(t *testing.T) {
	b := book(t)
	rapid.Check(t, func(t *rapid.T) {
		m := func(name string) targets.Measure {
			if !rapid.Bool().Draw(t, "has "+name) {
				return targets.Measure{}
			}
			return targets.Known(rapid.Float64Range(0, 60).Draw(t, name)) // within every range
		}
		start := night.Add(time.Duration(rapid.Int64Range(-1e9, 1e9).Draw(t, "start")) * time.Millisecond)
		e := Entry{Type: rapid.SampledFrom(Types).Draw(t, "type"), Request: rapid.String().Draw(t, "request"), Target: "R Lep", Programme: rapid.String().Draw(t, "programme"),
			Start: start, End: start.Add(time.Duration(rapid.Int64Range(0, 1e7).Draw(t, "length")) * time.Millisecond), Frames: rapid.IntRange(0, 1000).Draw(t, "frames"),
			EachS: targets.Known(rapid.Float64Range(0, 1e4).Draw(t, "each")), Band: "V", SlitArcsec: m("slit"), FileFirst: "a1", FileLast: "a9", MidBJD: m("bjd"),
			AirmassStart: m("x1"), AirmassMid: m("x2"), AirmEnd: m("x3"), Seeing: m("seeing"), SNR: m("snr"), ExpectMag: m("expect"),
			Grade: rapid.SampledFrom(Grades).Draw(t, "grade"), Note: rapid.String().Draw(t, "note"), Planned: rapid.Bool().Draw(t, "planned"), Observer: "observer 2"}
		id, err := b.Add(ctx, e)
		if err != nil {
			t.Fatal(err)
		}
		rows, err := b.Store().Select(ctx, store.Entries, "id = ?", id)
		if err != nil || len(rows) != 1 {
			t.Fatal(err)
		}
		want := e
		want.ID, want.Entered = id, night
		if got := entryOf(rows[0]); got != want {
			t.Fatalf("read  %+v\nwrote %+v", got, want)
		}
	})
}

// Amending and voiding keep what was; only the entry as it stands can be
// amended.
func TestAmend(t *testing.T) {
	b := book(t)
	id, err := b.Add(ctx, Entry{Type: "science", Target: "R Lep", Start: night, End: night.Add(10 * time.Minute), Frames: 3, EachS: targets.Known(90)})
	if err != nil {
		t.Fatal(err)
	}
	second, err := b.As("observer 2").Amend(ctx, id, func(e *Entry) error { e.Frames = 4; return nil })
	if err != nil || second <= id {
		t.Fatal(second, err)
	}
	if _, err := b.Amend(ctx, id, func(*Entry) error { return nil }); err == nil || !strings.Contains(err.Error(), fmt.Sprint("entry ", second)) {
		t.Errorf("amending what was replaced: %v", err)
	}
	third, err := b.Void(ctx, second, "wrong star")
	if err != nil {
		t.Fatal(err)
	}
	now, err := b.Entries(ctx, time.Time{}, time.Time{})
	if err != nil || len(now) != 1 || now[0].ID != third || !now[0].Void || now[0].Frames != 4 || !strings.Contains(now[0].Note, "wrong star") {
		t.Errorf("the log now: %+v, %v", now, err)
	}
	all, err := b.History(ctx)
	if err != nil || len(all) != 3 || all[0].Frames != 3 || all[1].Observer != "observer 2" || all[2].Replaces != second {
		t.Errorf("its history: %+v, %v", all, err)
	}
	if _, err := b.Void(ctx, 99, ""); !errors.Is(err, ErrNoEntry) {
		t.Errorf("voiding nothing: %v", err)
	}
	for _, bad := range []Entry{{}, {Type: "nap", Start: night}, {Type: "note"}, {Type: "science", Start: night}, {Type: "science", Target: "x", Start: night, End: night.Add(-1)},
		{Type: "science", Target: "x", Start: night, Grade: "lovely"}, {Type: "science", Target: "x", Start: night, EachS: targets.Known(math.NaN())},
		{Type: "science", Target: "x", Start: night, SNR: targets.Known(math.Inf(1))}, {Type: "note", Start: night, Seeing: targets.Known(-3)}, {Type: "note", Start: night, Frames: 1e9}} {
		if _, err := b.Add(ctx, bad); err == nil {
			t.Errorf("%+v is taken", bad)
		}
	}
}

// Progress follows from the log alone; void and poor takes are no visits.
func TestProgress(t *testing.T) {
	take := func(snr float64, grade string) Entry {
		return Entry{Type: "science", Request: "R1", Target: "R Lep", Start: night, End: night.Add(5 * time.Minute), Frames: 3, EachS: targets.Known(90), SNR: targets.Known(snr), Grade: grade}
	}
	void := take(90, "void")
	void.Void = true
	unnamed := take(0, "good")
	unnamed.Request, unnamed.Target, unnamed.SNR = "", "omi Cet", targets.Measure{}
	requests := []targets.Request{{ID: "R1", Target: "R Lep"}, {ID: "R2", Target: "omi Cet"}, {ID: "R3", Target: "x"}, {ID: "R4", Target: "x"}}
	other := unnamed
	other.Target = "x"
	all := ProgressOf(requests, []Entry{take(30, "good"), take(40, ""), take(12, "poor"), void, {Type: "note", Request: "R1", Start: night}, unnamed, other})
	if all["r2"].Visits != 1 || len(all) != 2 {
		t.Errorf("by target alone: %+v", all)
	}
	p := all["r1"]
	if p.Visits != 2 || math.Abs(p.SNR-math.Sqrt(900+1600+144)) > 1e-12 || p.Exposed != 3*270*time.Second {
		t.Errorf("%+v", p)
	}
}

func TestFiles(t *testing.T) {
	for _, c := range []struct {
		name string
		n    int
		want string
	}{{"obs0042.fits", 3, "obs0045.fits"}, {"obs0042", 1, "obs0043"}, {"n2_099.fits.gz", 1, "n2_100.fits.gz"}, {"9", 1, "10"}, {"20261202/b007", 2, "20261202/b009"}} {
		if got, ok := Count(c.name, c.n); !ok || got != c.want {
			t.Errorf("%s and %d is %q", c.name, c.n, got)
		}
	}
	if _, ok := Count("flat", 1); ok {
		t.Error("figures are found where there are none")
	}
	if a, z, err := SplitFiles("obs1..obs3"); err != nil || a != "obs1" || z != "obs3" {
		t.Error(a, z, err)
	}
	if _, _, err := SplitFiles("obs1.."); err == nil {
		t.Error("half a range is taken")
	}
}

// By the clock: slew, acquire, frames with readouts between, and the end.
func TestTake(t *testing.T) {
	k := Take{Phase: Exposing, PhaseAt: night, Frames: 3, EachS: 90, ReadoutS: 30, Done: -1}
	for _, c := range []struct {
		after time.Duration
		want  State
	}{
		{0, State{Phase: Exposing, Frame: 1, Left: 6 * time.Minute}},
		{95 * time.Second, State{Phase: Reading, Frame: 1, Left: 265 * time.Second, Frac: 95 * time.Second}},
		{121 * time.Second, State{Phase: Exposing, Frame: 2, Done: 1, Left: 239 * time.Second, Frac: 121 * time.Second}},
		{7 * time.Minute, State{Phase: Reading, Frame: 3, Done: 3, Frac: 7 * time.Minute, Over: true}},
	} {
		if c.after == 0 {
			c.want.Frac = 0
		}
		if got := k.At(night.Add(c.after)); got != c.want {
			t.Errorf("after %v: %+v, wanted %+v", c.after, got, c.want)
		}
	}
	if got := k.At(night.Add(-time.Hour)); got.Done != 0 || got.Frac != 0 {
		t.Errorf("the clock stepped back: %+v", got)
	}
	k.Done = 3
	if got := k.At(night); !got.Over {
		t.Errorf("counted by hand: %+v", got)
	}
}

// Two sessions that begin the same take at once: one is told who has it and
// must confirm; a hundred times, with connections of their own.
func TestHeld(t *testing.T) {
	path := filepath.Join(t.TempDir(), "run.db")
	var books [2]*Book
	for i := range books {
		db, err := store.Open(path)
		if err != nil {
			t.Fatal(err)
		}
		defer db.Close()
		books[i] = Open(db, func() time.Time { return night }, fmt.Sprintf("observer %d", i+1))
	}
	for round := range 100 {
		var errs [2]error
		var ids [2]int64
		var wg sync.WaitGroup
		for i, b := range books {
			wg.Add(1)
			go func() {
				defer wg.Done()
				ids[i], errs[i] = b.Begin(ctx, Take{Request: fmt.Sprint("R", round), Target: "R Lep", Phase: Slewing, PhaseAt: night, Began: night, Session: fmt.Sprint(i), Done: -1}, false)
			}()
		}
		wg.Wait()
		told := 0
		for i, err := range errs {
			var held Held
			if errors.As(err, &held) {
				told++
				if held.By.Observer != fmt.Sprintf("observer %d", 2-i) || !strings.Contains(err.Error(), "since 04:00:00") {
					t.Errorf("told: %v", err)
				}
				if id, err := books[i].Begin(ctx, Take{Request: fmt.Sprint("R", round), Phase: Slewing, PhaseAt: night, Began: night, Session: fmt.Sprint(i), Done: -1}, true); err != nil || id == 0 {
					t.Errorf("confirmed: %v", err)
				}
			} else if err != nil {
				t.Fatal(err)
			}
		}
		if told != 1 {
			t.Fatalf("round %d: %d were told", round, told)
		}
	}
	under, err := books[0].UnderWay(ctx)
	if err != nil || len(under) != 200 {
		t.Errorf("%d takes under way, %v", len(under), err)
	}
}

// Ending a take writes its entry once, however often it is asked for.
func TestEnd(t *testing.T) {
	b := book(t)
	k := Take{Target: "R Lep", Phase: Exposing, PhaseAt: night, Began: night, Frames: 3, EachS: 90, Done: -1, Session: "s"}
	id, err := b.Begin(ctx, k, false)
	if err != nil {
		t.Fatal(err)
	}
	k.ID = id
	e := Entry{Type: "science", Target: "R Lep", Start: night, End: night.Add(5 * time.Minute)}
	first, err := b.End(ctx, k, Aborted, e)
	if err != nil {
		t.Fatal(err)
	}
	again, err := b.End(ctx, k, Accepted, e)
	if err != nil || again != first {
		t.Errorf("ended twice: %d, %d, %v", first, again, err)
	}
	now, _ := b.Entries(ctx, time.Time{}, time.Time{})
	if under, _ := b.UnderWay(ctx); len(under) != 0 || len(now) != 1 || !now[0].Void {
		t.Errorf("%v under way, log %+v", under, now)
	}
}

// An entry sent twice, because its answer was lost, comes in once.
func TestKey(t *testing.T) {
	b := book(t)
	e := Entry{Type: "note", Start: night, Note: "fog", Key: "abc"}
	one, err := b.Add(ctx, e)
	if err != nil {
		t.Fatal(err)
	}
	two, err := b.Add(ctx, e)
	if err != nil || one != two {
		t.Errorf("%d, %d, %v", one, two, err)
	}
}

// Of each figure the latest holds; closing and opening make one closure.
func TestConditions(t *testing.T) {
	b := book(t)
	say := func(after time.Duration, c Conditions) {
		t.Helper()
		c.From = night.Add(after)
		if _, err := b.Conditions(ctx, c); err != nil {
			t.Fatal(err)
		}
	}
	say(0, Conditions{Seeing: targets.Known(1.1), Humidity: targets.Known(0.4)})
	say(time.Hour, Conditions{Seeing: targets.Known(1.6), WindMS: targets.Known(14), WindFrom: targets.Known(320)})
	say(2*time.Hour, Conditions{Dome: "closed", Reason: "weather", Humidity: targets.Known(0.9)})
	say(3*time.Hour+10*time.Minute, Conditions{Dome: "open"})
	for after, want := range map[time.Duration]Conditions{
		-time.Minute:     {},
		time.Minute:      {Seeing: targets.Known(1.1), Humidity: targets.Known(0.4)},
		90 * time.Minute: {Seeing: targets.Known(1.6), Humidity: targets.Known(0.4), WindMS: targets.Known(14), WindFrom: targets.Known(320)},
	} {
		got, err := b.At(ctx, night.Add(after))
		if err != nil || got.Seeing != want.Seeing || got.Humidity != want.Humidity || got.WindMS != want.WindMS {
			t.Errorf("after %v: %+v, %v", after, got, err)
		}
	}
	shut, err := b.At(ctx, night.Add(150*time.Minute))
	if err != nil || !shut.Of().Closed {
		t.Errorf("%+v, %v", shut, err)
	}
	limits := targets.DefaultLimits()
	if w := shut.Warnings(&limits); len(w) != 2 || !strings.Contains(w[0], "humidity 90 %") || !strings.Contains(w[1], "wind 14") {
		t.Errorf("warnings: %q", w)
	}
	open, _ := b.At(ctx, night.Add(4*time.Hour))
	if open.Of().Closed {
		t.Error("still closed")
	}
	log, err := b.Entries(ctx, time.Time{}, time.Time{})
	if err != nil {
		t.Fatal(err)
	}
	// a closure that was void never was
	id := int64(0)
	for _, e := range log {
		if e.Type == "closed" {
			id = e.ID
		}
	}
	if _, err := b.Void(ctx, id, "wrong night"); err != nil {
		t.Fatal(err)
	}
	if then, err := b.At(ctx, night.Add(150*time.Minute)); err != nil || then.Of().Closed {
		t.Errorf("void, and still closed: %+v, %v", then, err)
	}
	closed := 0
	for _, e := range log {
		if e.Type == "closed" {
			closed++
			if e.End.Sub(e.Start) != 70*time.Minute || e.Reason != "weather" {
				t.Errorf("closed %v to %v for %q", e.Start, e.End, e.Reason)
			}
		}
	}
	if closed != 1 || len(log) != 4 {
		t.Errorf("%d closures in %d entries", closed, len(log))
	}
	for _, bad := range []Conditions{{}, {Seeing: targets.Known(-1)}, {Dome: "ajar"}, {CloudFrom: targets.Known(10)}, {Photometric: "perhaps"}, {Dome: "closed", Reason: "hunger"}} {
		bad.From = night
		if _, err := b.Conditions(ctx, bad); err == nil {
			t.Errorf("%+v is taken", bad)
		}
	}
}

func TestKeep(t *testing.T) {
	b := book(t)
	for _, on := range []bool{true, true, false, true} {
		if err := b.Mark(ctx, "R Lep", on); err != nil {
			t.Fatal(err)
		}
	}
	if m, err := b.Marked(ctx); err != nil || len(m) != 1 || m[0] != "R Lep" {
		t.Errorf("marks %v, %v", m, err)
	}
	x := targets.Target{Name: "Nova, \"new\"", Kind: targets.Interacting, Mags: map[targets.Band]targets.Measure{"V": targets.Known(6.4)}}
	x.Place.EpochJyr = 2000
	if err := b.AddTarget(ctx, x); err != nil {
		t.Fatal(err)
	}
	if list, err := b.Added(ctx); err != nil || len(list) != 1 || list[0].Name != x.Name || list[0].Mags["V"].Value != 6.4 {
		t.Errorf("added %+v, %v", list, err)
	}
	m := targets.Magnitude{Target: "R Lep", JD: 2461377.5, TimeScale: "JD_UTC", Band: "V", Mag: 8.1, Err: 0.05, Source: "finder"}
	if _, err := b.AddMagnitude(ctx, m); err != nil {
		t.Fatal(err)
	}
	list, err := b.Magnitudes(ctx)
	if err != nil || len(list) != 1 {
		t.Fatalf("magnitudes %+v, %v", list, err)
	}
	number, ok := Entered(&list[0])
	if list[0].At = (targets.Where{}); !ok || list[0] != m {
		t.Errorf("magnitude %+v, entered %v", list[0], ok)
	}
	// a void one is not used and stays
	if err := b.VoidMagnitude(ctx, number); err != nil {
		t.Error(err)
	}
	if list, err := b.Magnitudes(ctx); err != nil || len(list) != 0 {
		t.Errorf("void magnitudes %+v, %v", list, err)
	}
	if err := b.VoidMagnitude(ctx, number); !errors.Is(err, ErrNoMagnitude) {
		t.Errorf("void twice: %v", err)
	}
	if rows, err := b.Store().Select(ctx, store.Magnitudes, ""); err != nil || len(rows) != 1 || rows[0].Int("void") != 1 {
		t.Errorf("the void one reads %v, %v", rows, err)
	}
	b.SaveDraft(ctx, "s", "log", "half")
	b.SaveDraft(ctx, "s", "log", "half a w")
	if d, err := b.Draft(ctx, "s", "log"); err != nil || d != "half a w" {
		t.Errorf("draft %q, %v", d, err)
	}
	b.SaveDraft(ctx, "s", "log", "")
	if d, _ := b.Draft(ctx, "s", "log"); d != "" {
		t.Errorf("draft %q", d)
	}
	s := Session{Name: "observer 1 on here", Observer: "observer 1", PID: 7, Began: night, State: "star"}
	id, err := b.SaveSession(ctx, s)
	if err != nil {
		t.Fatal(err)
	}
	s.ID, s.State = id, "next"
	b.SaveSession(ctx, s)
	if last, ok, err := b.LastSession(ctx, s.Name); err != nil || !ok || last.State != "next" || last.ID != id {
		t.Errorf("%+v, %v, %v", last, ok, err)
	}
	if others, err := b.Others(ctx, "somebody", night.Add(-time.Minute)); err != nil || len(others) != 1 {
		t.Errorf("%+v, %v", others, err)
	}
	b.Set(ctx, "bell", "off")
	if v, err := b.Setting(ctx, "bell"); err != nil || v != "off" {
		t.Errorf("%q, %v", v, err)
	}
}
