// Package photon turns magnitudes into electrons and electrons into signal to
// noise: zero points, seeing and the images it makes, slits, detectors, noise,
// scintillation; and back: how long to expose, in how many frames, how faint
// one gets, what saturates. It works on numbers alone: it knows no instrument
// by name, no target and no sky.
package photon

import (
	"errors"
	"fmt"
	"math"

	"evenfall/astro"
)

// Planck's constant and the speed of light, erg s and Å/s, and their product.
//
// Source: [cite.BIPM2019], exact.
const (
	planckErgS   = 6.62607015e-27
	lightAngS    = 2.99792458e18
	hcErgAng     = planckErgS * lightAngS
	janskyCGS    = 1e-23
	abZeroJansky = 3631.0
)

// ErrRange says that an argument is not a number in its range.
var ErrRange = errors.New("not a number, or beyond its range")

// fail names what is out of range.
func fail(what string, v float64, want string) error {
	return fmt.Errorf("%s is %v; %s: %w", what, v, want, ErrRange)
}

// positive refuses what is not above 0 and finite.
func positive(what string, v float64) error {
	if !(v > 0) || math.IsInf(v, 0) {
		return fail(what, v, "give a number above 0")
	}
	return nil
}

// within refuses what lies outside a range.
func within(what string, v, lo, hi float64) error {
	if !(v >= lo && v <= hi) {
		return fail(what, v, fmt.Sprintf("give %v to %v", lo, hi))
	}
	return nil
}

// first returns the first error.
func first(errs ...error) error {
	for _, e := range errs {
		if e != nil {
			return e
		}
	}
	return nil
}

// AngstromsAB returns the photons of a source of magnitude 0 in AB.
//
//	N = f_ν / (h λ) = 5.47987e6 / λ                      photons s^-1 cm^-2 Å^-1, λ in Å
//
// Given:
//   - at: above 0.
//
// Source: [cite.BIPM2019] for the constants; 3631 Jy by definition.
//
// Checked: TestZeroPoints.
func AngstromsAB(at astro.Wavelength) float64 {
	return janskyCGS * abZeroJansky / (planckErgS * at.Nm() * 10)
}

// PhotonsPerErg returns how many photons carry one erg.
//
//	λ / (h c)                                            erg^-1
func PhotonsPerErg(at astro.Wavelength) float64 { return at.Nm() * 10 / hcErgAng }

// ZeroPoint is a band above the atmosphere.
type ZeroPoint struct {
	Band        string
	At          astro.Wavelength // effective or mean wavelength
	WidthA      float64          // effective width, Å
	PhotonsA    float64          // of magnitude 0, per s, cm² and Å
	AB          bool             // magnitudes of the band are AB; Vega otherwise
	ABMinusVega float64          // to be added to a Vega magnitude; 0 for AB
}

// Photons returns the photons of magnitude 0 in the whole band, per s and cm².
func (z ZeroPoint) Photons() float64 { return z.PhotonsA * z.WidthA }

// vegaZero is the flux of magnitude 0: wavelength Å, 1e-11 erg/s/cm²/Å, width
// Å, AB - Vega.
//
// Source: [cite.BessellEtAl1998], table A2, whose rows of f_λ and f_ν are said
// to stand interchanged (from memory, not checked against a publication); seen
// as several others print it. Widths differ by 5 to 20 per cent between
// authors; an instrument's measured zero point is better.
var vegaZero = []struct {
	band                   string
	ang, f11, width, abMag float64
}{
	{"U", 3660, 417.5, 660, 0.768}, {"B", 4380, 632.0, 940, -0.122}, {"V", 5450, 363.1, 880, -0.001}, {"R", 6410, 217.7, 1380, 0.184},
	{"I", 7980, 112.6, 1490, 0.442}, {"J", 12200, 31.47, 2130, 0.897}, {"H", 16300, 11.38, 3070, 1.378}, {"K", 21900, 3.961, 3900, 1.885},
}

// abZero are the bands in AB: wavelength Å ([cite.FukugitaEtAl1996]), width Å
// (of the survey's distributed response at 1.3 airmasses, integrated over its
// peak).
var abZero = []struct {
	band       string
	ang, width float64
}{{"u", 3551, 559}, {"g", 4686, 1160}, {"r", 6166, 1111}, {"i", 7480, 1070}, {"z", 8932, 1126}}

// gaiaZero are the bands of Gaia: mean wavelength and width Å, zero points of
// Vega and AB magnitudes.
//
// Source: [cite.RielloEtAl2021]; wavelengths and widths seen in one copy.
var gaiaZero = []struct {
	band                 string
	ang, width, vega, ab float64
}{{"G", 6390.7, 4548.2, 25.6874, 25.8010}, {"BP", 5182.6, 2659.0, 25.3385, 25.3540}, {"RP", 7825.1, 2927.5, 24.7479, 25.1040}}

// ZeroPointOf returns a band's zero point.
//
// Given:
//   - band: U B V R I J H K G BP RP (Vega), u g r i z (AB); case counts.
//
// Returns:
//   - the zero point; false for another name.
//
// Source: [cite.BessellEtAl1998], [cite.FukugitaEtAl1996],
// [cite.RielloEtAl2021].
//
// Checked: TestZeroPoints, against a printed list of photons, 0.2 per cent.
func ZeroPointOf(band string) (ZeroPoint, bool) {
	for _, z := range vegaZero {
		if z.band == band {
			return ZeroPoint{band, astro.Nm(z.ang / 10), z.width, z.f11 * 1e-11 * z.ang / hcErgAng, false, z.abMag}, true
		}
	}
	for _, z := range abZero {
		if z.band == band {
			at := astro.Nm(z.ang / 10)
			return ZeroPoint{band, at, z.width, AngstromsAB(at), true, 0}, true
		}
	}
	for _, z := range gaiaZero {
		if z.band == band {
			at := astro.Nm(z.ang / 10)
			return ZeroPoint{band, at, z.width, AngstromsAB(at) * math.Pow(10, -0.4*(z.ab-z.vega)), false, z.ab - z.vega}, true
		}
	}
	return ZeroPoint{}, false
}

// NarrowZero returns the zero point of a narrow filter, or of one pixel of a
// spectrum, in AB magnitudes.
//
// Given:
//   - widthA: Å, above 0.
func NarrowZero(at astro.Wavelength, widthA float64) (ZeroPoint, error) {
	if err := first(positive("a wavelength", at.Nm()), positive("the width of a filter", widthA)); err != nil {
		return ZeroPoint{}, err
	}
	return ZeroPoint{At: at, WidthA: widthA, PhotonsA: AngstromsAB(at), AB: true}, nil
}

// Area returns the collecting area of a telescope.
//
//	A = π/4 (D² - d²)                                    cm²; D, d in m
//
// Given:
//   - apertureM, obstructionM: diameters, metres; the obstruction smaller.
//
// Checked: TestExamples.
func Area(apertureM, obstructionM float64) (float64, error) {
	if err := first(positive("the aperture", apertureM), within("the obstruction", obstructionM, 0, apertureM)); err != nil {
		return math.NaN(), err
	}
	return math.Pi / 4 * (apertureM*apertureM - obstructionM*obstructionM) * 1e4, nil
}

// ZeroRate returns the electrons that magnitude 0 above the atmosphere gives.
//
//	N A η                                                e/s
//
// Given:
//   - measuredES: the observer's own, e/s; it takes precedence. 0: none.
//   - areaCm2: [Area].
//   - throughput: telescope, optics, filter's peak and detector together,
//     without the atmosphere, 0 to 1.
//
// Returns:
//   - e/s, above 0; an error that says what is missing.
//
// Checked: TestExamples.
func (z ZeroPoint) ZeroRate(measuredES, areaCm2, throughput float64) (float64, error) {
	if measuredES != 0 {
		return measuredES, positive("the zero point", measuredES)
	}
	if err := first(positive("the area", areaCm2), positive("the throughput", throughput), within("the throughput", throughput, 0, 1),
		positive("the band's zero point", z.Photons())); err != nil {
		return math.NaN(), err
	}
	return z.Photons() * areaCm2 * throughput, nil
}

// EffectiveArea returns area times throughput, cm², that a rate for magnitude 0
// stands for, so that lines are counted with a measured zero point too.
func (z ZeroPoint) EffectiveArea(zeroES float64) float64 { return zeroES / z.Photons() }
