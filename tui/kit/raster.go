package kit

// Raster is a drawing made ready for a look: its rows stand as they go to the
// terminal, so that drawing them again costs a copy. It does not change.
type Raster struct {
	canvas *Canvas
	look   *Look
	rows   []string
	used   []int // columns of each row
}

// Over is text laid over a row of a raster.
type Over struct {
	Column int
	Ink    Role
	Text   string
}

// Raster makes a drawing ready; the canvas is not to be drawn on afterwards.
func (c *Canvas) Raster(l *Look) *Raster {
	r := &Raster{canvas: c, look: l, rows: make([]string, c.h), used: make([]int, c.h)}
	for row := range c.h {
		p := NewPen(l, c.w)
		p.cells(c.cells[row*c.w : (row+1)*c.w])
		p.turn("")
		r.rows[row], r.used[row] = p.b.String(), p.used
	}
	return r
}

// Size returns the size in cells.
func (r *Raster) Size() (w, h int) { return r.canvas.w, r.canvas.h }

// Row draws one row, with text over it; blanks at its end are left out. Any
// look may draw it, the one it was made for fastest.
func (r *Raster) Row(p *Pen, row int, over []Over) {
	c := r.canvas
	if row < 0 || row >= c.h {
		return
	}
	if len(over) == 0 && p.look == r.look && p.used+r.used[row] <= p.width {
		p.turn("")
		p.b.WriteString(r.rows[row])
		p.used += r.used[row]
		return
	}
	line := &Canvas{w: c.w, h: 1, cells: append([]canvasCell(nil), c.cells[row*c.w:(row+1)*c.w]...)}
	for _, o := range over {
		line.Text(o.Column, 0, o.Ink, o.Text)
	}
	p.cells(line.cells)
}

// cells writes cells up to the last that shows something.
func (p *Pen) cells(list []canvasCell) {
	n := len(list)
	for n > 0 && list[n-1].blank() {
		n--
	}
	for i := range list[:n] {
		if p.used >= p.width {
			return
		}
		cell := &list[i]
		if cell.blank() {
			if p.on != "" && p.on == p.look.start[Selected] && (cell.char == 0 || cell.ink != Selected) {
				p.turn("") // no underlined blanks but within a name
			}
			p.b.WriteByte(' ')
			p.used++
			continue
		}
		p.turn(p.look.start[cell.ink])
		switch {
		case cell.char != 0:
			p.b.WriteRune(cell.char)
		case p.look.Glyphs == Braille:
			p.b.WriteRune(rune(0x2800) + rune(cell.dots))
		case p.look.Glyphs == Unicode:
			p.b.WriteString(blockDots(cell.dots))
		default:
			p.b.WriteString(asciiDots(cell.dots))
		}
		p.used++
	}
}

func (c *canvasCell) blank() bool { return c.char == ' ' || c.char == 0 && c.dots == 0 }
