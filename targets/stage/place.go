package stage

import (
	"fmt"
	"math"

	"evenfall/astro/cite"
	"evenfall/astro/stellar"
	"evenfall/targets"
	"evenfall/targets/stage/tracks"
)

// elseShare is kept for what no model of single stars holds: a binary, a
// blend, a wrong extinction. elseDensity is how thinly it is spread, per square
// dex of the diagram.
const elseShare, elseDensity = 0.015, 0.05

// placed returns what the place on the diagram says, after words that the list
// itself says.
func (m *Models) placed(t *targets.Target, s *sight, words []factor) []factor {
	prior := hasPrior(words)
	switch {
	case t.Kind == targets.Interacting || t.Kind == targets.PN:
		return nil // the light is a companion's, a disc's, or the nebula's
	case s.dwarf:
		return []factor{s.belowMainSequence()}
	case s.place.HROK:
		return m.onDiagram(t, s, prior)
	}
	var out []factor
	switch {
	case prior:
	case anyLuminous(words):
		out = append(out, factor{what: "time that single stars spend near the tip of the giant branch", source: practice, prior: true, rest: 1e-5, weight: luminousShares})
	case t.Kind == targets.Giant || s.giant && classIII.MatchString(t.Physics.SpType):
		out = append(out, timeShares)
	}
	if f, ok := s.locus(); ok {
		out = append(out, f)
	}
	return out
}

func anyLuminous(list []factor) bool {
	for i := range list {
		if list[i].luminous {
			return true
		}
	}
	return false
}

func hasPrior(list []factor) bool {
	for i := range list {
		if list[i].prior {
			return true
		}
	}
	return false
}

// timeShares are the shares of time above 10 Lsun and below 5500 K, with a
// share for the subgiants that lists mix in.
var timeShares = factor{what: "time that single stars spend as giants", source: cite.HurleyPolsTout2000.String(), prior: true, rest: 1e-4,
	weight: shares{targets.RC: 0.53, targets.RGB: 0.45, targets.SG: 0.10, targets.EAGB: 0.016, targets.TPAGB: 0.004, targets.HB: 0.005,
		targets.PAGB: 0.0001, targets.RSG: 0.0002, targets.MS: 0.01}}

// belowMainSequence is what standing far below the main sequence says.
func (s *sight) belowMainSequence() factor {
	return factor{what: fmt.Sprintf("M_G = %.2f at BP-RP = %.2f: far below the main sequence", s.abs["G"].Value, s.colours.BPRP.Value),
		source: "cut tried on " + cite.GentileFusilloEtAl2021.String(), rest: 1e-4,
		weight: shares{targets.Dwarf: 1, targets.ACC: 0.02, targets.CSPN: 0.01, targets.SDB: 0.003, targets.MS: 0.001}}
}

// onDiagram weighs temperature and luminosity: how many stars of each stage
// there are, and how they are spread over the diagram.
func (m *Models) onDiagram(t *targets.Target, s *sight, prior bool) []factor {
	seen := s.seen()
	post := m.gridFor(s).Posterior(seen)
	s.post = &post
	density := m.densities(s, &post)
	number := m.number()
	where := factor{what: fmt.Sprintf("%.0f +- %.0f K at log L = %.2f +- %.2f", s.teff.Value, s.teff.Err, s.logL.Value, s.logL.Err),
		source: cite.HurleyPolsTout2000.String() + ", corrected to real giants; what no track holds by common practice, no source", weight: density, rest: 1e-6}
	out := []factor{}
	if !prior {
		out = append(out, factor{what: "how many there are of each, single stars of the disc", source: cite.HurleyPolsTout2000.String() + "; " + practice + " for the rarest",
			weight: number, rest: 1e-6, prior: true})
	}
	g, teffK, ok := s.asGiant()
	if prior || !ok {
		return append(out, where)
	}
	good, why := g.inRange(teffK, s.feh.Known)
	both := number[targets.RC]*density[targets.RC] + number[targets.RGB]*density[targets.RGB]
	if !good || both <= 0 {
		if s.near(post) {
			s.lack("clump or giant branch: tracks alone tell, %s", why)
		}
		return append(out, where)
	}
	// the tracks say how many of both there are, the loci which of the two
	density[targets.RC], density[targets.RGB] = both/2/number[targets.RC], both/2/number[targets.RGB]
	evidence, share := g.clumpOdds(branchPerClump(m.population))
	if g.by == byTemperature && !s.feh.Known {
		evidence, share = g.overMetals(branchPerClump(m.population))
	}
	scale := 2 / (math.Exp(evidence+share) + 1)
	return append(out, where,
		factor{what: g.words(teffK, s.feh), source: "fitted to " + cite.ElsworthEtAl2019.String(), rest: 1,
			weight: shares{targets.RC: scale * math.Exp(evidence), targets.RGB: scale}},
		factor{what: fmt.Sprintf("%s: %.2f giants of the branch a magnitude for each of the clump", m.population.Words(), branchPerClump(m.population)),
			source: cite.HurleyPolsTout2000.String(), rest: 1, prior: true,
			weight: shares{targets.RC: math.Exp(share), targets.RGB: 1}})
}

// near tells whether it matters which of the two a star is.
func (s *sight) near(p tracks.Posterior) bool {
	return p.P[targets.RC] > 0.05 && p.P[targets.RGB] > 0.05
}

// The grids' metallicities; a star beyond them is compared with the nearest.
const poorestNode, richestNode, poorestOld = -0.8, 0.3, -1.9

// metalPoor is the [Fe/H] below which a star is taken for one of thick disc or
// halo.
const metalPoor = -0.9

// gridFor returns the grid that a star is compared with.
func (m *Models) gridFor(s *sight) *tracks.Grid {
	if s.poorInMetals() {
		return m.oldGrid()
	}
	return m.grid()
}

func (s *sight) poorInMetals() bool { return s.feh.Known && s.feh.Value < metalPoor }

// seen is the place as the grid asks for it.
func (s *sight) seen() tracks.Seen {
	q := tracks.Seen{LogT: s.place.LogT.Mid, LogTErr: (s.place.LogT.Hi - s.place.LogT.Lo) / 2,
		LogL: s.place.LogL.Mid, LogLErr: (s.place.LogL.Hi - s.place.LogL.Lo) / 2, Floor: true}
	if s.feh.Known {
		least := poorestNode
		if s.poorInMetals() {
			least = poorestOld
		}
		q.HasFeH, q.FeH, q.FeHErr = true, math.Max(least, math.Min(richestNode, s.feh.Value)), math.Max(s.feh.Err, 0.05)
	}
	return q
}

// densities returns, for each stage, how densely its stars stand at the place,
// per square dex.
func (m *Models) densities(s *sight, post *tracks.Posterior) shares {
	q := s.seen()
	number, out := m.number(), shares{}
	for _, r := range regions {
		out[r.stage] += r.number * r.density(q.LogT, q.LogTErr, q.LogL, q.LogLErr)
	}
	clump := m.gridFor(s).Shares()[targets.RC]
	for code := range fromGrid {
		out[code] += post.Density(code) / clump
	}
	for code, n := range number {
		out[code] = (1-elseShare)*out[code]/n + elseShare*elseDensity
	}
	return out
}

// fromGrid are the stages that the grid decides; the others have regions.
var fromGrid = map[targets.Stage]bool{targets.MS: true, targets.SG: true, targets.RGB: true, targets.RC: true, targets.EAGB: true, targets.TPAGB: true}

// asGiant is the star as the odds between clump and branch ask for it.
func (s *sight) asGiant() (g giantSeen, teffK float64, ok bool) {
	k, okK := s.abs["K"]
	if okK {
		g.mk, g.mkErr = k.Value, math.Hypot(k.Err, 0)
	} else {
		gk, err := stellar.GKFromTeff(s.teff.Value, stellar.GiantLogG, s.feh)
		absG, errG := stellar.AbsGFromLogL(s.logL.Value, s.teff.Value)
		if err != nil || errG != nil {
			return g, 0, false
		}
		g.mk, g.mkErr = absG-gk, 2.5*s.logL.Err
	}
	if s.feh.Known {
		g.feh = s.feh.Value
	}
	teffK = s.teff.Value
	if okK && s.colours.GK.Known && !s.teffListed {
		g.by, g.v, g.vErr = byColour, s.colours.GK.Value, s.gkErr
		if s.feh.Known {
			g.by = byColourAndMetal
		}
		return g, teffK, true
	}
	extra := math.Sqrt(math.Max(0, s.teff.Err*s.teff.Err-heldErrorK*heldErrorK))
	g.by, g.v, g.vErr = byTemperature, math.Log10(teffK), extra/teffK/math.Ln10
	return g, teffK, s.giant
}

// words says what sorts clump from branch.
func (g *giantSeen) words(teffK float64, feh stellar.Measure) string {
	what := fmt.Sprintf("%.0f K", teffK)
	if g.by != byTemperature {
		what = fmt.Sprintf("(G-K)0 = %.2f", g.v)
	}
	if feh.Known {
		what += fmt.Sprintf(", [Fe/H] %+.2f", feh.Value)
	}
	return fmt.Sprintf("clump or branch, by M_K = %.2f +- %.2f, %s", g.mk, g.mkErr, what)
}

// weighMass writes down the mass and metallicity that go with the answer.
func (m *Models) weighMass(v *Verdict, s *sight, post *tracks.Posterior, top targets.Stage) {
	v.FeH = s.feh.Value
	switch {
	case s.fit != nil:
		v.MassMsun = s.fit.MassMsun.Mid
	case post != nil:
		if of, ok := post.ByStage[top]; ok {
			v.MassMsun = of.Mass.Mid
		}
	}
}
