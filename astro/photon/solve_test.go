package photon

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/skyglow"
)

// randomSetup draws a set-up of anything from a small imager to a large
// spectrograph, faint and bright.
func randomSetup(rng *rand.Rand) (Rates, Detector) {
	span := func(lo, hi float64) float64 { return lo * math.Pow(hi/lo, rng.Float64()) }
	r := Rates{SourceES: span(1e-3, 1e6), SkyES: span(1e-4, 1e2), Pixels: span(1, 1e3)}
	r.PeakES = r.SourceES * span(0.01, 0.5)
	if rng.IntN(4) > 0 {
		r.BackPixels = 10 * r.Pixels
	}
	if rng.IntN(2) == 0 {
		r.Element = span(1, 10)
	}
	if rng.IntN(3) > 0 {
		r.Scint1, r.ScintCapS = span(1e-4, 1e-2), span(0.01, 1)
	}
	if rng.IntN(3) > 0 {
		r.Floor = span(1e-5, 2e-3)
	}
	return r, Detector{ReadNoiseE: span(0.3, 15), DarkES: span(1e-4, 0.1), GainEADU: span(0.5, 5), LinearE: span(2e4, 5e5), DeadS: 1}
}

// TestSolve: at a fixed number of frames the time found gives the wanted S/N to
// 0.1 per cent, over 10,000 random set-ups.
func TestSolve(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 1))
	worst, solved := 0.0, 0
	for solved < 10_000 {
		r, d := randomSetup(rng)
		ask := Ask{SNR: 3 * math.Pow(300, rng.Float64()), Frames: 1 + rng.IntN(30), Per: []Per{PerTotal, PerPixel, PerElement, PerFrame}[rng.IntN(4)]}
		if ask.Per == PerFrame {
			d.MaxFrameS = 1e6
		}
		a, err := Solve(r, d, ask)
		if errors.Is(err, ErrFloor) && ask.SNR*r.Floor >= 1 || errors.Is(err, ErrFrameLong) || errors.Is(err, ErrFrames) {
			continue
		}
		if err != nil {
			t.Fatalf("%+v %+v %+v: %v", r, d, ask, err)
		}
		solved++
		worst = math.Max(worst, math.Abs(a.SNR/ask.SNR-1))
		back, err := Solve(r, d, Ask{TotalS: a.TotalS(), Frames: ask.Frames, SNR: ask.SNR, Per: ask.Per})
		if err != nil || !back.Reached || math.Abs(back.SNR/a.SNR-1) > 1e-12 {
			t.Fatalf("S/N for time: %+v, %v", back, err)
		}
	}
	t.Logf("%d solved, S/N off by %.1e at most", solved, worst)
	check.Near(t, worst, 0, 1e-3, "S/N that the time gives")
}

// TestMonotone: at a fixed number of frames more time never lowers S/N.
func TestMonotone(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 2))
	for range 2000 {
		r, d := randomSetup(rng)
		k, before := 1+rng.IntN(20), 0.0
		for each := 1e-3; each < 1e4; each *= 1.3 {
			b, err := Noise(r, d, Exposure{k, each})
			if err != nil {
				t.Fatal(err)
			}
			if b.SNR() < before*(1-1e-12) {
				t.Fatalf("%+v %+v: %v s in %d frames: %v after %v", r, d, each, k, b.SNR(), before)
			}
			before = b.SNR()
		}
	}
}

// TestSmallest: with a free number of frames no other number, allowed by the
// rule of frames, reaches the S/N in less time; and no smaller total time,
// divided by the rule, reaches it.
func TestSmallest(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 3))
	found := 0
	for range 3000 {
		r, d := randomSetup(rng)
		want := 3 * math.Pow(100, rng.Float64())
		if rng.IntN(2) == 0 {
			d.ShutterStepS, d.ShutterMinS = 0.01, 0.01
		}
		a, err := Solve(r, d, Ask{SNR: want})
		if err != nil {
			if !errors.Is(err, ErrFloor) && !errors.Is(err, ErrFrames) && !errors.Is(err, ErrSaturates) {
				t.Fatal(err)
			}
			continue
		}
		found++
		if !a.Reached || a.Saturated || a.Frames < FramesFor(r, d, a.TotalS()) {
			t.Fatalf("%+v %+v: %+v, by the rule %d frames", r, d, a, FramesFor(r, d, a.TotalS()))
		}
		for k := max(1, a.Frames-4); k < a.Frames+4; k++ {
			e, err := fixedFrames(r, d, want, k)
			if err != nil {
				t.Fatal(err)
			}
			if FramesFor(r, d, e.TotalS()) <= k && e.TotalS() < a.TotalS()*(1-1e-9) {
				t.Fatalf("%+v %+v: %d frames of %v s do with less than %+v", r, d, k, e.EachS, a)
			}
		}
		if d.ShutterStepS > 0 {
			continue
		}
		for share := 0.05; share < 0.999; share += 0.019 {
			total := share * a.TotalS()
			k := FramesFor(r, d, total)
			if b := noise(r, d, Exposure{k, total / float64(k)}); b.SNR() >= want {
				t.Fatalf("%+v %+v: %v s in %d frames reach %v, before %+v", r, d, total, k, want, a)
			}
		}
	}
	t.Logf("%d solved", found)
	if found < 2500 {
		t.Errorf("only %d could be solved", found)
	}
}

// TestFrames: the rule of frames.
func TestFrames(t *testing.T) {
	d := Detector{ReadNoiseE: 5, LinearE: 50000}
	r := Rates{SourceES: 10, PeakES: 1, SkyES: 244, Pixels: 30} // t_sky 1 s, t_sat 163 s
	for total, want := range map[float64]int{0.5: 1, 1: 1, 1.5: 2, 2.5: 3, 30: 3, 300: 3, 301: 3, 600: 4, 6000: 37} {
		if got := FramesFor(r, d, total); got != want {
			t.Errorf("%v s: %d frames, want %d", total, got, want)
		}
	}
	r.SkyES = 0
	if got := FramesFor(r, d, 299); got != 1 {
		t.Errorf("a sky of nothing: %d frames", got)
	}
	if got := FramesFor(r, d, 3601); got != 4 {
		t.Errorf("more than the longest frame: %d frames", got)
	}
	if !math.IsInf(LongestS(r, Detector{}), 1) {
		t.Error("a limit where none is given")
	}
	check.Near(t, Detector{ADCMaxADU: 65535, BiasADU: 1000, GainEADU: 0.5, LinearE: 50000, FullWellE: 90000}.LimitE(), 32267.5, 1e-9, "the converter's limit")
	check.Near(t, CosmicShare(600, 15), 2*10*7*15e-4*15e-4, 1e-12, "cosmic rays")
}

// TestDepth: the fainter source gives the wanted S/N.
func TestDepth(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 4))
	for range 3000 {
		r, d := randomSetup(rng)
		e := Exposure{1 + rng.IntN(10), math.Pow(10, 3*rng.Float64())}
		want := 3 + 50*rng.Float64()
		m, err := Fainter(r, d, e, want)
		if errors.Is(err, ErrFloor) {
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		r.SourceES *= light(m)
		b, err := Noise(r, d, e)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, b.SNR()/want, 1, 1e-9, "S/N of the fainter source")
	}
	if _, err := Fainter(Rates{SourceES: 1, Pixels: 1, Floor: 0.1}, Detector{}, Exposure{1, 1}, 20); !errors.Is(err, ErrFloor) {
		t.Error(err)
	}
}

func TestSaturates(t *testing.T) {
	r := star(t, 12)
	for _, each := range []float64{0.2, 2, 20} {
		m, ok := Saturates(r, imager, each)
		if !ok {
			t.Fatal(each)
		}
		check.Near(t, LongestS(star(t, 12+m), imager), each, 1e-9*each, "the frame in which it saturates")
	}
	if _, ok := Saturates(r, imager, 1e7); ok {
		t.Error("the sky alone saturates")
	}
	if _, ok := Saturates(r, Detector{}, 1); ok {
		t.Error("nothing saturates")
	}
}

// TestLimits: each limit is named.
func TestLimits(t *testing.T) {
	base := Rates{SourceES: 100, Pixels: 30, PeakES: 5}
	for want, change := range map[Limit]func(*Rates, *Detector){
		LimitPhotons:       func(*Rates, *Detector) {},
		LimitSky:           func(r *Rates, _ *Detector) { r.SkyES = 50 },
		LimitReadNoise:     func(_ *Rates, d *Detector) { d.ReadNoiseE = 50 },
		LimitDark:          func(_ *Rates, d *Detector) { d.DarkES = 50 },
		LimitScintillation: func(r *Rates, _ *Detector) { r.Scint1 = 1 },
		LimitSaturation:    func(_ *Rates, d *Detector) { d.LinearE = 5 },
	} {
		r, d := base, Detector{LinearE: 1e5}
		change(&r, &d)
		a, err := Solve(r, d, Ask{TotalS: 10, Frames: 1})
		if err != nil || a.Limit != want {
			t.Errorf("%s: %+v, %v", want, a, err)
		}
	}
}

// TestNoExposure: each reason is told.
func TestNoExposure(t *testing.T) {
	r, d := Rates{SourceES: 100, Pixels: 30, PeakES: 1e6, Floor: 0.002}, Detector{ReadNoiseE: 5, LinearE: 5e4, ShutterMinS: 0.2}
	for _, c := range []struct {
		ask    Ask
		change func(*Rates, *Detector)
		want   error
	}{
		{Ask{SNR: 10}, func(*Rates, *Detector) {}, ErrSaturates},
		{Ask{SNR: 600}, func(r *Rates, _ *Detector) { r.PeakES = 1 }, ErrFloor},
		{Ask{}, func(r *Rates, _ *Detector) { r.PeakES = 1 }, ErrAsk},
		{Ask{SNR: 10}, func(r *Rates, _ *Detector) { r.PeakES, r.SourceES = 1, 1e-9 }, ErrFrames},
		{Ask{SNR: 300, Per: PerFrame}, func(r *Rates, d *Detector) { r.PeakES, d.MaxFrameS = 1, 1 }, ErrFrameLong},
		{Ask{SNR: 10}, func(r *Rates, _ *Detector) { r.SourceES = 0 }, ErrNoSource},
		{Ask{SNR: math.NaN()}, func(*Rates, *Detector) {}, ErrRange},
		{Ask{SNR: 10}, func(_ *Rates, d *Detector) { d.DarkES = -1 }, ErrRange},
	} {
		r, d := r, d
		c.change(&r, &d)
		if a, err := Solve(r, d, c.ask); !errors.Is(err, c.want) || a.Frames != 0 {
			t.Errorf("%+v: %+v, %v; want %v", c.ask, a, err, c.want)
		}
	}
	if a, err := Solve(r, d, Ask{SNR: 10}); a.Limit != LimitSaturation {
		t.Errorf("%+v, %v", a, err)
	}
}

func FuzzSolve(f *testing.F) {
	f.Add(100.0, 1.0, 30.0, 10.0, 5.0, 0.01, 1e5, 100.0, 0.0, 0.001, 0.002, uint8(0), uint8(0))
	f.Add(math.NaN(), -1.0, 0.0, math.Inf(1), 0.0, 0.0, 0.0, 1e300, 1e-300, 0.0, 0.0, uint8(3), uint8(9))
	f.Fuzz(func(t *testing.T, source, sky, pixels, peak, read, dark, full, snr, total, scint, floor float64, per, frames uint8) {
		r := Rates{SourceES: source, SkyES: sky, Pixels: pixels, BackPixels: 10 * pixels, PeakES: peak, Element: read, Scint1: scint, ScintCapS: dark, Floor: floor}
		d := Detector{ReadNoiseE: read, DarkES: dark, LinearE: full, GainEADU: scint, ShutterMinS: floor, ShutterStepS: scint}
		a, err := Solve(r, d, Ask{SNR: snr, TotalS: total, Per: Per(per % 4), Frames: int(frames)})
		switch {
		case err != nil && a.Frames != 0:
			t.Errorf("%+v with %v", a, err)
		case err == nil && (!(a.EachS > 0) || math.IsInf(a.EachS, 0) || a.Frames < 1 || math.IsNaN(a.SNR) || a.Limit == ""):
			t.Errorf("%+v", a)
		case err == nil && total == 0 && !a.Reached:
			t.Errorf("not reached: %+v", a)
		}
		if m, err := Fainter(r, d, Exposure{int(frames), total}, snr); (err == nil) == math.IsNaN(m) {
			t.Errorf("%v, %v", m, err)
		}
		if m, ok := Saturates(r, d, total); ok && math.IsNaN(m) {
			t.Error("saturates nowhere")
		}
	})
}

func FuzzRates(f *testing.F) {
	f.Add(5e9, 20.0, 0.13, 1.2, 21.5, 1.1, 3.5, 0.35, 0.8, 1.2, 0.1, 550.0)
	f.Fuzz(func(t *testing.T, zero, mag, k, x, sky, fwhm, beta, pixel, aperture, slit, off, nm float64) {
		through := Through{k, astro.Airmass(x), astro.MagArcsec2(sky)}
		image := Image{fwhm, beta}
		s := Slit{At: astro.Nm(nm), ZeroES: zero, DispersionA: aperture, WidthArcsec: slit, ScalePixel: 4, PixelArcsec: pixel, Through: through}
		for i, make := range []func() (Rates, error){
			Point{zero, astro.Mags(mag), through, image, pixel, aperture}.Rates,
			Extended{zero, astro.MagArcsec2(mag), aperture, through, pixel}.Rates,
			SlitPoint{s, astro.Mags(mag), image, off, aperture}.Rates,
			SlitLine{s, light(mag), aperture}.Rates,
			SlitSurface{s, astro.MagArcsec2(mag), aperture}.Rates,
			LineImage{ZeroPoint{PhotonsA: zero, WidthA: slit}, zero, astro.Nm(nm), light(mag), aperture, through, pixel}.Rates,
		} {
			r, err := make()
			if err != nil {
				continue
			}
			for _, v := range []float64{r.SourceES, r.SkyES, r.PeakES, r.Pixels} {
				if math.IsNaN(v) || v < 0 {
					t.Errorf("maker %d: %+v", i, r)
				}
			}
		}
		s2 := Seeing{ZenithArcsec: fwhm, Monitor: beta > 3, OuterScaleM: slit, ImageQuality: pixel}
		if w, err := s2.Width(astro.Nm(nm), astro.Airmass(x)); (err == nil) != (w > 0) {
			t.Errorf("%+v: %v, %v", s2, w, err)
		}
		d, err := DifferentialRefraction(astro.Nm(nm), astro.Nm(550), astro.Deg(mag), Vapour{sky, k, x})
		if (err == nil) == math.IsNaN(d.Deg()) {
			t.Errorf("%v, %v", d, err)
		}
	})
}

func BenchmarkSolve(b *testing.B) {
	r := star(b, 18)
	for b.Loop() {
		if _, err := Solve(r, imager, Ask{SNR: 100}); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkExposure: seeing, image, rates and time of one star at one moment.
func BenchmarkExposure(b *testing.B) {
	z, rate := zeroOf(b, "V", 1.5, 0.5, 0.42)
	seeing := Seeing{ZenithArcsec: 1.1, ImageQuality: 0.6}
	for b.Loop() {
		w, err := seeing.Width(z.At, 1.2)
		if err != nil {
			b.Fatal(err)
		}
		r, err := Point{ZeroES: rate, Mag: astro.Mags(18), Through: Through{0.13, 1.2, astro.MagArcsec2(21.6)}, Image: Image{FWHMArcsec: w}, PixelArcsec: 0.35}.Rates()
		if err != nil {
			b.Fatal(err)
		}
		r.Scint1, r.ScintCapS, err = Scintillation(1.5, 1.2, 2400, 0)
		if err != nil {
			b.Fatal(err)
		}
		r.Floor = FloorImaging
		if _, err := Solve(r, imager, Ask{SNR: 100}); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkExposureSlit: the same of a star in a slit.
func BenchmarkExposureSlit(b *testing.B) {
	seeing := Seeing{ZenithArcsec: 1.1, ImageQuality: 0.6}
	for b.Loop() {
		w, err := seeing.Width(astro.Nm(550), 1.2)
		if err != nil {
			b.Fatal(err)
		}
		r, err := SlitPoint{Slit: Slit{At: astro.Nm(550), ZeroES: 2e7, DispersionA: 2, WidthArcsec: 1.2, ScalePixel: 4, PixelArcsec: 0.25,
			Through: Through{0.13, 1.2, astro.MagArcsec2(21.6)}}, AB: astro.Mags(17), Image: Image{FWHMArcsec: w}, OffArcsec: 0.2}.Rates()
		if err != nil {
			b.Fatal(err)
		}
		if _, err := Solve(r, spectr, Ask{SNR: 100, Per: PerElement}); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkSkyAndExposure: the sky where one star stands at one moment, and the
// exposure of it there.
func BenchmarkSkyAndExposure(b *testing.B) {
	site := must[*skyglow.Site](b)(skyglow.NewSite(skyglow.Conditions{Air: skyglow.AirAbove{HeightM: 2400}}))
	sky := must[*skyglow.Sky](b)(skyglow.NewSky(skyglow.Scene{Site: site,
		Sun:  skyglow.Direction{Dir: astro.Direction(astro.Deg(200), astro.Deg(-10)), Alt: astro.Deg(-14)},
		Moon: skyglow.Direction{Dir: astro.Direction(astro.Deg(80), astro.Deg(20)), Alt: astro.Deg(40)}, MoonPhase: astro.Deg(50)}))
	g, _ := skyglow.BandOf("g")
	z, rate := zeroOf(b, "g", 1.5, 0.5, 0.40)
	seeing := Seeing{ZenithArcsec: 1.1, ImageQuality: 0.6}
	at := skyglow.Direction{Dir: astro.Direction(astro.Deg(40), astro.Deg(30)), Alt: astro.Deg(55)}
	for b.Loop() {
		bright, err := sky.At(at, g)
		if err != nil {
			b.Fatal(err)
		}
		w, err := seeing.Width(z.At, 1.22)
		if err != nil {
			b.Fatal(err)
		}
		r, err := Point{ZeroES: rate, Mag: astro.Mags(18), Through: Through{site.Extinction().In(g), 1.22, bright.Total},
			Image: Image{FWHMArcsec: w}, PixelArcsec: 0.35}.Rates()
		if err != nil {
			b.Fatal(err)
		}
		if r.Scint1, r.ScintCapS, err = Scintillation(1.5, 1.22, 2400, 0); err != nil {
			b.Fatal(err)
		}
		if _, err := Solve(r, imager, Ask{SNR: 100}); err != nil {
			b.Fatal(err)
		}
	}
}
