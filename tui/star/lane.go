package star

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/targets/moment"
	"evenfall/tui/kit"
)

// lowestAirmass and highestAirmass are the ends of the lane: 1 at the top.
const (
	lowestAirmass  = 1.0
	highestAirmass = 3.0
)

// dearest is how many times the least exposure the lane reaches down to.
const dearest = 30.0

// scale is what the lane shows of a star: its exposure time, or where there is
// none that changes through the night its airmass.
type scale struct {
	least, most float64 // seconds by the clock; 0: airmass
}

// scaleOf looks for exposures.
func scaleOf(curve []moment.Point) scale {
	s := scale{math.Inf(1), 0}
	for i := range curve {
		if t := curve[i].ClockS; t > 0 {
			s.least, s.most = math.Min(s.least, t), math.Max(s.most, t)
		}
	}
	if !(s.most > s.least*1.02) {
		return scale{}
	}
	s.most = math.Min(s.most, dearest*s.least)
	return s
}

// at is where a point lies, 0 at the top to 1 at the bottom; false: it is not
// shown.
func (s scale) at(pt *moment.Point) (float64, bool) {
	if s.most > 0 {
		return math.Log(pt.ClockS/s.least) / math.Log(s.most/s.least), pt.ClockS > 0 && pt.ClockS <= s.most
	}
	return (float64(pt.Airmass) - lowestAirmass) / (highestAirmass - lowestAirmass), pt.AirOK && float64(pt.Airmass) <= highestAirmass
}

// label is what stands left of a row of the lane.
func (s scale) label(down float64, first bool) string {
	if s.most > 0 {
		return fmt.Sprintf("%5s|", brief(s.least*math.Pow(s.most/s.least, down)))
	}
	value := lowestAirmass + (highestAirmass-lowestAirmass)*down
	if first {
		return fmt.Sprintf("X %3.1f|", value)
	}
	return fmt.Sprintf("%5.1f|", value)
}

// brief writes a time in five columns: 0.25s, 45s, 3.5m, 120m.
func brief(s float64) string {
	switch {
	case s < 1:
		return fmt.Sprintf("%.2fs", s)
	case s < 10:
		return fmt.Sprintf("%.1fs", s)
	case s < 100:
		return fmt.Sprintf("%.0fs", s)
	case s < 600:
		return fmt.Sprintf("%.1fm", s/60)
	case s < 6e5:
		return fmt.Sprintf("%.0fm", s/60)
	}
	return "long"
}

// trace draws the curve of what the star costs.
func trace(c *kit.Canvas, curve []moment.Point, sc scale, span astro.Span, columns, rows int) {
	length := span.Length().Seconds()
	dot := func(pt *moment.Point) (x, y int, ok bool) {
		down, ok := sc.at(pt)
		if !ok || length <= 0 {
			return 0, 0, false
		}
		x = int(pt.At.Sub(span.From).Seconds() / length * float64(2*columns))
		y = int(down * float64(4*rows))
		return min(x, 2*columns-1), min(max(y, 0), 4*rows-1), true
	}
	px, py, was := 0, 0, false
	for i := range curve {
		x, y, ok := dot(&curve[i])
		if ok && was {
			c.Line(px, py, x, y, kit.Curve)
		}
		px, py, was = x, y, ok
	}
}
