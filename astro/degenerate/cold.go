package degenerate

import (
	"math"

	"evenfall/astro/numeric"
)

// ColdStar is a white dwarf of no temperature, held up by degenerate electrons
// alone.
type ColdStar struct {
	Y0          float64 // √(1 + x²), x the relativity of the electrons at the centre
	MassMsun    float64
	RadiusRsun  float64
	CentreGCm3  float64 // central density, g/cm³
	SurfaceLogG float64 // of cm/s²
}

// coldSteps is how many steps of the integration go to the surface, about.
const coldSteps = 4000

// structure integrates the degenerate star from its centre to its surface.
//
//	(1/n²) d/dn (n² dφ/dn) = -(φ² - 1/y0²)^(3/2),   φ(0) = 1, φ'(0) = 0, until φ = 1/y0
//
// It returns the radius n1 and -n1² φ'(n1), in the units of the problem; inverse
// is 1/y0, and 0 gives the limit in which the star is infinitely dense.
func structure(inverse float64) (n1, massive float64) {
	slope := func(n, phi, dphi float64) float64 {
		return -math.Pow(math.Max(0, phi*phi-inverse*inverse), 1.5) - 2*dphi/n
	}
	step := func(n, phi, dphi, h float64) (float64, float64) {
		k1, l1 := dphi, slope(n, phi, dphi)
		k2, l2 := dphi+h/2*l1, slope(n+h/2, phi+h/2*k1, dphi+h/2*l1)
		k3, l3 := dphi+h/2*l2, slope(n+h/2, phi+h/2*k2, dphi+h/2*l2)
		k4, l4 := dphi+h*l3, slope(n+h, phi+h*k3, dphi+h*l3)
		return phi + h/6*(k1+2*k2+2*k3+k4), dphi + h/6*(l1+2*l2+2*l3+l4)
	}
	// Near the centre the series; c is the right-hand side there.
	c := math.Pow(1-inverse*inverse, 1.5)
	h := 7 * math.Pow(1-inverse*inverse, -0.25) / coldSteps
	n := h / 10
	phi, dphi := 1-c*n*n/6, -c*n/3
	for range 100 * coldSteps {
		toSurface := (inverse - phi) / dphi
		if toSurface < 2*h {
			break
		}
		phi, dphi = step(n, phi, dphi, h)
		n += h
	}
	for range 40 {
		toSurface := (inverse - phi) / dphi
		phi, dphi = step(n, phi, dphi, toSurface)
		n += toSurface
		if math.Abs(toSurface) < 1e-13*n {
			break
		}
	}
	return n, -n * n * dphi
}

// coldScales returns the units of length, mass and density of the problem in SI,
// the length for y0 = 1.
//
//	A = π me⁴ c⁵ / 3h³     B = 8π me³ c³ μe u / 3h³
func coldScales(muE float64) (lengthM, massKg, densitySI float64) {
	mc := electronKg * lightMs
	h3 := planckJs * planckJs * planckJs
	a := math.Pi * mc * mc * mc * mc * lightMs / (3 * h3)
	b := 8 * math.Pi * mc * mc * mc * muE * atomicMassKg / (3 * h3)
	l := math.Sqrt(2 * a / (math.Pi * gravSI))
	return l / b, 4 * math.Pi * l * l * l / (b * b), b
}

// Cold integrates the exact model of a cold white dwarf.
//
//	R = √(2A/πG) n1 / (B y0)     M = 4π (2A/πG)^(3/2) / B² (-n1² φ'(n1))     ρc = B (y0² - 1)^(3/2)
//
// Given:
//   - y0: over 1; 1.5 is 0.57 solar masses, 10 is 1.39.
//   - muE: nucleons to an electron; 2 for carbon, oxygen and helium.
//
// Returns:
//   - the star; [ErrNotANumber] for y0 not over 1 or muE not positive.
//
// Notes:
//  1. No temperature, no electric forces, no general relativity: real
//     carbon-oxygen stars are 1 to 2 per cent smaller at 0.6 and collapse from
//     1.37 to 1.39 solar masses ("real" limit from memory, not checked against a
//     publication). Above 15 000 K the outside swells: use [Models.At].
//  2. Steps of fourth order; mass and radius hold to 1e-8.
//
// Source: [cite.Chandrasekhar1939], chapter XI; constants
// [cite.TiesingaEtAl2021].
//
// Checked: TestCold, three stars; TestColdConverges.
func Cold(y0, muE float64) (ColdStar, error) {
	if !positive(muE) || !(y0 > 1) || y0 > 1e8 {
		return ColdStar{}, ErrNotANumber
	}
	n1, massive := structure(1 / y0)
	length, mass, density := coldScales(muE)
	s := ColdStar{
		Y0: y0, MassMsun: mass * massive / sunMassKg,
		RadiusRsun: length * n1 / y0 / sunRadiusM,
		CentreGCm3: density * math.Pow((y0-1)*(y0+1), 1.5) / 1000,
	}
	s.SurfaceLogG = logGravity(s.MassMsun, s.RadiusRsun)
	return s, nil
}

// LimitingMass returns the mass that no cold white dwarf reaches: that of the
// exact model where the density at the centre grows without bound.
//
// Given:
//   - muE: nucleons to an electron, 2 for carbon and oxygen.
//
// Returns:
//   - solar masses, 1.456 (2/μe)²; not a number for muE not positive.
//
// Source: [cite.Chandrasekhar1939]; integrated here, not quoted.
//
// Checked: TestLimitingMass.
func LimitingMass(muE float64) float64 {
	if !positive(muE) {
		return math.NaN()
	}
	_, massive := structure(0)
	_, mass, _ := coldScales(muE)
	return mass * massive / sunMassKg
}

// ColdOfMass returns the exact cold white dwarf of a mass.
//
// Given:
//   - massMsun: from 0.01 to just under the limit.
//   - muE: nucleons to an electron.
//
// Returns:
//   - the star; [ErrMassLimit] for too much mass, [ErrNotANumber] for too
//     little.
//
// Source: [cite.Chandrasekhar1939], by root.
//
// Checked: TestColdRadii, against five printed radii.
func ColdOfMass(massMsun, muE float64) (ColdStar, error) {
	if !positive(massMsun, muE) {
		return ColdStar{}, ErrNotANumber
	}
	_, mass, _ := coldScales(muE)
	wanted := massMsun * sunMassKg / mass
	// In u = 1/y0 the mass falls from its limit at 0 to nothing at 1.
	short := func(u float64) float64 {
		_, m := structure(u)
		return m - wanted
	}
	const densest, thinnest = 1e-4, 0.9995
	if short(densest) <= 0 {
		return ColdStar{}, ErrMassLimit
	}
	u, err := numeric.Root(short, densest, thinnest, 1e-10)
	if err != nil {
		return ColdStar{}, ErrNotANumber
	}
	return Cold(1/u, muE)
}

// Nauenberg returns the radius of a cold white dwarf by a formula.
//
//	R = (0.0225/μ) √(1 - (M/M3)^(4/3)) / (M/M3)^(1/3)     M3 = 5.816/μ²
//
// Given:
//   - massMsun: below M3, 1.454 for mu = 2.
//   - mu: nucleons to an electron.
//
// Returns:
//   - solar radii; [ErrMassLimit], [ErrNotANumber].
//
// Notes:
//  1. 1 per cent below the exact model at 0.6, 7 per cent at 1.3 solar masses.
//
// Source: [cite.Nauenberg1972]. Constants agree in two printings; the paper was
// not at hand.
//
// Checked: TestColdRadii.
func Nauenberg(massMsun, mu float64) (radiusRsun float64, err error) {
	if !positive(massMsun, mu) {
		return math.NaN(), ErrNotANumber
	}
	x := massMsun * mu * mu / 5.816
	if x >= 1 {
		return math.NaN(), ErrMassLimit
	}
	return 0.0225 / mu * math.Sqrt(1-math.Pow(x, 4.0/3)) / math.Cbrt(x), nil
}

// Redshift returns how much gravity reddens the light of a surface, as a speed.
//
//	v = G M / (R c) = 0.6363 M/R     km/s, solar units
//
// Given:
//   - massMsun, radiusRsun: positive.
//
// Returns:
//   - km/s; not a number otherwise.
//
// Source: first order of general relativity; constants [cite.IAU2015B3].
//
// Checked: TestRedshift.
func Redshift(massMsun, radiusRsun float64) (kms float64) {
	if !positive(massMsun, radiusRsun) {
		return math.NaN()
	}
	return sunGM / sunRadiusM / lightMs / 1000 * massMsun / radiusRsun
}

// logGravity is the surface gravity of a mass and a radius in solar units, as
// the logarithm of cm/s².
func logGravity(massMsun, radiusRsun float64) float64 {
	return sunLogG + math.Log10(massMsun) - 2*math.Log10(radiusRsun)
}
