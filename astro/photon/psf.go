package photon

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/numeric"
)

// DefaultBeta is the exponent of a star's image where none is given; real
// images have 2.5 to 3.5 (common practice, no source), turbulence alone 4.765.
//
// Source: [cite.TrujilloEtAl2001] for the theory.
const DefaultBeta = 3.5

// Image is the image of a star: Moffat's shape, or a Gaussian.
//
//	I(r) ∝ (1 + r²/a²)^-β,  a = F / (2 √(2^(1/β) - 1))
type Image struct {
	FWHMArcsec float64 // F, full width at half the brightest
	Beta       float64 // β, above 1; 0: 3.5; +Inf: a Gaussian
}

// valid refuses an image that has no width.
func (i Image) valid() error {
	if b := i.Beta; b != 0 && !(b > 1.01) {
		return fail("the exponent of the image", b, "give 1.01 or more, or 0 for 3.5")
	}
	return within("the width of the image in arcsec", i.FWHMArcsec, 1e-3, 1e4)
}

// beta returns the exponent in use.
func (i Image) beta() float64 {
	if i.Beta == 0 {
		return DefaultBeta
	}
	return i.Beta
}

// gaussian tells a Gaussian, and what cannot be told from it.
func (i Image) gaussian() bool { return i.beta() > 1e4 }

// core is a² of the shape.
func (i Image) core() float64 {
	return i.FWHMArcsec * i.FWHMArcsec / (4 * (math.Pow(2, 1/i.beta()) - 1))
}

// Within returns the fraction of the light inside a circle.
//
//	Moffat:   1 - (1 + r²/a²)^(1-β)
//	Gaussian: 1 - exp(-4 ln2 r²/F²)
//
// Given:
//   - radiusArcsec: r, 0 or more.
//
// Source: [cite.Moffat1969]; geometry.
//
// Checked: TestImages, to the digits of testdata/astro/images.csv.
func (i Image) Within(radiusArcsec float64) float64 {
	r2 := radiusArcsec * radiusArcsec
	if i.gaussian() {
		return -math.Expm1(-4 * math.Ln2 * r2 / (i.FWHMArcsec * i.FWHMArcsec))
	}
	return -math.Expm1((1 - i.beta()) * math.Log1p(r2/i.core()))
}

// Slit returns the fraction of the light inside a long slit.
//
//	Moffat:   ½ [G(w/2 - o) + G(w/2 + o)],  G(x) = ± I_u(½, β-1),  u = x²/(x² + a²)
//	Gaussian: the same with G(x) = erf(2 √ln2 x/F)
//
// Given:
//   - widthArcsec: w, 0 or more.
//   - offArcsec: o, from the slit's middle line to the star, either sign.
//
// Notes:
//  1. Serves for the height of an extraction too.
//
// Source: [cite.Moffat1969]; the integral by the incomplete beta function,
// [cite.AbramowitzStegun1964], 26.5.8.
//
// Checked: TestImages; TestSlitOffset, against the integral.
func (i Image) Slit(widthArcsec, offArcsec float64) float64 {
	half, off := widthArcsec/2, math.Abs(offArcsec)
	return math.Max(0, (i.side(half-off)+i.side(half+off))/2)
}

// side is G, the fraction of light within |x| of the middle line, odd in x.
func (i Image) side(x float64) float64 {
	if i.gaussian() {
		return math.Erf(2 * math.Sqrt(math.Ln2) * x / i.FWHMArcsec)
	}
	return math.Copysign(halfBeta(x*x/(x*x+i.core()), i.beta()-1), x)
}

// pixelRule integrates around the pixel's edge; smooth there, eight nodes give
// nine digits.
var pixelRule = numeric.NewGauss(8)

// Peak returns the fraction of the light on the brightest pixel, the star in
// its middle: the worst case for saturation.
//
//	(4/π) ∫ from 0 to π/4 of Within(p / (2 cos θ)) dθ
//
// Given:
//   - pixelArcsec: p, side of the pixel.
//
// Source: geometry, in polar coordinates.
//
// Checked: TestImages.
func (i Image) Peak(pixelArcsec float64) float64 {
	v, err := pixelRule.Over(func(theta float64) float64 { return i.Within(pixelArcsec / 2 / math.Cos(theta)) }, 0, math.Pi/4)
	if err != nil {
		return math.NaN()
	}
	return 4 / math.Pi * v
}

// betaSteps limits the continued fraction; it takes 5 to 30.
const betaSteps = 300

// halfBeta returns the incomplete beta function I_u(½, b).
//
// Source: [cite.AbramowitzStegun1964], 26.5.8, summed forwards.
//
// Checked: TestImages; TestSlitOffset.
func halfBeta(u, b float64) float64 {
	const a = 0.5
	switch {
	case u <= 0:
		return 0
	case u >= 1:
		return 1
	case math.IsNaN(u + b):
		return math.NaN()
	}
	g1, _ := math.Lgamma(a + b)
	g2, _ := math.Lgamma(b)
	front := math.Exp(g1-g2+a*math.Log(u)+b*math.Log1p(-u)) / math.Sqrt(math.Pi)
	if u < (a+1)/(a+b+2) {
		return math.Min(1, front*betaFraction(u, a, b)/a)
	}
	return math.Max(0, 1-front*betaFraction(1-u, b, a)/b)
}

// betaFraction is the continued fraction of 26.5.8.
func betaFraction(x, a, b float64) float64 {
	const tiny = 1e-300
	away := func(v float64) float64 {
		if math.Abs(v) < tiny {
			return tiny
		}
		return v
	}
	c, d := 1.0, 1/away(1-(a+b)*x/(a+1))
	h := d
	for m := 1.0; m < betaSteps; m++ {
		for _, step := range [2]float64{
			m * (b - m) * x / ((a + 2*m - 1) * (a + 2*m)),
			-(a + m) * (a + b + m) * x / ((a + 2*m) * (a + 2*m + 1)),
		} {
			d = 1 / away(1+step*d)
			c = away(1 + step/c)
			h *= c * d
		}
		if math.Abs(c*d-1) < 1e-14 {
			break
		}
	}
	return h
}

// Seeing is the width of images, as given for the zenith and 0.5 micrometres.
type Seeing struct {
	ZenithArcsec float64
	Monitor      bool    // from a monitor, not from images: the outer scale narrows it
	OuterScaleM  float64 // 0: 25 m
	ImageQuality float64 // arcsec added by telescope, instrument and guiding
}

// What is assumed of turbulence: its outer scale, metres, and the least ratio
// to Fried's parameter for which its effect is known.
const (
	outerScaleM   = 25
	leastScales   = 20
	arcsecPerRad  = 206264.806247
	seeingMicron  = 0.5
	friedConstant = 0.976
)

// Fried returns Fried's parameter.
//
//	r0 = 0.976 λ/F                                       m
//
// Source: [cite.Roddier1981], from memory, not checked against the publication.
//
// Checked: TestSeeing.
func Fried(fwhmArcsec float64, at astro.Wavelength) float64 {
	return friedConstant * at.Micron() * 1e-6 / (fwhmArcsec / arcsecPerRad)
}

// Width returns the width of a star's image.
//
//	F = √(S² + Q²),  S = S0 X^0.6 (λ/0.5)^-0.2
//	from a monitor: S √(1 - 2.183 (r0/L0)^0.356), where L0 > 20 r0
//
// Given:
//   - at: λ, micrometres in the formula.
//   - x: airmass.
//
// Returns:
//   - arcsec; an error for seeing that is 0, or any argument not a number.
//
// Source: [cite.Roddier1981], from memory, not checked against the publication;
// [cite.Tokovinin2002].
//
// Checked: TestSeeing.
func (s Seeing) Width(at astro.Wavelength, x astro.Airmass) (float64, error) {
	if err := first(within("the seeing in arcsec", s.ZenithArcsec, 0.01, 100), within("the airmass", float64(x), 0.99, 50),
		within("the wavelength in nm", at.Nm(), 100, 1e5), within("the image quality in arcsec", s.ImageQuality, 0, 1000),
		within("the outer scale in m", s.OuterScaleM, 0, 1e6)); err != nil {
		return math.NaN(), err
	}
	f := s.ZenithArcsec * math.Pow(float64(x), 0.6) * math.Pow(at.Micron()/seeingMicron, -0.2)
	if s.Monitor {
		scale := s.OuterScaleM
		if scale == 0 {
			scale = outerScaleM
		}
		if ratio := Fried(f, at) / scale; ratio < 1.0/leastScales {
			f *= math.Sqrt(1 - 2.183*math.Pow(ratio, 0.356))
		}
	}
	return math.Hypot(f, s.ImageQuality), nil
}
