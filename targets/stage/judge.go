// Package stage judges at what stage of its life a star is, as probabilities
// over the stage codes with the evidence for them, and works out what it is
// made of: distance, temperature, luminosity, radius, mass, age. Parallax and
// colours place a star on the diagram; tracks say who lives there, measured
// loci sort the clump from the giant branch, the list's own words weigh in, and
// a place that contradicts them widens the answer. It fills in nothing that a
// list lacks, and reads no file and no clock.
package stage

import (
	"cmp"
	"math"
	"slices"

	"evenfall/targets"
)

// Threshold is the probability that makes a stage the answer.
const Threshold = 0.6

// Verdict is a judgement.
type Verdict struct {
	Best     string                    // a code, RGB|EAGB, or UNDECIDED
	P        map[targets.Stage]float64 // sums to 1 over the codes
	Evidence []targets.Evidence        // the most telling first
	Missing  []string                  // what is missing, and what it costs
	Place    Placing                   // on the diagram
	MassMsun float64                   // likeliest mass now, Msun; 0: not known
	FeH      float64                   // metallicity that the judgement used, dex
}

// factor is one piece of evidence: how much likelier it is in each stage than
// in those not named, which have rest.
type factor struct {
	what, source string
	weight       map[targets.Stage]float64
	rest         float64
	prior        bool // it says how many there are of each stage, too
	luminous     bool // it is of luminous giants
}

func (f *factor) of(s targets.Stage) float64 {
	if w, ok := f.weight[s]; ok {
		return w
	}
	return f.rest
}

// odds are natural logarithms of weights, by the place of a stage in
// [targets.Stages].
type odds [len(targets.Stages)]float64

// least is what a weight counts at least, so that nothing is impossible.
const least = 1e-12

func (f *factor) logs() odds {
	var out odds
	for i, s := range targets.Stages {
		out[i] = math.Log(math.Max(f.of(s), least))
	}
	return out
}

func total(list []odds) odds {
	var out odds
	for k := range list {
		for i := range out {
			out[i] += list[k][i]
		}
	}
	return out
}

// Judge weighs everything that a list says of a target.
//
//	p(stage) ~ how many there are x product over the evidence of its likelihood in the stage
//
// Given:
//   - t: any of its data may be missing or absurd.
//
// Returns:
//   - probabilities that sum to 1 within 1e-12, the evidence with its log10
//     odds for the answer against the rest, what is missing, and the place on
//     the diagram.
//
// Notes:
//  1. Contradictory evidence widens the probabilities to the mean of what the
//     words and the place say, and the first line names the contradiction.
//  2. Where no model of single stars holds the place, the words alone are
//     believed, as far as the place is unlikely.
//
// Source: methods cited in each line of evidence.
//
// Checked: TestJudgeShares, TestJudgeBuiltin, TestKeplerGiants, FuzzJudge.
func (m *Models) Judge(t targets.Target) Verdict {
	s := m.sight(&t, false)
	m.onTracks(s)
	words := m.wordsOf(&t, s)
	place := m.placed(&t, s, words)
	v := Verdict{Missing: s.missing, Place: s.place}
	all := append(slices.Clone(words), place.factors...)
	logs := make([]odds, len(all))
	for i := range all {
		logs[i] = all[i].logs()
	}
	sum := total(logs)
	p := m.probabilities(sum)
	wordsOnly := m.probabilities(total(logs[:len(words)]))
	clash := m.clash(all, logs, len(words), s)
	switch {
	case clash != nil:
		placeOnly := m.probabilities(total(withoutPriors(place.factors, logs[len(words):])))
		for i := range p {
			p[i] = (wordsOnly[i] + placeOnly[i]) / 2
		}
	case place.elsewhere > 0:
		for i := range p {
			p[i] = (1-place.elsewhere)*p[i] + place.elsewhere*wordsOnly[i]
		}
	}
	v.P = asMap(p)
	top := likeliest(v.P)
	v.Best = answer(v.P, top)
	m.evidence(&v, all, logs, sum, clash, s, top)
	m.weighMass(&v, s, s.post, top)
	return v
}

// wordsOf gathers all that is no place on the diagram.
func (m *Models) wordsOf(t *targets.Target, s *sight) []factor {
	words := listed(t, s)
	if f, ok := m.inCluster(t, s); ok {
		words = append(words, f)
	}
	return words
}

// clash names two ways of knowing that exclude each other.
func (m *Models) clash(all []factor, logs []odds, words int, s *sight) *targets.Evidence {
	if len(all) == words {
		return nil
	}
	byWords := asMap(m.probabilities(total(logs[:words])))
	byPlace := asMap(m.probabilities(total(withoutPriors(all[words:], logs[words:]))))
	if s.place.HROK && s.fit == nil && !s.dwarf { // a rare stage may be the only one of the words that is there at all
		here := m.densities(s, s.post)
		sum, of := 0.0, 0.0
		for code, n := range m.number() {
			sum += n * here[code]
			of += byWords[code] * n * here[code]
		}
		const enough = 0.02
		if sum > 0 && of > enough*sum {
			return nil
		}
	}
	return contradiction(byWords, byPlace, s)
}

// evidence lists the reasons, the most telling first; what says next to nothing
// is left out.
func (m *Models) evidence(v *Verdict, all []factor, logs []odds, sum odds, clash *targets.Evidence, s *sight, top targets.Stage) {
	const hardly = 0.05
	answer := map[targets.Stage]bool{top: true}
	if v.Best == targets.Merged {
		answer = map[targets.Stage]bool{targets.RGB: true, targets.EAGB: true}
	}
	for i := range all {
		if e, ok := m.weigh(&all[i], logs[i], sum, answer); ok && (math.Abs(e.Log10Odds) >= hardly || len(all) == 1) {
			v.Evidence = append(v.Evidence, e)
		}
	}
	slices.SortStableFunc(v.Evidence, func(a, b targets.Evidence) int {
		return cmp.Compare(math.Abs(b.Log10Odds), math.Abs(a.Log10Odds))
	})
	if e := s.gravityClash(top); e != nil {
		v.Evidence = slices.Insert(v.Evidence, 0, *e)
	}
	if clash != nil {
		v.Evidence = slices.Insert(v.Evidence, 0, *clash)
	}
}

// withoutPriors leaves out what says how many there are of each stage.
func withoutPriors(list []factor, logs []odds) []odds {
	var out []odds
	for i := range list {
		if !list[i].prior {
			out = append(out, logs[i])
		}
	}
	return out
}

// probabilities turns logarithms into shares that sum to 1.
func (m *Models) probabilities(logs odds) odds {
	most := slices.Max(logs[:])
	sum := 0.0
	for i := range logs {
		logs[i] = math.Exp(logs[i]-most) + m.floor
		sum += logs[i]
	}
	for i := range logs {
		logs[i] /= sum
	}
	return logs
}

// asMap names probabilities; they sum to 1 within 1e-12.
func asMap(p odds) map[targets.Stage]float64 {
	out := make(map[targets.Stage]float64, len(p))
	rest := 1.0
	for i, s := range targets.Stages[1:] {
		out[s] = p[i+1]
		rest -= p[i+1]
	}
	out[targets.Stages[0]] = math.Max(rest, 0)
	return out
}

func likeliest(p map[targets.Stage]float64) targets.Stage {
	top := targets.Stages[0]
	for _, s := range targets.Stages {
		if p[s] > p[top] {
			top = s
		}
	}
	return top
}

// answer names the judgement.
func answer(p map[targets.Stage]float64, top targets.Stage) string {
	switch {
	case reaches(p[top]):
		return string(top)
	case reaches(p[targets.RGB] + p[targets.EAGB]):
		return targets.Merged
	}
	return targets.Undecided
}

// reaches tells whether a probability is the threshold or more, to the
// thousandth that anybody reads.
func reaches(p float64) bool { return math.Round(1000*p) >= 1000*Threshold }

// weigh returns how strongly one factor speaks for the answer against the
// rest, given all the others.
func (m *Models) weigh(f *factor, own, sum odds, answer map[targets.Stage]bool) (targets.Evidence, bool) {
	others := sum
	for i := range others {
		others[i] -= own[i]
	}
	p := m.probabilities(others)
	var forIt, forP, against, againstP float64
	for i, s := range targets.Stages {
		w := math.Exp(own[i])
		if answer[s] {
			forIt, forP = forIt+p[i]*w, forP+p[i]
		} else {
			against, againstP = against+p[i]*w, againstP+p[i]
		}
	}
	if forP <= 0 || againstP <= 0 || forIt <= 0 || against <= 0 {
		return targets.Evidence{}, false
	}
	ratio := math.Log10(forIt / forP * againstP / against)
	return targets.Evidence{What: f.what, Log10Odds: math.Max(-9, math.Min(9, ratio)), Source: f.source}, true
}

// Sureness returns the probability of the answer given, 0 to 1: of both stages
// where two are merged, of the likeliest where it is undecided.
func (v *Verdict) Sureness() float64 {
	if v.Best == targets.Merged {
		return v.P[targets.RGB] + v.P[targets.EAGB]
	}
	most := 0.0
	for _, p := range v.P {
		most = math.Max(most, p)
	}
	return most
}
