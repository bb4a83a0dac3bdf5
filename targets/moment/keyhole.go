package moment

import (
	"math"
	"time"

	"evenfall/astro"
	"evenfall/targets"
)

// skyTurn is how fast the sky turns, degrees per second of time.
const skyTurn = 15.04107 / 3600

// keyholeMargin is what is kept beside the zone that a drive cannot follow
// through. Common practice, no source.
var keyholeMargin = astro.Deg(0.1)

// Keyhole returns how far from the zenith an alt-azimuth mount cannot follow a
// star, the greater of what its speed and its acceleration allow.
//
//	z = asin(w cos(lat)/W)                         by the speed W
//	z = w cos(lat) sqrt(3 sqrt(3)/(8 a))           by the acceleration a, radians
//
// Given:
//   - l: mount, rate in degrees per second and acceleration in degrees per
//     second squared; one that is not above 0 sets no limit.
//   - lat: of the site.
//
// Returns:
//   - the radius without margin, 0 to 90 degrees; 0 for other mounts.
//
// Notes:
//  1. The zone is not quite round; this is the circle that holds it.
//
// Source: [cite.Borkowski1987], for the shape; the circles from memory, not
// checked against the publication.
//
// Checked: TestKeyhole.
func Keyhole(l *targets.Limits, lat astro.Angle) astro.Angle {
	if l.Mount != "altaz" {
		return astro.Angle{}
	}
	turn := skyTurn * math.Abs(lat.Cos())
	z := 0.0 // radians
	if w := l.AzimuthRateDegS; w > 0 {
		z = math.Asin(math.Min(turn/w, 1))
	}
	if a := l.AzimuthAccelDegS2; a > 0 {
		z = math.Max(z, astro.Deg(turn).Rad()*math.Sqrt(3*math.Sqrt(3)/(8*astro.Deg(a).Rad())))
	}
	if math.IsNaN(z) {
		return astro.Angle{}
	}
	return astro.Rad(math.Min(z, math.Pi/2))
}

// Top returns the greatest refracted altitude that limits allow: as they say,
// or the edge of the zone about the zenith that the mount cannot follow
// through, 0.1 degrees kept from it.
//
// Checked: TestKeyhole.
func Top(l *targets.Limits, lat astro.Angle) astro.Angle {
	top := l.MaxAltitude
	if z := Keyhole(l, lat); z.Rad() > 0 {
		if edge := astro.Deg(90).Minus(z).Minus(keyholeMargin); edge.Less(top) {
			top = edge
		}
	}
	return top
}

// AzimuthRate returns how fast an alt-azimuth mount turns to follow a place.
//
//	dA/dt = w (sin(lat) - cos(lat) cos A tan a)
//
// Given:
//   - az, alt: A from north through east, a; lat: of the site.
//
// Returns:
//   - arcseconds per second of time, positive from north to east; without
//     bounds at the zenith.
//
// Source: [cite.Borkowski1987], in its usual form.
//
// Checked: TestRates.
func AzimuthRate(lat, az, alt astro.Angle) float64 {
	return 3600 * skyTurn * (lat.Sin() - lat.Cos()*az.Cos()*alt.Sin()/alt.Cos())
}

// Flip returns when an equatorial mount turns over tonight: from the transit
// on, for as long as that takes.
//
// Returns:
//   - false for other mounts, where it takes no time, and without a transit.
func (c *Course) Flip() (astro.Span, bool) {
	l := &c.Limits
	if l.Mount != "equatorial" || !(l.FlipMin > 0) || c.Transit == nil {
		return astro.Span{}, false
	}
	return astro.Span{From: *c.Transit, Until: c.Transit.Add(time.Duration(l.FlipMin * float64(time.Minute)))}, true
}
