package stage

import (
	"fmt"
	"regexp"
	"strings"

	"evenfall/astro/cite"
	"evenfall/targets"
)

// Sources that are no publication.
const (
	practice = "common practice, no source"
	memory   = "from memory, not checked against a publication"
)

type shares = map[targets.Stage]float64

// kindShares are the shares of the stages among what lists call by a kind.
// Giants: shares of time spent above 10 Lsun and below 5500 K (red-giant
// branch 45 %, core helium burning 53 %, early AGB 1.6 %, thermal pulses
// 0.4 %), with a share for the subgiants and the supergiants that lists mix in.
var kindShares = map[targets.Kind]struct {
	shares shares
	source string
}{
	targets.Giant: {shares{targets.SG: 0.06, targets.RGB: 0.42, targets.RC: 0.44, targets.EAGB: 0.04, targets.TPAGB: 0.02,
		targets.HB: 0.005, targets.PAGB: 0.004, targets.RSG: 0.006, targets.MS: 0.005}, ""},
	targets.LPV: {shares{targets.TPAGB: 0.80, targets.EAGB: 0.09, targets.RGB: 0.09, targets.RSG: 0.01, targets.PAGB: 0.01, targets.ACC: 0.003}, practice},
	targets.PostAGB: {shares{targets.PAGB: 0.92, targets.TPAGB: 0.03, targets.CSPN: 0.02, targets.RSG: 0.02, targets.HB: 0.01},
		practice},
	targets.PN:          {shares{targets.Neb: 0.96, targets.CSPN: 0.02, targets.ACC: 0.01, targets.PAGB: 0.01}, practice},
	targets.WD:          {shares{targets.Dwarf: 0.96, targets.SDB: 0.02, targets.ACC: 0.01, targets.CSPN: 0.005, targets.MS: 0.005}, practice},
	targets.Interacting: {shares{targets.ACC: 0.90, targets.Dwarf: 0.07, targets.SDB: 0.01, targets.MS: 0.01, targets.RGB: 0.01}, practice},
}

// rule is evidence that a pattern in a text gives.
type rule struct {
	pattern *regexp.Regexp
	what    string // %s: the text
	weight  shares
	rest    float64
	source  string
}

func match(p string) *regexp.Regexp { return regexp.MustCompile(p) }

// variability lists what the type of variability says; the first that fits
// counts. Semiregulars are split by period in [variabilityOf].
var variability = []rule{
	{match(`ZAND|\bN[ABCRL]?(\b|:|\+)|^UG|\bNL|^AM(/|$)|XM|XP|^CV|WD PULSAR`), "variable of type %s: accretes from, or lives beside, a companion",
		shares{targets.ACC: 1}, 0.02, practice},
	{match(`^EA?/(D|WD)`), "eclipsing binary with a white dwarf, type %s: detached, not accreting",
		shares{targets.Dwarf: 1, targets.ACC: 0.02}, 0.005, practice},
	{match(`^M(\b|:|\+)`), "Mira, type %s", shares{targets.TPAGB: 0.97, targets.EAGB: 0.01, targets.RSG: 0.01, targets.PAGB: 0.005}, 0.001, practice},
	{match(`^(SRC|LC)(?:$|[^:])`), "supergiant variable, type %s", shares{targets.RSG: 0.85, targets.TPAGB: 0.08, targets.EAGB: 0.07}, 0.01, practice},
	{match(`^SRD`), "yellow semiregular, type %s", shares{targets.PAGB: 0.4, targets.RGB: 0.2, targets.EAGB: 0.2, targets.RC: 0.1, targets.HB: 0.1}, 0.02, practice},
	{match(`^(L|LB|LC:)(\b|:|$)`), "slow irregular variable, type %s", shares{targets.TPAGB: 0.4, targets.EAGB: 0.3, targets.RGB: 0.3}, 0.01, practice},
	{match(`^RV`), "RV Tauri star, type %s", shares{targets.PAGB: 1}, 0.03, practice},
	{match(`^RCB`), "R Coronae Borealis star, type %s: hydrogen gone, after the AGB or after a merger",
		shares{targets.PAGB: 1, targets.TPAGB: 0.1}, 0.01, practice},
	{match(`^RR`), "RR Lyrae star, type %s", shares{targets.HB: 1}, 0.002, practice},
	{match(`^ZZ|^V777|^GWVIR`), "pulsating white dwarf, type %s", shares{targets.Dwarf: 1, targets.ACC: 0.3, targets.CSPN: 0.02}, 0.01, practice},
	{match(`^RPHS|^V361HYA|^V1093HER`), "pulsating hot subdwarf, type %s", shares{targets.SDB: 1}, 0.01, practice},
}

// spectra lists what the spectral type says; the first that fits counts.
var spectra = []rule{
	{match(`^sd[OB]`), "hot subdwarf spectrum %s", shares{targets.SDB: 1}, 0.02, practice},
	{match(`^sdA|^.*HB`), "spectrum %s of the blue horizontal branch", shares{targets.HB: 1}, 0.05, practice},
	{match(`^D[ABCOQZX]`), "white dwarf spectrum %s", shares{targets.Dwarf: 1, targets.ACC: 0.4, targets.CSPN: 0.1}, 0.01, practice},
	{match(`^\[?W[CO]|^Of?\(`), "spectrum %s of a central star", shares{targets.CSPN: 1, targets.Neb: 1, targets.Dwarf: 0.2}, 0.05, practice},
	{match(`^(C|N)[-\d,]|^C$|^C-[NJ]`), "carbon star, spectrum %s", shares{targets.TPAGB: 1, targets.PAGB: 0.1}, 0.01, practice},
	{match(`^S[\d-]|^M\d*S|^MS|^S$`), "S star, spectrum %s: third dredge-up, or mass from a companion that had it",
		shares{targets.TPAGB: 1}, 0.02, practice},
	{match(`^[FGKAB][\d.]*.*I(a|b|ab|I)?[^IV]*:Ba|Ba\d`), "barium star, spectrum %s: polluted by a companion that is a white dwarf now",
		shares{targets.RGB: 1, targets.RC: 1, targets.EAGB: 0.6}, 0.1, practice},
	{match(`^[KM][^I]*I(a|ab|b)`), "supergiant class, spectrum %s", shares{targets.RSG: 1, targets.TPAGB: 0.1, targets.PAGB: 0.1}, 0.01, practice},
	{match(`^[BAFG][^I]*I(a|ab|b|\b)`), "high luminosity at an early type, spectrum %s", shares{targets.PAGB: 1, targets.RSG: 0.3}, 0.03, practice},
	{match(`^[FGK][\d.+-]*III-IV`), "between giant and subgiant, spectrum %s", shares{targets.SG: 1, targets.RGB: 1, targets.RC: 0.4}, 0.1, practice},
	{match(`^[FGK][\d.+-]*IV`), "subgiant class, spectrum %s", shares{targets.SG: 1, targets.MS: 0.1, targets.RGB: 0.05, targets.RC: 0.02}, 0.01, practice},
	{match(`^[FGKM][\d.+-]*V`), "dwarf class, spectrum %s", shares{targets.MS: 1, targets.SG: 0.5, targets.ACC: 0.2}, 0.02, practice},
	{match(`^M([5-9]|10)`), "late M giant, spectrum %s", shares{targets.TPAGB: 1, targets.EAGB: 0.4, targets.RGB: 0.15, targets.RSG: 0.1, targets.ACC: 0.3}, 0.005, practice},
	{match(`^M`), "M giant, spectrum %s: above the clump", shares{targets.RGB: 1, targets.EAGB: 1, targets.TPAGB: 0.15, targets.RSG: 0.2, targets.ACC: 0.2}, 0.005, practice},
	{match(`^[GK].*III`), "giant class, spectrum %s", shares{targets.RGB: 1, targets.RC: 1, targets.EAGB: 0.6, targets.SG: 0.1, targets.TPAGB: 0.01}, 0.01, practice},
}

// longSemiregular and shortSemiregular are the shares among semiregulars of a
// period over and under 60 d.
var (
	longSemiregular  = shares{targets.TPAGB: 0.6, targets.EAGB: 0.2, targets.RGB: 0.2}
	shortSemiregular = shares{targets.RGB: 0.5, targets.EAGB: 0.25, targets.TPAGB: 0.25}
)

const semiregularSplitD = 60

// listed gathers what the catalogue's own words say.
func listed(t *targets.Target) []factor {
	var out []factor
	if k, ok := kindShares[t.Kind]; ok {
		f := factor{what: "listed as " + string(t.Kind), source: k.source, weight: k.shares, rest: 1e-4}
		if f.source == "" {
			f.source = cite.HurleyPolsTout2000.String() + ", shares of time"
		}
		if t.KindInferred {
			f.what, f.rest = "looks like "+string(t.Kind)+" (kind inferred)", 0.02
		}
		out = append(out, f)
	}
	if f, ok := variabilityOf(t); ok {
		out = append(out, f)
	}
	if f, ok := spectrumOf(t); ok {
		out = append(out, f)
	}
	if f, ok := gravityOf(t); ok {
		out = append(out, f)
	}
	if f, ok := temperatureOf(t); ok {
		out = append(out, f)
	}
	return out
}

func variabilityOf(t *targets.Target) (factor, bool) {
	v := strings.ToUpper(strings.TrimSpace(t.Var.Type))
	if v == "" {
		return factor{}, false
	}
	if match(`^SR[AB]?(\b|:|$)`).MatchString(v) {
		f := factor{what: "semiregular, type " + t.Var.Type, weight: longSemiregular, rest: 0.001, source: practice}
		if p := t.Var.PeriodD; p.Known && p.Value < semiregularSplitD {
			f.weight = shortSemiregular
		}
		if p := t.Var.PeriodD; p.Known {
			f.what += fmt.Sprintf(", period %g d", p.Value)
		}
		return f, true
	}
	return first(variability, v, t.Var.Type)
}

func spectrumOf(t *targets.Target) (factor, bool) {
	// a composite spectrum with a nova or a companion says little of one star
	sp := strings.TrimSpace(t.Physics.SpType)
	if sp == "" || strings.HasPrefix(strings.ToLower(sp), "pec") || (strings.Contains(sp, "+") && t.Kind == targets.Interacting) {
		return factor{}, false
	}
	return first(spectra, sp, sp)
}

func first(rules []rule, text, shown string) (factor, bool) {
	for _, r := range rules {
		if r.pattern.MatchString(text) {
			return factor{what: fmt.Sprintf(r.what, shown), source: r.source, weight: r.weight, rest: r.rest}, true
		}
	}
	return factor{}, false
}

// gravityOf weighs a listed surface gravity.
func gravityOf(t *targets.Target) (factor, bool) {
	g := t.Physics.LogG
	if !g.Known || g.Value < -2 || g.Value > 11 {
		return factor{}, false
	}
	f := factor{what: fmt.Sprintf("surface gravity log g = %.2f", g.Value), source: practice, rest: 0.02}
	switch v := g.Value; {
	case v >= 6.5:
		f.weight = shares{targets.Dwarf: 1, targets.CSPN: 0.3, targets.ACC: 0.5}
	case v >= 5 && v < 6.5:
		f.weight = shares{targets.SDB: 1, targets.CSPN: 0.5, targets.Dwarf: 0.05}
	case v >= 4.1:
		f.weight = shares{targets.MS: 1, targets.SG: 0.4}
	case v >= 3.1:
		f.weight = shares{targets.SG: 1, targets.RGB: 0.15, targets.MS: 0.1, targets.HB: 0.3}
	case v >= 2.8:
		f.weight = shares{targets.RGB: 1, targets.RC: 0.4, targets.SG: 0.3, targets.HB: 1}
	case v >= 2.2:
		f.weight = shares{targets.RC: 1, targets.RGB: 0.35, targets.HB: 0.5}
	case v >= 1.4:
		f.weight = shares{targets.RGB: 1, targets.EAGB: 0.6, targets.RC: 0.05, targets.PAGB: 0.2}
	default:
		f.weight = shares{targets.RGB: 0.6, targets.EAGB: 0.8, targets.TPAGB: 1, targets.RSG: 1, targets.PAGB: 1}
	}
	return f, true
}

// temperatureOf weighs a listed temperature where it rules out the cool giants.
func temperatureOf(t *targets.Target) (factor, bool) {
	k := t.Physics.TeffK
	const coolGiantsEnd, hotEnd = 6800, 500000
	if !k.Known || k.Value < coolGiantsEnd || k.Value > hotEnd {
		return factor{}, false
	}
	hot := shares{targets.HB: 1, targets.MS: 1, targets.PAGB: 1, targets.Dwarf: 1, targets.ACC: 1, targets.SDB: 0.3, targets.CSPN: 0.3, targets.Neb: 1, targets.SG: 0.3}
	if k.Value > 20000 {
		hot = shares{targets.Dwarf: 1, targets.SDB: 1, targets.CSPN: 1, targets.Neb: 1, targets.ACC: 1, targets.MS: 0.1, targets.PAGB: 0.3, targets.HB: 0.1}
	}
	return factor{what: fmt.Sprintf("%.0f K: hotter than any red giant", k.Value), source: practice, weight: hot, rest: 0.001}, true
}
