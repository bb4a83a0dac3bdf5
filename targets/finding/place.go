// Package finding says how to find a target: where it is tonight and how far it
// has moved, how far to search where its motion is not known, which brighter
// star to offset from, which stars serve for comparison in the same frame, what
// glare there is, where to aim at a nebula and how to lay the slit on it. It
// works on lists that it is given; it knows no file and no screen.
package finding

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/targets"
)

// Found is where a target is on a night.
type Found struct {
	Dir         astro.Vec   // as seen from the Earth's centre without aberration, ICRS axes: what a catalogue of the date would give
	RA, Dec     astro.Angle // ICRS, motion applied, parallax not
	Years       float64     // since the epoch
	MovedArcsec float64     // since the epoch, parallax left out
	TowardsDeg  float64     // position angle of that, at the place of the epoch
	Known       bool        // the motion is listed
	// SearchArcsec is how far round the listed place to look: what the motion, or
	// its error, leaves open. 0 where nothing is left open.
	SearchArcsec float64
	Words        string
}

// usualMotion is what nine in ten of the built-in stars of a kind with a listed
// motion stay below, arcsec a year, rounded up; stars fainter than these move
// less.
var usualMotion = map[targets.Kind]float64{
	targets.WD: 1.4, targets.Giant: 0.7, targets.LPV: 0.3, targets.PostAGB: 0.05, targets.PN: 0.03, targets.Interacting: 0.1, targets.Standard: 0.7, targets.Other: 0.7,
}

// CatalogueOf turns a listed place into one that can be computed with. What is
// not listed is 0.
func CatalogueOf(t *targets.Target) frame.Catalogue {
	mas := func(m targets.Measure) astro.Angle {
		if !m.Known || math.IsNaN(m.Value) || math.IsInf(m.Value, 0) {
			return astro.Angle{}
		}
		return astro.Arcsec(m.Value / 1000)
	}
	p := &t.Place
	c := frame.Catalogue{RA: p.RA, Dec: p.Dec, EpochJyr: p.EpochJyr, PMRA: mas(p.PMRA), PMDec: mas(p.PMDec), Parallax: mas(p.Plx)}
	if p.RV.Known && math.Abs(p.RV.Value) < 1e5 {
		c.RVKms = p.RV.Value
	}
	if !p.EpochGiven && c.EpochJyr == 0 {
		c.EpochJyr = 2000
	}
	return c
}

// Direction returns where a star is seen at an instant: motion and parallax
// applied, aberration not, as the places of a catalogue are.
//
//	u(T) - plx E,  made a unit vector;  E the Earth from the barycentre, AU
//
// Source: [cite.ESA1997], volume 1, section 1.5.5.
//
// Checked: TestPairs, against ERFA, 0.01 arcsec.
func Direction(c frame.Catalogue, at astro.Instant) astro.Vec {
	s := frame.NewStar(c)
	u := s.Direction(at)
	if plx := c.Parallax.Rad(); plx > 0 {
		u = u.Minus(frame.EarthAt(at).Bary.Times(plx)).Unit()
	}
	return u
}

// Tonight says where a target is, how far it has moved and where to, and how
// far to search.
//
// Notes:
//  1. Without a listed motion the search goes as far as nine in ten stars of the
//     kind in the built-in list move; with one, three times its error.
//
// Checked: TestPairs, TestTonight.
func Tonight(t *targets.Target, at astro.Instant) Found {
	c := CatalogueOf(t)
	f := Found{Years: at.YearsTT() - c.EpochJyr, Known: t.MotionKnown()}
	s := frame.NewStar(c)
	now, then := s.Direction(at), astro.Direction(c.RA, c.Dec)
	f.RA, f.Dec = now.LonLat()
	f.Dir = Direction(c, at)
	o := Between(then, now)
	f.MovedArcsec, f.TowardsDeg = o.SepArcsec, o.PADeg
	years := math.Abs(f.Years)
	if !f.Known {
		f.MovedArcsec, f.TowardsDeg = 0, 0
		usual, ok := usualMotion[t.Kind]
		if !ok {
			usual = usualMotion[targets.Other]
		}
		f.SearchArcsec = usual * years
		f.Words = fmt.Sprintf("no proper motion listed: in %.0f years such a star moves up to %.0f arcsec; search so far round the place of %.1f", years, math.Ceil(f.SearchArcsec), c.EpochJyr)
		return f
	}
	if e := math.Hypot(t.Place.PMRA.Err, t.Place.PMDec.Err); e > 0 && e < 1e6 {
		f.SearchArcsec = 3 * e / 1000 * years
	}
	if f.MovedArcsec < 0.05 {
		f.Words = fmt.Sprintf("has not moved by 0.1 arcsec since %.1f", c.EpochJyr)
		return f
	}
	f.Words = fmt.Sprintf("%.1f arcsec to the %s (position angle %.0f) of its place of %.1f", f.MovedArcsec, Compass(f.TowardsDeg), f.TowardsDeg, c.EpochJyr)
	return f
}

// Compass names a position angle by one of 16 directions on the sky, from north
// through east.
func Compass(paDeg float64) string {
	names := [16]string{"N", "NNE", "NE", "ENE", "E", "ESE", "SE", "SSE", "S", "SSW", "SW", "WSW", "W", "WNW", "NW", "NNW"}
	if math.IsNaN(paDeg) || math.IsInf(paDeg, 0) {
		return "?"
	}
	k := int(math.Round(turn(paDeg)/22.5)) % 16
	return names[k]
}

// turn brings an angle to 0 to 360 degrees.
func turn(deg float64) float64 {
	deg = math.Mod(deg, 360)
	if deg < 0 {
		deg += 360
	}
	return deg
}
