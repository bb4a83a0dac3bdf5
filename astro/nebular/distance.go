package nebular

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/cite"
)

// RadiusArcsec returns the radius, seconds of arc, of a round nebula as large
// as one of given axes: half their geometric mean.
//
// Given:
//   - major, minor: full axes, as lists give them; minor 0 or not a number
//     where only one is listed.
//
// Returns:
//   - the radius; [ErrInput] for a major axis not above 0.
//
// Checked: TestSurface.
func RadiusArcsec(major, minor float64) (float64, error) {
	if !positive(major) {
		return math.NaN(), bad("diameter", major)
	}
	if !positive(minor) {
		minor = major
	}
	return math.Sqrt(major*minor) / 2, nil
}

// LogSurface returns log10 of the mean surface brightness, erg/s/cm2/sr.
//
//	S = F / (π θ²)      θ: radius
//
// Given:
//   - logF: log10 of the flux, erg/s/cm2; radiusArcsec: of [RadiusArcsec], not
//     a diameter.
//
// Returns:
//   - log10 of S; [ErrInput].
//
// Source: geometry.
//
// Checked: TestNebulae: the Helix.
func LogSurface(logF, radiusArcsec float64) (float64, error) {
	if !isFlux(logF) || !positive(radiusArcsec) {
		return math.NaN(), bad("log flux and radius", logF, radiusArcsec)
	}
	return logF + math.Log10(arcsec2PerSr/(math.Pi*radiusArcsec*radiusArcsec)), nil
}

// SurfaceMag returns the mean surface brightness of a nebula in a line.
//
//	m + 2.5 log(π θ²)      θ in seconds of arc
//
// Source: geometry.
//
// Checked: TestSurface.
func SurfaceMag(m astro.Mag, radiusArcsec float64) (astro.SurfaceMag, error) {
	if !finite(m.Mags()) || !positive(radiusArcsec) {
		return astro.MagArcsec2(math.NaN()), bad("magnitude and radius", m.Mags(), radiusArcsec)
	}
	return astro.MagArcsec2(m.Mags() + 2.5*math.Log10(math.Pi*radiusArcsec*radiusArcsec)), nil
}

// Depth says whether a nebula lets its star's ionising light through.
type Depth int

// The depths.
const (
	DepthUnknown Depth = iota
	Thick
	Thin
)

// Statistical is a distance that holds on average.
type Statistical struct {
	RadiusPc, DistancePc float64
	RelErr               float64 // scatter of the distance, as a fraction; 0 where none was published
	Source               cite.Ref
	Note                 string
}

// The dispersion of the distances: 18 per cent for thin, highly excited
// nebulae, 28 for all.
//
// Source: [cite.FrewEtAl2016]; the 28 from memory, not checked against a
// publication.
const frewAll, frewThin = 0.28, 0.18

// frewLaws are slope and constant of log S = a log r + b by [Depth].
var frewLaws = [...][2]float64{DepthUnknown: {-3.63, -5.34}, Thick: {-3.32, -4.97}, Thin: {-3.75, -5.73}}

// DistanceFromHa returns the distance of a nebula by its surface brightness in
// H alpha.
//
//	log S = -3.63 log r - 5.34      all;  S in erg/s/cm2/sr, r in pc
//	log S = -3.32 log r - 4.97      optically thick
//	log S = -3.75 log r - 5.73      optically thin
//	d = 206265 r / θ                pc, θ in seconds of arc
//
// Given:
//   - logF0: log10 of the flux in H alpha alone, without dust and [N II].
//   - radiusArcsec: of [RadiusArcsec].
//
// Returns:
//   - radius and distance; [ErrInput].
//
// Notes:
//  1. The coefficients are from memory, not checked against a publication; the
//     Helix comes out at 210 pc, its parallax says 200.
//  2. A parallax of the central star better than 20 per cent is to be preferred.
//
// Source: [cite.FrewEtAl2016].
//
// Checked: TestNebulae.
func DistanceFromHa(logF0, radiusArcsec float64, depth Depth) (Statistical, error) {
	if depth < DepthUnknown || depth > Thin {
		return Statistical{}, bad("optical depth", float64(depth))
	}
	s, err := LogSurface(logF0, radiusArcsec)
	if err != nil {
		return Statistical{}, err
	}
	law := frewLaws[depth]
	out := Statistical{RelErr: frewAll, Source: cite.FrewEtAl2016, Note: "coefficients " + FromMemory}
	if depth == Thin {
		out.RelErr = frewThin
	}
	return out.at(math.Pow(10, (s-law[1])/law[0]), radiusArcsec)
}

// at fills in radius and distance.
func (s Statistical) at(rPc, radiusArcsec float64) (Statistical, error) {
	s.RadiusPc, s.DistancePc = rPc, arcsecPerRad*rPc/radiusArcsec
	if !positive(s.RadiusPc, s.DistancePc) {
		return Statistical{}, bad("radius and distance in pc", s.RadiusPc, s.DistancePc)
	}
	return s, nil
}

// DistanceFromHb returns the distance of a nebula by its surface brightness in
// H beta, independent of [DistanceFromHa].
//
//	log R = -0.226 log S - 3.920      R in pc, S = I/(π θ²), θ in seconds of arc
//
// Given:
//   - logI: log10 of the flux in H beta without dust, erg/s/cm2.
//   - radiusArcsec: of [RadiusArcsec].
//
// Returns:
//   - radius and distance, without an error; [ErrInput].
//
// Source: [cite.StanghelliniEtAl2020], abstract.
//
// Checked: TestNebulae, by hand.
func DistanceFromHb(logI, radiusArcsec float64) (Statistical, error) {
	if !isFlux(logI) || !positive(radiusArcsec) {
		return Statistical{}, bad("log flux and radius", logI, radiusArcsec)
	}
	logS := logI - math.Log10(math.Pi*radiusArcsec*radiusArcsec)
	return Statistical{Source: cite.StanghelliniEtAl2020}.at(math.Pow(10, -0.226*logS-3.920), radiusArcsec)
}

// parallaxWins is parallax over error from which a central star's parallax
// beats the statistical distance. Common practice, no source.
const parallaxWins = 5

// PreferParallax tells whether the central star's parallax beats a statistical
// distance: where it is more than 5 errors.
//
// Checked: TestSurface.
func PreferParallax(plxMas, errMas float64) bool {
	return errMas > 0 && finite(plxMas, errMas) && plxMas/errMas > parallaxWins
}
