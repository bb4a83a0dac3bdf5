package stage

import (
	"fmt"
	"math"
	"strconv"

	"evenfall/astro/cite"
	"evenfall/astro/stellar"
	"evenfall/targets"
)

func decimal(s string) float64 { v, _ := strconv.ParseFloat(s, 64); return v }

// gravityOf weighs a listed surface gravity, for a star without a place on the
// diagram.
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

// bluest is the colour from which no giant is so hot, BP-RP without reddening.
const bluest = 0.30

// temperatureOf weighs a temperature, or a blue colour, for a star without a
// place on the diagram.
func (s *sight) temperatureOf(t *targets.Target) (factor, bool) {
	const coolGiantsEnd, clumpBegins, coolDwarfs = 6800, 4200, 3800
	k, c := s.teff, s.colours.BPRP
	f := factor{source: practice, rest: 0.001}
	switch {
	case k.Known && k.Value >= 20000, !k.Known && c.Known && c.Value < -0.2:
		f.weight = shares{targets.Dwarf: 1, targets.SDB: 1, targets.CSPN: 1, targets.Neb: 1, targets.ACC: 1, targets.MS: 0.1, targets.PAGB: 0.3, targets.HB: 0.1, targets.RSG: 0.1}
	case k.Known && k.Value >= coolGiantsEnd, !k.Known && c.Known && c.Value < bluest:
		f.weight = shares{targets.HB: 1, targets.MS: 1, targets.PAGB: 1, targets.Dwarf: 1, targets.ACC: 1, targets.RSG: 1, targets.SDB: 0.3, targets.CSPN: 0.3, targets.Neb: 1, targets.SG: 0.05}
	case k.Known && k.Value < clumpBegins:
		f.rest = 0.3
		f.weight = shares{targets.RGB: 1, targets.EAGB: 1, targets.TPAGB: 1, targets.RSG: 1, targets.MS: 1, targets.RC: 0.01, targets.SG: 0.01, targets.HB: 0.0001}
		if k.Value < coolDwarfs {
			f.weight[targets.RC], f.weight[targets.SG] = 0.001, 0.001
		}
	default:
		return factor{}, false
	}
	f.what = fmt.Sprintf("%.0f K", k.Value)
	if !k.Known {
		f.what = fmt.Sprintf("BP-RP = %.2f without reddening: bluer than any red giant", c.Value)
	}
	return f, true
}

// Present masses of stages that the tracks give none for, Msun, with their
// spread; common practice, no source.
var stageMass = map[targets.Stage][2]float64{
	targets.SDB: {0.47, 0.05}, targets.HB: {0.60, 0.08}, targets.PAGB: {0.60, 0.1}, targets.CSPN: {0.60, 0.1}, targets.Dwarf: {0.6, 0.2},
	targets.RC: {1.3, 0.5}, targets.RGB: {1.2, 0.4}, targets.EAGB: {1.2, 0.5}, targets.TPAGB: {1.2, 0.6}, targets.SG: {1.2, 0.3},
}

// gravitySpread is how far listed gravities miss, dex, beyond their errors.
const gravitySpread = 0.1

// gravityHere weighs a gravity, listed or of the oscillations, against the one
// that each stage has at the star's temperature and luminosity.
//
//	log g = 4.438 + log M + 4 log(T/5772) - log L
//
// Notes:
//  1. Stages at one place differ by their masses alone: it tells a hot subdwarf
//     from a massive star, and little among giants.
//
// Source: [cite.IAU2015B3] for the Sun; masses common practice, no source.
//
// Checked: TestGravityHere.
func (s *sight) gravityHere() (factor, bool) {
	if !s.logG.Known || s.logLFrom == fromGravity {
		return factor{}, false
	}
	f := factor{what: fmt.Sprintf("log g = %.2f, %s", s.logG.Value, s.logGMethod), source: cite.IAU2015B3.String() + "; masses of stages " + practice,
		weight: shares{}, rest: math.Exp(-8)}
	for code := range stageMass {
		off, sd := s.gravityOff(code)
		f.weight[code] = math.Max(math.Exp(-off*off/sd/sd/2), math.Exp(-8))
	}
	off, sd := s.gravityOff(targets.MS)
	f.weight[targets.MS] = math.Max(math.Exp(-off*off/sd/sd/2), math.Exp(-8))
	f.weight[targets.RSG] = f.weight[targets.RC] // the mass of one may be anything
	f.weight[targets.ACC], f.weight[targets.Neb] = f.weight[targets.Dwarf], f.weight[targets.CSPN]
	return f, true
}

// gravityOff returns how far the star's gravity lies from that of a stage at
// its place, dex, and one sigma of it.
func (s *sight) gravityOff(code targets.Stage) (off, sd float64) {
	mass, ok := stageMass[code]
	if s.post != nil {
		if of, has := s.post.ByStage[code]; has && of.Mass.Valid() {
			mass, ok = [2]float64{of.Mass.Mid, math.Max((of.Mass.Hi-of.Mass.Lo)/2, 0.1*of.Mass.Mid)}, true
		}
	}
	if !ok { // the main sequence: mass by luminosity
		m := math.Pow(10, s.logL.Value/3.5)
		mass = [2]float64{m, 0.3 * m}
	}
	g := stellar.LogG(stellar.Measured(mass[0], mass[1]), s.logL.Value, s.teff.Value)
	sd = math.Hypot(math.Hypot(s.logG.Err, gravitySpread), math.Hypot(s.logL.Err, math.Hypot(mass[1]/mass[0]/math.Ln10, 4*s.teff.Err/s.teff.Value/math.Ln10)))
	return s.logG.Value - g.Value, sd
}

// gravityClash names a gravity or a radius of oscillations that no star of the
// likeliest stage has at this place.
func (s *sight) gravityClash(code targets.Stage) *targets.Evidence {
	const far = 4
	if s.logG.Known && s.logLFrom != fromGravity && s.place.HROK && s.fit == nil {
		if off, sd := s.gravityOff(code); math.Abs(off) > far*sd {
			return &targets.Evidence{What: fmt.Sprintf("contradiction: log g = %.2f (%s), but %s has %.2f there; parallax, magnitude or gravity may be wrong",
				s.logG.Value, s.logGMethod, code, s.logG.Value-off), Source: "the list's own values"}
		}
	}
	if r := s.seismic.Radius; r.Known && s.place.HROK && s.logLFrom == fromMagnitude {
		here := stellar.Radius(s.logL.Value, s.teff.Value)
		rel := math.Hypot(math.Hypot(r.Err/r.Value, 0.1), math.Hypot(s.logL.Err/2*math.Ln10, 2*s.teff.Err/s.teff.Value))
		if math.Abs(math.Log(r.Value/here)) > far*rel {
			return &targets.Evidence{What: fmt.Sprintf("contradiction: its oscillations make its radius %.1f Rsun, its brightness %.1f", r.Value, here), Source: "the list's own values"}
		}
	}
	return nil
}

// aboveAGB weighs a luminosity above what a star of the asymptotic branch
// reaches at its period.
//
//	Mbol = -5.62787 - 0.00383 P + 1.875e-6 P²     P in days
//
// Source: [cite.WoodBessellFox1983].
//
// Checked: TestAboveAGB.
func (s *sight) aboveAGB(t *targets.Target) (factor, bool) {
	const coolest, without = 5000, -7.1 // K; Mbol that no core below the mass limit reaches
	if !s.giant || s.teff.Value > coolest {
		return factor{}, false
	}
	limit, source := without, memory
	if p := t.Var.PeriodD; finite(p) {
		if l, err := stellar.AGBLimit(p.Value); err == nil {
			limit, source = l, cite.WoodBessellFox1983.String()
		}
	}
	mbol := stellar.MbolSun - 2.5*s.logL.Value
	if mbol+2*2.5*s.logL.Err > limit {
		return factor{}, false
	}
	return factor{what: fmt.Sprintf("M_bol = %.1f: brighter than the asymptotic branch gets (%.1f); not a low-mass star", mbol, limit), source: source,
		weight: shares{targets.RSG: 1, targets.TPAGB: 0.05, targets.PAGB: 0.02}, rest: 0.01}, true
}

// hotSubdwarfOf weighs a place between main sequence and white dwarfs at a
// blue colour.
//
// Source: [cite.GeierEtAl2019].
//
// Checked: TestHotSubdwarf.
func (s *sight) hotSubdwarfOf() (factor, bool) {
	const blue, bright, faint = -0.1, 2.5, 6.5
	g, ok := s.abs["G"]
	if !ok || !s.colours.BPRP.Known || s.poor || s.colours.BPRP.Value > blue || g.Value < bright || g.Value > faint {
		return factor{}, false
	}
	return factor{what: fmt.Sprintf("M_G = %.1f at BP-RP = %.2f: where hot subdwarfs are", g.Value, s.colours.BPRP.Value), source: cite.GeierEtAl2019.String(),
		weight: shares{targets.SDB: 1, targets.CSPN: 0.1, targets.ACC: 0.02, targets.HB: 0.02, targets.MS: 1e-6, targets.Dwarf: 1e-5}, rest: 1e-6}, true
}
