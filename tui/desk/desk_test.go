package desk_test

import (
	"errors"
	"flag"
	"fmt"
	"image/color"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"evenfall/astro"
	corecheck "evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/check"
	"evenfall/tui/kit"
)

// sharedModels are made once for all tests of the package.
var sharedModels = sync.OnceValue(moment.NewModels)

var update = flag.Bool("update", false, "write the golden screens anew; read them afterwards")

// scenes are the screens that golden files hold, each by the keys that lead
// to it.
var scenes = []struct {
	name string
	keys []string
}{
	{"next", nil},
	{"next_marked_blocked", []string{"m", "G", "m"}},
	{"filter", []string{"/", "k", "i", "n", "d", "=", "w", "d", " ", "a", "l", "t", ">", "3", "5"}},
	{"filter_wrong", []string{"/", "a", "l", "t", ">"}},
	{"sort", []string{"s"}},
	{"sorted", []string{"s", "n"}},
	{"own_time", []string{"}", "}", ">"}},
	{"star", []string{"j", "j", "enter"}},
	{"star_below", []string{"G", "enter", "d"}},
	{"exposure_next", nil},
	{"exposure_star", []string{"/", "g", "d", "enter", "enter"}},
	{"exposure_more", []string{"j", "enter", "d"}},
	{"diagram", []string{"j", "m", "j", "j", "h"}},
	{"diagram_colour", []string{"j", "j", "j", "h", "h"}},
	{"diagram_zoomed", []string{"G", "h", ",", "m", "+", "+", "left"}},
	{"diagram_not_placed", strings.Fields(strings.Repeat("j ", 14) + "h")},
	{"events", []string{"E", "j", "j"}},
	{"events_month", []string{"E", "]", "]", "y", "d", "m", "j"}},
	{"dome", []string{"j", "j", "m", "z"}},
	{"dome_cursor", []string{"j", "z", "up", "up", "right", "(", "J"}},
	{"dome_turned", []string{"G", "z", "y", "}", "}"}},
	{"finder", []string{"j", "j", "p"}},
	{"finder_north", []string{"j", "j", "p", "y", "+", "m"}},
	{"light_curve", []string{"/", "k", "i", "n", "d", "=", "l", "p", "v", "enter", "enter", "L"}},
	{"light_unknown", []string{"/", "k", "i", "n", "d", "=", "p", "n", "enter", "enter", "L"}},
	{"magnitude", []string{"M", "<", "1", "2", ".", "5"}},
	{"entry", []string{"a", "T", "1", "enter", "0", "5", " ", "3", "4", " ", "3", "1", " ", "-", "2", "2", " ", "0", "0", " ", "5", "2", "enter", "w", "d"}},
	{"plain", []string{"c"}},
	{"help", []string{"?"}},
	{"log", []string{"e", "3", "x", "9", "0", " ", "o", "b", "s", "0", "0", "4", "2", "enter", "T", "x", "y", "o", "f", "o", "g", "enter", "l"}},
	{"exposing", []string{"e", "3", "x", "9", "0", "enter", "T"}},
	{"conditions", []string{"w", "1", ".", "2", "enter", "0"}},
	{"note", []string{"o", "f", "o", "g"}},
	{"asked", []string{"a", "T", "esc", "q"}},
}

var sizes = [][2]int{{80, 24}, {120, 40}, {200, 60}, {40, 10}, {20, 5}, {0, 0}}

// Every screen at every size is as it was read and approved, with as many
// lines as the terminal has and none wider.
func TestGolden(t *testing.T) {
	dir := filepath.Join(corecheck.Root(t), "testdata", "screens")
	src := check.Source(t, 5)
	src.Copy = func(string) (string, error) { return "the clipboard", nil }
	equipped := check.Equipped(t, 5)
	neighbours := check.Field(src)
	src.Field = func() []targets.Target { return neighbours }
	for _, s := range scenes {
		src := src
		if strings.HasPrefix(s.name, "exposure") {
			src = equipped
		}
		check.Logged(t, &src, "observer 1")
		d := check.New(t, src, 80, 24)
		d.Press(s.keys...)
		for _, size := range sizes {
			w, h := size[0], size[1]
			d.Resize(w, h)
			view := d.Desk.View()
			if lines := strings.Count(view, "\n") + 1; h > 0 && lines != h {
				t.Errorf("%s at %dx%d: %d lines", s.name, w, h, lines)
			}
			if w < 40 {
				continue
			}
			path := filepath.Join(dir, fmt.Sprintf("%s_%dx%d.txt", s.name, w, h))
			got := check.Draw(view, w, h).Golden()
			if *update {
				if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
					t.Fatal(err)
				}
				continue
			}
			want, err := os.ReadFile(path)
			if err != nil {
				t.Fatal(err)
			}
			if got != string(want) {
				t.Errorf("%s at %dx%d:\n%s\ndiffers from testdata/screens in\n%s", s.name, w, h, got, difference(got, string(want)))
			}
		}
	}
}

func difference(a, b string) string {
	x, y := strings.Split(a, "\n"), strings.Split(b, "\n")
	var out []string
	for i := range max(len(x), len(y)) {
		var l, r string
		if i < len(x) {
			l = x[i]
		}
		if i < len(y) {
			r = y[i]
		}
		if l != r {
			out = append(out, "now  "+l, "file "+r)
		}
	}
	return strings.Join(out, "\n")
}

// Whatever the size, no screen panics, and none has a line too many.
func TestSizes(t *testing.T) {
	src := check.Source(t, 16)
	scenes := scenes
	if testing.Short() {
		scenes = scenes[:1]
	}
	for _, s := range scenes {
		d := check.New(t, src, 80, 24)
		d.Press(s.keys...)
		for _, w := range []int{0, 1, 39, 40, 50, 70, 79, 80, 108, 132, 156, 182, 300} {
			for _, h := range []int{0, 1, 9, 10, 13, 15, 22, 24, 36, 50, 90} {
				d.Resize(w, h)
				view := d.Desk.View()
				if n := strings.Count(view, "\n") + 1; h > 0 && n != h {
					t.Fatalf("%s at %dx%d: %d lines", s.name, w, h, n)
				}
				g := check.Draw(view, w, h)
				for y, line := range strings.Split(view, "\n") {
					if w >= 40 && h >= 10 && strings.TrimRight(strip(line), " ") != g.Line(y) {
						t.Fatalf("%s at %dx%d: line %d is cut by the terminal:\n%q\n%q", s.name, w, h, y, strip(line), g.Line(y))
					}
				}
			}
		}
	}
}

// strip takes the styles out.
func strip(s string) string {
	var b strings.Builder
	for i := 0; i < len(s); i++ {
		if s[i] == 0x1b {
			for ; i < len(s) && s[i] != 'm'; i++ {
			}
			continue
		}
		b.WriteByte(s[i])
	}
	return b.String()
}

// Red means red: no cell that shows anything is of another colour or has a
// ground, on any screen, at 256 and at 16 colours.
func TestRedOnly(t *testing.T) {
	src := check.Source(t, 8)
	scenes := scenes
	if testing.Short() {
		scenes = scenes[:2]
	}
	for _, level := range []kit.Level{kit.Colours256, kit.Colours16} {
		for _, glyphs := range []kit.Glyphs{kit.ASCII, kit.Braille} {
			src.Look = kit.NewLook(kit.RedTheme, level, glyphs)
			for _, s := range scenes {
				for _, size := range [][2]int{{80, 24}, {200, 60}, {40, 10}} {
					d := check.New(t, src, size[0], size[1])
					d.Press(s.keys...)
					d.Grid().Inks(func(x, y int, content string, fg, bg color.Color) {
						if bg != nil {
							t.Errorf("%s: %q at %d,%d has a ground", s.name, content, x, y)
						}
						if fg == nil {
							t.Errorf("%s: %q at %d,%d has the terminal's own colour", s.name, content, x, y)
							return
						}
						if r, g, b, _ := fg.RGBA(); r == 0 || g != 0 && level == kit.Colours256 || b != 0 && level == kit.Colours256 || g > r/3 || b > r/3 {
							t.Errorf("%s: %q at %d,%d is of colour %v", s.name, content, x, y, fg)
						}
					})
				}
			}
		}
	}
}

// Nothing is told by colour alone: without any attribute the states of rows,
// time and messages differ as text, and the text is the same in every theme.
func TestNoColour(t *testing.T) {
	src := check.Source(t, 5)
	for _, s := range scenes {
		var first string
		for i, look := range []*kit.Look{
			kit.NewLook(kit.PlainTheme, kit.NoAttributes, kit.ASCII), kit.NewLook(kit.DarkTheme, kit.Colours256, kit.ASCII),
			kit.NewLook(kit.RedTheme, kit.Colours16, kit.ASCII), kit.NewLook(kit.DarkTheme, kit.Mono, kit.ASCII),
		} {
			src.Look = look
			d := check.New(t, src, 80, 24)
			d.Press(s.keys...)
			view := d.Desk.View()
			if i == 0 {
				first = view
				if strings.Contains(view, "\x1b") {
					t.Errorf("%s: codes where there are no attributes", s.name)
				}
				for _, r := range view {
					if r > 126 {
						t.Errorf("%s: %q with ASCII glyphs", s.name, r)
					}
				}
			} else if strip(view) != first {
				t.Errorf("%s: another text in theme %s", s.name, look.Theme)
			}
		}
	}
	src.Look = kit.NewLook(kit.PlainTheme, kit.NoAttributes, kit.ASCII)
	d := check.New(t, src, 80, 24)
	plainRow := d.Selected()
	d.Press("m")
	if marked := d.Selected(); marked == plainRow || !strings.HasPrefix(marked, ">*") {
		t.Errorf("a marked row reads %q", marked)
	}
	d.Press("G")
	if blocked := d.Selected(); !strings.Contains(blocked, " -  ") {
		t.Errorf("a blocked row reads %q", blocked)
	}
	d.See("live").Press("]").See("NOT NOW").Not("live")
}

func TestMoves(t *testing.T) {
	d := check.New(t, check.Source(t, 5), 80, 24)
	d.See("1/52")
	first := d.Selected()
	d.Press("j", "j", "k").See("2/52").Press("G").See("52/52").Press("j").See("52/52").Press("g").See("1/52").Press("k").See("1/52")
	if d.Selected() != first {
		t.Errorf("back at the top: %q", d.Selected())
	}
	for i := 2; i <= 52; i++ {
		d.Press("j").See(fmt.Sprintf("%d/52", i))
		if d.Selected() == "" {
			t.Fatalf("row %d is selected and not shown", i)
		}
	}
	for i := 51; i > 0; i-- {
		d.Press("k")
		if d.Selected() == "" {
			t.Fatalf("row %d is selected and not shown", i)
		}
	}
	d.Press("d", "u").See("1/52")
}

// The selection stays on its star when order, filter or time change; the list
// does not move while keys come, says so, and moves when asked or when nobody
// has pressed a key for a while.
func TestSelectionStays(t *testing.T) {
	src := check.Source(t, 5)
	src.Every = time.Minute
	d := check.New(t, src, 80, 24)
	d.Press("j", "j", "j")
	name := strings.Fields(d.Selected())[2]
	for _, keys := range [][]string{{"s", "n"}, {"s", "a"}, {"S"}, {"s", "t"}, {"}"}, {"n"}, {"]", "]"}, {"n"}} {
		d.Press(keys...)
		if got := d.Selected(); !strings.Contains(got, name) {
			t.Fatalf("after %v the selection is on %q, not %s", keys, got, name)
		}
	}
	d.Press("/").Type("kind=pn").Press("enter").See("filter kind=pn")
	d.Press("/", "ctrl+u", "enter")
	if got := d.Selected(); !strings.Contains(got, name) {
		t.Errorf("after filtering it away and back the selection is on %q, not %s", got, name)
	}
	before := d.Grid().Line(5)
	for range 100 { // somebody is at it
		d.Wait(45*time.Second).Press("k", "j")
	}
	if got := d.Selected(); !strings.Contains(got, name) {
		t.Errorf("after 75 minutes the selection is on %q", got)
	}
	d.See("r for a new one")
	if got := d.Grid().Line(5); got[:20] != before[:20] && !strings.Contains(got[:20], before[6:18]) {
		t.Errorf("the order moved under somebody's hands:\n%q\n%q", before, got)
	}
	d.Press("r").Not("r for a new one")
	d.Wait(75 * time.Minute).Not("r for a new one")
}

func TestFilterAndSort(t *testing.T) {
	d := check.New(t, check.Source(t, 1), 120, 40)
	d.Press("/").Type("kind=wd alt>35 V<16").See("filter kind=wd alt>35 V<16_").Press("enter")
	d.See("of 256")
	for y := 5; y < 30; y++ {
		if line := d.Grid().Line(y); len(line) > 90 && line[2] != ' ' && !strings.Contains(line, " wd") {
			t.Errorf("a row that is no white dwarf: %q", line)
		}
	}
	d.Press("/", "ctrl+u").Type("alt>high").See("write a number after >").Press("enter").See("filter not used").Press("esc").Not("filter not used")
	d.Press("/", "ctrl+u").Type("nosuchstar").Press("enter").See("/ changes the filter: nothing passes", "0 of 256")
	d.Press("j", "k", "G", "d", "enter", "m", "c", "S", "r").See("nothing passes")
	d.Press("/", "ctrl+u", "esc", "s", "n").See("order name").Press("s", "n").See("order name reversed")
	for _, letter := range []string{"k", "e", "m", "a", "x", "b", "y", "l", "u", "o", "r", "c", "p", "i", "t"} {
		d.Press("s", letter)
	}
	d.Not("order")
}

func TestTime(t *testing.T) {
	d := check.New(t, check.Source(t, 8), 80, 24)
	d.See("Wed 2 Dec 04:00:00", "live")
	d.Wait(3 * time.Second).See("04:00:03")
	d.Press("]").See("NOT NOW Wed 2 Dec 04:10:00", "back to 2 Dec 04:00")
	d.Wait(time.Minute).See("NOT NOW Wed 2 Dec 04:10:00", "back to 2 Dec 04:01")
	d.Press("[", "[").See("03:50:00").Press("-").See("03:49:00").Press("+", "+").See("03:51:00").Press("{").See("02:51:00").Press("}", "}").See("04:51:00")
	d.Press(">").See("Thu 3 Dec 04:51:00", "night of 2026-12-02").Press("<", "<").See("Tue 1 Dec 04:51:00", "night of 2026-11-30")
	d.Press("n").See("live", "Wed 2 Dec 04:01:03")
	for range 40 { // into the day and beyond: the next night
		d.Press("}")
	}
	d.See("night of 2026-12-03")
	src := check.Source(t, 64)
	src.Start = time.Date(2027, 3, 1, 5, 0, 0, 0, time.UTC)
	check.New(t, src, 80, 24).See("NOT NOW Mon 1 Mar 05:00:00").Press("n").See("live")
	src.Start = time.Date(2150, 12, 25, 5, 0, 0, 0, time.UTC)
	d = check.New(t, src, 80, 24)
	for range 12 {
		d.Press(">")
	}
	d.See("1860 to 2150")
}

func TestStar(t *testing.T) {
	d := check.New(t, check.Source(t, 1), 120, 40)
	d.Press("/").Type("r lep").Press("enter")
	d.Press("enter").See("ICRS", "give the telescope proper motion 0", "TPAGB", "take|", "sun|", "UTC|", "what it is", "Moon")
	d.Press("G").See("source:").Press("g").Press("j").Press("esc").See("filter r lep")
	d.Press("/", "ctrl+u", "enter", "g", "enter")
	a := d.Grid().Line(2)
	d.Press(".")
	if b := d.Grid().Line(2); a == b {
		t.Error("the next star is the same")
	}
	d.Press(",")
	if b := d.Grid().Line(2); a != b {
		t.Errorf("there and back: %q, %q", a, b)
	}
	d.Press(",").See("no more stars that way")
	d.Press("}").See("T05:00:00Z").Press("m").See("* ").Press("?").See("keys on the screen star").Press("q").Press("q").See("NOT NOW").Not("take|")
}

func TestNewTarget(t *testing.T) {
	d := check.New(t, check.Source(t, 4), 80, 24)
	d.Press("a").Type("Nova X").Press("enter").See("position")
	d.Press("esc").See("65").Press("a").See("Nova X")
	d.Type("10 23").See("! position:")
	d.Press("enter", "enter", "enter", "enter", "enter").See("! position: not a position", "> position")
	d.Type(" 45.6 -47 12 33").See("ICRS 10 23 45.60 -47 12 33.0").See("too low; from")
	d.Press("enter").Type("interacting").Press("enter").Type("6.4").Press("enter", "enter", "enter")
	d.See("Nova X is in the list", "/65")
	if !strings.Contains(d.Selected(), "Nova X") {
		t.Errorf("the new target is not selected: %q", d.Selected())
	}
	// where it would stand follows the time
	d.Press("a").Type("Y").Press("tab").Type("5.5 -20.5").See("now at altitude")
	before := d.Grid().Text()
	d.Press("esc", "}", "}", "}", "}", "a")
	if after := d.Grid().Text(); after == before || !strings.Contains(after, "5.50000 -20.50000") {
		t.Errorf("four hours later:\n%s", after)
	}
	d.Press("ctrl+u", "up", "ctrl+u", "esc", "n")
	d.See("typed in")
	d.Press("a").Not("Nova X")
	d.Paste("SN 1\x1b[31m 05 34 31.9 +22 00 52 V=12.5 pm +1 -2\n")
	d.See("taken apart", "SN 1", "12.5", "+1 -2", "ICRS 05 34 31.90 +22 00 52.0")
	for range 5 {
		d.Press("tab")
	}
	d.Press("enter").See("SN 1 is in the list")
	d.Press("a").Type("sn_1").Press("enter").Type("1.5 2.5").Press("enter", "enter", "enter", "enter", "enter").See("is in the list already")
	d.Press("esc", "esc", "q").See("half typed").Press("n")
	if d.Desk.Done() {
		t.Error("n leaves")
	}
	d.Press("q", "y")
	if !d.Desk.Done() {
		t.Error("y does not leave")
	}
}

func TestLeaves(t *testing.T) {
	for _, keys := range [][]string{{"q"}, {"ctrl+c"}, {"enter", "q", "q"}, {"?", "esc", "q"}, {"a", "esc", "q"}} {
		d := check.New(t, check.Source(t, 64), 80, 24)
		d.Press(keys...)
		if !d.Desk.Done() {
			t.Errorf("%v does not leave", keys)
		}
	}
	// Escape discards nothing and leaves nothing but the screen
	d := check.New(t, check.Source(t, 64), 80, 24)
	d.Press("esc", "esc", "esc")
	if d.Desk.Done() {
		t.Error("escape leaves the program")
	}
}

func TestCopy(t *testing.T) {
	src := check.Source(t, 16)
	var sent string
	src.Copy = func(s string) (string, error) { sent = s; return "the clipboard", nil }
	d := check.New(t, src, 100, 24)
	d.Press("c").See("ICRS", "sent to the clipboard")
	if !strings.Contains(sent, "ICRS") || !strings.HasPrefix(d.Grid().Line(0), sent[:12]) {
		t.Errorf("sent %q, shown %q", sent, d.Grid().Line(0))
	}
	src.Copy = func(string) (string, error) { return "", errors.New("no terminal") }
	check.New(t, src, 100, 24).Press("c").See("not sent", "by hand")
}

// A star that is opened, marked or looked at through time is the user's own
// choice, though the cursor was never moved to it.
func TestOpenedStarStays(t *testing.T) {
	for _, keys := range [][]string{{"enter", "}", "}", "}"}, {"m", "}", "}", "}", "enter"}, {"}", "}", "}", "n", "enter"}, {"s", "n", "enter"}} {
		d := check.New(t, check.Source(t, 5), 100, 30)
		name := strings.Fields(d.Selected())[2]
		d.Press(keys...)
		if line := d.Grid().Line(2); !strings.HasPrefix(line, name) {
			t.Errorf("after %v the screen shows %q, not %s", keys, line, name)
		}
		d.Wait(3 * time.Minute)
		if line := d.Grid().Line(2); !strings.HasPrefix(line, name) {
			t.Errorf("three minutes after %v the screen shows %q, not %s", keys, line, name)
		}
	}
}

// What fails leaves what is shown with what was asked: order, filter, time.
func TestGoesBack(t *testing.T) {
	src := check.Source(t, 64)
	made := src.Night
	src.Night = func(d astro.Date) (*moment.Night, error) {
		if d.Day == 2 {
			return nil, errors.New("no such night")
		}
		return made(d)
	}
	check.New(t, src, 80, 24).Press(">").See("no such night", "Wed 2 Dec 04:00:00", "live")

	d := check.New(t, check.Source(t, 4), 80, 24)
	d.Press("/").Type("kind=wd").Press("enter", "/", "ctrl+u").Type("foo=1").Press("enter").See("filter not used", "! ").Press("esc").See("filter kind=wd")
	// what may yet become the name of a column is not applied as a word
	d.Press("/", "ctrl+u")
	for _, r := range "alt>3" {
		d.Press(string(r)).Not("0 of").Not("nothing passes")
	}
}

// An order that a long list cannot be put into is refused once, and the list
// goes on following the clock.
func TestLongList(t *testing.T) {
	src := check.Source(t, 1)
	stars := src.Roster
	var list []roster.Entry
	for i := range roster.Bulk + 200 {
		e := *stars.Entry(i % stars.Len())
		e.Target.Name = fmt.Sprint(e.Target.Name, " ", i)
		list = append(list, e)
	}
	src.Roster = roster.New(list, sharedModels(), nil)
	src.Every = 20 * time.Second
	d := check.New(t, src, 80, 24)
	d.See("1/3200").Press("s", "b").See("filter to 3000 or fewer first").Press("esc").Not("filter to").Not("order best")
	d.Wait(time.Minute).Not("filter to").See("04:01:00")
	for y := 5; y < 18; y++ {
		if line := d.Grid().Line(y); len(line) > 80 || len(line) < 77 || !strings.HasPrefix(line[76:], " ") && !strings.Contains(line, "till") {
			t.Errorf("a row is cut: %q", line)
		}
	}
	d.Press("G").See("3200/3200").Press("g").See("1/3200").Press("/").Type("kind=wd alt>60").Press("enter").See("of 3200").Press("s", "b").See("order best")
}

// An answer that comes after a later question is dropped, whatever the order.
func TestLateAnswers(t *testing.T) {
	for _, backwards := range []bool{false, true} {
		d := check.New(t, check.Source(t, 8), 80, 24)
		d.Hold = true
		d.Press("s", "n", "s", "a", "/").Type("kind=wd")
		d.Release(backwards)
		d.Press("enter").See("filter kind=wd", "order alt")
		for y := 5; y < 15; y++ {
			if line := d.Grid().Line(y); line != "" && !strings.Contains(line, "WD") && !strings.Contains(line, "undec") && !strings.Contains(line, "SDB") {
				t.Errorf("backwards %v: %q", backwards, line)
			}
		}
	}
}

// A night that cannot be made is said, and the screen goes on.
func TestBrokenNight(t *testing.T) {
	src := check.Source(t, 64)
	made := src.Night
	src.Night = func(d astro.Date) (*moment.Night, error) {
		if d.Day == 2 {
			return nil, errors.New("no such night")
		}
		return made(d)
	}
	d := check.New(t, src, 80, 24)
	d.Press(">").See("! no such night", "esc").Press("j").See("no such night").Press("esc").Not("no such night").Press("n").See("live")
}

func TestPasteElsewhere(t *testing.T) {
	d := check.New(t, check.Source(t, 64), 80, 24)
	d.Paste("qqqq")
	if d.Desk.Done() {
		t.Error("pasted text is obeyed")
	}
	d.See("pasted text is for fields")
}

func BenchmarkView(b *testing.B) {
	for _, s := range []struct {
		name string
		keys []string
		w, h int
	}{{"next/80x24", nil, 80, 24}, {"next/200x60", nil, 200, 60}, {"star/80x24", []string{"enter"}, 80, 24}, {"entry/80x24", []string{"a", "x"}, 80, 24}, {"help/80x24", []string{"?"}, 80, 24},
		{"diagram/80x24", []string{"j", "h"}, 80, 24}, {"diagram/200x60", []string{"j", "h"}, 200, 60},
		{"events/80x24", []string{"E", "]", "]"}, 80, 24}, {"events/200x60", []string{"E", "]", "]"}, 200, 60}, {"light/80x24", []string{"enter", "L"}, 80, 24}, {"light/200x60", []string{"enter"}, 200, 60}} {
		b.Run(s.name, func(b *testing.B) {
			src := check.Source(b, 1)
			src.Look = kit.NewLook(kit.DarkTheme, kit.Colours256, kit.Braille)
			d := check.New(b, src, s.w, s.h)
			d.Press(s.keys...)
			for b.Loop() {
				d.Desk.View()
			}
		})
	}
}
