package light

import (
	"testing"

	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/stage"
)

// A photographic magnitude teaches B where extremes are in B, with 0.3 mag more
// of error, and by any of its names; where they are in V it does not.
func TestPhotographic(t *testing.T) {
	ug := targets.Target{Name: "a", Kind: targets.Interacting, Var: targets.Variability{Type: "UGSS", MagMax: targets.Known(8), MagMin: targets.Known(13), MagBand: "B"}}
	for _, band := range []targets.Band{"p", "pg"} {
		s := NewState(ug, stage.Verdict{}, []targets.Magnitude{magsAt(band, 0.2, 8.6)})
		if seen := s.Past()[0]; !seen.Used || seen.Why != "" || seen.Err != 0.05 {
			t.Errorf("%s: %+v", band, seen)
		}
		if p := stateP(s.At(now, Ask{}), "outburst"); p < 0.95 {
			t.Errorf("%s: an outburst has %g", band, p)
		}
		check.Near(t, s.readings[0].sigma(), 0.304, 1e-3, "its error")
	}
	ug.Var.MagBand = "V"
	if seen := NewState(ug, stage.Verdict{}, []targets.Magnitude{magsAt("p", 0.2, 8.6)}).Past()[0]; seen.Used || seen.Why == "" {
		t.Errorf("in V: %+v", seen)
	}
	ug.Var.MagBand = "p"
	if seen := NewState(ug, stage.Verdict{}, []targets.Magnitude{magsAt("pg", 0.2, 8.6)}).Past()[0]; !seen.Used {
		t.Errorf("photographic extremes: %+v", seen)
	}
	mira := aMira(150)
	mira.Var.MagBand = "p"
	s := NewState(mira, stage.Verdict{}, []targets.Magnitude{magsAt("p", 20, 9), magsAt("p", 3, 10)})
	if f := s.At(now, Ask{Band: "B"}); !f.Known || s.readings[0].band != "B" {
		t.Errorf("%+v", f)
	}
}
