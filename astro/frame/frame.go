// Package frame turns catalogue places into places on the sky of a site at an
// instant: space motion, parallax, light deflection, aberration, precession,
// nutation, the Earth's rotation. All that stars share is worked out once an
// instant; a star then costs a handful of products. It knows no refraction
// (see air), no Sun or Moon as targets (see ephem) and no list.
//
// Everything is done with one rotation and one velocity, never with
// first-order corrections in right ascension and declination, which fail near
// the poles, and with atan2, never asin or acos.
package frame

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/meeusfence"
)

// WGS84 ellipsoid: equatorial radius in metres, flattening.
//
// Source: [cite.WGS84].
const wgs84A, wgs84F = 6378137.0, 1 / 298.257223563

// earthTurn is the Earth's rate of rotation, radians per UT1 second.
//
// Source: [cite.IERS2010], eq. 5.15.
const earthTurn = 1.00273781191135448 * 2 * math.Pi / 86400

// Frame is what all stars share at one place and instant. Vectors are along
// the axes of the ICRS unless said otherwise.
type Frame struct {
	Site    astro.Site
	Instant astro.Instant
	Earth   Earth

	ToDate      astro.Mat   // ICRS to true equator and equinox of date
	MeanToDate  astro.Mat   // ICRS to mean equator and equinox of date
	Obliquity   astro.Angle // mean obliquity of date
	GAST        astro.Angle // Greenwich apparent sidereal time
	LST         astro.Angle // local apparent sidereal time
	North, East astro.Vec   // horizontal axes of the site
	Up          astro.Vec   // geodetic zenith
	Observer    astro.Vec   // from the Earth's centre, AU
	Turning     astro.Vec   // velocity of the site by the Earth's rotation, units of c

	aberration aberrator // Earth and site together
	geocentric aberrator // Earth alone
	sunward    deflector
}

// At works out what all stars share at a site and an instant.
//
// Notes:
//  1. IAU 2006 precession and GMST with frame bias, IAU 1980 nutation, the
//     velocity of Ron & Vondrak: against ERFA the sky comes out within 0.02
//     arcsec (see the accuracy table of DEVELOPERS.md).
//  2. Polar motion (0.3 arcsec at most) is left out; UT1-UTC is that of the
//     instant.
//
// Checked: TestStarsAgainstERFA, TestSidereal.
func At(site astro.Site, t astro.Instant) Frame {
	f := Frame{Site: site, Instant: t, Earth: EarthAt(t)}
	T := t.CenturiesTT()
	p := precessionOf(T)
	dpsi, deps := meeusfence.Nutation(t)
	f.ToDate = p.matrix(dpsi.Rad(), deps.Rad())
	f.MeanToDate = p.matrix(0, 0)
	f.Obliquity = p.obliquity
	f.GAST = astro.Rad(meanSidereal(t.DaysUT1(), T) + equationOfEquinoxes(T, dpsi.Rad(), p.obliquity)).Turn()
	f.LST = f.GAST.Plus(site.Lon).Turn()
	f.placeObserver()
	v := meeusfence.EarthVelocity(t)
	distance := f.Earth.Helio.Norm()
	f.geocentric = newAberrator(v, distance)
	f.aberration = newAberrator(v.Plus(f.Turning), distance)
	f.sunward = newDeflector(f.Earth.Helio)
	return f
}

// placeObserver sets the horizon's axes and the observer's place and velocity.
func (f *Frame) placeObserver() {
	sf, cf := math.Sincos(f.Site.Lat.Rad())
	st, ct := math.Sincos(f.LST.Rad())
	f.Up = f.ToDate.ApplyT(astro.Vec{X: cf * ct, Y: cf * st, Z: sf})
	f.North = f.ToDate.ApplyT(astro.Vec{X: -sf * ct, Y: -sf * st, Z: cf})
	f.East = f.ToDate.ApplyT(astro.Vec{X: -st, Y: ct})
	n := wgs84A / math.Sqrt(1-wgs84F*(2-wgs84F)*sf*sf)
	axis := (n + f.Site.HeightM) * cf
	height := (n*(1-wgs84F)*(1-wgs84F) + f.Site.HeightM) * sf
	f.Observer = f.ToDate.ApplyT(astro.Vec{X: axis * ct, Y: axis * st, Z: height}.Times(1 / auM))
	f.Turning = f.ToDate.ApplyT(astro.Vec{X: -st, Y: ct}.Times(axis * earthTurn / lightMS))
}

// aberrator applies aberration with the relativistic formula.
type aberrator struct {
	v      astro.Vec // velocity, units of c
	bm1    float64   // reciprocal Lorentz factor
	solarW float64   // Schwarzschild radius of the Sun over distance
}

// sunRadiusAU is the Schwarzschild radius of the Sun, AU: 2 G M / c^2.
//
// Source: [cite.IERS2010], from the heliocentric gravitational constant.
const sunRadiusAU = 1.97412574336e-8

func newAberrator(v astro.Vec, sunDistanceAU float64) aberrator {
	return aberrator{v, math.Sqrt(1 - v.Dot(v)), sunRadiusAU / sunDistanceAU}
}

// apply returns the proper direction of a natural one.
//
// Source: [cite.UrbanSeidelmann2013], eq. 7.40, with the Sun's potential of
// [cite.Klioner2003]; the form that ERFA's ab uses.
func (a *aberrator) apply(p astro.Vec) astro.Vec {
	pv := p.Dot(a.v)
	w1 := 1 + pv/(1+a.bm1)
	out := p.Times(a.bm1 - a.solarW*pv).Plus(a.v.Times(w1 + a.solarW))
	return out.Unit()
}

// deflector bends light at the Sun.
type deflector struct {
	e     astro.Vec // unit vector Sun to Earth
	scale float64   // 2GM/c2r
	limit float64
}

func newDeflector(helio astro.Vec) deflector {
	r := helio.Norm()
	return deflector{helio.Times(1 / r), sunRadiusAU / r, 1e-6 / math.Max(r*r, 1)}
}

// apply returns the direction after deflection, 0.004 arcsec at 90 degrees
// from the Sun. Near the Sun's limb it is limited, as nothing is pointed there.
//
// Source: [cite.UrbanSeidelmann2013], eq. 7.63 for a distant source.
func (d *deflector) apply(p astro.Vec) astro.Vec {
	w := d.scale / math.Max(1+p.Dot(d.e), d.limit)
	// p x (e x p) = e - (p.e) p for unit vectors
	return p.Plus(d.e.Minus(p.Times(p.Dot(d.e))).Times(w)).Unit()
}
