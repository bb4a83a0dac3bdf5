// Package sweep gives a few figures about every target of a list at one
// instant, fast enough for hundreds of thousands: sine of altitude, airmass,
// cosine of the distance from the Moon. It keeps plain arrays of unit vectors
// made once a night. What it leaves out (refraction, everything that is shown)
// is the work of package moment, which is asked for the rows on the screen.
package sweep

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/frame"
)

// Sky is a list of targets as observed directions at the middle of a night,
// along the axes of the ICRS: structure of arrays.
type Sky struct {
	x, y, z []float64
	middle  astro.Vec // velocity of the site at the night's middle, units of c
}

// New makes the arrays.
//
// Given:
//   - f: the frame of the site at the night's middle.
//   - stars: the places of all targets; a target without a position has a
//     star that the caller leaves out of its ranking.
//
// Notes:
//  1. Space motion, parallax and deflection are those of the night's middle;
//     over half a day they change by less than 0.02 arcsec for any star known.
func New(f *frame.Frame, stars []frame.Star) *Sky {
	s := &Sky{
		x: make([]float64, len(stars)), y: make([]float64, len(stars)), z: make([]float64, len(stars)),
		middle: f.Velocity(),
	}
	for i := range stars {
		d := f.Observed(&stars[i])
		s.x[i], s.y[i], s.z[i] = d.X, d.Y, d.Z
	}
	return s
}

// Len returns the number of targets.
func (s *Sky) Len() int { return len(s.x) }

// Direction returns the observed direction of a target at the night's middle.
func (s *Sky) Direction(i int) astro.Vec { return astro.Vec{X: s.x[i], Y: s.y[i], Z: s.z[i]} }

// Columns is what one pass gives, a number for each target of the list.
type Columns struct {
	SinAlt  []float64 // sine of the airless altitude
	Airmass []float32 // Young 1994 on the airless altitude; meaningless below the horizon
	CosMoon []float32 // cosine of the distance from the Moon
}

// NewColumns makes room for n targets, to be filled again and again.
func NewColumns(n int) *Columns {
	return &Columns{make([]float64, n), make([]float32, n), make([]float32, n)}
}

// At fills the columns for one instant.
//
//	sin alt = u . up + (dv . up) - (u . dv)(u . up)     dv: change of velocity since the middle
//
// Given:
//   - f: the frame of the instant, same site.
//   - moon: observed direction of the Moon, along the axes of the ICRS.
//   - c: room for as many targets as the sky holds; another length panics.
//
// Notes:
//  1. Altitudes agree with frame.Horizontal within 0.02 arcsec over the night.
//     The distance from the Moon leaves the change of velocity out: 0.5 arcsec.
//  2. Branch-free; every target costs the same, above or below the horizon.
//
// Source: [cite.Young1994] for the airmass.
//
// Checked: TestSweepAgreesWithFrame; BenchmarkSweep against BenchmarkPlain.
func (s *Sky) At(f *frame.Frame, moon astro.Vec, c *Columns) {
	n := len(s.x)
	if len(c.SinAlt) != n || len(c.Airmass) != n || len(c.CosMoon) != n {
		panic("sweep: columns of another length than the sky")
	}
	x, y, z := s.x[:n], s.y[:n], s.z[:n]
	sin, air, cos := c.SinAlt[:n], c.Airmass[:n], c.CosMoon[:n]
	ux, uy, uz := f.Up.X, f.Up.Y, f.Up.Z
	mx, my, mz := moon.X, moon.Y, moon.Z
	dv := f.Velocity().Minus(s.middle)
	dx, dy, dz := dv.X, dv.Y, dv.Z
	shift := f.Up.Dot(dv)
	for i := range n {
		a, b, c := x[i], y[i], z[i]
		sa := ux*a + uy*b + uz*c
		sa += shift - sa*(dx*a+dy*b+dz*c)
		sin[i] = sa
		air[i] = float32(young(sa))
		cos[i] = float32(mx*a + my*b + mz*c)
	}
}

// young is the airmass of the sine of a true altitude.
func young(s float64) float64 {
	return ((1.002432*s+0.148386)*s + 0.0096467) /
		(((s+0.149864)*s+0.0102963)*s + 0.000303978)
}

// Altitude turns a sine of altitude into the angle.
func Altitude(sinAlt float64) astro.Angle {
	return astro.Rad(math.Asin(math.Max(-1, math.Min(1, sinAlt))))
}
