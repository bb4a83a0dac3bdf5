package stage

import (
	"fmt"
	"math"

	"evenfall/astro/stellar"
)

// Bounds of the period-luminosity relation of Miras, days, and its scatter.
const (
	shortestMiraD, longestMiraD = 100.0, 400.0
	miraScatter, carbonScatter  = 0.18, 0.35
	longMiraScatter             = 0.75 // beyond 400 d: hot-bottom burning brightens some
)

// periodLuminosity returns the mean absolute K magnitude of a Mira.
//
//	M_K = -3.51 (log P - 2.38) - 7.25
//
// Given:
//   - periodD: day, 100 to 400; to 1000 with the larger scatter of stars that
//     burn hydrogen at the bottom of their envelope.
//
// Returns:
//   - the magnitude and its error: that of the relation and its scatter.
//   - an error for other periods.
//
// Notes:
//  1. Scatter 0.18 mag, 0.35 among carbon stars; beyond 400 d 0.75, as such
//     stars can be brighter by 0.5 to 1: from memory, not checked against a
//     publication.
//
// Source: [cite.WhitelockEtAl2008].
//
// Checked: TestPeriodLuminosity.
func periodLuminosity(periodD float64, carbon bool) (stellar.Measure, error) {
	if !(periodD >= shortestMiraD && periodD <= 2.5*longestMiraD) {
		return stellar.Measure{}, fmt.Errorf("no period-luminosity relation at %g d; it holds from 100 to 400 d", periodD)
	}
	const slope, slopeErr, zero, zeroErr = -3.51, 0.20, -7.25, 0.07
	x := math.Log10(periodD) - 2.38
	sd := miraScatter
	if carbon {
		sd = carbonScatter
	}
	if periodD > longestMiraD {
		sd = longMiraScatter
	}
	return stellar.Measured(slope*x+zero, math.Hypot(sd, math.Hypot(zeroErr, slopeErr*x))), nil
}
