package nebular

import "math"

const (
	// yrPcPerKms is the time to cross a parsec at 1 km/s, years.
	yrPcPerKms = 977790
	// EdgeKms is how fast the edge of a nebula moves where nobody has measured
	// it, km/s.
	//
	// Source: [cite.JacobEtAl2013], abstract.
	EdgeKms = 42
	// EdgeErrKms is how uncertain that is. Common practice, no source.
	EdgeErrKms = 10
	// EdgePerLine carries a velocity measured in a line to the edge, between
	// EdgePerLineLo and EdgePerLineHi.
	//
	// Source: the bounds of [cite.SchonbernerEtAl2005]; 1.7 is common practice,
	// no source.
	EdgePerLine, EdgePerLineLo, EdgePerLineHi = 1.7, 1.3, 3.0
)

// Age is how long ago a nebula was let go, years.
type Age struct{ Yr, LoYr, HiYr float64 }

// AgeByDefault returns the age of a nebula whose expansion nobody has measured.
//
//	t = 977790 yr r / v      r in pc, v = 42 ± 10 km/s
//
// Given:
//   - radiusPc: above 0.
//
// Returns:
//   - the age, and the bounds from the velocity's error; [ErrInput].
//
// Source: [cite.JacobEtAl2013].
//
// Checked: TestNebulae.
func AgeByDefault(radiusPc float64) (Age, error) {
	if !positive(radiusPc) {
		return Age{}, bad("radius in pc", radiusPc)
	}
	t := yrPcPerKms * radiusPc
	return Age{t / EdgeKms, t / (EdgeKms + EdgeErrKms), t / (EdgeKms - EdgeErrKms)}, nil
}

// AgeFromLine returns the age of a nebula from half the splitting of a line.
//
//	t = 977790 yr r / (1.7 v)      bounds from 1.3 and 3
//
// Given:
//   - radiusPc: pc; lineKms: expansion velocity measured in a line, km/s, both
//     above 0.
//
// Returns:
//   - the age with its bounds; [ErrInput].
//
// Notes:
//  1. Gas moves slower than the edge does: without the factor ages come out
//     too long.
//
// Source: [cite.SchonbernerEtAl2005].
//
// Checked: TestNebulae.
func AgeFromLine(radiusPc, lineKms float64) (Age, error) {
	if !positive(radiusPc, lineKms) {
		return Age{}, bad("radius in pc and velocity in km/s", radiusPc, lineKms)
	}
	t := yrPcPerKms * radiusPc / lineKms
	return Age{t / EdgePerLine, t / EdgePerLineHi, t / EdgePerLineLo}, nil
}

// massPerFlux is the mass of ionised gas at a flux in H beta of 1e-11
// erg/s/cm2, 1 kpc and 1 electron per cm3, suns: 1e4 K, ten per cent helium, an
// effective recombination coefficient of 3.03e-14 cm3/s.
const massPerFlux = 11.4

// IonisedMass returns the mass of a nebula's ionised gas, suns.
//
//	M = 11.4 F d² / ne      F in 1e-11 erg/s/cm2, d in kpc, ne in 1/cm3
//
// Given:
//   - logF0: log10 of the flux in H beta without dust, erg/s/cm2.
//   - distanceKpc, electronsCm3: above 0.
//
// Returns:
//   - the mass; [ErrInput].
//
// Source: recombination of hydrogen, by [cite.OsterbrockFerland2006]. The
// handbook form has 11.06 in place of 11.4.
//
// Checked: TestIonisedMass, to 4 per cent, the two forms apart.
func IonisedMass(logF0, distanceKpc, electronsCm3 float64) (float64, error) {
	if !isFlux(logF0) || !positive(distanceKpc, electronsCm3) {
		return math.NaN(), bad("log flux, distance and density", logF0, distanceKpc, electronsCm3)
	}
	return massPerFlux * math.Pow(10, logF0+11) * distanceKpc * distanceKpc / electronsCm3, nil
}
