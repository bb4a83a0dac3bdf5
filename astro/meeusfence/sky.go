package meeusfence

import (
	"math"

	"github.com/soniakeys/meeus/v3/apparent"
	"github.com/soniakeys/meeus/v3/julian"
	"github.com/soniakeys/meeus/v3/moonillum"
	"github.com/soniakeys/meeus/v3/moonposition"
	"github.com/soniakeys/meeus/v3/nutation"
	"github.com/soniakeys/meeus/v3/solar"
	"github.com/soniakeys/unit"

	"evenfall/astro"
)

// JDMidnight returns the Julian date of 0h of a day of the Gregorian calendar;
// it ends in .5 and is exact. (Time of day is never sent through the library:
// its JDToTime(TimeToJD(t)) comes back up to 20 microseconds early.)
//
// Source: [cite.Meeus1998], chapter 7.
func JDMidnight(d astro.Date) float64 {
	return julian.CalendarGregorianToJD(d.Year, int(d.Month), float64(d.Day))
}

// Nutation returns the nutation in longitude and in obliquity, IAU 1980.
// The library calls its argument jde: it is TT, not UT.
//
// Source: [cite.Meeus1998], chapter 22; the series is that of
// [cite.Seidelmann1982].
func Nutation(t astro.Instant) (dpsi, deps astro.Angle) {
	p, e := nutation.Nutation(t.JDTT())
	return astro.Rad(p.Rad()), astro.Rad(e.Rad())
}

// EarthVelocity returns the velocity of the Earth's centre relative to the
// barycentre of the solar system, in units of the speed of light, equatorial
// axes of J2000.0 (ICRS within 0.02 arcsec of orientation).
//
//	Vx = -dRA(RA 90), Vy = dRA(RA 0), Vz = dDec(RA 0), all at declination 0
//
// Notes:
//  1. The library offers only first-order corrections in right ascension and
//     declination, which fail at the poles. Called at declination 0 in two
//     directions they are the velocity itself.
//  2. Against ERFA epv00: 0.52 m/s at most, 0.13 m/s rms.
//
// Source: [cite.RonVondrak1986], as in [cite.Meeus1998], chapter 23.
//
// Checked: TestEarthVelocity, against testdata/astro/velocity.csv.
func EarthVelocity(t astro.Instant) astro.Vec {
	jd := t.JDTT()
	dra0, ddec0 := apparent.AberrationRonVondrak(0, 0, jd)
	dra90, _ := apparent.AberrationRonVondrak(unit.RA(math.Pi/2), 0, jd)
	return astro.Vec{X: -dra90.Rad(), Y: dra0.Rad(), Z: ddec0.Rad()}
}

// Moon returns the geocentric longitude and latitude of the Moon, mean
// ecliptic and equinox of date, light-time included, and its distance from the
// Earth's centre in kilometres. Nutation is not in it.
//
// Source: [cite.Meeus1998], chapter 47, after [cite.ChaprontTouzeChapront1988];
// against an independent ephemeris 13 arcsec and 12 km at most.
func Moon(t astro.Instant) (lon, lat astro.Angle, distanceKm float64) {
	l, b, km := moonposition.Position(t.JDTT())
	return astro.Rad(l.Rad()), astro.Rad(b.Rad()), km
}

// PhaseAngle returns the angle Sun-Moon-observer from the places and distances
// of both as the observer has them: 0 at full, 180 degrees at new.
//
// Given:
//   - moon, sun: vectors from the observer, kilometres, any common axes.
//
// Source: [cite.Meeus1998], eq. 48.2 and 48.3.
func PhaseAngle(moon, sun astro.Vec) astro.Angle {
	ra, dec := moon.LonLat()
	ra0, dec0 := sun.LonLat()
	i := moonillum.PhaseAngleEq(unit.RA(ra.Rad()), unit.Angle(dec.Rad()), moon.Norm(),
		unit.RA(ra0.Rad()), unit.Angle(dec0.Rad()), sun.Norm())
	return astro.Rad(i.Rad())
}

// SunTrue returns the geometric geocentric longitude of the Sun, mean equinox
// of date, and its distance in astronomical units. The latitude, within 1.2
// arcsec of zero, is left out.
//
// Source: [cite.Meeus1998], chapter 25, low accuracy: 34 arcsec at most
// against ERFA.
func SunTrue(t astro.Instant) (lon astro.Angle, distanceAU float64) {
	s, _ := solar.True(t.CenturiesTT())
	return astro.Rad(s.Rad()), solar.Radius(t.CenturiesTT())
}
