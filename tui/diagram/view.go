package diagram

import (
	"math"
	"strconv"
	"strings"

	"evenfall/tui/kit"
)

// layout is how the screen is shared out.
type layout struct {
	header, below int // lines
	labels        int // columns left of the plot, the axis included
	cols, rows    int // the plot, in cells
	axis          int // lines below the plot: the axis and its labels
	panel         int // columns of the words beside it; 0: below
}

// withPanel is the width from which on the words stand beside the plot.
const withPanel = 110

func layoutOf(width, height int) layout {
	l := layout{header: 2, below: 2, labels: 8, axis: 2}
	switch {
	case height < 12:
		l.header, l.below, l.axis = 1, 1, 1
	case height < 18:
		l.axis = 1
	}
	if width < 60 {
		l.labels = 7
	}
	if width >= withPanel {
		l.below, l.panel = 0, min(max(width*3/10, 36), 56)
	}
	l.header = min(l.header, height)
	l.below = min(l.below, height-l.header)
	l.axis = min(l.axis, height-l.header-l.below)
	l.cols = max(width-l.labels-1-l.panel, 0)
	l.rows = max(height-l.header-l.below-l.axis, 0)
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
	sel := s.selected(w)
	var side []words
	if l.panel > 0 {
		side = s.panel(w, sel, l.panel-2)
	}
	beside := func(line int) {
		if line < len(side) {
			p.To(width - l.panel + 1)
			for _, piece := range side[line] {
				p.Put(piece.role, piece.text)
			}
		}
		p.Line()
	}
	if s.pic == nil || s.pic.key.cols != l.cols || s.pic.key.rows != l.rows {
		for line := range l.rows + l.axis {
			if line == l.rows/2 {
				p.To(l.labels+2).Put(kit.Dim, "drawing ...")
			}
			beside(line)
		}
	} else {
		s.plot(p, l, overlay(s.pic, sel, s.name(w, sel)), beside)
	}
	for _, line := range s.below(w, sel, width, l.below) {
		for _, piece := range line {
			p.Put(piece.role, piece.text)
		}
		p.Line()
	}
	p.Fill(height)
	return p.String()
}

// plot draws the rows of the picture with the selected star over them, and the
// axes.
func (s Screen) plot(p *kit.Pen, l layout, over map[int][]kit.Over, beside func(int)) {
	pic := s.pic
	labels := make([]string, l.rows)
	for _, t := range pic.y {
		if row := cellOf(t.at, pic.key.win.top, pic.key.win.bottom, l.rows); row >= 0 {
			labels[row] = t.label
		}
	}
	for row := range l.rows {
		if labels[row] != "" {
			p.Right(kit.Text, l.labels-1, labels[row]).Put(kit.Text, "+")
		} else {
			p.To(l.labels-1).Put(kit.Text, "|")
		}
		pic.raster.Row(p, row, over[row])
		beside(row)
	}
	rule := make([]byte, l.cols)
	for i := range rule {
		rule[i] = '-'
	}
	used := -1
	numbers := make([]byte, 0, l.cols)
	for _, t := range pic.x {
		col := cellOf(t.at, pic.key.win.left, pic.key.win.right, l.cols)
		if col < 0 {
			continue
		}
		rule[col] = '+'
		if from := col - (len(t.label)-1)/2; from > used && from+len(t.label) <= l.cols {
			for len(numbers) < from {
				numbers = append(numbers, ' ')
			}
			numbers, used = append(numbers, t.label...), from+len(t.label)
		}
	}
	if l.axis > 1 {
		p.To(l.labels-1).Put(kit.Text, "+"+string(rule))
		beside(l.rows)
	}
	if l.axis > 0 {
		p.To(l.labels).Put(kit.Text, string(numbers))
		beside(l.rows + l.axis - 1)
	}
}

// cellOf returns the cell of a value along an axis; -1: outside.
func cellOf(v, from, to float64, cells int) int {
	f := (v - from) / (to - from)
	if !(f >= 0 && f <= 1) {
		return -1
	}
	return min(int(f*float64(cells)), cells-1)
}

// name is what stands beside the selected star: its name, and how many more
// there are in its cell.
func (s Screen) name(w *kit.World, sel *spot) string {
	if sel == nil || w.Entry() == nil {
		return ""
	}
	text := ascii(w.Entry().Target.Name)
	if w.Marks[w.Selected] {
		text = "* " + text
	}
	if n := s.company(sel); n > 0 {
		text += " +" + strconv.Itoa(n)
	}
	return text
}

// ascii leaves what has one column and is safe everywhere; cells of the
// drawing hold no more.
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

// overlay lays the selected star over the picture: error bars, its letter in
// brackets, its name where it hides least.
func overlay(pic *picture, sel *spot, name string) map[int][]kit.Over {
	if sel == nil {
		return nil
	}
	a, win := &pairs[pic.key.axes], pic.key.win
	cols, rows := pic.key.cols, pic.key.rows
	x, y, ok := a.place(&sel.v.Place)
	if !ok {
		return nil
	}
	col, row, in := win.cell(x.Mid, y.Mid, cols, rows)
	if !in {
		return nil
	}
	over := map[int][]kit.Over{}
	if x.Valid() {
		from, to, left, right := extent(x.Lo, x.Hi, win.left, win.right, cols)
		for c := from; c <= to; c++ {
			text := "-"
			if c == from && left || c == to && right {
				text = "|"
			}
			if c < col-1 || c > col+1 {
				over[row] = append(over[row], kit.Over{Column: c, Ink: kit.Selected, Text: text})
			}
		}
	}
	if y.Valid() {
		from, to, up, down := extent(y.Lo, y.Hi, win.top, win.bottom, rows)
		for r := from; r <= to; r++ {
			text := "|"
			if r == from && up || r == to && down {
				text = "-"
			}
			if r != row {
				over[r] = append(over[r], kit.Over{Column: col, Ink: kit.Selected, Text: text})
			}
		}
	}
	over[row] = append(over[row], kit.Over{Column: col - 1, Ink: kit.Selected, Text: "[" + string(sel.sign) + "]"})
	if r, c, fits := pic.room(over, col, row, len(name)); fits {
		blank := strings.Repeat(" ", len(name)+2) // so that nothing runs into it
		over[r] = append(over[r], kit.Over{Column: c - 1, Text: blank}, kit.Over{Column: c, Ink: kit.Selected, Text: name})
	}
	return over
}

// extent returns the cells of which an error bar reaches the middle, and
// whether its ends are within the window.
func extent(lo, hi, from, to float64, cells int) (a, b int, endA, endB bool) {
	fa, fb := (lo-from)/(to-from), (hi-from)/(to-from)
	if fa > fb {
		fa, fb = fb, fa
	}
	endA, endB = fa >= 0, fb < 1
	limit := func(cell float64) int { return int(math.Max(0, math.Min(cell, float64(cells-1)))) }
	return limit(math.Ceil(fa*float64(cells) - 0.5)), limit(math.Floor(fb*float64(cells) - 0.5)), endA, endB
}

// offRow is what it costs a name to stand on another row than its star, where
// a hidden cell costs 10: another row is another line to send.
const offRow = 25

// room finds a place for the name: beside the star, beyond its error bars,
// above or below, where it hides the fewest letters and pieces of the track.
func (pic *picture) room(over map[int][]kit.Over, col, row, n int) (r, c int, ok bool) {
	left, right := col-1, col+1
	for _, o := range over[row] {
		left, right = min(left, o.Column), max(right, o.Column+len(o.Text)-1)
	}
	if n == 0 {
		return 0, 0, false
	}
	least := math.MaxInt
	places := [][2]int{{row, right + 2}, {row, left - 1 - n}}
	for by := 1; by <= 3; by++ {
		places = append(places, [2]int{row - by, col + 2}, [2]int{row + by, col + 2}, [2]int{row - by, col - 1 - n}, [2]int{row + by, col - 1 - n})
	}
	for rank, at := range places {
		if at[1] < 0 || at[1]+n > pic.key.cols || at[0] < 0 || at[0] >= pic.key.rows {
			continue
		}
		hides := 0
		for i := max(at[1]-1, 0); i < min(at[1]+n+1, pic.key.cols); i++ {
			if pic.taken[at[0]*pic.key.cols+i] {
				hides++
			}
		}
		for _, o := range over[at[0]] {
			if at[0] != row && o.Column+len(o.Text) > at[1]-1 && o.Column <= at[1]+n {
				hides += 20
			}
		}
		if at[0] != row {
			rank += offRow
		}
		if cost := 10*hides + rank; cost < least {
			least, r, c, ok = cost, at[0], at[1], true
		}
	}
	return r, c, ok
}
