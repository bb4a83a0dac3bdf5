// Package finder is the screen that answers "how do I find it?": the field as
// the user's camera shows it, with detector or slit, neighbours, companion and
// the stars to offset from. Places, offsets and words come from
// targets/finding.
package finder

import (
	"context"
	"time"

	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// Screen is the picture of a field.
type Screen struct {
	zoom    int // powers of two
	northUp bool
	pic     *picture
	asked   picKey
	moved   time.Time // when the last key went to another star
}

// New returns the screen, empty.
func New() Screen { return Screen{} }

// Title names it.
func (s Screen) Title() string { return kit.OnFinder }

// Typing is never the case here.
func (s Screen) Typing() bool { return false }

// Rests has the screen refreshed as time goes by: the picture follows when the
// user rests on a star.
func (s Screen) Rests() {}

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// rest is how long no other star must have been gone to before the picture
// follows: it is on every line of the screen.
const rest = 600 * time.Millisecond

// mostZoom is how many times the picture is made twice as large or small.
const mostZoom = 5

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	switch kit.Lookup(kit.OnFinder, press) {
	case kit.NextStar:
		return s.other(w, 1)
	case kit.PriorStar:
		return s.other(w, -1)
	case kit.ZoomIn:
		s.zoom = min(s.zoom+1, mostZoom)
	case kit.ZoomOut:
		s.zoom = max(s.zoom-1, -mostZoom)
	case kit.ZoomAll:
		s.zoom = 0
	case kit.NorthUp:
		s.northUp = !s.northUp
		if s.northUp {
			return s, kit.Say{Text: "north up, east left"}
		}
		return s, kit.Say{Text: "as the camera shows it"}
	case kit.OpenStar:
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

// Rows names the selected star, so that it is worked out in long lists.
func (s Screen) Rows(w *kit.World) []int32 {
	if w.Entry() == nil {
		return nil
	}
	return []int32{int32(w.Selected)}
}

// picKey is what a picture was drawn for.
type picKey struct {
	roster     *roster.Roster
	night      *moment.Night
	row        int
	slot       int64 // of ten minutes
	zoom       int
	northUp    bool
	cols, rows int
	look       *kit.Look
}

// Refresh asks for another picture where the one there is no longer holds.
func (s Screen) Refresh(w *kit.World) (kit.Screen, kit.Job) {
	l := layoutOf(w.Width, w.Body())
	if w.Entry() == nil || l.cols <= 0 || l.rows <= 0 {
		return s, nil
	}
	key := picKey{w.Snap.Roster, w.Snap.Scene.Night, w.Selected, w.Snap.Scene.Instant.UTC().Unix() / 600, s.zoom, s.northUp, l.cols, l.rows, w.Look}
	if key == s.asked {
		return s, nil
	}
	passing := w.Ticks && !w.Fixed && w.Wall.Sub(s.moved) < rest && !w.Wall.Before(s.moved)
	if s.pic != nil && key.row != s.pic.key.row && passing {
		return s, nil
	}
	s.asked = key
	ask, neighbours := asking{key: key, snap: w.Snap, requests: w.Requests}, w.Field
	return s, kit.Work{Name: "drawing the field", Run: func(context.Context) (kit.Result, error) {
		if neighbours != nil {
			ask.field = neighbours()
		}
		return ask.draw(), nil
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
