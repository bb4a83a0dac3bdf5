// Package air knows what the air above a site does to starlight on its way: how
// much of it the light crosses, and how far it bends. It works on altitudes,
// true or apparent as each formula was fitted, and refuses to give a number
// below the horizon. It knows no star, no time and no brightness.
package air

import (
	"errors"
	"math"

	"evenfall/astro"
)

// ErrBelowHorizon says that starlight from that altitude meets the ground.
var ErrBelowHorizon = errors.New("below the horizon; there is no airmass")

// ErrNotANumber says that an altitude is not a number.
var ErrNotANumber = errors.New("altitude is not a number; there is no airmass")

// Mass returns how much air starlight crosses to reach the observer, relative
// to straight overhead. It is the airmass used wherever nothing else is said.
//
//	X = 1 / [sin h + 0.50572 (h + 6.07995)^-1.6364]     h in degrees
//
// Given:
//   - alt: apparent altitude, refraction included, 0 to 90 degrees.
//
// Returns:
//   - X, dimensionless: 1 overhead, 37.92 at the horizon.
//   - [ErrBelowHorizon], with X not a number, when alt is negative.
//
// Notes:
//  1. The fit is to one standard atmosphere; no weather enters.
//  2. The formula gives 0.99971 overhead and less than 1 above 88.6 degrees;
//     that is forced to 1.
//  3. Airless altitude here is the commonest mistake: at 5 degrees it makes X
//     2.7 per cent too large (ERFA refco, 1013 hPa, 10 C).
//  4. Ray traces of the US Standard Atmosphere agree within 0.06 per cent down
//     to 10 degrees, 0.13 at 5 and 0.6 at the horizon; formulas differ from one
//     another by 2 per cent there.
//
// Source: [cite.KastenYoung1989]. Coefficients agree with two independent
// printings of them; the paper itself was not at hand.
//
// Checked: TestAirmass, against testdata/astro/airmass.csv, to the digits
// printed.
func Mass(alt astro.Angle) (astro.Airmass, error) {
	hDeg, err := above(alt, 0)
	if err != nil {
		return noMass, err
	}
	x := 1 / (alt.Sin() + 0.50572*math.Pow(hDeg+6.07995, -1.6364))
	return atLeastOne(x), nil
}

// youngLowestDeg is how far below the horizon a star may truly be and still be
// seen: the refraction there in standard air, 34.5 arcmin, and a little more.
const youngLowestDeg = -0.6

// MassYoung returns the airmass from the altitude without air.
//
//	c = sin h
//	X = (1.002432 c² + 0.148386 c + 0.0096467) /
//	    (c³ + 0.149864 c² + 0.0102963 c + 0.000303978)
//
// Given:
//   - trueAlt: altitude without refraction, -0.6 to 90 degrees; refraction in
//     standard air lifts a star from -0.57 to the horizon.
//
// Returns:
//   - X, at least 1; [ErrBelowHorizon] under -0.6 degrees.
//
// Source: [cite.Young1994]. Seen as several others print it.
//
// Checked: TestAirmass, against testdata/astro/airmass.csv.
func MassYoung(trueAlt astro.Angle) (astro.Airmass, error) {
	if _, err := above(trueAlt, youngLowestDeg); err != nil {
		return noMass, err
	}
	c := trueAlt.Sin()
	x := (1.002432*c*c + 0.148386*c + 0.0096467) /
		(c*c*c + 0.149864*c*c + 0.0102963*c + 0.000303978)
	return atLeastOne(x), nil
}

// MassPickering returns the airmass from apparent altitude by another fit, made
// for the horizon.
//
//	X = 1 / sin(h + 244/(165 + 47 h^1.1))               h in degrees
//
// Given:
//   - alt: apparent altitude, 0 to 90 degrees.
//
// Returns:
//   - X, at least 1; [ErrBelowHorizon].
//
// Source: [cite.Pickering2002]. Seen as several others print it.
//
// Checked: TestAirmass, against testdata/astro/airmass.csv.
func MassPickering(alt astro.Angle) (astro.Airmass, error) {
	hDeg, err := above(alt, 0)
	if err != nil {
		return noMass, err
	}
	x := 1 / astro.Deg(hDeg+244/(165+47*math.Pow(hDeg, 1.1))).Sin()
	return atLeastOne(x), nil
}

// PlaneParallel returns the airmass of a flat Earth, for comparison and quick
// estimates.
//
//	X = 1 / sin h
//
// Given:
//   - alt: apparent altitude; at 30 degrees it is 0.006 too large, at 10
//     degrees 3 per cent.
//
// Returns:
//   - X; [ErrBelowHorizon] at 0 and under, where X has no bound.
//
// Source: geometry.
//
// Checked: TestAirmass, against testdata/astro/airmass.csv.
func PlaneParallel(alt astro.Angle) (astro.Airmass, error) {
	hDeg, err := above(alt, 0)
	if err != nil {
		return noMass, err
	}
	if hDeg == 0 {
		return noMass, ErrBelowHorizon
	}
	return astro.Airmass(1 / alt.Sin()), nil
}

// ozoneHeight is the height of the ozone layer over the Earth's radius, both in
// kilometres.
const ozoneHeight = 22.0 / 6370

// ThinLayer returns the path through a thin layer at the height of ozone, 22
// km, relative to straight overhead.
//
//	X = (1 + a) / √(sin² h + 2a)                        a = 22/6370
//
// Given:
//   - alt: apparent altitude, 0 to 90 degrees.
//
// Returns:
//   - X, at least 1; [ErrBelowHorizon].
//
// Source: [cite.BirdRiordan1984]. Seen as one other prints it.
//
// Checked: TestAirmass, against testdata/astro/airmass.csv.
func ThinLayer(alt astro.Angle) (astro.Airmass, error) {
	if _, err := above(alt, 0); err != nil {
		return noMass, err
	}
	s := alt.Sin()
	return atLeastOne((1 + ozoneHeight) / math.Sqrt(s*s+2*ozoneHeight)), nil
}

// VanRhijn returns the path through the layer that glows at night, which is
// also the path of the sky models for scattered light.
//
//	X = (1 - 0.96 cos² h)^(-1/2)
//
// Given:
//   - alt: altitude, 0 to 90 degrees; the models it belongs to hold above 10.
//
// Returns:
//   - X, at least 1, 5 at the horizon; [ErrBelowHorizon].
//
// Notes:
//  1. The sky models were fitted with this path; [Mass] must not replace it.
//
// Source: [cite.Garstang1989]; [cite.KrisciunasSchaefer1991], eq. 3. Seen as
// several others print it.
//
// Checked: TestAirmass, against testdata/astro/airmass.csv.
func VanRhijn(alt astro.Angle) (astro.Airmass, error) {
	if _, err := above(alt, 0); err != nil {
		return noMass, err
	}
	c := alt.Cos()
	return atLeastOne(1 / math.Sqrt(1-0.96*c*c)), nil
}

// noMass goes with an error.
var noMass = astro.Airmass(math.NaN())

// above returns an altitude in degrees if it is a number and not under the
// lowest.
func above(alt astro.Angle, lowestDeg float64) (float64, error) {
	hDeg := alt.Deg()
	switch {
	case math.IsNaN(hDeg):
		return hDeg, ErrNotANumber
	case hDeg < lowestDeg:
		return hDeg, ErrBelowHorizon
	}
	return hDeg, nil
}

// atLeastOne forces the fits' values near the zenith to 1.
func atLeastOne(x float64) astro.Airmass { return astro.Airmass(math.Max(1, x)) }
