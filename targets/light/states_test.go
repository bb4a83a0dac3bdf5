package light

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/stage"
)

// States are told apart and never averaged.
func TestStates(t *testing.T) {
	for _, c := range []struct{ vartype, likeliest string }{
		{"UGSU", "quiescence"}, {"UGZ", "quiescence"}, {"NR", "quiescence"}, {"AM/XRM", "high state"}, {"NL", "high state"}, {"ZAND", "quiescence"},
	} {
		star := targets.Target{Name: "a", Kind: targets.Interacting, Var: targets.Variability{Type: c.vartype, MagMax: targets.Known(9), MagMin: targets.Known(14), MagBand: "V"}}
		f := forecast(star, Ask{})
		sum := 0.0
		best := f.States[0]
		for _, s := range f.States {
			sum += s.P
			if s.P > best.P {
				best = s
			}
		}
		check.Near(t, sum, 1, 1e-12, "probabilities of %s", c.vartype)
		if best.Name != c.likeliest || f.Mag != best.Mag || len(f.States) < 2 {
			t.Errorf("%s: likeliest %s at %v, median %v", c.vartype, best.Name, best.Mag, f.Mag)
		}
		if f.Lo.Mags() > f.Mag.Mags() || f.Hi.Mags() < f.Mag.Mags() {
			t.Errorf("%s: %v outside %v..%v", c.vartype, f.Mag, f.Lo, f.Hi)
		}
	}
}

// In mid-eclipse by the clock the eclipse is all but certain, a quarter of a
// cycle later all but excluded.
func TestEclipseByTheClock(t *testing.T) {
	star := targets.Target{Name: "a", Kind: targets.Interacting, Place: targets.Place{RA: astro.Deg(60), Dec: astro.Deg(17), EpochJyr: 2000},
		Var: targets.Variability{Type: "EA/WD", MagMax: targets.Known(10), MagMin: targets.Known(12), MagBand: "V", TimeScale: "JD_UTC",
			PeriodD: targets.KnownErr(0.5, 1e-9), EpochMinJD: targets.KnownErr(now.JDUTC()-1000, 1e-5), EclipseMin: targets.Known(40)}}
	f := forecast(star, Ask{})
	if f.States[len(f.States)-1].P < 0.99 {
		t.Errorf("in mid-eclipse: %+v", f.States)
	}
	star.Var.EpochMinJD = targets.KnownErr(now.JDUTC()-1000.125, 1e-5)
	if f := forecast(star, Ask{}); f.States[len(f.States)-1].P > 0.01 {
		t.Errorf("a quarter of a cycle later: %+v", f.States)
	}
	star.Var.PeriodD = targets.KnownErr(0.5, 1e-3) // 2000 cycles: lost
	if f := forecast(star, Ask{}); math.Abs(f.States[len(f.States)-1].P-40.0/720) > 0.01 {
		t.Errorf("an expired ephemeris gives %+v", f.States)
	}
}

func magsAt(band targets.Band, age, mag float64) targets.Magnitude {
	return targets.Magnitude{JD: now.JDUTC() - age, TimeScale: "JD_UTC", Band: band, Mag: mag, Err: 0.05}
}

func stateP(f Forecast, name string) float64 {
	for _, s := range f.States {
		if s.Name == name {
			return s.P
		}
	}
	return 0
}

// p = 1 - exp(-dt/(Tn - D)): seen quiet, half a day on, by hand: with Tn = 50 d
// and D = 9 d 1.21 %, with Tn = 20 d and D = 6 d 3.51 %. A long time on it is
// the share of all time.
func TestHazards(t *testing.T) {
	for _, c := range []struct{ tn, d, want float64 }{{50, 9, 0.01212}, {20, 6, 0.03509}} {
		l := outbursts(12, 0.3, c.tn, c.d, state{name: "outburst", p: c.d / c.tn, mag: 8, sd: 0.4})
		p := relax(l, []float64{1, 0}, 0.5)
		check.Near(t, p[1], c.want, 1e-4, "outburst half a day after quiescence, Tn %g d", c.tn)
		check.Near(t, relax(l, []float64{1, 0}, 1e4)[1], c.d/c.tn, 1e-6, "outburst long after")
		check.Near(t, relax(l, []float64{0, 1}, 1e4)[1], c.d/c.tn, 1e-6, "outburst long after one")
	}
	// R CrB stars: 1 - exp(-dt/1100 d); 30 d: 2.69 %
	m := newFading(&targets.Target{Var: targets.Variability{Type: "RCB", MagMax: targets.Known(5.7), MagMin: targets.Known(14.8)}}, nil, nil).(*states)
	check.Near(t, relax(m.list, []float64{1, 0}, 30)[1], 1-math.Exp(-30.0/1100), 1e-12, "a decline within 30 d")
	check.Near(t, m.list[1].p, 0.25, 1e-12, "share of declines")
}

// Probabilities stay probabilities whatever passes.
func TestRelaxProperties(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(1, 4).Draw(r, "n")
		list, p := make([]state, n), make([]float64, n)
		sum, all := 0.0, 0.0
		for i := range list {
			list[i].p = rapid.Float64Range(0.001, 1).Draw(r, "share")
			p[i] = rapid.Float64Range(0, 1).Draw(r, "p") + 1e-6
			sum, all = sum+list[i].p, all+p[i]
			list[i].dwell = rapid.Float64Range(0, 1000).Draw(r, "dwell")
			if rapid.Bool().Draw(r, "hasFixed") {
				list[i].fixed = rapid.Float64Range(0.1, 100).Draw(r, "fixed")
			}
		}
		for i := range list {
			list[i].p /= sum
			p[i] /= all
		}
		got := 0.0
		for _, x := range relax(list, p, rapid.Float64Range(-1, 1e5).Draw(r, "dt")) {
			if !(x >= -1e-12 && x <= 1+1e-12) {
				r.Fatalf("probability %g", x)
			}
			got += x
		}
		if math.Abs(got-1) > 1e-9 {
			r.Fatalf("they sum to %g", got)
		}
	})
}

// A magnitude makes its state all but certain, and is forgotten in time.
func TestStatesLearn(t *testing.T) {
	ug := targets.Target{Name: "a", Kind: targets.Interacting, Var: targets.Variability{Type: "UGSS", MagMax: targets.Known(7.7), MagMin: targets.Known(12.4), MagBand: "V"}}
	at := func(mags ...targets.Magnitude) Forecast { return NewState(ug, stage.Verdict{}, mags).At(now, Ask{}) }
	check.Near(t, stateP(at(), "outburst"), ugD/ugTn, 1e-9, "outburst without history")
	if p := stateP(at(magsAt("V", 0.5, 12.1)), "outburst"); math.Abs(p-0.0121) > 0.002 {
		t.Errorf("half a day after quiescence an outburst has %g", p)
	}
	bright := at(magsAt("V", 0.2, 8.3))
	if p := stateP(bright, "outburst"); p < 0.95 || bright.Mag.Mags() > 9 {
		t.Errorf("after a magnitude of 8.3 an outburst has %g, median %v", p, bright.Mag)
	}
	check.Near(t, stateP(at(magsAt("vis", 400, 8.3)), "outburst"), ugD/ugTn, 0.01, "outburst 400 d after one")
	limit := magsAt("V", 0.2, 10)
	limit.Limit = true
	if p := stateP(at(limit), "outburst"); p > 0.02 {
		t.Errorf("fainter than 10 leaves %g to outburst", p)
	}
	if f := at(magsAt("V", -0.1, 8.3)); math.Abs(stateP(f, "outburst")-ugD/ugTn) > 1e-9 {
		t.Errorf("a magnitude of later taught: %+v", f.States)
	}
}

// Seen in decline an R CrB star stays near its last magnitude, 0.15 mag per
// root of a day: 0.30 after 4 d.
func TestFading(t *testing.T) {
	star := targets.Target{Name: "R CrB", Kind: targets.Giant, Var: targets.Variability{Type: "RCB", MagMax: targets.Known(5.71), MagMin: targets.Known(14.8), MagBand: "V"}}
	m := magsAt("V", 4, 11.0)
	m.Err = 0.05
	f := NewState(star, stage.Verdict{}, []targets.Magnitude{m}).At(now, Ask{})
	p := stateP(f, "in decline")
	check.Near(t, f.Mag.Mags(), 11, 0.03, "median four days later")
	s := f.States[1]
	check.Near(t, s.Hi.Minus(s.Mag)/1.2816, math.Hypot(0.30, 0.05), 0.01, "sigma four days later")
	if p < 0.97 {
		t.Errorf("in decline with %g", p)
	}
}

// Hazard by hand for sigma 0.3: at t = R the density of the normal is 0.39894
// and half is left: h = 0.39894/(80 0.3 0.5) = 0.03325 a year; T CrB in 2026 is
// overdue at about 1e-3 a night, the others stay below.
func TestRecurrentNovae(t *testing.T) {
	check.Near(t, Hazard(80, 80), 0.033245, 1e-5, "hazard per year at the recurrence")
	for _, x := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if h := Hazard(x, 80); h != 0 {
			t.Errorf("hazard after %g years %g", x, h)
		}
	}
	for name := range map[string]bool{"T CrB": true, "U Sco": true, "RS Oph": true, "T Pyx": true, "V2487 Oph": true, "CI Aql": true} {
		f := forecast(targets.Target{Name: name, Kind: targets.Interacting, Var: targets.Variability{Type: "NR", MagMax: targets.Known(2), MagMin: targets.Known(11)}}, Ask{})
		p := stateP(f, "eruption")
		if name == "T CrB" {
			check.Near(t, p, 1e-3, 1e-6, "T CrB erupts tonight")
			check.Near(t, f.Mag.Mags(), 9.8, 0.01, "T CrB quiescent")
		} else if !(p > 0 && p < 1e-3) {
			t.Errorf("%s erupts tonight with %g", name, p)
		}
	}
}

// Warner 1987: 1.5 h gives 5.25, SS Cyg's 6.6 h 3.93. della Valle & Livio
// 1995: t2 = 10 d gives -8.69. Slopes of Hachisu & Kato 2006: F ~ t^-1.75 from
// t3 on is 4.375 mag per decade, 8.75 from 6 mag, at 4.85 t3.
func TestBinaryFigures(t *testing.T) {
	check.Near(t, DwarfNovaMV(1.5), 5.25, 0.005, "M_V of 1.5 h")
	check.Near(t, DwarfNovaMV(6.6), 3.93, 0.005, "M_V of 6.6 h")
	check.Near(t, NovaMV(10), -8.69, 0.005, "M_V of t2 = 10 d")
	check.Near(t, NovaT3(10), 2.78*math.Pow(10, 0.877), 1e-9, "t3 of t2 = 10 d")
	check.Near(t, NovaT3(0.483*math.Pow(30, 1.018)), 30, 2, "t3 there and back by the inverse fit, days")
	for days, want := range map[float64]float64{1: 0, 10: 2, 21: 3, 21 * 4.85: 6, 21 * 48.5: 6 + 8.75} {
		check.Near(t, NovaDecline(days, 10, 21), want, 0.005, "decline after %g d", days)
	}
	if v := NovaDecline(10, 20, 10); !math.IsNaN(v) {
		t.Errorf("t3 before t2 gives %g", v)
	}
}

// A nova's own magnitudes tell how fast it falls: one of t3 = 20 d, 40 d after
// maximum, is 4.3 mag down.
func TestNovaLearns(t *testing.T) {
	nova := targets.Target{Name: "Nova", Kind: targets.Interacting, Var: targets.Variability{Type: "NA", EpochMaxJD: targets.Known(now.JDUTC() - 40), MagMax: targets.Known(5), MagMin: targets.Known(18), MagBand: "V"}}
	wide := forecast(nova, Ask{})
	var mags []targets.Magnitude
	for _, age := range []float64{35, 30, 20, 10} {
		mags = append(mags, magsAt("V", age, 5+NovaDecline(40-age, 9.48, 20)))
	}
	f := NewState(nova, stage.Verdict{}, mags).At(now, Ask{})
	check.Near(t, f.Mag.Mags(), 5+3+4.375*math.Log10(2), 0.4, "40 d after maximum")
	if f.Hi.Minus(f.Lo) >= wide.Hi.Minus(wide.Lo) {
		t.Errorf("magnitudes did not sharpen %v..%v to %v..%v", wide.Lo, wide.Hi, f.Lo, f.Hi)
	}
}

// The type is read with what the list notes beside the kind.
func TestChoice(t *testing.T) {
	k := targets.Known
	for _, c := range []struct {
		kind             targets.Kind
		note, vt, state0 string
		period           float64
	}{
		{targets.Interacting, "dwarf nova (UGWZ)", "UGSU+E+ZZ", "quiescence", 0.0567},
		{targets.Interacting, "AM CVn (helium binary)", "UGSU:", "quiescence", 0.017029},
		{targets.Interacting, "AM CVn (helium binary)", "*", "permanent high state", 0.0119},
		{targets.Interacting, "eclipsing polar", "EA+XM", "high state", 0.0868},
		{targets.Interacting, "intermediate polar (propeller)", "XM+ELL", "usual state", 0.41},
		{targets.Interacting, "eclipsing pre-CV (WD+K2V)", "EA/D/RS+X", "out of eclipse", 0.52},
		{targets.Interacting, "old nova (1901), intermediate polar", "NA+XP", "quiescence", 1.99},
		{targets.Interacting, "symbiotic Mira", "M+ZAND", "", 387},
		{targets.PostAGB, "", "RVA", "", 75},
		{targets.LPV, "", "M", "", 300},
	} {
		f := forecast(targets.Target{Name: "x", Kind: c.kind, KindNote: c.note, Var: targets.Variability{Type: c.vt, MagMax: k(9), MagMin: k(14), PeriodD: k(c.period)}}, Ask{})
		got := ""
		if len(f.States) > 0 {
			got = f.States[0].Name
		}
		if !f.Known || got != c.state0 {
			t.Errorf("%s (%s): first state %q, %s", c.vt, c.note, got, f.Basis)
		}
	}
}
