package exposure

import (
	"math"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/photon"
	"evenfall/targets"
)

// near checks one step of a worked case to its last digit.
func near(t *testing.T, got, want float64, what string) {
	t.Helper()
	check.Near(t, got, want, 1e-4*math.Abs(want), "%s", what)
}

// TestMiraWhole: a Mira at its maximum of V 8.6 for S/N 300, each number worked
// out from the formulas apart from this program, as in photon's own test.
func TestMiraWhole(t *testing.T) {
	s := set(t, img15(), "V", 8.6, 1.3, 0.13, 20.9, 1.2)
	s.Goal = Goal{SNR: 300}
	a := solved(t, s)
	near(t, a.work.image.FWHMArcsec, 1.50533, "image, arcsec")
	near(t, a.work.rates.SourceES, 1206574, "source, e/s")
	near(t, a.work.rates.SkyES, 3.09267, "sky, e/s a pixel")
	near(t, a.work.rates.Pixels, 37.1924, "pixels")
	near(t, a.work.rates.Scint1, 3.97488e-3, "scintillation in 1 s")
	near(t, a.BookedS, 2.338515, "booked, s")
	near(t, a.ClockS, 2.338515+45, "by the clock, s")
	near(t, a.SNR, 300, "S/N")
	if a.Frames != 3 || a.LimitedBy != photon.LimitScintillation || a.Per != "total" || a.PReached != targets.Known(1) {
		t.Errorf("%+v", a)
	}
	s.Goal = Goal{ExposureS: 0.2, Frames: 1}
	near(t, solved(t, s).SaturatesAt.Value, 6.884454, "saturates in the shortest exposure, V")
}

// TestNebulaWhole: [O III] of a nebula of 1e-13 erg/s/cm2 and 20 arcsec, S/N 30
// over 10 square arcsec, without a floor.
func TestNebulaWhole(t *testing.T) {
	near(t, FluxOf(astro.Mags(-2.5*-13-13.74)), 1e-13, "flux")
	i := img15()
	s := set(t, i, "O3", -2.5*-13-13.74, 1.1, 0.16, 21.7, 1.2)
	m := *s.Mode
	m.RangeNm = [2]float64{497.7, 503.7} // 6 nm about 500.7
	s.Mode = &m
	s.Source.Nebula = &Nebula{DiamArcsec: 20}
	s.Floor = targets.Known(0)
	s.Goal = Goal{SNR: 30, AreaArcsec2: 10}
	a := solved(t, s)
	near(t, a.work.rates.SourceES, 3.858099, "line, e/s")
	near(t, a.work.rates.SkyES, 0.0950391, "sky, e/s a pixel")
	near(t, a.work.rates.Pixels, 81.63265, "pixels")
	near(t, a.BookedS, 1062.828, "booked, s")
	if a.Frames != 3 || a.LimitedBy != photon.LimitSky {
		t.Errorf("%+v", a)
	}
	s.Goal.Frames = 1
	near(t, solved(t, s).BookedS, 857.1470, "one frame, s")
	s.Floor, s.Goal.Frames = targets.Measure{}, 0
	if b := solved(t, s); !(b.BookedS > a.BookedS) {
		t.Errorf("a floor shortens it: %v s", b.BookedS)
	}
}

// TestDwarfWhole: a white dwarf of g 18.9 every 2 s against three stars.
func TestDwarfWhole(t *testing.T) {
	s := set(t, quick(), "blue", 18.9, 1.15, 0.19, 21.9, 1)
	s.Goal = Goal{ExposureS: 1.95, Per: "frame", SNR: 5, Comparisons: 3}
	a := solved(t, s)
	near(t, a.work.rates.SourceES, 625.1630, "source, e/s")
	near(t, a.work.rates.Scint1, 2.304371e-3, "scintillation against three stars")
	near(t, a.SNR, 28.71169, "S/N")
	near(t, a.ReachesMag.Value, 21.30122, "faintest for S/N 5, g")
	b := a.work.got.Budget
	near(t, b.Photons/b.Sky, 1219.068/453.5661, "photons against sky")
	if a.LimitedBy != photon.LimitPhotons || a.Per != "frame" || a.EachS != 1.95 {
		t.Errorf("%+v", a)
	}
	s.Goal = Goal{DurationS: 3600, CycleS: 2, Comparisons: 3}
	if a := solved(t, s); a.Frames != 1800 || math.Abs(a.EachS-1.95) > 1e-12 || math.Abs(a.ClockS-3600) > 1e-6 {
		t.Errorf("an hour every 2 s: %+v", a)
	}
}

// TestWorkedExamples: of imaging, spectra and nebulae, worked out apart from
// this program, without scintillation and floor but in the fast photometry.
func TestWorkedExamples(t *testing.T) {
	zero := targets.Known(0)
	calm := 1e-9 // turbulence
	e1 := set(t, img15(), "V", 20, 1.2, 0.13, 21.6, 1.1)
	e1.Floor, e1.Turbulence = zero, calm
	e1.Goal = Goal{ExposureS: 300, Frames: 1}
	check.Near(t, solved(t, e1).SNR, 61.53, 0.005, "V 20 in 300 s")
	e1.Source.Light = Steady(astro.Mags(18))
	e1.Goal = Goal{SNR: 100, Frames: 1}
	check.Near(t, solved(t, e1).BookedS, 61.907, 0.0005, "V 18 to S/N 100")
	e1.Turbulence = 1.5
	check.Near(t, solved(t, e1).BookedS, 62.026, 0.0005, "the same with scintillation")

	e3 := set(t, spec25(), "low", abOf(17), 1.2, 0.13, 21.6, 1.0)
	e3.Goal = Goal{ExposureS: 1800, Frames: 1, Per: "pixel", SlitArcsec: 1.2}
	check.Near(t, solved(t, e3).SNR, 54.69, 0.005, "a spectrum, per pixel")
	e3.Goal.Per = ""
	a := solved(t, e3)
	check.Near(t, a.SNR, 119.8, 0.06, "per element") // 54.69 x root 4.8
	if a.Per != "element" || a.SlitArcsec != 1.2 {
		t.Errorf("%+v", a)
	}

	mag := func(surface, area float64) float64 { return -2.5*math.Log10(surface*area) - 13.74 }
	size := math.Pi / 4 * 100 * 100
	e4 := set(t, img15(), "O3", mag(1e-15, size), 1.2, 0.16, 21.9, 1.0)
	e4.Source.Nebula, e4.Floor = &Nebula{DiamArcsec: 100}, zero
	for area, want := range map[float64]float64{1: 19.73, 100: 197.3} {
		e4.Goal = Goal{ExposureS: 600, Frames: 1, AreaArcsec2: area}
		check.Near(t, solved(t, e4).SNR, want, 0.001*want, "[O III] over %v square arcsec", area)
	}
	e5 := set(t, spec25(), "low", mag(1e-15, size), 1.2, 0.08, 21.2, 1.0)
	e5.Source.Band, e5.Source.Nebula = "Ha", &Nebula{DiamArcsec: 100}
	e5.Goal = Goal{ExposureS: 1800, Frames: 1, AreaArcsec2: 6, SlitArcsec: 1.2}
	check.Near(t, solved(t, e5).SNR, 179.5, 0.25, "Ha in a slit")

	e6 := set(t, quick(), "blue", 18, 1.3, 0.19, 22.2, 0.9)
	e6.Floor = zero
	e6.Goal = Goal{ExposureS: 5, Per: "frame"}
	check.Near(t, solved(t, e6).SNR, 78.04, 0.005, "a white dwarf in 5 s")
}

// TestAdvice: a star of 6 and one of 3 in frames of 2 s.
func TestAdvice(t *testing.T) {
	s := set(t, img15(), "V", 6, 1.2, 0.13, 21.6, 1.1)
	a, err := Advise(s, 2)
	if err != nil || a == nil {
		t.Fatal(a, err)
	}
	check.Near(t, a.DefocusArcsec, 9.86, 0.01, "V 6 out of focus, arcsec")
	s.Source.Light = Steady(astro.Mags(3))
	a, err = Advise(s, 2)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, a.Neutral, 449, 1, "V 3: grey filter, times")
	check.Near(t, a.Density, 2.65, 0.005, "its density")
	check.Near(t, a.MaskM, 1.5/math.Sqrt(449), 0.001, "mask")
	s.Goal.SNR = 100
	if b := Solve(s); b.Err == nil || b.Advice == nil || len(b.Words) < 5 || b.LimitedBy != photon.LimitSaturation || !b.SaturatesAt.Known {
		t.Errorf("V 3: %+v", b)
	}
	s.Source.Light = Steady(astro.Mags(15))
	if a, err := Advise(s, 2); a != nil || err != nil {
		t.Errorf("V 15: %+v, %v", a, err)
	}
}
