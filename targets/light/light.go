// Package light says how bright a target should be at an instant, as a
// distribution with its interval, and when its dated happenings fall: steady
// stars by their catalogue carried between bands, long-period variables by a
// filter that magnitudes teach, interacting binaries as states that the latest
// magnitudes make likelier or not, nebulae in the light of a line. It never
// averages states, never goes outside the range of a relation, lets no
// magnitude teach an instant before it was taken, and says why where it can
// say nothing.
package light

import (
	"fmt"
	"math"
	"strings"
	"sync"

	"evenfall/astro"
	"evenfall/targets"
)

// DefaultLevel is the probability of a brightness interval.
const DefaultLevel = 0.8

// Ask is what is asked of a forecast.
type Ask struct {
	Band  targets.Band // "": the best known; nebulae answer in a line for any broad band
	Level float64      // probability of the interval; 0: DefaultLevel
	// AsOf is the instant up to which magnitudes teach; zero: the instant of
	// the forecast itself. A chart of the past as it is understood now sets it.
	AsOf astro.Instant
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
// together; elsewhere Mag is the median of the whole. Quantile and CDF hand on
// the whole distribution.
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

	dist    distribution
	maximum *maximum // the next one of a long-period variable
}

// query is a question put to a model.
type query struct {
	t     astro.Instant
	band  targets.Band
	level float64 // valid
	n     int     // that many of the readings teach
}

// model is one way of forecasting.
type model interface {
	at(q query) Forecast
	// judge says what is made of each of the first n readings.
	judge(n int) []verdict
	// tick is for how long a forecast holds, days; 0: work it out each time.
	tick() float64
}

// State is a target made ready to be forecast: what its list and its measured
// magnitudes taught. It is safe for use by several goroutines.
type State struct {
	t        targets.Target
	model    model
	readings []reading // oldest first
	note     string    // of unconfirmed values
	timed    []timed   // what its elements date

	mu   sync.Mutex
	memo map[memoKey]Forecast
}

// memoKey names a forecast that is kept.
type memoKey struct {
	tick  float64
	band  targets.Band
	level float64
	n     int
}

// forever is the tick of what the date does not change, days.
const forever = 1e9

// mostKept is how many forecasts are kept before the store is emptied.
const mostKept = 256

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

// until returns how many readings are no later than an instant.
func (s *State) until(t astro.Instant) int {
	n := len(s.readings)
	for n > 0 && s.readings[n-1].at.After(t) {
		n--
	}
	return n
}

// At returns the brightness expected at an instant.
//
// Given:
//   - t: the instant. Magnitudes later than it, or than ask.AsOf, teach nothing.
//   - ask: band and level; a level outside 0 to 1 is taken as DefaultLevel.
//
// Returns:
//   - a forecast in the band asked, or in the best known one; Known is false
//     and Basis says why where nothing can be said.
//
// Notes:
//  1. That of a long-period variable is worked out for every thousandth of its
//     period, 0.01 mag at most of its curve, and kept.
//
// Checked: TestConstant, TestLongPeriod, TestStates, TestNebula, FuzzLight.
func (s *State) At(t astro.Instant, ask Ask) Forecast {
	level := ask.Level
	if !(level > 0 && level < 1) {
		level = DefaultLevel
	}
	asOf := ask.AsOf
	if asOf.IsZero() {
		asOf = t
	}
	n := s.until(asOf)
	f := s.forecast(query{t, ask.Band, level, n})
	f.Level = level
	if f.Known && math.IsNaN(f.Mag.Mags()+f.Lo.Mags()+f.Hi.Mags()) {
		f = Forecast{Band: f.Band, Level: level, Basis: "the listed values are no magnitudes"}
	}
	f.Basis += s.note + s.passedOver(n)
	return f
}

// forecast asks the model, or what it said before.
func (s *State) forecast(q query) Forecast {
	tick := s.model.tick()
	if !(tick > 0) {
		return s.model.at(q)
	}
	s.mu.Lock()
	defer s.mu.Unlock()
	k := memoKey{math.Round(q.t.JDUTC() / tick), q.band, q.level, q.n}
	at := q.t
	if tick < forever {
		at = q.t.Add(days(k.tick*tick - q.t.JDUTC()))
		if last := s.newest(q.n); at.Before(last) && !q.t.Before(last) {
			at, k.tick = last, k.tick+0.25 // not rounded to before what teaches
		}
	}
	f, ok := s.memo[k]
	if !ok {
		if s.memo == nil || len(s.memo) >= mostKept {
			s.memo = map[memoKey]Forecast{}
		}
		if tick < forever {
			q.t = at
		}
		f = s.model.at(q)
		s.memo[k] = f
	}
	return f
}

// newest returns when the last of the first n readings was taken; the zero
// instant: there is none.
func (s *State) newest(n int) astro.Instant {
	for ; n > 0; n-- {
		if r := &s.readings[n-1]; r.why == "" {
			return r.at
		}
	}
	return astro.Instant{}
}

// passedOver says how many magnitudes did not count.
func (s *State) passedOver(n int) string {
	bad := 0
	for i := range s.readings[:n] {
		if s.readings[i].why != "" {
			bad++
		}
	}
	words := ""
	if bad > 0 {
		words += fmt.Sprintf("; %s set aside", counted(bad, "magnitude"))
	}
	if late := len(s.readings) - n; late > 0 {
		words += fmt.Sprintf("; %s later than this not used", counted(late, "magnitude"))
	}
	return words
}

// counted writes a number of things.
func counted(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// unknown is the forecast where nothing can be said.
func unknown(band targets.Band, why string) Forecast { return Forecast{Band: band, Basis: why} }

// usable tells whether a measure is a number that can be computed with.
func usable(m targets.Measure) bool {
	return m.Known && !math.IsNaN(m.Value) && math.Abs(m.Value) < 1e9
}
