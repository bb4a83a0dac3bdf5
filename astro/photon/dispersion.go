package photon

import (
	"math"

	"evenfall/astro"
)

// Vapour is the air that spreads a star into a spectrum.
type Vapour struct {
	PressureHPa  float64
	TemperatureC float64
	VapourHPa    float64 // partial pressure of water vapour
}

// DefaultVapour returns what is assumed at a high site: 756 hPa, 7 C, 10.7 hPa
// of water vapour.
func DefaultVapour() Vapour { return Vapour{756, 7, 10.7} }

// VapourOf returns the air of a site's weather.
//
//	e = H 10^[(0.7859 + 0.03477 t)/(1 + 0.00412 t)]      hPa, t in C
//
// Source: [cite.Gill1982], as in the program's refraction, without its term of
// pressure, 0.5 per cent.
func VapourOf(w astro.Weather) Vapour {
	t := math.Max(-60, math.Min(60, w.TemperatureC))
	return Vapour{w.PressureHPa, w.TemperatureC, w.Humidity * math.Pow(10, (0.7859+0.03477*t)/(1+0.00412*t))}
}

// mmHg is one millimetre of mercury in hPa.
const mmHg = 1.333224

func (v Vapour) valid() error {
	return first(within("the pressure in hPa", v.PressureHPa, 0, 2000), within("the temperature in C", v.TemperatureC, -150, 200),
		within("the water vapour in hPa", v.VapourHPa, 0, 200))
}

// refractivity returns (n - 1) 10^6.
//
//	N0 = 64.328 + 29498.1/(146 - σ²) + 255.4/(41 - σ²),  σ = 1/λ, λ in micrometres
//	N1 = N0 P [1 + (1.049 - 0.0157 T) 10^-6 P] / [720.883 (1 + 0.003661 T)]
//	N = N1 - f (0.0624 - 0.000680 σ²)/(1 + 0.003661 T),  P and f in mm of mercury
//
// Source: [cite.Filippenko1982]. Four independent copies agree.
//
// Checked: TestDispersion.
func (v Vapour) refractivity(micron float64) float64 {
	p, f, t := v.PressureHPa/mmHg, v.VapourHPa/mmHg, v.TemperatureC
	s2 := 1 / (micron * micron)
	dry := standardRefractivity(micron) * p * (1 + (1.049-0.0157*t)*1e-6*p) / (720.883 * (1 + 0.003661*t))
	return dry - f*(0.0624-0.000680*s2)/(1+0.003661*t)
}

// standardRefractivity is N0, at 15 C and 760 mm.
func standardRefractivity(micron float64) float64 {
	s2 := 1 / (micron * micron)
	return 64.328 + 29498.1/(146-s2) + 255.4/(41-s2)
}

// DifferentialRefraction returns how much nearer to the zenith a star is seen at
// one wavelength than at another.
//
//	Δ = 206264.8 10^-6 [N(λ) - N(λ0)] tan z              arcsec
//
// Given:
//   - at: λ; guided: λ0, where the guiding camera looks, 550 nm where nothing
//     else is known; 250 to 25000 nm.
//   - zenith: z, 0 to below 90 degrees.
//   - v: the air.
//
// Returns:
//   - Δ, positive where the light at λ comes from nearer the zenith: the blue.
//
// Notes:
//  1. Good to 75 degrees of zenith distance.
//
// Source: [cite.Filippenko1982].
//
// Checked: TestDispersion, against its table 1, 0.008 arcsec.
func DifferentialRefraction(at, guided astro.Wavelength, zenith astro.Angle, v Vapour) (astro.Angle, error) {
	if err := first(v.valid(), within("the wavelength in nm", at.Nm(), 250, 25000), within("the guiding wavelength in nm", guided.Nm(), 250, 25000),
		within("the zenith distance in degrees", zenith.Deg(), 0, 89.9)); err != nil {
		return astro.Deg(math.NaN()), err
	}
	d := v.refractivity(at.Micron()) - v.refractivity(guided.Micron())
	return astro.Arcsec(arcsecPerRad * 1e-6 * d * math.Tan(zenith.Rad())), nil
}

// Off returns how far from the slit's middle line light falls that differential
// refraction shifts.
//
//	o = Δ sin(PA - q)
//
// Given:
//   - shift: Δ.
//   - angle: PA - q, the slit's position angle from the parallactic one; both
//     from north through east.
//
// Checked: TestDispersion.
func Off(shift, angle astro.Angle) astro.Angle { return shift.Times(angle.Sin()) }

// resetShare is how far from the slit's middle light may fall, as a share of
// the slit; corrected and near the zenith (1.1 airmasses) the angle does not
// matter. Common practice, no source.
const (
	resetShare     = 0.2
	angleFromXmass = 1.1
)

// AngleMatters tells whether a slit's position angle is worth a thought.
func AngleMatters(x astro.Airmass, corrector bool) bool { return !corrector && x >= angleFromXmass }

// AngleAllowed returns how far a slit's position angle may lie from the
// parallactic one, before light at the worse end of the range falls further
// than 0.2 of the slit's width from its middle; when the parallactic angle has
// gone further than that, it is time to set the slit anew.
//
//	|sin(PA - q)| ≤ 0.2 w/|Δ|
//
// Given:
//   - shift: Δ, the largest over the range.
//   - slitArcsec: w.
//
// Returns:
//   - 0 to 90 degrees; 90: any angle will do.
//
// Checked: TestDispersion.
func AngleAllowed(shift astro.Angle, slitArcsec float64) astro.Angle {
	d := math.Abs(shift.Arcsec())
	room := resetShare * slitArcsec
	if !(d > room) {
		return astro.Deg(90)
	}
	return astro.Rad(math.Asin(room / d))
}

// SlitLoss returns the share of the light in the slit that is lost by its
// falling beside the middle.
//
//	1 - S(w, o)/S(w, 0)
//
// Checked: TestDispersion.
func SlitLoss(image Image, slitArcsec float64, off astro.Angle) float64 {
	full := image.Slit(slitArcsec, 0)
	if image.valid() != nil || !(full > 0) {
		return math.NaN()
	}
	return 1 - image.Slit(slitArcsec, off.Arcsec())/full
}

// Spread is a star in a slit, and the air that spreads it into a spectrum.
type Spread struct {
	Guided     astro.Wavelength // where the guiding camera looks
	Zenith     astro.Angle      // zenith distance
	Air        Vapour
	Image      Image // taken as the same at all wavelengths
	SlitArcsec float64
}

// Worst returns the greatest loss over some wavelengths, and where it is.
//
// Given:
//   - wanted: the wavelengths that matter; at least one.
//   - angle: PA - q.
//
// Checked: TestDispersion.
func (s Spread) Worst(wanted []astro.Wavelength, angle astro.Angle) (loss float64, at astro.Wavelength, err error) {
	loss = math.NaN()
	if err := first(s.Image.valid(), positive("the slit in arcsec", s.SlitArcsec), within("the number of wavelengths", float64(len(wanted)), 1, 1e9),
		within("the slit's angle in degrees", angle.Deg(), -1e6, 1e6)); err != nil {
		return loss, at, err
	}
	for _, w := range wanted {
		shift, err := DifferentialRefraction(w, s.Guided, s.Zenith, s.Air)
		if err != nil {
			return math.NaN(), w, err
		}
		if l := SlitLoss(s.Image, s.SlitArcsec, Off(shift, angle)); !(l <= loss) {
			loss, at = l, w
		}
	}
	return loss, at, nil
}

// LargestShift returns the greatest shift over some wavelengths, whichever its
// sign, for [AngleAllowed].
func (s Spread) LargestShift(wanted []astro.Wavelength) (astro.Angle, error) {
	var most astro.Angle
	for _, w := range wanted {
		shift, err := DifferentialRefraction(w, s.Guided, s.Zenith, s.Air)
		if err != nil {
			return shift, err
		}
		if math.Abs(shift.Rad()) > math.Abs(most.Rad()) {
			most = shift
		}
	}
	return most, nil
}
