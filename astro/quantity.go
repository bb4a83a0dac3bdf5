package astro

import "math"

// Mag is a magnitude: a logarithmic brightness, smaller is brighter. It cannot
// be added to another magnitude; a difference is a plain number of magnitudes.
type Mag struct{ v float64 }

// Mags makes a magnitude.
func Mags(v float64) Mag { return Mag{v} }

// Mags returns the number.
func (m Mag) Mags() float64 { return m.v }

// Fainter returns the magnitude d magnitudes fainter (brighter where d < 0).
func (m Mag) Fainter(d float64) Mag { return Mag{m.v + d} }

// Minus returns the difference m - n in magnitudes; positive: m is fainter.
func (m Mag) Minus(n Mag) float64 { return m.v - n.v }

// Brighter tells whether m is brighter (numerically smaller) than n.
func (m Mag) Brighter(n Mag) bool { return m.v < n.v }

// SurfaceMag is a surface brightness in magnitudes per square second of arc.
type SurfaceMag struct{ v float64 }

// MagArcsec2 makes a surface brightness.
func MagArcsec2(v float64) SurfaceMag { return SurfaceMag{v} }

// MagArcsec2 returns the number.
func (m SurfaceMag) MagArcsec2() float64 { return m.v }

// Wavelength is a wavelength of light in air or vacuum, as the user says.
type Wavelength struct{ nm float64 }

// Nm makes a wavelength from nanometres.
func Nm(v float64) Wavelength { return Wavelength{v} }

// Micron makes a wavelength from micrometres.
func Micron(v float64) Wavelength { return Wavelength{v * 1000} }

// Nm returns nanometres.
func (w Wavelength) Nm() float64 { return w.nm }

// Micron returns micrometres.
func (w Wavelength) Micron() float64 { return w.nm / 1000 }

// Airmass is the amount of air on the line of sight, 1 straight overhead.
type Airmass float64

// Interval is a value with its lower and upper bounds and the probability
// that the truth lies between them. For magnitudes Lo is the brighter end.
type Interval struct {
	Lo, Mid, Hi float64
	Level       float64 // probability, 0 to 1
}

// Valid tells whether the bounds are in order and the level is a probability.
func (i Interval) Valid() bool {
	return i.Lo <= i.Mid && i.Mid <= i.Hi && i.Level > 0 && i.Level < 1 &&
		!math.IsNaN(i.Lo+i.Mid+i.Hi)
}
