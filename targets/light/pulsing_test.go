package light

import (
	"math"
	"strings"
	"testing"

	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/stage"
)

func pulsator(vartype string, period, cycles float64) targets.Target {
	return targets.Target{Name: "p", Kind: targets.Giant, Var: targets.Variability{Type: vartype, MagMax: targets.Known(7), MagMin: targets.Known(8), MagBand: "V", TimeScale: "JD_UTC",
		PeriodD: targets.KnownErr(period, period*1e-9), EpochMaxJD: targets.KnownErr(now.JDUTC()-cycles*period, period*1e-3)}}
}

// 0.001 P per root of a cycle, by hand: 2500 cycles make 0.05 of a period,
// 10 000 make 0.1 and expire; Cepheids half of that.
func TestClockWalk(t *testing.T) {
	for _, c := range []struct {
		vartype        string
		cycles, want   float64
		known, expired bool
	}{{"RRAB", 2500, 0.05, true, false}, {"RRAB", 10100, 0, false, true}, {"DSCT", 2500, 0.05, true, false}, {"SXPHE", 11000, 0, false, true},
		{"DCEP", 2500, 0.025, true, false}, {"CWA", 10000, 0.05, true, false}, {"DCEP", 41000, 0, false, true}} {
		s := NewState(pulsator(c.vartype, 0.6, c.cycles), stage.Verdict{}, []targets.Magnitude{magsAt("V", 0.01, 7.2)})
		f := s.At(now, Ask{})
		if c.known {
			check.Near(t, f.Phase.Sigma, c.want, 0.001, "sigma of the phase of %s after %g cycles", c.vartype, c.cycles)
		} else if f.Phase.Status != PhaseUnknown || !math.IsNaN(f.Phase.Value) || !strings.Contains(f.Basis, "elements expired") {
			t.Errorf("%s after %g cycles: %+v %s", c.vartype, c.cycles, f.Phase, f.Basis)
		}
		if e := s.Next(now); len(e) != 1 || (e[0].Status == EventExpired) != c.expired {
			t.Errorf("%s after %g cycles: %+v", c.vartype, c.cycles, e)
		}
		if why := s.Past()[0].Why; strings.Contains(why, "keeps no period") {
			t.Errorf("of a star with a period it is said: %s", why)
		}
	}
	if clockWalk("EA") != 0 || clockWalk("") != 0 {
		t.Error("an eclipsing binary is no pulsator")
	}
}
