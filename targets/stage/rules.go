package stage

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"evenfall/targets"
)

// Sources that are no publication.
const (
	practice = "common practice, no source"
	memory   = "from memory, not checked against a publication"
)

type shares = map[targets.Stage]float64

// kindShares are the shares of the stages among what lists call by a kind that
// stands for one or few stages.
var kindShares = map[targets.Kind]shares{
	targets.PostAGB:     {targets.PAGB: 0.92, targets.TPAGB: 0.03, targets.CSPN: 0.02, targets.RSG: 0.02, targets.HB: 0.01},
	targets.PN:          {targets.Neb: 0.96, targets.CSPN: 0.02, targets.ACC: 0.01, targets.PAGB: 0.01},
	targets.WD:          {targets.Dwarf: 0.96, targets.SDB: 0.02, targets.ACC: 0.01, targets.CSPN: 0.005, targets.MS: 0.005},
	targets.Interacting: {targets.ACC: 0.90, targets.Dwarf: 0.07, targets.SDB: 0.01, targets.MS: 0.01, targets.RGB: 0.01},
}

// lpvKind is what being called a long-period variable says.
var lpvKind = amongLuminous(shares{targets.TPAGB: 0.80, targets.EAGB: 0.09, targets.RGB: 0.09, targets.RSG: 0.01, targets.PAGB: 0.001})

// giantKind is what being called a giant says of the stage: which stages lists
// call so, not how many of each there are.
var giantKind = shares{targets.RGB: 1, targets.RC: 1, targets.EAGB: 1, targets.TPAGB: 1, targets.SG: 0.3, targets.HB: 0.3,
	targets.RSG: 0.5, targets.PAGB: 0.1, targets.MS: 0.01}

// rule is evidence that a pattern in a text gives.
type rule struct {
	pattern *regexp.Regexp
	what    string // %s: the text
	weight  shares
	rest    float64
	source  string
	says    saying
}

// saying is what the weights of a rule are.
type saying int

const (
	likelihood saying = iota // how often stars of each stage look so
	ofLuminous               // the same, from shares among luminous giants: see [amongLuminous]
	selects                  // shares of the stages among stars so called: a prior of its own
)

// luminousShares are the shares of time near the tip of the giant branch, where
// the giants are that vary much.
var luminousShares = shares{targets.RGB: 0.80, targets.EAGB: 0.13, targets.TPAGB: 0.06, targets.RSG: 0.01, targets.PAGB: 0.002}

// amongLuminous turns shares among such giants into likelihoods, so that the
// place on the diagram can bring in how many there are.
func amongLuminous(of shares) shares {
	out := shares{}
	most := 0.0
	for s, p := range of {
		out[s] = p / math.Max(luminousShares[s], 0.002)
		most = math.Max(most, out[s])
	}
	for s := range out {
		out[s] /= most
	}
	return out
}

func match(p string) *regexp.Regexp { return regexp.MustCompile(p) }

// variability lists what the type of variability says; the first that fits
// counts. Semiregulars are split by period in [variabilityOf].
var variability = []rule{
	{match(`ZAND|\bN[ABCRL]?(\b|:|\+)|^UG|\bNL|^AM(/|$)|XM|XP|^CV|WD PULSAR`), "variable of type %s: accretes from, or lives beside, a companion",
		shares{targets.ACC: 1}, 0.02, practice, selects},
	{match(`^EA?/(D|WD)`), "eclipsing binary with a white dwarf, type %s: detached, not accreting",
		shares{targets.Dwarf: 1, targets.ACC: 0.02}, 0.005, practice, selects},
	{match(`^M(\b|:|\+)`), "Mira, type %s", amongLuminous(shares{targets.TPAGB: 0.97, targets.EAGB: 0.01, targets.RSG: 0.01, targets.PAGB: 0.0003}), 0.0001, practice, ofLuminous},
	{match(`^(SRC|LC)(?:$|[^:])`), "supergiant variable, type %s", shares{targets.RSG: 0.85, targets.TPAGB: 0.08, targets.EAGB: 0.07}, 0.01, practice, selects},
	{match(`^SRD`), "yellow semiregular, type %s", shares{targets.PAGB: 0.4, targets.RGB: 0.2, targets.EAGB: 0.2, targets.RC: 0.1, targets.HB: 0.1}, 0.02, practice, selects},
	{match(`^(L|LB|LC:)(\b|:|$)`), "slow irregular variable, type %s", amongLuminous(shares{targets.TPAGB: 0.4, targets.EAGB: 0.3, targets.RGB: 0.3}), 0.001, practice, ofLuminous},
	{match(`^RV`), "RV Tauri star, type %s", shares{targets.PAGB: 1}, 0.03, practice, selects},
	{match(`^RCB`), "R Coronae Borealis star, type %s: hydrogen gone, after the AGB or after a merger",
		shares{targets.PAGB: 1, targets.TPAGB: 0.1}, 0.01, practice, selects},
	{match(`^RR`), "RR Lyrae star, type %s", shares{targets.HB: 1}, 0.002, practice, selects},
	{match(`^ZZ|^V777|^GWVIR`), "pulsating white dwarf, type %s", shares{targets.Dwarf: 1, targets.ACC: 0.3, targets.CSPN: 0.02}, 0.01, practice, selects},
	{match(`^RPHS|^V361HYA|^V1093HER`), "pulsating hot subdwarf, type %s", shares{targets.SDB: 1}, 0.01, practice, selects},
}

// spectra lists what the spectral type says; the first that fits counts.
var spectra = []rule{
	{match(`^sd[OB]`), "hot subdwarf spectrum %s", shares{targets.SDB: 1}, 0.02, practice, selects},
	{match(`^sdA|^.*HB`), "spectrum %s of the blue horizontal branch", shares{targets.HB: 1}, 0.05, practice, selects},
	{match(`^D[ABCOQZX]`), "white dwarf spectrum %s", shares{targets.Dwarf: 1, targets.ACC: 0.4, targets.CSPN: 0.1}, 0.01, practice, selects},
	{match(`^\[?W[CO]|^Of?\(`), "spectrum %s of a central star", shares{targets.CSPN: 1, targets.Neb: 1, targets.Dwarf: 0.2}, 0.05, practice, selects},
	{match(`^(C|N)[-\d,]|^C$|^C-[NJ]`), "carbon star, spectrum %s", shares{targets.TPAGB: 1, targets.PAGB: 0.1}, 0.005, practice, ofLuminous},
	{match(`^S[\d-]|^M\d*S|^MS|^S$`), "S star, spectrum %s: third dredge-up, or mass from a companion that had it",
		shares{targets.TPAGB: 1}, 0.01, practice, ofLuminous},
	{match(`^[FGKAB][\d.]*.*I(a|b|ab|I)?[^IV]*:Ba|Ba\d`), "barium star, spectrum %s: polluted by a companion that is a white dwarf now",
		shares{targets.RGB: 1, targets.RC: 1, targets.EAGB: 0.6}, 0.1, practice, likelihood},
	{match(`^[KM][^I]*I(a|ab|b)`), "supergiant class, spectrum %s", shares{targets.RSG: 1, targets.TPAGB: 0.1, targets.PAGB: 0.1}, 0.01, practice, selects},
	{match(`^[BAFG][^I]*I(a|ab|b|\b)`), "high luminosity at an early type, spectrum %s", shares{targets.PAGB: 1, targets.RSG: 0.3}, 0.03, practice, selects},
	{match(`^[FGK][\d.+-]*III-IV`), "between giant and subgiant, spectrum %s", shares{targets.SG: 1, targets.RGB: 1, targets.RC: 0.4}, 0.1, practice, likelihood},
	{match(`^[FGK][\d.+-]*IV`), "subgiant class, spectrum %s", shares{targets.SG: 1, targets.MS: 0.1, targets.RGB: 0.05, targets.RC: 0.02}, 0.01, practice, likelihood},
	{match(`^[FGKM][\d.+-]*V`), "dwarf class, spectrum %s", shares{targets.MS: 1, targets.SG: 0.5, targets.ACC: 0.2}, 0.02, practice, likelihood},
	{match(`^M([5-9]|10)`), "late M giant, spectrum %s", shares{targets.TPAGB: 1, targets.EAGB: 0.4, targets.RGB: 0.15, targets.RSG: 0.1, targets.ACC: 0.3}, 0.005, practice, ofLuminous},
	{match(`^M`), "M giant, spectrum %s: above the clump", shares{targets.RGB: 1, targets.EAGB: 1, targets.TPAGB: 0.15, targets.RSG: 0.2, targets.ACC: 0.2}, 0.005, practice, ofLuminous},
	{match(`^[GK].*III`), "giant class, spectrum %s", shares{targets.RGB: 1, targets.RC: 1, targets.EAGB: 0.6, targets.SG: 0.1, targets.TPAGB: 0.01}, 0.01, practice, likelihood},
}

// longSemiregular and shortSemiregular are the shares among semiregulars of a
// period over and under 60 d.
var (
	longSemiregular  = amongLuminous(shares{targets.TPAGB: 0.6, targets.EAGB: 0.2, targets.RGB: 0.2})
	shortSemiregular = amongLuminous(shares{targets.RGB: 0.5, targets.EAGB: 0.25, targets.TPAGB: 0.25})
)

const semiregularSplitD = 60

// listed gathers what the catalogue's own words say, the kind apart.
func listed(t *targets.Target, s *sight) []factor {
	var out []factor
	for _, of := range []func(*targets.Target) (factor, bool){kindOf, variabilityOf, spectrumOf, infraredOf} {
		if f, ok := of(t); ok {
			out = append(out, f)
		}
	}
	if s.fit == nil && !s.place.HROK { // else the place on the diagram says it better
		for _, of := range []func(*targets.Target) (factor, bool){gravityOf, temperatureOf} {
			if f, ok := of(t); ok {
				out = append(out, f)
			}
		}
	}
	return out
}

// kindOf is what the kind says.
func kindOf(t *targets.Target) (factor, bool) {
	f := factor{what: "listed as " + string(t.Kind), source: practice, rest: 1e-4}
	if t.KindInferred {
		f.what, f.rest = "looks like "+string(t.Kind)+" (kind inferred)", 0.02
	}
	switch t.Kind {
	case targets.Giant:
		f.weight = giantKind
		return f, true
	case targets.LPV:
		if _, ok := variabilityOf(t); ok {
			return factor{}, false // the type says it more finely
		}
		f.weight, f.luminous = lpvKind, true
		return f, true
	}
	k, ok := kindShares[t.Kind]
	f.weight, f.prior = k, true
	return f, ok
}

func variabilityOf(t *targets.Target) (factor, bool) {
	v := strings.ToUpper(strings.TrimSpace(t.Var.Type))
	if v == "" {
		return factor{}, false
	}
	if match(`^SR[AB]?(\b|:|$)`).MatchString(v) {
		f := factor{what: "semiregular, type " + t.Var.Type, weight: longSemiregular, rest: 0.001, source: practice, luminous: true}
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
	f, ok := first(spectra, sp, sp)
	if v := strings.ToUpper(t.Var.Type); strings.HasPrefix(v, "RCB") && f.luminous {
		return factor{}, false // carbon is what such stars are made of
	}
	return f, ok
}

func first(rules []rule, text, shown string) (factor, bool) {
	for _, r := range rules {
		if r.pattern.MatchString(text) {
			f := factor{what: fmt.Sprintf(r.what, shown), source: r.source, weight: r.weight, rest: r.rest, prior: r.says == selects, luminous: r.says == ofLuminous}
			return f, true
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
