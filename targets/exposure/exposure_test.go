package exposure

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/photon"
	"evenfall/astro/skyglow"
	"evenfall/targets"
	"evenfall/targets/light"
)

// TestSpread: a forecast comes back at its quantiles, states and all.
func TestSpread(t *testing.T) {
	f := light.Forecast{Known: true, Mag: astro.Mags(9), Lo: astro.Mags(8.2), Hi: astro.Mags(10.5), Level: 0.8}
	s := FromForecast(f)
	for p, want := range map[float64]float64{0.1: 8.2, 0.5: 9, 0.9: 10.5} {
		check.Near(t, s.Quantile(p).Mags(), want, 1e-9, "quantile %v", p)
		check.Near(t, s.CDF(astro.Mags(want)), p, 1e-12, "probability of %v", want)
	}
	two := light.Forecast{Known: true, Mag: astro.Mags(15), Lo: astro.Mags(10), Hi: astro.Mags(15.3), Level: 0.8, States: []light.StateForecast{
		{Name: "quiet", P: 0.8, Mag: astro.Mags(15), Lo: astro.Mags(14.8), Hi: astro.Mags(15.2)},
		{Name: "outburst", P: 0.2, Mag: astro.Mags(10), Lo: astro.Mags(9.5), Hi: astro.Mags(10.5)}}}
	m := FromForecast(two)
	check.Near(t, m.CDF(astro.Mags(12.5)), 0.2, 1e-6, "outburst")
	before := math.Inf(-1)
	for p := 0.01; p < 1; p += 0.01 {
		q := m.Quantile(p)
		check.Near(t, m.CDF(q), p, 1e-6, "back from quantile %v", p)
		if q.Mags() < before {
			t.Errorf("quantile %v: %v after %v", p, q.Mags(), before)
		}
		before = q.Mags()
	}
	if v := (Spread{}).Quantile(0.5).Mags(); !math.IsNaN(v) {
		t.Error(v)
	}
	if v := FromForecast(light.Forecast{}).Quantile(0.5).Mags(); !math.IsNaN(v) {
		t.Error(v)
	}
	if c := Steady(astro.Mags(5)); c.CDF(astro.Mags(4)) != 0 || c.CDF(astro.Mags(6)) != 1 || c.Quantile(0.2).Mags() != 5 {
		t.Error("a brightness known exactly")
	}
}

// TestPercentiles: the median decides the time booked, the bright end the
// frames, the faint end what it may come to; another percentile can be set.
func TestPercentiles(t *testing.T) {
	s := set(t, img15(), "V", 12, 1.2, 0.13, 21.6, 1.1)
	s.Goal = Goal{SNR: 200}
	sharp := solved(t, s)
	s.Source.Light = FromForecast(light.Forecast{Known: true, Mag: astro.Mags(12), Lo: astro.Mags(8), Hi: astro.Mags(13), Level: 0.8})
	a := solved(t, s)
	if a.BookedS < sharp.BookedS || !(a.EachS < sharp.EachS) {
		t.Errorf("the bright end does not shorten the frames: %v x %v, sharp %v x %v", a.Frames, a.EachS, sharp.Frames, sharp.EachS)
	}
	check.Near(t, a.PReached.Value, 0.5, 0.05, "probability at the median")
	check.Near(t, a.MedianS.Value, a.BookedS, 1e-12, "median")
	if !(a.SaturatesAt.Value <= 8+1e-9) || !(a.UpToS.Value > 1.9*a.BookedS) {
		t.Errorf("%+v", a)
	}
	if !slices.ContainsFunc(a.Words, func(w string) bool { return strings.HasPrefix(w, "could need up to") }) {
		t.Error(a.Words)
	}
	s.Goal.Percentile = 0.9
	b := solved(t, s)
	check.Near(t, b.PReached.Value, 0.9, 0.02, "probability at the 90th percentile")
	check.Near(t, b.BookedS, a.UpToS.Value, 1e-6*b.BookedS, "booked at the 90th percentile")
	check.Near(t, b.MedianS.Value, a.BookedS, 1e-6*a.BookedS, "its median")
	s.Goal = Goal{SNR: 200, ExposureS: a.UpToS.Value}
	c := solved(t, s)
	if !(c.PReached.Value > 0.85) || c.BookedS != s.Goal.ExposureS || c.MedianS == (targets.Measure{}) {
		t.Errorf("a time given: %+v", c)
	}
}

// TestMeasured: the magnitude typed at the telescope replaces the forecast.
func TestMeasured(t *testing.T) {
	s := set(t, img15(), "V", 12, 1.2, 0.13, 21.6, 1.1)
	s.Goal = Goal{SNR: 200}
	b := solved(t, s.WithMeasured(astro.Mags(13.5), 0.05))
	s.Source.Light = Normal(astro.Mags(13.5), 0.05)
	check.Near(t, b.BookedS, solved(t, s).BookedS, 1e-12, "booked")
	if !strings.Contains(b.Words[0], "13.50 measured") && !slices.ContainsFunc(b.Words, func(w string) bool { return strings.Contains(w, "13.50 measured") }) {
		t.Error(b.Words)
	}
}

// TestMonotone: at a fixed number of frames a fainter star, more air, a brighter
// sky, worse seeing and more S/N never take less time.
func TestMonotone(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 1))
	n := 0
	for n < 2000 {
		i, mode := img15(), "V"
		if rng.IntN(2) == 0 {
			i, mode = spec25(), "low"
		}
		s := set(t, i, mode, 8+12*rng.Float64(), 1+rng.Float64(), 0.13, 18+4*rng.Float64(), 0.6+2*rng.Float64())
		s.Goal = Goal{SNR: 5 + 100*rng.Float64(), Frames: 1 + rng.IntN(9), SlitArcsec: 1.2}
		if i.Kind == "slit" {
			s.Goal.Per = "pixel" // of an element worse seeing makes more pixels
		} else {
			s.Goal.SlitArcsec = 0
		}
		a := Solve(s)
		if a.Err != nil {
			continue
		}
		n++
		if a.SNR < s.Goal.SNR*(1-1e-3) || a.SNR > s.Goal.SNR*(1+1e-3) && a.EachS > i.ShutterMinS*(1+1e-9) {
			t.Fatalf("S/N %v, wanted %v", a.SNR, s.Goal.SNR)
		}
		for what, change := range map[string]func(*Setting){
			"fainter": func(s *Setting) { s.Source.Light = Steady(a.Mag.Fainter(0.1)) },
			"air":     func(s *Setting) { s.Airmass += 0.1 },
			"sky":     func(s *Setting) { s.Sky = skyOf(a.Sky.Total.MagArcsec2() - 0.2) },
			"seeing":  func(s *Setting) { s.SeeingArcsec *= 1.1 },
			"more":    func(s *Setting) { s.Goal.SNR *= 1.01 },
		} {
			more := s
			change(&more)
			if b := Solve(more); b.Err == nil && b.BookedS < a.BookedS*(1-1e-9) {
				t.Fatalf("%s: %v s after %v: %+v", what, b.BookedS, a.BookedS, s.Goal)
			}
		}
	}
}

// TestMoonCost: moonlight is said in times of dark time, and is what the sky
// without it takes.
func TestMoonCost(t *testing.T) {
	s := set(t, img15(), "V", 19, 1.2, 0.13, 0, 1.1)
	sk, dir := sky(t, 50, -30, 40)
	s.Sky = func(b skyglow.Band) (skyglow.Brightness, error) { return sk.At(dir, b) }
	s.Goal = Goal{SNR: 30, Frames: 1}
	a := solved(t, s)
	dark, _ := a.Sky.Without(skyglow.PartMoon)
	s.Sky = skyOf(dark.MagArcsec2())
	check.Near(t, a.MoonTimes.Value, a.BookedS/solved(t, s).BookedS, 1e-6, "times dark time")
	if a.MoonTimes.Value < 1.5 || !slices.ContainsFunc(a.Words, func(w string) bool { return strings.HasPrefix(w, "moonlight costs") }) {
		t.Errorf("%v %v", a.MoonTimes, a.Words)
	}
}

// TestReasons: what is missing is told by its kind, and by what to write.
func TestReasons(t *testing.T) {
	for want, change := range map[string]func(*Setting){
		"no read noise: write read_noise_e = 5, electrons a pixel":          func(s *Setting) { s.Instrument.ReadNoiseE = 0 },
		"no zero point for band V: write zero_point_e_s or throughput":      func(s *Setting) { m := *s.Mode; m.Throughput = targets.Measure{}; s.Mode = &m },
		"no instrument: write [[instrument]] and its modes in run.toml":     func(s *Setting) { s.Instrument = nil },
		"below the horizon: no exposure":                                    func(s *Setting) { s.Airmass = 0 },
		"the sky is not known":                                              func(s *Setting) { s.Sky = nil },
		"neither S/N nor time is wanted: write snr or exposure_s":           func(s *Setting) { s.Goal = Goal{} },
		"no brightness is known":                                            func(s *Setting) { s.Source.Light = Spread{} },
		"snr_per \"pixle\" means nothing: write pixel, element":             func(s *Setting) { s.Goal.Per = "pixle" },
		"S/N per pixel is meant of spectra: write total or frame":           func(s *Setting) { s.Goal.Per = "pixel" },
		"S/N 600 is out of reach: flat field and calibration keep it below": func(s *Setting) { s.Goal.SNR = 600 },
		"the brightness in K is known, the mode is in V":                    func(s *Setting) { s.Source.Band = "K" },
		"only its flux in O3 is known, not its light in V":                  func(s *Setting) { s.Source.Band = "O3" },
		"saturates at V < 3":                                                func(s *Setting) { s.Source.Light = Steady(astro.Mags(-2)) },
		"seeing":                                                            func(s *Setting) { s.SeeingArcsec = 0 },
		"dark current":                                                      func(s *Setting) { s.Instrument.DarkES = -1 },
	} {
		s := set(t, img15(), "V", 12, 1.2, 0.13, 21.6, 1.1)
		if want == "saturates at V < 3" {
			s.Instrument.ShutterMinS = 0.005
		}
		s.Goal = Goal{SNR: 50}
		change(&s)
		a := Solve(s)
		var r *Reason
		if a.Err == nil || !errors.As(a.Err, &r) || (r.Code == "") != strings.HasPrefix(want, "no brightness") && !strings.HasPrefix(want, "the brightness") || !strings.Contains(a.Err.Error(), want) {
			t.Errorf("%q: %v", want, a.Err)
		}
	}
}

// TestZeroPoint: a measured zero point takes precedence, a correction counts
// where it was taken over.
func TestZeroPoint(t *testing.T) {
	s := set(t, img15(), "V", 18, 1.2, 0.13, 21.6, 1.1)
	s.Goal = Goal{ExposureS: 60, Frames: 1}
	m := *s.Mode
	m.ZeroPointES = targets.Known(1e9)
	s.Mode = &m
	a := solved(t, s)
	check.Near(t, a.work.zeroES, 1e9, 1e-3, "zero point")
	s.Correction = Correction{ZeroPointMag: 0.1, ExtinctionMag: 0.05}
	b := solved(t, s)
	check.Near(t, b.work.zeroES, 1e9*math.Pow(10, 0.04), 1, "corrected")
	check.Near(t, b.work.through.Extinction, 0.18, 1e-12, "extinction")
}

// TestColours: a spectrum of a red giant is brighter in the red, and guarded
// there.
func TestColours(t *testing.T) {
	listed := map[targets.Band]float64{"V": 9, "I": 4, "R": 6.5}
	d, ok := shapeAt(listed, "V", 545)
	if !ok || math.Abs(d) > 1e-9 {
		t.Error(d, ok)
	}
	d, ok = shapeAt(listed, "V", 798)
	check.Near(t, d, 4+0.442-(9-0.001), 1e-9, "V to I in AB")
	if _, far := shapeAt(listed, "V", 1000); far || !ok {
		t.Error("beyond the last band")
	}
	s := set(t, spec25(), "low", 14, 1.2, 0.13, 21.6, 1)
	s.Goal = Goal{SNR: 500, SlitArcsec: 1.2}
	grey := solved(t, s)
	s.Source.Colours = listed
	red := solved(t, s)
	if !(red.EachS < grey.EachS) || !(red.work.rates.PeakES > 10*grey.work.rates.PeakES) {
		t.Errorf("%v s and %v s", red.EachS, grey.EachS)
	}
	s = set(t, img15(), "I", 14, 1.2, 0.05, 20, 1)
	s.Source.Band, s.Source.Colours, s.Goal = "V", listed, Goal{SNR: 100}
	a := solved(t, s)
	s.Source = Source{Band: "I", Light: Steady(astro.Mags(9))}
	check.Near(t, a.BookedS, solved(t, s).BookedS, 1e-9, "in I by the colour")
}

// TestColoursOf: of a red giant the red follows from its type, and a star in a
// narrow filter is measured by its continuum.
func TestColoursOf(t *testing.T) {
	giant := targets.Target{Kind: targets.Giant, Mags: map[targets.Band]targets.Measure{"V": targets.Known(8)}, Physics: targets.Physics{SpType: "M4III"}}
	c := ColoursOf(&giant)
	if !(c["I"] < 6) || c["V"] != 8 {
		t.Error(c)
	}
	if ColoursOf(&targets.Target{}) != nil {
		t.Error("colours of nothing")
	}
	s := set(t, img15(), "Ha", 10, 1.2, 0.09, 21, 1)
	s.Source.Band, s.Goal = "R", Goal{SNR: 100}
	a := solved(t, s)
	// R is 0.184 fainter in AB; 6.5 nm of the continuum
	want := 5.47987e6 / 6562.8 * 65 * 15708 * 0.40 * math.Pow(10, -0.4*(10.184+0.09*1.2))
	check.Near(t, a.work.rates.SourceES/a.work.pointShare(), want, 1e-4*want, "continuum, e/s")
	s.Source.Band = "p"
	if b := Solve(s); b.Err == nil {
		t.Error("photographic magnitudes carried to Ha")
	}
	p := set(t, img15(), "B", 10, 1.2, 0.23, 21, 1)
	p.Source.Band, p.Goal = "p", Goal{SNR: 100}
	solved(t, p)
}

// TestOtherLine: H alpha from H beta by case B, and back.
func TestOtherLine(t *testing.T) {
	mag := func(f float64) float64 { return -2.5*math.Log10(f) - 13.74 }
	s := set(t, img15(), "Ha", mag(1e-11), 1.2, 0.09, 21, 1)
	s.Source.Band, s.Source.Nebula, s.Goal = "Hb", &Nebula{DiamArcsec: 30, CHb: 1}, Goal{SNR: 30, AreaArcsec2: 10}
	a := solved(t, s)
	s.Source.Band, s.Source.Light = "Ha", Steady(astro.Mags(mag(1e-11*2.86*math.Pow(10, 0.2975))))
	check.Near(t, a.BookedS, solved(t, s).BookedS, 1e-9*a.BookedS, "booked")
	s.Source.Band = "O3"
	if b := Solve(s); b.Err == nil {
		t.Error("Ha from [O III]")
	}
}

// TestCompanion: the share of a neighbour's light in the aperture, against a sum
// over a grid, and its sky and peak.
func TestCompanion(t *testing.T) {
	w := &work{image: photon.Image{FWHMArcsec: 1.3}}
	for _, c := range [][2]float64{{1, 0.5}, {1, 1}, {1, 2.5}, {1, 8}, {0.2, 3}} {
		sum, n := 0.0, 400
		h := 2 * c[0] / float64(n)
		for i := range n {
			for j := range n {
				x, y := -c[0]+(float64(i)+0.5)*h, -c[0]+(float64(j)+0.5)*h
				if x*x+y*y > c[0]*c[0] {
					continue
				}
				rho := math.Hypot(x-c[1], y)
				d := 1e-4
				sum += h * h * (w.image.Within(rho+d) - w.image.Within(math.Max(0, rho-d))) / (math.Pi * ((rho+d)*(rho+d) - math.Max(0, rho-d)*math.Max(0, rho-d)))
			}
		}
		check.Near(t, w.inCircle(c[0], c[1]), sum, 0.01*sum, "circle of %v at %v", c[0], c[1])
	}
	s := set(t, img15(), "V", 14, 1.2, 0.13, 21.6, 1.1)
	s.Goal = Goal{SNR: 100, Frames: 1}
	alone := solved(t, s)
	s.Source.Companion = &Companion{astro.Mags(9), 5}
	a := solved(t, s)
	if !(a.BookedS > alone.BookedS) || !(a.work.otherPeak > 0) || !slices.ContainsFunc(a.Words, func(w string) bool { return strings.HasPrefix(w, "in the glare of") }) {
		t.Errorf("%v s with, %v s without: %v", a.BookedS, alone.BookedS, a.Words)
	}
}

// TestGoalOf: what a request says.
func TestGoalOf(t *testing.T) {
	r := targets.Request{SNR: targets.Known(60), SNRPer: "element", DurationMin: targets.Known(60), Binning: "1x2", PositionAngle: "30", AtNm: targets.Known(656)}
	g, err := GoalOf(&r, "slit")
	if err != nil || g.SNR != 60 || g.DurationS != 3600 || g.Binning != [2]int{1, 2} || g.Per != "element" || g.AtNm != 656 {
		t.Errorf("%+v %v", g, err)
	}
	for text, want := range map[string][2]int{"": {1, 1}, "2": {2, 2}, " 3 x 1": {3, 1}} {
		if b, err := ParseBinning(text); err != nil || b != want {
			t.Error(text, b, err)
		}
	}
	for _, bad := range []string{"0", "2x", "x", "-1x2", "1000"} {
		if _, err := ParseBinning(bad); err == nil {
			t.Error(bad)
		}
	}
	for _, c := range []struct {
		t    targets.Target
		want float64
	}{{targets.Target{}, 10}, {targets.Target{Var: targets.Variability{PulsationS: targets.Known(200)}}, 20},
		{targets.Target{Var: targets.Variability{EclipseMin: targets.Known(5)}}, 4}, {targets.Target{Var: targets.Variability{PulsationS: targets.Known(1e9)}}, 600}} {
		if got := CycleOf(&c.t); got != c.want {
			t.Errorf("%+v: a cycle of %v s, want %v", c.t.Var, got, c.want)
		}
	}
	r.PositionAngle = "up"
	if _, err := GoalOf(&r, "slit"); err == nil {
		t.Error("a position angle of up")
	}
}

// TestSteps: each has all five parts.
func TestSteps(t *testing.T) {
	s := set(t, img15(), "V", 12, 1.2, 0.13, 21.6, 1.1)
	s.Goal, s.Source.Light = Goal{SNR: 200}, Normal(astro.Mags(12), 0.5)
	steps := solved(t, s).Steps()
	if len(steps) < 9 {
		t.Fatal(len(steps))
	}
	for _, x := range steps {
		if x.What == "" || x.Formula == "" || x.Inputs == "" || x.Result == "" || x.Source == "" {
			t.Errorf("%+v", x)
		}
	}
	if Solve(Setting{}).Steps() != nil {
		t.Error("steps of nothing")
	}
}

// TestBinning: pixels twice as large fill as many times faster.
func TestBinning(t *testing.T) {
	s := set(t, img15(), "V", 20, 1.2, 0.13, 21.6, 1.1)
	s.Goal = Goal{ExposureS: 300, Frames: 1}
	a := solved(t, s)
	s.Goal.Binning = [2]int{2, 2}
	b := solved(t, s)
	check.Near(t, b.work.rates.SkyES, 4*a.work.rates.SkyES, 1e-9, "sky on a pixel")
	if !(b.SNR > a.SNR) {
		t.Errorf("less read noise gives S/N %v after %v", b.SNR, a.SNR)
	}
}

// TestTogether: two beams share their frames, kept short for the brighter.
func TestTogether(t *testing.T) {
	blue := set(t, quick(), "blue", 13, 1.2, 0.19, 22, 1)
	red := set(t, quick(), "red", 9, 1.2, 0.1, 21, 1)
	blue.Goal = Goal{DurationS: 600}
	red.Goal = blue.Goal
	alone := solved(t, blue)
	both := Together(blue, red)
	if len(both) != 2 || both[0].Err != nil || both[1].Err != nil || both[0].EachS != both[1].EachS || both[0].Frames != both[1].Frames || !(both[0].EachS < alone.EachS) {
		t.Fatalf("%+v", both)
	}
	if both[1].SaturatesAt.Value > 9+1e-6 {
		t.Errorf("the red beam saturates at %v", both[1].SaturatesAt)
	}
}

// TestCost: the time alone is that of the answer.
func TestCost(t *testing.T) {
	s := set(t, img15(), "V", 15, 1.2, 0.13, 21.6, 1.1)
	s.Goal.SNR = 200
	a := solved(t, s)
	booked, clock, err := Cost(s)
	if err != nil || booked != a.BookedS || clock != a.ClockS {
		t.Errorf("%v %v %v: %+v", booked, clock, err, a)
	}
	if _, _, err := Cost(Setting{}); err == nil {
		t.Error("a cost of nothing")
	}
}

func FuzzSolve(f *testing.F) {
	f.Add(8.6, 0.5, 1.3, 0.13, 20.9, 1.2, 300.0, 0.0, 3, byte(0))
	f.Add(math.NaN(), -1.0, 0.0, -5.0, 1e9, 0.0, -1.0, math.Inf(1), -3, byte(77))
	f.Fuzz(func(t *testing.T, mag, err, x, k, mu, seeing, snr, exposure float64, frames int, how byte) {
		mode := []string{"V", "O3", "low", "blue"}[how%4]
		inst := img15()
		switch mode {
		case "low":
			inst = spec25()
		case "blue":
			inst = quick()
		}
		s := set(t, inst, mode, mag, x, k, mu, seeing)
		s.Source.Light = Normal(astro.Mags(mag), err)
		if how&4 != 0 {
			s.Source.Nebula, s.Source.Band = &Nebula{DiamArcsec: seeing * 20}, "O3"
		}
		if how&8 != 0 {
			s.Source.Companion = &Companion{astro.Mags(mag - 2), seeing}
		}
		if how&16 != 0 {
			s.Pointing = &Pointing{astro.Deg(k), astro.Deg(mu), astro.Deg(snr)}
			s.Goal.PA = "12"
		}
		per := []string{"", "total", "frame", "pixel", "element"}[int(how>>5)%5]
		s.Goal.SNR, s.Goal.ExposureS, s.Goal.Frames, s.Goal.Per = snr, exposure, frames, per
		a := Solve(s)
		if a.Err == nil && (!finite(a.BookedS, a.SNR, a.EachS) || a.BookedS <= 0 || a.Frames < 1) {
			t.Fatalf("%+v", a)
		}
		if p := a.PReached; p.Known && !(p.Value >= 0 && p.Value <= 1) {
			t.Fatalf("%+v", a)
		}
		a.Steps()
		PlanSlit(s, a)
		Advise(s, exposure)
		BrightStart(s, 1.2)
	})
}

// BenchmarkSkyAndExposure: sky and exposure of one target and moment.
func BenchmarkSkyAndExposure(b *testing.B) {
	sk, dir := sky(b, 50, -30, 40)
	band := func(band skyglow.Band) (skyglow.Brightness, error) { return sk.At(dir, band) }
	for name, s := range map[string]Setting{"image": set(b, img15(), "V", 15, 1.2, 0.13, 0, 1.1), "spectrum": set(b, spec25(), "low", 15, 1.2, 0.13, 0, 1.1),
		"series": set(b, quick(), "blue", 17, 1.2, 0.19, 0, 1.1)} {
		s.Sky, s.ExtinctionMag = band, targets.Measure{}
		s.Source.Light = Normal(astro.Mags(15), 0.3)
		s.Goal.SNR = 100
		if name == "series" {
			s.Goal = Goal{DurationS: 3600}
		}
		s.Pointing = &Pointing{astro.Deg(-29), astro.Deg(-20), astro.Hours(1)}
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for range b.N {
				if a := Solve(s); a.Err != nil {
					b.Fatal(a.Err)
				}
			}
		})
	}
	s := set(b, img15(), "V", 15, 1.2, 0.13, 0, 1.1)
	s.Sky, s.Source.Light, s.Goal.SNR = band, Normal(astro.Mags(15), 0.3), 100
	b.Run("cost alone", func(b *testing.B) {
		for range b.N {
			if _, _, err := Cost(s); err != nil {
				b.Fatal(err)
			}
		}
	})
}
