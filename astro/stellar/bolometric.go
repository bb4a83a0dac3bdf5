package stellar

import (
	"fmt"
	"math"
)

// The temperatures that the bolometric corrections hold for, K. The upper end
// of BC_V is where its tables of hot stars thin out: common practice, no source.
const (
	bcgLoK, bcgSplitK, bcgHiK = 3300, 4000, 8000
	bcvLoK, bcvHiK            = 3300, 50000
)

// BCG returns the bolometric correction of Gaia's G, and its error.
//
//	Mbol = M_G + BC_G;  BC_G = Σ a_i (Teff - 5772)^i, in two pieces parted at 4000 K
//
// Given:
//   - teffK: 3300 to 8000.
//
// Returns:
//   - the correction and one sigma, magnitudes; pair it with [MbolSun].
//   - [NoCalibration] outside.
//
// Notes:
//  1. For solar metals and the G of DR2. The pieces part by 0.0036 at 4000 K.
//
// Source: [cite.AndraeEtAl2018], table 4; two copies agree.
//
// Checked: TestBCG, to 1e-4.
func BCG(teffK float64) (bc, sigma float64, err error) {
	if err := within("BC of G", "Teff in K", teffK, bcgLoK, bcgHiK); err != nil {
		return math.NaN(), math.NaN(), err
	}
	d := teffK - TeffSunK
	if teffK >= bcgSplitK {
		return poly(d, 6.000e-2, 6.731e-5, -6.647e-8, 2.859e-11, -7.197e-15),
			poly(d, 2.634e-2, 2.438e-5, -1.129e-9, -6.722e-12, 1.635e-15), nil
	}
	return poly(d, 1.749, 1.977e-3, 3.737e-7, -8.966e-11, -4.183e-14),
		poly(d, -2.487, -1.876e-3, 2.128e-7, 3.807e-10, 6.570e-14), nil
}

// BCV returns the bolometric correction of V.
//
//	Mbol = M_V + BC_V;  BC_V = Σ a_i (log Teff)^i, in three pieces parted at 3.70 and 3.90
//
// Given:
//   - teffK: 3300 to 50000.
//
// Returns:
//   - the correction, magnitudes; [NoCalibration] outside.
//
// Notes:
//  1. Pair it with [MbolSunFlower], 4.73, and not with 4.74: for the Sun it
//     gives -0.081. [LogLFromV] does.
//
// Source: [cite.Flower1996] with the coefficients of [cite.Torres2010]; nine
// copies agree.
//
// Checked: TestBCV, to the digits printed.
func BCV(teffK float64) (float64, error) {
	if err := within("BC of V", "Teff in K", teffK, bcvLoK, bcvHiK); err != nil {
		return math.NaN(), err
	}
	l := math.Log10(teffK)
	switch {
	case l < 3.70:
		return poly(l, -0.190537291496456e5, 0.155144866764412e5, -0.421278819301717e4, 0.381476328422343e3), nil
	case l <= 3.90:
		return poly(l, -0.370510203809015e5, 0.385672629965804e5, -0.150651486316025e5, 0.261724637119416e4, -0.170623810323864e3), nil
	}
	return poly(l, -0.118115450538963e6, 0.137145973583929e6, -0.636233812100225e5, 0.147412923562646e5,
		-0.170587278406872e4, 0.788731721804990e2), nil
}

const (
	lpvBCG, lpvAmplitude = -2.2, 3.0
	// The correction of G of red supergiants and its error.
	//
	// Source: [cite.GaiaDR2Documentation].
	SupergiantBCG, SupergiantBCGErr = -0.71, 0.3
	// The correction of K of Miras and its error; from memory, not checked
	// against a publication.
	MiraBCK, MiraBCKErr = 3.0, 0.15
)

// LongPeriodBCG returns the bolometric correction of G of a long-period
// variable of the giant branches.
//
//	-2.2 for amplitudes over 3 mag, else 0.2438 - 0.25155 C - 0.11433 C²
//
// Given:
//   - bprp: C, mean BP less mean RP, magnitudes; not needed for Mira-like ones.
//   - amplitude: magnitudes; not a number counts as small.
//
// Returns:
//   - the correction; no error was published with it.
//   - [ErrInput] for a C that is not a number or outside 0 to 8.
//
// Source: [cite.GaiaDR2Documentation], as used for the variables of that
// release.
//
// Checked: TestLongPeriodBCG.
func LongPeriodBCG(bprp, amplitude float64) (float64, error) {
	if amplitude > lpvAmplitude && !math.IsInf(amplitude, 0) {
		return lpvBCG, nil
	}
	if !(bprp >= 0 && bprp <= 8) {
		return math.NaN(), fmt.Errorf("mean BP-RP = %g: %w", bprp, ErrInput)
	}
	return poly(bprp, 0.2438, -0.25155, -0.11433), nil
}

// AGBLimit returns the bolometric magnitude over which a long-period variable
// is no star of the asymptotic giant branch but a red supergiant.
//
//	Mbol = -5.62787 - 0.00383 P + 1.875e-6 P²      P in days
//
// Given:
//   - periodD: 50 to 1000; the parabola turns at 1021 days.
//
// Returns:
//   - the limit; [NoCalibration] outside.
//
// Notes:
//  1. The core cannot grow over its limit, so none gets brighter than about
//     -7.1: from memory, not checked against a publication.
//
// Source: [cite.WoodBessellFox1983], as [cite.GaiaDR2Documentation] has it.
//
// Checked: TestAGBLimit, to 0.001.
func AGBLimit(periodD float64) (float64, error) {
	if err := within("limit of the AGB", "period in days", periodD, 50, 1000); err != nil {
		return math.NaN(), err
	}
	return poly(periodD, -5.62787, -0.00383, 1.875e-6), nil
}

// LogLFromMbol returns log10 of the luminosity in suns: 0.4 (4.74 - Mbol).
//
// Source: [cite.IAU2015B2].
//
// Checked: TestWorkedStar.
func LogLFromMbol(mbol float64) float64 { return 0.4 * (MbolSun - mbol) }

// LogLFromG returns log10 of the luminosity in suns from the absolute
// magnitude in G.
//
//	0.4 (4.74 - M_G - BC_G)
//
// Returns:
//   - log L and what the error of the correction makes of it, dex.
//   - [NoCalibration], as for [BCG].
//
// Source: [cite.AndraeEtAl2018].
//
// Checked: TestWorkedStar.
func LogLFromG(absG, teffK float64) (logL, sigmaDex float64, err error) {
	bc, s, err := BCG(teffK)
	if err != nil {
		return math.NaN(), math.NaN(), err
	}
	if !finite(absG) {
		return math.NaN(), math.NaN(), fmt.Errorf("M_G = %g: %w", absG, ErrInput)
	}
	return LogLFromMbol(absG + bc), 0.4 * s, nil
}

// LogLFromV returns log10 of the luminosity in suns from the absolute
// magnitude in V.
//
//	0.4 (4.73 - M_V - BC_V)
//
// Returns:
//   - log L; [NoCalibration], as for [BCV].
//
// Source: [cite.Torres2010].
//
// Checked: TestBCV.
func LogLFromV(absV, teffK float64) (float64, error) {
	bc, err := BCV(teffK)
	if err != nil {
		return math.NaN(), err
	}
	if !finite(absV) {
		return math.NaN(), fmt.Errorf("M_V = %g: %w", absV, ErrInput)
	}
	return 0.4 * (MbolSunFlower - absV - bc), nil
}

// AbsGFromLogL returns the absolute magnitude in G of a luminosity: the inverse
// of [LogLFromG].
//
// Source: [cite.AndraeEtAl2018].
//
// Checked: TestInverseProperty.
func AbsGFromLogL(logL, teffK float64) (float64, error) {
	bc, _, err := BCG(teffK)
	if err == nil && !finite(logL) {
		err = fmt.Errorf("log L = %g: %w", logL, ErrInput)
	}
	if err != nil {
		return math.NaN(), err
	}
	return MbolSun - 2.5*logL - bc, nil
}

// AbsVFromLogL returns the absolute magnitude in V of a luminosity: the inverse
// of [LogLFromV].
//
// Source: [cite.Torres2010].
//
// Checked: TestInverseProperty.
func AbsVFromLogL(logL, teffK float64) (float64, error) {
	bc, err := BCV(teffK)
	if err == nil && !finite(logL) {
		err = fmt.Errorf("log L = %g: %w", logL, ErrInput)
	}
	if err != nil {
		return math.NaN(), err
	}
	return MbolSunFlower - 2.5*logL - bc, nil
}
