package desk_test

import (
	"context"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/store"
	"evenfall/tui/check"
)

var ctx = context.Background()

func logOf(t *testing.T, b *logbook.Book) []logbook.Entry {
	t.Helper()
	list, err := b.Entries(ctx, time.Time{}, time.Time{})
	if err != nil {
		t.Fatal(err)
	}
	return list
}

// A take in two keys; the name is asked once; the loop is followed by the
// clock on every screen; what is logged is what was done.
func TestTwoKeys(t *testing.T) {
	src := check.Source(t, 5)
	book := check.Logged(t, &src, "")
	src.Readout = func(string) float64 { return 30 }
	d := check.New(t, src, 80, 24)
	d.See("idle   fits")
	name := strings.TrimSpace(d.Selected()[7:20])
	d.Press("e").Type("3x90 obs0042").Press("enter").See("the next take: 3x90 obs0042")
	d.Press("T").See("who observes?").Type("observer 1").Press("enter").See("exposing "+name, "frame 1 of 3, 6:00 left", "saved")
	d.Wait(95 * time.Second).See("reading out " + name)
	d.Wait(30 * time.Second).Press("enter").See("frame 2 of 3")
	d.Press("l").See("frame 2 of 3").Press("q", "q")
	d.Wait(5 * time.Minute).See("COMPLETE 3 of 3: t accepts")
	if !d.Desk.Rings() || d.Desk.Rings() {
		t.Error("the bell rings not once at the end of the series")
	}
	d.Press("t").See("entry 1 saved", "idle")
	list := logOf(t, book)
	if len(list) != 1 {
		t.Fatal(list)
	}
	e := list[0]
	if e.Target != name || e.Frames != 3 || e.EachS.Value != 90 || e.FileFirst != "obs0042" || e.FileLast != "obs0044" || e.Observer != "observer 1" ||
		!e.Start.Equal(check.Start) || e.End.Sub(e.Start) != 330*time.Second || !e.AirmassMid.Known || !e.MidBJD.Known || e.Void {
		t.Errorf("%+v", e)
	}
	// the next one counts its files on, and nobody is asked again
	d.Press("T").See("frame 1 of 3").Press("x").See("entry 2 saved")
	d.Press("T").See("frame 1 of 3").Wait(130 * time.Second).Press("x").See("entry 3 saved")
	if list = logOf(t, book); list[1].FileFirst != "" || list[1].Frames != 0 || list[2].FileFirst != "obs0045" || list[2].FileLast != "obs0045" ||
		!strings.Contains(list[2].Note, "stopped early") || list[2].Frames != 1 {
		t.Errorf("%+v", list[1])
	}
}

// Step by step, counted by hand, aborted, amended, void.
func TestLoopSteps(t *testing.T) {
	src := check.Source(t, 5)
	book := check.Logged(t, &src, "observer 1")
	d := check.New(t, src, 80, 24)
	d.Press("t").See("slewing ").Press("t").See("acquiring ").Press("t").See("exposing ", "t ends it")
	d.Press("f", "f", "f").See("frame 3 done")
	d.Press("e").Type("5x60").Press("enter").See("frame 4 of 5")
	d.Press("t").See("the series is not complete").Press("n").See("not done", "exposing").Press("t", "y").See("entry 1 saved", "idle")
	d.Wait(10 * time.Second)
	d.Press("t").See("slewing").Press("X").See("aborts").Press("y").See("entry 2 saved")
	list := logOf(t, book)
	if list[0].Frames != 3 || list[0].EachS.Value != 60 || !list[1].Void || list[1].Type != "acquisition" {
		t.Errorf("%+v", list)
	}
	d.Wait(10 * time.Second)
	d.Press("o").Type("fog from the west").Press("enter").See("entry 3 saved")
	d.Press("l").See("fog from the west", "VOID").Press("g", "1").See("kept in the history").Press("0").See("declares entry").Press("y")
	list = logOf(t, book)
	if first := list[0]; !first.Void || first.Replaces == 0 {
		t.Errorf("%+v", first)
	}
	d.Press("esc", "x", "f", "X").See("nothing is under way")
	d.Press("e").Type("3x").Press("enter").Press("e").Type("a b c").Press("enter").See("write frames x seconds")
	d.Press("esc", "i").Type("-0.4").Press("enter").See("-0.4 s ahead")
	d.Press("b").See("bell off")
	d.Press("e", "ctrl+u").Type("flat 11x3 b0001").Press("enter", "T").See("exposing flat").Wait(40 * time.Second)
	d.See("COMPLETE 11 of 11", "instrument's clock -0.4").Press("t").See("saved: flat flat")
	d.Press("o").Type("fault: the dome sticks").Press("enter").See("saved: fault")
	list = logOf(t, book)
	kinds := map[string]bool{}
	for _, e := range list {
		kinds[e.Type] = true
		if e.Type == "flat" && (e.Frames != 11 || e.FileLast != "b0011" || e.ClockOffsetS.Value != -0.4) {
			t.Errorf("%+v", e)
		}
	}
	if !kinds["flat"] || !kinds["fault"] {
		t.Errorf("%+v", list)
	}
}

// Keys faster than the disk, and keys while it refuses, are one take that ends
// as one entry with its times.
func TestFastKeys(t *testing.T) {
	src := check.Source(t, 5)
	book := check.Logged(t, &src, "observer 1")
	d := check.New(t, src, 80, 24)
	d.Hold = true
	d.Press("t", "t", "t", "f", "f", "f")
	d.Release(false)
	d.See("exposing").Press("t").See("saved")
	under, err := book.UnderWay(ctx)
	if err != nil || len(under) != 0 {
		t.Errorf("%d takes are left under way, %v", len(under), err)
	}
	if list := logOf(t, book); len(list) != 1 || list[0].Frames != 3 || list[0].EachS.Known {
		t.Errorf("%+v", list)
	}
	book.Store().Fault(func() error { return syscall.ENOSPC })
	d.Press("e", "ctrl+u").Type("obs0042").Press("enter", "t").Wait(time.Minute).Press("t").Wait(time.Minute).Press("t")
	d.See("exposing", "NOT SAVED").Wait(10*time.Minute).Press("t").See("idle", "NOT SAVED")
	book.Store().Fault(nil)
	d.Wait(10 * time.Second).Not("NOT SAVED")
	list := logOf(t, book)
	if len(list) != 2 || list[1].End.Sub(list[1].Start) != 10*time.Minute || list[1].FileLast != "obs0042" {
		t.Errorf("%+v", list)
	}
	if under, err = book.UnderWay(ctx); err != nil || len(under) != 0 {
		t.Errorf("%d takes are left under way, %v", len(under), err)
	}
	d.Press("T").Wait(time.Minute).Press("t")
	if list = logOf(t, book); len(list) != 3 || list[2].FileFirst != "obs0043" {
		t.Errorf("the files do not count on: %+v", list[len(list)-1])
	}
}

// A note is not lost when the name is asked in between and not given; text
// typed on after Escape is kept too.
func TestNoteIsKept(t *testing.T) {
	src := check.Source(t, 16)
	book := check.Logged(t, &src, "")
	d := check.New(t, src, 80, 24)
	d.Press("o").Type("important note").Press("enter").See("who observes?").Press("esc").Wait(2 * time.Second)
	drafts, err := book.Drafts(ctx, src.Session)
	if err != nil || drafts["line note"] != "important note" {
		t.Errorf("%v, %v", drafts, err)
	}
	d.Press("o").See("note important note").Type(" and more").Wait(2 * time.Second)
	if drafts, err = book.Drafts(ctx, src.Session); err != nil || drafts["line note"] != "important note and more" {
		t.Errorf("%v, %v", drafts, err)
	}
	again := check.New(t, src, 80, 24)
	again.Press("o").See("important note and more")
	d.Press("enter").Type("observer 1").Press("enter").See("entry 1 saved").Wait(2 * time.Second)
	if drafts, err = book.Drafts(ctx, src.Session); err != nil || drafts["line note"] != "" {
		t.Errorf("%v, %v", drafts, err)
	}
}

// Conditions of the future come into force though nobody writes.
func TestFutureConditions(t *testing.T) {
	src := check.Source(t, 16)
	book := check.Logged(t, &src, "observer 1")
	closed := false
	src.Changed = func(c targets.Conditions) { closed = c.Closed }
	for after, dome := range map[time.Duration]string{0: "closed", 10 * time.Second: "open"} {
		c := logbook.Conditions{From: check.Start.Add(after), Dome: dome}
		if dome == "closed" {
			c.Reason = "weather"
		}
		if _, err := book.Conditions(ctx, c); err != nil {
			t.Fatal(err)
		}
	}
	d := check.New(t, src, 80, 24)
	if !closed {
		t.Error("not closed")
	}
	if d.Wait(12 * time.Second); closed {
		t.Error("still closed")
	}
}

// A star that cannot be taken now is not begun without a word.
func TestBlockedTake(t *testing.T) {
	src := check.Source(t, 8)
	check.Logged(t, &src, "observer 1")
	d := check.New(t, src, 80, 24)
	d.Press("G", "T").See("y begins it all the same: ").Press("n").See("idle").Press("T", "y").See("exposing")
}

// Conditions are typed, logged, warned of, and heeded: a closed dome takes no
// star.
func TestWeather(t *testing.T) {
	src := check.Source(t, 8)
	book := check.Logged(t, &src, "observer 1")
	var heeded targets.Conditions
	src.Changed = func(c targets.Conditions) { heeded = c }
	d := check.New(t, src, 80, 24)
	d.Press("w").Type("1.4").Press("tab").Type("0.2").Press("tab", "tab").Type("14 320").Press("tab").Type("90")
	for range 6 {
		d.Press("enter")
	}
	d.See("! humidity 90 % is over")
	c, err := book.At(ctx, check.Start)
	if err != nil || c.Seeing.Value != 1.4 || c.Humidity.Value != 0.9 || c.WindFrom.Value != 320 || heeded.WindMS.Value != 14 {
		t.Errorf("%+v, %+v, %v", c, heeded, err)
	}
	d.Press("esc", "w").See("now: seeing 1.4 arcsec", "! wind 14 m/s")
	for range 7 {
		d.Press("tab")
	}
	d.Type("closed").Press("enter", "enter", "enter").See("closed by what?").Press("esc")
	d.Press("w").See("closed").Type(" weather").Press("enter", "enter", "enter")
	if !heeded.Closed {
		t.Error("the dome is closed and nobody heeds it")
	}
	if list := logOf(t, book); list[len(list)-1].Type != "closed" || list[len(list)-1].Reason != "weather" {
		t.Errorf("%+v", list)
	}
	d.Press("esc", "w").Type("high").Press("up", "enter").See("not a number")
}

// Another session that has the same star is told of before a take is begun
// twice, and its entries are seen.
func TestTwoDesks(t *testing.T) {
	src := check.Source(t, 8)
	book := check.Logged(t, &src, "observer 1")
	one := check.New(t, src, 80, 24)
	two := src
	two.Session, two.Observer = "another session", "observer 2"
	other := check.New(t, two, 80, 24)
	one.Press("T").See("exposing ")
	other.Press("T").See("observer 1 has been exposing", "y starts it too").Press("n").See("not done")
	other.Wait(2 * time.Second)
	if under, err := book.UnderWay(ctx); err != nil || len(under) != 1 {
		t.Errorf("%d under way, %v", len(under), err)
	}
	other.Press("T").See("y starts it too").Press("y").See("exposing")
	one.Press("m", "a").Type("Nova X").Press("tab").Type("5.5 -20.5").Press("tab", "tab", "tab", "tab", "enter").See("Nova X is in the list")
}

// With the disk refusing, the entry is kept, shown to be copied by hand, and
// saved when the disk takes it; leaving asks.
func TestDiskRefuses(t *testing.T) {
	src := check.Source(t, 8)
	book := check.Logged(t, &src, "observer 1")
	d := check.New(t, src, 100, 24)
	d.Wait(2 * time.Second)
	book.Store().Fault(func() error { return syscall.ENOSPC })
	d.Press("o").Type("clouds at 04:10").Press("enter").See("NOT SAVED", "the disk is full")
	d.Press("esc", "l").See("copy by hand", "clouds at 04:10", "1 NOT SAVED")
	d.Press("q", "q").See("y leaves", "not saved").Press("n")
	d.Press("j").Wait(20 * time.Second)
	if n := len(logOf(t, book)); n != 0 {
		t.Errorf("%d entries", n)
	}
	book.Store().Fault(nil)
	d.Wait(10 * time.Second).Not("NOT SAVED")
	if list := logOf(t, book); len(list) != 1 || list[0].Note != "clouds at 04:10" {
		t.Errorf("%+v", list)
	}
}

// After a dropped link the session comes back: the screen, the star, the time
// of one's own, what was half typed, and the exposure still running.
func TestComesBack(t *testing.T) {
	src := check.Source(t, 5)
	book := check.Logged(t, &src, "observer 1")
	src.PID = 1
	src.Alive = func(int) bool { return false }
	d := check.New(t, src, 80, 24)
	d.Press("j", "j", "j", "T").See("exposing ")
	name := strings.TrimSpace(d.Selected()[7:20])
	d.Press("a").Type("Nova Y").Press("tab").Type("10 23").Wait(2 * time.Second)
	d.Press("esc", "enter", "}").Wait(2 * time.Second)
	// the link drops here: nothing more is said to this desk
	last, ok, err := book.LastSession(ctx, src.Session)
	if err != nil || !ok {
		t.Fatal(err)
	}
	src.State, src.Observer = last.State, ""
	again := check.New(t, src, 80, 24)
	again.See("NOT NOW Wed 2 Dec 05:00:00", "exposing "+name, "take|")
	if line := again.Grid().Line(2); !strings.HasPrefix(line, name) {
		t.Errorf("back on %q, not %s", line, name)
	}
	again.Press("esc", "esc", "a").See("Nova Y", "10 23")
	// from another login of the same observer the take is taken over too
	src.Session += ", login 77"
	third := check.New(t, src, 80, 24)
	third.See("exposing " + name)
}

// The clock set back is said, and no entry ends before it began.
func TestClockSetBack(t *testing.T) {
	src := check.Source(t, 16)
	book := check.Logged(t, &src, "observer 1")
	d := check.New(t, src, 80, 24)
	d.Press("T")
	d.Now = d.Now.Add(-time.Hour)
	d.Wait(time.Second).See("the clock was set back")
	d.Press("esc", "t").See("entry 1 saved")
	if e := logOf(t, book)[0]; e.End.Before(e.Start) || !strings.Contains(e.Note, "set back") {
		t.Errorf("%+v", e)
	}
}

// What one session writes the other sees within two seconds: takes, marks,
// entries, targets and conditions, each over a connection of its own.
func TestSeesTheOther(t *testing.T) {
	path := filepath.Join(t.TempDir(), "run.db")
	open := func(session, observer string) *check.Driver {
		db, err := store.Open(path)
		if err != nil {
			t.Fatal(err)
		}
		t.Cleanup(func() { db.Close() })
		src := check.Source(t, 8)
		src.Book, src.Session, src.Observer = logbook.Open(db, func() time.Time { return check.Start }, ""), session, observer
		return check.New(t, src, 100, 30)
	}
	one, two := open("one", "observer 1"), open("two", "observer 2")
	two.Press("l")
	one.Press("T", "m")
	two.Wait(2 * time.Second).See("observer 1: exposing")
	one.Press("x", "o").Type("fog from the west").Press("enter")
	two.Wait(2*time.Second).See("fog from the west", "stopped early").Not("observer 1: exposing")
	one.Press("a").Type("Nova X").Press("tab").Type("5.5 -20.5").Press("tab", "tab", "tab", "tab", "enter").See("Nova X is in the list")
	two.Press("esc").Wait(2*time.Second).See("33", "Nova X was added by another session", "* ")
	one.Press("w").Type("1.4")
	for range 10 {
		one.Press("enter")
	}
	one.See("saved: seeing 1.4")
	two.Press("w").Wait(2 * time.Second).See("now: seeing 1.4 arcsec")
}
