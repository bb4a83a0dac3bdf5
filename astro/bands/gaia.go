package bands

import (
	"fmt"

	"evenfall/astro/cite"
)

// relation is G less another magnitude as a polynomial in BP - RP.
type relation struct {
	coeff      []float64 // of c^0, c^1, ...
	lo, hi     float64   // range of c
	giantsOver float64   // beyond this c giants alone follow it; 0: no such limit
	scatter    float64   // one sigma, mag
}

// relations leads from Gaia photometry to other bands.
//
//	G - X = a0 + a1 c + a2 c^2 + a3 c^3 + a4 c^4        c = BP - RP
//
// G itself is the trivial one, so that any two bands of the table are tied:
// X = Y + (G - Y) - (G - X).
//
// Source: [cite.RielloEtAl2021], appendix C; as several others print it, the
// ranges of B and z in one copy only. R and I are of Cousins, J H K of 2MASS.
var relations = map[Band]relation{
	V:  {[]float64{-.02704, .01424, -.2156, .01426}, -.5, 5.0, 0, .030},
	R:  {[]float64{-.02275, .3961, -.1243, -.01396, .003775}, 0, 4.0, 2, .032},
	I:  {[]float64{.01753, .76, -.0991}, -.5, 4.5, 0, .038},
	B:  {[]float64{.01448, -.6874, -.3604, .06718, -.006061}, -.5, 4.0, 1.75, .063},
	SG: {[]float64{.2199, -.6365, -.1548, .0064}, .3, 3.0, 2, .075},
	SR: {[]float64{-.09837, .08592, .1907, -.1701, .02263}, 0, 3.0, 2, .038},
	SI: {[]float64{-.293, .6404, -.09609, -.002104}, .5, 2.0, 0, .041},
	SZ: {[]float64{-.4619, .8992, -.08271, .005029}, -.5, 4.5, 0, .041},
	J:  {[]float64{.01798, 1.389, -.09338}, -.5, 2.5, 0, .048},
	H:  {[]float64{-.1048, 2.011, -.1758}, -.5, 2.5, 0, .078},
	K:  {[]float64{-.0981, 2.089, -.1579}, -.5, 2.5, 0, .086},
	G:  {[]float64{0}, -1, 6, 0, 0},
}

// The relations from V and I of Cousins, v = V - I from -0.4 to 5.
//
//	G - V   = -0.01597 - 0.02809 v - 0.2483 v^2 + 0.03656 v^3 - 0.002939 v^4
//	BP - RP = -0.03298 + 1.259 v - 0.1279 v^2 + 0.01631 v^3
//
// Source: [cite.RielloEtAl2021], appendix C. The scatter was in no source at
// hand: that of V for the first and 0.05 mag for the second are common
// practice, no source.
var (
	gFromVI     = relation{[]float64{-.01597, -.02809, -.2483, .03656, -.002939}, -.4, 5, 0, .030}
	colorFromVI = relation{[]float64{-.03298, 1.259, -.1279, .01631}, -.4, 5, 0, .05}
)

// at returns the polynomial's value and slope.
func (r *relation) at(x float64) (value, slope float64) {
	for i := len(r.coeff) - 1; i >= 0; i-- {
		slope = slope*x + value
		value = value*x + r.coeff[i]
	}
	return value, slope
}

// rounding is what the difference of two magnitudes may miss its colour by.
const rounding = 1e-9

// holds tells whether the relation may be used at a colour, and if not why.
func (r *relation) holds(b Band, c float64, lum Luminosity) *Refusal {
	switch {
	case !(c >= r.lo-rounding && c <= r.hi+rounding):
		return &Refusal{Reason: OutsideRange, Want: b,
			Words: fmt.Sprintf("BP-RP %.2f is outside %.4g to %.4g, where the relation for %s holds", c, r.lo, r.hi, b)}
	case lum == WhiteDwarf && !(b == V || b == G):
		return &Refusal{Reason: NeedsModel, Want: b, Words: fmt.Sprintf("the relation for %s is not one for white dwarfs; their models give it", b)}
	case lum == WhiteDwarf && c > whiteDwarfReddest:
		return &Refusal{Reason: OutsideRange, Want: b,
			Words: fmt.Sprintf("BP-RP %.2f: for white dwarfs V follows from Gaia only up to %.1f", c, whiteDwarfReddest)}
	case r.giantsOver > 0 && c > r.giantsOver && lum != Giant:
		return &Refusal{Reason: GiantsOnly, Want: b,
			Words: fmt.Sprintf("beyond BP-RP %.4g the relation for %s is one for giants, which the star is not known to be", r.giantsOver, b)}
	}
	return nil
}

// whiteDwarfReddest is the reddest BP - RP at which V of a white dwarf follows
// from Gaia.
const whiteDwarfReddest = 0.5

// FromGaia returns a magnitude from G and BP - RP.
//
//	X = G - (a0 + a1 c + a2 c^2 + ...)        c = BP - RP
//
// Given:
//   - want: one of V R I B g r i z J H K.
//   - g, c: magnitude and colour, as observed.
//   - lum: beyond a limit of colour some relations hold for giants alone.
//
// Returns:
//   - the magnitude and the scatter of the relation, one sigma.
//   - a [Refusal] outside the relation's range; it is never extrapolated.
//
// Notes:
//  1. Not for stars with emission lines (nebulae, novae, symbiotics): more than
//     a magnitude wrong.
//  2. White dwarfs: V alone, up to c = 0.5.
//  3. BP of faint, very red stars is unreliable, and so is all that follows.
//
// Source: [cite.RielloEtAl2021], appendix C.
//
// Checked: TestFromGaia: G = 10 at c = 0.82 and 3.0.
func FromGaia(want Band, g, c float64, lum Luminosity) (mag, scatter float64, err error) {
	r, ok := relations[want]
	if !ok || want == G {
		return 0, 0, &Refusal{Reason: NoRelation, Want: want, Words: fmt.Sprintf("no relation leads from Gaia photometry to %s", want)}
	}
	if !plausible(g) {
		return 0, 0, &Refusal{Reason: NoMagnitude, Want: want, Words: fmt.Sprintf("G %g is no magnitude", g)}
	}
	if no := r.holds(want, c, lum); no != nil {
		return 0, 0, no
	}
	v, _ := r.at(c)
	return g - v, r.scatter, nil
}

// gaiaSource names the work behind the relations.
var gaiaSource = cite.RielloEtAl2021.String()
