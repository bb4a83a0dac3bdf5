// Package next is the screen that answers "what now?": the list in the order
// of what to take next, and below it why the selected star stands where it
// stands. It computes nothing about the sky.
package next

import (
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// mode is what the keys mean.
type mode int

const (
	browsing mode = iota
	filtering
	sorting
)

// Screen is the list.
type Screen struct {
	top   int // place in the order of the first row shown
	mode  mode
	field kit.Field
	was   string // the filter as it was before typing
	wrong string // what is wrong with the filter as typed
}

// New returns the list at its top.
func New() Screen { return Screen{} }

// Title names the table of keys that holds now.
func (s Screen) Title() string {
	switch s.mode {
	case filtering:
		return kit.OnField
	case sorting:
		return kit.OnSort
	}
	return kit.OnNext
}

// Typing tells whether keys are text or letters of a choice.
func (s Screen) Typing() bool { return s.mode != browsing }

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	switch s.mode {
	case filtering:
		return s.filterKey(w, press)
	case sorting:
		return s.sortKey(w, press)
	}
	switch kit.Lookup(kit.OnNext, press) {
	case kit.Down:
		return s.move(w, w.Place+1)
	case kit.Up:
		return s.move(w, w.Place-1)
	case kit.HalfDown:
		return s.move(w, w.Place+s.half(w))
	case kit.HalfUp:
		return s.move(w, w.Place-s.half(w))
	case kit.First:
		return s.move(w, 0)
	case kit.Last:
		return s.move(w, len(order(w))-1)
	case kit.OpenStar:
		if w.Entry() == nil {
			return s, kit.Say{Text: "no star is selected"}
		}
		return s, kit.Open{Screen: kit.OnStar}
	case kit.FilterList:
		s.mode, s.field, s.was = filtering, kit.NewField(w.Filter), w.Filter
	case kit.SortList:
		s.mode = sorting
	case kit.ReverseSort:
		return s, kit.Find{Filter: w.Filter, Sort: roster.Sort{Key: w.Sort.Key, Reverse: !w.Sort.Reverse}}
	case kit.RankAnew:
		return s, kit.Rerank{}
	}
	return s, nil
}

// order returns the places in the roster as the list stands.
func order(w *kit.World) []int32 {
	if w.Snap == nil {
		return nil
	}
	return w.Snap.Order
}

func (s Screen) half(w *kit.World) int { return max(layoutOf(w).room/2, 1) }

// move selects the row at a place of the order.
func (s Screen) move(w *kit.World, place int) (kit.Screen, kit.Job) {
	list := order(w)
	if len(list) == 0 {
		return s, nil
	}
	place = max(min(place, len(list)-1), 0)
	s.top = scroll(s.top, place, len(list), layoutOf(w).room)
	return s, kit.Select{Row: int(list[place])}
}

// scroll returns the first place to show so that the selected one is seen. At
// an edge it jumps: rows that follow one by one would each repaint the list.
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

// filterKey edits the filter; the list follows what is typed.
func (s Screen) filterKey(w *kit.World, press string) (kit.Screen, kit.Job) {
	switch kit.Lookup(kit.OnField, press) {
	case kit.Finish, kit.Back:
		s.mode = browsing
		if s.wrong != "" {
			wrong := s.wrong
			s.wrong = ""
			return s, kit.All{kit.Find{Filter: s.was, Sort: w.Sort}, kit.Say{Text: "filter not used: " + wrong, Bad: true}}
		}
		if w.Filter != s.field.String() {
			return s, kit.Find{Filter: s.field.String(), Sort: w.Sort}
		}
		return s, nil
	}
	field, ok := s.field.Press(press)
	if !ok {
		return s, nil
	}
	return s.typed(w, field)
}

func (s Screen) typed(w *kit.World, field kit.Field) (kit.Screen, kit.Job) {
	same := field.String() == s.field.String()
	s.field = field
	if same {
		return s, nil
	}
	s.wrong = ""
	if _, err := roster.ParseFilter(field.String()); err != nil {
		s.wrong = err.Error()
		return s, nil
	}
	line := roster.Settled(field.String())
	if line == w.Filter {
		return s, nil
	}
	s.top = 0
	return s, kit.Find{Filter: line, Sort: w.Sort}
}

// Paste puts text into the filter; elsewhere in the list it is dropped.
func (s Screen) Paste(w *kit.World, text string) (kit.Screen, kit.Job) {
	if s.mode != filtering {
		return s, kit.Say{Text: kit.PasteWhere}
	}
	return s.typed(w, s.field.Insert(text))
}

// sortKey obeys the letter of an order; the same one again reverses it.
func (s Screen) sortKey(w *kit.World, press string) (kit.Screen, kit.Job) {
	s.mode = browsing
	key := kit.SortKey(press)
	if key == "" {
		return s, nil
	}
	current := w.Sort.Key
	if current == "" {
		current = roster.SortKeys[0]
	}
	o := roster.Sort{Key: key}
	if key == current {
		o.Reverse = !w.Sort.Reverse
	}
	s.top = 0
	return s, kit.Find{Filter: w.Filter, Sort: o}
}

// Apply takes nothing: the list comes with the world.
func (s Screen) Apply(*kit.World, kit.Result) kit.Screen { return s }

// HalfTyped tells whether a filter is being typed that does not hold yet.
func (s Screen) HalfTyped() bool { return s.mode == filtering && s.wrong != "" }

// Rows names the rows shown.
func (s Screen) Rows(w *kit.World) []int32 {
	list := order(w)
	room := layoutOf(w).room
	top := scroll(s.top, w.Place, len(list), room)
	return list[min(top, len(list)):min(top+room, len(list))]
}

// Prompt writes the line being typed, or the letters of the orders.
func (s Screen) Prompt(w *kit.World, p *kit.Pen) bool {
	switch s.mode {
	case filtering:
		p.Put(kit.Key, "filter ")
		s.field.Show(p, true)
		if s.wrong != "" {
			p.Put(kit.Warn, "  ! "+s.wrong)
		} else {
			p.Put(kit.Dim, "  e.g. lep kind=wd alt>35 V<16 stage=TPAGB")
		}
		return true
	case sorting:
		if p.Width() < withBest {
			p.Put(kit.Key, "by ").Put(kit.Text, kit.SortLettersAlone()) // help has the words
			return true
		}
		p.Put(kit.Key, "order by  ").Put(kit.Text, kit.SortLetters(0))
		return true
	}
	return false
}
