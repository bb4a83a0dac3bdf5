package stage

import (
	"fmt"
	"math"

	"evenfall/astro/cite"
	"evenfall/targets"
)

// Extinction for true E(B-V).
//
// Source: 3.1 in V by convention; K from the infrared law of
// [cite.CardelliEtAl1989].
const (
	extinctionV = 3.1
	extinctionK = 0.353
)

// locus is where stars of a stage stand in one band: a level with a spread.
type locus struct {
	stage       targets.Stage
	mean, sigma float64
}

// loci by band; broad stages have a broad Gaussian.
//
// Source: [cite.HawkinsEtAl2017] for the clump, [cite.MuravevaEtAl2018] for the
// horizontal branch; the rest common practice, no source.
var loci = map[targets.Band][]locus{
	"K": {
		{targets.MS, 4.5, 1.8}, {targets.SG, 1.9, 0.8}, {targets.RGB, -2.6, 1.9}, {targets.RC, -1.61, 0.22}, {targets.HB, -0.5, 0.8},
		{targets.EAGB, -4.6, 1.2}, {targets.TPAGB, -7.3, 1.1}, {targets.PAGB, -5.5, 1.5}, {targets.RSG, -10.2, 1.0},
		{targets.SDB, 5.5, 0.8}, {targets.Dwarf, 12, 1.5}, {targets.CSPN, 4, 3}, {targets.Neb, 1, 4}, {targets.ACC, 7, 3},
	},
	"G": {
		{targets.MS, 5.5, 2.3}, {targets.SG, 3.2, 0.7}, {targets.RGB, -0.2, 1.5}, {targets.RC, 0.44, 0.28}, {targets.HB, 0.63, 0.3},
		{targets.EAGB, -1.4, 0.8}, {targets.TPAGB, -2.6, 1.2}, {targets.PAGB, -3, 1.3}, {targets.RSG, -5.8, 1.0},
		{targets.SDB, 4.5, 0.8}, {targets.Dwarf, 12.3, 1.5}, {targets.CSPN, 4, 2.5}, {targets.Neb, 1, 4}, {targets.ACC, 8.5, 2.5},
	},
	"V": {
		{targets.MS, 5.8, 2.5}, {targets.SG, 3.3, 0.7}, {targets.RGB, 0.2, 1.3}, {targets.RC, 0.85, 0.35}, {targets.HB, 0.66, 0.35},
		{targets.EAGB, -0.8, 0.8}, {targets.TPAGB, -1.2, 1.5}, {targets.PAGB, -3, 1.3}, {targets.RSG, -5.6, 1.0},
		{targets.SDB, 4.5, 0.8}, {targets.Dwarf, 12.3, 1.5}, {targets.CSPN, 4, 2.5}, {targets.Neb, 1, 4}, {targets.ACC, 8.5, 2.5},
	},
}

// locus returns what the absolute magnitude alone says, in K, G or V; for a
// star without a temperature.
func (s *sight) locus() (factor, bool) {
	for _, band := range []targets.Band{"K", "G", "V"} {
		m, ok := s.abs[band]
		if !ok || s.farErr > farthestErr {
			continue
		}
		f := factor{weight: shares{}, rest: 1e-4, source: cite.HawkinsEtAl2017.String() + " for the clump; other loci common practice, no source",
			what: fmt.Sprintf("absolute magnitude M_%s = %.2f +- %.2f", band, m.Value, m.Err)}
		most := 0.0
		for _, l := range loci[band] {
			sd := math.Hypot(l.sigma, math.Max(m.Err, 0.05))
			d := (m.Value - l.mean) / sd
			f.weight[l.stage] = math.Max(math.Exp(-d*d/2)/sd, 1e-5)
			most = math.Max(most, f.weight[l.stage])
		}
		for k := range f.weight {
			f.weight[k] /= most
		}
		return f, true
	}
	return factor{}, false
}

// hotEnd are the stages that pass into one another at the end: which of them a
// star is called is no contradiction.
var hotEnd = map[targets.Stage]bool{targets.CSPN: true, targets.Dwarf: true}

// contradiction names two ways of knowing that exclude each other: all that
// the list calls the target against its place on the diagram.
func contradiction(byWords, byPlace map[targets.Stage]float64, s *sight) *targets.Evidence {
	const trusted = 0.2 // dex of distance beyond which the place is too vague to contradict
	if s.farErr > trusted && s.logLFrom == fromMagnitude {
		return nil
	}
	overlap, endWords, endPlace := 0.0, 0.0, 0.0
	for _, code := range targets.Stages {
		if hotEnd[code] {
			endWords, endPlace = endWords+byWords[code], endPlace+byPlace[code]
			continue
		}
		overlap += math.Min(byWords[code], byPlace[code])
	}
	overlap += math.Min(endWords, endPlace)
	const hardly = 0.03
	if overlap > hardly {
		return nil
	}
	return &targets.Evidence{
		What: fmt.Sprintf("contradiction: the list's words say %s, but %s says %s; the probabilities are the mean of both; identification, parallax or magnitude may be wrong",
			likeliest(byWords), s.placeWords(), likeliest(byPlace)),
		Source: "the list's own values",
	}
}

// placeWords says where the target stands.
func (s *sight) placeWords() string {
	if s.place.HROK {
		return fmt.Sprintf("%.0f K at log L = %.2f", s.teff.Value, s.logL.Value)
	}
	for _, band := range []targets.Band{"K", "G", "V"} {
		if m, ok := s.abs[band]; ok {
			return fmt.Sprintf("M_%s = %.1f", band, m.Value)
		}
	}
	return "its place"
}
