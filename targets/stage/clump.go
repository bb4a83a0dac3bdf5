package stage

import (
	"math"

	"evenfall/astro/numeric"
)

// How giants of known stage are spread over K magnitude, temperature and
// colour near the red clump. Everything here is a fit to one half of the 2,162
// giants whose stage asteroseismology gives ([cite.ElsworthEtAl2019]), rounded;
// the other half was kept to score it.
const (
	clumpMK        = -1.61 // zero of the fits in absolute K magnitude
	rgbPerClump    = 0.21  // giant-branch stars per magnitude at the clump for each core-helium star, field older than 2 Gyr
	clumpMean      = -1.62
	clumpWithFeH   = -0.12 // mag per dex
	clumpSharp     = 0.89
	clumpSigma     = 0.086
	clumpTailShift = 0.10
	clumpTailSigma = 0.38
	clumpStray     = 0.01
	rgbSlope       = 0.61 // natural logarithm per magnitude
	bumpMK         = -1.10
	bumpSigma      = 0.22
	bumpHeight     = 0.8
	wideShare      = 0.03 // of stars with three times the spread
	oddsFloor      = 1e-9
	heldErrorK     = 80 // error of temperature that the spreads already hold
)

// Where the fits hold; beyond, tracks decide.
const (
	oddsBrightest = -2.6
	oddsFaintest  = 0.3
	oddsCoolestK  = 4250
	oddsHottestK  = 5250
	oddsPoorest   = -1.0
	oddsRichest   = 0.5
	oddsMaxSigma  = 0.4
)

// sorting is what tells giants of the clump from those of the branch at one
// absolute magnitude.
type sorting int

const (
	byTemperature    sorting = iota // log10 Teff, with [Fe/H]
	byColour                        // (G-K)0, [Fe/H] unknown
	byColourAndMetal                // (G-K)0 with [Fe/H]
)

// spread is where the stars of the clump and of the branch lie in a sorting
// quantity: mean and sigma of either.
type spread struct{ clump, clumpSigma, branch, branchSigma float64 }

// spreadAt returns the spreads at absolute magnitude mk and metallicity feh.
func (s sorting) spreadAt(mk, feh float64) spread {
	x := mk - clumpMK
	switch s {
	case byTemperature:
		return spread{3.678 - 0.032*feh - 0.007*x, 0.0074, 3.663 - 0.019*feh + 0.0130*x + 0.0009*x*x, 0.0092}
	case byColour:
		return spread{2.13 - 0.090*x, 0.113, 2.28 - 0.126*x - 0.014*x*x, 0.118}
	}
	return spread{2.13 + 0.33*feh - 0.03*x, 0.078, 2.305 + 0.28*feh - 0.150*x - 0.010*x*x, 0.094}
}

// giantSeen is a giant near the clump as the odds ask for it.
type giantSeen struct {
	mk, mkErr float64 // absolute K magnitude, extinction removed
	by        sorting
	v, vErr   float64 // sorting quantity; error beyond what the spreads hold
	feh       float64 // 0 where it is not known
}

// clumpOdds returns how much likelier than shell burning on the giant branch
// core helium burning in the clump is.
//
//	ln odds = ln(P_C + 1e-9) - ln(P_R + 1e-9)
//	P_C = {0.99 [0.89 N(M-mu; 0.086) + 0.11 N(M-mu-0.10; 0.38)] + 0.01 N(M+1.5; 0.8)} t(v-v_C; s_C)
//	P_R = n0 exp(0.61 x) [1 + 0.8 exp(-((M+1.10)/0.22)^2/2)] t(v-v_R; s_R),   x = M + 1.61
//
// Returns:
//   - evidence: the part of the natural logarithm that the star itself gives;
//   - prior: that of the numbers of both kinds per magnitude at the clump,
//     with perClump giant-branch stars a magnitude for each in the clump. The
//     sum of both is the logarithm of the odds.
//
// Notes:
//  1. Valid for -2.6 < M_K < 0.3, 4250 to 5250 K, [Fe/H] -1 to 0.5; the caller
//     asks [giantSeen.inRange] first.
//  2. A giant of the branch at clump brightness is nearly always called
//     clump from photometry: only the probability can warn.
//
// Source: fitted to the stages of [cite.ElsworthEtAl2019].
//
// Checked: TestClumpOdds, twelve values computed independently, to 0.002;
// TestKeplerGiants, on the half that nothing was fitted on.
func (g giantSeen) clumpOdds(perClump float64) (evidence, prior float64) {
	pc, pr := g.densities(perClump)
	prior = -math.Log(perClump)
	return math.Log(pc+oddsFloor) - math.Log(pr+oddsFloor) - prior, prior
}

// densities returns P_C and P_R of [giantSeen.clumpOdds].
func (g giantSeen) densities(perClump float64) (clump, branch float64) {
	near := g.by.spreadAt(g.mk, g.feh)
	mu := clumpMean
	if g.by != byColour {
		mu += clumpWithFeH * g.feh
	}
	sharp := normal(g.mk-mu, math.Hypot(clumpSigma, g.mkErr))
	tail := normal(g.mk-mu-clumpTailShift, math.Hypot(clumpTailSigma, g.mkErr))
	bright := (1-clumpStray)*(clumpSharp*sharp+(1-clumpSharp)*tail) + clumpStray*normal(g.mk+1.5, 0.8)
	x := g.mk - clumpMK
	d := (g.mk - bumpMK) / bumpSigma
	number := perClump * math.Exp(rgbSlope*x) * (1 + bumpHeight*math.Exp(-d*d/2))
	return bright * twoWide(g.v-near.clump, math.Hypot(near.clumpSigma, g.vErr)),
		number * twoWide(g.v-near.branch, math.Hypot(near.branchSigma, g.vErr))
}

// inRange tells whether the odds may be asked for; why not, otherwise.
func (g giantSeen) inRange(teffK float64, fehKnown bool) (bool, string) {
	switch {
	case g.mk < oddsBrightest || g.mk > oddsFaintest:
		return false, "absolute K magnitude outside -2.6 to 0.3"
	case teffK < oddsCoolestK || teffK > oddsHottestK:
		return false, "temperature outside 4250 to 5250 K"
	case fehKnown && (g.feh < oddsPoorest || g.feh > oddsRichest):
		return false, "metallicity outside -1 to 0.5"
	case g.mkErr > oddsMaxSigma:
		return false, "absolute K magnitude uncertain by more than 0.4"
	}
	return true, ""
}

// overMetals returns the odds of a star whose temperature is known and whose
// metallicity is not: both densities integrated over [Fe/H] = -0.05 +- 0.25.
func (g giantSeen) overMetals(perClump float64) (evidence, prior float64) {
	const mean, sigma, nodes, reach = -0.05, 0.25, 21, 2.5
	sumC, sumR := 0.0, 0.0
	for i := range nodes {
		z := reach * (2*float64(i)/(nodes-1) - 1)
		h := g
		h.feh = mean + sigma*z
		pc, pr := h.densities(perClump)
		w := math.Exp(-z * z / 2)
		sumC, sumR = sumC+w*pc, sumR+w*pr
	}
	prior = -math.Log(perClump)
	norm := 2 * reach / (nodes - 1) / math.Sqrt(2*math.Pi)
	return math.Log(sumC*norm+oddsFloor) - math.Log(sumR*norm+oddsFloor) - prior, prior
}

func normal(d, sigma float64) float64 { return numeric.NormalDensity(d/sigma) / sigma }

// twoWide is a normal density of which some stars have three times the spread.
func twoWide(d, sigma float64) float64 {
	return (1-wideShare)*normal(d, sigma) + wideShare*normal(d, 3*sigma)
}
