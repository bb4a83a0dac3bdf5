package nebular

import (
	"math"

	"evenfall/astro"
)

// Line is a line of the spectra of nebulae.
type Line int

// The lines.
const (
	Hb Line = iota // H beta 4861
	Ha             // H alpha 6563
	Hg             // H gamma 4340
	Hd             // H delta 4102
	HeII4686
	OIII4959
	OIII5007
	NII6548
	NII6584
	SII6716
	SII6731
	lineCount
)

// lineData is name, wavelength in air, um, how dust treats the line against H
// beta, f(λ) = k(λ)/k(Hβ) - 1, and the ratio to H beta without dust.
//
// Source: f by [cite.CardelliEtAl1989] with R_V = 3.1; ratios of case B at
// 1e4 K and 1e2 to 1e4 electrons per cm3 by [cite.OsterbrockFerland2006], as
// others print them.
var lineData = [lineCount]struct {
	name  string
	um, f float64
	caseB float64
}{
	Hb:       {"H beta 4861", 0.48613, 0, 1},
	Ha:       {"H alpha 6563", 0.65628, -0.2975, 2.86},
	Hg:       {"H gamma 4340", 0.43405, 0.1565, 0.468},
	Hd:       {"H delta 4102", 0.41017, 0.2295, 0.259},
	HeII4686: {"He II 4686", 0.46857, 0.0497, 0},
	OIII4959: {"[O III] 4959", 0.49589, -0.0257, 0},
	OIII5007: {"[O III] 5007", 0.50068, -0.0377, 0},
	NII6548:  {"[N II] 6548", 0.65481, -0.2956, 0},
	NII6584:  {"[N II] 6584", 0.65834, -0.3003, 0},
	SII6716:  {"[S II] 6716", 0.67164, -0.3179, 0},
	SII6731:  {"[S II] 6731", 0.67308, -0.3198, 0},
}

// String names the line, e.g. "[O III] 5007".
func (l Line) String() string {
	if l < 0 || l >= lineCount {
		return "no line"
	}
	return lineData[l].name
}

// F returns how dust treats the line against H beta, k(λ)/k(Hβ) - 1; below 0:
// the line suffers less.
//
// Source: [cite.CardelliEtAl1989], R_V = 3.1.
//
// Checked: TestLines, to 1e-4.
func (l Line) F() float64 {
	if l < 0 || l >= lineCount {
		return math.NaN()
	}
	return lineData[l].f
}

// mag5007Zero turns a flux into a magnitude.
//
// Source: [cite.Jacoby1989].
const mag5007Zero = -13.74

// Mag5007 returns the magnitude of a nebula in the line [O III] 5007.
//
//	m = -2.5 log F - 13.74      F in erg/s/cm2
//
// Given:
//   - logF: log10 of the flux.
//
// Returns:
//   - the magnitude; [ErrInput] for what is not a number or beyond ±60.
//
// Notes:
//  1. Not to be used alone for exposures: nebulae are extended. See
//     [SurfaceMag].
//
// Source: [cite.Jacoby1989]; two copies agree.
//
// Checked: TestNebulae.
func Mag5007(logF float64) (astro.Mag, error) {
	if !isFlux(logF) {
		return astro.Mags(math.NaN()), bad("log flux", logF)
	}
	return astro.Mags(-2.5*logF + mag5007Zero), nil
}

// perEBV is c(Hβ) per unit of E(B-V): 0.4 k(Hβ), with k(Hβ) = 3.609.
//
// Source: [cite.CardelliEtAl1989], R_V = 3.1.
const perEBV = 1.444

// CFromEBV returns c(Hβ), dex, of a reddening on the true scale: 1.444 E(B-V).
//
// Notes:
//  1. Many works on nebulae use an older law, c = 1.47 E(B-V), with
//     f(Hα) = -0.32: do not mix.
//
// Source: [cite.CardelliEtAl1989].
//
// Checked: TestNebulae.
func CFromEBV(ebv float64) float64 { return perEBV * ebv }

// EBVFromC returns E(B-V) on the true scale from c(Hβ), dex.
//
// Source: [cite.CardelliEtAl1989].
//
// Checked: TestNebulae.
func EBVFromC(c float64) float64 { return c / perEBV }

// Dust is the reddening that a ratio of hydrogen lines shows.
type Dust struct {
	C, EBV       float64 // c(Hβ) in dex and E(B-V); never below 0
	CErr, EBVErr float64 // from the error of the ratio alone
	RawC         float64 // before it was raised to 0
}

// Balmer returns the reddening from a hydrogen line's ratio to H beta.
//
//	c = -log(ratio/case B) / f      case B: Hα 2.86, Hγ 0.468, Hδ 0.259
//	Hα: c = 3.361 log(ratio/2.86), E(B-V) = 2.328 log(ratio/2.86)
//
// Given:
//   - line: [Ha], [Hg] or [Hd].
//   - ratio: observed flux over that of H beta; ratioErr: one sigma, 0 where
//     not known.
//
// Returns:
//   - c and E(B-V); [ErrInput] for another line or a ratio not above 0.
//
// Notes:
//  1. A ratio bluer than case B means noise: c is 0 then, and RawC negative.
//  2. Take [N II] out of Hα first: a blend passes for dust.
//
// Source: [cite.OsterbrockFerland2006]; [cite.CardelliEtAl1989].
//
// Checked: TestNebulae, to the digits printed.
func Balmer(line Line, ratio, ratioErr float64) (Dust, error) {
	if line != Ha && line != Hg && line != Hd {
		return Dust{}, bad("not a Balmer line other than H beta:", float64(line))
	}
	if !positive(ratio) || !(ratioErr >= 0 && ratioErr < mostLength) {
		return Dust{}, bad("line ratio and its error", ratio, ratioErr)
	}
	per := -1 / lineData[line].f
	c := per * math.Log10(ratio/lineData[line].caseB)
	e := math.Abs(per) * ratioErr / ratio / math.Ln10
	return Dust{C: math.Max(c, 0), EBV: EBVFromC(math.Max(c, 0)), CErr: e, EBVErr: EBVFromC(e), RawC: c}, nil
}

// Dereddened returns log10 of a line's flux without dust.
//
//	log F0 = log F + c (1 + f)
//
// Given:
//   - logF: log10 of the flux, erg/s/cm2; c: c(Hβ), 0 to 10 dex.
//
// Returns:
//   - log10 of the flux; [ErrInput].
//
// Source: [cite.OsterbrockFerland2006].
//
// Checked: TestNebulae.
func Dereddened(line Line, logF, c float64) (float64, error) {
	if line < 0 || line >= lineCount || !isFlux(logF) || !(c >= 0 && c <= 10) {
		return math.NaN(), bad("line, log flux and c", float64(line), logF, c)
	}
	return logF + c*(1+lineData[line].f), nil
}
