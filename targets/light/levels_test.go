package light

import (
	"math"
	"testing"

	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/stage"
)

// By hand: usual 12 +- 0.5, f = 0.15, so P = 0.2275; a magnitude 12.6 +- 0.1
// makes K = 0.2275/(0.2275 + 0.01 + 0.0225) = 0.875: level 12.525, sd^2 =
// 0.125 0.2275 + 0.0225 = 0.05094. With half the probability half the way.
func TestLevels(t *testing.T) {
	usual := state{name: "quiescence", p: 1, mag: 12, sd: 0.5, dwell: 40}
	s := usual
	s.take(&usual, 12.6, 0.1, 1)
	check.Near(t, s.mag, 12.525, 1e-3, "level")
	check.Near(t, s.sd, math.Sqrt(0.05094), 1e-3, "its sd")
	half := usual
	half.take(&usual, 12.6, 0.1, 0.5)
	check.Near(t, half.mag, 12.2625, 1e-3, "level, with a probability of a half")
	s.settle(&usual, levelD)
	check.Near(t, s.mag, 12+0.525/math.E, 1e-3, "level a time constant later")
	s.settle(&usual, 1000)
	check.Near(t, s.mag, 12, 1e-6, "level long after")
	check.Near(t, s.sd, 0.5, 1e-6, "sd long after")
}

// GK Per of the list at V 10.5 an hour and a half ago, between its states, is
// near 10.5 now; months later it is forgotten. A dwarf nova quiet an hour ago
// stays quiet, at the level measured.
func TestNearTheLast(t *testing.T) {
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	for _, star := range stars {
		if star.Name != "GK Per" {
			continue
		}
		f := NewState(star, stage.Verdict{}, []targets.Magnitude{magsAt("V", 1.6/24, 10.5)}).At(now, Ask{})
		if f.Lo.Mags() > 10.5 || f.Hi.Mags() < 10.5 || f.Hi.Minus(f.Lo) > 1.5 || math.Abs(f.Mag.Mags()-10.5) > 0.2 {
			t.Errorf("GK Per: %v, %v to %v: %s", f.Mag, f.Lo, f.Hi, f.Basis)
		}
		if old := NewState(star, stage.Verdict{}, []targets.Magnitude{magsAt("V", 300, 10.5)}).At(now, Ask{}); math.Abs(old.Mag.Mags()-forecast(star, Ask{}).Mag.Mags()) > 0.1 {
			t.Errorf("300 d after: %v", old.Mag)
		}
	}
	ug := targets.Target{Name: "a", Kind: targets.Interacting, Var: targets.Variability{Type: "UGSS", MagMax: targets.Known(7.7), MagMin: targets.Known(12.4), MagBand: "V"}}
	f := NewState(ug, stage.Verdict{}, []targets.Magnitude{magsAt("V", 1.0/24, 11.7)}).At(now, Ask{})
	if p := stateP(f, "quiescence"); p < 0.98 || math.Abs(f.Mag.Mags()-11.7) > 0.1 || f.Lo.Mags() < 11 || f.Hi.Mags() > 12.2 {
		t.Errorf("quiet an hour ago: %g, %v, %v to %v", p, f.Mag, f.Lo, f.Hi)
	}
	sum := 0.0
	for _, s := range f.States {
		sum += s.P
	}
	check.Near(t, sum, 1, 1e-9, "probabilities")
}
