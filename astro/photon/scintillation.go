package photon

import (
	"math"

	"evenfall/astro"
)

// MedianTurbulence is C_Y of a median night at a median site; sites span 1.30
// to 1.67. Its unit is m^(2/3) s^(1/2).
//
// Source: [cite.OsbornEtAl2015].
const MedianTurbulence = 1.5

// How scintillation falls with height, and below what time it grows no more,
// seconds per metre of aperture (common practice, no source).
const (
	scintHeightM = 8000
	scintCapSM   = 0.1
)

// Scintillation returns the scintillation of a star in one second, a fraction
// of its light.
//
//	σ² = 1e-5 C² D^(-4/3) X³ exp(-2 H/8000) / t          D in m, H in m, t = 1 s
//
// Given:
//   - apertureM: D.
//   - x: airmass; its exponent is that of the mean wind, ±0.25 in σ's 1.5.
//   - heightM: H, of the site.
//   - turbulence: C; 0: 1.5.
//
// Returns:
//   - σ, and the time in seconds, 0.1 D, below which it grows no more.
//
// Notes:
//  1. It falls with the root of time, as photon noise does: a star is limited
//     by the same of both at any time.
//  2. Comparison stars beyond 20 arcsec do not cancel it (common practice, no
//     source): see [Differential].
//  3. Nearly the same in all colours from 0.3 m of aperture.
//
// Source: [cite.OsbornEtAl2015], eq. 7.
//
// Checked: TestScintillation.
func Scintillation(apertureM float64, x astro.Airmass, heightM, turbulence float64) (sigma1, capS float64, err error) {
	if err := first(positive("the aperture", apertureM), within("the airmass", float64(x), 0.99, 50), within("the height in m", heightM, -1000, 10000),
		within("the turbulence", turbulence, 0, 100)); err != nil {
		return math.NaN(), math.NaN(), err
	}
	if turbulence == 0 {
		turbulence = MedianTurbulence
	}
	v := 1e-5 * turbulence * turbulence * math.Pow(apertureM, -4.0/3) * math.Pow(float64(x), 3) * math.Exp(-2*heightM/scintHeightM)
	return math.Sqrt(v), scintCapSM * apertureM, nil
}

// ScintillationYoung returns the older estimate, for comparison: it is what a
// night with C_Y = 0.93 has, below the median.
//
//	σ = 0.09 D^(-2/3) X^1.75 exp(-H/8000) / √(2 t)       D in cm, H in m, t = 1 s
//
// Source: [cite.Young1967], the coefficient as in [cite.DravinsEtAl1998].
//
// Checked: TestScintillation.
func ScintillationYoung(apertureM float64, x astro.Airmass, heightM float64) float64 {
	return 0.09 * math.Pow(apertureM*100, -2.0/3) * math.Pow(float64(x), 1.75) * math.Exp(-heightM/scintHeightM) / math.Sqrt2
}

// Differential returns scintillation against the mean of comparison stars.
//
//	σ √(1 + 1/n)
//
// Given:
//   - stars: n, comparison stars; 0: none, σ unchanged.
func Differential(sigma1 float64, stars int) float64 {
	if stars <= 0 {
		return sigma1
	}
	return sigma1 * math.Sqrt(1+1/float64(stars))
}

// Smear returns what is left of an amplitude when each exposure averages over
// part of the period.
//
//	sin(π t/P) / (π t/P)
//
// Checked: TestSeries.
func Smear(eachS, periodS float64) float64 {
	x := math.Pi * eachS / periodS
	if x == 0 {
		return 1
	}
	return math.Sin(x) / x
}

// AmplitudeNoise returns the mean noise of the amplitude spectrum of a series.
//
//	σ √(π/N)
//
// Notes:
//  1. A period counts as found from 4 times that (common practice, no source).
//
// Checked: TestSeries.
func AmplitudeNoise(sigmaPoint float64, points int) float64 {
	return sigmaPoint * math.Sqrt(math.Pi/float64(max(1, points)))
}

// Cadences: what part of a period, or of an ingress, a cycle of exposure and
// dead time may take at most; seconds for flickering; least share of open
// shutter. Common practice, no source.
const (
	CyclePerPulsation = 1.0 / 10
	CyclePerShape     = 1.0 / 20
	CyclePerIngress   = 1.0 / 5
	FlickeringS       = 10.0
	LeastDuty         = 0.8
)
