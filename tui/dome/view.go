package dome

import (
	"strings"

	"evenfall/targets/finding"
	"evenfall/targets/moment"
	"evenfall/tui/kit"
)

// layout is how the screen is shared out.
type layout struct {
	header, below int // lines
	cols, rows    int // the sky, in cells
	compass       int // lines
	panel         int // columns of the words beside it; 0: below
}

// withPanel is the width from which on the words stand beside the sky.
const withPanel = 110

func layoutOf(width, height int) layout {
	l := layout{header: 2, below: 4, compass: 1}
	switch {
	case height < 12:
		l.header, l.below = 1, 2
	case height < 18:
		l.below = 3
	}
	if width >= withPanel {
		l.below, l.panel = 0, min(max(width*3/10, 36), 56)
	}
	l.header = min(l.header, height)
	l.below = min(l.below, height-l.header)
	l.compass = min(l.compass, height-l.header-l.below)
	l.cols = max(width-l.panel-1, 0)
	l.rows = max(height-l.header-l.below-l.compass, 0)
	return l
}

// View draws the screen.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	l := layoutOf(width, height)
	kit.Header(w, p, l.header)
	if w.Snap == nil {
		if height > l.header {
			p.Put(kit.Dim, "working out the list ...").Line()
		}
		p.Fill(height)
		return p.String()
	}
	m := w.Moment()
	var side []words
	if l.panel > 0 {
		side = s.panel(w, m, l.panel-2)
	}
	beside := func(line int) {
		if line < len(side) {
			p.To(width - l.panel + 1)
			put(p, side[line])
		}
		p.Line()
	}
	v := s.vault(w)
	v.cols, v.rows = l.cols, l.rows
	if s.pic == nil || s.pic.key.vault != v {
		for line := range l.rows {
			if line == l.rows/2 {
				p.To(2).Put(kit.Dim, "drawing the sky ...")
			}
			beside(line)
		}
	} else {
		over := s.overlay(w, m)
		for row := range l.rows {
			s.pic.raster.Row(p, row, over[row])
			beside(row)
		}
	}
	if l.compass > 0 {
		p.Put(kit.Text, compass(v, &w.Snap.Scene))
		beside(l.rows)
	}
	if l.panel == 0 {
		for _, line := range s.below(w, m, width, l.below) {
			put(p, line)
			p.Line()
		}
	}
	p.Fill(height)
	return p.String()
}

func put(p *kit.Pen, line words) {
	for _, piece := range line {
		p.Put(piece.role, piece.text)
	}
}

// compass writes the azimuths below the horizon, and the sectors of wind and
// cloud.
func compass(v vault, sc *moment.Scene) string {
	line := []byte(strings.Repeat("-", v.cols))
	z := zonesOf(sc)
	for col := range line {
		x := (float64(col)+0.5)*2/float64(v.cols) - 1
		if c, _ := z.sector(v.middle + 180*x); c != 0 {
			line[col] = c
		}
	}
	for off := -180.0; off <= 180; off += 45 {
		name := finding.Compass(v.middle + off)
		at := int((off/180+1)/2*float64(v.cols)) - len(name)/2
		at = max(min(at, v.cols-len(name)), 0)
		copy(line[min(at, len(line)):], name)
	}
	return string(line)
}

// overlay lays the selected star and the cursor over the picture, and the words
// into its corners.
func (s Screen) overlay(w *kit.World, m *moment.Moment) map[int][]kit.Over {
	v := s.pic.key.vault
	over := map[int][]kit.Over{}
	left, right := s.corner(w)
	if v.cols >= 60 && v.rows >= 9 {
		for row, text := range left {
			over[row] = append(over[row], kit.Over{Column: 0, Ink: kit.Moon, Text: text})
		}
		for row, text := range right {
			over[row] = append(over[row], kit.Over{Column: v.cols - len(text), Ink: kit.Dim, Text: text})
		}
	}
	if m != nil && w.Entry() != nil {
		if col, row, ok := v.cell(m.Place.Az.Deg(), m.Apparent.Deg()); ok {
			sign := string(kit.StageSign(m.Stage.Best))
			over[row] = append(over[row], kit.Over{Column: col - 1, Ink: kit.Selected, Text: "[" + sign + "]"})
			name := ascii(w.Entry().Target.Name)
			if w.Marks[w.Selected] {
				name = "* " + name
			}
			name += " " + kit.Sense(m.Rising)
			if c, ok := s.pic.room(col, row, len(name)); ok {
				over[row] = append(over[row], kit.Over{Column: c - 1, Text: strings.Repeat(" ", len(name)+2)}, kit.Over{Column: c, Ink: kit.Selected, Text: name})
			}
		}
	}
	if s.on {
		col, row := v.cellAt(s.x, s.y)
		over[row] = append(over[row], kit.Over{Column: col - 1, Ink: kit.Key, Text: "{"}, kit.Over{Column: col + 1, Ink: kit.Key, Text: "}"})
	}
	return over
}

// room finds a place for the name beside the star, where it hides less.
func (p *picture) room(col, row, n int) (c int, ok bool) {
	v := p.key.vault
	least := 1 << 20
	for rank, at := range []int{col + 3, col - 2 - n} {
		if at < 1 || at+n+1 > v.cols {
			continue
		}
		hides := rank
		for i := at; i < at+n; i++ {
			if p.taken[row*v.cols+i] {
				hides += 2
			}
		}
		if hides < least {
			least, c, ok = hides, at, true
		}
	}
	return c, ok
}

// ascii leaves what has one column and is safe everywhere.
func ascii(s string) string {
	out := make([]byte, 0, len(s))
	for _, r := range s {
		if r < ' ' || r > '~' {
			r = '?'
		}
		out = append(out, byte(r))
	}
	return string(out)
}

// below writes the lines under the sky: star, limits, cursor.
func (s Screen) below(w *kit.World, m *moment.Moment, width, lines int) []words {
	out := []words{s.heading(w, m)}
	if cursor := s.cursorWords(w); cursor != nil {
		out = append(out, broken(cursor, width)...)
	}
	if m != nil {
		for _, line := range limitWords(&w.Snap.Scene, m) {
			out = append(out, broken(line, width)...)
		}
	}
	return out[:min(len(out), lines)]
}

// broken breaks a line that does not fit at its blanks; later lines are
// indented.
func broken(line words, width int) []words {
	out := []words{nil}
	used := 0
	for _, p := range line {
		gap := len(p.text) - len(strings.TrimLeft(p.text, " "))
		for k, word := range strings.Fields(p.text) {
			blank := min(gap, 2)
			if k > 0 {
				blank = 1
			}
			if used > 0 && used+blank+len(word) > width {
				out, used, blank = append(out, nil), 0, 2
			}
			last := &out[len(out)-1]
			*last = append(*last, piece{p.role, strings.Repeat(" ", blank) + word})
			used += blank + len(word)
		}
	}
	return joined(out)
}

// joined puts pieces of one role together.
func joined(lines []words) []words {
	for i, line := range lines {
		var out words
		for _, p := range line {
			if n := len(out); n > 0 && out[n-1].role == p.role {
				out[n-1].text += p.text
			} else {
				out = append(out, p)
			}
		}
		lines[i] = out
	}
	return lines
}

// panel writes the lines beside the sky.
func (s Screen) panel(w *kit.World, m *moment.Moment, width int) []words {
	out := broken(s.heading(w, m), width)
	if m != nil {
		for _, line := range limitWords(&w.Snap.Scene, m) {
			out = append(out, broken(line, width)...)
		}
	}
	out = append(out, nil)
	if cursor := s.cursorWords(w); cursor != nil {
		out = append(append(out, broken(cursor, width)...), nil)
	} else {
		out = append(out, words{{kit.Dim, "arrows: a cursor over the sky"}}, nil)
	}
	for _, text := range s.legend(w) {
		out = append(out, broken(words{{kit.Dim, text}}, width)...)
	}
	return out
}
