package stage

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"evenfall/astro"
	"evenfall/astro/cite"
	"evenfall/astro/degenerate"
	"evenfall/astro/stellar"
	"evenfall/targets"
	"evenfall/targets/stage/tracks"
)

// sight is what the numbers of a list come to, on the way from parallax and
// magnitudes to the diagram. What is not known is not Known.
type sight struct {
	keep    bool // keep the steps of the working
	missing []string
	steps   []Step
	place   Placing

	distance   stellar.Distances // of the distance, kpc
	distanceOK bool
	distanceBy string  // how; ""
	distanceOf string  // source
	farErr     float64 // one sigma of log10 of the distance
	poor       bool    // the parallax is under five errors: the prior speaks too

	ebv        stellar.TrueEBV
	ebvErr     float64
	ebvAssumed bool

	abs          map[targets.Band]stellar.Measure // absolute magnitudes without extinction
	colours      stellar.Colours                  // without reddening
	gkErr        float64                          // error of (G-K)0 beyond what common reddening scatters
	releaseIs    stellar.Release
	giant        bool
	feh          stellar.Measure
	teff         stellar.Measure // K
	teffMethod   string
	teffSource   string
	teffListed   bool
	logL         stellar.Measure
	logLMethod   string
	logLSource   string
	logLFrom     way
	logG         stellar.Measure
	logGMethod   string
	logGSource   string
	seismic      stellar.Seismic
	dwarf        bool            // below the main sequence, by the cut for white dwarfs
	absV         stellar.Measure // of a nebula's central star
	gas          *gas            // a nebula without its dust; nil: no nebula
	surface      degenerate.Composition
	surfaceKnown bool               // the spectrum says it
	fit          *degenerate.Answer // of white-dwarf models; nil: none
	post         *tracks.Posterior  // of the tracks at the place; nil: not asked
}

// Step is one figure with its working.
type Step struct{ What, Formula, Inputs, Result, Source string }

// Errors assumed where a list gives none.
const (
	listedMagErr   = 0.03 // of a magnitude
	listedTeffErrK = 80
	listedFeHErr   = 0.1
	listedLogGErr  = 0.2
	assumedPlxErr  = 0.02 // of the parallax itself
	ebvListedErr   = 0.1  // of the excess itself
	ebvAssumedErr  = 0.5
	ebvLeastErr    = 0.01
	farthestErr    = 0.45 // dex of distance beyond which the luminosity says nothing
	fewParallaxErr = 5    // parallax over its error below which the prior speaks
	goodParallax   = 10
)

// sight works out what the diagram asks for.
func (m *Models) sight(t *targets.Target, keep bool) *sight {
	s := &sight{keep: keep, abs: map[targets.Band]stellar.Measure{}, feh: measured(t.Physics.FeH, listedFeHErr)}
	s.far(t)
	s.redden(t)
	if t.Kind == targets.PN {
		s.centralStar(t)
		return s
	}
	s.magnitudes(t)
	s.below(t)
	if s.asDwarf(m, t); s.fit == nil {
		s.isGiant(t)
		s.heat(t)
		s.gravity(t)
		s.shine(t)
	}
	s.intoPlace(t)
	return s
}

// measured turns a listed number into one to compute with; an error that is
// not listed becomes e.
func measured(q targets.Measure, e float64) stellar.Measure {
	if !finite(q) {
		return stellar.Measure{}
	}
	if q.Err > 0 {
		e = q.Err
	}
	return stellar.Measured(q.Value, e)
}

// finite tells whether a measure is a number of ordinary size.
func finite(m targets.Measure) bool {
	return m.Known && math.Abs(m.Value) < 1e6 && !(math.Abs(m.Err) >= 1e6) && !math.IsNaN(m.Err)
}

func (s *sight) lack(format string, a ...any) {
	s.missing = append(s.missing, fmt.Sprintf(format, a...))
}

func (s *sight) step(what, formula, inputs, result, source string) {
	s.steps = append(s.steps, Step{what, formula, inputs, result, source})
}

func isMira(t *targets.Target) bool {
	v := strings.ToUpper(strings.TrimSpace(t.Var.Type))
	return v == "M" || strings.HasPrefix(v, "M:") || strings.HasPrefix(v, "M+")
}

var carbonStar = regexp.MustCompile(`^N\d?($|[,\s(:ep])|^C-[NJ]|^C\d|^C$`)

func isCarbon(t *targets.Target) bool {
	return carbonStar.MatchString(strings.TrimSpace(t.Physics.SpType))
}

// excess returns the true colour excess that the list gives, and whether it does.
func excess(t *targets.Target) (float64, bool) {
	switch p := &t.Physics; {
	case finite(p.EBV):
		return math.Max(p.EBV.Value, 0), true
	case finite(p.AV):
		return math.Max(p.AV.Value, 0) / extinctionV, true
	}
	return 0, false
}

// redden finds the colour excess: the list's, or that of a layer of dust.
func (s *sight) redden(t *targets.Target) {
	if e, ok := excess(t); ok {
		s.ebv, s.ebvErr = stellar.TrueEBV(e), math.Max(ebvListedErr*e, ebvLeastErr)
		return
	}
	if !s.distanceOK {
		return
	}
	av := degenerate.Dust(degenerate.GalacticLatitude(t.Place.RA, t.Place.Dec))(1000 * s.distance.Q50)
	e := av / extinctionV
	s.ebv, s.ebvErr, s.ebvAssumed = stellar.TrueEBV(e), math.Max(ebvAssumedErr*e, ebvLeastErr), true
	if e >= noticed {
		s.lack("no extinction listed: E(B-V) %.2f +- %.2f assumed, a layer of dust of 0.5 mag/kpc", e, s.ebvErr)
	}
	if s.keep {
		s.step("extinction", "A_V = 0.5 mag/kpc x 125 pc (1 - exp(-d sin b / 125 pc)) / sin b, E(B-V) = A_V / 3.1",
			fmt.Sprintf("d %.0f pc", 1000*s.distance.Q50), fmt.Sprintf("E(B-V) = %.3f +- %.3f, true scale", e, s.ebvErr), practice)
	}
}

// noticed is the assumed colour excess from which it is worth saying.
const noticed = 0.02

// magnitudes makes them absolute, and colours without reddening.
func (s *sight) magnitudes(t *targets.Target) {
	e := float64(s.ebv)
	of := func(b targets.Band) stellar.Measure { return measured(t.Mags[b], listedMagErr) }
	g, bp, rp, k, v, b := of("G"), of("BP"), of("RP"), of("K"), of("V"), of("B")
	ag := s.ebv.Simple().AG
	bprp0 := math.NaN()
	if bp.Known && rp.Known {
		raw := bp.Value - rp.Value
		if un, err := stellar.Dereddened(s.releaseIs, raw, s.ebv); err == nil && un.Settled {
			bprp0, ag = un.BPRP0, un.A.AG
		} else {
			bprp0 = raw - s.ebv.Simple().EBPRP()
		}
		s.colours.BPRP = stellar.Measured(bprp0, math.Hypot(colourErr(t, "BP", "RP"), 1.34*s.ebvErr))
		if s.keep {
			s.step("colour without reddening", "BP-RP - (A_BP - A_RP), iterated with the colour itself",
				fmt.Sprintf("BP-RP %.3f, E(B-V) %.3f true scale", raw, e), fmt.Sprintf("%.3f +- %.3f", bprp0, s.colours.BPRP.Err), cite.FitzpatrickEtAl2019.String())
		}
	}
	dm := stellar.Measure{}
	if s.distanceOK {
		dm = stellar.Measured(stellar.ModulusAt(s.distance.Q50), 5*s.farErr)
	}
	put := func(band targets.Band, m stellar.Measure, ext, perE float64) {
		if m.Known && dm.Known {
			s.abs[band] = stellar.Measured(m.Value-dm.Value-ext, math.Hypot(m.Err, math.Hypot(dm.Err, perE*s.ebvErr)))
		}
	}
	put("G", g, ag, 2.3)
	put("V", v, extinctionV*e, extinctionV)
	put("K", k, s.ebv.Map().AKsCasagrande(), extinctionK)
	for _, band := range []targets.Band{"G", "V", "K"} {
		if m, ok := s.abs[band]; ok {
			if s.keep {
				s.step("absolute magnitude in "+string(band), "m - 5 log10(d/10 pc) - A", fmt.Sprintf("m %.3f, d %.1f pc, E(B-V) %.3f", t.Mags[band].Value, 1000*s.distance.Q50, e),
					fmt.Sprintf("%.3f +- %.3f", m.Value, m.Err), cite.CasagrandeVandenBerg2018.String())
			}
		}
	}
	if g.Known && k.Known {
		s.colours.GK = stellar.Measured(g.Value-k.Value-s.ebv.Map().EGK(bprp0), math.Hypot(colourErr(t, "G", "K"), 2.1*s.ebvErr))
		s.gkErr = colourErr(t, "G", "K")
		if s.ebvAssumed {
			s.gkErr = math.Hypot(s.gkErr, 2.1*s.ebvErr)
		}
	}
	if v.Known && k.Known {
		s.colours.VK = stellar.Measured(v.Value-k.Value-(extinctionV-extinctionK)*e, math.Hypot(math.Hypot(v.Err, k.Err), 2.75*s.ebvErr))
	}
	if b.Known && v.Known {
		s.colours.BV = stellar.Measured(b.Value-v.Value-e, math.Hypot(0.015, s.ebvErr))
	}
}

// colourErr is the error of a colour from listed errors alone.
func colourErr(t *targets.Target, a, b targets.Band) float64 {
	return math.Hypot(math.Max(t.Mags[a].Err, 0), math.Max(t.Mags[b].Err, 0))
}

// sourceOf names a work and what is to be said beside it.
func sourceOf(r cite.Ref, note string) string {
	switch {
	case r.IsZero() && note == "":
		return practice
	case r.IsZero():
		return note
	case note == "":
		return r.String()
	}
	return r.String() + "; " + note
}

// interval makes a measure an interval of one sigma.
func interval(m stellar.Measure) astro.Interval {
	return astro.Interval{Lo: m.Value - m.Err, Mid: m.Value, Hi: m.Value + m.Err, Level: Level}
}
