package stage

import (
	"fmt"
	"math"
	"regexp"
	"slices"

	"evenfall/astro/cite"
	"evenfall/astro/stellar"
	"evenfall/targets"
	"evenfall/targets/stage/tracks"
)

// elseShare is kept for what no model of single stars holds: a binary, a
// blend, a wrong extinction. elseDensity is how thinly that is spread, stars per
// square dex of the diagram for each of the clump; where the models have no
// more than that, the place says nothing.
const elseShare, elseDensity = 0.015, 1e-5

// placing is what the place on the diagram says.
type placing struct {
	factors   []factor
	elsewhere float64 // probability that no model of single stars holds the place
}

// onTracks asks the tracks about the place, where there is one.
func (m *Models) onTracks(s *sight) {
	if s.place.HROK && s.fit == nil && s.gas == nil {
		p := m.gridFor(s).Posterior(s.seen())
		s.post = &p
	}
}

// placed returns what the place on the diagram says, after words that the list
// itself says.
func (m *Models) placed(t *targets.Target, s *sight, words []factor) placing {
	prior := hasPrior(words)
	switch {
	case t.Kind == targets.Interacting || t.Kind == targets.PN || twoStars.MatchString(t.Physics.SpType):
		return placing{} // the light is a companion's, a disc's, or the nebula's
	case s.fit != nil && s.fit.Chi2 < goodFit:
		return placing{factors: []factor{s.fitsDwarf()}}
	case s.dwarf:
		return placing{factors: []factor{s.belowMainSequence()}}
	case s.place.HROK:
		return m.onDiagram(s, prior)
	}
	var out []factor
	here, hot := s.hotSubdwarfOf()
	there, ok := s.locus()
	switch {
	case prior:
	case anyLuminous(words):
		out = append(out, factor{what: "before looking: time that single stars spend near the tip of the giant branch", source: practice, prior: true, rest: 1e-5, weight: luminousShares})
	case t.Kind == targets.Giant || s.giant && classIII.MatchString(t.Physics.SpType):
		out = append(out, timeShares)
	case ok || len(words) > 0:
		out = append(out, m.howMany())
	}
	switch {
	case hot:
		return placing{factors: append(out, here)}
	case ok:
		return placing{factors: append(out, there)}
	}
	return placing{factors: out}
}

// goodFit is the chi² below which white-dwarf models hold a star.
const goodFit = 9.2

// twoStars are spectra of a white dwarf and another star together.
var twoStars = regexp.MustCompile(`^D\w*[\d.]*\s*\+`)

// fitsDwarf is what a good fit of white-dwarf models says.
func (s *sight) fitsDwarf() factor {
	f := factor{what: fmt.Sprintf("white-dwarf models fit: %.0f K, %.2f Msun, chi2 %.1f", s.fit.TeffK.Mid, s.fit.MassMsun.Mid, s.fit.Chi2), source: cite.BedardEtAl2020.String(),
		rest: 1e-4, weight: shares{targets.Dwarf: 1, targets.ACC: 0.02, targets.CSPN: 0.01, targets.SDB: 0.003, targets.MS: 0.001}}
	if !s.dwarf && !s.distanceOK { // temperature and gravity alone
		f.what = fmt.Sprintf("temperature and gravity of a white dwarf: %.0f K, %.2f Msun", s.fit.TeffK.Mid, s.fit.MassMsun.Mid)
	}
	return f
}

// howMany is how many stars there are of each stage.
func (m *Models) howMany() factor {
	return factor{what: "before looking: how many single stars of the disc there are of each stage", source: cite.HurleyPolsTout2000.String() + "; " + practice + " for the rarest",
		weight: m.number(), rest: 1e-6, prior: true}
}

func hasPrior(list []factor) bool {
	return slices.ContainsFunc(list, func(f factor) bool { return f.prior })
}

func anyLuminous(list []factor) bool {
	return slices.ContainsFunc(list, func(f factor) bool { return f.luminous })
}

// timeShares are the shares of time above 10 Lsun and below 5500 K, with a
// share for the subgiants that lists mix in.
var timeShares = factor{what: "before looking: time that single stars spend as giants", source: cite.HurleyPolsTout2000.String(), prior: true, rest: 1e-4,
	weight: shares{targets.RC: 0.53, targets.RGB: 0.45, targets.SG: 0.10, targets.EAGB: 0.016, targets.TPAGB: 0.004, targets.HB: 0.005,
		targets.PAGB: 0.0001, targets.RSG: 0.0002, targets.MS: 0.01}}

// belowMainSequence is what standing far below the main sequence says.
func (s *sight) belowMainSequence() factor {
	return factor{what: fmt.Sprintf("M_G = %.2f at BP-RP = %.2f: far below the main sequence", s.abs["G"].Value, s.colours.BPRP.Value),
		source: "cut tried on " + cite.GentileFusilloEtAl2021.String(), rest: 1e-4,
		weight: shares{targets.Dwarf: 1, targets.ACC: 0.02, targets.CSPN: 0.01, targets.SDB: 0.003, targets.MS: 0.001}}
}

// sparse is the density, of all stars of a stage per square dex, from which
// some of them are found at a place.
const sparse = 0.003

// onDiagram weighs temperature and luminosity: how many stars of each stage
// there are, and how they are spread over the diagram.
func (m *Models) onDiagram(s *sight, prior bool) placing {
	density := m.densities(s, s.post)
	number := m.number()
	modelled, source := 0.0, cite.HurleyPolsTout2000.String()+", corrected to real giants"
	top := targets.MS
	for code, d := range density {
		if modelled += d * number[code]; d*number[code] > density[top]*number[top] {
			top = code
		}
	}
	if !fromGrid[top] {
		source = practice
	}
	where := factor{what: fmt.Sprintf("%.0f +- %.0f K at log L = %.2f +- %.2f", s.teff.Value, s.teff.Err, s.logL.Value, s.logL.Err), source: source, weight: density, rest: 1e-9}
	out := placing{elsewhere: math.Max(elseShare, elseDensity/(elseDensity+modelled))}
	if out.elsewhere > 0.3 {
		s.lack("no model of single stars holds its place, %s", s.placeWords())
	}
	if prior {
		for code, x := range density { // shares among stars so called stand; the place refuses those that are not there
			density[code] = x / (x + sparse)
		}
		out.factors = []factor{where}
		return out
	}
	out.factors = append([]factor{m.howMany(), where}, m.clumpOrBranch(s, density, number)...)
	return out
}

// clumpOrBranch sorts clump from giant branch by their measured places, where
// those hold; the tracks have said how many there are of both, in density.
func (m *Models) clumpOrBranch(s *sight, density, number shares) []factor {
	g, teffK, ok := s.asGiant()
	both := number[targets.RC]*density[targets.RC] + number[targets.RGB]*density[targets.RGB]
	if !ok || both <= 0 {
		return nil
	}
	if good, why := g.inRange(teffK, s.feh.Known); !good {
		if s.eitherLikely() {
			s.lack("clump or giant branch: tracks alone tell, %s", why)
		}
		return nil
	}
	density[targets.RC], density[targets.RGB] = both/2/number[targets.RC], both/2/number[targets.RGB]
	perClump := branchPerClump(m.population)
	evidence, share := g.clumpOdds(perClump)
	if g.by == byTemperature && !s.feh.Known {
		evidence, share = g.overMetals(perClump)
	}
	scale := 2 / (math.Exp(evidence+share) + 1)
	return []factor{
		{what: g.words(teffK, s.feh), source: "fitted to " + cite.ElsworthEtAl2019.String(), rest: 1,
			weight: shares{targets.RC: scale * math.Exp(evidence), targets.RGB: scale}},
		{what: fmt.Sprintf("before looking: %s, %.2f giants of the branch a magnitude for each of the clump", m.population.Words(), perClump),
			source: cite.HurleyPolsTout2000.String(), rest: 1, prior: true,
			weight: shares{targets.RC: math.Exp(share), targets.RGB: 1}}}
}

// eitherLikely tells whether it matters which of the two a star is.
func (s *sight) eitherLikely() bool {
	return s.post != nil && s.post.P[targets.RC] > 0.05 && s.post.P[targets.RGB] > 0.05
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
		out[code] /= n
	}
	mergeBranches(out, number, s)
	return out
}

// mergeBranches keeps the early asymptotic branch from being named by its place
// alone: below the tip of the giant branch nothing tells the two apart.
func mergeBranches(density, number shares, s *sight) {
	const tip, most = 3.45, 0.45 // log10 Lsun; share of the pair
	rgb, eagb := density[targets.RGB]*number[targets.RGB], density[targets.EAGB]*number[targets.EAGB]
	if s.logL.Value > tip || rgb <= 0 || eagb <= most*(rgb+eagb) {
		return
	}
	pair := rgb + eagb
	density[targets.EAGB], density[targets.RGB] = most*pair/number[targets.EAGB], (1-most)*pair/number[targets.RGB]
}

// fromGrid are the stages that the grid decides; the others have regions.
var fromGrid = map[targets.Stage]bool{targets.MS: true, targets.SG: true, targets.RGB: true, targets.RC: true, targets.EAGB: true, targets.TPAGB: true}

// asGiant is the star as the odds between clump and branch ask for it.
func (s *sight) asGiant() (g giantSeen, teffK float64, ok bool) {
	k, okK := s.abs["K"]
	if okK {
		g.mk, g.mkErr = k.Value, k.Err
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
