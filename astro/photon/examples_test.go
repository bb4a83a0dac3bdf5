package photon

import (
	"math"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
)

// Three set-ups, invented but plausible, of the worked examples.
var (
	imager = Detector{ReadNoiseE: 5, GainEADU: 1.4, LinearE: 80000, BiasADU: 1000, ADCMaxADU: 65535, DarkES: 0.002, DeadS: 15}
	spectr = Detector{ReadNoiseE: 3.5, GainEADU: 1.1, LinearE: 62000, BiasADU: 1000, ADCMaxADU: 65535, DarkES: 0.001, DeadS: 40}
	quick  = Detector{ReadNoiseE: 2.6, GainEADU: 1, LinearE: 55000, BiasADU: 600, ADCMaxADU: 65535, DarkES: 0.01, DeadS: 0.05}
)

func must[T any](t testing.TB) func(T, error) T {
	return func(v T, err error) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

// zeroOf is the rate of magnitude 0 by the formula.
func zeroOf(t testing.TB, band string, d, obstruction, throughput float64) (ZeroPoint, float64) {
	t.Helper()
	z, ok := ZeroPointOf(band)
	if !ok {
		t.Fatal(band)
	}
	return z, must[float64](t)(z.ZeroRate(0, must[float64](t)(Area(d, obstruction)), throughput))
}

// star is a star in V on the imager: seeing 1.1, 1.2 airmasses, k 0.13, sky 21.6.
func star(t testing.TB, mag float64) Rates {
	t.Helper()
	z, rate := zeroOf(t, "V", 1.5, 0.5, 0.42)
	w := must[float64](t)(Seeing{ZenithArcsec: 1.1, ImageQuality: 0.6}.Width(z.At, 1.2))
	return must[Rates](t)(Point{ZeroES: rate, Mag: astro.Mags(mag), Through: Through{0.13, 1.2, astro.MagArcsec2(21.6)},
		Image: Image{FWHMArcsec: w}, PixelArcsec: 0.35}.Rates())
}

func snr(t testing.TB, r Rates, d Detector, frames int, each float64) float64 {
	t.Helper()
	return must[Budget](t)(Noise(r, d, Exposure{frames, each})).SNR()
}

// TestHowell: the worked example of Howell's handbook, section 4.4, whose inputs
// are from memory: 24013 ADU of 5 e in 300 s, one pixel, 200 of background, sky
// 620 ADU, 22 e/h of dark current, read noise 5 e: S/N 342; 346.5 by photons alone.
func TestHowell(t *testing.T) {
	r := Rates{SourceES: 24013 * 5 / 300.0, SkyES: 620 * 5 / 300.0, Pixels: 1, BackPixels: 200}
	d := Detector{ReadNoiseE: 5, GainEADU: 5, DarkES: 22 / 3600.0}
	b := must[Budget](t)(Noise(r, d, Exposure{1, 300}))
	check.Near(t, b.SNR(), 342, 0.5, "S/N")
	check.Near(t, b.SNR(), 342.05, 0.005, "S/N, further digits")
	check.Near(t, 1/math.Sqrt(b.Photons), 346.5, 0.05, "S/N by photons alone")
	check.Near(t, b.SigmaMag(), 1.085736/342.05, 1e-7, "error in magnitudes")
}

// TestExamples: the numbers of worked examples, each evaluated independently of
// this program.
func TestExamples(t *testing.T) {
	for _, c := range []struct {
		band    string
		d, o, e float64
		want    float64
	}{{"U", 1.5, .5, .16, 1.276e9}, {"B", 1.5, .5, .34, 6.996e9}, {"V", 1.5, .5, .42, 5.784e9}, {"R", 1.5, .5, .44, 6.700e9}, {"I", 1.5, .5, .36, 3.811e9},
		{"g", 1.5, .5, .40, 8.523e9}, {"r", 1.5, .5, .46, 7.134e9}, {"i", 1.5, .5, .42, 5.172e9}, {"z", 1.5, .5, .26, 2.821e9},
		{"u", 3.2, 1, .20, 1.252e10}, {"g", 3.2, 1, .42, 4.135e10}, {"r", 3.2, 1, .45, 3.224e10}, {"i", 3.2, 1, .40, 2.275e10}} {
		_, rate := zeroOf(t, c.band, c.d, c.o, c.e)
		check.Near(t, rate/c.want, 1, 6e-4, "magnitude 0 in %s", c.band)
	}
	check.Near(t, must[float64](t)(Area(3.2, 1)), 72570.8, 0.06, "area")

	r := star(t, 20)
	check.Near(t, r.SourceES, 33.632, 0.002, "V 20: source")
	check.Near(t, r.SkyES, 1.6231, 1e-4, "V 20: sky")
	check.Near(t, r.Pixels, 29.788, 1e-3, "V 20: pixels")
	check.Near(t, snr(t, r, imager, 1, 300), 61.53, 0.01, "V 20: S/N in 300 s")
	check.Near(t, SkyLimitedS(r, imager), 150.33, 0.01, "V 20: frame limited by the sky")
	check.Near(t, r.PeakES/r.SourceES*0.6714, 0.0455, 6e-5, "V 20: brightest pixel")
	// Across a change of the number of frames more time can lower S/N.
	check.Near(t, snr(t, r, imager, FramesFor(r, imager, 300), 300/float64(FramesFor(r, imager, 300))), 60.61, 0.01, "300.0 s as it is divided")
	check.Near(t, snr(t, r, imager, FramesFor(r, imager, 300.1), 300.1/float64(FramesFor(r, imager, 300.1))), 59.74, 0.01, "300.1 s as it is divided")

	r = star(t, 18)
	a := must[Answer](t)(Solve(r, imager, Ask{SNR: 100, Frames: 1}))
	check.Near(t, a.EachS, 61.907, 1e-3, "V 18: time for S/N 100")
	r.Scint1, r.ScintCapS = must3(t)(Scintillation(1.5, 1.2, 2400, 0))
	a = must[Answer](t)(Solve(r, imager, Ask{SNR: 100, Frames: 1}))
	check.Near(t, a.EachS, 62.026, 1e-3, "V 18: time with scintillation")

	for mag, want := range map[float64]float64{3: .004452, 6: .07056, 9: 1.1183, 12: 17.716} {
		check.Near(t, LongestS(star(t, mag), imager)/want, 1, 2e-3, "longest frame at V %v", mag)
	}
	total := 5.784e9 * math.Pow(10, -0.4*(6+0.13*1.2))
	phi, pixels, err := Defocus(imager, total, 2, 0.35)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, phi, 9.859, 2e-3, "defocused image")
	check.Near(t, pixels, 1.5*math.Pi/4*(phi/0.35)*(phi/0.35), 1e-9, "its pixels")
	factor, density := NeutralFilter(2, LongestS(star(t, 3), imager))
	check.Near(t, factor, 449, 1, "grey filter")
	check.Near(t, density, 2.65, 0.005, "its density")
	if f, n := NeutralFilter(1, 5); f != 1 || n != 0 {
		t.Error("a filter that is not needed")
	}
	check.Near(t, ShutterS(0.2, 0.01), 1, 1e-12, "shutter")
}

func must3(t testing.TB) func(a, b float64, err error) (float64, float64) {
	return func(a, b float64, err error) (float64, float64) {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return a, b
	}
}

// TestExampleSlit: AB 17 at 550 nm in a slit of 1.2 arcsec, 1800 s.
func TestExampleSlit(t *testing.T) {
	at := astro.Nm(550)
	z := must[ZeroPoint](t)(NarrowZero(at, 2))
	rate := must[float64](t)(z.ZeroRate(0, must[float64](t)(Area(2.5, 1)), 0.28))
	w := must[float64](t)(Seeing{ZenithArcsec: 1, ImageQuality: 0.5}.Width(at, 1.2))
	check.Near(t, w, 1.2033, 6e-5, "image")
	s := Slit{At: at, ZeroES: rate, DispersionA: 2, WidthArcsec: 1.2, ScalePixel: 4, PixelArcsec: 0.25, Through: Through{0.13, 1.2, astro.MagArcsec2(21.6)}}
	image := Image{FWHMArcsec: w}
	check.Near(t, image.Slit(1.2, 0), 0.6555, 6e-5, "through the slit")
	check.Near(t, image.Slit(2*w, 0), 0.9094, 6e-5, "in the extraction")
	r := must[Rates](t)(SlitPoint{Slit: s, AB: astro.Mags(17), Image: image}.Rates())
	check.Near(t, r.SourceES, 1.8827, 1e-4, "source")
	check.Near(t, r.SkyES, 0.0158, 6e-5, "sky")
	check.Near(t, r.Element, 4.8, 1e-9, "element")
	check.Near(t, s.Resolution(w), 572.9, 0.1, "resolution")
	pixel := must[Answer](t)(Solve(r, spectr, Ask{TotalS: 1800, Frames: 1, Per: PerPixel}))
	check.Near(t, pixel.SNR, 54.69, 0.01, "S/N per pixel")
	element := must[Answer](t)(Solve(r, spectr, Ask{TotalS: 1800, Frames: 1, Per: PerElement}))
	check.Near(t, element.SNR, 119.8, 0.06, "S/N per element")
}

// TestExampleNebulae: [O III] of 1e-15 erg/s/cm²/arcsec² through a filter, and
// Hα of the same in a slit.
func TestExampleNebulae(t *testing.T) {
	l := LineImage{Line: astro.Nm(500.7), Surface: 1e-15, AreaArcsec2: 1, PixelArcsec: 0.35, Through: Through{0.16, 1.2, astro.MagArcsec2(21.9)}}
	l.Zero = must[ZeroPoint](t)(NarrowZero(l.Line, 60))
	l.ZeroES = must[float64](t)(l.Zero.ZeroRate(0, must[float64](t)(Area(1.5, 0.5)), 0.36))
	r := must[Rates](t)(l.Rates())
	check.Near(t, r.SourceES, 1.1943, 1e-4, "[O III]")
	check.Near(t, r.SkyES*r.Pixels, 0.6453, 1e-4, "its sky per arcsec²")
	check.Near(t, snr(t, r, imager, 1, 600), 19.73, 0.01, "S/N over 1 arcsec²")
	l.AreaArcsec2 = 100
	check.Near(t, snr(t, must[Rates](t)(l.Rates()), imager, 1, 600), 197.3, 0.1, "S/N over 100 arcsec²")

	at := astro.Nm(656.3)
	z := must[ZeroPoint](t)(NarrowZero(at, 2))
	// throughput between 0.30 at 650 nm and 0.26 at 750 nm
	rate := must[float64](t)(z.ZeroRate(0, must[float64](t)(Area(2.5, 1)), 0.30-0.04*0.063))
	s := Slit{At: at, ZeroES: rate, DispersionA: 2, WidthArcsec: 1.2, ScalePixel: 4, PixelArcsec: 0.25, Through: Through{0.08, 1.2, astro.MagArcsec2(21.2)}}
	r = must[Rates](t)(SlitLine{Slit: s, Surface: 1e-15, Height: 5}.Rates())
	check.Near(t, r.SourceES, 22.258, 1e-3, "Hα in the slit")
	check.Near(t, r.Pixels, 192, 1e-9, "its pixels")
	check.Near(t, snr(t, r, spectr, 1, 1800), 179.5, 0.06, "its S/N")
}

// TestExampleSeries: a white dwarf of g 18 in 5 s, with scintillation.
func TestExampleSeries(t *testing.T) {
	z, rate := zeroOf(t, "g", 3.2, 1, 0.42)
	w := must[float64](t)(Seeing{ZenithArcsec: 0.9, ImageQuality: 0.5}.Width(z.At, 1.3))
	r := must[Rates](t)(Point{ZeroES: rate, Mag: astro.Mags(18), Through: Through{0.19, 1.3, astro.MagArcsec2(22.2)},
		Image: Image{FWHMArcsec: w}, PixelArcsec: 0.42}.Rates())
	check.Near(t, r.SourceES, 1395.1, 0.1, "source")
	check.Near(t, snr(t, r, quick, 1, 5), 78.317, 0.01, "S/N by photons")
	r.Scint1, r.ScintCapS = must3(t)(Scintillation(3.2, 1.3, 2400, 0))
	check.Near(t, r.Scint1/math.Sqrt(5), 1.0727e-3, 1e-6, "scintillation")
	check.Near(t, snr(t, r, quick, 1, 5), 78.0425, 0.01, "S/N with scintillation")
	a := must[Answer](t)(Solve(r, quick, Ask{SNR: 78.0425, Per: PerFrame, Frames: 700}))
	check.Near(t, a.EachS, 5, 2e-3, "the frame again")
	if a.Frames != 700 || !a.Reached || a.Limit != LimitPhotons {
		t.Errorf("%+v", a)
	}
}
