package kit

// Canvas is a small drawing: dots of 2 by 4 a cell, and text over them.
// Coordinates count from the top left, dots and cells from 0. What lies
// outside is dropped.
type Canvas struct {
	w, h  int
	cells []canvasCell
}

type canvasCell struct {
	dots uint8
	ink  Role
	char rune // 0: the dots
}

// NewCanvas makes an empty drawing of w by h cells.
func NewCanvas(w, h int) *Canvas {
	return &Canvas{w: max(w, 0), h: max(h, 0), cells: make([]canvasCell, max(w, 0)*max(h, 0))}
}

// Dots returns the size in dots.
func (c *Canvas) Dots() (w, h int) { return 2 * c.w, 4 * c.h }

// dotBit is the bit of a dot in a braille character, by row and column.
var dotBit = [4][2]uint8{{0x01, 0x08}, {0x02, 0x10}, {0x04, 0x20}, {0x40, 0x80}}

// Dot sets a dot.
func (c *Canvas) Dot(x, y int, ink Role) {
	if x < 0 || y < 0 || x >= 2*c.w || y >= 4*c.h {
		return
	}
	cell := &c.cells[y/4*c.w+x/2]
	cell.dots |= dotBit[y%4][x%2]
	cell.ink = ink
}

// Line sets the dots between two points.
//
// Source: the integer method of Bresenham 1965, IBM Systems Journal 4, 25.
func (c *Canvas) Line(x0, y0, x1, y1 int, ink Role) {
	dx, dy := abs(x1-x0), -abs(y1-y0)
	sx, sy := 1, 1
	if x1 < x0 {
		sx = -1
	}
	if y1 < y0 {
		sy = -1
	}
	for e := dx + dy; ; {
		c.Dot(x0, y0, ink)
		if x0 == x1 && y0 == y1 {
			return
		}
		twice := 2 * e
		if twice >= dy {
			e, x0 = e+dy, x0+sx
		}
		if twice <= dx {
			e, y0 = e+dx, y0+sy
		}
	}
}

func abs(n int) int {
	if n < 0 {
		return -n
	}
	return n
}

// Text writes characters over the dots, from a cell on.
func (c *Canvas) Text(column, row int, ink Role, s string) {
	if row < 0 || row >= c.h {
		return
	}
	for _, r := range s {
		if column >= 0 && column < c.w {
			c.cells[row*c.w+column] = canvasCell{char: r, ink: ink}
		}
		column++
	}
}

// asciiDots stands for dots by which rows of a cell have one: upper, middle,
// lower, two or more of them.
func asciiDots(d uint8) string {
	upper, lower := d&0x1b != 0, d&0xe4 != 0
	switch {
	case upper && lower:
		return ":"
	case upper:
		return "'"
	case lower:
		return "."
	}
	return " "
}

func blockDots(d uint8) string {
	upper, lower := d&0x1b != 0, d&0xe4 != 0
	switch {
	case upper && lower:
		return "\u2588"
	case upper:
		return "\u2580"
	case lower:
		return "\u2584"
	}
	return " "
}

// Row draws one row of cells.
func (c *Canvas) Row(p *Pen, row int) {
	for column := range c.w {
		cell := &c.cells[row*c.w+column]
		switch {
		case cell.char != 0:
			p.Put(cell.ink, string(cell.char))
		case cell.dots == 0:
			p.To(p.used + 1)
		case p.look.Glyphs == Braille:
			p.Put(cell.ink, string(rune(0x2800)+rune(cell.dots)))
		case p.look.Glyphs == Unicode:
			p.Put(cell.ink, blockDots(cell.dots))
		default:
			p.Put(cell.ink, asciiDots(cell.dots))
		}
	}
}
