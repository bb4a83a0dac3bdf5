package degenerate

import (
	"math"
	"slices"

	"evenfall/astro"
)

// Distance is one possible distance of a star and its weight.
type Distance struct {
	Pc     float64
	Weight float64 // probability, to any common factor
}

// Seen is what is known of a star. What is 0 is not known: give at least two of
// magnitude with distance, colour, temperature and gravity.
type Seen struct {
	GMag, GErrMag       float64    // Gaia G as observed
	VMag, VErrMag       float64    // Johnson V as observed; used only without G
	BPRPMag, BPRPErrMag float64    // Gaia BP-RP as observed
	HasBPRP             bool       // the colour is known
	Distances           []Distance // from a posterior; nil: use the parallax
	ParallaxMas         float64    // zero point corrected
	ParallaxErrMas      float64
	// AV gives the extinction in V, mag, at a distance in pc; nil: none. See
	// [Dust] and [Uniform].
	AV func(rPc float64) float64
	// ReddeningErrMag is one sigma of E(BP-RP). 0: 0.02 beyond 150 pc and none
	// nearer; below 0: none.
	ReddeningErrMag float64
	TeffK, TeffErrK float64 // from spectra; 0: not known
	LogG, LogGErr   float64 // from spectra; 0: not known
}

// Errors of the models that are added to those of the photometry, chosen on
// near bright stars, whose fits differ by 0.9 per cent and 0.007 solar masses.
const (
	floorMag       = 0.02
	floorBPRP      = 0.01
	reddeningErr   = 0.02  // of E(BP-RP), mag
	reddenedFromPc = 150.0 // beyond which that is added
)

// Extinction in the Gaia bands of a hot blue star, by A_V and by A_G. In use
// for white dwarfs; no source.
const (
	gByV    = 0.87
	bprpByG = 0.49
)

// GaiaExtinction returns the extinction in G and the reddening of BP-RP of a hot
// blue star.
//
//	A_G = 0.87 A_V     E(BP-RP) = 0.49 A_G
//
// Given:
//   - avMag: A_V, mag.
//
// Source: common practice, no source.
//
// Checked: TestDust.
func GaiaExtinction(avMag float64) (agMag, ebprpMag float64) {
	return gByV * avMag, bprpByG * gByV * avMag
}

// Dust returns the extinction law of a layer of dust in the galactic plane.
//
//	A_V = 0.5 mag/kpc × 125 pc (1 - exp(-d sin|b| / 125 pc)) / sin|b|
//
// Given:
//   - b: galactic latitude; see [GalacticLatitude].
//
// Returns:
//   - A_V, mag, as a function of the distance in pc; 0 for a distance that is
//     negative or not a number.
//
// Notes:
//  1. The 0.5 was picked because it reproduces the published temperatures of
//     1503 white dwarfs; 0.4 and 0.6 move them by -0.6 and +0.6 per cent. Nearer
//     than a few hundred pc dust is patchy: see [Seen].ReddeningErrMag.
//  2. In the Gaia bands A_G = 0.87 A_V and E(BP-RP) = 0.49 A_G, for blue stars.
//
// Source: a layer of scale height 125 pc is common practice; the density is
// fitted to [cite.GentileFusilloEtAl2021].
//
// Checked: TestDust.
func Dust(b astro.Angle) func(rPc float64) float64 {
	const perPc, heightPc = 0.5 / 1000, 125.0
	s := math.Abs(b.Sin())
	return func(rPc float64) float64 {
		if !(rPc > 0) || math.IsNaN(s) {
			return 0
		}
		if x := rPc * s / heightPc; x > 1e-6 {
			return perPc * heightPc * -math.Expm1(-x) / s
		}
		return perPc * rPc
	}
}

// Uniform returns the extinction law of a star whose own E(B-V) is known.
//
//	A_V = 3.1 E(B-V)
//
// Given:
//   - ebvMag: true E(B-V), mag; what is negative or not a number counts as 0.
//
// Source: the ratio of common practice, [cite.CardelliEtAl1989].
//
// Checked: TestDust.
func Uniform(ebvMag float64) func(rPc float64) float64 {
	if !(ebvMag > 0) {
		ebvMag = 0
	}
	return func(float64) float64 { return 3.1 * ebvMag }
}

// GalacticLatitude returns the latitude above the plane of the Galaxy.
//
//	sin b = sin δ sin δG + cos δ cos δG cos(α - αG)     αG = 192.85948, δG = 27.12825 deg
//
// Given:
//   - ra, dec: ICRS.
//
// Source: [cite.ESA1997], volume 1, section 1.5.3. Constants as commonly
// printed.
//
// Checked: TestGalacticLatitude: centre, pole, anticentre.
func GalacticLatitude(ra, dec astro.Angle) astro.Angle {
	pole := astro.Direction(astro.Deg(192.85948), astro.Deg(27.12825))
	s := pole.Dot(astro.Direction(ra, dec))
	return astro.Rad(math.Asin(math.Max(-1, math.Min(1, s))))
}

// Constants of the distances made from a parallax.
const (
	plainFrom     = 10.0  // parallax over error from which the parallax alone decides
	scalePc       = 200.0 // of the exponential of white dwarfs' density; 100 to 300 would do
	distanceSteps = 81
	sigmasWide    = 4.5
)

// FromParallax returns the distances that a parallax allows.
//
//	plx/err > 10:  r = 1/plx, the parallax normal
//	else:          p(r) ~ r² exp(-r/L) exp(-(plx - 1/r)² / 2 err²),  L = 200 pc
//
// Given:
//   - plxMas, errMas: mas, the zero point corrected; the parallax may be
//     negative.
//
// Returns:
//   - some 80 distances, nearest first, weights adding up to 1.
//   - [ErrDistance] where the error is not positive or a value not finite.
//
// Source: the second form is that of Bailer-Jones 2015, PASP 127, 994; L for
// white dwarfs is common practice, without a source.
//
// Checked: TestFromParallax.
func FromParallax(plxMas, errMas float64) ([]Distance, error) {
	if !finite(plxMas) || !positive(errMas) {
		return nil, ErrDistance
	}
	out := make([]Distance, 0, distanceSteps)
	if plxMas > plainFrom*errMas {
		for k := range distanceSteps {
			x := sigmasWide * (1 - 2*float64(k)/(distanceSteps-1))
			out = append(out, Distance{1000 / (plxMas + x*errMas), math.Exp(-x * x / 2)})
		}
		return normal(out)
	}
	lo, hi := 1000/math.Max(plxMas+6*errMas, errMas), 20*scalePc
	if least := plxMas - 6*errMas; least > 0 {
		hi = math.Min(hi, 1000/least)
	}
	if lo >= hi/2 {
		lo = hi / 2
	}
	step := math.Log(hi/lo) / (distanceSteps - 1)
	for k := range distanceSteps {
		r := lo * math.Exp(float64(k)*step)
		d := (plxMas - 1000/r) / errMas
		out = append(out, Distance{r, 3*math.Log(r) - r/scalePc - d*d/2})
	}
	best := slices.MaxFunc(out, func(a, b Distance) int { return cmpFloat(a.Weight, b.Weight) }).Weight
	for k := range out {
		out[k].Weight = math.Exp(out[k].Weight - best)
	}
	return normal(out)
}

func cmpFloat(a, b float64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// normal scales weights to a sum of 1, drops what weighs nothing and sorts by
// distance.
func normal(all []Distance) ([]Distance, error) {
	sum := 0.0
	for _, d := range all {
		if finite(d.Pc, d.Weight) && d.Pc > 0 && d.Weight > 0 {
			sum += d.Weight
		}
	}
	if !positive(sum) {
		return nil, ErrDistance
	}
	const least = 1e-9
	out := make([]Distance, 0, len(all))
	for _, d := range all {
		if w := d.Weight / sum; finite(d.Pc) && d.Pc > 0 && w > least {
			out = append(out, Distance{d.Pc, w})
		}
	}
	if !slices.IsSortedFunc(out, func(a, b Distance) int { return cmpFloat(a.Pc, b.Pc) }) {
		slices.SortFunc(out, func(a, b Distance) int { return cmpFloat(a.Pc, b.Pc) })
	}
	return out, nil
}
