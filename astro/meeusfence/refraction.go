// Package meeusfence fences github.com/soniakeys/meeus/v3: every trap is a
// test. It is the only package that imports the library; what goes in and comes
// out are this program's own quantities, so that its conventions (longitude
// west, azimuth from south, two kinds of Julian date as one float64) stay
// inside. It adds no astronomy of its own and refuses to pass on a value where
// the library's is not one.
package meeusfence

import (
	"math"

	"github.com/soniakeys/meeus/v3/refraction"
	"github.com/soniakeys/unit"

	"evenfall/astro"
)

// refractionLowestDeg is the altitude under which the published formulas are
// not to be used; from -4.4 degrees down they are no refraction at all.
const refractionLowestDeg = -1

// Saemundsson returns the refraction of a star by its true altitude, at 1010
// hPa and 10 C.
//
//	R = 1.02 cot(h + 10.3/(h + 5.11))          R in minutes of arc, h in degrees
//
// Given:
//   - trueAlt: altitude without air, -1 to 90 degrees.
//
// Returns:
//   - R, to be added; never negative (the formula gives -0.1 arcsec at the
//     zenith); 0 under -1 degree and for what is not a number.
//
// Source: [cite.Saemundsson1986]; [cite.Meeus1998], eq. 16.4.
//
// Checked: TestRefractionPublished in package air, against
// testdata/astro/refraction_published.csv; TestRefractionTraps.
func Saemundsson(trueAlt astro.Angle) astro.Angle { return bent(refraction.Saemundsson, trueAlt) }

// Bennett returns the refraction of a star by its apparent altitude, at 1010
// hPa and 10 C.
//
//	R = cot(h + 7.31/(h + 4.4))                R in minutes of arc, h in degrees
//
// Given:
//   - apparent: altitude as seen, -1 to 90 degrees.
//
// Returns:
//   - R, to be taken off; never negative; 0 under -1 degree and for what is not
//     a number. Good to 0.07 arcmin.
//
// Source: [cite.Bennett1982]; [cite.Meeus1998], eq. 16.3.
//
// Checked: as [Saemundsson].
func Bennett(apparent astro.Angle) astro.Angle { return bent(refraction.Bennett, apparent) }

// BennettRefined is [Bennett] with its author's correction.
//
//	R' = R - 0.06 sin(14.7 R + 13)             R in minutes, the sine's argument in degrees
//
// Returns:
//   - R', to be taken off; never negative; 0 under -1 degree and for what is
//     not a number. Good to 0.015 arcmin.
//
// Source: [cite.Bennett1982]; [cite.Meeus1998], page 107.
//
// Checked: as [Saemundsson].
func BennettRefined(apparent astro.Angle) astro.Angle { return bent(refraction.Bennett2, apparent) }

// bent asks a formula where it holds.
func bent(formula func(unit.Angle) unit.Angle, alt astro.Angle) astro.Angle {
	if !(alt.Deg() >= refractionLowestDeg) {
		return astro.Angle{}
	}
	r := formula(unit.Angle(alt.Rad())).Rad()
	if !(r > 0) || math.IsInf(r, 0) {
		return astro.Angle{}
	}
	return astro.Rad(r)
}
