package degenerate

import (
	"fmt"
	"math"
)

// Recognised tells whether a star lies where white dwarfs do.
//
//	M_G > 9.5 + 2.9 (BP-RP)
//
// Given:
//   - absG: absolute G without dust, mag; bprp: BP-RP without dust, mag.
//
// Returns:
//   - false where either is not a number.
//
// Notes:
//  1. It misses 1 of 1503 known white dwarfs. How many others it takes for one
//     was not measured; a parallax under 5 times its error should not be judged
//     by it.
//
// Source: a line drawn under the stars of [cite.GentileFusilloEtAl2021] with
// spectra; no publication has it.
//
// Checked: TestRecognised.
func Recognised(absG, bprp float64) bool { return absG > 9.5+2.9*bprp }

// RoughCut tells whether a star passes the wide cut in use for first selections
// of candidates.
//
//	M_G > 5,   M_G > 5.93 + 5.047 c,   M_G > 6 c³ - 21.77 c² + 27.91 c + 0.897     c = BP-RP < 1.7
//
// Given:
//   - absG, bprp: as for [Recognised].
//   - plxOverErr: parallax over its error; it must pass 5.
//
// Notes:
//  1. It lies up to 3.7 mag above the sequence and lets hot subdwarfs in; use
//     [Recognised] for a judgement.
//
// Source: as printed in one other work; the cut at 5 is common practice,
// without a source. Compare [cite.GentileFusilloEtAl2021].
//
// Checked: TestRecognised.
func RoughCut(absG, bprp, plxOverErr float64) bool {
	c := bprp
	return plxOverErr > 5 && c < 1.7 && absG > 5 && absG > 5.93+5.047*c &&
		absG > c*(c*(6*c-21.77)+27.91)+0.897
}

// Limits of what photometry tells, all measured on stars with published fits.
const (
	heliumCoreBelow  = 0.45    // solar masses
	heliumCoreErr    = 0.06    // of such a mass
	blindAboveK      = 30000.0 // Gaia colours do not give the temperature
	turnBelowK       = 4000.0  // the colour of hydrogen models turns
	poorChi2         = 9.2     // one in a hundred by chance, two data
	dcCoolK, dcHotK  = 6000.0, 11000.0
	dcFrom, dcUpto   = 0.68, 0.95
	dcRatio          = 4.0
	heliumMasses     = "pure helium gives masses some 0.1 too high from 6000 to 11 000 K, where traces of hydrogen matter (" + FromMemory + ")"
	dcHint           = "mass 0.7-0.9 if hydrogen; a helium-rich DC of normal mass fits too, some 4 times likelier than a DA by this mass alone"
	noTypeByColour   = "hydrogen or helium: Gaia photometry cannot tell DA from DB"
	bothCompositions = "below 11 000 K the atmosphere matters: see the helium fit beside this one"
)

// DCHint says whether the mass that a hydrogen fit gave points to a helium-rich
// DC of normal mass.
//
// Given:
//   - teffK, massMsun: of the fit with [Hydrogen].
//
// Returns:
//   - how many times likelier such a mass is for a DC than for a DA, about 4,
//     with words, and true, from 6000 to 11 000 K and 0.68 to 0.95 solar
//     masses; else false.
//
// Notes:
//  1. 87 per cent of DC and 23 per cent of DA pass 0.68. It is a ratio of
//     likelihoods; how rare DC stars are in the sky is not in it.
//
// Source: measured on [cite.GentileFusilloEtAl2021] with the spectral types of
// the Montreal database.
//
// Checked: TestDCHint.
func DCHint(teffK, massMsun float64) (ratio float64, words string, ok bool) {
	if !(teffK >= dcCoolK && teffK <= dcHotK && massMsun > dcFrom && massMsun <= dcUpto) {
		return 0, "", false
	}
	return dcRatio, dcHint, true
}

// remark adds what the user must know, and takes away what may not be given.
func (a *Answer) remark(s *Seen) {
	say := func(format string, args ...any) { a.Notes = append(a.Notes, fmt.Sprintf(format, args...)) }
	spectral := s.TeffK > 0 && s.TeffErrK > 0
	if a.MassMsun.Mid < heliumCoreBelow {
		a.HeliumCore = true
		m := &a.MassMsun
		m.Lo = math.Max(0, math.Min(m.Lo, m.Mid-heliumCoreErr))
		m.Hi = math.Max(m.Hi, m.Mid+heliumCoreErr)
		a.CoolingAgeYr = span(math.NaN(), math.NaN(), math.NaN())
		say("He core, mass +-0.06, age not given")
	}
	if !spectral && a.TeffK.Hi > blindAboveK {
		a.IntervalOnly = true
		say("above 30 000 K Gaia colours do not give the temperature: %.0f to %.0f K", a.TeffK.Lo, a.TeffK.Hi)
	}
	if len(a.Solutions) > 1 {
		say("%d solutions: %s", len(a.Solutions), listed(a.Solutions))
	} else if a.Composition == Hydrogen && a.TeffK.Lo < turnBelowK && !spectral {
		say("below 4000 K the colour turns back; a second, cooler solution may lie off the tables")
	}
	if a.Chi2 > poorChi2 {
		say("no model fits well (chi² %.1f): perhaps a double, a magnetic star or wrong photometry", a.Chi2)
	}
	if a.Composition == Helium && a.TeffK.Mid > dcCoolK && a.TeffK.Mid < dcHotK {
		say(heliumMasses)
	}
	if a.Composition == Hydrogen && !spectral {
		if _, words, ok := DCHint(a.TeffK.Mid, a.MassMsun.Mid); ok {
			say("%s", words)
		}
		if a.TeffK.Mid < dcHotK {
			say(bothCompositions)
		}
		say(noTypeByColour)
	}
}

// listed writes solutions in one line.
func listed(all []Solution) string {
	text := ""
	for k, s := range all {
		if k > 0 {
			text += ", "
		}
		text += fmt.Sprintf("%.0f K with %.2f solar masses (%.0f %%)", s.TeffK, s.MassMsun, 100*s.Share)
	}
	return text
}
