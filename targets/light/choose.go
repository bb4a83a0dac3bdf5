package light

import (
	"regexp"
	"time"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/targets"
	"evenfall/targets/stage"
)

var (
	lpvVariable   = regexp.MustCompile(`^(M|SR[ABCS]?|L[BC]?)(:|\+|/|$)`)
	miraVariable  = regexp.MustCompile(`^M(:|\+|/|$)`)
	fadeVariable  = regexp.MustCompile(`^(RCB|DYPER)`)
	rvVariable    = regexp.MustCompile(`^RV[AB]?(:|\+|/|$)`)
	pulsesByClock = regexp.MustCompile(`^(RR|CEP|DCEP|CW|DSCT|HADS|SXPHE|BCEP)`)
	quickPulser   = regexp.MustCompile(`^ZZ|^RPHS|^V361HYA|^V1093HER|^EC14026|^GWVIR|^DOV|^SDBV`)
	withCompanion = regexp.MustCompile(`ZAND|^N|UG|NL|AM|XM|(^|[^S])XP|CV|WD|^E`)
)

// NewState prepares a target.
//
// Given:
//   - t: the target; any datum may be missing or absurd.
//   - v: its judgement, unused by the methods of today.
//   - mags: measured magnitudes of this target, in any order; bad ones are set
//     aside, see [State.Past].
//
// Notes:
//  1. Microseconds; what is slow is worked out when first asked for and kept.
//
// Checked: TestChoice, TestBuiltinForecasts, FuzzLight.
func NewState(t targets.Target, _ stage.Verdict, mags []targets.Magnitude) *State {
	s := &State{t: t, readings: readingsOf(&t, mags), note: unconfirmed(&t)}
	s.timed = timingsOf(&t)
	s.model = choose(&t, s.readings, s.timed)
	return s
}

// choose picks the way of forecasting.
func choose(t *targets.Target, list []reading, timed []timed) model {
	vt := t.Var.Type
	extremes := usable(t.Var.MagMax) && usable(t.Var.MagMin) && t.Var.MagMin.Value >= t.Var.MagMax.Value
	steady := newSteady(t, list)
	switch {
	case t.Kind == targets.PN:
		return newNebula(*t)
	case fadeVariable.MatchString(vt):
		return newFading(t, list, steady)
	case miraVariable.MatchString(vt): // also where a companion shares the light
		return newLongPeriod(t, list, steady)
	case t.Kind == targets.Interacting || t.Kind != targets.LPV && t.Kind != targets.WD && withCompanion.MatchString(vt):
		return newBinary(t, list, timed, steady)
	case rvVariable.MatchString(vt):
		return newRV(t, list, timed, steady)
	case lpvVariable.MatchString(vt) || t.Kind == targets.LPV || redGiant(t) && vt == "":
		return newLongPeriod(t, list, steady)
	case pulsesByClock.MatchString(vt) && extremes && clockOf(timed, kindMaximum) != nil:
		return &pulsing{t: t, timed: clockOf(timed, kindMaximum), steady: steady, readings: list}
	case t.Kind == targets.WD || quickPulser.MatchString(vt):
		return newPulsator(t, steady)
	case vt != "" && extremes:
		return newBetween(t, list, steady)
	}
	return steady
}

// starOf places a target; its motion matters to no light-time.
func starOf(t *targets.Target) frame.Star {
	return frame.NewStar(frame.Catalogue{RA: t.Place.RA, Dec: t.Place.Dec, EpochJyr: t.Place.EpochJyr})
}

// bandOf turns the band of a catalogue's extremes into one of ours: visual
// estimates stand for V, photographic ones keep their own name.
func bandOf(b string) targets.Band {
	if b == "" || visualNames[targets.Band(b)] {
		return "V"
	}
	if photographicNames[targets.Band(b)] {
		return "p"
	}
	return targets.Band(b)
}

// days turns a number of days into a duration.
func days(d float64) time.Duration { return time.Duration(d * 86400e9) }

// dateWord writes a date as one says it.
func dateWord(t astro.Instant) string { return t.UTC().Format("2 Jan 2006") }
