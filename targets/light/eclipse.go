package light

import (
	"fmt"
	"math"
	"regexp"

	"evenfall/astro"
	"evenfall/astro/elements"
	"evenfall/targets"
)

// The kinds of events.
const (
	kindEclipse    = elements.KindEclipse
	kindMaximum    = elements.KindMaximum
	kindMinimum    = elements.KindMinimum
	kindQuadrature = elements.KindQuadrature
)

// timed is what one set of a target's elements dates.
type timed struct {
	clock   elements.Clock // at the Earth's centre
	kind    string         // of phase 0
	what    []elements.Happening
	halfMin float64 // half an eclipse, min; 0: not known
	walks   bool    // the phase wanders as a random walk
}

// expiredCycles is the uncertainty of phase beyond which an ephemeris says
// nothing any more.
const expiredCycles = 0.1

// The longest period of a close binary, whose times wander as such do, and
// the shortest of a star whose cycles have lengths of their own. Days.
const closeBinaryD, walkingD = 3.0, 20.0

var eclipsing = regexp.MustCompile(`(^|[/+])E[ABW]?([/+:]|$)`)

// timingsOf makes the clocks of a target, but for long-period variables, whose
// maxima the filter dates.
//
// Notes:
//  1. Phase 0 is mid-eclipse where the star eclipses, else minimum or maximum.
//  2. Catalogues date RV Tauri stars by their minima as often as not, in
//     whichever column: an epoch of maximum is not used for them.
func timingsOf(t *targets.Target) []timed {
	v := &t.Var
	if !usable(v.PeriodD) || miraVariable.MatchString(v.Type) || lpvVariable.MatchString(v.Type) {
		return nil
	}
	var out []timed
	binary := eclipsing.MatchString(v.Type) || usable(v.EclipseMin) || t.Kind == targets.Interacting || t.Kind == targets.WD
	rv := rvVariable.MatchString(v.Type)
	if e := ephemerisOf(t, v.EpochMinJD, binary && !rv); e != nil {
		x := timed{clock: elements.Clock{Sight: elements.Sight{Star: starOf(t)}, Ephemeris: e}, kind: kindMinimum, walks: rv}
		if binary && !rv {
			x.kind = kindEclipse
			x.what = []elements.Happening{elements.Moment(kindEclipse, 0)}
			if d := v.EclipseMin; usable(d) && d.Value > 0 {
				if h, err := e.Eclipse(0, d.Value); err == nil {
					x.what[0], x.halfMin = h, d.Value/2
				}
			}
			x.what = append(x.what, elements.Quadratures()...)
		} else {
			x.what = elements.Extremes(false, rise(v))
		}
		out = append(out, x)
	}
	if e := ephemerisOf(t, v.EpochMaxJD, false); e != nil && !rv {
		what := elements.Extremes(true, rise(v))
		if len(out) > 0 {
			what = what[:1]
		}
		out = append(out, timed{clock: elements.Clock{Sight: elements.Sight{Star: starOf(t)}, Ephemeris: e}, kind: kindMaximum, what: what})
	}
	return out
}

func rise(v *targets.Variability) float64 {
	if usable(v.RiseFraction) {
		return v.RiseFraction.Value
	}
	return 0
}

// ephemerisOf looks a target's elements over; nil: they are none.
func ephemerisOf(t *targets.Target, epoch targets.Measure, eclipses bool) *elements.Ephemeris {
	v := &t.Var
	if !usable(epoch) || !usable(v.PeriodD) {
		return nil
	}
	el := elements.Elements{Scale: elements.Scale(v.TimeScale),
		Epoch:  elements.Value{Value: epoch.Value, Err: epoch.Err, Assumed: epoch.Assumed},
		Period: elements.Value{Value: v.PeriodD.Value, Err: v.PeriodD.Err, Assumed: v.PeriodD.Assumed}}
	if usable(v.PdotDD) {
		el.Pdot = elements.Value{Value: v.PdotDD.Value, Err: v.PdotDD.Err}
	}
	switch {
	case eclipses && v.PeriodD.Value < closeBinaryD:
		el.Jitter = elements.JitterOf(t.Name)
	case !eclipses && clockWalk(v.Type) > 0:
		el.Walk = clockWalk(v.Type) * v.PeriodD.Value
	case !eclipses && v.PeriodD.Value > walkingD:
		el.Walk = elements.WalkOf(v.PeriodD.Value)
	}
	e, err := elements.New(el)
	if err != nil {
		return nil
	}
	return e
}

// The wander of the cycles of stars that pulsate by the clock, of the period
// per root of a cycle: from memory, not checked against a publication.
const rrWalk, cepheidWalk = 0.001, 0.0005

var (
	rrLike      = regexp.MustCompile(`^(RR|DSCT|HADS|SXPHE)`)
	cepheidLike = regexp.MustCompile(`^(CEP|DCEP|CW)`)
)

// clockWalk returns the wander of the cycles of a type of variable, of the
// period; 0: none is known.
//
// Checked: TestClockWalk.
func clockWalk(vartype string) float64 {
	switch {
	case rrLike.MatchString(vartype):
		return rrWalk
	case cepheidLike.MatchString(vartype):
		return cepheidWalk
	}
	return 0
}

// clockOf returns the clock of a kind; nil: there is none.
func clockOf(list []timed, kind string) *timed {
	for i := range list {
		if list[i].kind == kind {
			return &list[i]
		}
	}
	return nil
}

// eclipseSD is how far from the listed minimum an eclipse is at most, mag.
// Common practice, no source.
const eclipseSD = 0.5

// overlay adds the eclipse to the states that a star is in outside it.
func (e *timed) overlay(t astro.Instant, list []state, faint float64) ([]state, string) {
	mag, sd := eclipseOf(list, faint)
	p := e.clock.Ephemeris.Elements().Period.Value
	half := e.halfMin / 1440 / p
	chance, words := math.Min(2*half, 1), "; ephemeris expired, eclipses at any time"
	if _, phase, sigma, err := e.clock.PhaseAt(t); err == nil && sigma < expiredCycles && half < 0.5 {
		phase -= math.Round(phase)
		sd := math.Max(sigma, 1e-9)
		chance = 0.5 * (math.Erf((half-phase)/(sd*math.Sqrt2)) - math.Erf((-half-phase)/(sd*math.Sqrt2)))
		words = fmt.Sprintf("; %+.3f cycle from mid-eclipse, +- %.0f s", phase, sigma*p*86400)
	}
	chance = math.Max(0, math.Min(1, chance))
	out := make([]state, 0, len(list)+1)
	for _, s := range list {
		s.p *= 1 - chance
		out = append(out, s)
	}
	return append(out, state{name: "in eclipse", p: chance, mag: mag, sd: sd}), words
}
