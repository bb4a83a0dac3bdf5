// Package stage judges at what stage of its life a star is, as probabilities
// over the stage codes with the evidence for them. What is here is the
// judgement for poor data: kind, variability type, spectral type, and where
// the star stands among the well-known loci of the diagram. It corrects no
// parallax and knows no tracks; it fills in nothing that a list lacks.
package stage

import (
	"math"
	"sort"

	"evenfall/targets"
)

// Models is what judging draws on; later the grid of tracks lives here.
type Models struct{ floor float64 }

// NewModels makes the models.
func NewModels() *Models { return &Models{floor: 1e-5} }

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
}

func (f *factor) of(s targets.Stage) float64 {
	if w, ok := f.weight[s]; ok {
		return w
	}
	return f.rest
}

// Judge weighs everything that a list says of a target.
//
//	p(stage) ~ product over the evidence of its likelihood in the stage
//
// Given:
//   - t: any of its data may be missing or absurd.
//
// Returns:
//   - probabilities that sum to 1 within 1e-12, the evidence with its log10
//     odds for the likeliest stage against the rest, and what is missing.
//
// Notes:
//  1. Contradictory evidence widens the probabilities, and a line names the
//     contradiction.
//
// Source: methods cited in each line of evidence.
//
// Checked: TestJudgeShares, TestJudgeBuiltin, FuzzJudge.
func (m *Models) Judge(t targets.Target) Verdict {
	var v Verdict
	factors := listed(&t)
	star := lookUp(&t)
	v.Missing = star.missing
	byList := m.combine(factors)
	if f, ok := star.factor(); ok {
		byPlace := m.combine([]factor{f})
		if clash := contradiction(byList, byPlace, star); clash != nil {
			factors = append(factors, f)
			v.P = average(m.combine(factors), byList, byPlace)
			v.Evidence = append(v.Evidence, *clash)
		} else {
			factors = append(factors, f)
		}
	}
	if v.P == nil {
		v.P = m.combine(factors)
	}
	top := likeliest(v.P)
	v.Best = answer(v.P, top)
	for i := range factors {
		if e, ok := m.weigh(factors, i, top); ok {
			v.Evidence = append(v.Evidence, e)
		}
	}
	sort.SliceStable(v.Evidence, func(a, b int) bool {
		return math.Abs(v.Evidence[a].Log10Odds) > math.Abs(v.Evidence[b].Log10Odds)
	})
	return v
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
	case p[top] >= Threshold:
		return string(top)
	case p[targets.RGB]+p[targets.EAGB] >= Threshold:
		return targets.Merged
	}
	return targets.Undecided
}

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
