package dome

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/targets/moment"
)

// vault is how the sky above the horizon lies on the plane: an arch with the
// horizon as its base and the zenith as its top, each cell the same piece of
// sky. Altitudes are straight lines; the azimuth opposite the middle is at
// both ends.
//
//	x = (A - middle)/180 cos t,  y = sin t,  2 t + sin 2t = pi sin a
//
// Source: the equal-area projection of Mollweide 1805, its upper half.
type vault struct {
	middle     float64 // azimuth, degrees
	cols, rows int
}

// plane returns where a place is: x from -1 at the left to 1, y from 0 at the
// horizon to 1; false: below it.
func plane(middle, azDeg, altDeg float64) (x, y float64, ok bool) {
	if !(altDeg >= 0) || math.IsNaN(azDeg) {
		return 0, 0, false
	}
	want := math.Pi * math.Sin(math.Min(altDeg, 90)*math.Pi/180)
	lo, hi := 0.0, math.Pi/2
	for range 30 {
		if t := (lo + hi) / 2; 2*t+math.Sin(2*t) < want {
			lo = t
		} else {
			hi = t
		}
	}
	return astro.Deg(azDeg-middle).Signed().Deg() / 180 * math.Cos(lo), math.Sin(lo), true
}

// sky returns what is at a place of the plane; false: nothing.
func sky(middle, x, y float64) (azDeg, altDeg float64, ok bool) {
	if !(y >= 0 && y <= 1) {
		return 0, 0, false
	}
	t := math.Asin(y)
	half := math.Cos(t)
	if !(math.Abs(x) <= half) {
		return 0, 0, false
	}
	altDeg = math.Asin(math.Min((2*t+math.Sin(2*t))/math.Pi, 1)) * 180 / math.Pi
	if half > 0 {
		azDeg = 180 * x / half
	}
	return astro.Deg(azDeg + middle).Turn().Deg(), altDeg, true
}

// cell returns the cell of a place in the sky.
func (v vault) cell(azDeg, altDeg float64) (col, row int, ok bool) {
	x, y, ok := plane(v.middle, azDeg, altDeg)
	col, row = v.cellAt(x, y)
	return col, row, ok
}

func (v vault) cellAt(x, y float64) (col, row int) {
	col = int((x + 1) / 2 * float64(v.cols))
	row = int((1 - y) * float64(v.rows))
	return max(min(col, v.cols-1), 0), max(min(row, v.rows-1), 0)
}

// centre returns the place of a cell on the plane.
func (v vault) centre(col, row int) (x, y float64) {
	return (float64(col)+0.5)*2/float64(v.cols) - 1, 1 - (float64(row)+0.5)/float64(v.rows)
}

// at returns what a cell shows.
func (v vault) at(col, row int) (azDeg, altDeg float64, ok bool) {
	x, y := v.centre(col, row)
	return sky(v.middle, x, y)
}

// edge returns the first and the last column of the sky on a row.
func (v vault) edge(row int) (from, to int) {
	_, y := v.centre(0, row)
	half := math.Sqrt(math.Max(1-y*y, 0))
	from, _ = v.cellAt(-half, y)
	to, _ = v.cellAt(half, y)
	return from, to
}

// towards returns the direction of a place in the sky; altitude without
// refraction.
func towards(f *frame.Frame, azDeg, altDeg float64) frame.Place {
	az, alt := astro.Deg(azDeg), astro.Deg(altDeg)
	dir := f.North.Times(alt.Cos() * az.Cos()).Plus(f.East.Times(alt.Cos() * az.Sin())).Plus(f.Up.Times(alt.Sin()))
	return f.Look(dir)
}

// middleOf is the azimuth that is in the middle at first: where stars culminate.
func middleOf(s *moment.Scene) float64 {
	if s.Night.Site.Lat.Deg() < 0 {
		return 0
	}
	return 180
}
