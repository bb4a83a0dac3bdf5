package wander

import (
	"errors"
	"math"

	"evenfall/astro/numeric"
)

// ErrFewObs: not enough magnitudes, or over too short a time, for a period.
var ErrFewObs = errors.New("too few magnitudes for a period; give ten or more over 60 days or more")

// Period is a period found from magnitudes.
type Period struct {
	Days, SigmaD float64
	FalseAlarm   float64 // chance that noise alone makes such a peak
	AmplitudeMag float64 // half of peak to peak of the sine
}

const (
	leastForPeriod = 10
	// Periods searched: those of long-period variables, covered at least 1.5
	// times. A choice.
	leastPeriodD, mostPeriodD = 30.0, 1000.0
	leastCovered              = 1.5
)

// FindPeriod returns the period that a sine through the magnitudes has.
//
// Given:
//   - obs: in one band, in any order; limits are left aside. At least ten.
//
// Returns:
//   - the period, from 30 to 1000 days and at most the span over 1.5.
//   - [ErrFewObs], [ErrObs].
//
// Notes:
//  1. FalseAlarm and SigmaD hold for errors independent of each other. These
//     stars drift, so both are too small: treat 1e-6 as the limit, not 0.01, and
//     two per cent of the period as the least error.
//  2. Gaps of a year make aliases: 1/P +- 1/365 may be the truth.
//  3. For a filter put Days and SigmaD into PeriodD and PeriodErrD.
//
// Source: [numeric.LombScargle].
//
// Checked: TestFindPeriod; TestPeriodsOfStars, on measured stars.
func FindPeriod(obs []Obs) (Period, error) {
	var readings []numeric.Reading
	first, last := math.Inf(1), math.Inf(-1)
	for _, o := range obs {
		if err := o.check(); err != nil {
			return Period{}, err
		}
		if !o.Limit {
			readings = append(readings, numeric.Reading{T: o.JD, Value: o.Mag, Sigma: o.sigma()})
			first, last = math.Min(first, o.JD), math.Max(last, o.JD)
		}
	}
	longest := math.Min(mostPeriodD, (last-first)/leastCovered)
	if len(readings) < leastForPeriod || !(longest > leastPeriodD) {
		return Period{}, ErrFewObs
	}
	p, err := numeric.LombScargle(readings, numeric.Frequencies{Lo: 1 / longest, Hi: 1 / leastPeriodD})
	if err != nil || p.Best <= 0 {
		return Period{}, ErrFewObs
	}
	return Period{Days: 1 / p.Best, SigmaD: p.BestSigma / (p.Best * p.Best), FalseAlarm: p.FalseAlarm, AmplitudeMag: p.Amplitude}, nil
}

// medianMag returns the median of the magnitudes that are not limits; NaN
// where there is none.
func medianMag(obs []Obs) float64 {
	var mags []float64
	for _, o := range obs {
		if !o.Limit {
			mags = append(mags, o.Mag)
		}
	}
	q, err := numeric.Quantiles(mags, 0.5)
	if err != nil {
		return math.NaN()
	}
	return q[0]
}
