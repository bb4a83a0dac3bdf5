// Package nebular knows planetary nebulae: what their line fluxes say of dust,
// brightness, distance, age and mass, of the star within, and of whether they
// are what they seem. It takes fluxes and angles and gives numbers with their
// errors, where anybody has published any. It knows no target and no list, and
// it refuses fluxes, distances and temperatures that cannot be.
package nebular

import (
	"errors"
	"fmt"
	"math"
)

// ErrInput says that something given is not a number, or cannot be.
var ErrInput = errors.New("not a number, or out of all bounds")

// FromMemory stands where a source would, for numbers that nobody has held
// against a publication.
const FromMemory = "from memory, not checked against a publication"

// CommonPractice stands where a source would, for habits of the trade.
const CommonPractice = "common practice, no source"

const (
	// arcsec2PerSr is a steradian in square seconds of arc.
	arcsec2PerSr = 4.254517e10
	// arcsecPerRad is a radian in seconds of arc.
	arcsecPerRad = 206265
	// mostLogFlux bounds |log F|, F in erg/s/cm2; mostLength angles and
	// distances in any unit in use here.
	mostLogFlux, mostLength = 60, 1e12
)

// bad makes an error that names what was given.
func bad(what string, v ...float64) error { return fmt.Errorf("%s %v: %w", what, v, ErrInput) }

// positive tells whether every value is above 0 and not absurd.
func positive(values ...float64) bool {
	for _, v := range values {
		if !(v > 0 && v < mostLength && 1/v < mostLength) {
			return false
		}
	}
	return true
}

// isFlux tells whether every value may be the logarithm of a flux.
func isFlux(values ...float64) bool {
	for _, v := range values {
		if !(math.Abs(v) <= mostLogFlux) {
			return false
		}
	}
	return true
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
