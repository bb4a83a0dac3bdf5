package tracks

import (
	"errors"
	"math"
	"math/rand"
	"testing"

	"evenfall/astro/check"
	"evenfall/targets"
)

func track(t testing.TB, f *Formulas, m, eta float64) Track {
	t.Helper()
	tr, err := f.Track(m, eta)
	if err != nil {
		t.Fatal(err)
	}
	return tr
}

// length is how long a phase lasts, Myr.
func (t *Track) length(p Phase) float64 {
	for i, s := range t.Starts {
		if s.Phase.main() != p.main() {
			continue
		}
		end := t.BurnedMyr
		if i+1 < len(t.Starts) {
			end = t.Starts[i+1].AgeMyr
		}
		return end - s.AgeMyr
	}
	return 0
}

// slack is 1 per cent, but for what the table's coarse steps spoil: its
// subgiants end a hundredth early; below 1 Msun its wind, in plain steps,
// takes the envelope too fast, by 6 per cent of the pulsing branch, and
// overshoots the core by a hundredth, while it knows no thin envelope before the
// pulses. With 16 times the steps the same program finds the pulsing branch and
// the masses within half a per cent of what is found here.
func slack(name string, m float64) float64 {
	switch {
	case name == "t_hg", name == "m_end" && m <= 1:
		return 0.011
	case m < 1 && (name == "t_tpagb" || name == "l_max_agb"):
		return 0.06
	}
	return 0.01
}

// The table was computed alongside by a separate program in plain steps: it
// checks transcription and integration, not physics.
func TestTracks(t *testing.T) {
	for _, r := range check.Table(t, "testdata/stage/tracks.csv").Rows() {
		z, m := r.Float("z"), r.Float("m")
		f := formulas(t, z)
		tr := track(t, f, m, 0.5)
		var tip, most float64
		for _, p := range tr.Points {
			switch p.Phase {
			case PhaseRGB:
				tip = p.LogL
			case PhaseEAGB, PhaseTPAGB:
				most = math.Max(most, p.LogL)
			}
		}
		flash, _ := tr.Start(PhaseClump)
		for name, got := range map[string]float64{
			"t_ms": tr.length(PhaseMS), "t_hg": tr.length(PhaseGap), "t_rgb": tr.length(PhaseRGB), "t_cheb": tr.length(PhaseClump),
			"t_eagb": tr.length(PhaseEAGB), "t_tpagb": tr.length(PhaseTPAGB), "m_at_rgb_tip": flash.Mass,
			"l_rgb_tip": pow10(tip), "l_max_agb": pow10(most), "m_end": tr.FinalMass,
		} {
			near(t, got, r.Float(name), slack(name, m), "%s of %g Msun at Z %g", name, m, z)
		}
		_, pulses := tr.Start(PhaseTPAGB)
		if stripped := r.String("end") == "strip"; stripped == pulses {
			t.Errorf("%g Msun at Z %g: thermal pulses %v, stripped before %v", m, z, pulses, stripped)
		}
	}
}

// Numbers that the formulas' authors ship with their own program for 5 Msun at
// Z = 0.02: begin of phases and masses there. Their helium shell burns 8.0e-5,
// the printed 7.66e-5 used here; so 0.1 Myr and 0.007 Msun.
func TestAuthorsTrack(t *testing.T) {
	tr := track(t, formulas(t, 0.02), 5, 0.5)
	for _, c := range []struct {
		phase     Phase
		age, mass float64
	}{{PhaseGap, 104.0, 5}, {PhaseRGB, 104.4, 5}, {PhaseBlueLoop, 104.7, 4.998}, {PhaseEAGB, 120.1, 4.932}, {PhaseTPAGB, 120.9, 4.895}, {PhaseWD, 121.5, 0.997}} {
		s, ok := tr.Start(c.phase)
		if !ok {
			t.Errorf("no %s", c.phase)
			continue
		}
		check.Near(t, s.AgeMyr, c.age, 0.1, "age at the begin of the %s", c.phase)
		check.Near(t, s.Mass, c.mass, 0.007, "mass at the begin of the %s", c.phase)
	}
}

func TestTip(t *testing.T) {
	for z, want := range map[float64]float64{0.02: 2752, 0.004: 2503, 0.001: 2289, 1e-4: 1933} {
		f := formulas(t, z)
		near(t, f.ignition(1), want, 3e-4, "tip of 1 Msun at Z %g", z)
	}
	f := formulas(t, 0.02)
	check.Near(t, f.ignitionCore(1), 0.477, 0.0006, "core at the flash")
	check.Near(t, f.giantRadius(1, f.ignition(1)), 174, 0.6, "radius at the tip")
}

func TestHelium(t *testing.T) {
	f := formulas(t, 0.02)
	for m, want := range map[float64]float64{1: 131.5, 2: 293, 2.5: 166, 5: 15.4} {
		near(t, f.heliumTime(m, f.ignitionCore(m)), want, 0.004, "core helium burning of %g Msun", m)
	}
	b := f.burning(1)
	l, r, _ := b.at(1, 0)
	check.Near(t, l, 58.0, 0.06, "luminosity at the begin of the clump")
	check.Near(t, r, 11.95, 0.01, "radius there")
	check.Near(t, pow10(logTeff(math.Log10(l), math.Log10(r))), 4600, 30, "temperature there")
}

// Values of the formulas with a wind of 0.5 at Z = 0.02.
func TestFinalMasses(t *testing.T) {
	f := formulas(t, 0.02)
	for m, want := range map[float64]float64{1: 0.506, 1.5: 0.570, 2: 0.629, 3: 0.741, 4: 0.861, 5: 0.99, 6: 1.13, 7: 1.28} {
		check.Near(t, track(t, f, m, 0.5).FinalMass, want, 0.006, "final mass of %g Msun", m)
	}
	if e := track(t, f, 8, 0.5).End; e != EndExplosion {
		t.Errorf("8 Msun ends as %s", e)
	}
	if e := track(t, f, 7, 0.5).End; e != EndNeon {
		t.Errorf("7 Msun ends as %s", e)
	}
}

// Common practice, no source: what every observer of late-type stars takes for
// granted.
func TestTradeFacts(t *testing.T) {
	f := formulas(t, 0.02)
	limit := 0.0
	for m := 6.; m <= 11; m += 0.1 {
		if track(t, f, m, 0.5).End == EndExplosion {
			limit = m
			break
		}
	}
	if limit < 7 || limit > 10 {
		t.Errorf("the first star to explode has %g Msun, white dwarfs are left below 8 to 10", limit)
	}
	sun := track(t, f, 1, 0.5)
	check.Near(t, sun.FinalMass, 0.5, 0.08, "what 1 Msun leaves")
	if r := sun.length(PhaseClump) / sun.length(PhaseMS); r > 0.1 {
		t.Errorf("helium burning lasts %.3f of the main sequence", r)
	}
	check.Near(t, sun.length(PhaseRGB), 743, 8, "red giant branch of 1 Msun")
}

// From 1 to 9 solar masses; lighter stars have thin envelopes, whose bare cores
// differ from phase to phase, and heavier ones end their loops up to 0.01 dex
// larger than the branch they join.
func TestContinuity(t *testing.T) {
	for _, z := range []float64{1e-4, 0.001, 0.004, 0.02, 0.03} {
		f := formulas(t, z)
		for m := 0.5; m < 14; m *= 1.07 {
			s := f.sequence(m)
			l, r := s.at(s.end)
			check.Near(t, l, math.Log10(f.turnoffLum(m)), 1e-10, "log L at the end of the main sequence, %g Msun", m)
			check.Near(t, r, math.Max(math.Log10(f.turnoffRadius(m)), s.least), 1e-10, "log R there, %g Msun", m)
			tr := track(t, f, m, 0)
			for i := 1; i < len(tr.Points); i++ {
				p, q := tr.Points[i-1], tr.Points[i]
				if m < 1 || m > 9 || p.Phase.main() == q.Phase.main() || q.Phase >= PhasePostAGB || p.Phase == PhaseRGB && m < f.mHeF {
					continue
				}
				check.Near(t, q.LogL, p.LogL, 1e-9, "log L from %s to %s of %g Msun at Z %g", p.Phase, q.Phase, m, z)
				check.Near(t, q.LogR, p.LogR, 1e-9, "log R from %s to %s of %g Msun at Z %g", p.Phase, q.Phase, m, z)
			}
		}
	}
}

func TestLifetime(t *testing.T) {
	f := formulas(t, 0.02)
	age, err := f.Lifetime(1, 0.5)
	if err != nil {
		t.Fatal(err)
	}
	near(t, age, 10976+573.32+742.87+132.51+4.8339, 0.005, "lifetime of 1 Msun, sum of the reference durations")
	if _, err := f.Lifetime(math.NaN(), 0.5); !errors.Is(err, ErrMass) {
		t.Error(err)
	}
	if _, err := f.Lifetime(1, -1); !errors.Is(err, ErrLoss) {
		t.Error(err)
	}
}

func TestSuperwind(t *testing.T) {
	// 300 Rsun, 1 Msun, 6000 Lsun: period 544 d, the cap, and Reimers' wind beside it
	period := pow10(-2.07 + 1.94*math.Log10(300))
	check.Near(t, period, 544, 1, "period")
	near(t, superwind(6000, 300, 1), 8.16e-6, 0.01, "superwind")
	near(t, reimers(0.5, 6000, 300, 1), 3.6e-7, 0.01, "cool wind")
}

func TestCrossing(t *testing.T) {
	for m, kyr := range map[float64]float64{0.53: 10, 0.57: 3.5, 0.60: 1, 0.70: 0.3, 0.3: 30, 1.3: 0.03} {
		near(t, crossing(m), kyr/1000, 1e-5, "crossing of %g Msun", m)
	}
}

func TestPhases(t *testing.T) {
	for p, want := range map[Phase]targets.Stage{PhaseMS: targets.MS, PhaseGap: targets.SG, PhaseRGB: targets.RGB, PhaseClump: targets.RC,
		PhaseSecondClump: targets.RC, PhaseHB: targets.HB, PhaseSubdwarf: targets.SDB, PhaseBlueLoop: targets.RC, PhaseEAGB: targets.EAGB,
		PhaseTPAGB: targets.TPAGB, PhasePostAGB: targets.PAGB, PhaseCentral: targets.CSPN, PhaseHeMS: targets.SDB, PhaseWD: targets.Dwarf} {
		if got := p.Stage(2); got != want {
			t.Errorf("%s is %s, want %s", p, got, want)
		}
	}
	if PhaseBlueLoop.Stage(12) != targets.RSG || PhaseGap.Stage(12) != targets.SG {
		t.Error("stars above 8 Msun are supergiants after the first crossing")
	}
}

// sound demands that a track is finite and its ages never fall.
func sound(t *testing.T, tr Track) {
	t.Helper()
	age, mass := math.Inf(-1), math.Inf(1)
	for i, p := range tr.Points {
		for _, v := range []float64{p.AgeMyr, p.Mass, p.Core, p.LogL, p.LogT, p.LogR} {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("%g Msun, Z %g, wind %g: point %d not finite: %+v", tr.Mass, tr.Z, tr.Eta, i, p)
			}
		}
		if p.AgeMyr < age || p.Mass > mass+1e-12 || p.Core > p.Mass || p.Mass <= 0 {
			t.Fatalf("%g Msun, Z %g, wind %g: point %d out of order: %+v after %g Myr", tr.Mass, tr.Z, tr.Eta, i, p, age)
		}
		age, mass = p.AgeMyr, p.Mass
	}
	if len(tr.Points) < 50 || len(tr.Starts) < 3 || tr.BurnedMyr <= 0 {
		t.Fatalf("%g Msun, Z %g, wind %g: a track of %d points", tr.Mass, tr.Z, tr.Eta, len(tr.Points))
	}
	if tr.End != EndExplosion && !(tr.FinalMass > 0 && tr.FinalMass <= tr.Mass && tr.FinalMass < chandrasekhar) {
		t.Fatalf("%g Msun, Z %g, wind %g: leaves %g", tr.Mass, tr.Z, tr.Eta, tr.FinalMass)
	}
}

func TestTrackProperty(t *testing.T) {
	r := rand.New(rand.NewSource(7))
	for i := 0; i < 600; i++ {
		f := formulas(t, LeastZ*math.Pow(MostZ/LeastZ, r.Float64()))
		sound(t, track(t, f, LeastMass*math.Pow(MostMass/LeastMass, r.Float64()), 3*r.Float64()*r.Float64()))
	}
}

func FuzzTrack(f *testing.F) {
	f.Add(1., 0.02, 0.5)
	f.Add(0.1, 1e-4, 0.)
	f.Add(50., 0.03, 3.)
	f.Add(math.NaN(), math.Inf(1), -1.)
	f.Fuzz(func(t *testing.T, m, z, eta float64) {
		if fs, err := NewFormulas(z); err == nil {
			if tr, err := fs.Track(m, eta); err == nil {
				sound(t, tr)
			}
		}
	})
}

func BenchmarkTrack(b *testing.B) {
	f := formulas(b, 0.02)
	for i := 0; i < b.N; i++ {
		track(b, f, 1.3, 0.4)
	}
}
