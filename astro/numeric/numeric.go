// Package numeric finds roots and minima, interpolates, integrates and fits.
// Every iteration has a limit and every failure a value of its own; nothing
// here prints, waits or guesses. It knows no astronomy: units are the caller's.
// It refuses to extrapolate and to go on with what is not a number.
package numeric

import (
	"errors"
	"math"
)

// What can go wrong. Callers compare with errors.Is.
var (
	// ErrNoBracket: the function has the same sign at both ends, so that a root
	// between them is not certain.
	ErrNoBracket = errors.New("same sign at both ends; give an interval across which the sign changes")
	// ErrLimit: the wanted closeness was not reached within the limit of steps;
	// the value returned is the best so far.
	ErrLimit = errors.New("not reached within the limit of steps; ask for a wider tolerance")
	// ErrNotANumber: the function, or what was given, is not a number somewhere.
	ErrNotANumber = errors.New("not a number; keep the function to where it is defined")
	// ErrInterval: an end of the interval is infinite, or the ends coincide.
	ErrInterval = errors.New("no finite interval; give two different finite ends")
	// ErrData: too few points, lengths that differ, or abscissae out of order.
	ErrData = errors.New("data do not fit together; give lists of one length, abscissae increasing")
	// ErrStraight: three points on a line, or two in one place, have no vertex.
	ErrStraight = errors.New("points on a line have no vertex; give three that bend")
	// ErrSingular: the columns of a fit depend on each other.
	ErrSingular = errors.New("columns depend on each other; leave one out or add data")
)

// epsilon is the spacing of doubles at 1, 2^-52.
const epsilon = 0x1p-52

// finite tells whether every value is a finite number.
func finite(values ...float64) bool {
	for _, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}

// notNegative returns tol, or 0 where tol is negative or not a number.
func notNegative(tol float64) float64 {
	if tol > 0 {
		return tol
	}
	return 0
}
