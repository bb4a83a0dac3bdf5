// Package events is the screen that answers "what happens when?": the next
// dated happening with its countdown, then eclipses, maxima, phases and the
// like of tonight and the coming nights in order of time, each with its
// uncertainty, where the star stands then and whether it can be observed.
package events

import (
	"context"
	"fmt"
	"sort"
	"time"

	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// Screen is the list of happenings.
type Screen struct {
	rangeAt int // which of ranges
	onlyCan bool
	quarter bool   // quadratures too
	data    *dated // what is shown; nil: nothing yet
	next    *dated // what is being worked out; the same as data when done
	busy    bool   // with that
	failed  bool   // it was not to be had; another key tries again
	visible []int32
	chosen  happening // that the cursor was put on
	top     int
}

// quadrature is the kind that is left out unless asked for: there are two of
// them for each eclipse.
const quadrature = "quadrature"

// happening tells one from another.
type happening struct {
	row  int32
	kind string
	at   time.Time
}

func of(h *roster.Happening) happening { return happening{h.Row, h.Kind, h.At.UTC()} }

// New returns the screen, empty.
func New() Screen { return Screen{rangeAt: 1} }

// Title names it.
func (s Screen) Title() string { return kit.OnEvents }

// Typing is never the case here.
func (s Screen) Typing() bool { return false }

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// Rows names the selected star, so that it is worked out in long lists.
func (s Screen) Rows(w *kit.World) []int32 {
	if w.Entry() == nil {
		return nil
	}
	return []int32{int32(w.Selected)}
}

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	s.failed = false
	room := max(layoutOf(w.Width, w.Body()).room, 1)
	place := s.place(w)
	switch kit.Lookup(kit.OnEvents, press) {
	case kit.OpenStar:
		if w.Entry() == nil {
			return s, kit.Say{Text: "no star is selected"}
		}
		return s, kit.Open{Screen: kit.OnStar}
	case kit.LongerRange:
		return s.ahead(s.rangeAt + 1)
	case kit.ShortRange:
		return s.ahead(s.rangeAt - 1)
	case kit.OnlyCan:
		s.onlyCan = !s.onlyCan
		s.see()
		if s.onlyCan {
			return s, kit.Say{Text: "only what can be observed"}
		}
		return s, kit.Say{Text: "everything"}
	case kit.Quadratures:
		s.quarter = !s.quarter
		s.see()
		if s.quarter {
			return s, kit.Say{Text: "quadratures too"}
		}
		return s, kit.Say{Text: "without quadratures"}
	case kit.Down:
		if place < 0 {
			return s.goTo(w, s.upcoming(w.Shown))
		}
		return s.goTo(w, place+1)
	case kit.Up:
		if place < 0 {
			return s.goTo(w, s.upcoming(w.Shown)-1)
		}
		return s.goTo(w, place-1)
	case kit.HalfDown:
		return s.goTo(w, s.from(w, place)+max(room/2, 1))
	case kit.HalfUp:
		return s.goTo(w, s.from(w, place)-max(room/2, 1))
	case kit.First:
		return s.goTo(w, 0)
	case kit.Last:
		return s.goTo(w, len(s.visible)-1)
	}
	return s, nil
}

// from is the place that steps are counted from.
func (s *Screen) from(w *kit.World, place int) int {
	if place < 0 {
		return s.upcoming(w.Shown)
	}
	return place
}

// ahead shows more nights or fewer.
func (s Screen) ahead(to int) (kit.Screen, kit.Job) {
	if to < 0 || to >= len(ranges) {
		return s, kit.Say{Text: "no other range than " + fmt.Sprint(ranges) + " nights"}
	}
	s.rangeAt = to
	return s, nil
}

// goTo puts the cursor on a happening and selects its star.
func (s Screen) goTo(w *kit.World, place int) (kit.Screen, kit.Job) {
	if len(s.visible) == 0 {
		return s, nil
	}
	place = max(min(place, len(s.visible)-1), 0)
	h := s.at(place)
	s.chosen = of(h)
	s.top = scroll(s.top, place, len(s.visible), layoutOf(w.Width, w.Body()).room)
	return s, kit.Select{Row: int(h.Row)}
}

func (s *Screen) at(place int) *roster.Happening { return &s.data.list[s.visible[place]] }

// upcoming is the place of the first that is still to come; the number of
// places where all are over.
func (s *Screen) upcoming(t time.Time) int {
	return sort.Search(len(s.visible), func(i int) bool { return !s.at(i).At.UTC().Before(t) })
}

// place is where the cursor stands: on the happening it was put on, or else
// the selected star's next one; -1: it has none.
func (s *Screen) place(w *kit.World) int {
	if w.Entry() == nil || s.data == nil || s.data.roster.Len() != w.Snap.Roster.Len() {
		return -1
	}
	if int(s.chosen.row) == w.Selected {
		i := s.upcoming(s.chosen.at)
		for ; i < len(s.visible) && s.at(i).At.UTC().Equal(s.chosen.at); i++ {
			if of(s.at(i)) == s.chosen {
				return i
			}
		}
	}
	for i := s.upcoming(w.Shown); i < len(s.visible); i++ {
		if int(s.at(i).Row) == w.Selected {
			return i
		}
	}
	return -1
}

// see makes the list of what is visible.
func (s *Screen) see() {
	s.visible = nil
	if s.data == nil {
		return
	}
	s.visible = make([]int32, 0, len(s.data.list))
	for i := range s.data.list {
		if h := &s.data.list[i]; (!s.onlyCan || h.Placed && h.Can) && (s.quarter || h.Kind != quadrature) {
			s.visible = append(s.visible, int32(i))
		}
	}
}

// scroll returns the first place to show so that one is seen. At an edge it
// jumps: rows that follow one by one would each repaint the list.
func scroll(top, place, count, room int) int {
	room = max(room, 1)
	switch {
	case place < 0:
	case place < top:
		top = place - room + 1 + room/6
	case place >= top+room:
		top = place - room/6
	}
	return max(min(top, count-room), 0)
}

// portioned is what was worked out further.
type portioned struct{ of, got *dated }

// Refresh asks for what is not there yet, portion by portion.
func (s Screen) Refresh(w *kit.World) (kit.Screen, kit.Job) {
	if w.Snap == nil || s.failed || len(w.Snap.Order) > most {
		return s, nil
	}
	n := w.Snap.Scene.Night
	if !s.next.same(w.Snap.Roster, n, w.Snap.Order, ranges[s.rangeAt]) {
		s.next, s.busy = start(w.Snap.Roster, n, w.Snap.Order, ranges[s.rangeAt]), false
		if s.next.done() { // an empty list
			s.data = s.next
			s.see()
		}
	}
	if s.busy || s.next.done() {
		return s, nil
	}
	s.busy = true
	was, from := s.next, source{w.Night, kit.LightsOf(w), w.Snap.Scene.Instant}
	return s, kit.Work{Name: "dating what happens", Run: func(ctx context.Context) (kit.Result, error) {
		got, err := was.further(ctx, &from)
		return portioned{was, got}, err
	}}
}

// Apply takes what was worked out, unless other targets or nights were asked
// for meanwhile.
func (s Screen) Apply(w *kit.World, r kit.Result) kit.Screen {
	switch r := r.(type) {
	case portioned:
		if r.of != s.next {
			return s
		}
		first := s.data == nil || s.data.night != r.got.night
		s.next, s.busy = r.got, false
		if r.got.known() {
			s.data = r.got
			s.see()
			if first {
				room := layoutOf(w.Width, w.Body()).room
				s.top = max(min(max(s.upcoming(w.Shown)-1, 0), len(s.visible)-room), 0)
			}
		}
	case kit.Failed:
		s.busy, s.failed = false, true
	}
	return s
}
