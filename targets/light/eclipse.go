package light

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/astro/timescale"
	"evenfall/targets"
)

// eclipse is a binary whose eclipses the list times.
type eclipse struct {
	star            frame.Star
	scale           string
	epoch, period   float64 // d
	pdot            float64 // d/d
	eEpoch, ePeriod float64 // d
	halfMin         float64 // half the duration, min
	mag, sd         float64 // in eclipse
	assumed         bool    // an error was taken from the last digit printed
}

// jitterPerDecade is the wander of eclipse times of close binaries, seconds;
// from memory, not checked against a publication.
const jitterPerDecade = 5.0

// hjdScatter stands for heliocentric dates whose own time scale is not said.
const hjdScatterS = 35.0

// newEclipse prepares an eclipsing binary; nil: its eclipses are not timed.
// Without a duration they are dated, but the light is not forecast by them.
func newEclipse(t targets.Target) *eclipse {
	v := &t.Var
	if !usable(v.PeriodD) || v.PeriodD.Value <= 0 || !usable(v.EpochMinJD) {
		return nil
	}
	e := &eclipse{scale: v.TimeScale, epoch: v.EpochMinJD.Value, period: v.PeriodD.Value, pdot: v.PdotDD.Value,
		eEpoch: math.Abs(v.EpochMinJD.Err), ePeriod: math.Abs(v.PeriodD.Err), mag: v.MagMin.Value, sd: 0.5}
	if usable(v.EclipseMin) && v.EclipseMin.Value > 0 {
		e.halfMin = v.EclipseMin.Value / 2
	}
	e.assumed = v.EpochMinJD.Assumed || v.PeriodD.Assumed
	e.star = frame.NewStar(frame.Catalogue{RA: t.Place.RA, Dec: t.Place.Dec, EpochJyr: t.Place.EpochJyr})
	return e
}

// timing is where a binary is between eclipses.
type timing struct {
	phase float64 // cycles from mid-eclipse, -0.5 to 0.5
	sigma float64 // cycles
	cycle float64 // number of the nearest eclipse
}

// at returns where the binary is.
//
//	T(E) = T0 + P E + P Pdot E^2 / 2;  sigma^2 = s0^2 + (E sP)^2 + wander
//
// Notes:
//  1. The instant is carried to the barycentre, or to the Sun where the epoch
//     is heliocentric; dates marked plain HJD get 35 s in quadrature.
//
// Source: common practice, no source.
func (e *eclipse) at(t astro.Instant) timing {
	earth := frame.EarthAt(t)
	n := e.star.Direction(t)
	const auDays = 499.004783836 / 86400
	date := 2451545 + t.DaysTT() + timescale.TDBMinusTT(t)/86400 + earth.Bary.Dot(n)*auDays
	extra := 0.0
	switch e.scale {
	case "BJD_TDB":
	case "HJD_TT":
		date = t.JDTT() + earth.Helio.Dot(n)*auDays
	case "JD_UTC":
		date = t.JDUTC()
	default: // HJD, HJD_UTC
		date = t.JDUTC() + earth.Helio.Dot(n)*auDays
		extra = hjdScatterS / 86400
	}
	cycle := math.Round((date - e.epoch) / e.period)
	off := date - (e.epoch + e.period*cycle + e.period*e.pdot*cycle*cycle/2)
	years := math.Abs(date-e.epoch) / 365.25
	wander := jitterPerDecade * years / 10 / 86400
	sigma := math.Sqrt(e.eEpoch*e.eEpoch + cycle*cycle*e.ePeriod*e.ePeriod + extra*extra + wander*wander)
	phase := off / e.period
	return timing{phase - math.Round(phase), sigma / e.period, cycle}
}

// expiredCycles is the uncertainty of phase beyond which an ephemeris says
// nothing any more.
const expiredCycles = 0.1

// overlay adds the eclipse to the states that a star is in outside it.
func (e *eclipse) overlay(t astro.Instant, list []state) ([]state, string) {
	half := e.halfMin / 1440 / e.period
	at := e.at(t)
	p, words := math.Min(2*half, 1), "; ephemeris expired, eclipses at any time"
	if at.sigma < expiredCycles && half < 0.5 {
		sd := math.Max(at.sigma, 1e-9)
		p = 0.5 * (math.Erf((half-at.phase)/(sd*math.Sqrt2)) - math.Erf((-half-at.phase)/(sd*math.Sqrt2)))
		words = fmt.Sprintf("; %+.3f cycle from mid-eclipse, +- %.0f s", at.phase, at.sigma*e.period*86400)
	}
	p = math.Max(0, math.Min(1, p))
	out := make([]state, 0, len(list)+1)
	for _, s := range list {
		s.p *= 1 - p
		out = append(out, s)
	}
	return append(out, state{"in eclipse", p, e.mag, e.sd}), words
}
