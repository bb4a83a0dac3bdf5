package finder

import (
	"fmt"

	"evenfall/tui/kit"
)

// layout is how the screen is shared out.
type layout struct {
	header, title int // lines
	cols, rows    int // the picture, in cells
	below         int // lines of words; 0: they stand beside
	panel         int // columns of them
}

// leastBeside is the width from which on the words stand beside the picture.
const leastBeside = 70

func layoutOf(width, height int) layout {
	l := layout{header: 2, title: 1}
	if height < 12 {
		l.header = 1
	}
	l.header = min(l.header, height)
	l.title = min(l.title, height-l.header)
	l.rows = height - l.header - l.title
	l.cols = width
	if width >= leastBeside {
		// cells are twice as high as wide: a square has two columns a row
		l.cols = max(min(2*l.rows+2, width-34), 0)
		l.panel = width - l.cols - 2
		return l
	}
	l.below = min(3, l.rows/2)
	l.rows -= l.below
	return l
}

// View draws the screen.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	l := layoutOf(width, height)
	kit.Header(w, p, l.header)
	if l.title > 0 {
		s.title(w, p)
		p.Line()
	}
	if s.pic == nil || w.Entry() == nil || s.pic.key.row != w.Selected || s.pic.key.cols != l.cols || s.pic.key.rows != l.rows {
		p.Fill(height)
		return p.String()
	}
	var side []note
	for _, n := range s.pic.notes {
		for _, t := range kit.Break(n.text, max(l.panel, width*min(l.below, 1)), 2) {
			side = append(side, note{n.role, t, 0})
		}
	}
	for row := range l.rows {
		s.pic.raster.Row(p, row, nil)
		if l.panel > 0 && row < len(side) {
			p.To(l.cols+2).Put(side[row].role, side[row].text)
		}
		p.Line()
	}
	for k := range min(l.below, len(side)) {
		p.Put(side[k].role, side[k].text).Line()
	}
	p.Fill(height)
	return p.String()
}

// title names the star and its place.
func (s Screen) title(w *kit.World, p *kit.Pen) {
	e := w.Entry()
	if e == nil {
		p.Put(kit.Dim, "no star is selected")
		return
	}
	name := e.Target.Name
	if w.Marks[w.Selected] {
		name = "* " + name
	}
	p.Put(kit.Selected, name)
	if m := w.Moment(); m != nil {
		p.Put(kit.Text, "  "+m.RA.HMS(2)+"  "+m.Dec.DMS(1)+"  ICRS tonight")
		if mag, ok := brightness(&e.Target); ok {
			p.Put(kit.Dim, fmt.Sprintf("  %.1f mag", mag))
		}
	}
}
