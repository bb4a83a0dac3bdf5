package diagram

import (
	"math"

	"evenfall/targets/stage"
	"evenfall/tui/kit"
)

// board is a picture being drawn: dots for lines, letters for stars, and text
// that finds itself a place where it covers nothing.
type board struct {
	canvas     *kit.Canvas
	axes       *axes
	win        window
	cols, rows int
	taken      []bool // cells with a letter or a piece of the track
	glyphs     kit.Glyphs
}

func newBoard(a *axes, win window, cols, rows int, g kit.Glyphs) *board {
	return &board{canvas: kit.NewCanvas(cols, rows), axes: a, win: win, cols: cols, rows: rows, taken: make([]bool, cols*rows), glyphs: g}
}

// cell returns the cell of a point; false: outside.
func (w window) cell(x, y float64, cols, rows int) (col, row int, ok bool) {
	fx, fy := w.frac(x, y)
	if !(fx >= 0 && fx < 1 && fy >= 0 && fy < 1) {
		return 0, 0, false
	}
	return int(fx * float64(cols)), int(fy * float64(rows)), true
}

func (b *board) free(col, row int) bool {
	return col >= 0 && row >= 0 && col < b.cols && row < b.rows && !b.taken[row*b.cols+col]
}

// write puts text where it covers no letter and no track and stands free of
// dots on both sides.
func (b *board) write(col, row int, ink kit.Role, text string) bool {
	if col < 0 || col+len(text) > b.cols {
		return false
	}
	for c := max(col-1, 0); c <= min(col+len(text), b.cols-1); c++ {
		if !b.free(c, row) {
			return false
		}
	}
	b.canvas.Text(col-1, row, ink, " "+text+" ")
	for c := col; c < col+len(text); c++ {
		b.taken[row*b.cols+c] = true
	}
	return true
}

// beside puts text next to a cell, on the first side that has room.
func (b *board) beside(col, row int, ink kit.Role, text string) bool {
	n := len(text)
	for _, at := range [][2]int{{col + 2, row}, {col - 1 - n, row}, {col + 1, row - 1}, {col + 1, row + 1}, {col - n, row - 1}, {col - n, row + 1}, {col - n/2, row - 1}, {col - n/2, row + 1}} {
		if b.write(at[0], at[1], ink, text) {
			return true
		}
	}
	return false
}

// walk visits the dots between the points of a line, those within the window
// alone; broken tells where the line begins anew.
func (b *board) walk(points []stage.Point, visit func(x, y, point int, broken bool)) {
	w, h := float64(2*b.cols), float64(4*b.rows)
	lastX, lastY := math.NaN(), 0.0
	penX, penY, down := 0, 0, false
	for i := range points {
		fx, fy := b.win.frac(b.axes.point(&points[i]))
		x, y := fx*w, fy*h
		if math.IsNaN(x) || math.IsNaN(y) || math.Abs(x) > 1e6 || math.Abs(y) > 1e6 {
			lastX, down = math.NaN(), false
			continue
		}
		if x0, y0, x1, y1, ok := clip(lastX, lastY, x, y, w, h); ok {
			n := int(math.Max(math.Abs(x1-x0), math.Abs(y1-y0))) + 2 // none is jumped over by rounding
			for k := 0; k <= n; k++ {
				f := float64(k) / float64(n)
				dx, dy := min(int(x0+f*(x1-x0)), 2*b.cols-1), min(int(y0+f*(y1-y0)), 4*b.rows-1)
				if !down || dx != penX || dy != penY {
					visit(dx, dy, i, !down)
				}
				penX, penY, down = dx, dy, true
			}
			down = x1 == x && y1 == y
		} else {
			down = false
		}
		lastX, lastY = x, y
	}
}

// clip cuts a line at the edges of the drawing.
//
// Source: the parametric method of Liang & Barsky 1984, ACM Transactions on
// Graphics 3, 1.
func clip(x0, y0, x1, y1, w, h float64) (ax, ay, bx, by float64, ok bool) {
	if math.IsNaN(x0) {
		return 0, 0, 0, 0, false
	}
	from, to := 0.0, 1.0
	dx, dy := x1-x0, y1-y0
	for _, e := range [4][2]float64{{-dx, x0}, {dx, w - x0}, {-dy, y0}, {dy, h - y0}} {
		p, q := e[0], e[1]
		switch {
		case p == 0 && q < 0:
			return 0, 0, 0, 0, false
		case p < 0:
			from = math.Max(from, q/p)
		case p > 0:
			to = math.Min(to, q/p)
		}
	}
	if from > to {
		return 0, 0, 0, 0, false
	}
	bx, by = x0+to*dx, y0+to*dy
	if to == 1 {
		bx, by = x1, y1
	}
	return math.Max(x0+from*dx, 0), math.Max(y0+from*dy, 0), math.Max(bx, 0), math.Max(by, 0), true
}

// line draws a line of the background with every so many dots.
func (b *board) line(points []stage.Point, every int, ink kit.Role) {
	n := 0
	b.walk(points, func(x, y, _ int, _ bool) {
		if n%every == 0 {
			b.canvas.Dot(x, y, ink)
		}
		n++
	})
}

// step is a cell that the track goes through.
type step struct {
	col, row int
	x, y     int  // where it enters, in dots
	last     bool // before a gap
	point    int  // of the line, to which it leads
}

// thinned leaves out the cells that a track merely cuts the corner of.
func thinned(steps []step) []step {
	out := steps[:0]
	for _, s := range steps {
		if n := len(out); n >= 2 && !out[n-1].last && !out[n-2].last {
			dc, dr := s.col-out[n-2].col, s.row-out[n-2].row
			if dc*dc == 1 && dr*dr == 1 {
				out = out[:n-1]
			}
		}
		out = append(out, s)
	}
	return out
}

// trail draws the track of the selected star: a double line of dots, or signs
// that follow its slope where there are no fine dots, so that it stands out
// among the other lines without colour. It returns the cells in order.
func (b *board) trail(points []stage.Point) []step {
	var steps []step
	b.walk(points, func(x, y, point int, broken bool) {
		if b.glyphs == kit.Braille {
			b.canvas.Dot(x, y, kit.Curve)
			b.canvas.Dot(x+1-2*(x%2), y, kit.Curve)
		}
		n := len(steps)
		if n > 0 && broken {
			steps[n-1].last = true
		}
		if n == 0 || broken || steps[n-1].col != x/2 || steps[n-1].row != y/4 {
			steps = append(steps, step{col: x / 2, row: y / 4, x: x, y: y, point: point})
		}
	})
	if b.glyphs != kit.Braille {
		steps = thinned(steps)
	}
	for i := range steps {
		b.taken[steps[i].row*b.cols+steps[i].col] = true
		if b.glyphs != kit.Braille {
			b.canvas.Text(steps[i].col, steps[i].row, kit.Curve, slope(steps, i))
		}
	}
	return steps
}

// slope is the sign for the direction in which a track crosses a cell.
func slope(steps []step, i int) string {
	from, to := i, i+1
	if to >= len(steps) || steps[i].last {
		from, to = max(i-1, 0), i
	}
	dx, dy := steps[to].x-steps[from].x, steps[to].y-steps[from].y
	ax, ay := math.Abs(float64(dx)), math.Abs(float64(dy))
	switch {
	case ay <= 0.5*ax || dx == 0 && dy == 0:
		return "-"
	case ax <= 0.4*ay:
		return "|"
	case (dx > 0) == (dy > 0):
		return "\\"
	}
	return "/"
}
