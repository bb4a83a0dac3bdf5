package stellar

import (
	"fmt"
	"math"
)

// Radius returns the radius in suns.
//
//	R = √L (5772 / Teff)²
//
// Given:
//   - logL: log10 of the luminosity in suns; teffK: above 0.
//
// Returns:
//   - the radius, not a number where it cannot be had.
//
// Source: the law of Stefan and Boltzmann; the Sun of [cite.IAU2015B3].
//
// Checked: TestWorkedStar, to 0.01.
func Radius(logL, teffK float64) float64 {
	if !(teffK > 0) {
		return math.NaN()
	}
	t := TeffSunK / teffK
	return math.Pow(10, logL/2) * t * t
}

const (
	// The mass of a field giant where none is known, and its error, suns.
	// Common practice, no source.
	FieldGiantMass, FieldGiantMassErr = 1.2, 0.4
)

// LogG returns log10 of the surface gravity in cm/s2, and its error from that
// of the mass.
//
//	log g = 4.438 + log M + 4 log(Teff / 5772) - log L
//
// Given:
//   - mass: in suns; where not known 1.2 ± 0.4, that of field giants.
//   - logL, teffK: as for [Radius].
//
// Returns:
//   - log g with the error of the mass alone, 0.15 for a field giant's.
//   - a measure that is not Known where it cannot be had.
//
// Source: Newton's law; the Sun of [cite.IAU2015B3].
//
// Checked: TestWorkedStar, to 0.001.
func LogG(mass Measure, logL, teffK float64) Measure {
	if !mass.Known {
		mass = Measure{FieldGiantMass, FieldGiantMassErr, true}
	}
	if !(mass.Value > 0) || !(teffK > 0) {
		return Measure{}
	}
	v := LogGSun + math.Log10(mass.Value) + 4*math.Log10(teffK/TeffSunK) - logL
	return Measured(v, mass.Err/mass.Value/math.Ln10)
}

// The Sun's oscillations on the common scale, and the temperature that goes
// with them.
const (
	nuMaxSunUHz = 3090.0
	dnuSunUHz   = 135.1
	seismicSunK = 5777.0
)

// Seismic is mass, radius and gravity from a star's oscillations.
type Seismic struct {
	Mass, Radius, LogG Measure // suns, suns, log10 of cm/s2
}

// Oscillations returns mass, radius and surface gravity from solar-like
// oscillations, by scaling from the Sun.
//
//	M = (νmax/3090)³ (Δν/135.1)⁻⁴ (Teff/5777)^1.5
//	R = (νmax/3090) (Δν/135.1)⁻² (Teff/5777)^0.5
//	log g = 4.438 + log(νmax/3090) + 0.5 log(Teff/5777)
//
// Given:
//   - nuMax: frequency of most power, uHz; dnu: large separation, uHz; both
//     with errors.
//   - teff: K, with its error.
//
// Returns:
//   - the three with errors of what went in; mass and radius are not Known
//     where dnu is not.
//   - [ErrInput] where nuMax or teff are not known, or something is not above 0.
//
// Notes:
//  1. The common scaling, without the corrections that models suggest.
//
// Source: [cite.KjeldsenBedding1995] for the scaling; the Sun's values are
// those in common use.
//
// Checked: TestOscillations.
func Oscillations(nuMax, dnu, teff Measure) (Seismic, error) {
	if !nuMax.Known || !teff.Known || !(nuMax.Value > 0) || !(teff.Value > 0) || dnu.Known && !(dnu.Value > 0) {
		return Seismic{}, fmt.Errorf("oscillations of numax %g, dnu %g uHz at %g K: %w", nuMax.Value, dnu.Value, teff.Value, ErrInput)
	}
	n, t := nuMax.Value/nuMaxSunUHz, teff.Value/seismicSunK
	en, et := nuMax.Err/nuMax.Value, teff.Err/teff.Value
	out := Seismic{LogG: Measured(LogGSun+math.Log10(n)+0.5*math.Log10(t), math.Hypot(en, 0.5*et)/math.Ln10)}
	if dnu.Known {
		d, ed := dnu.Value/dnuSunUHz, dnu.Err/dnu.Value
		m := n * n * n / (d * d * d * d) * t * math.Sqrt(t)
		r := n / (d * d) * math.Sqrt(t)
		out.Mass = Measured(m, m*math.Sqrt(square(3*en)+square(4*ed)+square(1.5*et)))
		out.Radius = Measured(r, r*math.Sqrt(square(en)+square(2*ed)+square(0.5*et)))
	}
	return out, nil
}
