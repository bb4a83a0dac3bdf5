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

// Judge weighs everything that a list says of a target.
//
//	p(stage) ~ how many there are x product over the evidence of its likelihood in the stage
//
// Given:
//   - t: any of its data may be missing or absurd.
//
// Returns:
//   - probabilities that sum to 1 within 1e-12, the evidence with its log10
//     odds for the likeliest stage against the rest, what is missing, and the
//     place on the diagram.
//
// Notes:
//  1. Contradictory evidence widens the probabilities, and a line names the
//     contradiction.
//
// Source: methods cited in each line of evidence.
//
// Checked: TestJudgeShares, TestJudgeBuiltin, TestKeplerGiants, FuzzJudge.
func (m *Models) Judge(t targets.Target) Verdict {
	s := m.sight(&t, false)
	words := listed(&t, s)
	if f, ok := m.inCluster(&t, s); ok {
		words = append(words, f)
	}
	place := m.placed(&t, s, words)
	v := Verdict{Missing: s.missing, Place: s.place}
	all := append(slices.Clone(words), place...)
	byWords := m.combine(words)
	if len(place) > 0 {
		byPlace := m.combine(withoutPriors(place))
		if clash := contradiction(byWords, byPlace, s); clash != nil {
			v.P = average(m.combine(all), byWords, byPlace)
			v.Evidence = append(v.Evidence, *clash)
		}
	}
	if v.P == nil {
		v.P = m.combine(all)
	}
	top := likeliest(v.P)
	v.Best = answer(v.P, top)
	for i := range all {
		if e, ok := m.weigh(all, i, top); ok {
			v.Evidence = append(v.Evidence, e)
		}
	}
	slices.SortStableFunc(v.Evidence, func(a, b targets.Evidence) int {
		return cmp.Compare(math.Abs(b.Log10Odds), math.Abs(a.Log10Odds))
	})
	m.weighMass(&v, s, s.post, top)
	return v
}

// withoutPriors leaves out what says how many there are of each stage.
func withoutPriors(list []factor) []factor {
	return slices.DeleteFunc(slices.Clone(list), func(f factor) bool { return f.prior })
}

// combine multiplies the factors and makes the result sum to 1.
func (m *Models) combine(factors []factor) map[targets.Stage]float64 {
	logs := make([]float64, len(targets.Stages))
	most := math.Inf(-1)
	for i, s := range targets.Stages {
		for k := range factors {
			logs[i] += math.Log(math.Max(factors[k].of(s), 1e-12))
		}
		most = math.Max(most, logs[i])
	}
	p, sum := map[targets.Stage]float64{}, 0.0
	for i := range logs {
		logs[i] = math.Exp(logs[i]-most) + m.floor
		sum += logs[i]
	}
	rest := 1.0
	for i, s := range targets.Stages[1:] {
		p[s] = logs[i+1] / sum
		rest -= p[s]
	}
	p[targets.Stages[0]] = math.Max(rest, 0)
	return p
}

// average is what is believed where two ways of knowing contradict each other.
func average(all ...map[targets.Stage]float64) map[targets.Stage]float64 {
	out := map[targets.Stage]float64{}
	rest := 1.0
	for _, s := range targets.Stages[1:] {
		for _, p := range all {
			out[s] += p[s] / float64(len(all))
		}
		rest -= out[s]
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

// weigh returns how strongly one factor speaks for a stage against the rest,
// given all the others.
func (m *Models) weigh(factors []factor, i int, top targets.Stage) (targets.Evidence, bool) {
	others := append(append([]factor(nil), factors[:i]...), factors[i+1:]...)
	p := m.combine(others)
	num, den := 0.0, 0.0
	for _, s := range targets.Stages {
		if s != top {
			num += p[s] * factors[i].of(s)
			den += p[s]
		}
	}
	if num <= 0 || den <= 0 {
		return targets.Evidence{}, false
	}
	odds := math.Log10(math.Max(factors[i].of(top), 1e-12) / (num / den))
	return targets.Evidence{What: factors[i].what, Log10Odds: math.Max(-9, math.Min(9, odds)), Source: factors[i].source}, true
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
