package photon

import "evenfall/astro"

// gaiaFit is X = G - Σ a_i c^i, c = BP - RP, from lo to hi, with its scatter.
// Beyond hiAll only giants were fitted.
//
// Source: [cite.RielloEtAl2021], appendix C, and the tables of the data
// release's documentation; B's range and z seen in one copy.
var gaiaFit = map[string]struct {
	a      []float64
	lo, hi float64
	hiAll  float64
	sigma  float64
}{
	"V": {[]float64{-.02704, .01424, -.2156, .01426}, -.5, 5, 5, .030},
	"R": {[]float64{-.02275, .3961, -.1243, -.01396, .003775}, 0, 4, 2, .032},
	"I": {[]float64{.01753, .76, -.0991}, -.5, 4.5, 4.5, .038},
	"B": {[]float64{.01448, -.6874, -.3604, .06718, -.006061}, -.5, 4, 1.75, .063},
	"g": {[]float64{.2199, -.6365, -.1548, .0064}, .3, 3, 2, .075},
	"r": {[]float64{-.09837, .08592, .1907, -.1701, .02263}, 0, 3, 2, .038},
	"i": {[]float64{-.293, .6404, -.09609, -.002104}, .5, 2, 2, .041},
	"z": {[]float64{-.4619, .8992, -.08271, .005029}, -.5, 4.5, 4.5, .041},
	"J": {[]float64{.01798, 1.389, -.09338}, -.5, 2.5, 2.5, .048},
	"H": {[]float64{-.1048, 2.011, -.1758}, -.5, 2.5, 2.5, .078},
	"K": {[]float64{-.0981, 2.089, -.1579}, -.5, 2.5, 2.5, .086},
}

// FromGaia returns a star's magnitude in another band.
//
//	X = G - Σ a_i (BP - RP)^i
//
// Given:
//   - band: B V R I g r i z J H K.
//   - bpRp: BP - RP, within the range of the fit.
//   - giant: a giant; the reddest part of B, R, g and r holds for giants alone.
//
// Returns:
//   - the magnitude (AB for g r i z, Vega else) and its scatter, 0.030 to 0.086
//     mag; false outside the range: nothing is extrapolated.
//
// Notes:
//  1. Not for sources of emission lines (nebulae, novae, symbiotic stars),
//     which it can miss by a magnitude; for white dwarfs V alone, bluer than 0.5.
//
// Source: [cite.RielloEtAl2021], appendix C.
//
// Checked: TestFromGaia, at BP - RP 0.82 and 3.0.
func FromGaia(band string, g astro.Mag, bpRp float64, giant bool) (m astro.Mag, sigma float64, ok bool) {
	f, ok := gaiaFit[band]
	if !ok || !(bpRp >= f.lo && bpRp <= f.hi) || bpRp > f.hiAll && !giant {
		return astro.Mag{}, 0, false
	}
	sum := 0.0
	for i := len(f.a) - 1; i >= 0; i-- {
		sum = sum*bpRp + f.a[i]
	}
	return g.Fainter(-sum), f.sigma, true
}
