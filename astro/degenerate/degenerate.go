// Package degenerate knows white dwarfs: how their mass, radius and density go
// together, how they cool and crystallise, what temperature and mass explain
// their Gaia photometry, which star each was, where they pulsate, and when two
// of them merge. It works on numbers and tables of models and knows no list, no
// time and no screen. It never tells a helium atmosphere from a hydrogen one by
// photometry, because that cannot be done, and it gives no progenitor and no
// total age without an interval.
package degenerate

import (
	"errors"
	"math"

	"evenfall/astro"
)

// What can go wrong. Callers compare with errors.Is.
var (
	// ErrNotANumber: something given is not a number, or has the wrong sign.
	ErrNotANumber = errors.New("not a usable number; give finite values, errors and masses positive")
	// ErrTooLittle: fewer than two of magnitude, colour, temperature and gravity.
	ErrTooLittle = errors.New("too little to go on; give two of magnitude with distance, BP-RP, temperature and gravity")
	// ErrDistance: a magnitude came without a usable distance.
	ErrDistance = errors.New("no usable distance; give a parallax with its error, or distances with weights")
	// ErrNoModel: no model of the tables comes near what was seen.
	ErrNoModel = errors.New("no white-dwarf model within ten sigma; the star may be something else")
	// ErrOffTable: outside the masses or temperatures of the models.
	ErrOffTable = errors.New("outside the tables: 0.2 to 1.3 solar masses, 3000 to 100000 K")
	// ErrNoSingleStar: no single star leaves so light a dwarf in time.
	ErrNoSingleStar = errors.New("below 0.55 solar masses no single star leaves a white dwarf within 12 Gyr: binary evolution or error")
	// ErrRelation: outside the range of the initial-final relation.
	ErrRelation = errors.New("outside the range of the initial-final mass relation")
	// ErrMassLimit: no cold star of that mass holds itself up.
	ErrMassLimit = errors.New("at or over the limiting mass; no such white dwarf")
)

// How far a figure without a cited work may be trusted, in words for the user.
const (
	// FromMemory marks a figure that no publication was compared with.
	FromMemory = "from memory, not checked against a publication"
	// CommonPractice marks a figure in use that has no source.
	CommonPractice = "common practice, no source"
)

// Composition is what the outside of a model star is made of.
type Composition int

// The two sets of models.
const (
	Hydrogen Composition = iota // DA, thick hydrogen layer
	Helium                      // DB, thin layers
)

// String names the composition for the user.
func (c Composition) String() string {
	if c == Helium {
		return "helium"
	}
	return "hydrogen"
}

// Prior is what is believed of the mass before the photometry is looked at. It
// is flat in the logarithm of the temperature in either case.
type Prior int

const (
	// WidePrior is 0.72 N(0.60, 0.09) + 0.20 N(0.80, 0.18) + 0.08 N(0.42, 0.10)
	// in solar masses: the one for the answer. Chosen on the stars of
	// [cite.GentileFusilloEtAl2021] so as not to pull heavy stars down.
	WidePrior Prior = iota
	// FlatPrior prefers no mass: the one for comparison with catalogues, whose
	// fits use none.
	FlatPrior
)

// String names the prior for the user.
func (p Prior) String() string {
	if p == FlatPrior {
		return "flat in mass"
	}
	return "wide, as white dwarfs are found"
}

// logDensity is the logarithm of the prior density at a mass, but for a
// constant.
func (p Prior) logDensity(massMsun float64) float64 {
	if p == FlatPrior {
		return 0
	}
	n := func(w, mean, sd float64) float64 {
		d := (massMsun - mean) / sd
		return w / sd * math.Exp(-d*d/2)
	}
	return math.Log(n(0.72, 0.60, 0.09) + n(0.20, 0.80, 0.18) + n(0.08, 0.42, 0.10))
}

// Constants of the Sun.
//
// Source: [cite.IAU2015B3]; the bolometric magnitude is that of the tables of
// models, by which their luminosities are R² T⁴ to 0.1 per cent.
const (
	sunLogG      = 4.438
	sunTeffK     = 5772.0
	sunLogT      = 3.761326 // log 5772
	tableSunMbol = 4.75
)

// Constants of nature in SI.
//
// Source: [cite.TiesingaEtAl2021]; the Sun's GM and radius [cite.IAU2015B3].
const (
	planckJs      = 6.62607015e-34
	lightMs       = 299792458.0
	gravSI        = 6.67430e-11
	electronKg    = 9.1093837015e-31
	atomicMassKg  = 1.66053906660e-27
	sunGM         = 1.3271244e20
	sunRadiusM    = 6.957e8
	sunMassKg     = sunGM / gravSI
	yearS         = 3.15576e7
	secondsInHour = 3600.0
)

// oneSigma is the level of every interval here unless it says otherwise: from
// the 16th to the 84th per cent.
const oneSigma = 0.68

// span makes an interval of one sigma each side.
func span(lo, mid, hi float64) astro.Interval {
	return astro.Interval{Lo: lo, Mid: mid, Hi: hi, Level: oneSigma}
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

// positive tells whether every value is finite and over zero.
func positive(values ...float64) bool {
	for _, v := range values {
		if !(v > 0) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}
