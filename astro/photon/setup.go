package photon

import (
	"math"

	"evenfall/astro"
)

// Through is what the atmosphere and the sky do to an exposure.
type Through struct {
	Extinction float64          // k in the band, mag per airmass
	Airmass    astro.Airmass    // X
	Sky        astro.SurfaceMag // as seen from the ground, in the system of the zero point
}

// valid refuses what cannot be.
func (t Through) valid() error {
	return first(within("the extinction in mag per airmass", t.Extinction, 0, 100), within("the airmass", float64(t.Airmass), 0.99, 50),
		within("the sky in mag/arcsec2", t.Sky.MagArcsec2(), -30, 60))
}

// dim is 10^(-0.4 k X).
func (t Through) dim() float64 { return light(t.Extinction * float64(t.Airmass)) }

// light is 10^(-0.4 m).
func light(m float64) float64 { return math.Pow(10, -0.4*m) }

// validMag refuses a magnitude beyond anything seen.
func validMag(m astro.Mag) error { return within("the magnitude", m.Mags(), -30, 60) }

// DefaultAperture is the radius of the aperture in widths of the image. Common
// practice, no source; where only the sky counts 0.68 is best for a Gaussian.
const DefaultAperture = 0.8

// Point is a star on an imager or a fast photometer.
type Point struct {
	ZeroES      float64 // electrons per second of magnitude 0 above the atmosphere
	Mag         astro.Mag
	Through     Through
	Image       Image
	PixelArcsec float64
	Aperture    float64 // radius in widths of the image; 0: 0.8
}

// Rates returns what falls on the detector.
//
//	n = Z 10^(-0.4 (m + k X)) E(r),  s = Z 10^(-0.4 μ) p²,  n_p = π r²/p²,  n_B = 10 n_p
//
// Notes:
//  1. The sky's magnitude holds the atmosphere already: no k X.
//  2. Scintillation and floor are left 0, to be filled in.
//
// Source: [cite.MerlineHowell1995].
//
// Checked: TestExamples.
func (p Point) Rates() (Rates, error) {
	a := p.Aperture
	if a == 0 {
		a = DefaultAperture
	}
	if err := first(positive("the zero point in e/s", p.ZeroES), validMag(p.Mag), p.Through.valid(), p.Image.valid(),
		positive("the pixel in arcsec", p.PixelArcsec), within("the aperture in widths of the image", a, 0.01, 1000)); err != nil {
		return Rates{}, err
	}
	r := a * p.Image.FWHMArcsec
	total := p.ZeroES * light(p.Mag.Mags()) * p.Through.dim()
	pixels := math.Pi * r * r / (p.PixelArcsec * p.PixelArcsec)
	return Rates{SourceES: total * p.Image.Within(r), SkyES: p.ZeroES * light(p.Through.Sky.MagArcsec2()) * p.PixelArcsec * p.PixelArcsec,
		Pixels: pixels, BackPixels: backPixels * pixels, PeakES: total * p.Image.Peak(p.PixelArcsec)}, nil
}

// Extended is a part of a source of even brightness on an imager, in the
// continuum or in a broad band.
type Extended struct {
	ZeroES      float64
	Surface     astro.SurfaceMag // of the source, above the atmosphere
	AreaArcsec2 float64          // over which it is summed
	Through     Through
	PixelArcsec float64
}

// Rates returns what falls on the detector.
//
//	n = Z 10^(-0.4 (μ + k X)) Ω,  n_p = Ω/p²
//
// Notes:
//  1. The background is taken as known: there is sky enough around.
//
// Source: [cite.MerlineHowell1995].
//
// Checked: TestExtended.
func (x Extended) Rates() (Rates, error) {
	if err := first(positive("the zero point in e/s", x.ZeroES), within("the surface brightness", x.Surface.MagArcsec2(), -30, 60),
		positive("the area in arcsec2", x.AreaArcsec2), x.Through.valid(), positive("the pixel in arcsec", x.PixelArcsec)); err != nil {
		return Rates{}, err
	}
	return surfaceRates(x.ZeroES*light(x.Surface.MagArcsec2())*x.Through.dim(), x.ZeroES, x.AreaArcsec2, x.Through, x.PixelArcsec), nil
}

// surfaceRates spreads e/s/arcsec² over an area.
func surfaceRates(perArcsec2, zeroES, area float64, t Through, pixel float64) Rates {
	p2 := pixel * pixel
	return Rates{SourceES: perArcsec2 * area, SkyES: zeroES * light(t.Sky.MagArcsec2()) * p2, Pixels: area / p2, PeakES: perArcsec2 * p2}
}

// LineImage is a part of a nebula in one line, through a narrow filter.
type LineImage struct {
	Zero        ZeroPoint // of the filter, AB: [NarrowZero] at its middle, with its width
	ZeroES      float64   // electrons per second of AB 0; [ZeroPoint.ZeroRate]
	Line        astro.Wavelength
	Surface     float64 // erg s^-1 cm^-2 arcsec^-2 in the line, above the atmosphere
	AreaArcsec2 float64
	Through     Through // sky in AB at the filter
	PixelArcsec float64
}

// Rates returns what falls on the detector.
//
//	n = F λ/(hc) A η 10^(-0.4 k X) Ω,  s = Z 10^(-0.4 μ) p²,  n_p = Ω/p²
//
// with A η from the zero point.
//
// Notes:
//  1. See to it that the line stays inside the filter: [DopplerShift]; beams
//     faster than f/5 shift the filter to the blue besides.
//  2. Most Hα filters pass [N II] too: take the sum of both.
//
// Source: [cite.MerlineHowell1995].
//
// Checked: TestExamples.
func (l LineImage) Rates() (Rates, error) {
	if err := first(positive("the filter's zero point", l.Zero.Photons()), positive("the zero point in e/s", l.ZeroES), positive("the line's wavelength", l.Line.Nm()),
		within("the line in erg/s/cm2/arcsec2", l.Surface, 0, 1), positive("the area in arcsec2", l.AreaArcsec2), l.Through.valid(),
		positive("the pixel in arcsec", l.PixelArcsec)); err != nil {
		return Rates{}, err
	}
	per := l.Surface * PhotonsPerErg(l.Line) * l.Zero.EffectiveArea(l.ZeroES) * l.Through.dim()
	return surfaceRates(per, l.ZeroES, l.AreaArcsec2, l.Through, l.PixelArcsec), nil
}

// LinePoint returns what falls on the detector where a nebula is so small that
// it is a point: see [Small].
//
// Given:
//   - l: with Surface left out.
//   - flux: erg s^-1 cm^-2 of the whole nebula.
//   - image: of a star.
//   - aperture: radius in widths of the image; 0: 0.8.
func (l LineImage) LinePoint(flux float64, image Image, aperture float64) (Rates, error) {
	if err := first(positive("the filter's zero point", l.Zero.Photons()), positive("the line's wavelength", l.Line.Nm()),
		positive("the line in erg/s/cm2", flux)); err != nil {
		return Rates{}, err
	}
	mag := -2.5 * math.Log10(flux*PhotonsPerErg(l.Line)/l.Zero.Photons())
	return Point{ZeroES: l.ZeroES, Mag: astro.Mags(mag), Through: l.Through, Image: image, PixelArcsec: l.PixelArcsec, Aperture: aperture}.Rates()
}

// SurfaceOf returns the mean surface brightness of a nebula.
//
//	F / (π θ²/4)                                         per arcsec²
//
// Given:
//   - flux: of the whole, any unit.
//   - diameterArcsec: θ, the full diameter, not the radius: mixing them up is a
//     factor of 4.
//
// Source: geometry.
//
// Checked: TestExtended.
func SurfaceOf(flux, diameterArcsec float64) float64 {
	return flux / (math.Pi * diameterArcsec * diameterArcsec / 4)
}

// Small tells whether a nebula is to be treated as a star: its full diameter is
// less than twice the width of an image. Common practice, no source.
func Small(diameterArcsec float64, image Image) bool { return diameterArcsec < 2*image.FWHMArcsec }

// DopplerShift returns how far a line is shifted by a velocity along the line
// of sight, receding positive.
//
//	λ v/c
func DopplerShift(line astro.Wavelength, kms float64) astro.Wavelength {
	return astro.Nm(line.Nm() * kms * 1e13 / lightAngS)
}

// Rayleigh returns one rayleigh, the unit of diffuse emission, at a wavelength.
//
//	10^6/(4π) photons s^-1 cm^-2 sr^-1 × h c/λ           erg s^-1 cm^-2 arcsec^-2
//
// Checked: TestExtended, at Hα and [O III].
func Rayleigh(at astro.Wavelength) float64 {
	return 1e6 / (4 * math.Pi) / (arcsecPerRad * arcsecPerRad) / PhotonsPerErg(at)
}

// FlatSky returns the brightness of the twilight sky in which a flat field of
// an exposure reaches a level.
//
//	μ = -2.5 log [N / (t Z p²)]
//
// Given:
//   - zeroES: Z; pixelArcsec: p; levelE: N, electrons, e.g. half the linear
//     limit (common practice, no source); exposureS: t.
//
// Returns:
//   - mag/arcsec²; not a number where an argument is not above 0.
//
// Checked: TestFlat.
func FlatSky(zeroES, pixelArcsec, levelE, exposureS float64) astro.SurfaceMag {
	return astro.MagArcsec2(-2.5 * math.Log10(levelE/(exposureS*zeroES*pixelArcsec*pixelArcsec)))
}

// FlatS returns the exposure of a flat field in a sky of a brightness: the
// inverse of [FlatSky].
func FlatS(zeroES, pixelArcsec, levelE float64, sky astro.SurfaceMag) float64 {
	return levelE / (zeroES * pixelArcsec * pixelArcsec * light(sky.MagArcsec2()))
}
