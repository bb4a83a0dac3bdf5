package frame

import (
	"math"

	"evenfall/astro"
)

// Catalogue is a star's place and motion as catalogues give them: ICRS.
type Catalogue struct {
	RA, Dec  astro.Angle
	EpochJyr float64     // Julian year of the position
	PMRA     astro.Angle // proper motion in a Julian year, with cos(dec)
	PMDec    astro.Angle
	Parallax astro.Angle // 0 where unknown; below 0 counts as 0
	RVKms    float64     // barycentric radial velocity, receding positive
}

// Star is a catalogue place made ready: where it was at its epoch and how it
// moves along a straight line.
type Star struct {
	at0      astro.Vec // unit vector at epoch
	motion   astro.Vec // change of it per Julian year
	parallax float64   // radians
	epoch    float64
}

// kmsToAUyr turns km/s into AU per Julian year.
const kmsToAUyr = 365.25 * 86400 * 1000 / auM

// NewStar prepares a catalogue place.
//
// Notes:
//  1. Motion is a straight line in space: no acceleration of binaries. Without
//     a parallax the radial velocity has no effect.
//
// Source: [cite.ESA1997], volume 1, section 1.5.5.
//
// Checked: TestStarsAgainstERFA.
func NewStar(c Catalogue) Star {
	sa, ca := math.Sincos(c.RA.Rad())
	sd, cd := math.Sincos(c.Dec.Rad())
	plx := math.Max(c.Parallax.Rad(), 0)
	u := astro.Vec{X: cd * ca, Y: cd * sa, Z: sd}
	east := astro.Vec{X: -sa, Y: ca}
	north := astro.Vec{X: -sd * ca, Y: -sd * sa, Z: cd}
	motion := east.Times(c.PMRA.Rad()).Plus(north.Times(c.PMDec.Rad())).
		Plus(u.Times(c.RVKms * kmsToAUyr * plx))
	return Star{at0: u, motion: motion, parallax: plx, epoch: c.EpochJyr}
}

// Direction returns the barycentric ICRS direction at an instant: space motion
// applied, parallax not.
func (s *Star) Direction(t astro.Instant) astro.Vec {
	return s.at0.Plus(s.motion.Times(t.YearsTT() - s.epoch)).Unit()
}

// Place is where a star stands, and its course, at one instant.
type Place struct {
	ICRS       astro.Vec   // barycentric direction at the instant, motion applied
	Dir        astro.Vec   // observed direction without refraction, ICRS axes
	Az, Alt    astro.Angle // azimuth from north through east; airless altitude
	HourAngle  astro.Angle // -180 to 180 degrees, west positive
	Parallact  astro.Angle // parallactic angle, -180 to 180 degrees, west positive
	RA, Dec    astro.Angle // geocentric apparent: true equator and equinox of date
	RisingRate float64     // rate of altitude, degrees per hour, rising positive
}

// Observed returns the direction in which the star is seen from the site
// without an atmosphere, along the ICRS axes: the costly half of Horizontal.
func (f *Frame) Observed(s *Star) astro.Vec {
	natural := f.natural(s)
	return f.aberration.apply(natural)
}

// natural returns the coordinate direction from the observer, deflected.
func (f *Frame) natural(s *Star) astro.Vec {
	u := s.at0.Plus(s.motion.Times(f.Instant.YearsTT() - s.epoch))
	if s.parallax > 0 {
		u = u.Minus(f.Earth.Bary.Plus(f.Observer).Times(s.parallax))
	}
	return f.sunward.apply(u.Unit())
}

// Horizontal returns the whole place of a star.
//
// Returns:
//   - azimuth 0 to 360 degrees, 0 at the zenith itself; nothing is NaN.
//
// Checked: TestStarsAgainstERFA, 0.02 arcsec, further than 5 degrees from the
// Sun; TestZenithAndPole.
func (f *Frame) Horizontal(s *Star) Place {
	natural := f.natural(s)
	dir := f.aberration.apply(natural)
	p := f.Look(dir)
	p.ICRS = s.Direction(f.Instant)
	p.RA, p.Dec = f.ToDate.Apply(f.geocentric.apply(natural)).LonLat()
	return p
}

// Look returns where a direction, given along the ICRS axes and already
// observed (aberrated), stands on the sky. RA and Dec are those of the
// direction itself, ICRS is left zero.
func (f *Frame) Look(dir astro.Vec) Place {
	p := Place{Dir: dir}
	n, e, up := f.North.Dot(dir), f.East.Dot(dir), f.Up.Dot(dir)
	p.Az, p.Alt = astro.Vec{X: n, Y: e, Z: up}.LonLat()
	p.RA, p.Dec = f.ToDate.Apply(dir).LonLat()
	p.HourAngle = f.LST.Minus(p.RA).Signed()
	sh, ch := math.Sincos(p.HourAngle.Rad())
	sd, cd := math.Sincos(p.Dec.Rad())
	sf, cf := math.Sincos(f.Site.Lat.Rad())
	p.Parallact = astro.Rad(math.Atan2(cf*sh, sf*cd-cf*sd*ch)).Signed()
	// d(sin alt)/dt = -cos(lat) cos(dec) sin(H) dH/dt; 15.041 degrees an hour
	if ca := math.Hypot(n, e); ca > 1e-9 {
		p.RisingRate = -cf * cd * sh / ca * (earthTurn * 3600 * 180 / math.Pi)
	}
	return p
}

// Altitude returns the airless altitude of an observed direction.
func (f *Frame) Altitude(dir astro.Vec) astro.Angle {
	return astro.Rad(math.Atan2(f.Up.Dot(dir), math.Hypot(f.North.Dot(dir), f.East.Dot(dir))))
}

// Aberrate returns the observed direction of a natural one, both along the
// axes of the ICRS: the motion of the Earth and of the site in it.
func (f *Frame) Aberrate(natural astro.Vec) astro.Vec { return f.aberration.apply(natural) }

// AberrateGeocentric does the same for an observer at the Earth's centre.
func (f *Frame) AberrateGeocentric(natural astro.Vec) astro.Vec { return f.geocentric.apply(natural) }

// Velocity returns the barycentric velocity of the site that aberration uses,
// units of c, along the axes of the ICRS.
func (f *Frame) Velocity() astro.Vec { return f.aberration.v }
