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
}

// curveStep is the time between the points of a curve: a star rises at most
// 1.25 degrees meanwhile, less than a dot of any drawing.
const curveStep = 5 * time.Minute

// Curve follows one star through a stretch of its night, for drawing.
//
// Checked: TestCurve: the points are those of Of.
func Curve(n *Night, p *Prepared, s astro.Span) []Point {
	var out []Point
	for at := s.From; ; at = at.Add(curveStep) {
		if at.After(s.Until) {
			at = s.Until
		}
		f := frame.At(n.Site, at)
		pt := Point{At: at, Altitude: air.Refract(f.Horizontal(&p.Star).Alt, n.Site.Air)}
		if x, err := air.Mass(pt.Altitude); err == nil {
			pt.Airmass, pt.AirOK = x, true
		}
		out = append(out, pt)
		if !at.Before(s.Until) {
			return out
		}
	}
}
