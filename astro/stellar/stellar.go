// Package stellar goes from what a catalogue lists of a star, its parallax,
// magnitudes and colours, to its place in the Hertzsprung-Russell diagram:
// distance, extinction, temperature, luminosity, radius and surface gravity,
// each with its error. It knows no target and no list. It refuses to stretch a
// relation past the colours it was made from: there it says which relation, of
// what range, and why, and gives no number.
package stellar

import (
	"errors"
	"fmt"
	"math"

	"evenfall/astro/cite"
)

const (
	// MbolSun is the absolute bolometric magnitude of the Sun.
	//
	// Source: [cite.IAU2015B2].
	MbolSun = 4.74
	// MbolSunFlower goes with [BCV] and with nothing else.
	//
	// Source: [cite.Torres2010].
	MbolSunFlower = 4.73
	// TeffSunK is the effective temperature of the Sun, K.
	//
	// Source: [cite.IAU2015B3].
	TeffSunK = 5772
	// LogGSun is log10 of the Sun's surface gravity in cm/s2.
	//
	// Source: [cite.IAU2015B3].
	LogGSun = 4.438
)

// FromMemory stands where a source would, for numbers that nobody has held
// against a publication.
const FromMemory = "from memory, not checked against a publication"

// CommonPractice stands where a source would, for habits of the trade.
const CommonPractice = "common practice, no source"

// ErrInput says that something given is not a number, or cannot be.
var ErrInput = errors.New("not a number, or out of all bounds")

// Measure is a measured number with one standard error, in the same unit. The
// zero value is one that was not measured.
type Measure struct {
	Value, Err float64
	Known      bool
}

// Measured makes a measure. A value that is not finite is as good as none; an
// error that is negative or not finite counts as 0.
func Measured(value, err float64) Measure {
	if !finite(value) {
		return Measure{}
	}
	if !(err >= 0) || math.IsInf(err, 0) {
		err = 0
	}
	return Measure{value, err, true}
}

// NoCalibration says why a relation gives no number here.
type NoCalibration struct {
	Method   string  // the relation, e.g. "BP-RP of giants"
	Quantity string  // what it starts from, e.g. "(BP-RP)0"
	Value    float64 // what was given; not a number where nothing was
	Lo, Hi   float64 // what the relation holds for
	Reason   string
}

// Error writes it as one line.
func (e *NoCalibration) Error() string {
	if math.IsNaN(e.Value) {
		return fmt.Sprintf("%s: no calibration: %s", e.Method, e.Reason)
	}
	return fmt.Sprintf("%s: no calibration: %s = %.4g, %s; it holds from %.4g to %.4g", e.Method, e.Quantity, e.Value, e.Reason, e.Lo, e.Hi)
}

// within refuses a value outside a relation's range.
func within(method, quantity string, v, lo, hi float64) error {
	switch {
	case !finite(v):
		return &NoCalibration{Method: method, Quantity: quantity, Value: math.NaN(), Lo: lo, Hi: hi, Reason: quantity + " is not known"}
	case v < lo:
		return &NoCalibration{Method: method, Quantity: quantity, Value: v, Lo: lo, Hi: hi, Reason: "below its range"}
	case v > hi:
		return &NoCalibration{Method: method, Quantity: quantity, Value: v, Lo: lo, Hi: hi, Reason: "above its range"}
	}
	return nil
}

// source names a work and what is to be said beside it.
func source(r cite.Ref, note string) string {
	switch {
	case r.IsZero():
		return note
	case note == "":
		return r.String()
	}
	return r.String() + "; " + note
}

// finite tells whether every value is a finite number.
func finite(values ...float64) bool {
	for _, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}

// poly evaluates a polynomial, constant term first.
func poly(x float64, c ...float64) float64 {
	s := 0.0
	for i := len(c) - 1; i >= 0; i-- {
		s = s*x + c[i]
	}
	return s
}

// clamp keeps x between lo and hi.
func clamp(x, lo, hi float64) float64 { return math.Max(lo, math.Min(hi, x)) }
