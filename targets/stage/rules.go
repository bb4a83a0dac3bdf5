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
	{match(`^D?CEP`), "Cepheid, type %s: a massive star that burns helium in its core", shares{targets.RC: 1, targets.RSG: 0.1, targets.PAGB: 0.02}, 0.005, practice, selects},
	{match(`^CW|^BLHER`), "Cepheid of old stars, type %s: past the horizontal branch", shares{targets.PAGB: 0.5, targets.HB: 0.5, targets.EAGB: 0.5}, 0.01, practice, selects},
	{match(`^ACYG|^SDOR`), "supergiant variable, type %s", shares{targets.RSG: 1, targets.PAGB: 0.1}, 0.01, practice, selects},
	{match(`^RPHS|^V361HYA|^V1093HER`), "pulsating hot subdwarf, type %s", shares{targets.SDB: 1}, 0.01, practice, selects},
}

// longSemiregular and shortSemiregular are the shares among semiregulars of a
// period over and under 60 d.
var (
	longSemiregular  = amongLuminous(shares{targets.TPAGB: 0.6, targets.EAGB: 0.2, targets.RGB: 0.2})
	shortSemiregular = amongLuminous(shares{targets.RGB: 0.5, targets.EAGB: 0.25, targets.TPAGB: 0.25})
)

const semiregularSplitD = 60

var semiregular = match(`^SR[AB]?(\b|:|$)`)

// listed gathers what the catalogue's own words say, the kind apart.
func listed(t *targets.Target, s *sight) []factor {
	var out []factor
	add := func(f factor, ok bool) {
		if ok {
			out = append(out, f)
		}
	}
	add(kindOf(t))
	add(variabilityOf(t))
	add(spectrumOf(t))
	add(technetiumOf(t))
	add(infraredOf(t))
	switch {
	case s.fit != nil:
	case s.place.HROK: // the place on the diagram says the rest better
		add(s.gravityHere())
		add(s.aboveAGB(t))
	default:
		add(gravityOf(t))
		add(s.temperatureOf(t))
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
		if v, ok := variabilityOf(t); ok && v.prior {
			return factor{}, false // the type of variability says it more finely
		}
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
	if v == "" || t.Kind == targets.Interacting && strings.HasPrefix(v, "ZZ") {
		return factor{}, false // in a binary the dwarf may pulsate and accrete
	}
	if semiregular.MatchString(v) {
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

// factor is the rule applied to a text.
func (r *rule) factor(shown string) factor {
	return factor{what: fmt.Sprintf(r.what, shown), source: r.source, weight: r.weight, rest: r.rest, prior: r.says == selects, luminous: r.says == ofLuminous}
}

func first(rules []rule, text, shown string) (factor, bool) {
	for _, r := range rules {
		if r.pattern.MatchString(text) {
			return r.factor(shown), true
		}
	}
	return factor{}, false
}
