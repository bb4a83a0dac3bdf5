package skyglow

import (
	"math"

	"evenfall/astro"
)

// Nanolamberts is a surface brightness, as the model of moonlight counts it.
type Nanolamberts float64

// The scale of nanolamberts, [cite.KrisciunasSchaefer1991], eq. 1.
const (
	nlPerUnit = 34.08
	nlZero    = 20.7233
	nlSlope   = 0.92104
)

// NanolambertsOf returns a V surface brightness in nanolamberts.
//
//	B = 34.08 exp(20.7233 - 0.92104 V)
//
// Source: [cite.KrisciunasSchaefer1991], eq. 1. Seen as others print it.
//
// Checked: TestNanolamberts, their dark zenith: V 21.587, 79.0 nL.
func NanolambertsOf(v astro.SurfaceMag) Nanolamberts {
	return Nanolamberts(nlPerUnit * math.Exp(nlZero-nlSlope*v.MagArcsec2()))
}

// V returns the V surface brightness; without light it is infinitely faint.
func (b Nanolamberts) V() astro.SurfaceMag {
	return astro.MagArcsec2((nlZero - math.Log(float64(b)/nlPerUnit)) / nlSlope)
}

// meanMoonKm is the distance that the Moon's brightness was taken at.
const meanMoonKm = 384400

// Moonlight is the Moon and the point of sky that it lights.
type Moonlight struct {
	Phase      astro.Angle // Sun-Moon-Earth; 0 full, 180 degrees new
	Separation astro.Angle // from the Moon to the point
	Zenith     astro.Angle // zenith distance of the point, true
	MoonZenith astro.Angle // zenith distance of the Moon, true
	Extinction float64     // magnitudes per airmass
	DistanceKm float64     // to the Moon; 0: 384400
	Surge      bool        // brighten the Moon within 7 degrees of full, up to 1.35 times
	// weights of light scattered by molecules and by aerosols, 0 and 0 in V;
	// other bands differ
	rayleigh, mie float64
}

// Brightness returns the light that the Moon adds to one point of sky, in V.
//
//	B = f I 10^(-0.4 k Xm) [1 - 10^(-0.4 k X)]
//	I = 10^(-0.4 (3.84 + 0.026 |α| + 4e-9 α⁴)) (384400/d)²         α in degrees
//	f = 10^5.36 (1.06 + cos² ρ) + 10^(6.15 - ρ/40)                 ρ >= 10 degrees
//	f = 10^5.36 (1.06 + cos² ρ) + 6.2e7/ρ²                         ρ < 10 degrees
//	X = (1 - 0.96 sin² z)^(-1/2), Xm likewise from zm
//
// Returns:
//   - nanolamberts; exactly 0 when the Moon or the point is below the horizon.
//   - not a number only where an argument is not.
//
// Notes:
//  1. The authors found 8 to 23 per cent agreement with their data. Real skies
//     under the Moon differ by 0.3 mag.
//  2. X is the model's own airmass; [evenfall/astro/air.Mass] must not replace
//     it, because the coefficients were fitted with this one.
//  3. It jumps to 0 where the Moon sets, as the model does.
//  4. Within 2 degrees of the Moon the value for 2 degrees is given.
//
// Source: [cite.KrisciunasSchaefer1991]. Coefficients agree with several
// independent copies; the paper itself was not at hand.
//
// Checked: TestMoonlight, against testdata/astro/moonlight.csv, to its digits.
func (m Moonlight) Brightness() Nanolamberts {
	z, zm := m.Zenith.Deg(), m.MoonZenith.Deg()
	if z >= 90 || zm >= 90 {
		return 0
	}
	moon := moonIlluminance(m) * math.Pow(10, -0.4*m.Extinction*path(zm))
	return Nanolamberts(scattering(m) * moon * (1 - math.Pow(10, -0.4*m.Extinction*path(z))))
}

// path is the model's own airmass for a zenith distance in degrees.
func path(zDeg float64) float64 {
	s := astro.Deg(zDeg).Sin()
	return 1 / math.Sqrt(1-0.96*s*s)
}

// moonIlluminance is I*, with the Moon's distance and surge.
func moonIlluminance(m Moonlight) float64 {
	a := math.Abs(m.Phase.Deg())
	i := math.Pow(10, -0.4*(3.84+0.026*a+4e-9*a*a*a*a))
	if m.DistanceKm != 0 {
		r := meanMoonKm / m.DistanceKm
		i *= r * r
	}
	if m.Surge && a < 7 {
		i *= 1.35 - 0.05*a
	}
	return i
}

// leastSeparationDeg is how near the Moon the model is asked.
const leastSeparationDeg = 2

// scattering is f, both kinds with their weights.
func scattering(m Moonlight) float64 {
	wr, wm := m.rayleigh, m.mie
	if wr == 0 && wm == 0 {
		wr, wm = 1, 1
	}
	rho := math.Max(leastSeparationDeg, math.Abs(m.Separation.Deg()))
	c := astro.Deg(rho).Cos()
	mie := 6.2e7 / (rho * rho)
	if rho >= 10 {
		mie = math.Pow(10, 6.15-rho/40)
	}
	return wr*math.Pow(10, 5.36)*(1.06+c*c) + wm*mie
}

// moonColour is (V - b) of the Moon in the five bands: U from memory of
// [cite.LaneIrvine1973], not checked against the publication; B as tables of
// the Moon print it; R and I from an albedo that rises as λ^0.82, common
// practice, no source.
var moonColour = [fives]float64{-1.38, -0.92, 0, 0.50, 1.03}

// How moonlight outside V is told from that in V: the aerosols' extinction goes
// as λ^-1.38 ([cite.PatatEtAl2011]) and is at least 0.02 in V.
const (
	moonAlpha     = 1.38
	moonLeastHaze = 0.02
)

// moonWeights are the shares of molecules and aerosols in the extinction of one
// band, relative to V, and the extinction itself.
type moonWeights struct{ rayleigh, mie, k float64 }

// weightsOf carries moonlight from V to the five bands.
//
//	w = (k_part / k) / (k_part / k in V), part molecules or aerosols
//
// Source: an extension of [cite.KrisciunasSchaefer1991] made here.
//
// Checked: TestMoonWeights.
func weightsOf(e *Extinction) (out [fives]moonWeights) {
	v := astro.Micron(fiveMicron[bandV])
	kV := e.In(fiveBand(bandV))
	haze := math.Max(moonLeastHaze, kV-Rayleigh(v, e.heightKm)-Ozone(v, e.ozoneDU))
	var parts [fives]moonWeights
	for i, micron := range fiveMicron {
		at := astro.Micron(micron)
		r := Rayleigh(at, e.heightKm)
		a := haze * math.Pow(micron/fiveMicron[bandV], -moonAlpha)
		k := r + a + Ozone(at, e.ozoneDU)
		parts[i] = moonWeights{r / k, a / k, k}
	}
	for i, p := range parts {
		out[i] = moonWeights{p.rayleigh / parts[bandV].rayleigh, p.mie / parts[bandV].mie, p.k}
	}
	return out
}

// fiveBand returns one of the five bands by its index.
func fiveBand(i int) Band {
	b, _ := BandOf([fives]string{"U", "B", "V", "R", "I"}[i])
	return b
}
