package stellar

import (
	"fmt"
	"math"

	"evenfall/astro/cite"
	"evenfall/astro/numeric"
)

// TeffEstimate is an effective temperature and where it comes from.
type TeffEstimate struct {
	TeffK  float64
	SigmaK float64 // scatter of the calibration and errors of what went in
	Method string  // e.g. "BP-RP of giants"
	Source cite.Ref
	Note   string // e.g. [FromMemory]; empty where the source says it all
}

// String names method and source for a line on screen.
func (t TeffEstimate) String() string {
	return fmt.Sprintf("%.0f +- %.0f K from %s (%s)", t.TeffK, t.SigmaK, t.Method, source(t.Source, t.Note))
}

// modelFloorK is by how much models of stars miss their temperatures. Common
// practice, no source.
const modelFloorK = 80

// WithModelFloor returns the estimate with 80 K more of error, for comparing it
// with models of stars.
//
// Notes:
//  1. The 80 K: common practice, no source.
func (t TeffEstimate) WithModelFloor() TeffEstimate {
	t.SigmaK = math.Hypot(t.SigmaK, modelFloorK)
	return t
}

// unknownFeHErr is the error of an [Fe/H] that is not known and taken as 0, dex:
// the scatter of stars near the Sun. Common practice, no source.
const unknownFeHErr = 0.25

// metal returns an [Fe/H] to compute with. Outside -5 to 1 there are no stars.
func metal(f Measure) (Measure, error) {
	if !f.Known {
		return Measure{0, unknownFeHErr, true}, nil
	}
	if !finite(f.Value, f.Err) || f.Value < -5 || f.Value > 1 {
		return Measure{}, fmt.Errorf("[Fe/H] = %g: %w", f.Value, ErrInput)
	}
	return f, nil
}

// scale is one relation θ = 5040/Teff of colour and [Fe/H].
type scale struct {
	method, quantity string
	lo, hi           float64 // colour
	// θ = c0 + c1 X + c2 X² + cX X F + c3 F + c4 F²
	c0, c1, c2, cX, c3, c4 float64
	scatterK               float64
	colourErr              float64 // error of the band's own system, mag
	source                 cite.Ref
	note                   string
	extra                  []float64 // polynomial in X added to Teff, -0.5 < F < 0.5
}

func (s *scale) teff(x, f float64) float64 {
	t := 5040 / (s.c0 + x*(s.c1+x*s.c2+f*s.cX) + f*(s.c3+f*s.c4))
	if s.extra != nil && math.Abs(f) < 0.5 {
		t += poly(x, s.extra...)
	}
	return t
}

// estimate applies the relation and carries the errors.
func (s *scale) estimate(colour, feH Measure) (TeffEstimate, error) {
	if !colour.Known {
		colour.Value = math.NaN()
	}
	if err := within(s.method, s.quantity, colour.Value, s.lo, s.hi); err != nil {
		return TeffEstimate{}, err
	}
	f, err := metal(feH)
	if err != nil {
		return TeffEstimate{}, err
	}
	t := s.teff(colour.Value, f.Value)
	if !(t > 1000 && t < 20000) {
		return TeffEstimate{}, &NoCalibration{s.method, "[Fe/H]", f.Value, -4, 0.5, "the relation breaks down"}
	}
	const dx, df = 1e-4, 1e-3
	slope := (s.teff(colour.Value+dx, f.Value) - s.teff(colour.Value-dx, f.Value)) / (2 * dx)
	perDex := (s.teff(colour.Value, f.Value+df) - s.teff(colour.Value, f.Value-df)) / (2 * df)
	if math.Abs(math.Abs(f.Value)-0.5) <= df {
		perDex = 0 // the correction's edge is no slope
	}
	sigma := math.Sqrt(square(s.scatterK) + square(slope*colour.Err) + square(slope*s.colourErr) + square(perDex*f.Err))
	return TeffEstimate{t, sigma, s.method, s.source, s.note}, nil
}

func square(x float64) float64 { return x * x }

var (
	bprpDwarf = scale{method: "BP-RP of dwarfs", quantity: "(BP-RP)0", lo: 0.39, hi: 1.50,
		c0: 0.4929, c1: 0.5092, c2: -0.0353, c3: 0.0192, c4: -0.0020, cX: -0.0395, scatterK: 61, source: cite.MucciarelliEtAl2021}
	bprpGiant = scale{method: "BP-RP of giants", quantity: "(BP-RP)0", lo: 0.33, hi: 1.81,
		c0: 0.5323, c1: 0.4775, c2: -0.0344, c3: -0.0110, c4: -0.0020, cX: -0.0009, scatterK: 83, source: cite.MucciarelliEtAl2021}

	bvGiantBlue = scale{method: "B-V of giants, blue", quantity: "(B-V)0", lo: 0.20, hi: 0.80,
		c0: 0.5716, c1: 0.5404, c2: -6.126e-2, cX: -4.862e-2, c3: -1.777e-2, c4: -7.969e-3, scatterK: 167, source: cite.AlonsoEtAl1999}
	bvGiantRed = scale{method: "B-V of giants", quantity: "(B-V)0", lo: 0.70, hi: 1.90,
		c0: 0.6177, c1: 0.4354, c2: -4.025e-3, cX: 5.204e-2, c3: -0.1127, c4: -1.385e-2, scatterK: 96, source: cite.AlonsoEtAl1999}
	vkGiantBlue = scale{method: "V-K of giants, blue", quantity: "(V-K)0", lo: 0.20, hi: 2.50,
		c0: 0.5558, c1: 0.2105, c2: 1.981e-3, cX: -9.965e-3, c3: 1.325e-2, c4: -2.726e-3, scatterK: 40, colourErr: tcsErr, source: cite.AlonsoEtAl1999, note: tcsNote}
	vkGiantRed = scale{method: "V-K of giants", quantity: "(V-K)0", lo: 2.00, hi: 4.90,
		c0: 0.3770, c1: 0.3660, c2: -3.170e-2, cX: -3.074e-3, c3: -2.765e-3, c4: -2.973e-3, scatterK: 25, colourErr: tcsErr, source: cite.AlonsoEtAl1999, note: tcsNote}

	bvDwarf = scale{method: "B-V of dwarfs", quantity: "(B-V)0", lo: 0.310, hi: 1.507,
		c0: 0.5002, c1: 0.6440, c2: -0.0690, cX: -0.0230, c3: -0.0566, c4: -0.0170, scatterK: 88, source: cite.RamirezMelendez2005,
		extra: []float64{-261.548, 684.977, -470.049, 79.8977}}
	vkDwarf = scale{method: "V-Ks of dwarfs", quantity: "(V-Ks)0", lo: 0.896, hi: 3.360,
		c0: 0.4942, c1: 0.2809, c2: -0.0180, cX: -0.0294, c3: 0.0444, c4: -0.0008, scatterK: 50, source: cite.RamirezMelendez2005,
		extra: []float64{-1425.36, 3218.36, -2566.54, 859.644, -102.554}}
)

// tcsErr is the standard error in K of taking 2MASS for the system of Alonso et
// al.: they agree within 0.05 magnitudes, anywhere in which it may lie. From
// memory, not checked against a publication.
const (
	tcsErr  = 0.029
	tcsNote = "K of 2MASS for K of TCS within 0.05 mag: " + FromMemory
)

// TeffFromBPRP returns the temperature from Gaia's colour.
//
//	5040/Teff = b0 + b1 C + b2 C² + b3 F + b4 F² + b5 F C      C = (BP-RP)0, F = [Fe/H]
//
// Given:
//   - bprp0: without reddening; 0.39 to 1.50 for dwarfs, 0.33 to 1.81 for giants.
//   - feH: where not known 0 with an error of 0.25 dex.
//   - giant: log g below 3.5.
//
// Returns:
//   - Teff with an error: scatter 61 K (dwarfs) or 83 K (giants), and those of
//     colour and [Fe/H] carried through.
//   - [NoCalibration]; [ErrInput] for an [Fe/H] outside -5 to 1.
//
// Notes:
//  1. For the Sun, C = 0.82, it gives 5684 K, 90 K too cool.
//  2. Redder giants need V-K or a spectral type.
//
// Source: [cite.MucciarelliEtAl2021]; three copies agree.
//
// Checked: TestTeff, to 0.1 K.
func TeffFromBPRP(bprp0, feH Measure, giant bool) (TeffEstimate, error) {
	if giant {
		return bprpGiant.estimate(bprp0, feH)
	}
	return bprpDwarf.estimate(bprp0, feH)
}

// TeffFromBV returns the temperature from Johnson's B-V.
//
//	5040/Teff = a0 + a1 X + a2 X² + a3 X F + a4 F + a5 F²      X = (B-V)0, F = [Fe/H]
//	dwarfs with -0.5 < F < 0.5: Teff gains -261.548 + 684.977 X - 470.049 X² + 79.8977 X³
//
// Given:
//   - bv0: without reddening; dwarfs 0.310 to 1.507, giants 0.20 to 1.90.
//   - feH, giant: as for [TeffFromBPRP].
//
// Returns:
//   - Teff with an error: scatter 88 K for dwarfs; for giants 96 K from 0.70
//     on, 167 K below.
//   - as for [TeffFromBPRP].
//
// Source: giants [cite.AlonsoEtAl1999], dwarfs [cite.RamirezMelendez2005]; six
// copies of either agree, save for the sign of one metal term.
//
// Checked: TestTeff, to 0.1 K (giants) and 1 K (dwarfs).
func TeffFromBV(bv0, feH Measure, giant bool) (TeffEstimate, error) {
	switch {
	case !giant:
		return bvDwarf.estimate(bv0, feH)
	case bv0.Known && bv0.Value < bvGiantRed.lo:
		return named(bvGiantBlue.estimate(bv0, feH))(bvGiantBlue.lo, bvGiantRed.hi)
	}
	return named(bvGiantRed.estimate(bv0, feH))(bvGiantBlue.lo, bvGiantRed.hi)
}

// TeffFromVK returns the temperature from V-K.
//
//	form and terms as in [TeffFromBV], X = (V-K)0
//	dwarfs with -0.5 < F < 0.5: Teff gains -1425.36 + 3218.36 X - 2566.54 X² + 859.644 X³ - 102.554 X⁴
//
// Given:
//   - vk0: without reddening; dwarfs 0.896 to 3.360, giants 0.20 to 4.90.
//   - feH, giant: as for [TeffFromBPRP].
//
// Returns:
//   - Teff with an error: scatter 50 K for dwarfs; for giants 25 K from 2.00
//     on, 40 K below, and for them what 0.029 magnitudes make.
//   - as for [TeffFromBPRP].
//
// Notes:
//  1. K of 2MASS is taken for the K of the giants' system; within 0.05
//     magnitudes: from memory, not checked against a publication.
//
// Source: giants [cite.AlonsoEtAl1999], dwarfs [cite.RamirezMelendez2005].
//
// Checked: TestTeff, to 0.1 K (giants) and 1 K (dwarfs).
func TeffFromVK(vk0, feH Measure, giant bool) (TeffEstimate, error) {
	switch {
	case !giant:
		return vkDwarf.estimate(vk0, feH)
	case vk0.Known && vk0.Value < vkGiantRed.lo:
		return named(vkGiantBlue.estimate(vk0, feH))(vkGiantBlue.lo, vkGiantRed.hi)
	}
	return named(vkGiantRed.estimate(vk0, feH))(vkGiantBlue.lo, vkGiantRed.hi)
}

// named lets a refusal tell the range of both halves of a relation.
func named(t TeffEstimate, err error) func(lo, hi float64) (TeffEstimate, error) {
	return func(lo, hi float64) (TeffEstimate, error) {
		if no, ok := err.(*NoCalibration); ok && no.Quantity != "[Fe/H]" {
			no.Lo, no.Hi = lo, hi
		}
		return t, err
	}
}

const (
	gkLo, gkHi = 0.20, 3.90
	// gkScatterK is the scatter of the relation against spectra of red giants
	// in the Kepler field.
	gkScatterK = 56
	gkMethod   = "G-Ks of giants"
	// GiantLogG is the log g of a giant where none is known. Common practice,
	// no source.
	GiantLogG = 2.5
)

// gkTeff is the relation of [TeffFromGK].
func gkTeff(c, g, f float64) float64 {
	c2 := c * c
	return 8031.7804 - 1815.3523*c + 70.7201*c2*c - 1.7309*c2*c2*c +
		g*(252.9647+c*(-342.0817+c*(161.3031-26.7714*c))) +
		f*(-120.1133+42.6723*c+10.0433*g*c)
}

// TeffFromGK returns the temperature of a giant from Gaia's G and Ks.
//
//	Teff = 8031.7804 - 1815.3523 C + 70.7201 C³ - 1.7309 C⁵
//	       + g (252.9647 - 342.0817 C + 161.3031 C² - 26.7714 C³)
//	       + F (-120.1133 + 42.6723 C + 10.0433 g C)      C = (G-Ks)0, g = log g, F = [Fe/H]
//
// Given:
//   - gk0: without reddening, G of DR3, Ks of 2MASS; 0.20 to 3.90.
//   - logG: log10 of cm/s2, 0 to 3.5; not a number stands for 2.5.
//   - feH: as for [TeffFromBPRP].
//
// Returns:
//   - Teff with an error: scatter 56 K, and those of colour and [Fe/H].
//   - [NoCalibration]; [ErrInput].
//
// Source: [cite.CasagrandeEtAl2021], seen in one copy, the authors' program;
// it agrees with spectra of giants in the Kepler field to 5 to 18 K.
//
// Checked: TestGK, to 1 K; TestKeplerGiants.
func TeffFromGK(gk0 Measure, logG float64, feH Measure) (TeffEstimate, error) {
	if !gk0.Known {
		gk0.Value = math.NaN()
	}
	if math.IsNaN(logG) {
		logG = GiantLogG
	}
	if err := within(gkMethod, "(G-Ks)0", gk0.Value, gkLo, gkHi); err != nil {
		return TeffEstimate{}, err
	}
	if err := within(gkMethod, "log g", logG, 0, 3.5); err != nil {
		return TeffEstimate{}, err
	}
	f, err := metal(feH)
	if err != nil {
		return TeffEstimate{}, err
	}
	t := gkTeff(gk0.Value, logG, f.Value)
	if !(t > 1000 && t < 20000) {
		return TeffEstimate{}, &NoCalibration{gkMethod, "(G-Ks)0", gk0.Value, gkLo, gkHi, "the relation breaks down"}
	}
	const dx = 1e-4
	slope := (gkTeff(gk0.Value+dx, logG, f.Value) - gkTeff(gk0.Value-dx, logG, f.Value)) / (2 * dx)
	perDex := -120.1133 + (42.6723+10.0433*logG)*gk0.Value
	sigma := math.Sqrt(square(gkScatterK) + square(slope*gk0.Err) + square(perDex*f.Err))
	return TeffEstimate{t, sigma, gkMethod, cite.CasagrandeEtAl2021, ""}, nil
}

// GKFromTeff returns (G-Ks)0 of a giant of a temperature: [TeffFromGK] solved
// for the colour.
//
// Given:
//   - teffK: what the relation reaches between its ends; logG and feH as there.
//
// Returns:
//   - the colour, magnitudes; [NoCalibration] outside; [ErrInput].
//
// Source: [cite.CasagrandeEtAl2021].
//
// Checked: TestGK, to 0.001.
func GKFromTeff(teffK, logG float64, feH Measure) (float64, error) {
	if math.IsNaN(logG) {
		logG = GiantLogG
	}
	if err := within(gkMethod, "log g", logG, 0, 3.5); err != nil {
		return math.NaN(), err
	}
	f, err := metal(feH)
	if err != nil {
		return math.NaN(), err
	}
	return solve(gkMethod, teffK, gkLo, gkHi, func(c float64) float64 { return gkTeff(c, logG, f.Value) })
}

// BPRPFromTeff returns (BP-RP)0 of a star of a temperature: [TeffFromBPRP]
// solved for the colour.
//
// Returns:
//   - the colour, magnitudes; [NoCalibration] outside; [ErrInput].
//
// Source: [cite.MucciarelliEtAl2021].
//
// Checked: TestInverseProperty.
func BPRPFromTeff(teffK float64, feH Measure, giant bool) (float64, error) {
	s := &bprpDwarf
	if giant {
		s = &bprpGiant
	}
	f, err := metal(feH)
	if err != nil {
		return math.NaN(), err
	}
	return solve(s.method, teffK, s.lo, s.hi, func(c float64) float64 { return s.teff(c, f.Value) })
}

// solve finds the colour at which a relation gives a temperature.
func solve(method string, teffK, lo, hi float64, teff func(float64) float64) (float64, error) {
	if err := within(method, "Teff in K", teffK, teff(hi), teff(lo)); err != nil {
		return math.NaN(), err
	}
	return numeric.Root(func(c float64) float64 { return teff(c) - teffK }, lo, hi, 1e-9)
}
