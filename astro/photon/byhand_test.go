package photon

import (
	"math"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
)

// near checks one step of a worked case to its last digit.
func near(t *testing.T, got, want float64, what string) {
	t.Helper()
	check.Near(t, got, want, 1e-4*math.Abs(want), "%s", what)
}

// TestMira: a Mira at its maximum of V 8.6, 1.5 m, 1.3 airmasses, seeing 1.2,
// moonlit sky of 20.9, S/N 300: it saturates in a second, and scintillation and
// the floor of the calibration decide. Each number was worked out from the
// formulas apart from this program.
func TestMira(t *testing.T) {
	z, rate := zeroOf(t, "V", 1.5, 0.5, 0.42)
	w := must[float64](t)(Seeing{ZenithArcsec: 1.2, ImageQuality: 0.6}.Width(z.At, 1.3))
	near(t, w, 1.50533, "image, arcsec")
	image := Image{FWHMArcsec: w}
	near(t, image.Within(0.8*w), 0.671361, "in the aperture")
	near(t, image.Peak(0.35), 0.0366716, "on the brightest pixel")
	r := must[Rates](t)(Point{ZeroES: rate, Mag: astro.Mags(8.6), Through: Through{0.13, 1.3, astro.MagArcsec2(20.9)}, Image: image, PixelArcsec: 0.35}.Rates())
	near(t, r.SourceES, 1206574, "source, e/s")
	near(t, r.SkyES, 3.09267, "sky, e/s a pixel")
	near(t, r.Pixels, 37.1924, "pixels")
	r.Scint1, r.ScintCapS = must3(t)(Scintillation(1.5, 1.3, 2400, 0))
	near(t, r.Scint1, 3.97488e-3, "scintillation in 1 s")
	r.Floor = FloorImaging
	d := imager
	d.ShutterMinS = 0.2
	near(t, LongestS(r, d), 0.971029, "longest frame, s")
	a := must[Answer](t)(Solve(r, d, Ask{SNR: 300}))
	if a.Frames != 3 || a.Limit != LimitScintillation || !a.Reached {
		t.Errorf("%+v", a)
	}
	near(t, a.TotalS(), 2.338515, "three frames, s in all")
	near(t, a.ClockS(d), 2.338515+45, "by the clock, s")
	m, ok := Saturates(r, d, 0.2)
	if !ok {
		t.Fatal("no magnitude of saturation")
	}
	near(t, 8.6+m, 6.884454, "saturates in the shortest exposure, V")
}

// TestNebula: [O III] 500.7 of a nebula of 1e-13 erg/s/cm² and 20 arcsec, S/N 30
// over 10 arcsec² through 6 nm at 1.5 m: the sky decides, and the rule of
// three frames costs a quarter more than one frame would take.
func TestNebula(t *testing.T) {
	l := LineImage{Line: astro.Nm(500.7), Surface: SurfaceOf(1e-13, 20), AreaArcsec2: 10, PixelArcsec: 0.35, Through: Through{0.16, 1.1, astro.MagArcsec2(21.7)}}
	near(t, l.Surface, 3.183099e-16, "surface, erg/s/cm²/arcsec²")
	l.Zero = must[ZeroPoint](t)(NarrowZero(l.Line, 60))
	l.ZeroES = must[float64](t)(l.Zero.ZeroRate(0, must[float64](t)(Area(1.5, 0.5)), 0.36))
	r := must[Rates](t)(l.Rates())
	near(t, r.SourceES, 3.858099, "line, e/s")
	near(t, r.SkyES, 0.0950391, "sky, e/s a pixel")
	near(t, r.Pixels, 81.63265, "pixels")
	near(t, SkyLimitedS(r, imager), 2567.364, "frame limited by the sky, s")
	one := must[Answer](t)(Solve(r, imager, Ask{SNR: 30, Frames: 1}))
	near(t, one.EachS, 857.1470, "one frame, s")
	a := must[Answer](t)(Solve(r, imager, Ask{SNR: 30}))
	near(t, a.TotalS(), 1062.828, "as it is divided, s")
	if a.Frames != 3 || a.Limit != LimitSky {
		t.Errorf("%+v", a)
	}
}

// TestEclipsingDwarf: a white dwarf of g 18.9 every 2 s at 3.2 m against three
// comparison stars, and how faint it may get in eclipse.
func TestEclipsingDwarf(t *testing.T) {
	z, rate := zeroOf(t, "g", 3.2, 1, 0.42)
	w := must[float64](t)(Seeing{ZenithArcsec: 1, ImageQuality: 0.5}.Width(z.At, 1.15))
	near(t, w, 1.209827, "image, arcsec")
	r := must[Rates](t)(Point{ZeroES: rate, Mag: astro.Mags(18.9), Through: Through{0.19, 1.15, astro.MagArcsec2(21.9)}, Image: Image{FWHMArcsec: w}, PixelArcsec: 0.42}.Rates())
	near(t, r.SourceES, 625.1630, "source, e/s")
	near(t, r.SkyES, 12.67464, "sky, e/s a pixel")
	near(t, r.Pixels, 16.68313, "pixels")
	frame := Exposure{1, 1.95}
	near(t, must[Budget](t)(Noise(r, quick, frame)).SNR(), 28.74504, "S/N by photons")
	sigma, limit := must3(t)(Scintillation(3.2, 1.15, 2400, 0))
	r.Scint1, r.ScintCapS, r.Floor = Differential(sigma, 3), limit, FloorSeries
	near(t, r.Scint1, 2.304371e-3, "scintillation against three stars")
	b := must[Budget](t)(Noise(r, quick, frame))
	near(t, b.SNR(), 28.71169, "S/N")
	near(t, b.Photons/b.Sky, 1219.068/453.5661, "photons against sky")
	near(t, b.Photons/b.ReadNoise, 1219.068/125.5885, "photons against read noise")
	if b.Limit() != LimitPhotons {
		t.Errorf("limited by %s", b.Limit())
	}
	m := must[float64](t)(Fainter(r, quick, frame, 5))
	near(t, 18.9+m, 21.30122, "faintest for S/N 5, g")
	if duty := 1.95 / (1.95 + quick.DeadS); duty < LeastDuty {
		t.Errorf("open for %v of the time", duty)
	}
}
