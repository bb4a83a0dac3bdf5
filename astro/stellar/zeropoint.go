package stellar

import (
	_ "embed"
	"fmt"
	"math"
	"strconv"
	"strings"

	"evenfall/astro"
	"evenfall/astro/cite"
)

// Release says where a parallax comes from, and so how it must be corrected.
type Release string

// The releases, in the words of the lists.
const (
	GaiaDR3   Release = "gaia_dr3" // EDR3 too: the same parallaxes
	GaiaDR2   Release = "gaia_dr2"
	Hipparcos Release = "hipparcos"
	Corrected Release = "corrected" // the list's author took the zero point off
	Other     Release = "other"
)

const (
	// DR2PublishedMas is the zero point of DR2 against quasars.
	//
	// Source: [cite.LindegrenEtAl2018].
	DR2PublishedMas = -0.029
	// DR2DefaultMas is what is taken off a DR2 parallax here: bright stars want
	// more than quasars. Common practice, no source.
	DR2DefaultMas = -0.040
	// DR2KeplerMas is the zero point of DR2 in the field of the Kepler mission;
	// from memory, not checked against a publication.
	DR2KeplerMas = -0.052
	// dr2SpreadMas is half of what these three differ by. Common practice, no
	// source.
	dr2SpreadMas = 0.0115

	// nuGiant and nuOther stand in for an effective wavenumber that is not
	// listed, 1/um; noNuErrMas is the error that this adds. Common practice, no
	// source.
	nuGiant, nuOther = 1.45, 1.60
	noNuErrMas       = 0.015

	// floorErrMas is the error that no parallax of EDR3 can be rid of.
	//
	// Source: [cite.MaizApellanizEtAl2021].
	floorErrMas = 0.0103
	// sixFactor is for solutions with six parameters, on top of k(G). Seen in
	// one copy of [cite.MaizApellaniz2022].
	sixFactor = 1.25
	// The least factors for long-period variables, whose photocentre wanders
	// as far as their parallax; from memory, not checked against a publication.
	lpvBright, lpvFaint, lpvLimitG = 2.0, 1.5, 8.0
)

// Solution is what the correction of a parallax hangs on.
type Solution struct {
	Release      Release
	GMag         float64 // mean G; not a number where not known
	NuEff        float64 // effective wavenumber, 1/um; 0 or not a number where not listed
	SinBeta      float64 // sine of the ecliptic latitude, see [SinEclipticLatitude]
	Giant        bool    // for the wavenumber, where it is not listed
	SixParameter bool    // the solution has a sixth parameter, the colour
	LongPeriod   bool    // a Mira, or another large, spotted, slow variable
	KeplerField  bool    // for DR2: the star lies in the field of the Kepler mission
}

// Offset is a zero point: what is to be taken off the parallax listed.
type Offset struct {
	Mas    float64 // zero point; negative where parallaxes are listed too small
	ErrMas float64 // error of the zero point itself
	Why    string
	Source cite.Ref
	Note   string // e.g. [FromMemory]; empty where the source says it all
}

// ZeroPoint returns the zero point of a parallax.
//
//	Z = Σ q_jk(G) c_j b_k      q in uas, linear in G between the rows of table 9
//	c = 1, clamp(nu-1.48, ±0.24), clamp(1.48-nu, 0, 0.24)³, min(0, nu-1.24), max(0, nu-1.72)
//	b = 1, sin β, sin² β - 1/3
//
// Given:
//   - s.GMag: 6 to 21; the ends stand for what is beyond. Needed for DR3 only.
//   - s.NuEff: 1.1 to 1.9 per um; without it 1.45 for giants, 1.6 for others,
//     and 15 uas more error.
//
// Returns:
//   - the zero point in mas: the formula for [GaiaDR3]; -0.040 for [GaiaDR2],
//     -0.052 in the Kepler field; 0 for the rest.
//   - [ErrInput] for a release that is none of the five, a G that is not known
//     where the formula needs it, or a sine beyond 1.
//
// Notes:
//  1. Outside 1.1 to 1.9 the nearer end stands for the wavenumber.
//  2. For five-parameter solutions; those with six get the same value.
//  3. For DR2 the value against quasars is -0.029; giants want more.
//
// Source: [cite.LindegrenEtAl2021], table 9, which agrees in two copies;
// [cite.LindegrenEtAl2018] for DR2.
//
// Checked: TestZeroPoint, to 0.01 uas.
func ZeroPoint(s Solution) (Offset, error) {
	switch s.Release {
	case GaiaDR3:
		return zeroDR3(s)
	case GaiaDR2:
		if s.KeplerField {
			return Offset{DR2KeplerMas, dr2SpreadMas, "Gaia DR2, field of Kepler", cite.Ref{}, FromMemory}, nil
		}
		return Offset{DR2DefaultMas, dr2SpreadMas, "Gaia DR2; published for quasars: -0.029 mas", cite.LindegrenEtAl2018, CommonPractice}, nil
	case Hipparcos:
		return Offset{Why: "Hipparcos: no correction", Source: cite.ESA1997}, nil
	case Corrected:
		return Offset{Why: "corrected before it was listed"}, nil
	case Other:
		return Offset{Why: "origin of the parallax not known: no correction"}, nil
	}
	return Offset{}, fmt.Errorf("parallax release %q: %w", s.Release, ErrInput)
}

func zeroDR3(s Solution) (Offset, error) {
	if !finite(s.GMag) || !(math.Abs(s.SinBeta) <= 1+1e-9) {
		return Offset{}, fmt.Errorf("zero point for G = %g, sin(beta) = %g: %w", s.GMag, s.SinBeta, ErrInput)
	}
	out := Offset{Why: "Gaia DR3, by magnitude, colour and ecliptic latitude", Source: cite.LindegrenEtAl2021}
	nu := s.NuEff
	if !(nu > 0) || math.IsInf(nu, 0) {
		nu = nuOther
		if s.Giant {
			nu = nuGiant
		}
		out.ErrMas = noNuErrMas
		out.Why += fmt.Sprintf("; wavenumber %.2f assumed", nu)
	}
	nu = clamp(nu, 1.1, 1.9)
	d := clamp(1.48-nu, 0, 0.24)
	c := [5]float64{1, clamp(nu-1.48, -0.24, 0.24), d * d * d, math.Min(0, nu-1.24), math.Max(0, nu-1.72)}
	b := [3]float64{1, s.SinBeta, s.SinBeta*s.SinBeta - 1.0/3}
	q := coefficients(s.GMag)
	// Columns of the table: q00 q01 q02 q10 q11 q20 q30 q40.
	uas := q[0] + q[1]*b[1] + q[2]*b[2] + c[1]*(q[3]+q[4]*b[1]) + c[2]*q[5] + c[3]*q[6] + c[4]*q[7]
	out.Mas = uas / 1000
	return out, nil
}

//go:embed gaia_edr3_zeropoint_z5.csv
var zeroPointCSV string

// zeroRow is one row of table 9: G, then q00 to q40.
type zeroRow struct {
	g float64
	q [8]float64
}

var zeroTable = loadZeroTable()

func loadZeroTable() []zeroRow {
	var out []zeroRow
	for line := range strings.Lines(zeroPointCSV) {
		cells := strings.Split(strings.TrimSpace(line), ",")
		g, err := strconv.ParseFloat(cells[0], 64)
		if err != nil || len(cells) != 9 {
			continue // comment and heading
		}
		row := zeroRow{g: g}
		for i := range row.q {
			if row.q[i], err = strconv.ParseFloat(cells[i+1], 64); err != nil {
				panic("stellar: the embedded table of zero points cannot be read")
			}
		}
		out = append(out, row)
	}
	if len(out) != 13 {
		panic("stellar: the embedded table of zero points is not whole")
	}
	return out
}

// coefficients reads table 9 between its rows.
func coefficients(g float64) [8]float64 {
	n := len(zeroTable)
	if g <= zeroTable[0].g {
		return zeroTable[0].q
	}
	for i := 1; i < n; i++ {
		lo, hi := &zeroTable[i-1], &zeroTable[i]
		if g > hi.g {
			continue
		}
		f := (g - lo.g) / (hi.g - lo.g)
		var q [8]float64
		for j := range q {
			q[j] = lo.q[j] + f*(hi.q[j]-lo.q[j])
		}
		return q
	}
	return zeroTable[n-1].q
}

// errorFactors is k(G): by how much errors of EDR3 parallaxes are listed too
// small.
//
// Source: [cite.MaizApellaniz2022], seen in one copy, which agrees with the
// ranges that the abstract gives.
var errorFactors = [...][2]float64{
	{6.5, 2.62}, {7.5, 2.38}, {8.5, 2.06}, {9.5, 1.66}, {10.25, 1.22}, {10.75, 1.41}, {11.25, 1.76},
	{11.75, 1.76}, {12.25, 1.90}, {12.75, 1.92}, {13.25, 1.61}, {13.75, 1.50}, {14.25, 1.39}, {14.75, 1.35},
	{15.25, 1.24}, {15.75, 1.20}, {16.25, 1.19}, {16.75, 1.18}, {17.25, 1.18}, {17.75, 1.14},
}

// ErrorFactor returns the factor on the listed error of a parallax.
//
//	k(G), linear between the values published, constant beyond; times 1.25 with six parameters
//
// Given:
//   - s.GMag: where it is not known the factor is 1, or that of long-period
//     variables.
//
// Returns:
//   - k for [GaiaDR3], 1 for the rest; for long-period variables of either Gaia
//     release at least 2 where brighter than G = 8 and 1.5 elsewhere.
//
// Notes:
//  1. The size for long-period variables is a judgement: from memory, not
//     checked against a publication. It stands in place of k where that is
//     smaller, not on top of it.
//
// Source: [cite.MaizApellaniz2022].
//
// Checked: TestErrorFactor.
func ErrorFactor(s Solution) float64 {
	k := 1.0
	if s.Release == GaiaDR3 && finite(s.GMag) {
		k = factorAt(s.GMag)
		if s.SixParameter {
			k *= sixFactor
		}
	}
	if s.LongPeriod && (s.Release == GaiaDR3 || s.Release == GaiaDR2) {
		least := lpvFaint
		if s.GMag < lpvLimitG {
			least = lpvBright
		}
		k = math.Max(k, least)
	}
	return k
}

func factorAt(g float64) float64 {
	t := &errorFactors
	if g <= t[0][0] {
		return t[0][1]
	}
	for i := 1; i < len(t); i++ {
		if g <= t[i][0] {
			f := (g - t[i-1][0]) / (t[i][0] - t[i-1][0])
			return t[i-1][1] + f*(t[i][1]-t[i-1][1])
		}
	}
	return t[len(t)-1][1]
}

// Parallax is a parallax without its zero point, with an honest error.
type Parallax struct {
	Mas, ErrMas float64
	Zero        Offset  // what was taken off
	Factor      float64 // what the listed error was multiplied by
}

// Correct takes the zero point off a parallax and makes its error honest.
//
//	plx - Z;   σ² = (k err)² + (0.0103 mas)² + σ_Z²      the floor for DR3 only
//
// Given:
//   - plxMas, errMas: as listed, mas; the error above 0.
//
// Returns:
//   - the parallax; it may be negative.
//   - [ErrInput] for what is not a number, an error not above 0, and as for
//     [ZeroPoint].
//
// Notes:
//  1. For a long-period variable prefer the period-luminosity relation wherever
//     the parallax is under 10 errors.
//
// Source: [cite.MaizApellanizEtAl2021] for the floor.
//
// Checked: TestErrorFactor.
func Correct(plxMas, errMas float64, s Solution) (Parallax, error) {
	if !finite(plxMas, errMas) || !(errMas > 0) {
		return Parallax{}, fmt.Errorf("parallax %g, error %g mas: %w", plxMas, errMas, ErrInput)
	}
	z, err := ZeroPoint(s)
	if err != nil {
		return Parallax{}, err
	}
	k := ErrorFactor(s)
	variance := k*errMas*k*errMas + z.ErrMas*z.ErrMas
	if s.Release == GaiaDR3 {
		variance += floorErrMas * floorErrMas
	}
	out := Parallax{plxMas - z.Mas, math.Sqrt(variance), z, k}
	if !finite(out.Mas, out.ErrMas) {
		return Parallax{}, fmt.Errorf("parallax %g, error %g mas: %w", plxMas, errMas, ErrInput)
	}
	return out, nil
}

// obliquityDeg is the obliquity of the ecliptic at J2000, degrees.
const obliquityDeg = 23.4392911

// SinEclipticLatitude returns the sine of a place's ecliptic latitude.
//
//	sin β = sin δ cos ε - cos δ sin ε sin α      ε = 23.4392911 degrees, J2000
//
// Given:
//   - ra, dec: ICRS; the epoch matters to nothing here.
//
// Source: geometry; the obliquity of [cite.Meeus1998].
//
// Checked: TestSinEclipticLatitude.
func SinEclipticLatitude(ra, dec astro.Angle) float64 {
	e := astro.Deg(obliquityDeg)
	return clamp(dec.Sin()*e.Cos()-dec.Cos()*e.Sin()*ra.Sin(), -1, 1)
}
