// Package dome is the screen that answers "where in the sky?": zenith, horizon,
// Moon, the selected star and where it is going, among the other targets, how
// bright the sky is and where the telescope cannot point. It judges nothing
// itself: places, brightness and limits come from the moment.
package dome

import (
	"context"
	"math"
	"reflect"
	"slices"
	"time"

	"evenfall/tui/kit"
)

// Screen is the sky.
type Screen struct {
	turned float64 // degrees added to the azimuth of the middle
	on     bool    // the cursor is there
	x, y   float64 // where, on the plane

	order []int32 // as it was drawn
	token int     // changes with it
	pic   *picture
	asked picKey
	track int       // row whose path is drawn; -1: none
	moved time.Time // when the last key went to another star
}

// New returns the screen, empty.
func New() Screen { return Screen{track: -1} }

// Title names it.
func (s Screen) Title() string { return kit.OnDome }

// Typing is never the case here.
func (s Screen) Typing() bool { return false }

// Rests has the screen refreshed as time goes by: the path follows when the
// user rests on a star.
func (s Screen) Rests() {}

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// rest is how long no other star must have been gone to before the path
// follows: it is on many lines of the screen.
const rest = 600 * time.Millisecond

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	switch kit.Lookup(kit.OnDome, press) {
	case kit.NextStar:
		return s.other(w, 1)
	case kit.PriorStar:
		return s.other(w, -1)
	case kit.CursorLeft:
		return s.move(w, -1, 0), nil
	case kit.CursorRight:
		return s.move(w, 1, 0), nil
	case kit.CursorUp:
		return s.move(w, 0, 1), nil
	case kit.CursorDown:
		return s.move(w, 0, -1), nil
	case kit.CursorAway:
		s.on = false
	case kit.TurnDome:
		s.turned = math.Mod(s.turned+90, 360)
		s.on = false
	case kit.OpenStar:
		if s.on {
			return s.take(w)
		}
		if w.Entry() == nil {
			return s, kit.Say{Text: "no star is selected"}
		}
		return s, kit.Open{Screen: kit.OnStar}
	}
	return s, nil
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

// vault returns how the sky lies on the screen.
func (s *Screen) vault(w *kit.World) vault {
	l := layoutOf(w.Width, w.Body())
	v := vault{cols: l.cols, rows: l.rows}
	if w.Snap != nil {
		v.middle = math.Mod(middleOf(&w.Snap.Scene)+s.turned, 360)
	}
	return v
}

// move moves the cursor by a cell; it begins on the selected star, or else in
// the middle.
func (s Screen) move(w *kit.World, right, up float64) Screen {
	v := s.vault(w)
	if w.Snap == nil || v.cols <= 0 || v.rows <= 0 {
		return s
	}
	if !s.on {
		s.on, s.x, s.y = true, 0, 0.5
		if m := w.Moment(); m != nil {
			if x, y, ok := plane(v.middle, m.Place.Az.Deg(), m.Apparent.Deg()); ok {
				s.x, s.y = x, y
			}
		}
	}
	// from the middle of the cell, so that a step is a cell whatever the size
	col, row := v.cellAt(s.x, s.y)
	row = max(min(row-int(up), v.rows-1), 0)
	from, to := v.edge(row)
	s.x, s.y = v.centre(max(min(col+int(right), to), from), row)
	half := math.Sqrt(math.Max(1-s.y*s.y, 0))
	s.x = max(min(s.x, half), -half)
	return s
}

// take selects the target nearest to the cursor.
func (s Screen) take(w *kit.World) (kit.Screen, kit.Job) {
	az, alt, ok := s.cursor(w)
	if !ok || s.pic == nil {
		return s, nil
	}
	i, _ := s.pic.nearest(towards(&w.Snap.Scene.Frame, az, alt).Dir)
	if i < 0 {
		return s, kit.Say{Text: "no target is above the horizon"}
	}
	s.on, s.moved = false, w.Wall
	return s, kit.Select{Row: int(s.pic.spots[i].row)}
}

// cursor returns where the cursor stands in the sky; false: it is not there.
func (s *Screen) cursor(w *kit.World) (azDeg, altDeg float64, ok bool) {
	if !s.on || w.Snap == nil {
		return 0, 0, false
	}
	return sky(s.vault(w).middle, s.x, s.y)
}

// Rows names the selected star, so that it is worked out in long lists.
func (s Screen) Rows(w *kit.World) []int32 {
	if w.Entry() == nil {
		return nil
	}
	return []int32{int32(w.Selected)}
}

// Refresh asks for another picture where the one there is no longer holds.
func (s Screen) Refresh(w *kit.World) (kit.Screen, kit.Job) {
	v := s.vault(w)
	if w.Snap == nil || v.cols <= 0 || v.rows <= 0 {
		return s, nil
	}
	if !slices.Equal(s.order, w.Snap.Order) {
		s.order = w.Snap.Order
		s.token++
	}
	if s.pic == nil || !w.Ticks || w.Fixed || w.Wall.Sub(s.moved) >= rest || w.Wall.Before(s.moved) {
		s.track = w.Selected
	}
	key := picKey{roster: w.Snap.Roster, night: w.Snap.Scene.Night, minute: w.Snap.Scene.Instant.UTC().Truncate(time.Minute).Unix(),
		token: s.token, marks: reflect.ValueOf(w.Marks).Pointer(), look: w.Look, vault: v, track: s.track}
	if key == s.asked {
		return s, nil
	}
	s.asked = key
	snap, marks := w.Snap, w.Marks
	return s, kit.Work{Name: "drawing the sky", Run: func(ctx context.Context) (kit.Result, error) {
		return draw(ctx, key, snap, marks)
	}}
}

// Apply takes what was drawn, unless another was asked for meanwhile.
func (s Screen) Apply(_ *kit.World, r kit.Result) kit.Screen {
	switch r := r.(type) {
	case *picture:
		if r.key == s.asked {
			s.pic = r
		}
	case kit.Failed:
		s.asked = picKey{}
	}
	return s
}
