package dome

import (
	"fmt"
	"math"
	"slices"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/targets/moment"
	"evenfall/tui/kit"
)

// board is a picture being drawn.
type board struct {
	canvas *kit.Canvas
	vault  vault
	glyphs kit.Glyphs
	drawn  []bool // cells with dots
	taken  []bool // cells with text, and those of the path
	marks  []hourMark
}

type hourMark struct {
	col, row int
	text     string
}

func newBoard(v vault, g kit.Glyphs) *board {
	n := v.cols * v.rows
	return &board{canvas: kit.NewCanvas(v.cols, v.rows), vault: v, glyphs: g, drawn: make([]bool, n), taken: make([]bool, n)}
}

func (b *board) dot(x, y int, ink kit.Role) {
	if x < 0 || y < 0 || x >= 2*b.vault.cols || y >= 4*b.vault.rows {
		return
	}
	b.canvas.Dot(x, y, ink)
	b.drawn[y/4*b.vault.cols+x/2] = true
}

// line draws a piece of the path.
func (b *board) line(x0, y0, x1, y1 int) {
	n := max(abs(x1-x0), abs(y1-y0), 1)
	for k := range n + 1 {
		b.dot(x0+(x1-x0)*k/n, y0+(y1-y0)*k/n, kit.Curve)
	}
}

// write puts text where it covers no other; it stands free on both sides.
func (b *board) write(col, row int, ink kit.Role, text string) bool {
	if row < 0 || row >= b.vault.rows || col < 0 || col+len(text) > b.vault.cols {
		return false
	}
	for c := max(col-1, 0); c < min(col+len(text)+1, b.vault.cols); c++ {
		if b.taken[row*b.vault.cols+c] {
			return false
		}
	}
	b.force(col, row, ink, text)
	return true
}

func (b *board) force(col, row int, ink kit.Role, text string) {
	b.canvas.Text(col, row, ink, text)
	for c := max(col, 0); c < min(col+len(text), b.vault.cols); c++ {
		b.taken[row*b.vault.cols+c] = true
	}
}

// curve draws the dots of a line on the sky, every so many.
func (b *board) curve(n, every int, ink kit.Role, at func(f float64) (azDeg, altDeg float64)) {
	lastX, lastY := -1, -1
	for k, drawn := 0, 0; k <= n; k++ {
		az, alt := at(float64(k) / float64(n))
		x, y, ok := plane(b.vault.middle, az, alt)
		if !ok {
			continue
		}
		dx, dy := min(int((x+1)*float64(b.vault.cols)), 2*b.vault.cols-1), min(int((1-y)*4*float64(b.vault.rows)), 4*b.vault.rows-1)
		if dx == lastX && dy == lastY {
			continue
		}
		if lastX, lastY = dx, dy; drawn%every == 0 {
			b.dot(dx, dy, ink)
		}
		drawn++
	}
}

// arch draws the edge of the sky.
func (b *board) arch() {
	for _, side := range []float64{-179.999, 180} {
		b.curve(12*b.vault.rows, 1, kit.Dim, func(f float64) (float64, float64) { return b.vault.middle + side, 90 * f })
	}
}

// limits draws where the telescope cannot point: horizon, least altitude, hour
// angle, the zone about the zenith.
func (b *board) limits(sc *moment.Scene) {
	l := &sc.Night.Limits
	n := 8 * b.vault.cols
	turn := func(f float64) float64 { return b.vault.middle - 179.99 + 359.98*f }
	if l.MinAltitude.Deg() > 0 {
		b.curve(n, 4, kit.Dim, func(f float64) (float64, float64) { return turn(f), l.MinAltitude.Deg() })
	}
	if len(l.Horizon) > 0 {
		b.curve(n, 1, kit.Warn, func(f float64) (float64, float64) {
			return turn(f), moment.HorizonAt(l.Horizon, astro.Deg(turn(f))).Deg()
		})
	}
	if top := moment.Top(l, sc.Night.Site.Lat).Deg(); top < 90 {
		b.curve(n, 2, kit.Warn, func(f float64) (float64, float64) { return turn(f), top })
	}
	for _, h := range l.HourAngleH {
		if math.Abs(h) < 12 {
			b.curve(4*n, 3, kit.Dim, func(f float64) (float64, float64) { return hourCircle(sc, h, 180*f-90) })
		}
	}
	if col, row, ok := b.vault.cell(b.vault.middle, 90); ok {
		b.force(col, row, kit.Title, "Z")
	}
}

// hourCircle returns a place on a circle of hour angle.
func hourCircle(sc *moment.Scene, hours, decDeg float64) (azDeg, altDeg float64) {
	lat, h, dec := sc.Night.Site.Lat, astro.Hours(hours), astro.Deg(decDeg)
	north := dec.Sin()*lat.Cos() - dec.Cos()*h.Cos()*lat.Sin()
	up := dec.Sin()*lat.Sin() + dec.Cos()*h.Cos()*lat.Cos()
	az, alt := astro.Vec{X: north, Y: -dec.Cos() * h.Sin(), Z: up}.LonLat()
	return az.Deg(), alt.Deg()
}

// bodies draws Moon and Sun.
func (b *board) bodies(sc *moment.Scene) {
	for _, o := range []struct {
		az, alt astro.Angle
		text    string
	}{{sc.Moon.Place.Az, sc.Moon.Place.Alt, "(M)"}, {sc.Sun.Place.Az, sc.Sun.Place.Alt, "(S)"}} {
		if col, row, ok := b.vault.cell(o.az.Deg(), air.Refract(o.alt, sc.Night.Site.Air).Deg()); ok {
			b.force(max(min(col-1, b.vault.cols-3), 0), row, kit.Moon, o.text)
		}
	}
}

// stars draws the letters, each with its sense of motion where there is room.
func (b *board) stars(spots []spot) {
	type cell struct {
		n      int
		sign   byte
		rising int
		marked bool
	}
	cells := map[int]*cell{}
	var order []int
	for i := range spots {
		s := &spots[i]
		col, row, ok := b.vault.cell(s.place.Az.Deg(), s.altDeg)
		if !ok {
			continue
		}
		at := row*b.vault.cols + col
		c := cells[at]
		if c == nil {
			c = &cell{sign: s.sign}
			cells[at] = c
			order = append(order, at)
		}
		c.n++
		c.marked = c.marked || s.marked
		if s.rising {
			c.rising++
		}
	}
	slices.Sort(order)
	for _, at := range order {
		c := cells[at]
		letter, ink := c.sign, kit.Text
		if c.n > 1 {
			letter = kit.Several(letter)
		}
		if c.marked {
			letter, ink = '*', kit.Mark
		}
		if !b.taken[at] {
			b.force(at%b.vault.cols, at/b.vault.cols, ink, string(letter))
		}
	}
	for _, at := range order {
		c := cells[at]
		if col := at%b.vault.cols + 1; col < b.vault.cols && !b.taken[at+1] && (2*c.rising >= c.n || c.rising == 0) {
			b.force(col, at/b.vault.cols, kit.Text, kit.Sense(c.rising > 0))
		}
	}
}

// hourMarks writes the hours along the path.
func (b *board) hourMarks() {
	for _, m := range b.marks {
		for _, at := range [][2]int{{0, 0}, {1, 0}, {0, -1}, {0, 1}, {-2, 0}} {
			if b.write(m.col+at[0], m.row+at[1], kit.Curve, m.text) {
				break
			}
		}
	}
}

// scale writes altitudes outside the left edge and airmasses outside the right
// one.
func (b *board) scale() {
	last := b.vault.rows
	for _, alt := range []float64{10, 20, 30, 45, 60, 75} {
		_, y, _ := plane(0, 0, alt)
		_, row := b.vault.cellAt(0, y)
		from, to := b.vault.edge(row)
		if row >= last {
			continue
		}
		text := fmt.Sprintf("%.0f", alt)
		mass := ""
		if x, err := air.Mass(astro.Deg(alt)); err == nil {
			mass = fmt.Sprintf("X %.1f", float64(x))
		}
		if from-len(text)-2 >= 0 && to+len(mass)+3 <= b.vault.cols && b.write(from-len(text)-2, row, kit.Dim, text) {
			b.write(to+3, row, kit.Dim, mass)
			last = row
		}
	}
}

// numbers writes how bright the sky is on a coarse grid, V mag per square
// arcsec.
func (b *board) numbers(values []float64) {
	v := b.vault
	alts := []float64{12, 40, 68}
	if v.rows < 9 {
		alts = []float64{25}
	}
	for k, alt := range alts {
		step := 45.0
		if k == len(alts)-1 && k > 0 {
			step = 90
		}
		if v.cols < 60 {
			step *= 2
		}
		for off := -135.0; off <= 180; off += step {
			col, row, ok := v.cell(v.middle+off, alt)
			if !ok || math.Abs(off) == 180 {
				continue
			}
			for _, by := range [][2]int{{-2, 0}, {-5, 0}, {1, 0}, {-2, 1}, {-2, -1}} {
				c, r := col+by[0], row+by[1]
				if r < 0 || r >= v.rows || c < 0 || c+4 > v.cols {
					continue
				}
				value := values[r*v.cols+min(c+2, v.cols-1)]
				from, to := v.edge(r)
				if !math.IsNaN(value) && c > from && c+4 < to && b.write(c, r, kit.Dim, fmt.Sprintf("%.1f", value)) {
					break
				}
			}
		}
	}
}
