package elements

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"evenfall/astro/cite"
)

// What can be wrong with elements.
var (
	// ErrElements: an epoch or a period that cannot be one.
	ErrElements = errors.New("these are no elements")
	// ErrNoCycle: the quadratic term turns the dates back there, or the count of
	// cycles is beyond what a number can hold.
	ErrNoCycle = errors.New("no cycle falls there")
)

// Value is a number with its one-sigma error.
type Value struct {
	Value   float64
	Err     float64 // 0: not given; half a unit of the last digit is assumed
	Assumed bool    // Err is itself such an assumption
}

// Elements are an ephemeris as published.
type Elements struct {
	Scale  Scale
	Epoch  Value // day, in that scale: phase 0 of cycle 0
	Period Value // day
	Pdot   Value // dP/dt, day per day; an Err of 0 adds nothing
	// Cov is the covariance of epoch and period, day^2, where CovKnown.
	Cov      float64
	CovKnown bool
	// Middle is the date of the middle of the data behind the elements, day in
	// the same scale; 0: unknown. Without a covariance errors grow from there.
	Middle float64
	// Jitter is the wander of the times of close binaries, seconds per decade;
	// see [JitterOf].
	Jitter float64
	// Walk is the independent error of each cycle's length, days; see [WalkOf].
	Walk float64
}

// The limits of what can be elements: days.
const (
	shortestPeriod, longestPeriod = 1e-5, 1e5
	earliestEpoch, latestEpoch    = 2200000.0, 2600000.0
	steepestPdot                  = 0.02
	mostCycles                    = 1e12
)

// Ephemeris is a set of elements that has been looked over.
type Ephemeris struct {
	el      Elements
	t0      float64 // epoch, days since JD 2451545.0
	p, pdot float64
	pivot   float64 // cycle from which errors grow
	Assumed []string
}

// New looks elements over.
//
// Returns:
//   - the ephemeris; Assumed lists in words what errors were assumed.
//   - [ErrElements], with words, for an epoch that is no Julian date, a period
//     outside 1e-5 to 1e5 days, |Pdot| above 0.02, a covariance that no errors
//     allow, or anything that is not a number.
//
// Notes:
//  1. An error of 0 is one not given: half a unit of the last digit of the
//     value, as a float prints it, stands in. Trailing zeros are lost so; read
//     them with [HalfUnit] from the text where there is one.
//
// Checked: TestNewRefuses, TestAssumed.
func New(el Elements) (*Ephemeris, error) {
	no := func(format string, a ...any) (*Ephemeris, error) {
		return nil, fmt.Errorf("%s: %w", fmt.Sprintf(format, a...), ErrElements)
	}
	scale, err := ParseScale(string(el.Scale))
	if err != nil {
		return nil, err
	}
	el.Scale = scale
	if t := el.Epoch.Value; !(t >= earliestEpoch && t <= latestEpoch) {
		return no("epoch %g is no Julian date; write all seven digits before the point", t)
	}
	if p := el.Period.Value; !(p >= shortestPeriod && p <= longestPeriod) {
		return no("period %g d; write days, more than 0", p)
	}
	if d := el.Pdot.Value; !(math.Abs(d) <= steepestPdot) {
		return no("period change %g; write day per day, e.g. -1e-11", d)
	}
	e := &Ephemeris{}
	e.assume(&el.Epoch, "epoch")
	e.assume(&el.Period, "period")
	el.Pdot.Err = orZero(el.Pdot.Err)
	el.Jitter, el.Walk = orZero(el.Jitter), orZero(el.Walk)
	if math.IsInf(el.Epoch.Err+el.Period.Err+el.Pdot.Err+el.Jitter+el.Walk, 0) {
		return no("an error without bound; leave it out where it is not known")
	}
	if el.CovKnown && !(math.Abs(el.Cov) <= el.Epoch.Err*el.Period.Err*(1+1e-9)) {
		return no("covariance %g; at most the product of the errors of epoch and period", el.Cov)
	}
	e.el, e.t0, e.p, e.pdot = el, el.Epoch.Value-2451545, el.Period.Value, el.Pdot.Value
	if el.Middle != 0 && !el.CovKnown {
		if !(el.Middle >= earliestEpoch && el.Middle <= latestEpoch) {
			return no("middle of the data %g is no Julian date; leave it out where it is not known", el.Middle)
		}
		if e.pivot, err = e.CycleAt(el.Middle); err != nil {
			return no("middle of the data %g lies where no cycle falls", el.Middle)
		}
	}
	return e, nil
}

// orZero returns a size, and 0 for what is none.
func orZero(v float64) float64 {
	if v = math.Abs(v); v > 0 {
		return v
	}
	return 0
}

// assume fills in an error that was not given.
func (e *Ephemeris) assume(v *Value, what string) {
	v.Err = orZero(v.Err)
	if v.Err == 0 {
		v.Err, _ = HalfUnit(strconv.FormatFloat(v.Value, 'f', -1, 64))
		v.Assumed = true
	}
	if v.Assumed {
		e.Assumed = append(e.Assumed, fmt.Sprintf("error of the %s assumed, %.2g d: half a unit of its last digit", what, v.Err))
	}
}

// HalfUnit returns half a unit of the last digit of a number as it is printed.
//
// Given:
//   - text: e.g. 2443727.93729 (5e-6), 70 (0.5), 1.5e-3 (5e-5).
//
// Returns:
//   - ok false where the text is no decimal number.
//
// Checked: TestHalfUnit.
func HalfUnit(text string) (half float64, ok bool) {
	text = strings.TrimSpace(text)
	if v, err := strconv.ParseFloat(text, 64); err != nil || math.IsNaN(v) || math.IsInf(v, 0) || strings.ContainsAny(text, "xXpP_") {
		return 0, false
	}
	mantissa, exponent, _ := strings.Cut(strings.ToLower(text), "e")
	_, decimals, _ := strings.Cut(mantissa, ".")
	power, _ := strconv.Atoi(exponent)
	half = 0.5 * math.Pow(10, float64(power-len(decimals)))
	return half, half > 0 && !math.IsInf(half, 0)
}

// Elements returns the elements, errors filled in.
func (e *Ephemeris) Elements() Elements { return e.el }

// Date returns the date of a cycle.
//
//	T(E) = T0 + P E + P Pdot E^2 / 2
//
// Given:
//   - cycle: E; a fraction is a phase within the cycle.
//
// Returns:
//   - day, in the elements' scale; the float resolves 40 microseconds.
//
// Checked: TestQuadratic: P = 0.1 d, Pdot = -1e-11, E = 1e5: -432 s.
func (e *Ephemeris) Date(cycle float64) float64 { return 2451545 + e.days(cycle) }

func (e *Ephemeris) days(cycle float64) float64 {
	return e.t0 + e.p*cycle*(1+e.pdot*cycle/2)
}

// CycleAt returns the cycle, with its phase as fraction, at a date: the
// inverse of Date.
//
//	E = 2 x / (1 + sqrt(1 + 2 Pdot x)),   x = (t - T0)/P
//
// Given:
//   - jd: day, in the elements' scale.
//
// Returns:
//   - [ErrNoCycle] where the quadratic term has turned the dates back, and for
//     more than 1e12 cycles or a date that is not a number.
//
// Notes:
//  1. This form does not lose digits where Pdot is small or 0.
//
// Checked: TestInverse, to 1e-8 of a cycle or the date's own resolution.
func (e *Ephemeris) CycleAt(jd float64) (float64, error) {
	return e.cycle(jd - 2451545)
}

func (e *Ephemeris) cycle(days float64) (float64, error) {
	x := (days - e.t0) / e.p
	under := 1 + 2*e.pdot*x
	if !(under > 0) || !(math.Abs(x) <= mostCycles) {
		return 0, ErrNoCycle
	}
	return 2 * x / (1 + math.Sqrt(under)), nil
}

// Next returns the first cycle whose phase falls after a date.
//
// Given:
//   - jd: day, in the elements' scale.
//   - phase: cycles, any number; 0 for the epoch's own event.
//
// Returns:
//   - E, whole number plus phase: [Ephemeris.Date] of it is later than jd, and
//     that of one cycle before is not.
//   - [ErrNoCycle].
//
// Checked: TestNext, FuzzElements.
func (e *Ephemeris) Next(jd, phase float64) (float64, error) {
	at, err := e.CycleAt(jd)
	if err != nil || math.IsNaN(phase) || math.IsInf(phase, 0) {
		return 0, ErrNoCycle
	}
	phase -= math.Floor(phase)
	whole := math.Floor(at-phase) - 1
	for range 4 { // rounding may set the count off by one either way
		if e.Date(whole+phase) > jd {
			break
		}
		whole++
	}
	if !(e.Date(whole+phase) > jd) || e.turned(whole+phase) {
		return 0, ErrNoCycle
	}
	return whole + phase, nil
}

// turned tells whether the quadratic term has turned the dates back.
func (e *Ephemeris) turned(cycle float64) bool { return 1+e.pdot*cycle <= 0 }

// Sigma returns the uncertainty of the date of a cycle.
//
//	s^2 = s0^2 + (E sP)^2 + (P E^2 sPdot / 2)^2 + 2 E cov
//	      + |E| e^2 + jitter^2 + 35 s^2 for HJD
//
// Given:
//   - cycle: E.
//
// Returns:
//   - one sigma, days.
//
// Notes:
//  1. Where the covariance is unknown and the middle of the data is known, E
//     counts from there.
//  2. |E| e^2: each cycle's length has an error of its own, so that the phase
//     wanders as a random walk, with the root of the cycles and not with them.
//  3. The jitter grows with the time since the epoch (or the middle).
//
// Source: [cite.EddingtonPlakidis1929] for the walk; the rest is propagation
// of errors.
//
// Checked: TestSigma, TestWalk, against values worked for P = 331.96 d.
func (e *Ephemeris) Sigma(cycle float64) float64 {
	n := cycle - e.pivot
	el := &e.el
	sp, sd := n*el.Period.Err, e.p*n*n*el.Pdot.Err/2
	decades := math.Abs(e.p*n) / 3652.5
	jitter, extra := el.Jitter*decades/86400, el.Scale.extraD()
	v := el.Epoch.Err*el.Epoch.Err + sp*sp + sd*sd + math.Abs(n)*el.Walk*el.Walk + jitter*jitter + extra*extra
	if el.CovKnown {
		v += 2 * n * el.Cov
	}
	return math.Sqrt(math.Max(v, 0))
}

// Status tells how far an event's date can be trusted.
type Status string

// The statuses.
const (
	Good    Status = "good"
	Assumed Status = "assumed" // an error of the elements was assumed
	Expired Status = "expired" // uncertain by more than a tenth of the period
)

// expiredCycles is the uncertainty beyond which a date says nothing, cycles.
const expiredCycles = 0.1

// lostCycles is the wander, cycles, beyond which the phase is any.
const lostCycles = 0.25

// StatusOf returns the status of a cycle's date.
//
// Checked: TestStatus.
func (e *Ephemeris) StatusOf(cycle float64) Status {
	switch {
	case !(e.Sigma(cycle) <= expiredCycles*e.p):
		return Expired
	case len(e.Assumed) > 0:
		return Assumed
	}
	return Good
}

// Lost tells whether the walk alone has lost the phase: n e^2 > (P/4)^2.
//
// Source: [cite.EddingtonPlakidis1929] for the walk; the limit is common
// practice, no source.
//
// Checked: TestWalk.
func (e *Ephemeris) Lost(cycle float64) bool {
	return math.Sqrt(math.Abs(cycle-e.pivot))*e.el.Walk > lostCycles*e.p
}

// walkPerPeriod is the error of a single cycle's length over the period, mean
// of Mira, semiregular and RV Tauri stars, 0.0136 +- 0.0005.
const walkPerPeriod = 0.0136

// WalkOf returns the default error of a single cycle's length of a long-period
// variable.
//
//	e = 0.0136 P
//
// Given and returned in the same unit, days; 0 for a period that is none.
//
// Notes:
//  1. Single stars have 0.01 to 0.04 P, poorly regular ones 0.06 P (from
//     memory, not checked against a publication).
//
// Source: [cite.TurnerEtAl2009].
//
// Checked: TestWalk.
func WalkOf(periodD float64) float64 { return walkPerPeriod * orZero(periodD) }

// WalkSource names the work behind [WalkOf].
var WalkSource = cite.TurnerEtAl2009.String()

// How the times of binaries with a white dwarf that came through a common
// envelope wander, seconds per decade; from memory, not checked against a
// publication.
const (
	jitterUsual   = 5.0
	jitterV471Tau = 100.0
	jitterNNSer   = 50.0
)

// JitterSource says where [JitterOf] comes from.
const JitterSource = "from memory, not checked against a publication"

// JitterOf returns the wander of the times of a close binary with a white
// dwarf, beside what its elements say.
//
// Given:
//   - name: V471 Tau and NN Ser are known to wander more; case, blanks and
//     underscores do not count.
//
// Returns:
//   - seconds per decade: 5; 100 for V471 Tau, 50 for NN Ser. From memory, not
//     checked against a publication.
func JitterOf(name string) float64 {
	key := strings.NewReplacer(" ", "", "_", "").Replace(strings.ToLower(name))
	switch key {
	case "v471tau":
		return jitterV471Tau
	case "nnser":
		return jitterNNSer
	}
	return jitterUsual
}

// durationOf turns days into a duration; beyond 290 years it stops there.
func durationOf(days float64) time.Duration {
	const most = 106000
	return time.Duration(math.Round(math.Max(-most, math.Min(most, days)) * 86400e9))
}
