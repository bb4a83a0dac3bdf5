package stellar

import (
	"fmt"
	"math"
)

// GaiaExtinction is extinction in Gaia's bands, magnitudes.
type GaiaExtinction struct{ AG, ABP, ARP float64 }

// EBPRP returns by how much BP-RP is reddened, magnitudes.
func (g GaiaExtinction) EBPRP() float64 { return g.ABP - g.ARP }

const (
	// The colours and extinctions that the coefficients were made for. The ends
	// of the colours are approximate.
	coefLoX, coefHiX = -0.06, 2.5
	coefHiA0         = 20.0
	// unreddenSteps limits the iteration from observed to intrinsic colour;
	// 3 to 5 steps are usual.
	unreddenSteps = 40
	unreddenMag   = 1e-6
)

// law7 is k of a band in DR2: 1, x, x², x³, A, A², xA.
type law7 [7]float64

var dr2Laws = [3]law7{
	{0.9761, -0.1704, 0.0086, 0.0011, -0.0438, 0.0013, 0.0099},
	{1.1517, -0.0871, -0.0333, 0.0173, -0.0230, 0.0006, 0.0043},
	{0.6104, -0.0170, -0.0026, -0.0017, -0.0078, 0.00005, 0.0006},
}

func (c *law7) at(x, a float64) float64 {
	return c[0] + x*(c[1]+x*(c[2]+x*c[3])) + a*(c[4]+a*c[5]+x*c[6])
}

// law10 is k of a band in DR3: 1, x, x², x³, A, A², A³, xA, Ax², xA².
type law10 [10]float64

var dr3Laws = [3]law10{
	{0.995969721536602, -0.159726460302015, 0.0122380738156057, 0.00090726555099859, -0.0377160263914123,
		0.00151347495244888, -2.52364537395142e-05, 0.0114522658102451, -0.000936914989014318, -0.000260296774134201},
	{1.15363197483424, -0.0814012991657388, -0.036013023976704, 0.0192143585568966, -0.022397548243016,
		0.000840562680547171, -1.31018008013549e-05, 0.00660124080271006, -0.000882247501989453, -0.000111215755291684},
	{0.66320787941067, -0.0179847164933981, 0.000493769449961458, -0.00267994405695751, -0.00651422146709376,
		3.30179903473159e-05, 1.57894227641527e-06, -7.9800898337247e-05, 0.000255679812110045, 1.10476584967393e-05},
}

func (c *law10) at(x, a float64) float64 {
	return c[0] + x*(c[1]+x*(c[2]+x*c[3])) + a*(c[4]+a*(c[5]+a*c[6])+x*(c[7]+x*c[8]+a*c[9]))
}

// Coefficients returns A_X / A_0 of Gaia's G, BP and RP in DR2 or DR3.
//
//	DR2: k = c1 + c2 x + c3 x² + c4 x³ + c5 A + c6 A² + c7 x A
//	DR3: k = d0 + d1 x + d2 x² + d3 x³ + d4 A + d5 A² + d6 A³ + d7 x A + d8 A x² + d9 x A²
//
// Given:
//   - r: [GaiaDR2] for its photometry; anything else gets DR3's.
//   - bprp0: x, the colour without reddening, -0.06 to 2.5.
//   - a0: A, extinction at 550 nm, as good as A_V; 0 to 20 magnitudes.
//
// Returns:
//   - the coefficients, and whether x and A are inside the ranges; outside, the
//     nearer end stands for them.
//
// Notes:
//  1. DR3's are those for the main sequence, after the law of
//     [cite.FitzpatrickEtAl2019] and the bands of [cite.RielloEtAl2021]; they
//     serve for giants too.
//
// Source: DR2: [cite.DanielskiEtAl2018], [cite.BabusiauxEtAl2018], table 1;
// three copies agree. DR3: the mission's tables; eight copies agree.
//
// Checked: TestCoefficients, to the digits printed.
func Coefficients(r Release, bprp0, a0 float64) (k GaiaExtinction, ok bool) {
	x, a := clamp(bprp0, coefLoX, coefHiX), clamp(a0, 0, coefHiA0)
	ok = x == bprp0 && a == a0
	if r == GaiaDR2 {
		return GaiaExtinction{dr2Laws[0].at(x, a), dr2Laws[1].at(x, a), dr2Laws[2].at(x, a)}, ok
	}
	return GaiaExtinction{dr3Laws[0].at(x, a), dr3Laws[1].at(x, a), dr3Laws[2].at(x, a)}, ok
}

// Unreddened is a star's colour without dust, and its extinction.
type Unreddened struct {
	BPRP0   float64 // (BP-RP)0, magnitudes
	A       GaiaExtinction
	InRange bool // colour and extinction are where the coefficients hold
	Steps   int
	Settled bool // the iteration came to rest within 1e-6 magnitudes
}

// Dereddened returns colour and extinction of a star seen through dust.
//
//	x ← (BP-RP) - [k_BP(x, A0) - k_RP(x, A0)] A0,  from x = BP-RP on
//
// Given:
//   - r: whose photometry; see [Coefficients].
//   - bprp: as observed.
//   - e: reddening on the true scale; below 0, as catalogues may say, it is
//     taken as it is with the coefficients of 0.
//
// Returns:
//   - the colour and A_G, A_BP, A_RP.
//   - [ErrInput] for what is not a number, or |E(B-V)| over 20.
//
// Source: as for [Coefficients].
//
// Checked: TestDereddened; TestDereddenedProperty: reddening it again gives
// what was observed.
func Dereddened(r Release, bprp float64, e TrueEBV) (Unreddened, error) {
	if !finite(bprp, float64(e)) || math.Abs(float64(e)) > 20 || math.Abs(bprp) > 50 {
		return Unreddened{}, fmt.Errorf("BP-RP = %g, E(B-V) = %g: %w", bprp, float64(e), ErrInput)
	}
	a0 := e.AV()
	out := Unreddened{BPRP0: bprp}
	for out.Steps < unreddenSteps && !out.Settled {
		out.Steps++
		k, ok := Coefficients(r, out.BPRP0, a0)
		out.A, out.InRange = GaiaExtinction{k.AG * a0, k.ABP * a0, k.ARP * a0}, ok || a0 == 0
		next := bprp - out.A.EBPRP()
		out.Settled = math.Abs(next-out.BPRP0) < unreddenMag
		out.BPRP0 = next
	}
	return out, nil
}

const (
	// The wavelengths that the law is given for here, um.
	lawLoUm, lawSplitUm, lawHiUm = 1 / 3.3, 1 / 1.1, 1 / 0.3
)

// Law returns A(λ)/A_V of interstellar dust, optical and near infrared.
//
//	A(λ)/A_V = a(x) + b(x)/R_V      x = 1/λ, 1/um
//	0.3 to 1.1: a = 0.574 x^1.61, b = -0.527 x^1.61
//	1.1 to 3.3: polynomials of seventh degree in y = x - 1.82
//
// Given:
//   - lambdaUm: 0.303 to 3.33 um.
//   - rv: A_V/E(B-V); 3.1 commonly, 2 to 6.
//
// Returns:
//   - the ratio, 1 at 0.549 um; a [NoCalibration] outside.
//
// Source: [cite.CardelliEtAl1989], eqs 1 to 3, in their standard form.
//
// Checked: TestLaw, to the digits printed.
func Law(lambdaUm, rv float64) (float64, error) {
	if err := within("extinction law", "wavelength in um", lambdaUm, lawLoUm, lawHiUm); err != nil {
		return math.NaN(), err
	}
	if err := within("extinction law", "R_V", rv, 2, 6); err != nil {
		return math.NaN(), err
	}
	x := 1 / lambdaUm
	if lambdaUm > lawSplitUm {
		p := math.Pow(x, 1.61)
		return 0.574*p - 0.527*p/rv, nil
	}
	y := x - 1.82
	a := poly(y, 1, 0.17699, -0.50447, -0.02427, 0.72085, 0.01979, -0.77530, 0.32999)
	b := poly(y, 0, 1.41338, 2.28305, 1.07233, -5.38434, -0.62251, 5.30260, -2.09002)
	return a + b/rv, nil
}

// LawPerEBV returns k(λ) = A(λ)/E(B-V), R_V times [Law].
//
// Checked: TestLaw.
func LawPerEBV(lambdaUm, rv float64) (float64, error) {
	v, err := Law(lambdaUm, rv)
	return rv * v, err
}
