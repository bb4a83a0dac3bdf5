package meeusfence

import (
	"math"

	"github.com/soniakeys/meeus/v3/kepler"
	"github.com/soniakeys/meeus/v3/planetelements"

	"evenfall/astro"
)

// giants lists the planets that move the Sun about the barycentre most, with
// the Sun's mass in units of theirs.
//
// Source: [cite.IAU2009], table 1.
var giants = []struct {
	planet  int
	sunMass float64
}{
	{planetelements.Jupiter, 1047.3486},
	{planetelements.Saturn, 3497.898},
	{planetelements.Uranus, 22902.98},
	{planetelements.Neptune, 19412.24},
}

// SunFromBarycentre returns where the Sun's centre is, counted from the
// barycentre of the solar system: AU, mean ecliptic and equinox of date. Mean
// elements and two-body motion; it serves dates that the Earth series does not
// cover.
//
//	-sum over the giants of r / (1 + Msun/m)
//
// Source: [cite.Meeus1998], chapters 30, 31 and 33; with the Sun of chapter 25
// light-times come out within 0.09 s of ERFA.
func SunFromBarycentre(t astro.Instant) astro.Vec {
	var sum astro.Vec
	var e planetelements.Elements
	for _, g := range giants {
		planetelements.Mean(g.planet, t.JDTT(), &e)
		sum = sum.Minus(heliocentric(&e).Times(1 / (1 + g.sunMass)))
	}
	return sum
}

// heliocentric returns a planet's place from its elements, AU.
func heliocentric(e *planetelements.Elements) astro.Vec {
	m := (e.Lon - e.Peri).Mod1()
	ecc, err := kepler.Kepler2(e.Ecc, m, 10)
	if err != nil {
		ecc = kepler.Kepler3(e.Ecc, m)
	}
	nu := kepler.True(ecc, e.Ecc)
	r := kepler.Radius(ecc, e.Ecc, e.Axis)
	u := (nu + e.Peri - e.Node).Rad()
	su, cu := math.Sincos(u)
	sn, cn := e.Node.Sincos()
	si, ci := e.Inc.Sincos()
	return astro.Vec{X: r * (cn*cu - sn*su*ci), Y: r * (sn*cu + cn*su*ci), Z: r * su * si}
}
