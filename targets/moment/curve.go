package moment

import (
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/frame"
)

// Point is where a star stands at one instant of its night.
type Point struct {
	At       astro.Instant
	Altitude astro.Angle // refracted
	Airmass  astro.Airmass
	AirOK    bool
	ClockS   float64 // exposure by the clock; 0: none can be worked out
}

// curveStep is the time between the points of a curve: a star rises at most
// 1.25 degrees meanwhile, less than a dot of any drawing.
const curveStep = 5 * time.Minute

// Curve follows one star through a stretch of its night, for drawing.
//
// Notes:
//  1. Exposures are worked out where one is wanted, within the darkness that the
//     mode needs.
//
// Checked: TestCurve: the points are those of Of.
func Curve(n *Night, p *Prepared, c *Course, w Want, s astro.Span) []Point {
	var out []Point
	t := tracker{night: n, star: &p.Star}
	w = w.with(c.slit)
	dark := n.SunBelow(w.sunAt())
	for at := s.From; ; at = at.Add(curveStep) {
		if at.After(s.Until) {
			at = s.Until
		}
		f := frame.At(n.Site, at)
		place := f.Horizontal(&p.Star)
		pt := Point{At: at, Altitude: air.Refract(place.Alt, n.Site.Air)}
		if x, err := air.Mass(pt.Altitude); err == nil {
			pt.Airmass, pt.AirOK = x, true
		}
		if _, ok := within(dark, at); ok && pt.AirOK && w.Goal != nil {
			if q := t.cost(p, w, look{place, &f, nil}, at); q.err == nil {
				pt.ClockS = q.clockS
			}
		}
		out = append(out, pt)
		if !at.Before(s.Until) {
			return out
		}
	}
}
