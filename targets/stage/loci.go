package stage

import (
	"fmt"
	"math"
	"slices"

	"evenfall/astro/cite"
	"evenfall/targets"
)

// Extinction for true E(B-V).
//
// Source: [cite.CasagrandeVandenBerg2018] for Gaia; 3.1 in V by convention;
// K from the infrared law of [cite.CardelliEtAl1989].
const (
	extinctionV = 3.1
	extinctionG = 2.740
	extinctionK = 0.353
	reddenBPRP  = 1.339
)

// enough is how many times its error a parallax must be to say how bright a
// star is; below, the distance is anyone's guess without a prior.
const enough = 5

// star is where a target stands on the diagram, as far as its list tells.
type star struct {
	band    targets.Band // K, G or V
	abs, sd float64      // absolute magnitude there and its error
	bprp    float64      // dereddened BP-RP
	colour  bool
	known   bool
	missing []string
}

// lookUp places a target on the diagram.
func lookUp(t *targets.Target) star {
	var s star
	if t.Kind == targets.Interacting {
		return s // the light may be the companion's, or the disc's
	}
	plx := t.Place.Plx
	switch {
	case !finite(plx):
		s.missing = append(s.missing, "no parallax: how luminous it is says nothing about the stage")
		return s
	case plx.Value <= 0:
		s.missing = append(s.missing, "parallax not positive: no luminosity from it")
		return s
	case plx.Err <= 0:
		s.missing = append(s.missing, "no error of the parallax: 2 % assumed")
		plx.Err = 0.02 * plx.Value
	case plx.Value < enough*plx.Err:
		s.missing = append(s.missing, fmt.Sprintf("parallax only %.1f times its error: no luminosity from it", plx.Value/plx.Err))
		return s
	}
	ebv := excess(t)
	for _, b := range []struct {
		band targets.Band
		a    float64
	}{{"K", extinctionK}, {"G", extinctionG}, {"V", extinctionV}} {
		m := t.Mags[b.band]
		if !finite(m) {
			continue
		}
		s.band, s.known = b.band, true
		s.abs = m.Value + 5*math.Log10(plx.Value) - 10 - b.a*ebv
		s.sd = math.Hypot(2.17*plx.Err/plx.Value, math.Max(m.Err, 0.05))
		break
	}
	if !s.known {
		s.missing = append(s.missing, "no magnitude in K, G or V: no luminosity")
	}
	if bp, rp := t.Mags["BP"], t.Mags["RP"]; finite(bp) && finite(rp) {
		s.bprp, s.colour = bp.Value-rp.Value-reddenBPRP*ebv, true
	}
	return s
}

// finite tells whether a measure is a number of ordinary size.
func finite(m targets.Measure) bool {
	return m.Known && math.Abs(m.Value) < 1e6 && !(math.Abs(m.Err) >= 1e6) && !math.IsNaN(m.Err)
}

// excess returns the colour excess that the list gives, 0 where it gives none.
func excess(t *targets.Target) float64 {
	switch p := &t.Physics; {
	case finite(p.EBV):
		return math.Max(p.EBV.Value, 0)
	case finite(p.AV):
		return math.Max(p.AV.Value, 0) / extinctionV
	}
	return 0
}

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

// factor returns what the place on the diagram says.
func (s *star) factor() (factor, bool) {
	if !s.known {
		return factor{}, false
	}
	f := factor{weight: shares{}, rest: 1e-4, source: cite.HawkinsEtAl2017.String() + " for the clump; other loci common practice, no source"}
	f.what = fmt.Sprintf("absolute magnitude M_%s = %.2f +- %.2f", s.band, s.abs, s.sd)
	whiteDwarf := s.colour && s.band == "G" && s.bprp < 1.7 && s.abs > 9.5+2.9*s.bprp
	most := 0.0
	for _, l := range loci[s.band] {
		sd := math.Hypot(l.sigma, s.sd)
		d := (s.abs - l.mean) / sd
		w := math.Exp(-d*d/2) / sd
		if whiteDwarf && !slices.Contains([]targets.Stage{targets.Dwarf, targets.ACC, targets.CSPN}, l.stage) {
			w *= 0.01
		}
		f.weight[l.stage] = math.Max(w, 1e-5)
		most = math.Max(most, f.weight[l.stage])
	}
	for k := range f.weight {
		f.weight[k] /= most
	}
	if whiteDwarf {
		f.what += fmt.Sprintf(" at BP-RP = %.2f: below the main sequence", s.bprp)
	}
	return f, true
}

// contradiction names two ways of knowing that exclude each other: all that
// the list calls the target against its brightness at its distance.
func contradiction(byList, byPlace map[targets.Stage]float64, s star) *targets.Evidence {
	overlap := 0.0
	for _, code := range targets.Stages {
		overlap += math.Min(byList[code], byPlace[code])
	}
	const hardly = 0.03
	if overlap > hardly {
		return nil
	}
	return &targets.Evidence{
		What: fmt.Sprintf("contradiction: the list says %s, but M_%s = %.1f says %s; identification, parallax or magnitude may be wrong",
			likeliest(byList), s.band, s.abs, likeliest(byPlace)),
		Source: "the list's own values",
	}
}
