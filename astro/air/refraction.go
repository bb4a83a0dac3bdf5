package air

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/meeusfence"
	"evenfall/astro/numeric"
)

// Where one formula of refraction gives way to the next, degrees of true
// altitude. The first two are where ray traces find one as wrong as the other;
// the last two end refraction without a jump, under the horizon of any site.
const (
	tangentsFromDeg    = 8
	saemundssonFromDeg = 5
	fadeFromDeg        = -0.9
	fadeToDeg          = -1
)

// defaultMicron is the colour of light where none is given, micrometres.
const defaultMicron = 0.55

// Refract returns where a star is seen.
//
//	8 degrees and up:   R from A tan z + B tan³ z, A and B from [Constants]
//	5 degrees and down: R = R of Saemundsson × (P/1010) (283/(273 + T))
//	between 8 and 5:    a mixture, weights 3u² - 2u³
//	-0.9 to -1:         fading, weights 3u² - 2u³; nothing below
//
// Given:
//   - trueAlt: altitude without air, -90 to 90 degrees, diurnal aberration
//     included.
//   - w: the air at the site; pressure 0 is no air. A colour of zero stands for
//     0.55 micrometres. Values beyond nature are clamped as in [Constants].
//
// Returns:
//   - apparent altitude: trueAlt + R. Not a number only where trueAlt is not.
//
// Notes:
//  1. Above 8 degrees it agrees with ERFA's atioq to 0.01 arcsec, and with ray
//     traces to 1 arcsec above 10. Below 5 degrees 14 arcsec at 3 degrees in
//     standard air; at the horizon weather not measured at the site's own
//     ground costs minutes.
//  2. R falls steadily with altitude from -0.9 degrees up, and apparent altitude
//     rises with true altitude everywhere, so it can be undone.
//  3. A and B are applied with one Newton step, in the vector form that ERFA
//     uses: the tangent formulas want the apparent zenith distance.
//  4. Humidity and colour enter above 5 degrees only.
//
// Source: [cite.Stone1996] and [cite.SOFA] (refco, atioq);
// [cite.Saemundsson1986]; the scaling for weather [cite.Meeus1998], chapter 16.
//
// Checked: TestRefractTable, against testdata/astro/refraction.csv, to 1
// arcsec above 8 degrees; TestRefractProperty.
func Refract(trueAlt astro.Angle, w astro.Weather) astro.Angle {
	b := bendingOf(w)
	return trueAlt.Plus(b.at(trueAlt))
}

// unrefractDeg is how closely Unrefract undoes Refract, degrees.
const unrefractDeg = 1e-10

// Unrefract returns where a star would be without air: the inverse of
// [Refract].
//
// Given:
//   - apparent: altitude as seen, -90 to 90 degrees.
//   - w: as for [Refract].
//
// Returns:
//   - true altitude, to 1e-9 degrees. Not a number only where apparent is not.
//
// Source: as [Refract]; solved by [numeric.Root].
//
// Checked: TestRefractProperty, to 1e-9 degrees.
func Unrefract(apparent astro.Angle, w astro.Weather) astro.Angle {
	b := bendingOf(w)
	aDeg := apparent.Deg()
	if b.scale == 0 || math.IsNaN(aDeg) || math.IsInf(aDeg, 0) {
		return apparent
	}
	over := func(hDeg float64) float64 {
		h := astro.Deg(hDeg)
		return hDeg + b.at(h).Deg() - aDeg
	}
	// At most 0.66 degrees in standard air, in proportion in any other.
	width := 1 + b.scale
	hDeg, err := numeric.Root(over, aDeg-width, aDeg+0.1, unrefractDeg)
	if err != nil {
		// Apparent altitude rises with true altitude and the ends lie on both
		// sides, so this is a bug here and not the caller's.
		panic("air: Unrefract found no altitude: " + err.Error())
	}
	return astro.Deg(hDeg)
}

// Constants returns the two constants of refraction for a site's weather.
//
//	R = A tan z + B tan³ z                   z apparent, R in radians
//	γ = {[77.53484e-6 + (4.39108e-7 + 3.666e-9/λ²)/λ²] P - 11.2684e-6 e} / T
//	β = 4.4474e-6 T
//	A = γ (1 - β)
//	B = -γ (β - γ/2)
//	e = H s / [1 - (1 - H) s/P],  s = 10^[(0.7859 + 0.03477 t)/(1 + 0.00412 t)] [1 + P (4.5e-6 + 6e-10 t²)]
//
// with P and e in hPa, T in kelvin, t in degrees Celsius, λ in micrometres.
//
// Given:
//   - w: clamped to 0 to 10000 hPa, -150 to 200 C, humidity 0 to 1, 0.1 to 100
//     micrometres. What is not a number counts as 0; a colour of zero as 0.55
//     micrometres.
//
// Returns:
//   - A and B in radians; about 2.8e-4 and -3.2e-7 at sea level; 0 and 0
//     without air.
//
// Notes:
//  1. Good to 1 arcsec above 10 degrees; 12 to 21 arcsec wrong at 5 degrees, so
//     [Refract] goes over to another formula.
//  2. Light only: radio waves are refracted by another formula, left out.
//
// Source: [cite.Stone1996], with the empirical adjustments of [cite.SOFA]
// (refco); refractivity after [cite.Owens1967], vapour pressure
// [cite.Gill1982].
//
// Checked: TestConstants, to 1e-12 of A, against the test that ERFA is
// delivered with; TestRefractionPublished.
func Constants(w astro.Weather) (a, b float64) {
	pHPa, tC := pressureOf(w), temperatureOf(w)
	if pHPa == 0 {
		return 0, 0
	}
	h := clamp(w.Humidity, 0, 1)
	sat := math.Pow(10, (0.7859+0.03477*tC)/(1+0.00412*tC)) * (1 + pHPa*(4.5e-6+6e-10*tC*tC))
	vapour := h * sat / (1 - (1-h)*sat/pHPa)
	micron := w.Colour.Micron()
	if micron == 0 {
		micron = defaultMicron
	}
	lam2 := math.Pow(clamp(micron, 0.1, 100), 2)
	tK := tC + 273.15
	gamma := ((77.53484e-6+(4.39108e-7+3.666e-9/lam2)/lam2)*pHPa - 11.2684e-6*vapour) / tK
	beta := 4.4474e-6 * tK
	return gamma * (1 - beta), -gamma * (beta - gamma/2)
}

// bending is a site's weather made ready for refraction.
type bending struct {
	a, b  float64 // radians
	scale float64 // of 1010 hPa, 10 C; 0: no air
}

// bendingOf prepares a site's weather.
func bendingOf(w astro.Weather) bending {
	a, b := Constants(w)
	return bending{a, b, pressureOf(w) / 1010 * 283 / (273 + temperatureOf(w))}
}

// at returns the refraction at a true altitude.
func (c bending) at(trueAlt astro.Angle) astro.Angle {
	hDeg := trueAlt.Deg()
	switch {
	case c.scale == 0 || !(hDeg > fadeToDeg):
		return astro.Angle{}
	case hDeg >= tangentsFromDeg:
		return c.tangents(trueAlt)
	case hDeg <= fadeFromDeg:
		return c.saemundsson(trueAlt).Times(smooth((hDeg - fadeToDeg) / (fadeFromDeg - fadeToDeg)))
	case hDeg <= saemundssonFromDeg:
		return c.saemundsson(trueAlt)
	}
	high := smooth((hDeg - saemundssonFromDeg) / (tangentsFromDeg - saemundssonFromDeg))
	return c.tangents(trueAlt).Times(high).Plus(c.saemundsson(trueAlt).Times(1 - high))
}

// tangents returns A tan z + B tan³ z for the apparent z that belongs to a true
// altitude: one Newton step, then the turn by that much of the direction.
func (c bending) tangents(trueAlt astro.Angle) astro.Angle {
	z := trueAlt.Sin()
	tz := trueAlt.Cos() / z
	w := c.b * tz * tz
	del := (c.a + w) * tz / (1 + (c.a+3*w)/(z*z))
	return astro.Rad(math.Atan2(del, 1-del*del/2))
}

// saemundsson returns the published refraction in proportion to the air's density.
func (c bending) saemundsson(trueAlt astro.Angle) astro.Angle {
	return meeusfence.Saemundsson(trueAlt).Times(c.scale)
}

// smooth is the smooth step 3u² - 2u³, 0 at 0 and 1 at 1.
func smooth(u float64) float64 { return u * u * (3 - 2*u) }

// pressureOf returns the pressure in hPa, within what the formulas take.
func pressureOf(w astro.Weather) float64 { return clamp(w.PressureHPa, 0, 10000) }

// temperatureOf returns the temperature in degrees Celsius, within what the
// formulas take.
func temperatureOf(w astro.Weather) float64 { return clamp(w.TemperatureC, -150, 200) }

// clamp keeps a value within bounds; what is not a number becomes 0, or the
// bound that is nearest 0.
func clamp(v, lo, hi float64) float64 {
	if math.IsNaN(v) {
		v = 0
	}
	return math.Min(math.Max(v, lo), hi)
}
