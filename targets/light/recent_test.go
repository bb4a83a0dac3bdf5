package light

import (
	"math"
	"testing"

	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/stage"
)

// By hand, of the variance S^2 = 1 about 10, tau 25 d: a magnitude 8 with an
// error of next to nothing, 25 d ago, leaves 10 - 2/e and 1 - 1/e^2; beside it
// 0.15 and 0.05 mag of error, a gain of 1/1.025.
func TestRelaxing(t *testing.T) {
	star := targets.Target{Var: targets.Variability{PeriodD: targets.Known(100)}}
	x := &relaxing{t: &star, readings: readingsOf(&star, []targets.Magnitude{magsAt("V", 25, 8)})}
	m, words := x.carry(query{t: now, n: 1}, "V", mixture{{0.5, 9.5, math.Sqrt(0.75)}, {0.5, 10.5, math.Sqrt(0.75)}}, nil)
	mean, _, all := moments(m)
	check.Near(t, mean, 10-2/1.025/math.E, 1e-3, "mean")
	check.Near(t, all, 1-math.Exp(-2)+0.025/1.025*math.Exp(-2), 1e-3, "variance")
	if words == "" {
		t.Error("no words")
	}
}

// R Sct at V 5.2 an hour ago is there tonight, and anywhere after half a
// period; with B alone measured it answers in B.
func TestRecentCounts(t *testing.T) {
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	small := aMira(150)
	small.Var.Type, small.Var.MagMax, small.Var.MagMin = "SRB", targets.Known(5), targets.Known(6)
	irregular := targets.Target{Name: "i", Kind: targets.Giant, Var: targets.Variability{Type: "GCAS", MagMax: targets.Known(4.7), MagMin: targets.Known(6.5), MagBand: "V"}}
	list := []targets.Target{small, irregular}
	for _, s := range stars {
		if s.Name == "R Sct" {
			list = append(list, s)
		}
	}
	if len(list) != 3 {
		t.Fatal("R Sct is not listed")
	}
	for _, star := range list {
		bare := forecast(star, Ask{})
		at := func(band targets.Band, age, mag float64) Forecast {
			return NewState(star, stage.Verdict{}, []targets.Magnitude{magsAt(band, age, mag)}).At(now, Ask{})
		}
		f := at("V", 1.0/24, 5.2)
		if math.Abs(f.Mag.Mags()-5.2) > 0.1 || f.Lo.Mags() < 4.85 || f.Hi.Mags() > 5.55 {
			t.Errorf("%s: %v, %v to %v: %s", star.Name, f.Mag, f.Lo, f.Hi, f.Basis)
		}
		p := 120.0
		if usable(star.Var.PeriodD) {
			p = star.Var.PeriodD.Value
		}
		f = at("V", p/2, 5.2)
		check.Near(t, f.Lo.Mags(), bare.Lo.Mags(), 0.3, "%s half a period on, bright end", star.Name)
		check.Near(t, f.Hi.Mags(), bare.Hi.Mags(), 0.3, "%s half a period on, faint end", star.Name)
		if f := at("B", 1, 6.4); f.Band != "B" || math.Abs(f.Mag.Mags()-6.4) > 0.3 {
			t.Errorf("%s: B measured, answered %v in %s: %s", star.Name, f.Mag, f.Band, f.Basis)
		}
		if f := at("B", p*1.1, 6.4); f.Band != "V" {
			t.Errorf("%s: old B, answered in %s", star.Name, f.Band)
		}
		if seen := NewState(star, stage.Verdict{}, []targets.Magnitude{magsAt("V", 1, 5.2)}).Past()[0]; !seen.Used {
			t.Errorf("%s: %s", star.Name, seen.Why)
		}
	}
}
