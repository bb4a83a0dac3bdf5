package diagram

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/targets/stage"
	"evenfall/tui/kit"
)

// told is a sky that is told where each target stands.
type told struct {
	verdicts []stage.Verdict
	curves   []stage.Curve
}

func (t told) Verdict(_ *roster.Roster, row int) *stage.Verdict { return &t.verdicts[row] }
func (t told) Curves(*roster.Roster, float64, float64) []stage.Curve {
	return t.curves
}

func at(x, d float64) astro.Interval {
	return astro.Interval{Lo: x - d, Mid: x, Hi: x + d, Level: stage.Level}
}

// stand is a judgement of a star that stands there on both pairs of axes.
func stand(logT, logL float64) stage.Verdict {
	return stage.Verdict{Best: string(targets.MS), P: map[targets.Stage]float64{targets.MS: 0.9}, MassMsun: 1,
		Place: stage.Placing{HROK: true, LogT: at(logT, 0.02), LogL: at(logL, 0.1), CMDOK: true, Colour: at(4-logT, 0.05), AbsG: at(5-2.5*logL, 0.2)}}
}

// worldOf is a world whose list is as long as the verdicts, in their order.
func worldOf(sky told, w, h int) *kit.World {
	var list []roster.Entry
	order := make([]int32, len(sky.verdicts))
	for i := range sky.verdicts {
		order[i] = int32(i)
		list = append(list, roster.Entry{Target: targets.Target{Name: fmt.Sprintf("star %d", i)}})
	}
	selected := 0
	if len(list) == 0 {
		selected = -1
	}
	r := roster.New(list, moment.NewModels(), nil)
	now := time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC)
	return &kit.World{Look: kit.NewLook(kit.PlainTheme, kit.NoAttributes, kit.ASCII), Snap: &roster.Snapshot{Roster: r, Order: order, Total: len(list)},
		Selected: selected, Place: selected, Wall: now, Shown: now, Live: true, Ticks: true, Marks: map[int]bool{}, Width: w, Height: h, Lives: sky}
}

// settle runs what a screen asks for until it asks for nothing more.
func settle(t interface{ Fatal(...any) }, s Screen, w *kit.World) Screen {
	for range 200 {
		n, job := s.Refresh(w)
		s = n.(Screen)
		if job == nil {
			return s
		}
		for _, j := range job.(kit.All) {
			r, err := j.(kit.Work).Run(nil)
			if err != nil {
				t.Fatal(err)
			}
			s = s.Apply(w, r).(Screen)
		}
	}
	t.Fatal("the screen never settles")
	return s
}

// press presses keys and follows selections.
func press(t interface{ Fatal(...any) }, s Screen, w *kit.World, keys ...string) Screen {
	for _, k := range keys {
		n, job := s.Key(w, k)
		s = n.(Screen)
		if sel, ok := job.(kit.Select); ok {
			w.Selected, w.Place = sel.Row, w.Snap.Find(sel.Row)
		}
		s = settle(t, s, w)
	}
	return s
}

// view draws without the header, which needs a night.
func view(s Screen, w *kit.World) string {
	l := layoutOf(w.Width, w.Body())
	p := kit.NewPen(w.Look, w.Width)
	s.plot(p, l, overlay(s.pic, s.selected(w), s.name(w, s.selected(w))), func(int) { p.Line() })
	for _, line := range s.below(w, s.selected(w), w.Width, 2) {
		for _, piece := range line {
			p.Put(piece.role, piece.text)
		}
		p.Line()
	}
	return p.String()
}

// The edges of a window are its first and last cells, whichever way an axis
// runs; zooming keeps the middle and halves the span.
func TestWindow(t *testing.T) {
	w := window{5, 3, 6, -4}
	for _, c := range []struct {
		x, y     float64
		col, row int
		ok       bool
	}{{5, 6, 0, 0, true}, {4, 1, 20, 5, true}, {3.01, -3.99, 39, 9, true}, {3, 0, 0, 0, false}, {5.01, 0, 0, 0, false}, {4, 6.1, 0, 0, false}, {math.NaN(), 0, 0, 0, false}} {
		col, row, ok := w.cell(c.x, c.y, 40, 10)
		if ok != c.ok || ok && (col != c.col || row != c.row) {
			t.Errorf("%g %g: cell %d %d %v, wanted %d %d %v", c.x, c.y, col, row, ok, c.col, c.row, c.ok)
		}
	}
	z := w.zoomed(4.2, 0, 2)
	if fx, fy := z.frac(4.2, 0); math.Abs(fx-0.5) > 1e-12 || math.Abs(fy-0.5) > 1e-12 {
		t.Errorf("the middle is at %g %g", fx, fy)
	}
	if math.Abs((z.left-z.right)-0.5) > 1e-12 || math.Abs((z.top-z.bottom)-2.5) > 1e-12 {
		t.Errorf("a quarter of %v is %v", w, z)
	}
	if !z.holds(4.2, 0) || z.holds(z.left, 0) || z.holds(9, 9) {
		t.Error("what a window holds well inside")
	}
	for k := range pairs {
		far := []spot{{v: &stage.Verdict{Place: stage.Placing{HROK: true, LogT: at(5.72, 0), LogL: at(-30, 0), CMDOK: true, Colour: at(-1.3, 0), AbsG: at(90, 0)}}}}
		got, a := pairs[k].around(far), &pairs[k]
		x, _, _ := a.place(&far[0].v.Place)
		if fx, _ := got.frac(x.Mid, 0); fx < 0 || got.bottom != a.widest.bottom || got.top != a.all.top || got.right != a.all.right {
			t.Errorf("%s: around a star far off: %v", a.name, got)
		}
	}
}

// Labels are round, in their places and never run together.
func TestTicks(t *testing.T) {
	room := func(s string) int { return len(s) + 2 }
	for _, c := range []struct {
		s        scale
		from, to float64
		cells    int
		want     string
	}{
		{logScale, 5.3, 3.35, 72, "100000 50000 20000 10000 5000"},
		{logScale, 5.3, 3.35, 110, "150000 100000 70000 50000 30000 20000 15000 10000 7000 5000 3000"},
		{logScale, 3.78, 3.72, 72, "6000 5900 5800 5700 5600 5500 5400 5300"},
		{evenScale, -0.9, 5.1, 72, "-0.5 0 0.5 1 1.5 2 2.5 3 3.5 4 4.5 5"},
		{evenScale, 0.61, 0.72, 40, "0.62 0.64 0.66 0.68 0.7 0.72"},
	} {
		var got []string
		for _, k := range ticks(c.s, c.from, c.to, c.cells, room) {
			got = append(got, k.label)
		}
		if text := strings.Join(got, " "); text != c.want {
			t.Errorf("%g to %g in %d: %s\nwanted %s", c.from, c.to, c.cells, text, c.want)
		}
	}
	for _, c := range []struct {
		m    float64
		e    int
		want string
	}{{1, 6, "1e6"}, {2.5, -4, "2.5e-4"}, {5, -3, "0.005"}, {1.25, 1, "12.5"}, {3, 0, "3"}, {1.05, 4, "10500"}, {1, 5, "100000"}} {
		if got := powerLabel(c.m, c.e); got != c.want {
			t.Errorf("%g times 10^%d: %s, wanted %s", c.m, c.e, got, c.want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		from := rapid.Float64Range(-30, 30).Draw(t, "from")
		span := rapid.Float64Range(1e-3, 60).Draw(t, "span")
		cells := rapid.IntRange(1, 200).Draw(t, "cells")
		for _, s := range []scale{evenScale, logScale} {
			if n := len(ticks(s, from, from+span, cells, room)); n > 400 {
				t.Errorf("%d ticks in %d cells", n, cells)
			}
		}
	})
}

// Lines are drawn within the drawing alone, and dots of one line follow each
// other.
func TestWalk(t *testing.T) {
	if _, _, _, _, ok := clip(-5, -5, -1, 20, 10, 10); ok {
		t.Error("a line outside is seen")
	}
	if ax, ay, bx, by, ok := clip(-10, 5, 20, 5, 10, 10); !ok || ax != 0 || ay != 5 || bx != 10 || by != 5 {
		t.Errorf("a line across: %g %g %g %g %v", ax, ay, bx, by, ok)
	}
	rapid.Check(t, func(t *rapid.T) {
		b := newBoard(&pairs[0], pairs[0].all, rapid.IntRange(1, 90).Draw(t, "cols"), rapid.IntRange(1, 50).Draw(t, "rows"), kit.ASCII)
		var pts []stage.Point
		for range rapid.IntRange(0, 12).Draw(t, "points") {
			pts = append(pts, stage.Point{LogT: odd.Draw(t, "t"), LogL: odd.Draw(t, "l")})
		}
		px, py := 0, 0
		b.walk(pts, func(x, y, _ int, broken bool) {
			if x < 0 || y < 0 || x >= 2*b.cols || y >= 4*b.rows {
				t.Fatalf("dot %d %d of %d x %d cells", x, y, b.cols, b.rows)
			}
			if !broken && (x-px > 1 || px-x > 1 || y-py > 1 || py-y > 1) {
				t.Fatalf("from %d %d to %d %d", px, py, x, y)
			}
			px, py = x, y
		})
	})
}

// odd draws what a wrong model might give.
var odd = rapid.OneOf(rapid.Float64Range(-8, 8), rapid.Float64Range(3, 5), rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, 1e300, -1e300, 5e-324}))

// The arrows go to the nearest star on a side, back again, and through stars
// in one place.
func TestNear(t *testing.T) {
	sky := told{verdicts: []stage.Verdict{stand(4, 0), stand(4.3, 0.1), stand(3.7, -0.2), stand(4.02, 2), stand(4, -2), stand(3.75, 3), stand(4, 0), stand(4, 0), {Best: targets.Undecided}}}
	w := worldOf(sky, 80, 24)
	s := settle(t, New(), w)
	for _, c := range []struct {
		from int
		key  string
		want int
	}{{0, "left", 1}, {0, "(", 1}, {7, "right", 2}, {6, "right", 7}, {0, "right", 6}, {7, "left", 6}, {0, "up", 3}, {0, "k", 3}, {7, "down", 4}, {6, "j", 7}, {3, "right", 5}, {1, "left", 1}, {2, "left", 7}} {
		w.Selected, w.Place = c.from, c.from
		s = settle(t, s, w)
		if press(t, s, w, c.key); w.Selected != c.want {
			t.Errorf("%s from %d leads to %d, wanted %d", c.key, c.from, w.Selected, c.want)
		}
	}
	w.Selected, w.Place = 8, 8 // stands nowhere
	s = settle(t, s, w)
	if press(t, s, w, "up"); w.Selected == 8 {
		t.Error("no way from a star that stands nowhere")
	}
	w.Selected, w.Place = 0, 0
	s = press(t, s, w, ".", ".", ",")
	if w.Selected != 1 {
		t.Errorf("two on and one back: %d", w.Selected)
	}
}

// Zooming keeps the selected star in the middle, goes after it, and back.
func TestZoom(t *testing.T) {
	w := worldOf(told{verdicts: []stage.Verdict{stand(4, 0), stand(4.005, 0.01), stand(3.6, 3)}}, 80, 24)
	s := settle(t, New(), w)
	whole := s.pic.key.win
	s = press(t, s, w, "+", "+", "+")
	if fx, fy := s.pic.key.win.frac(4, 0); math.Abs(fx-0.5) > 1e-9 || math.Abs(fy-0.5) > 1e-9 {
		t.Errorf("the star is at %g %g", fx, fy)
	}
	near := s.pic.key.win
	if s = press(t, s, w, "."); s.pic.key.win != near {
		t.Error("the window moves though the star is in it")
	}
	s = press(t, s, w, ".")
	if fx, _ := s.pic.key.win.frac(3.6, 3); s.pic.key.win == near || math.Abs(fx-0.5) > 1e-9 {
		t.Error("the window stays behind")
	}
	if !strings.Contains(view(s, w), "[m]") || !strings.Contains(view(s, w), "zoom 8 x") || !strings.Contains(view(s, w), "2 outside") {
		t.Errorf("zoomed:\n%s", view(s, w))
	}
	if s = press(t, s, w, "-", "-", "-", "-"); s.pic.key.win != whole {
		t.Error("zoomed out it is another diagram")
	}
	for range 9 {
		s = press(t, s, w, "+")
	}
	if s.zoom != mostZoom {
		t.Errorf("zoom %d", s.zoom)
	}
	if s = press(t, s, w, "0"); s.pic.key.win != whole {
		t.Error("0 is not the whole")
	}
	s = press(t, s, w, "h")
	if s.pic.key.axes != 1 || !strings.Contains(view(s, w), "M_G") {
		t.Error("h shows no colours")
	}
}

// The track waits until the user rests on a star, and comes at once on
// opening; the words say which star's it is.
func TestTrackFollows(t *testing.T) {
	a, b := stand(3.8, 0.5), stand(3.7, 1)
	b.MassMsun = 2
	life := func(m float64) stage.Curve {
		return stage.Curve{Sort: stage.Life, Name: fmt.Sprintf("%g Msun", m), Points: []stage.Point{{LogT: 3.8, LogL: 0, MassMsun: m, Stage: targets.MS}, {LogT: 3.5, LogL: 3, MassMsun: m, Stage: targets.RGB}}}
	}
	w := worldOf(told{verdicts: []stage.Verdict{a, b}, curves: []stage.Curve{life(1), life(2)}}, 80, 24)
	s := settle(t, New(), w)
	if !strings.Contains(view(s, w), "life of 1 Msun") || !strings.Contains(view(s, w), "RGB") {
		t.Errorf("opened:\n%s", view(s, w))
	}
	s = press(t, s, w, ".")
	if v := view(s, w); !strings.Contains(v, "its life follows") {
		t.Errorf("gone on:\n%s", v)
	}
	w.Wall = w.Wall.Add(time.Second)
	if v := view(settle(t, s, w), w); !strings.Contains(v, "life of 2 Msun") || strings.Contains(v, "follows") {
		t.Errorf("rested:\n%s", v)
	}
}

// A star that has lost its envelope has the life that ends in such a star.
func TestTrackPick(t *testing.T) {
	end := func(born, now float64) stage.Curve {
		return stage.Curve{Sort: stage.Life, Points: []stage.Point{{MassMsun: born, Stage: targets.MS}, {MassMsun: now, Stage: targets.CSPN}}}
	}
	curves := []stage.Curve{{Sort: stage.ZeroAge}, end(0.6, 0.5), end(1, 0.54), end(3, 0.7), {Sort: stage.Cooling, Points: []stage.Point{{MassMsun: 0.6}}}}
	for _, c := range []struct {
		best string
		mass float64
		want int
	}{{"MS", 0.62, 1}, {"MS", 2.9, 3}, {"CSPN", 0.7, 3}, {"PN", 0.55, 2}, {"WD", 0.61, 4}, {"WD", 1.2, -1}, {"ACC", 1, -1}, {"MS", 0, -1}, {"MS", math.NaN(), -1}, {"MS", 20, -1}} {
		if got := trackOf(&stage.Verdict{Best: c.best, MassMsun: c.mass}).pick(curves); got != c.want {
			t.Errorf("%s of %g Msun: line %d, wanted %d", c.best, c.mass, got, c.want)
		}
	}
}

// Several in a cell are a capital, the marked a star, and those that cannot be
// placed are counted with the reason.
func TestSigns(t *testing.T) {
	g := stand(3.6, 2)
	g.Best = targets.Merged
	w := worldOf(told{verdicts: []stage.Verdict{stand(4, 0), stand(3.5, -3), stand(3.5, -3), g, stand(4.8, 4), {Best: "WD", Place: stage.Placing{Why: "no parallax"}}}}, 80, 24)
	w.Marks = map[int]bool{4: true}
	v := view(settle(t, New(), w), w)
	for _, want := range []string{"M", "g", "*", "[m] star 0", "1 of 6 not placed: no parallax"} {
		if !strings.Contains(v, want) {
			t.Errorf("no %q in\n%s", want, v)
		}
	}
	for i := range kit.Stages {
		for j := range kit.Stages[:i] {
			if kit.Stages[i].Sign == kit.Stages[j].Sign {
				t.Errorf("%s and %s share a letter", kit.Stages[i].Code, kit.Stages[j].Code)
			}
		}
	}
	for _, code := range targets.Stages {
		if kit.StageSign(string(code)) == '?' {
			t.Errorf("%s has no letter", code)
		}
	}
}

// Long lists are judged portion by portion, no more than is drawn, and the
// selected star is judged though it is far down.
func TestLong(t *testing.T) {
	sky := told{}
	for i := range most + 700 {
		sky.verdicts = append(sky.verdicts, stand(3.5+float64(i%100)/100, float64(i%70)/10-3))
	}
	w := worldOf(sky, 80, 24)
	w.Snap.Bulk = true
	w.Selected, w.Place = most+600, most+600
	s, job := New().Refresh(w)
	works := job.(kit.All)
	if len(works) != 2 {
		t.Fatalf("%d pieces of work", len(works))
	}
	for _, j := range works {
		r, _ := j.(kit.Work).Run(nil)
		s = s.Apply(w, r)
	}
	if n := len(s.(Screen).placed.spots); n != portion {
		t.Errorf("%d judged in one go", n)
	}
	half := s.(Screen)
	if v := strings.Join(textOf(half.below(w, half.selected(w), 120, 2)), "\n"); !strings.Contains(v, fmt.Sprintf("placing %d of %d", portion, most)) {
		t.Errorf("on the way:\n%s", v)
	}
	done := settle(t, s.(Screen), w)
	if n := len(done.placed.spots); n != most {
		t.Errorf("%d judged in all", n)
	}
	if v := view(done, w); !strings.Contains(v, "the first 5000 of 5700") || !strings.Contains(v, "star 5600") {
		t.Errorf("all:\n%s", v)
	}
	press(t, done, w, "left")
	if w.Selected >= most {
		t.Error("no way from a star that is not among the first")
	}
}

func textOf(lines []words) []string {
	var out []string
	for _, l := range lines {
		text := ""
		for _, p := range l {
			text += p.text
		}
		out = append(out, text)
	}
	return out
}

func BenchmarkDraw(b *testing.B) {
	sky := told{}
	for i := range most {
		sky.verdicts = append(sky.verdicts, stand(3.4+float64(i%997)/600, float64(i%7001)/1000-3))
	}
	w := worldOf(sky, 200, 60)
	s := settle(b, New(), w)
	b.Run("picture", func(b *testing.B) {
		for b.Loop() {
			draw(s.pic.key, nil, sky, nil)
		}
	})
	b.Run("near", func(b *testing.B) {
		for b.Loop() {
			near(&pairs[0], s.pic.key.win, s.placed.spots, 0, 3.4, -3, kit.NearRight)
		}
	})
}
