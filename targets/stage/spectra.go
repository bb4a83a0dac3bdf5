package stage

import (
	"strings"

	"evenfall/targets"
)

// spectra lists what the spectral type says; the first that fits counts. M
// types are split by subtype in [spectrumOf].
var spectra = []rule{
	{match(`^sd[OB]`), "hot subdwarf spectrum %s", shares{targets.SDB: 1}, 0.02, practice, selects},
	{match(`^sdA|^.*HB`), "spectrum %s of the blue horizontal branch", shares{targets.HB: 1}, 0.05, practice, selects},
	{match(`^D[ABCOQZX]`), "white dwarf spectrum %s", shares{targets.Dwarf: 1, targets.ACC: 0.4, targets.CSPN: 0.1}, 0.01, practice, selects},
	{match(`^\[W|^Of?\(`), "spectrum %s of a central star", shares{targets.CSPN: 1, targets.Neb: 1, targets.Dwarf: 0.2}, 0.05, practice, selects},
	{match(`^W[CNO]`), "Wolf-Rayet spectrum %s: a massive star", shares{targets.RSG: 1}, 0.01, practice, selects},
	{match(`^C-?[HR]|^CH|^R\d`), "carbon in spectrum %s: from a companion, or from a merger", shares{targets.RGB: 1, targets.RC: 1, targets.EAGB: 0.4, targets.TPAGB: 0.1},
		0.01, practice, likelihood},
	{match(`^N\d?($|[,\s(:ep])|^C-[NJ]|^C\d|^C$`), "carbon star, spectrum %s", shares{targets.TPAGB: 1, targets.PAGB: 0.1}, 0.005, practice, ofLuminous},
	{match(`^S[\d-]|^M\d*S|^MS|^S$`), "S star, spectrum %s: third dredge-up, or mass from a companion that had it",
		shares{targets.TPAGB: 1}, 0.01, practice, ofLuminous},
	{match(`^[FGKAB][\d.]*.*I(a|b|ab|I)?[^IV]*:Ba|Ba\d`), "barium star, spectrum %s: polluted by a companion that is a white dwarf now",
		shares{targets.RGB: 1, targets.RC: 1, targets.EAGB: 0.6}, 0.1, practice, likelihood},
	{match(`^[KM][^I]*I(a|ab|b)`), "supergiant class, spectrum %s", shares{targets.RSG: 1, targets.TPAGB: 0.1, targets.PAGB: 0.1}, 0.01, practice, selects},
	{match(`^[OBAFG][^I]*I(a|ab|b|\b)`), "high luminosity at an early type, spectrum %s", shares{targets.RSG: 1, targets.PAGB: 0.6, targets.RC: 0.2}, 0.02, practice, selects},
	{match(`^[OBA][^I]*II`), "bright giant of an early type, spectrum %s", shares{targets.RC: 1, targets.RSG: 0.3, targets.PAGB: 0.2, targets.SG: 0.5, targets.MS: 0.3}, 0.02, practice, likelihood},
	{match(`^[FGK][\d.+-]*III-IV`), "between giant and subgiant, spectrum %s", shares{targets.SG: 1, targets.RGB: 1, targets.RC: 0.4}, 0.1, practice, likelihood},
	{match(`^[OBAFGK][\d.+-]*IV`), "subgiant class, spectrum %s", shares{targets.SG: 1, targets.MS: 0.1, targets.RGB: 0.05, targets.RC: 0.02}, 0.01, practice, likelihood},
	{match(`^[OBAFGKM][\d.+-]*V`), "dwarf class, spectrum %s", shares{targets.MS: 1, targets.SG: 0.5, targets.ACC: 0.2}, 0.02, practice, likelihood},
	{match(`^[GK].*III`), "giant class, spectrum %s", shares{targets.RGB: 1, targets.RC: 1, targets.EAGB: 0.6, targets.SG: 0.1, targets.TPAGB: 0.01}, 0.01, practice, likelihood},
}

// lateM and earlyM are what giants of type M5 and later, and earlier ones, say.
var (
	lateM  = rule{nil, "late M giant, spectrum %s", shares{targets.TPAGB: 1, targets.EAGB: 0.4, targets.RGB: 0.15, targets.RSG: 0.1, targets.ACC: 0.3}, 0.005, practice, ofLuminous}
	earlyM = rule{nil, "M giant, spectrum %s: above the clump", shares{targets.RGB: 1, targets.EAGB: 1, targets.TPAGB: 0.15, targets.RSG: 0.2, targets.ACC: 0.2}, 0.005, practice, ofLuminous}
)

const lateFrom = 5.0

var mTypes = match(`^g?M(\d+(?:\.\d)?)(?:[^M-]*[-/](?:M)?(\d+(?:\.\d)?))?`)

// spectrumOf is what the spectral type says.
func spectrumOf(t *targets.Target) (factor, bool) {
	sp := strings.TrimSpace(t.Physics.SpType)
	low := strings.ToLower(sp)
	switch {
	case sp == "" || strings.HasPrefix(low, "pec"):
		return factor{}, false
	case t.Kind == targets.Interacting && (strings.Contains(sp, "+") || strings.HasPrefix(sp, "D")):
		return factor{}, false // of two stars, or of what flows between them
	case strings.HasPrefix(strings.ToUpper(t.Var.Type), "RCB") && !strings.HasPrefix(sp, "M"):
		return factor{}, false // carbon is what such stars are made of
	}
	if f, ok := first(spectra, sp, sp); ok {
		return f, true
	}
	m, ok := mSubtype(sp)
	switch {
	case !ok:
		return factor{}, false
	case m >= lateFrom:
		return lateM.factor(sp), true
	}
	return earlyM.factor(sp), true
}

// mSubtype returns the subtype of an M star, the middle of a range.
func mSubtype(sp string) (float64, bool) {
	x := mTypes.FindStringSubmatch(sp)
	if x == nil {
		return 0, false
	}
	a, b := decimal(x[1]), decimal(x[1])
	if x[2] != "" {
		b = decimal(x[2])
	}
	return (a + b) / 2, true
}

var technetium = match(`Tc`)

// technetiumOf weighs technetium, which no star holds for long that does not
// make it: more than 100 to 1 for the thermally pulsing branch.
func technetiumOf(t *targets.Target) (factor, bool) {
	sp := t.Physics.SpType
	if !technetium.MatchString(sp) {
		return factor{}, false
	}
	f := factor{what: "technetium in the spectrum, " + sp, source: practice, luminous: true, weight: shares{targets.TPAGB: 1}, rest: 0.01}
	if strings.Contains(sp, "Tc:") || strings.Contains(sp, "Tc?") {
		f.what, f.rest = "technetium suspected, "+sp, 0.1
	}
	return f, true
}
