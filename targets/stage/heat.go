package stage

import (
	"cmp"
	"fmt"
	"math"
	"regexp"
	"strings"

	"evenfall/astro/cite"
	"evenfall/astro/degenerate"
	"evenfall/astro/nebular"
	"evenfall/astro/stellar"
	"evenfall/targets"
)

// Temperatures and luminosities between which a place on the diagram is
// believed.
const (
	coldestK, hottestK  = 1500.0, 400000.0
	dimmest, brightest  = -7.0, 7.0 // log10 Lsun
	giantsAboveG        = 3.9       // absolute magnitude in G or V of the faintest giants
	giantsLogG          = 3.5
	giantsMass          = 1.2 // Msun, of field giants whose mass is not known
	giantsMassErr       = 0.4
	gravityAsL          = 4.438
	lawFloor            = 0.02 // dex, of any luminosity
	hotGvsV             = 0.05 // mag, V-G of hot stars
	bcgHottestK         = 8000.0
	bcgCoolestK         = 3300.0
	bcvCoolestK         = 3300.0
	bcvHottestK         = 50000.0
	miraBCK, miraBCKErr = 3.0, 0.15
	modulusPerRelative  = 5 / math.Ln10
	miraMeanErr         = 0.1 // mag, of a K magnitude that may not be the mean
	teffWorstErr        = 0.35
)

// Colours from which B-V says nothing of a giant's temperature.
const reddestVK, reddestBPRP = 4.9, 1.81

var classM = regexp.MustCompile(`^g?M\d`)

// way is how a luminosity was found.
type way int

// The ways.
const (
	fromMagnitude way = iota
	fromOscillations
	fromGravity
)

var classIII = regexp.MustCompile(`^g?[FGKM][^V]*III`)

// isGiant decides which calibrations are asked.
func (s *sight) isGiant(t *targets.Target) {
	bright := func(b targets.Band) bool { m, ok := s.abs[b]; return ok && m.Value < giantsAboveG }
	red := !s.colours.BPRP.Known || s.colours.BPRP.Value > 0.6
	switch g := t.Physics.LogG; {
	case finite(g):
		s.giant = g.Value < giantsLogG
	case finite(t.Physics.NumaxUHz):
		s.giant = t.Physics.NumaxUHz.Value < 400
	case len(s.abs) > 0:
		s.giant = (bright("G") || bright("V") || bright("K")) && red
	default:
		s.giant = t.Kind == targets.Giant || t.Kind == targets.LPV || classIII.MatchString(t.Physics.SpType)
	}
	if t.Kind == targets.LPV {
		s.giant = true
	}
}

// heat finds the temperature: the list's, or that of the colour that a
// calibration holds for.
func (s *sight) heat(t *targets.Target) {
	if q := t.Physics.TeffK; finite(q) && q.Value > coldestK && q.Value < hottestK {
		s.teff = measured(q, math.Max(listedTeffErrK, math.Max(0.02*math.Max(q.Value-8000, 0), 0.1*math.Max(q.Value-40000, 0))))
		s.teffMethod, s.teffSource, s.teffListed = "as listed", "the list", true
		return
	} else if q.Known {
		s.lack("the temperature listed, %g K, is not one of a star", q.Value)
	}
	if t.Kind == targets.PN || t.Kind == targets.Interacting {
		return
	}
	if t.Kind == targets.LPV && (isMira(t) || isCarbon(t)) || isCarbon(t) {
		est := stellar.TeffOfMira()
		if isCarbon(t) {
			est = stellar.TeffOfCarbonStar()
		}
		s.estimate(est, nil)
		return
	}
	colours := s.colours
	if s.giant && (colours.VK.Known && colours.VK.Value > reddestVK || colours.BPRP.Known && colours.BPRP.Value > reddestBPRP || classM.MatchString(t.Physics.SpType)) {
		colours.BV = stellar.Measure{} // it hardly changes among M giants
	}
	est, tried, err := stellar.TeffFromColours(colours, s.feh, s.giant)
	if err == nil {
		s.estimate(est, tried)
		return
	}
	if sp := t.Physics.SpType; s.giant && sp != "" {
		if est, err = stellar.TeffFromMType(sp); err == nil {
			s.estimate(est, tried)
			return
		}
	}
	var why []string
	for _, a := range tried {
		if a.Err != nil && !strings.Contains(a.Err.Error(), "is not known") && !strings.Contains(a.Err.Error(), "giants only") {
			why = append(why, a.Err.Error())
		}
	}
	if len(why) > 0 {
		s.lack("no calibration of the temperature: %s", strings.Join(why, "; "))
	} else {
		s.lack("no temperature, and no colour that gives one (BP-RP, G-K, V-K or B-V)")
	}
}

// estimate takes a temperature from a calibration.
func (s *sight) estimate(est stellar.TeffEstimate, tried []stellar.Try) {
	s.teff = stellar.Measured(est.TeffK, est.SigmaK)
	s.teffMethod, s.teffSource = est.Method, sourceOf(est.Source, est.Note)
	var others []string
	for _, a := range tried {
		if a.Err == nil {
			others = append(others, fmt.Sprintf("%s %.0f +- %.0f K", a.Method, a.Teff.TeffK, a.Teff.SigmaK))
		}
	}
	if s.keep {
		s.step("temperature", "5040/theta(colour, [Fe/H]) of the calibration with the least error", cmp.Or(strings.Join(others, "; "), "kind and spectral type"),
			fmt.Sprintf("%.0f +- %.0f K from %s", est.TeffK, est.SigmaK, est.Method), s.teffSource)
	}
}

// gravity takes the listed surface gravity, or that of the oscillations.
func (s *sight) gravity(t *targets.Target) {
	p := &t.Physics
	const noErr = 0.02 // of a frequency
	if finite(p.NumaxUHz) && s.teff.Known {
		numax := measured(p.NumaxUHz, noErr*p.NumaxUHz.Value)
		dnu := measured(p.DnuUHz, noErr*p.DnuUHz.Value)
		if q, err := stellar.Oscillations(numax, dnu, s.teff); err == nil {
			s.seismic, s.logG = q, q.LogG
			s.logGMethod, s.logGSource = "oscillations, numax scaled from the Sun", cite.KjeldsenBedding1995.String()
			if s.keep {
				s.step("gravity from oscillations", "4.438 + log(numax/3090) + 0.5 log(Teff/5777)", fmt.Sprintf("numax %g uHz, %.0f K", numax.Value, s.teff.Value),
					fmt.Sprintf("log g = %.3f +- %.3f", q.LogG.Value, q.LogG.Err), s.logGSource)
			}
			return
		}
	}
	if g := p.LogG; finite(g) && g.Value > -2 && g.Value < 11 {
		s.logG = measured(g, listedLogGErr)
		s.logGMethod, s.logGSource = "as listed", "the list"
	} else if g.Known {
		s.lack("the gravity listed, log g = %g, is not one of a star", g.Value)
	}
}

// shine finds the luminosity, by the way with the least error.
func (s *sight) shine(t *targets.Target) {
	if !s.teff.Known || t.Kind == targets.PN || t.Kind == targets.Interacting {
		return
	}
	from := fromMagnitude
	way := func(logL, err float64, method, source string) {
		if math.IsNaN(logL) || math.IsNaN(err) || s.logL.Known && s.logL.Err <= err {
			return
		}
		s.logL, s.logLMethod, s.logLSource, s.logLFrom = stellar.Measured(logL, math.Hypot(err, lawFloor)), method, source, from
	}
	s.byMagnitude(t, way)
	from = fromOscillations
	if r := s.seismic.Radius; r.Known && r.Value > 0 {
		logL := 2*math.Log10(r.Value) + 4*math.Log10(s.teff.Value/stellar.TeffSunK)
		way(logL, math.Hypot(2*r.Err/r.Value, 4*s.teff.Err/s.teff.Value)/math.Ln10, "radius from oscillations and temperature", cite.KjeldsenBedding1995.String())
	}
	from = fromGravity
	if s.logG.Known && s.logG.Value < 4.6 {
		mass, massErr := giantsMass, giantsMassErr
		if q := s.seismic.Mass; q.Known && q.Value > 0 {
			mass, massErr = q.Value, q.Err
		}
		logL := gravityAsL + math.Log10(mass) + 4*math.Log10(s.teff.Value/stellar.TeffSunK) - s.logG.Value
		way(logL, math.Hypot(s.logG.Err, math.Hypot(massErr/mass, 4*s.teff.Err/s.teff.Value)/math.Ln10),
			fmt.Sprintf("surface gravity, %s, and a mass of %.1f +- %.1f Msun", s.logGMethod, mass, massErr), s.logGSource+"; "+practice)
	}
	if s.logL.Known && (s.logL.Value < dimmest || s.logL.Value > brightest) {
		s.lack("log L = %.1f Lsun is not one of a star: parallax or magnitude may be wrong", s.logL.Value)
		s.logL = stellar.Measure{}
	}
	if s.logL.Known {
		if s.keep {
			s.step("luminosity", "log L = 0.4 (4.74 - M - BC), or from the gravity", fmt.Sprintf("%.0f K; %s", s.teff.Value, s.logLMethod),
				fmt.Sprintf("log L = %.3f +- %.3f Lsun", s.logL.Value, s.logL.Err), s.logLSource)
		}
	}
}

// byMagnitude goes by parallax, magnitude and bolometric correction.
func (s *sight) byMagnitude(t *targets.Target, way func(logL, err float64, method, source string)) {
	if s.farErr > farthestErr {
		return
	}
	tk, te := s.teff.Value, s.teff.Err
	slope := func(f func(float64) (float64, error)) float64 { // what the error of the temperature makes of it
		a, errA := f(tk * (1 - 0.01))
		b, errB := f(tk * (1 + 0.01))
		if errA != nil || errB != nil {
			return 0
		}
		return (b - a) / (0.02 * tk) * te
	}
	if k, ok := s.abs["K"]; ok && (t.Kind == targets.LPV || tk < bcgCoolestK) {
		if behindDust(t) {
			s.lack("behind dust of its own: its K magnitude does not give its luminosity")
			return
		}
		way(stellar.LogLFromMbol(k.Value+miraBCK), 0.4*math.Hypot(k.Err, math.Hypot(miraBCKErr, miraMeanErr)), "K magnitude and a bolometric correction of 3.0 +- 0.15",
			stellar.FromMemory)
		return
	}
	if g, ok := s.abs["G"]; ok && tk >= bcgCoolestK && tk <= bcgHottestK {
		f := func(k float64) (float64, error) { l, _, err := stellar.LogLFromG(g.Value, k); return l, err }
		if l, sd, err := stellar.LogLFromG(g.Value, tk); err == nil {
			way(l, math.Hypot(sd, math.Hypot(0.4*g.Err, slope(f))), "G magnitude, parallax and bolometric correction", cite.AndraeEtAl2018.String())
		}
	}
	v, ok := s.abs["V"]
	if g, okG := s.abs["G"]; !ok && okG && tk > bcgHottestK {
		v, ok = stellar.Measured(g.Value+hotGvsV, math.Hypot(g.Err, hotGvsV)), true
	}
	if ok && tk > bcvHottestK {
		if bc, err := nebular.HotBC(tk); err == nil {
			way(0.4*(stellar.MbolSun-v.Value-bc), math.Hypot(0.4*v.Err, 0.4*6.84*te/tk/math.Ln10), "V magnitude, parallax and hot bolometric correction, an extrapolation", cite.VaccaEtAl1996.String())
		}
	}
	if ok && tk >= bcvCoolestK {
		f := func(k float64) (float64, error) { return stellar.LogLFromV(v.Value, k) }
		if l, err := f(tk); err == nil {
			way(l, math.Hypot(math.Hypot(0.4*v.Err, 0.02), slope(f)), "V magnitude, parallax and bolometric correction", cite.Torres2010.String())
		}
	}
	if k, ok := s.abs["K"]; ok && s.giant && tk >= bcgCoolestK {
		if gk, err := stellar.GKFromTeff(tk, stellar.GiantLogG, s.feh); err == nil {
			f := func(x float64) (float64, error) {
				c, err := stellar.GKFromTeff(x, stellar.GiantLogG, s.feh)
				if err != nil {
					return 0, err
				}
				l, _, err := stellar.LogLFromG(k.Value+c, x)
				return l, err
			}
			if l, sd, err := stellar.LogLFromG(k.Value+gk, tk); err == nil {
				way(l, math.Hypot(sd, math.Hypot(0.4*k.Err, slope(f))), "K magnitude, parallax and bolometric correction", cite.CasagrandeEtAl2021.String())
			}
		}
	}
}

// behindDust tells whether a star's own shell takes much of its light in K.
func behindDust(t *targets.Target) bool {
	const long = 500 // d, of carbon Miras that lose much mass
	j, k := t.Mags["J"], t.Mags["K"]
	return finite(j) && finite(k) && j.Value-k.Value > shellJK || isCarbon(t) && finite(t.Var.PeriodD) && t.Var.PeriodD.Value > long
}

// intoPlace writes down where on the diagram the target stands, or why nowhere.
func (s *sight) intoPlace(t *targets.Target) {
	g, okG := s.abs["G"]
	if okG && s.colours.BPRP.Known && t.Kind != targets.PN {
		s.place.CMDOK, s.place.AbsG, s.place.Colour = true, interval(g), interval(s.colours.BPRP)
	}
	if s.teff.Known && s.logL.Known && s.teff.Err < teffWorstErr*s.teff.Value {
		s.place.HROK = true
		s.place.LogT = interval(stellar.Measured(math.Log10(s.teff.Value), s.teff.Err/s.teff.Value/math.Ln10))
		s.place.LogL = interval(s.logL)
	}
	s.place.Why = cmp.Or(s.place.Why, s.whyNot(t))
}

// whyNot says why a target has no place on one of the diagrams.
func (s *sight) whyNot(t *targets.Target) string {
	switch {
	case s.place.HROK && s.place.CMDOK:
		return ""
	case t.Kind == targets.Interacting:
		return "two stars and what flows between them"
	case !s.distanceOK && !s.place.HROK:
		return "no parallax"
	case s.place.HROK:
		return "no G, BP and RP with a distance"
	case !s.teff.Known:
		return "no temperature, and no colour that gives one"
	case s.farErr > farthestErr:
		return "the parallax says too little"
	}
	return "no magnitude that gives a luminosity"
}

// below tells whether a target stands below the main sequence, where white
// dwarfs are.
func (s *sight) below(t *targets.Target) {
	g, ok := s.abs["G"]
	s.dwarf = ok && s.colours.BPRP.Known && !s.poor && t.Kind != targets.PN && t.Kind != targets.Interacting &&
		degenerate.Recognised(g.Value, s.colours.BPRP.Value)
}
