package tracks

import (
	_ "embed"
	"encoding/csv"
	"math"
	"strconv"
	"strings"
)

//go:embed tout1996_lzams.csv
var zamsLuminosityCSV string

//go:embed tout1996_rzams.csv
var zamsRadiusCSV string

//go:embed hpt2000_a.csv
var coefficientsACSV string

//go:embed hpt2000_b.csv
var coefficientsBCSV string

// Formulas holds the evolution formulas for one metallicity, their
// coefficients evaluated. It does not change once made and may be shared.
type Formulas struct {
	z    float64 // mass fraction of metals
	lz   float64 // log10(Z / 0.02)
	lum  [7]float64
	rad  [9]float64
	a    [82]float64
	b    [58]float64
	hook float64 // masses that part the kinds of life, Msun
	mHeF float64
	mFGB float64
	// values at mHeF that the branches below it lead to
	alpha1, alpha3, alpha4 float64
	minHeF                 float64 // L_m(mHeF)
	loopHeF                float64 // R_m(mHeF) / R_GB(mHeF, L_m(mHeF))
	coreB, coreI           float64 // C_B, C_I of the core masses
	hookLum, hookRad       float64 // depth of the hook at a33, and dR at 2 Msun
	below, above           *Formulas
	mix                    float64 // share of above in the radii of giants; see NewSmoothFormulas
}

// NewFormulas evaluates the coefficients for one metallicity.
//
// Given:
//   - z: mass fraction of metals, 0.0001 to 0.03; 0.02 is the models' Sun, so
//     [Fe/H] = log10(z / 0.02).
//
// Returns:
//   - [ErrMetallicity] outside the range. Beyond 0.03 the radii of giants turn
//     negative, so there is no extrapolation.
//
// Notes:
//  1. The fits hold to some 5 per cent in luminosity, radius and duration
//     against the models they stand for.
//  2. Where the authors' own program differs from their paper, the printed
//     value is used: helium shell 7.66e-5 Msun/Lsun/Myr (program 8.0e-5), loop
//     exponent 0.414 (0.4805428), end of the main sequence, core relation
//     that changes from the flash mass on (program: from 2 Msun).
//
// Source: [cite.ToutEtAl1996], tables 1 and 2; [cite.HurleyPolsTout2000],
// appendix A. Coefficients agree in two public digital copies; neither paper
// was at hand.
//
// Checked: TestCoefficients, TestRefusals.
func NewFormulas(z float64) (*Formulas, error) {
	if !(z >= LeastZ && z <= MostZ) {
		return nil, ErrMetallicity
	}
	f := &Formulas{z: z, lz: math.Log10(z / 0.02)}
	named(f.lum[:], zamsLuminosityCSV, f.lz, "alpha", "beta", "gamma", "delta", "epsilon", "zeta", "eta")
	named(f.rad[:], zamsRadiusCSV, f.lz, "theta", "iota", "kappa", "lambda", "mu", "nu", "xi", "omicron", "pi")
	fill(f.a[:], coefficientsACSV, f.lz)
	fill(f.b[:], coefficientsBCSV, f.lz)
	r := f.lz
	f.hook = 1.0185 + 0.16015*r + 0.0892*r*r
	f.mHeF = 1.995 + 0.25*r + 0.087*r*r
	f.mFGB = 13.048 * pow(z/0.02, 0.06) / (1 + 0.0012*pow(0.02/z, 1.27))
	f.limitTimes()
	f.limitShapes()
	f.limitGiants()
	f.join()
	return f, nil
}

// Z returns the mass fraction of metals.
func (f *Formulas) Z() float64 { return f.z }

// Divides returns the masses that part the kinds of life, solar masses: above
// hook the core of a main-sequence star is convective, below flash helium
// ignites degenerate, above giant it ignites before the giant branch.
//
// Source: [cite.HurleyPolsTout2000], equations 1 to 3.
//
// Checked: TestDivides.
func (f *Formulas) Divides() (hook, flash, giant float64) { return f.hook, f.mHeF, f.mFGB }

// rows reads an embedded table of coefficients by the name in its first column.
func rows(text string) map[string][]float64 {
	r := csv.NewReader(strings.NewReader(text))
	r.Comment = '#'
	all, err := r.ReadAll()
	if err != nil {
		panic("tracks: an embedded table of coefficients cannot be read")
	}
	out := map[string][]float64{}
	for _, cells := range all[1:] {
		for _, cell := range cells[1:] {
			v, err := strconv.ParseFloat(cell, 64)
			if err != nil {
				panic("tracks: an embedded table of coefficients holds no number")
			}
			out[cells[0]] = append(out[cells[0]], v)
		}
	}
	return out
}

// named evaluates the rows of a table by their names.
func named(into []float64, text string, x float64, names ...string) {
	all := rows(text)
	for i, n := range names {
		into[i] = poly(all[n], x)
	}
}

// fill evaluates every row of a numbered table.
func fill(into []float64, text string, x float64) {
	for name, row := range rows(text) {
		if n, err := strconv.Atoi(name); err == nil && n >= 0 && n < len(into) {
			into[n] = poly(row, x)
		}
	}
}

// limitTimes applies the rules for the coefficients of durations and of
// luminosities and radii at the end of the main sequence.
func (f *Formulas) limitTimes() {
	a, z := &f.a, f.lz
	lz := math.Log10(f.z)
	a[11] *= a[14]
	a[12] *= a[14]
	a[18] *= a[20]
	a[19] *= a[20]
	a[29] = pow(a[29], a[32])
	a[17] = pow10(math.Max(0.097-0.1072*(lz+3), math.Max(0.097, math.Min(0.1461, 0.1461+0.1237*(lz+2)))))
	a[33] = math.Max(0.6355-0.4192*z, clamp(1.5135+0.3769*z, 1.25, 1.4))
	a[42] = clamp(a[42], 1.1, 1.25)
	a[44] = clamp(a[44], 0.45, 1.3)
}

// limitShapes applies the rules for the coefficients of how luminosity and
// radius run along the main sequence.
func (f *Formulas) limitShapes() {
	a, z := &f.a, f.lz
	a[49] = math.Max(a[49], 0.145)
	a[50] = math.Min(a[50], 0.306+0.053*z)
	a[51] = math.Min(a[51], 0.3625+0.062*z)
	a[52] = math.Max(a[52], 0.9)
	a[53] = math.Max(a[53], 1)
	if f.z > 0.01 {
		a[52] = math.Min(a[52], 1)
		a[53] = math.Min(a[53], 1.1)
	}
	a[57] = math.Max(0.6355-0.4192*z, clamp(a[57], 1.25, 1.4))
	a[62] = math.Max(0.065, a[62])
	if f.z < 0.004 {
		a[63] = math.Min(0.055, a[63])
	}
	a[64] = clamp(a[64], 0.091, 0.121)
	a[66] = math.Max(a[66], math.Min(1.6, -0.308-1.046*z))
	a[66] = math.Max(0.8, math.Min(0.8-2*z, a[66]))
	a[68] = clamp(a[68], 0.9, 1)
	if a[68] > a[66] {
		a[64] = f.radiusAlpha(a[66])
		a[68] = a[66]
	}
	if f.z > 0.01 {
		a[72] = math.Max(a[72], 0.95)
	}
	a[74] = clamp(a[74], 1.4, 1.6)
	a[75] = math.Max(clamp(a[75], 1, 1.27), 0.6355-0.4192*z)
	a[76] = math.Max(a[76], -0.1015564-0.2161264*z-0.05182516*z*z)
	a[77] = math.Max(-0.3868776-0.5457078*z-0.1463472*z*z, math.Min(0, a[77]))
	a[78] = clamp(a[78], 0, math.Max(0, 7.454+9.046*z))
	a[79] = math.Min(a[79], math.Max(2, -13.3-18.6*z))
	a[80] = math.Max(0.0585542, a[80])
	a[81] = clamp(a[81], 0.4, 1.5)
}

// limitGiants applies the rules for the coefficients after the main sequence.
func (f *Formulas) limitGiants() {
	b, z, lz := &f.b, f.z, math.Log10(f.z)
	rho := f.lz + 1
	b[1] = math.Min(0.54, b[1])
	b[2] = math.Min(math.Max(pow10(-4.6739-0.9394*lz), -0.04167+55.67*z), 0.4771-9329.21*pow(z, 2.94))
	b[3] = pow10(math.Max(-0.1451, -2.2794-1.5175*lz-0.254*lz*lz))
	if z > 0.004 {
		b[3] = math.Max(b[3], 0.7307+14265.1*pow(z, 3.395))
	}
	b[11] *= b[11]
	b[13] *= b[13]
	b[14] = pow(b[14], b[15])
	b[16] = pow(b[16], b[15])
	b[17], b[45] = 1, 1
	if rho > 0 {
		b[17] = 1 - 0.3880523*pow(rho, 2.862149)
		b[45] = 1 - (2.47162*rho - 5.401682*rho*rho + 3.247361*rho*rho*rho)
	}
	b[24] = pow(b[24], b[28])
	b[26] = 5 - 0.09138012*pow(z, -0.3671407)
	b[27] = pow(b[27], 2*b[28])
	b[31] = pow(b[31], b[33])
	b[34] = pow(b[34], b[33])
	b[36] = b[36] * b[36] * b[36] * b[36]
	b[37] *= 4
	b[38] = b[38] * b[38] * b[38] * b[38]
	b[40] = math.Max(b[40], 1)
	b[41] = pow(b[41], b[42])
	b[44] = b[44] * b[44] * b[44] * b[44] * b[44]
	b[46] *= -math.Log10(f.mHeF / f.mFGB)
	b[47] = 1.127733*rho + 0.2344416*rho*rho - 0.3793726*rho*rho*rho
	b[55] = math.Min(0.99164-743.123*pow(z, 2.83), b[55])
}

// join works out what makes the branches meet at the flash mass.
func (f *Formulas) join() {
	b, m := &f.b, f.mHeF
	f.hookLum = f.hookDepth(f.a[33])
	f.hookRad = f.hookRadius(2)
	li := f.ignitionHot(m)
	f.alpha1 = (b[9]*pow(m, b[10]) - li) / li
	la := f.baseAGBHot(m)
	f.alpha3 = (b[29]*pow(m, b[30]) - la) / la
	f.alpha4 = (f.heliumTimeHot(m) - b[39]) / b[39]
	f.minHeF = f.loopMinimum(m)
	f.loopHeF = f.loopRadius(m) / f.giantRadius(m, f.minHeF)
	r := f.relation(m)
	scale := coreMass1 * pow(m, coreMass2)
	f.coreB = fourth(r.core(f.baseGiant(m))) - scale
	f.coreI = fourth(r.core(f.ignition(m))) - scale
}

func fourth(x float64) float64 { return x * x * x * x }
