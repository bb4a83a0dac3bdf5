// Package star is the screen that answers "what is it, what will I see, how
// do I take it?": hand-over lines first, the night's course in its own lane,
// then everything known, with unit, source and what no source bore out.
package star

import (
	"context"
	"time"

	"evenfall/targets/moment"
	"evenfall/tui/kit"
)

// Screen is the look at one star.
type Screen struct {
	detail *Detail // nil: not worked out yet
	asked  key
	top    int // first line shown of what is known

	light      bool   // the light curve stands in place of the night's course
	chart      *chart // nil: not drawn yet
	askedChart chartKey
}

// New returns the screen, empty.
func New() Screen { return Screen{} }

// key is what a detail was made for.
type key struct {
	row     int
	minute  time.Time
	roster  any
	started bool
}

// Title names it.
func (s Screen) Title() string { return kit.OnStar }

// Typing is never the case here.
func (s Screen) Typing() bool { return false }

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	page := max(s.layout(w.Width, w.Body()).doc/2, 1)
	do := kit.Lookup(kit.OnStar, press)
	switch do {
	case kit.NextStar:
		return s.other(w, 1)
	case kit.PriorStar:
		return s.other(w, -1)
	case kit.LightCurve:
		return s.toggle(w)
	}
	s.top = kit.Scroll(do, s.top, page)
	s.top = s.clamp(w.Width, w.Body())
	return s, nil
}

// toggle shows the light curve in place of the night's course, and back.
func (s Screen) toggle(w *kit.World) (kit.Screen, kit.Job) {
	switch {
	case w.Body() >= tall:
		return s, kit.Say{Text: "the screen is high enough for both"}
	case w.Body() < leastForChart || w.Width < leastForLabels:
		return s, kit.Say{Text: "the screen is too small for a light curve"}
	}
	s.light = !s.light
	s.top = s.clamp(w.Width, w.Body())
	if s.light {
		return s, kit.Say{Text: "the light curve; L: the night's course"}
	}
	return s, kit.Say{Text: "the night's course; L: the light curve"}
}

// other goes to the star before or after in the list.
func (s Screen) other(w *kit.World, by int) (kit.Screen, kit.Job) {
	if w.Snap == nil || len(w.Snap.Order) == 0 {
		return s, nil
	}
	place := w.Place + by
	if place < 0 || place >= len(w.Snap.Order) {
		return s, kit.Say{Text: "no more stars that way"}
	}
	s.top = 0
	return s, kit.Select{Row: int(w.Snap.Order[place])}
}

func (s Screen) clamp(width, height int) int {
	if s.detail == nil {
		return 0
	}
	l := s.layout(width, height)
	return max(min(s.top, len(s.detail.document(width))-l.doc), 0)
}

// Rows names the star itself.
func (s Screen) Rows(w *kit.World) []int32 {
	if w.Entry() == nil {
		return nil
	}
	return []int32{int32(w.Selected)}
}

// Refresh asks for the detail when the star, the night or the minute is
// another one.
func (s Screen) Refresh(w *kit.World) (kit.Screen, kit.Job) {
	if w.Entry() == nil {
		return s, nil
	}
	sc := w.Snap.Scene
	want := key{w.Selected, sc.Instant.UTC().Truncate(time.Minute), w.Snap.Roster, true}
	if want == s.asked {
		if job := s.redraw(w); job != nil {
			return s, job
		}
		return s, nil
	}
	if want.row != s.asked.row {
		s.detail = nil
	}
	s.asked = want
	r, row, handOver, lights, neighbours := w.Snap.Roster, w.Selected, w.HandOver, kit.LightsOf(w), w.Field
	return s, kit.Work{Name: "looking at " + w.Entry().Target.Name, Run: func(ctx context.Context) (kit.Result, error) {
		m := r.Moment(&sc, row)
		p := r.Prepared(row)
		d := &Detail{Row: row, Name: p.Target.Name, Scene: sc, Moment: m, asked: want}
		d.HandOver = handOver.Lines(&p.Target, &m, p.Drift)
		d.Curve = moment.Curve(sc.Night, p, r.Course(sc.Night, row), r.Want(sc.Night, row), kit.Stretch(sc.Night))
		var err error
		st := r.Study(row)
		d.Known, err = known(&sc, p, &m, &st, lights.Next(p, m.At), howTaken(&sc, r, row, &m, neighbours))
		return d, err
	}}
}

// Apply takes the detail, unless another was asked for meanwhile.
func (s Screen) Apply(w *kit.World, r kit.Result) kit.Screen {
	switch r := r.(type) {
	case *Detail:
		if r.asked == s.asked {
			s.detail = r
			s.top = s.clamp(w.Width, w.Body())
		}
	case *chart:
		if r.key == s.askedChart {
			s.chart = r
		}
	case kit.Failed:
		s.asked, s.askedChart = key{}, chartKey{}
	}
	return s
}
