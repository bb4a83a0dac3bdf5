package stage

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/astro/cite"
	"evenfall/astro/degenerate"
	"evenfall/astro/stellar"
	"evenfall/targets"
)

// Errors of what a list gives of a white dwarf without saying how good it is.
const (
	dwarfMagErr    = 0.005
	dwarfColourErr = 0.007
	dwarfTeffErr   = 0.02 // of the temperature itself
	dwarfLogGErr   = 0.05
	mostDistances  = 60
	twoAtmospheres = 11000.0 // K, below which the helium fit is given too
)

// asDwarf fits white-dwarf models where a target is one or is listed as one.
func (s *sight) asDwarf(m *Models, t *targets.Target) {
	if !s.dwarf && t.Kind != targets.WD {
		return
	}
	seen, ok := s.dwarfSeen(t)
	if !ok {
		return
	}
	s.surface, s.surfaceKnown = surfaceOf(t)
	fit, err := m.dwarfs().Fit(seen, degenerate.WidePrior, s.surface)
	if err != nil {
		s.lack("no white-dwarf model fits what is listed: %v", err)
		return
	}
	s.fit = &fit
	s.teff, s.teffMethod, s.teffSource = fromInterval(fit.TeffK), s.fitMethod(t), cite.BedardEtAl2020.String()
	s.logG, s.logGMethod, s.logGSource = fromInterval(fit.LogG), s.teffMethod, s.teffSource
	s.logL = stellar.Measured(math.Log10(fit.LumLsun.Mid), math.Log10(fit.LumLsun.Hi/fit.LumLsun.Lo)/2)
	s.logLMethod, s.logLSource = s.teffMethod, s.teffSource
	if s.keep {
		s.step("white-dwarf models", "p(T, m) ~ sum over distances exp(-chi^2/2) prior(m), flat in log T", s.fitMethod(t),
			fmt.Sprintf("%.0f K, %.3f Msun, chi^2 %.1f", fit.TeffK.Mid, fit.MassMsun.Mid, fit.Chi2), s.teffSource)
	}
}

func fromInterval(i astro.Interval) stellar.Measure { return stellar.Measured(i.Mid, (i.Hi-i.Lo)/2) }

// surfaceOf returns what the spectrum says of a white dwarf's surface, and
// whether it does; hydrogen otherwise.
func surfaceOf(t *targets.Target) (degenerate.Composition, bool) {
	const heliumVisible = 11000 // K, below which helium shows no lines
	x, ok := degenerate.ParseSpectrum(t.Physics.SpType)
	switch {
	case !ok:
		return degenerate.Hydrogen, false
	case x.Helium():
		return degenerate.Helium, true
	case x.Hydrogen():
		return degenerate.Hydrogen, true
	case x.Primary == 'Q' || x.Primary == 'C' || x.Primary == 'Z':
		cool := !finite(t.Physics.TeffK) || t.Physics.TeffK.Value < heliumVisible
		if cool {
			return degenerate.Helium, true
		}
	}
	return degenerate.Hydrogen, false
}

// fitMethod says what was fitted.
func (s *sight) fitMethod(t *targets.Target) string {
	var parts string
	add := func(ok bool, what string) {
		if ok && parts != "" {
			parts += ", "
		}
		if ok {
			parts += what
		}
	}
	add(s.distanceOK && finite(t.Mags["G"]), "G and distance")
	add(s.distanceOK && !finite(t.Mags["G"]) && finite(t.Mags["V"]), "V and distance")
	add(finite(t.Mags["BP"]) && finite(t.Mags["RP"]), "BP-RP")
	add(finite(t.Physics.TeffK), "listed temperature")
	add(finite(t.Physics.LogG), "listed gravity")
	return s.surface.String() + " models fitted to " + parts
}

// dwarfSeen is the target as the models ask for it; false: too little.
func (s *sight) dwarfSeen(t *targets.Target) (degenerate.Seen, bool) {
	var d degenerate.Seen
	or := func(e, otherwise float64) float64 {
		if e > 0 {
			return e
		}
		return otherwise
	}
	known := 0
	if s.distanceOK {
		step := len(s.distance.R)/mostDistances + 1
		for i := 0; i < len(s.distance.R); i += step {
			sum, mean := 0.0, 0.0
			for k := i; k < min(i+step, len(s.distance.R)); k++ {
				sum, mean = sum+s.distance.W[k], mean+s.distance.W[k]*s.distance.R[k]
			}
			if sum > 1e-12 {
				d.Distances = append(d.Distances, degenerate.Distance{Pc: 1000 * mean / sum, Weight: sum})
			}
		}
		if g, v := t.Mags["G"], t.Mags["V"]; finite(g) {
			d.GMag, d.GErrMag = g.Value, or(g.Err, dwarfMagErr)
			known++
		} else if finite(v) {
			d.VMag, d.VErrMag = v.Value, or(v.Err, listedMagErr)
			known++
		}
	}
	if bp, rp := t.Mags["BP"], t.Mags["RP"]; finite(bp) && finite(rp) {
		d.HasBPRP, d.BPRPMag, d.BPRPErrMag = true, bp.Value-rp.Value, or(colourErr(t, "BP", "RP"), dwarfColourErr)
		known++
	}
	if q := t.Physics.TeffK; finite(q) && q.Value > coldestK && q.Value < hottestK {
		d.TeffK, d.TeffErrK = q.Value, or(q.Err, dwarfTeffErr*q.Value)
		known++
	}
	if g := t.Physics.LogG; finite(g) && g.Value > 5 && g.Value < 10 {
		d.LogG, d.LogGErr = g.Value, or(g.Err, dwarfLogGErr)
		known++
	}
	if e, ok := excess(t); ok {
		d.AV = degenerate.Uniform(e)
	} else {
		d.AV = degenerate.Dust(degenerate.GalacticLatitude(t.Place.RA, t.Place.Dec))
	}
	return d, known >= 2
}
