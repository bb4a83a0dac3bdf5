package diagram

import (
	"strings"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/targets/stage"
	"evenfall/tui/kit"
)

// anywhere draws a judgement with no sense to it.
func anywhere(t *rapid.T) stage.Verdict {
	interval := func(name string) astro.Interval {
		i := astro.Interval{Lo: odd.Draw(t, name+" lo"), Mid: odd.Draw(t, name), Hi: odd.Draw(t, name+" hi"), Level: stage.Level}
		if rapid.Bool().Draw(t, "sorted") {
			i.Lo, i.Hi = i.Mid-0.1, i.Mid+0.1
		}
		return i
	}
	best := rapid.SampledFrom([]string{"MS", "WD", "PN", "CSPN", "TPAGB", targets.Merged, targets.Undecided, "", "no stage"}).Draw(t, "best")
	return stage.Verdict{Best: best, P: map[targets.Stage]float64{targets.Stage(best): odd.Draw(t, "p")}, MassMsun: odd.Draw(t, "mass"), FeH: odd.Draw(t, "feh"),
		Place: stage.Placing{HROK: rapid.Bool().Draw(t, "hr"), CMDOK: rapid.Bool().Draw(t, "cmd"), LogT: interval("t"), LogL: interval("l"), Colour: interval("c"), AbsG: interval("g"),
			Why: rapid.SampledFrom([]string{"", "no parallax", "no temperature"}).Draw(t, "why")}}
}

func anyCurves(t *rapid.T) []stage.Curve {
	var out []stage.Curve
	for range rapid.IntRange(0, 5).Draw(t, "curves") {
		c := stage.Curve{Sort: stage.Sort(rapid.IntRange(0, 6).Draw(t, "sort")), Name: rapid.SampledFrom([]string{"", "1 Msun", "a name that is far longer than most screens are wide, and then some"}).Draw(t, "name")}
		for range rapid.IntRange(0, 6).Draw(t, "points") {
			c.Points = append(c.Points, stage.Point{LogT: odd.Draw(t, "t"), LogL: odd.Draw(t, "l"), Colour: odd.Draw(t, "c"), AbsG: odd.Draw(t, "g"), MassMsun: odd.Draw(t, "m"),
				Stage: targets.Stage(rapid.SampledFrom([]string{"", "MS", "WD"}).Draw(t, "stage")), Mark: rapid.SampledFrom([]string{"", "1 Gyr"}).Draw(t, "mark")})
		}
		out = append(out, c)
	}
	return out
}

// Whatever stands on the diagram, at whatever size, after whatever keys: no
// panic, as many lines as there are, none wider than the screen, and the
// screen comes to rest.
func TestAnything(t *testing.T) {
	night := scene(t)
	rapid.Check(t, func(t *rapid.T) {
		sky := told{curves: anyCurves(t)}
		for range rapid.IntRange(0, 12).Draw(t, "stars") {
			sky.verdicts = append(sky.verdicts, anywhere(t))
		}
		w := worldOf(sky, rapid.IntRange(0, 210).Draw(t, "width"), rapid.IntRange(0, 70).Draw(t, "height"))
		w.Snap.Scene = night
		w.Snap.Bulk = rapid.Bool().Draw(t, "long")
		w.Look = kit.NewLook(kit.RedTheme, kit.Level(rapid.IntRange(0, 3).Draw(t, "level")), rapid.SampledFrom([]kit.Glyphs{kit.ASCII, kit.Unicode, kit.Braille}).Draw(t, "glyphs"))
		if rapid.Bool().Draw(t, "marked") {
			w.Marks = map[int]bool{0: true, 3: true}
		}
		s := New()
		size := func() {
			view := s.View(w, w.Width, w.Body())
			if n := strings.Count(view, "\n") + 1; n != max(w.Body(), 1) {
				t.Fatalf("%d lines of %d", n, w.Body())
			}
			for _, line := range strings.Split(view, "\n") {
				if n := len([]rune(bare(line))); n > w.Width {
					t.Fatalf("%d columns of %d: %q", n, w.Width, line)
				}
			}
		}
		size()
		s = settle(t, s, w)
		size()
		for _, key := range rapid.SliceOfN(rapid.SampledFrom([]string{".", ",", "left", "right", "up", "down", "h", "+", "-", "0", "enter", "x"}), 0, 12).Draw(t, "keys") {
			s = press(t, s, w, key)
			size()
		}
	})
}

// bare takes the styles out.
func bare(s string) string {
	var b strings.Builder
	on := true
	for _, r := range s {
		switch {
		case r == 0x1b:
			on = false
		case on:
			b.WriteRune(r)
		case r == 'm':
			on = true
		}
	}
	return b.String()
}

// scene is some moment of some night, for the header.
func scene(t *testing.T) moment.Scene {
	t.Helper()
	site := astro.Site{Name: "test site", Lat: astro.Deg(-29), Lon: astro.Deg(-70), HeightM: 2400, Air: astro.DefaultWeather(2400)}
	n, err := moment.NewNight(site, astro.Date{Year: 2026, Month: 12, Day: 1}, targets.DefaultLimits(), targets.Conditions{})
	if err != nil {
		t.Fatal(err)
	}
	return moment.NewScene(n, n.Midnight)
}
