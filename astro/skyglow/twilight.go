package skyglow

import (
	"errors"
	"math"

	"evenfall/astro"
)

// ErrNoTwilight says that the twilight sky does not reach that brightness.
var ErrNoTwilight = errors.New("twilight at the zenith does not have that brightness")

// twilightFit is the zenith's brightness by the Sun's zenith distance ζ:
// a0 + a1 (ζ - 95) + a2 (ζ - 95)², 95 to 105 degrees, night sky included.
//
// Source: [cite.PatatEtAl2006], table 1.
var twilightFit = [fives][3]float64{
	{11.78, 1.376, -0.039},
	{11.84, 1.411, -0.041},
	{11.84, 1.518, -0.057},
	{11.40, 1.567, -0.064},
	{10.93, 1.470, -0.062},
}

// Where the fit is followed, and where twilight ends, degrees of the Sun's
// zenith distance; the brightest that the line towards day is followed.
const (
	twilightFrom    = 95.0
	twilightBend    = 100.0
	twilightTo      = 108.5
	twilightLimit   = 4.0
	twilightNothing = 99.0
)

// twilightMag returns the light of twilight alone at the zenith.
//
//	ζ <= 95         a0 - a1 (95 - ζ), not brighter than 4
//	95 to 100       a0 + a1 (ζ-95) + a2 (ζ-95)²
//	100 to 108.5    a straight line on, with the slope at 100
//	beyond          none
//
// Source: [cite.PatatEtAl2006], table 1, up to 100 degrees; the rest made here,
// as the fit itself holds the night sky and turns over at 108.
//
// Checked: TestTwilight.
func twilightMag(five int, zetaDeg float64) (float64, bool) {
	a := twilightFit[five]
	x := zetaDeg - twilightFrom
	const bend = twilightBend - twilightFrom
	switch {
	case !(zetaDeg < twilightTo):
		return 0, false
	case x <= 0:
		return math.Max(twilightLimit, a[0]+a[1]*x), true
	case x <= bend:
		return a[0] + a[1]*x + a[2]*x*x, true
	}
	return a[0] + a[1]*bend + a[2]*bend*bend + (a[1]+2*bend*a[2])*(x-bend), true
}

// Twilight returns the light of twilight alone at the zenith, in the band.
//
// Given:
//   - sunAlt: true altitude of the Sun's centre.
//   - b: an optical band.
//
// Returns:
//   - the surface brightness; false with the Sun 18.5 degrees down or more, and
//     for J, H and K, whose twilight is not modelled.
//
// Notes:
//  1. Measured from -5 to -15 degrees, rms 0.12 (B) to 0.40 (I); above that a
//     straight line, for flat fields, good to half a magnitude.
//  2. Towards the Sun the sky is 1 to 1.5 mag brighter 60 degrees from the
//     zenith (common practice, no source); that is not modelled.
//
// Source: [cite.PatatEtAl2006].
//
// Checked: TestTwilight.
func Twilight(b Band, sunAlt astro.Angle) (astro.SurfaceMag, bool) {
	if b.IsZero() || b.infrared {
		return astro.MagArcsec2(twilightNothing), false
	}
	lo, ok := twilightMag(b.lo, 90-sunAlt.Deg())
	hi, _ := twilightMag(b.hi, 90-sunAlt.Deg())
	if !ok {
		return astro.MagArcsec2(twilightNothing), false
	}
	if b.own {
		return astro.MagArcsec2(lo), true
	}
	return astro.MagArcsec2((1-b.w)*(lo+fiveAB[b.lo]) + b.w*(hi+fiveAB[b.hi]) + b.zero), true
}

// TwilightSun returns how high the Sun stands when twilight at the zenith has a
// brightness: when a flat field can begin, and when it must end.
//
// Returns:
//   - the Sun's true altitude, -18.5 to 0 degrees, to 1e-6 degrees.
//   - [ErrNoTwilight] where the zenith is never so bright, or never so faint.
//
// Checked: TestTwilightSun: it undoes [Twilight].
func TwilightSun(b Band, want astro.SurfaceMag) (astro.Angle, error) {
	lo, hi := twilightTo-90, 0.0 // degrees below the horizon: darkest, brightest
	mag := func(down float64) (float64, bool) {
		m, ok := Twilight(b, astro.Deg(-down))
		return m.MagArcsec2(), ok
	}
	lo -= 1e-9
	dark, ok1 := mag(lo)
	bright, ok2 := mag(hi)
	w := want.MagArcsec2()
	if !ok1 || !ok2 || !(w <= dark && w >= bright) {
		return astro.Deg(math.NaN()), ErrNoTwilight
	}
	for lo-hi > 1e-7 { // fainter as the Sun sinks, so halving finds it
		mid := (lo + hi) / 2
		if m, _ := mag(mid); m > w {
			lo = mid
		} else {
			hi = mid
		}
	}
	return astro.Deg(-(lo + hi) / 2), nil
}
