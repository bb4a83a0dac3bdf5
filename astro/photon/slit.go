package photon

import (
	"math"

	"evenfall/astro"
)

// Slit is a slit spectrograph at one wavelength.
type Slit struct {
	At          astro.Wavelength
	ZeroES      float64 // electrons per second and pixel along the dispersion, AB 0, no slit: [NarrowZero] of one pixel's width
	DispersionA float64 // Å per pixel
	WidthArcsec float64 // w
	ScalePixel  float64 // pixels along the dispersion per arcsec of slit
	PixelArcsec float64 // p, along the slit
	Through     Through // sky in AB at the wavelength
}

// leastElement is the least width of a resolution element in pixels: a profile
// sampled less is taken as 2 pixels. Common practice, no source.
const leastElement = 2

func (s Slit) valid() error {
	return first(positive("the wavelength", s.At.Nm()), positive("the zero point in e/s", s.ZeroES), positive("the dispersion in Å per pixel", s.DispersionA),
		within("the slit in arcsec", s.WidthArcsec, 1e-3, 1e4), positive("pixels per arcsec of slit", s.ScalePixel),
		positive("the pixel in arcsec", s.PixelArcsec), s.Through.valid())
}

// Element returns the width of a resolution element in pixels, at least 2.
//
//	W = min(w, F) × pixels per arcsec                    of a star
//	W = w × pixels per arcsec                            where the source fills the slit
//
// Given:
//   - sourceArcsec: F, width of the image; 0: the slit is filled.
func (s Slit) Element(sourceArcsec float64) float64 {
	w := s.WidthArcsec
	if sourceArcsec > 0 {
		w = math.Min(w, sourceArcsec)
	}
	return math.Max(leastElement, w*s.ScalePixel)
}

// Resolution returns λ/(W δ).
//
// Checked: TestExamples.
func (s Slit) Resolution(sourceArcsec float64) float64 {
	return s.At.Nm() * 10 / (s.Element(sourceArcsec) * s.DispersionA)
}

// skyES is the sky on one pixel of the detector.
func (s Slit) skyES() float64 {
	return s.ZeroES * light(s.Through.Sky.MagArcsec2()) * s.WidthArcsec * s.PixelArcsec
}

// SlitPoint is a star in a slit.
type SlitPoint struct {
	Slit
	AB        astro.Mag // at the wavelength, AB: a Vega magnitude and ZeroPoint.ABMinusVega
	Image     Image
	OffArcsec float64 // of the star from the slit's middle line, by differential refraction: [Off]
	Height    float64 // of the extraction in widths of the image; 0: 2
}

// extraction is the height of the extraction in widths of the image. Common
// practice, no source.
const extraction = 2

// Rates returns what falls on the detector, per pixel along the dispersion.
//
//	n = Z 10^(-0.4 (m + k X)) S(w, o) S(h, 0),  s = Z 10^(-0.4 μ) w p,  n_p = h/p,  n_B = 10 n_p
//
// Source: [cite.MerlineHowell1995]; the slit of [Image.Slit].
//
// Checked: TestExamples.
func (p SlitPoint) Rates() (Rates, error) {
	h := p.Height
	if h == 0 {
		h = extraction
	}
	if err := first(p.Slit.valid(), validMag(p.AB), p.Image.valid(), within("the height in widths of the image", h, 0.01, 1000),
		within("the offset in arcsec", p.OffArcsec, -1e4, 1e4)); err != nil {
		return Rates{}, err
	}
	height := h * p.Image.FWHMArcsec
	through := p.ZeroES * light(p.AB.Mags()) * p.Through.dim() * p.Image.Slit(p.WidthArcsec, p.OffArcsec)
	pixels := height / p.PixelArcsec
	return Rates{SourceES: through * p.Image.Slit(height, 0), SkyES: p.skyES(), Pixels: pixels, BackPixels: backPixels * pixels,
		PeakES: through * p.Image.Slit(p.PixelArcsec, 0), Element: p.Element(p.Image.FWHMArcsec)}, nil
}

// SlitLine is a nebula that fills the slit, in one line.
type SlitLine struct {
	Slit
	Surface float64 // erg s^-1 cm^-2 arcsec^-2 in the line, above the atmosphere
	Height  float64 // arcsec along the slit that are summed
}

// Rates returns what falls on the detector in the whole line: over 2 W pixels
// along the dispersion.
//
//	n = F λ/(hc) A η 10^(-0.4 k X) w h,  n_p = 2 W h/p,  A η = Z/(N δ)
//
// Notes:
//  1. No light is lost at a slit that is filled.
//  2. The background is taken as known; where the nebula fills the slit's
//     length too, the sky wants a frame of its own.
//  3. It is the whole line's: the S/N of a pixel or an element means nothing.
//
// Source: [cite.MerlineHowell1995].
//
// Checked: TestExamples.
func (l SlitLine) Rates() (Rates, error) {
	if err := first(l.Slit.valid(), within("the line in erg/s/cm2/arcsec2", l.Surface, 0, 1), positive("the height in arcsec", l.Height)); err != nil {
		return Rates{}, err
	}
	w := l.Element(0)
	per := l.Surface * PhotonsPerErg(l.At) * l.effectiveArea() * l.Through.dim()
	pixels := 2 * w * l.Height / l.PixelArcsec
	return Rates{SourceES: per * l.WidthArcsec * l.Height, SkyES: l.skyES(), Pixels: pixels,
		PeakES: per * l.WidthArcsec * l.PixelArcsec / w}, nil
}

// effectiveArea is A η, from the zero point of one pixel.
func (s Slit) effectiveArea() float64 { return s.ZeroES / (AngstromsAB(s.At) * s.DispersionA) }

// SlitSurface is a source of even brightness in the continuum that fills the
// slit.
type SlitSurface struct {
	Slit
	Surface astro.SurfaceMag // AB at the wavelength, above the atmosphere
	Height  float64          // arcsec along the slit that are summed
}

// Rates returns what falls on the detector, per pixel along the dispersion.
//
//	n = Z 10^(-0.4 (μ + k X)) w h,  n_p = h/p
//
// Source: [cite.MerlineHowell1995].
//
// Checked: TestExtended.
func (l SlitSurface) Rates() (Rates, error) {
	if err := first(l.Slit.valid(), within("the surface brightness", l.Surface.MagArcsec2(), -30, 60), positive("the height in arcsec", l.Height)); err != nil {
		return Rates{}, err
	}
	per := l.ZeroES * light(l.Surface.MagArcsec2()) * l.Through.dim() * l.WidthArcsec
	return Rates{SourceES: per * l.Height, SkyES: l.skyES(), Pixels: l.Height / l.PixelArcsec, PeakES: per * l.PixelArcsec, Element: l.Element(0)}, nil
}
