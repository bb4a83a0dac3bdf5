// Package ephem says where the Sun and the Moon are as a site sees them, when
// they or a star cross an altitude, and what that makes of a night. It knows
// no target and no limit of a telescope.
package ephem

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/astro/meeusfence"
)

const (
	auKm     = 149597870.7 // exact, [cite.IAU2012B2]
	auLightS = 499.004783836
	// moonRadiusKm: the Moon's radius is 0.272493 of the Earth's equatorial
	// one. Source: [cite.Meeus1998], chapter 55 (IAU 1982 value).
	moonRadiusKm = 0.272493 * 6378.137
)

// Body is where the Sun or the Moon stands as seen from the site, airless.
type Body struct {
	Dir         astro.Vec   // observed direction from the site, ICRS axes
	Place       frame.Place // azimuth, altitude, hour angle; RA and Dec of date, topocentric
	RA, Dec     astro.Angle // geocentric apparent: true equator and equinox of date
	Geocentric  astro.Vec   // from the Earth's centre, km, ICRS axes, light-time in
	DistanceKm  float64     // from the site
	Semidiam    astro.Angle // angular radius from the site
	Coarse      bool        // outside 2010-2053: Sun to 36 arcsec
	fromSite    astro.Vec   // km
	geocentricU astro.Vec   // unit vector after aberration
}

// Sun returns the Sun as seen from the frame's site.
//
// Notes:
//  1. Geocentric, 2010-2053: within 1 arcsec of DE405; other dates within 36
//     arcsec, and Coarse is set.
//
// Source: [cite.Simon1994] and the fit of package frame; outside its years
// [cite.Meeus1998], chapter 25.
//
// Checked: TestSunMoonGeocentric, against testdata/astro/sunmoon.csv.
func Sun(f *frame.Frame) Body {
	e := &f.Earth
	// where the Sun was when the light left: it drifts about the barycentre
	lightDays := e.Helio.Norm() * auLightS
	sun := e.Helio.Times(-1).Minus(e.SunDrift.Times(lightDays / auLightS))
	b := Body{Geocentric: sun.Times(auKm), Coarse: e.Fallback}
	b.finish(f, true)
	const sunRadiusKm = 695700 // [cite.IAU2015B3], nominal
	b.Semidiam = astro.Rad(math.Asin(sunRadiusKm / b.DistanceKm))
	return b
}

// Moon returns the Moon as seen from the frame's site.
//
// Notes:
//  1. Topocentric always: from one place or another it differs by up to a
//     degree. Within 15 arcsec of DE405, 2010-2053.
//  2. The series gives the place that the light shows; the Earth's own motion
//     is shared by the Moon, so annual aberration is not applied.
//
// Source: [cite.Meeus1998], chapter 47 (after ELP-2000/82).
//
// Checked: TestMoonTopocentric, against testdata/astro/moon_topo.csv and sunmoon.csv.
func Moon(f *frame.Frame) Body {
	lon, lat, km := meeusfence.Moon(f.Instant)
	ecl := astro.Direction(lon, lat).Times(km)
	equatorial := astro.Rotation(0, f.Obliquity.Neg()).Apply(ecl)
	b := Body{Geocentric: f.MeanToDate.ApplyT(equatorial)}
	b.finish(f, false)
	b.Semidiam = astro.Rad(math.Asin(moonRadiusKm / b.DistanceKm))
	return b
}

// finish fills what follows from the geocentric vector.
func (b *Body) finish(f *frame.Frame, annual bool) {
	b.fromSite = b.Geocentric.Minus(f.Observer.Times(auKm))
	b.DistanceKm = b.fromSite.Norm()
	b.geocentricU = b.Geocentric.Unit()
	if annual {
		b.geocentricU = f.AberrateGeocentric(b.geocentricU)
		b.Dir = f.Aberrate(b.fromSite.Unit())
	} else {
		b.Dir = b.fromSite.Unit().Plus(f.Turning).Unit()
	}
	b.RA, b.Dec = f.ToDate.Apply(b.geocentricU).LonLat()
	b.Place = f.Look(b.Dir)
}

// Phase is how the Moon is lit as seen from the site.
type Phase struct {
	Angle       astro.Angle // Sun-Moon-site: 0 full, 180 degrees new
	Illuminated float64     // fraction of the disc, 0 to 1
	Waxing      bool
}

// MoonPhase returns the Moon's phase for the site.
//
//	k = (1 + cos i) / 2
//
// Source: [cite.Meeus1998], chapter 48.
//
// Checked: TestMoonTopocentric, illuminated fraction to 0.001.
func MoonPhase(moon, sun Body) Phase {
	i := meeusfence.PhaseAngle(moon.fromSite, sun.fromSite)
	// waxing: the Moon lies east of the Sun
	east := sun.fromSite.Cross(moon.fromSite).Z > 0
	return Phase{Angle: i, Illuminated: (1 + i.Cos()) / 2, Waxing: east}
}
