// Package tracks knows how single stars evolve: the published formulas for
// luminosity, radius and duration of every phase from the main sequence to the
// white dwarf, tracks with mass loss, and a grid that says which phases put
// stars at a place of the diagram, how often, and at what mass and age. It
// judges no target, reads no list and knows no band of light. It refuses
// binaries, the winds of massive stars and what is left of a supernova.
//
// Units throughout: solar mass, luminosity and radius; megayears; kelvin.
// Logarithms named Log are to base 10.
package tracks

import (
	"errors"
	"math"
)

// What the formulas cannot be asked.
var (
	ErrMetallicity = errors.New("metallicity Z outside 0.0001 to 0.03, the range of the evolution formulas")
	ErrMass        = errors.New("mass outside 0.1 to 50 solar masses, the range of the evolution formulas")
	ErrLoss        = errors.New("mass-loss factor outside 0 to 3")
	ErrRecipe      = errors.New("recipe of the population grid has no stars, no ages or metallicities out of order")
)

// The range of the formulas. Evolution is fitted from 0.5 solar masses up;
// below, the main sequence holds and no star has left it yet.
const (
	LeastZ    = 1e-4
	MostZ     = 0.03
	LeastMass = 0.1 // Msun
	MostMass  = 50. // Msun
)

// solarTeffK is the effective temperature of the Sun (IAU 2015 B3), kelvin.
const solarTeffK = 5772

// pow is x^y for x > 0, quicker than math.Pow and as good to some 1e-14.
func pow(x, y float64) float64 { return math.Exp(y * math.Log(x)) }

func pow10(x float64) float64 { return math.Exp(x * math.Ln10) }

func clamp(x, lo, hi float64) float64 { return math.Max(lo, math.Min(hi, x)) }

// line is the straight line through (x0, y0) and (x1, y1).
func line(x, x0, y0, x1, y1 float64) float64 { return y0 + (y1-y0)*(x-x0)/(x1-x0) }

// poly is c0 + c1 x + c2 x^2 + ...
func poly(c []float64, x float64) float64 {
	s := 0.0
	for i := len(c) - 1; i >= 0; i-- {
		s = s*x + c[i]
	}
	return s
}

// logTeff returns log10 of the effective temperature in kelvin from log L and
// log R.
//
//	log Teff = log 5772 + (log L - 2 log R) / 4
func logTeff(logL, logR float64) float64 { return math.Log10(solarTeffK) + (logL-2*logR)/4 }
