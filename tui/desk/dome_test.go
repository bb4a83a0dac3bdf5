package desk_test

import (
	"fmt"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/check"
	"evenfall/tui/kit"
)

// The sky shows the star that is selected in the list, with what forbids it
// and until when; the cursor tells what is there and selects the nearest.
func TestDome(t *testing.T) {
	d := check.New(t, check.Source(t, 5), 80, 24)
	d.Press("z").See("darkest", "can and should be taken", "Moon ", "[", "Z").Not("{ }")
	was := d.Grid().Line(17)
	d.Press("j").Press("up", "left").See("{ } az", "nearest", "Moon")
	d.Press("enter").Not("{ }")
	if d.Grid().Line(17) == was {
		t.Error("nothing else was selected")
	}
	d.Press("0", "K", "0").Not("{ }").Press("k", ".", ",", "]", "]").See("NOT NOW").Press("n").Not("NOT NOW")
	d.Press("m").See("* ").Press("enter").See("ICRS").Press("z", "E", "z", "h", "z").See("darkest")
	for range 60 {
		d.Press("down")
	}
	d.See("too low, limit 20").Press("y", "y").Press("?").See("keys on the screen dome").Press("q", "q", "q")
	d.Press("G", "z").See("until", "altitude")
}

// Near the Sun the telescope is refused, and the observatory has the word.
func TestDomeSun(t *testing.T) {
	src := check.Source(t, 5)
	d := check.New(t, src, 80, 24)
	d.Press("z", "{", "{", "{", "{")
	for range 80 {
		d.Press("left", "down")
	}
	for range 10 {
		d.Press("right")
	}
	d.See("x", "refused", "observatory's rules")
}

// Limits of all sorts, wind and cloud are drawn and told.
func TestDomeLimits(t *testing.T) {
	src := check.Source(t, 5)
	l := targets.DefaultLimits()
	l.Mount, l.FlipMin, l.HourAngleH, l.MaxAltitude = "equatorial", 10, [2]float64{-4, 4}, astro.Deg(80)
	l.Horizon = []targets.HorizonPoint{{Azimuth: astro.Deg(0), Altitude: astro.Deg(30)}, {Azimuth: astro.Deg(180), Altitude: astro.Deg(5)}}
	c := targets.Conditions{WindMS: targets.Known(20), WindFromDeg: targets.Known(90), CloudFrom: targets.Known(270), CloudTo: targets.Known(320)}
	src.Night = func(d astro.Date) (*moment.Night, error) { return moment.NewNight(check.Site, d, l, c) }
	d := check.New(t, src, 120, 40)
	d.Press("z").See("~ cloud", "/ wind")
	for range 30 {
		if strings.Contains(d.Press("j").Grid().Text(), "mount") {
			break
		}
	}
	d.See("mount")
	d.Press("up")
	for range 40 {
		d.Press("right")
	}
	d.See("wind")
	for range 40 {
		d.Press("up")
	}
	d.See("limit 80.0")
}

// A session comes back to the sky; a long list shows the first of it.
func TestDomeComesBack(t *testing.T) {
	src := check.Source(t, 5)
	d := check.New(t, src, 80, 24)
	d.Press("z")
	src.State = d.Desk.State()
	check.New(t, src, 80, 24).See("darkest")
	var list []roster.Entry
	for i := range roster.Bulk + 10 {
		e := *src.Roster.Entry(i % src.Roster.Len())
		e.Target.Name = fmt.Sprint(e.Target.Name, " ", i)
		list = append(list, e)
	}
	src.State = ""
	src.Roster = roster.New(list, sharedModels(), nil)
	check.New(t, src, 120, 40).Press("z").See("the first 1000 of 3010", "[").Press("G").See("[")
	check.New(t, src, 80, 24).Press("/").Type("nosuchstar").Press("enter", "z").See("no star is selected").Press("j", "up", "enter", "y")
}

// Whatever is done to the sky, at any size, the picture has the size of the
// screen.
func TestDomeProperty(t *testing.T) {
	src := check.Source(t, 21)
	keys := []string{"z", "j", "k", "up", "down", "left", "right", "0", "y", "enter", "[", "]", "{", "}", "<", ".", "m", "esc", "q", "n", ">", "?", "h", ",", "v"}
	rapid.Check(t, func(r *rapid.T) {
		src := src
		src.Look = kit.NewLook(kit.DarkTheme, kit.Colours256, rapid.SampledFrom([]kit.Glyphs{kit.ASCII, kit.Unicode, kit.Braille}).Draw(r, "glyphs"))
		d := check.New(t, src, 80, 24)
		d.Press("z")
		anywhere(r, d, keys)
	})
}

func anywhere(r *rapid.T, d *check.Driver, keys []string) {
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
}

// BenchmarkDome draws the sky with the cursor over it: wanted under 200
// microseconds.
func BenchmarkDome(b *testing.B) {
	for _, size := range [][2]int{{80, 24}, {200, 60}} {
		b.Run(fmt.Sprintf("%dx%d", size[0], size[1]), func(b *testing.B) {
			src := check.Source(b, 1)
			src.Look = kit.NewLook(kit.DarkTheme, kit.Colours256, kit.Braille)
			d := check.New(b, src, size[0], size[1])
			d.Press("z", "up", "up")
			b.ResetTimer()
			for range b.N {
				d.Desk.View()
			}
		})
	}
}
