// Package diagram is the screen that answers "where in their lives do they
// stand?": the selected star on the Hertzsprung-Russell diagram and its track
// through it, among the other targets of the list. It judges nothing itself:
// places and lines come from the judgement.
package diagram

import (
	"context"
	"reflect"
	"time"

	"evenfall/tui/kit"
)

// Screen is the diagram.
type Screen struct {
	axes, zoom int
	cx, cy     float64 // the middle, where it is zoomed

	placed *placed // what is shown; nil: nothing yet
	next   *placed // what is being judged; the same as placed when done
	busy   bool    // with that
	one    spot    // the selected star where it is not among the first of a long list
	oneOf  any     // the roster that it is of
	asking int     // row that is being judged by itself; -1: none

	pic   *picture
	asked picKey
	track track     // whose life is drawn
	moved time.Time // when the last key went to another star
}

// New returns the screen, empty.
func New() Screen { return Screen{asking: -1} }

// Title names it.
func (s Screen) Title() string { return kit.OnDiagram }

// Typing is never the case here.
func (s Screen) Typing() bool { return false }

// Rests has the screen refreshed as time goes by: the track follows when the
// user rests on a star.
func (s Screen) Rests() {}

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// rest is how long no other star must have been gone to before the track
// follows: a track is on every line of the screen, and stars that are merely
// passed by would each send all of them.
const rest = 600 * time.Millisecond

// portion is how many targets of a long list are judged in one go; between
// two portions the work can be dropped.
const portion = 250

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	switch do := kit.Lookup(kit.OnDiagram, press); do {
	case kit.NextStar:
		return s.other(w, 1)
	case kit.PriorStar:
		return s.other(w, -1)
	case kit.NearLeft, kit.NearRight, kit.NearUp, kit.NearDown:
		return s.near(w, do)
	case kit.OpenStar:
		if w.Entry() == nil {
			return s, kit.Say{Text: "no star is selected"}
		}
		return s, kit.Open{Screen: kit.OnStar}
	case kit.OtherAxes:
		s.axes = 1 - s.axes
		if _, _, ok := s.standing(w); !ok {
			s.zoom = 0
		}
		s.middle(w)
		return s, kit.Say{Text: pairs[s.axes].name}
	case kit.ZoomIn:
		if s.zoom == mostZoom {
			return s, kit.Say{Text: "no closer than this"}
		}
		s.zoom++
		s.middle(w)
	case kit.ZoomOut:
		s.zoom = max(s.zoom-1, 0)
		s.middle(w)
	case kit.ZoomAll:
		s.zoom = 0
	}
	return s, nil
}

// middle puts the selected star into the middle; without one the middle
// stays.
func (s *Screen) middle(w *kit.World) {
	if x, y, ok := s.standing(w); ok {
		s.cx, s.cy = x, y
	} else if s.placed != nil && (s.zoom <= 1 || s.cx == 0 && s.cy == 0) {
		all := s.placed.all[s.axes]
		s.cx, s.cy = (all.left+all.right)/2, (all.top+all.bottom)/2
	}
}

// selected returns the selected star's spot; nil: not judged yet, or none.
func (s *Screen) selected(w *kit.World) *spot {
	if w.Entry() == nil {
		return nil
	}
	if s.placed != nil {
		if i, ok := s.placed.index[int32(w.Selected)]; ok {
			return &s.placed.spots[i]
		}
	}
	if s.one.v != nil && int(s.one.row) == w.Selected && s.oneOf == any(w.Snap.Roster) {
		return &s.one
	}
	return nil
}

// standing returns where the selected star stands on the axes shown.
func (s *Screen) standing(w *kit.World) (x, y float64, ok bool) {
	sel := s.selected(w)
	if sel == nil {
		return 0, 0, false
	}
	ix, iy, ok := pairs[s.axes].place(&sel.v.Place)
	return ix.Mid, iy.Mid, ok
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
	s.moved = w.Wall
	return s, kit.Select{Row: int(w.Snap.Order[place])}
}

// near goes to the nearest star on one side.
func (s Screen) near(w *kit.World, dir kit.Action) (kit.Screen, kit.Job) {
	if s.placed == nil {
		return s, nil
	}
	win, from := s.window(w), -1
	x, y, ok := s.standing(w)
	if !ok {
		x, y = (win.left+win.right)/2, (win.top+win.bottom)/2
	} else if i, in := s.placed.index[int32(w.Selected)]; in {
		from = int(i)
	} else {
		from = len(s.placed.spots) // after all that are drawn
	}
	i := near(&pairs[s.axes], win, s.placed.spots, from, x, y, dir)
	switch {
	case i < 0 && s.placed.on[s.axes] == 0:
		return s, kit.Say{Text: "no star stands on these axes"}
	case i < 0:
		return s, kit.Say{Text: "no more stars that way"}
	}
	s.moved = w.Wall
	return s, kit.Select{Row: int(s.placed.spots[i].row)}
}

// window returns the part of the diagram to show. A zoomed one goes after the
// selected star when that would leave it.
func (s *Screen) window(w *kit.World) window {
	all := s.placed.all[s.axes]
	if s.zoom == 0 {
		return all
	}
	win := all.zoomed(s.cx, s.cy, s.zoom)
	if x, y, ok := s.standing(w); ok && !win.holds(x, y) {
		s.cx, s.cy = x, y
		win = all.zoomed(x, y, s.zoom)
	}
	return win
}

// Rows names the selected star, so that it is worked out in long lists.
func (s Screen) Rows(w *kit.World) []int32 {
	if w.Entry() == nil {
		return nil
	}
	return []int32{int32(w.Selected)}
}

// lives returns where the figures come from.
func lives(w *kit.World) kit.Lives {
	if w.Lives == nil {
		return kit.Judged{}
	}
	return w.Lives
}

// portions are what has been judged further.
type (
	portioned struct{ of, got *placed }
	single    struct {
		roster any
		spot   spot
	}
)

// Refresh asks for what is not there yet: judgements, portion by portion, and
// the picture.
func (s Screen) Refresh(w *kit.World) (kit.Screen, kit.Job) {
	if w.Snap == nil {
		return s, nil
	}
	var jobs kit.All
	from, r := lives(w), w.Snap.Roster
	if !s.next.same(r, w.Snap.Order) {
		s.next, s.busy = &placed{roster: r, order: w.Snap.Order}, false
		if len(w.Snap.Order) == 0 {
			s.next = s.next.further(from, 0)
			s.placed = s.next
		}
	}
	if !s.busy && !s.next.done() {
		s.busy = true
		of, n := s.next, len(s.next.order)
		if w.Snap.Bulk {
			n = portion
		}
		jobs = append(jobs, kit.Work{Name: "placing the stars on the diagram", Run: func(context.Context) (kit.Result, error) {
			return portioned{of, of.further(from, n)}, nil
		}})
	}
	if w.Entry() != nil && s.selected(w) == nil && s.asking != w.Selected {
		s.asking = w.Selected
		row := int32(w.Selected)
		jobs = append(jobs, kit.Work{Name: "placing the star on the diagram", Run: func(context.Context) (kit.Result, error) {
			return single{r, judged(from, r, row)}, nil
		}})
	}
	if job := s.redraw(w); job != nil {
		jobs = append(jobs, job)
	}
	if len(jobs) == 0 {
		return s, nil
	}
	return s, jobs
}

// redraw asks for another picture where the one there is no longer holds.
func (s *Screen) redraw(w *kit.World) kit.Job {
	if s.placed == nil {
		return nil
	}
	if sel := s.selected(w); sel != nil || w.Entry() == nil {
		var want track
		if sel != nil {
			want = trackOf(sel.v)
		}
		if s.pic == nil || !w.Ticks || w.Fixed || w.Wall.Sub(s.moved) >= rest || w.Wall.Before(s.moved) {
			s.track = want
		}
	}
	of := s.placed
	if p := s.pic; p != nil && !of.done() && p.key.placed.roster == of.roster {
		of = p.key.placed // portions are not drawn one by one
	}
	l := layoutOf(w.Width, w.Body())
	if l.cols <= 0 || l.rows <= 0 {
		return nil
	}
	marks := w.Marks
	key := picKey{of, s.axes, s.window(w), l.cols, l.rows, w.Look, s.track, reflect.ValueOf(marks).Pointer()}
	if key == s.asked {
		return nil
	}
	s.asked = key
	from, before := lives(w), s.pic
	return kit.Work{Name: "drawing the diagram", Run: func(context.Context) (kit.Result, error) {
		return draw(key, marks, from, before), nil
	}}
}

// Apply takes what was judged or drawn, unless another was asked for
// meanwhile.
func (s Screen) Apply(w *kit.World, r kit.Result) kit.Screen {
	switch r := r.(type) {
	case portioned:
		if r.of == s.next {
			s.next, s.placed, s.busy = r.got, r.got, false
		}
	case single:
		s.one, s.oneOf = r.spot, r.roster
		if s.asking == int(r.spot.row) {
			s.asking = -1
		}
	case *picture:
		if r.key == s.asked {
			s.pic = r
		}
	case kit.Failed:
		s.asked, s.busy, s.asking = picKey{}, false, -1
	}
	return s
}
