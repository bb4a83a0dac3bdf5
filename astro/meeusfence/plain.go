package meeusfence

import (
	"github.com/soniakeys/meeus/v3/apparent"
	"github.com/soniakeys/meeus/v3/coord"
	"github.com/soniakeys/meeus/v3/sidereal"
	"github.com/soniakeys/unit"

	"evenfall/astro"
)

// Plain is the library's own chain from a catalogue place to the horizon,
// star by star: the yardstick that package frame is measured against in
// accuracy and package sweep in speed. Nothing that is shown comes from it.
type Plain struct {
	site     astro.Site
	epoch    float64
	sidereal unit.Time
}

// NewPlain prepares the chain for a site and an instant.
func NewPlain(site astro.Site, t astro.Instant) Plain {
	return Plain{site, t.YearsTT(), sidereal.Apparent(2451545 + t.DaysUT1())}
}

// Horizontal returns azimuth, from north through east, and altitude of a place
// at J2000.0 to which space motion and parallax have been applied.
//
// Notes:
//  1. Fences the library's signs: its longitude is positive west, its azimuth
//     counts from the south.
//  2. First-order corrections: wrong by up to 11 arcsec within 5 degrees of a
//     pole, and no diurnal aberration.
//
// Source: [cite.Meeus1998], chapters 12, 13 and 23.
func (p *Plain) Horizontal(ra, dec astro.Angle) (az, alt astro.Angle) {
	from := coord.Equatorial{RA: unit.RAFromRad(ra.Rad()), Dec: unit.Angle(dec.Rad())}
	var to coord.Equatorial
	apparent.Position(&from, &to, 2000, p.epoch, 0, 0)
	a, h := coord.EqToHz(to.RA, to.Dec, unit.Angle(p.site.Lat.Rad()), unit.Angle(-p.site.Lon.Rad()), p.sidereal)
	return astro.Rad(a.Rad()).Plus(astro.Deg(180)).Turn(), astro.Rad(h.Rad())
}
