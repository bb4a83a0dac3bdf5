package desk_test

import (
	"context"
	"fmt"
	"strings"
	"syscall"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/check"
	"evenfall/tui/kit"
)

// The screen says first what comes next and in how long, goes through the
// list, selects the star and opens it; ranges and the filter of what can be
// observed hold.
func TestEvents(t *testing.T) {
	src := check.Source(t, 5)
	src.Every = time.Minute
	d := check.New(t, src, 80, 24)
	d.Press("E").See("next: eclipse of HU Aqr in 11m", "of 52 targets", "past")
	if line := d.Grid().Line(2); !strings.HasPrefix(line, "next: ") {
		t.Errorf("the first thing is %q", line)
	}
	d.Wait(3 * time.Minute).See("in 8m")
	d.Press("j", "j")
	name := strings.Join(strings.Fields(d.Selected())[4:6], " ")
	d.Press("enter").See(name, "ICRS").Press("E").See("> ")
	before := d.Grid().Text()
	d.Press("[").See("tonight, of 52").Press("[").See("no other range").Press("]", "]", "]").See("in 30 nights").Press("]").See("no other range").Press("[", "[")
	if after := d.Grid().Text(); after != before {
		t.Errorf("after other ranges:\n%s\nbefore:\n%s", after, before)
	}
	d.Press("y").See("only what can be observed", "can").Press("y").See("everything")
	d.Press("G", "j", "g", "k", "d", "u", "m").See(">*").Press("h").See("luminosity").Press("E").See("next:")
	d.Press(">").See("NOT NOW", "night of 2026-12-02").Press("n").See("night of 2026-12-01").Press("q").See("/52")
	d.Press("/").Type("kind=wd").Press("enter", "E").See("nothing is dated", "nothing dated").Press("j", "k", "G", "y")
}

// A session comes back to the events.
func TestEventsComeBack(t *testing.T) {
	src := check.Source(t, 5)
	d := check.New(t, src, 80, 24)
	d.Press("E")
	src.State = d.Desk.State()
	check.New(t, src, 80, 24).See("next: eclipse of HU Aqr")
}

// Long lists are to be filtered first.
func TestEventsLong(t *testing.T) {
	src := check.Source(t, 1)
	stars := src.Roster
	var list []roster.Entry
	for i := range roster.Bulk + 500 {
		e := *stars.Entry(i % stars.Len())
		e.Target.Name = fmt.Sprint(e.Target.Name, " ", i)
		list = append(list, e)
	}
	src.Roster = roster.New(list, sharedModels(), nil)
	d := check.New(t, src, 80, 24)
	d.Press("E").See("3500 targets are too many to date", "filter the list first")
	d.Press("j", "y", "]", "esc", "/").Type("kind=interacting").Press("enter", "E").See("next: eclipse")
}

// slow counts how often it is asked.
type slow struct {
	check.Lights
	asked *int
}

func (s slow) Events(p *moment.Prepared, site astro.Site, asOf, from, until astro.Instant) []light.Event {
	*s.asked++
	return s.Lights.Events(p, site, asOf, from, until)
}

// The dates are worked out in portions, with progress, and no further when the
// screen is left.
func TestEventsInPortions(t *testing.T) {
	src := check.Source(t, 1)
	asked := 0
	src.Lights = slow{asked: &asked}
	d := check.New(t, src, 80, 24)
	d.Hold = true
	d.Press("E").See("dating what happens: 0 of 256")
	if asked != 0 {
		t.Errorf("%d targets were dated before the background's turn", asked)
	}
	d.Press("esc").See("/256")
	d.Release(false)
	if asked > 100 {
		t.Errorf("%d targets were dated after the screen was left", asked)
	}
	d.See("/256").Not("working").Press("E").See("next: eclipse")
	if asked < 256 {
		t.Errorf("%d targets were dated", asked)
	}
}

// What is left alone says so, and the others go on.
func TestEventsFail(t *testing.T) {
	src := check.Source(t, 5)
	night := src.Night
	broken := false
	src.Night = func(d astro.Date) (*moment.Night, error) {
		if broken {
			return nil, fmt.Errorf("no such night")
		}
		return night(d)
	}
	d := check.New(t, src, 80, 24)
	broken = true
	d.Press("E").See("no such night").Press("esc")
	broken = false
	d.Press("k").See("next: eclipse").Not("placing")
}

// The light curve stands in place of the night's course when asked for, beside
// it on high screens, and says why the forecast is what it is.
func TestLightCurve(t *testing.T) {
	src := check.Source(t, 5)
	for _, glyphs := range []kit.Glyphs{kit.ASCII, kit.Unicode, kit.Braille} {
		src.Look = kit.NewLook(kit.PlainTheme, kit.NoAttributes, glyphs)
		d := check.New(t, src, 80, 24)
		d.Press("/").Type("kind=lpv").Press("enter", "enter").See("take|").Not("V, mag")
		d.Press("L").See("V, mag", "tonight", "measured", "fainter than", "invented magnitudes").Not("take|")
		d.Press(".", ",").See("V, mag").Press("L").See("take|")
		d.Resize(200, 60).See("take|", "V, mag", "set aside", "1 in other bands").Press("L").See("high enough")
		d.Resize(40, 13).Press("L").See("too small")
	}
	d := check.New(t, src, 80, 24)
	d.Press("/").Type("kind=pn").Press("enter", "enter", "L").See("no light curve")
}

// watch remembers which forecasts of long-period variables were asked.
type watch struct {
	check.Lights
	of map[*moment.Prepared]bool
}

func (w watch) Next(p *moment.Prepared, from astro.Instant) []light.Event {
	if p.Target.Kind == targets.LPV {
		w.of[p] = true
	}
	return w.Lights.Next(p, from)
}

// A magnitude is entered with a key, the number and enter, and is in run.db.
func TestMagnitude(t *testing.T) {
	src := check.Source(t, 5)
	heeded := watch{of: map[*moment.Prepared]bool{}}
	src.Lights = heeded
	book := check.Logged(t, &src, "observer 1")
	ctx := context.Background()
	d := check.New(t, src, 80, 24)
	name := d.Press("/").Type("kind=lpv").Press("enter").Grid().Line(18)
	was := d.Desk
	d.Press("M").See("magnitude of ", " in V").Type("8.1").Press("enter").See("magnitude 1 saved: V 8.10", "2 Dec 04:00")
	list, err := book.Magnitudes(ctx)
	if err != nil || len(list) != 1 || list[0].Mag != 8.1 || list[0].Band != "V" || !strings.Contains(name, list[0].Target) {
		t.Fatalf("run.db has %+v, %v; the star is %q", list, err, name)
	}
	if d.Desk != was || d.Grid().Line(18) != name {
		t.Errorf("the selection is %q, was %q", d.Grid().Line(18), name)
	}
	if len(heeded.of) != 2 {
		t.Errorf("%d forecasts of the star, one before and one after was wanted", len(heeded.of))
	}
	d.Press("enter", "M").Type("<12.5 B").Press("enter").See("magnitude 2 saved: B <12.50")
	for text, says := range map[string]string{"81": "outside -2 to 25", "x": "no number", "8.1 V 2027-01-01": "in the future"} {
		d.Press("esc", "M", "ctrl+u").Type(text).Press("enter").See("not taken", strings.Fields(says)[0])
		d.Press("esc", "M").See(text).Press("ctrl+u", "enter")
	}
	d.Press("R").See("remove number 2", "1: V 8.10").Press("ctrl+u").Type("7").Press("enter").See("no magnitude of").Press("esc")
	d.Press("R").Press("ctrl+u").Type("1").Press("enter").See("y removes V 8.10").Press("n").See("not done")
	d.Press("R", "enter").See("y removes B <12.50").Press("y").See("removed: B <12.50")
	d.Press("R").See("y removes V 8.10").Press("y").See("removed: V 8.10").Press("R").See("no magnitude of")
	if list, err := book.Magnitudes(ctx); err != nil || len(list) != 0 {
		t.Errorf("run.db has %+v, %v", list, err)
	}
	if rows, err := book.Store().Select(ctx, "magnitudes", ""); err != nil || len(rows) != 2 {
		t.Errorf("%d rows in run.db, %v: nothing may be lost", len(rows), err)
	}
	if len(heeded.of) != 5 {
		t.Errorf("%d forecasts of the star, 5 were wanted", len(heeded.of))
	}
}

// Without a log nothing is taken; what the disk refuses stays and is tried
// again.
func TestMagnitudeTrouble(t *testing.T) {
	src := check.Source(t, 5)
	check.New(t, src, 80, 24).Press("M").See("there is no log here").Press("esc", "R").See("no magnitude of")
	heeded := watch{of: map[*moment.Prepared]bool{}}
	src.Lights = heeded
	book := check.Logged(t, &src, "observer 1")
	d := check.New(t, src, 80, 24)
	d.Press("/").Type("kind=lpv").Press("enter")
	book.Store().Fault(func() error { return syscall.ENOSPC })
	d.Press("M").Type("9.2").Press("enter").See("NOT SAVED")
	d.Press("esc", "l").See("copy by hand", "9.20").Press("esc")
	book.Store().Fault(nil)
	d.Wait(8 * time.Second).Not("NOT SAVED")
	if list, err := book.Magnitudes(context.Background()); err != nil || len(list) != 1 {
		t.Fatalf("%+v, %v", list, err)
	}
	if len(heeded.of) != 2 {
		t.Errorf("%d forecasts of the star, one before and one after was wanted", len(heeded.of))
	}
	d.Press("M", "7", "esc").See("kept: magnitude").Press("M").See("7_").Press("ctrl+u", "enter")
}

// Whatever is done on the screens of dates and light curves, at any size, the
// picture has the size of the screen.
func TestEventsProperty(t *testing.T) {
	src := check.Source(t, 21)
	keys := []string{"E", "j", "k", "d", "u", "g", "G", "[", "]", "y", "enter", "L", "M", "8", "<", ".", "R", "esc", "q", "n", ">", "m", "?", "h", ","}
	rapid.Check(t, func(r *rapid.T) {
		glyphs := rapid.SampledFrom([]kit.Glyphs{kit.ASCII, kit.Unicode, kit.Braille}).Draw(r, "glyphs")
		src := src
		src.Look = kit.NewLook(kit.DarkTheme, kit.Colours256, glyphs)
		d := check.New(t, src, 80, 24)
		d.Press("E")
		for range rapid.IntRange(1, 12).Draw(r, "steps") {
			if rapid.IntRange(0, 3).Draw(r, "what") == 0 {
				d.Resize(rapid.IntRange(0, 220).Draw(r, "w"), rapid.IntRange(0, 70).Draw(r, "h"))
			} else if d.Press(rapid.SampledFrom(keys).Draw(r, "key")); d.Desk.Done() {
				return
			}
			view := d.Desk.View()
			if n := strings.Count(view, "\n") + 1; d.H > 0 && n != d.H {
				r.Fatalf("%d lines at %dx%d", n, d.W, d.H)
			}
			for _, line := range strings.Split(view, "\n") {
				if n := len([]rune(strip(line))); n > d.W {
					r.Fatalf("a line of %d columns at %dx%d: %q", n, d.W, d.H, line)
				}
			}
		}
	})
}
