package light

import (
	"fmt"
	"math"
	"strings"
	"time"

	"evenfall/astro/degenerate"
	"evenfall/targets"
)

// usualLogG is the gravity of a white dwarf that has none listed.
const usualLogG = 8.0

// stripNames says which strip a type of variable belongs to.
var stripNames = []struct{ prefix, strip string }{
	{"ZZA", degenerate.StripDAV}, {"ZZB", degenerate.StripDBV}, {"ZZO", degenerate.StripGWVir}, {"ZZLEP", degenerate.StripGWVir},
	{"GWVIR", degenerate.StripGWVir}, {"DOV", degenerate.StripGWVir}, {"RPHS", degenerate.StripSdBp}, {"V361HYA", degenerate.StripSdBp},
	{"EC14026", degenerate.StripSdBp}, {"SDBV", degenerate.StripSdBp}, {"V1093HER", degenerate.StripSdBg}, {"ZZ", degenerate.StripDAV},
}

// newPulsator prepares a white dwarf or subdwarf: steady, but where it
// pulsates or may pulsate the forecast says by how much, how fast, and which
// exposures smear it.
//
// Notes:
//  1. Without a listed amplitude one of a hundredth is taken, the geometric
//     middle of what such stars show: common practice, no source.
//
// Checked: TestPulsators.
func newPulsator(t *targets.Target, s *steady) *steady {
	strip, certain, p := stripOf(t)
	if strip == nil {
		return s
	}
	shortest, longest := strip.ShortestS, strip.LongestS
	if v := t.Var.PulsationS; usable(v) && v.Value > 0 && v.Value < 1e5 {
		shortest, longest = v.Value, v.Value
	} else if v := t.Var.PeriodD; certain && usable(v) && v.Value > 0 && v.Value < 1 {
		shortest, longest = v.Value*86400, v.Value*86400
	} else if strip.Name == degenerate.StripDAV && usable(t.Physics.TeffK) {
		if i, ok := degenerate.ZZCetiPeriod(t.Physics.TeffK.Value, logGOf(t)); ok {
			shortest, longest = i.Lo, i.Hi
		}
	}
	said := strip.Words
	if !certain {
		said = fmt.Sprintf("may be a %s (%.0f %%)", strip.Words, 100*p)
	}
	amplitude := ""
	if a := t.Var.AmplitudeMag; usable(a) && a.Value > 0 {
		amplitude = fmt.Sprintf("amplitude %.3g mag", a.Value)
	} else {
		s.pulse = middleAmplitude / math.Sqrt2
		amplitude = "amplitude not listed"
		if strip.AmplitudeMma != "" {
			amplitude += ", " + strip.AmplitudeMma + " thousandths usual"
		}
		if !certain {
			s.pulse *= p
		}
	}
	cadence := degenerate.LongestCadence(shortest)
	s.why = fmt.Sprintf("%s: periods %s, %s; exposure and readout of %s at most", said, secondsWord(shortest, longest), amplitude, durationWord(cadence))
	s.source = strip.Source
	s.extra = []Step{{"cadence of a pulsation", "exposure + readout <= P/8; amplitude kept sin(pi x)/(pi x), x = exposure/P; run 3 P and 2 h at least",
		fmt.Sprintf("periods %s", secondsWord(shortest, longest)),
		fmt.Sprintf("at most %s each for %s or more; P/8 keeps %.3f of the amplitude, P/4 %.3f, P/2 %.3f", durationWord(cadence),
			durationWord(degenerate.ShortestRun(longest)), degenerate.AmplitudeKept(1, 8), degenerate.AmplitudeKept(1, 4), degenerate.AmplitudeKept(1, 2)),
		"common practice, no source; the smearing is geometry"}}
	return s
}

// middleAmplitude is in magnitudes.
const middleAmplitude = 0.011

// leastTeffErr is the least error that a temperature is taken to have here, K:
// scales differ by that. A choice.
const leastTeffErr = 200.0

// leastChance is from which probability a star is said to lie in a strip.
const leastChance = 0.1

func logGOf(t *targets.Target) float64 {
	if g := t.Physics.LogG; usable(g) && g.Value > 3 && g.Value < 10 {
		return g.Value
	}
	return usualLogG
}

// stripOf returns the strip that a star pulsates in by its type of variable,
// or lies in by its temperature and surface.
func stripOf(t *targets.Target) (s *degenerate.Strip, certain bool, p float64) {
	g := logGOf(t)
	strips := degenerate.Strips(g)
	for _, n := range stripNames {
		if strings.HasPrefix(strings.ToUpper(t.Var.Type), n.prefix) {
			for i := range strips {
				if strips[i].Name == n.strip {
					return &strips[i], !strings.Contains(t.Var.Type, ":"), 1
				}
			}
		}
	}
	sp, ok := degenerate.ParseSpectrum(t.Physics.SpType)
	if !ok || sp.Polarised || sp.Magnetic || !usable(t.Physics.TeffK) || t.Var.Type != "" {
		return nil, false, 0
	}
	for i := range strips {
		x := &strips[i]
		fits := x.Needs == "hydrogen" && sp.Hydrogen() || x.Needs == "helium" && sp.Helium()
		if c := x.Chance(t.Physics.TeffK.Value, math.Max(t.Physics.TeffK.Err, leastTeffErr), g); fits && c > math.Max(p, leastChance) {
			s, p = x, c
		}
	}
	return s, false, p
}

func secondsWord(lo, hi float64) string {
	if lo == hi {
		return fmt.Sprintf("%.4g s", lo)
	}
	return fmt.Sprintf("%.3g to %.3g s", lo, hi)
}

func durationWord(d time.Duration) string {
	switch s := d.Seconds(); {
	case s < 100:
		return fmt.Sprintf("%.3g s", s)
	case s < 7200:
		return fmt.Sprintf("%.0f min", s/60)
	default:
		return fmt.Sprintf("%.1f h", s/3600)
	}
}
