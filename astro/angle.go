// Package astro holds the quantities that the sky is described with: angles,
// magnitudes, instants, places on Earth, intervals. Each is a sealed type: the
// constructor names the unit going in, the method of the same name the unit
// coming out, so a degree cannot pass for a radian. The package knows no
// target, no screen and no clock, and computes nothing beyond conversions.
package astro

import (
	"fmt"
	"math"
)

const (
	radPerDeg    = math.Pi / 180
	radPerHour   = math.Pi / 12
	radPerArcsec = math.Pi / (180 * 3600)
)

// Angle is a plane angle. The zero value is zero; angles are not wrapped
// unless a method says so.
type Angle struct{ rad float64 }

// Rad makes an angle from radians.
func Rad(v float64) Angle { return Angle{v} }

// Deg makes an angle from degrees.
func Deg(v float64) Angle { return Angle{v * radPerDeg} }

// Hours makes an angle from hours of right ascension or hour angle (15 degrees each).
func Hours(v float64) Angle { return Angle{v * radPerHour} }

// Arcsec makes an angle from seconds of arc.
func Arcsec(v float64) Angle { return Angle{v * radPerArcsec} }

// Rad returns radians.
func (a Angle) Rad() float64 { return a.rad }

// Deg returns degrees.
func (a Angle) Deg() float64 { return a.rad / radPerDeg }

// Hours returns hours (15 degrees each).
func (a Angle) Hours() float64 { return a.rad / radPerHour }

// Arcsec returns seconds of arc.
func (a Angle) Arcsec() float64 { return a.rad / radPerArcsec }

// Plus returns a + b.
func (a Angle) Plus(b Angle) Angle { return Angle{a.rad + b.rad} }

// Minus returns a - b.
func (a Angle) Minus(b Angle) Angle { return Angle{a.rad - b.rad} }

// Times returns a scaled by k.
func (a Angle) Times(k float64) Angle { return Angle{a.rad * k} }

// Neg returns -a.
func (a Angle) Neg() Angle { return Angle{-a.rad} }

// Less tells whether a is smaller than b, unwrapped.
func (a Angle) Less(b Angle) bool { return a.rad < b.rad }

// Sin returns the sine.
func (a Angle) Sin() float64 { return math.Sin(a.rad) }

// Cos returns the cosine.
func (a Angle) Cos() float64 { return math.Cos(a.rad) }

// Turn returns the same direction in [0, 360) degrees.
func (a Angle) Turn() Angle {
	r := math.Mod(a.rad, 2*math.Pi)
	if r < 0 {
		r += 2 * math.Pi
	}
	if r >= 2*math.Pi {
		r = 0
	}
	return Angle{r}
}

// Signed returns the same direction in (-180, 180] degrees.
func (a Angle) Signed() Angle {
	r := a.Turn().rad
	if r > math.Pi {
		r -= 2 * math.Pi
	}
	return Angle{r}
}

// String prints degrees to six places; for messages, not for tables.
func (a Angle) String() string { return fmt.Sprintf("%.6f deg", a.Deg()) }

// HMS writes the angle, wrapped to one turn, as hours, minutes and seconds
// with blanks between and the given number of decimals in the seconds.
// Rounding carries: 23 59 59.999 to two decimals is 00 00 00.00.
func (a Angle) HMS(decimals int) string {
	scale := math.Pow(10, float64(decimals))
	total := math.Round(a.Turn().Hours() * 3600 * scale)
	if total >= 24*3600*scale {
		total = 0
	}
	return sexagesimal(total, scale, decimals)
}

// DMS writes the angle as a sign, degrees, minutes and seconds of arc with
// blanks between and the given number of decimals in the seconds.
func (a Angle) DMS(decimals int) string {
	scale := math.Pow(10, float64(decimals))
	sign := "+"
	v := a.Deg()
	total := math.Round(math.Abs(v) * 3600 * scale)
	if v < 0 && total > 0 {
		sign = "-"
	}
	return sign + sexagesimal(total, scale, decimals)
}

// sexagesimal writes a whole number of units of 1/scale second.
func sexagesimal(total, scale float64, decimals int) string {
	minutes := math.Floor(total / (60 * scale))
	sec := (total - minutes*60*scale) / scale
	h := math.Floor(minutes / 60)
	m := minutes - 60*h
	width := 2
	if decimals > 0 {
		width = 3 + decimals
	}
	return fmt.Sprintf("%02.0f %02.0f %0*.*f", h, m, width, decimals, sec)
}
