package nebular

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/numeric"
)

const (
	// The range of temperatures of central stars, K, that is searched.
	zanstraLoK, zanstraHiK = 15e3, 500e3
	// photonsPerHb is Lyman photons absorbed per photon of H beta.
	//
	// Source: [cite.OsterbrockFerland2006].
	photonsPerHb = 8.55
	// lymanK is the energy of the Lyman limit over Boltzmann's constant, K.
	lymanK = 15.79e4
	// visualK is that of 5480 Angstrom, K.
	visualK = 1.438777 / 5480e-8
	// hbHz is the frequency of H beta.
	hbHz = 2.99792458e10 / 4861.3e-8
	// zeroFluxV is the flux of V = 0, erg/s/cm2/Hz; from memory, not checked
	// against [cite.BessellEtAl1998].
	zeroFluxV = 3.636e-20
)

// lymanIntegral is ∫ x²/(eˣ-1) from x0 on, as the sum over n of
// e^(-n x0) (x0²/n + 2 x0/n² + 2/n³).
func lymanIntegral(x0 float64) float64 {
	sum := 0.0
	for n := 1.0; n <= 2000; n++ {
		term := math.Exp(-n*x0) * (x0*x0/n + 2*x0/(n*n) + 2/(n*n*n))
		sum += term
		if term < 1e-15*sum {
			break
		}
	}
	return sum
}

// photonRatio is a blackbody's Lyman photons over its flux per hertz at 5480
// Angstrom, times Planck's constant: a pure number.
func photonRatio(teffK float64) float64 {
	v := visualK / teffK
	return math.Expm1(v) / (v * v * v) * lymanIntegral(lymanK/teffK)
}

// ZanstraHI returns the temperature of a central star from what it makes
// hydrogen shine, taken for a blackbody.
//
//	8.55 F(Hβ) / (hν F_V)  =  photons beyond the Lyman limit over F_V, of T
//	right side: (e^v - 1)/v³ ∫ x²/(eˣ-1) dx from 15.79e4/T on      v = hν/kT at 5480 Å
//
// Given:
//   - logFHb0: log10 of the flux in H beta without dust, erg/s/cm2.
//   - v0: V of the star without dust.
//
// Returns:
//   - the temperature, K; [ErrInput] where it would be outside 15,000 to
//     500,000 K.
//
// Notes:
//  1. A lower limit where light leaks out of the nebula: a higher temperature
//     from He II tells.
//  2. The flux of V = 0 is from memory, not checked against a publication.
//
// Source: [cite.Zanstra1931]; [cite.OsterbrockFerland2006].
//
// Checked: TestZanstra: the integral to 1e-9, the ratio rises all the way, and
// there and back.
func ZanstraHI(logFHb0 float64, v0 astro.Mag) (float64, error) {
	v := v0.Mags()
	if !isFlux(logFHb0) || !(math.Abs(v) <= mostLogFlux) {
		return math.NaN(), bad("log flux and V", logFHb0, v)
	}
	want := math.Log(photonsPerHb/(hbHz*zeroFluxV)) + math.Ln10*(logFHb0+0.4*v)
	lnT, err := numeric.Root(func(lnT float64) float64 { return math.Log(photonRatio(math.Exp(lnT))) - want },
		math.Log(zanstraLoK), math.Log(zanstraHiK), 1e-9)
	if err != nil {
		return math.NaN(), bad("no temperature from 15,000 to 500,000 K gives log flux and V", logFHb0, v)
	}
	return math.Exp(lnT), nil
}

const (
	mbolSun = 4.74
	// The temperatures that HotBC is asked for, K; from 50,000 on it is an
	// extrapolation.
	hotLoK, hotHiK = 28e3, 200e3
)

// HotBC returns the bolometric correction of V of hot stars, magnitudes.
//
//	BC = 27.66 - 6.84 log Teff
//
// Given:
//   - teffK: 28,000 to 200,000.
//
// Returns:
//   - the correction; [ErrInput] outside.
//
// Notes:
//  1. Made for O stars; for central stars of 30,000 to 150,000 K an
//     extrapolation.
//
// Source: [cite.VaccaEtAl1996], seen in one copy.
//
// Checked: TestNebulae.
func HotBC(teffK float64) (float64, error) {
	if !(teffK >= hotLoK && teffK <= hotHiK) {
		return math.NaN(), bad("Teff in K", teffK)
	}
	return 27.66 - 6.84*math.Log10(teffK), nil
}

// CentralStarMV returns the absolute magnitude in V of a central star.
//
//	M_V = 4.74 - 2.5 log L - BC
//
// Given:
//   - logL: log10 of the luminosity in suns; teffK: as for [HotBC].
//
// Returns:
//   - the absolute magnitude; [ErrInput].
//
// Source: [cite.VaccaEtAl1996].
//
// Checked: TestNebulae.
func CentralStarMV(logL, teffK float64) (float64, error) {
	bc, err := HotBC(teffK)
	if err != nil {
		return math.NaN(), err
	}
	if !(math.Abs(logL) <= mostLogFlux) {
		return math.NaN(), bad("log L", logL)
	}
	return mbolSun - 2.5*logL - bc, nil
}

// CentralStarV returns V of a central star seen from here: M_V + 5 log d - 5 +
// A_V, d in pc.
//
// Returns:
//   - V; [ErrInput] for what is not a number or a distance not above 0.
//
// Checked: TestSurface.
func CentralStarV(absV, distancePc, aV float64) (astro.Mag, error) {
	if !finite(absV, aV) || !positive(distancePc) || math.Abs(absV)+math.Abs(aV) > 1e3 {
		return astro.Mags(math.NaN()), bad("M_V, distance and A_V", absV, distancePc, aV)
	}
	return astro.Mags(absV + 5*math.Log10(distancePc) - 5 + aV), nil
}

const (
	// BrightestM5007 is the absolute magnitude in 5007 that hardly a nebula
	// exceeds; give or take +0.02 and -0.03. Later work has -4.542.
	//
	// Source: [cite.CiardulloEtAl2002]; [cite.ScheuermannEtAl2022].
	BrightestM5007 = -4.47
	// tooBrightBy is by how much a nebula must beat that for its distance or
	// reddening to be wrong. Common practice, no source.
	tooBrightBy = 0.3
)

// M5007Limit returns the magnitude in 5007, without dust, that hardly a nebula
// at a distance exceeds.
//
// Given:
//   - distancePc: above 0.
//
// Returns:
//   - the magnitude, 5.53 at 1 kpc; [ErrInput].
//
// Source: [cite.CiardulloEtAl2002].
//
// Checked: TestNebulae.
func M5007Limit(distancePc float64) (astro.Mag, error) {
	return CentralStarV(BrightestM5007, distancePc, 0)
}

// TooBright tells whether a nebula shines brighter in 5007 than any does, which
// says that its distance or its reddening is wrong.
//
//	M < -4.47 - 0.3
//
// Given:
//   - m0: magnitude in 5007 without dust, of [Mag5007] and [Dereddened].
//   - distancePc: above 0.
//
// Returns:
//   - the absolute magnitude, and whether it is too bright; [ErrInput].
//
// Source: [cite.CiardulloEtAl2002]; the margin is common practice, no source.
//
// Checked: TestSurface.
func TooBright(m0 astro.Mag, distancePc float64) (absMag float64, tooBright bool, err error) {
	limit, err := M5007Limit(distancePc)
	if err != nil || !finite(m0.Mags()) {
		return math.NaN(), false, bad("magnitude and distance in pc", m0.Mags(), distancePc)
	}
	abs := m0.Minus(limit) + BrightestM5007
	return abs, abs < BrightestM5007-tooBrightBy, nil
}

// LuminosityFunction returns how many nebulae per magnitude there are at an
// absolute magnitude in 5007, against others.
//
//	N(M) ~ exp(0.307 M) [1 - exp(3 (M* - M))]      M* = -4.47
//
// Returns:
//   - the number, 0 for brighter than M*; not a number for what is not one.
//
// Source: [cite.CiardulloEtAl2002].
//
// Checked: TestSurface.
func LuminosityFunction(abs5007 float64) float64 {
	if abs5007 <= BrightestM5007 {
		return 0
	}
	return -math.Exp(0.307*abs5007) * math.Expm1(3*(BrightestM5007-abs5007))
}
