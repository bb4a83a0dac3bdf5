// Package light says how bright a target should be at an instant, as an
// interval: constant stars by their catalogue, long-period variables by a mean
// curve and the phase that is known, interacting binaries as states, nebulae
// in the light of a line. It never averages states, never goes outside the
// range of a relation, and says why where it can say nothing.
package light

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/stage"
)

// DefaultLevel is the probability of a brightness interval.
const DefaultLevel = 0.8

// Ask is what is asked of a forecast.
type Ask struct {
	Band  targets.Band // "": the best known; nebulae answer in a line for any broad band
	Level float64      // probability of the interval; 0: DefaultLevel
}

// The words for how well a phase is known.
const (
	PhaseKnown     = "known"
	PhaseUncertain = "uncertain"
	PhaseUnknown   = "unknown"
)

// Phase is where in its cycle a variable is: 0 at maximum. Value and Sigma are
// NaN where there is no epoch or period.
type Phase struct {
	Value, Sigma float64 // cycles
	Status       string
}

// StateForecast is one of the states that a star may be in.
type StateForecast struct {
	Name        string
	P           float64 // probability
	Mag, Lo, Hi astro.Mag
}

// Surface is a surface brightness with its interval.
type Surface struct{ Value, Lo, Hi astro.SurfaceMag }

// Step is a figure with its working.
type Step struct{ What, Formula, Inputs, Result, Source string }

// Forecast is an expected brightness. Where States is not empty Mag is the
// median of the likeliest state and Lo to Hi the interval of all of them
// together; elsewhere Mag is the median of the whole.
type Forecast struct {
	Band        targets.Band
	Known       bool // Mag, Lo and Hi are given
	Mag, Lo, Hi astro.Mag
	Level       float64
	Basis       string // what it rests on, or why nothing can be said
	Phase       *Phase
	States      []StateForecast
	SB          *Surface
	Rising      int // +1 brightening, -1 fading, 0 not known
	Steps       []Step
}

// model is one way of forecasting.
type model interface {
	// at returns the forecast for a band; the level is valid.
	at(t astro.Instant, band targets.Band, level float64) Forecast
}

// State is a target made ready to be forecast: what its list and its measured
// magnitudes taught.
type State struct {
	model   model
	note    string // about recent magnitudes
	eclipse *eclipse
	maximum *longPeriod
}

var (
	lpvVariable   = regexp.MustCompile(`^(M|SR[ABCD]?|L[BC]?|SRS)(:|\+|/|$)`)
	rcbVariable   = regexp.MustCompile(`^RCB`)
	rvVariable    = regexp.MustCompile(`^RV`)
	steadyDwarf   = regexp.MustCompile(`^$|^ZZ`)
	withCompanion = regexp.MustCompile(`ZAND|^N|UG|NL|AM|XM|XP|CV|WD|^E`)
)

// NewState prepares a target.
//
// Given:
//   - t: the target; any datum may be missing or absurd.
//   - v: its judgement, unused by the methods for poor data.
//   - mags: measured magnitudes of this target; the newest is named in the
//     basis, none moves the forecast yet.
func NewState(t targets.Target, v stage.Verdict, mags []targets.Magnitude) *State {
	s := &State{note: newest(mags)}
	vt := t.Var.Type
	switch {
	case t.Kind == targets.PN:
		s.model = newNebula(t)
	case rcbVariable.MatchString(vt):
		s.model = newRCB(t)
	case t.Kind == targets.Interacting || (t.Kind != targets.LPV && t.Kind != targets.WD && withCompanion.MatchString(vt) && t.Var.MagMax.Known):
		s.model = newBinary(t)
	case lpvVariable.MatchString(vt) || t.Kind == targets.LPV || rvVariable.MatchString(vt):
		s.model = newLongPeriod(t)
	case !steadyDwarf.MatchString(vt) && t.Var.MagMax.Known && t.Var.MagMin.Known:
		s.model = newRange(t)
	default:
		s.model = newConstant(t)
	}
	s.note = unconfirmed(&t) + s.note
	s.eclipse = newEclipse(t)
	if l, ok := s.model.(*longPeriod); ok {
		s.maximum = l
	}
	return s
}

// unconfirmed says which of the values that a forecast may rest on no open
// source bore out.
func unconfirmed(t *targets.Target) string {
	var list []string
	for _, c := range []string{"mag_max", "mag_min", "period_d", "epoch_max_jd", "epoch_min_jd", "eclipse_min", "log_fhalpha", "log_fhbeta", "log_f5007", "diam_arcsec"} {
		if t.IsUnconfirmed(c) {
			list = append(list, c)
		}
	}
	for _, b := range preferred {
		if t.IsUnconfirmed(string(b)) {
			list = append(list, string(b))
		}
	}
	if len(list) == 0 {
		return ""
	}
	return "; unconfirmed: " + strings.Join(list, " ")
}

// newest names the latest measured magnitude.
func newest(mags []targets.Magnitude) string {
	k := -1
	for i := range mags {
		if k < 0 || mags[i].JD > mags[k].JD {
			k = i
		}
	}
	if k < 0 {
		return ""
	}
	m := &mags[k]
	sign := ""
	if m.Limit {
		sign = "fainter than "
	}
	return fmt.Sprintf("; last measured %s%.2f in %s at JD %.2f, not used in the forecast", sign, m.Mag, m.Band, m.JD)
}

// At returns the brightness expected at an instant.
//
// Given:
//   - t: the instant.
//   - ask: band and level; a level outside 0 to 1 is taken as DefaultLevel.
//
// Returns:
//   - a forecast in the band asked, or in the best known one; Known is false
//     and Basis says why where nothing can be said.
//
// Checked: TestConstant, TestCurve, TestStates, TestNebula, FuzzLight.
func (s *State) At(t astro.Instant, ask Ask) Forecast {
	level := ask.Level
	if !(level > 0 && level < 1) {
		level = DefaultLevel
	}
	f := s.model.at(t, ask.Band, level)
	f.Level = level
	if f.Known && math.IsNaN(f.Mag.Mags()+f.Lo.Mags()+f.Hi.Mags()) {
		f = Forecast{Band: f.Band, Level: level, Basis: "the listed values are no magnitudes"}
	}
	f.Basis += s.note
	return f
}

// unknown is the forecast where nothing can be said.
func unknown(band targets.Band, why string) Forecast { return Forecast{Band: band, Basis: why} }

// usable tells whether a measure is a number that can be computed with.
func usable(m targets.Measure) bool {
	return m.Known && !math.IsNaN(m.Value) && math.Abs(m.Value) < 1e9
}
