package photon

import (
	"math"
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
)

func TestZeroPoints(t *testing.T) {
	// Photons per s, cm² and Å of magnitude 0, a list printed by several; its U
	// is for 360 nm.
	for band, want := range map[string]float64{"B": 1392.6, "V": 995.5, "R": 702.0, "I": 452.0, "J": 193.1, "H": 93.3, "K": 43.6} {
		z, ok := ZeroPointOf(band)
		if !ok {
			t.Fatal(band)
		}
		check.Near(t, z.PhotonsA, want, 0.002*want, "photons in %s", band)
	}
	for band, want := range map[string]float64{"U": 769.2, "u": 1543.2, "g": 1169.4, "r": 888.7, "i": 732.6, "z": 613.5} {
		z, _ := ZeroPointOf(band)
		check.Near(t, z.PhotonsA, want, 0.1, "photons in %s", band)
	}
	for band, want := range map[string]float64{"U": 5.08e5, "B": 1.310e6, "V": 8.77e5, "R": 9.69e5, "I": 6.74e5, "J": 4.12e5, "H": 2.87e5, "K": 1.70e5,
		"u": 8.63e5, "g": 1.357e6, "r": 9.87e5, "i": 7.84e5, "z": 6.91e5, "G": 3.51e6, "BP": 2.77e6, "RP": 1.48e6} {
		z, _ := ZeroPointOf(band)
		check.Near(t, z.Photons(), want, 0.006*want, "photons in the whole of %s", band)
	}
	check.Near(t, AngstromsAB(astro.Nm(550)), 5.47987e6/5500, 1e-3, "AB 0 at 550 nm")
	// Gaia's zero of Vega in janskys.
	for band, want := range map[string]float64{"G": 3270.3, "BP": 3579.5, "RP": 2615.7} {
		z, _ := ZeroPointOf(band)
		check.Near(t, abZeroJansky*math.Pow(10, -0.4*z.ABMinusVega), want, 0.06, "Vega in %s", band)
	}
	if _, ok := ZeroPointOf("W1"); ok {
		t.Error("W1 has a zero point")
	}
	v, _ := ZeroPointOf("V")
	if z, err := v.ZeroRate(123, 0, 0); err != nil || z != 123 {
		t.Errorf("a measured zero point: %v, %v", z, err)
	}
	for _, bad := range [][3]float64{{-1, 1, 1}, {0, 0, 0.4}, {0, 100, 0}, {0, 100, 1.2}, {0, 100, math.NaN()}, {math.Inf(1), 1, 1}} {
		if _, err := v.ZeroRate(bad[0], bad[1], bad[2]); err == nil {
			t.Errorf("no error for %v", bad)
		}
	}
}

// TestFromGaia: the relations at G = 10.
func TestFromGaia(t *testing.T) {
	for c, want := range map[float64]map[string]float64{
		0.82: {"V": 10.152, "R": 9.788, "I": 9.426, "B": 10.757, "g": 10.403, "r": 9.983, "i": 9.834, "z": 9.777},
		3.0:  {"V": 11.540, "R": 10.024, "I": 8.594, "g": 12.910, "r": 10.884},
	} {
		for band, m := range want {
			got, sigma, ok := FromGaia(band, astro.Mags(10), c, true)
			if !ok || sigma < 0.03 {
				t.Errorf("%s at %v: %v, %v", band, c, sigma, ok)
			}
			check.Near(t, got.Mags(), m, 6e-4, "%s at %v", band, c)
		}
	}
	for _, c := range []struct {
		band  string
		c     float64
		giant bool
	}{{"V", 5.1, true}, {"V", -.6, true}, {"B", 2, false}, {"J", 2.6, true}, {"W1", 1, true}, {"V", math.NaN(), true}, {"i", 2.1, true}} {
		if _, _, ok := FromGaia(c.band, astro.Mags(10), c.c, c.giant); ok {
			t.Errorf("%v was extrapolated", c)
		}
	}
}

func TestImages(t *testing.T) {
	for _, row := range check.Table(t, "testdata/astro/images.csv").Rows() {
		i := Image{FWHMArcsec: 1.3, Beta: row.Float("beta")}
		if i.Beta == 0 {
			i.Beta = math.Inf(1)
		}
		size := row.Float("size") * i.FWHMArcsec
		var got float64
		switch row.String("shape") {
		case "circle":
			got = i.Within(size)
		case "slit":
			got = i.Slit(size, 0)
		case "pixel":
			got = i.Peak(size)
		}
		check.Near(t, got, row.Float("fraction"), 6e-5, "%s of %v, beta %v", row.String("shape"), row.Float("size"), row.Float("beta"))
	}
	if (Image{FWHMArcsec: 1}).Slit(1, 0) != (Image{FWHMArcsec: 1, Beta: DefaultBeta}).Slit(1, 0) {
		t.Error("the default exponent")
	}
}

// TestSlitOffset: the closed form against the integral, by Simpson's rule.
func TestSlitOffset(t *testing.T) {
	for _, beta := range []float64{1.5, 2.5, 3.5, 4.765, 12} {
		i := Image{FWHMArcsec: 1.1, Beta: beta}
		a := math.Sqrt(i.core())
		g1, _ := math.Lgamma(beta - 0.5)
		g2, _ := math.Lgamma(beta - 1)
		norm := math.Exp(g1-g2) / (math.Sqrt(math.Pi) * a)
		for _, off := range []float64{0, 0.2, -0.7, 3} {
			const w, n = 1.4, 2000
			sum := 0.0
			for k := range n + 1 {
				x := off - w/2 + w*float64(k)/n
				weight := 2.0 + 2*float64(k%2)
				if k == 0 || k == n {
					weight = 1
				}
				sum += weight * norm * math.Pow(1+x*x/(a*a), 0.5-beta)
			}
			check.Near(t, i.Slit(w, off), sum*w/n/3, 1e-9, "beta %v off %v", beta, off)
		}
	}
}

func TestSeeing(t *testing.T) {
	width := func(s Seeing, micron, x float64) float64 {
		w, err := s.Width(astro.Micron(micron), astro.Airmass(x))
		if err != nil {
			t.Fatal(err)
		}
		return w
	}
	check.Near(t, width(Seeing{ZenithArcsec: 1}, 0.5, 1.5), 1.2754, 5e-5, "at 1.5 airmasses")
	check.Near(t, width(Seeing{ZenithArcsec: 1}, 0.8, 1), 0.9103, 5e-5, "at 0.8 micrometres")
	check.Near(t, width(Seeing{ZenithArcsec: 0.8, Monitor: true}, 0.5, 1), 0.6539, 6e-5, "by a monitor")
	check.Near(t, Fried(1, astro.Micron(0.5)), 0.1007, 5e-5, "Fried's parameter")
	check.Near(t, width(Seeing{ZenithArcsec: 1.1, ImageQuality: 0.6}, 0.545, 1.2), 1.3472, 6e-5, "with the image quality")
	for _, s := range []Seeing{{}, {ZenithArcsec: -1}, {ZenithArcsec: math.NaN()}, {ZenithArcsec: 1, ImageQuality: -1}} {
		if _, err := s.Width(astro.Micron(0.5), 1); err == nil {
			t.Errorf("no error for %+v", s)
		}
	}
}

// TestScintillation: values of both formulas.
func TestScintillation(t *testing.T) {
	at := func(d, x, h, c, seconds float64) float64 {
		s, limit, err := Scintillation(d, astro.Airmass(x), h, c)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, limit, 0.1*d, 1e-12, "shortest time")
		return s / math.Sqrt(seconds)
	}
	check.Near(t, ScintillationYoung(1, 1, 0), 2.954e-3, 1e-6, "Young, 1 m")
	check.Near(t, ScintillationYoung(4, 1, 2400), 8.684e-4, 1e-7, "Young, 4 m at 2400 m")
	check.Near(t, at(1, 1, 0, 1, 1), 3.162e-3, 1e-6, "1 m, C 1")
	check.Near(t, at(4, 1, 2400, 0, 1), 1.3945e-3, 1e-7, "4 m at 2400 m")
	check.Near(t, at(1.5, 1, 2400, 0, 60), 3.462e-4, 1e-7, "1.5 m, 60 s")
	check.Near(t, Differential(1, 4), math.Sqrt(1.25), 1e-12, "four comparison stars")
	if _, _, err := Scintillation(0, 1, 0, 0); err == nil {
		t.Error("no aperture")
	}
}

func TestSeries(t *testing.T) {
	check.Near(t, Smear(0.1, 1), 0.98363, 1e-5, "a tenth of the period")
	check.Near(t, Smear(0.2, 1), 0.93549, 1e-5, "a fifth of the period")
	check.Near(t, Smear(0, 1), 1, 0, "an instant")
	check.Near(t, AmplitudeNoise(0.01, 314), 0.01*math.Sqrt(math.Pi/314), 1e-12, "amplitude noise")
}

func TestDispersion(t *testing.T) {
	dry := Vapour{600 * mmHg, 7, 8 * mmHg}
	for _, row := range check.Table(t, "testdata/astro/dispersion.csv").Rows() {
		z := astro.Rad(math.Acos(1 / row.Float("secz")))
		d, err := DifferentialRefraction(astro.Micron(row.Float("micron")), astro.Micron(0.5), z, dry)
		if err != nil {
			t.Fatal(err)
		}
		check.Near(t, d.Arcsec(), row.Float("shift"), 0.008, "sec z %v, %v um", row.Float("secz"), row.Float("micron"))
	}
	for micron, want := range map[float64]float64{0.3: 291.557, 0.5: 278.964, 1: 274.148} {
		check.Near(t, standardRefractivity(micron), want, 1e-3, "refractivity at %v", micron)
	}
	// Nearly the same by Ciddor 1996, whose constant differs by 5e-5 of it.
	for micron, want := range map[float64]float64{0.3: 291.569, 0.5: 278.974, 1: 274.166} {
		check.Near(t, standardRefractivity(micron), want, 0.02, "against Ciddor at %v", micron)
	}
	image := Image{FWHMArcsec: 1}
	shift := astro.Arcsec(1)
	check.Near(t, Off(shift, astro.Deg(90)).Arcsec(), 1, 1e-12, "across the parallactic angle")
	check.Near(t, SlitLoss(image, 1, Off(shift, astro.Deg(0))), 0, 1e-12, "along it")
	if l := SlitLoss(image, 1, Off(shift, astro.Deg(-90))); !(l > 0.5 && l < 1) {
		t.Errorf("a loss of %v", l)
	}
	check.Near(t, AngleAllowed(shift, 2.5).Deg(), 30, 1e-9, "asin 0.5")
	check.Near(t, AngleAllowed(shift, 5).Deg(), 90, 0, "a wide slit")
	s := Spread{Guided: astro.Nm(550), Zenith: astro.Deg(60), Air: DefaultVapour(), Image: image, SlitArcsec: 1}
	wanted := []astro.Wavelength{astro.Nm(550), astro.Nm(380), astro.Nm(800)}
	loss, at, err := s.Worst(wanted, astro.Deg(60))
	if err != nil || at != astro.Nm(380) || !(loss > 0.1) {
		t.Errorf("worst loss %v at %v, %v", loss, at, err)
	}
	most, err := s.LargestShift(wanted)
	d, err2 := DifferentialRefraction(astro.Nm(380), astro.Nm(550), astro.Deg(60), DefaultVapour())
	if err != nil || err2 != nil || most != d {
		t.Errorf("%v, %v, %v", most, err, err2)
	}
	if AngleMatters(1.05, false) || AngleMatters(2, true) || !AngleMatters(1.2, false) {
		t.Error("when the angle matters")
	}
	if _, err := DifferentialRefraction(astro.Nm(0), astro.Nm(500), astro.Deg(10), dry); err == nil {
		t.Error("no wavelength")
	}
	check.Near(t, VapourOf(astro.Weather{PressureHPa: 1013, TemperatureC: 20, Humidity: 1}).VapourHPa, 23.4, 0.2, "saturated at 20 C, as tables of steam have it")
}

func TestFlat(t *testing.T) {
	mu := FlatSky(5.784e9, 0.35, 40000, 3)
	check.Near(t, FlatS(5.784e9, 0.35, 40000, mu), 3, 1e-9, "there and back")
	check.Near(t, mu.MagArcsec2(), 2.5*math.Log10(3*5.784e9*0.1225/40000), 1e-9, "by hand")
}

func TestExtended(t *testing.T) {
	check.Near(t, Rayleigh(astro.Nm(656.3))/5.66e-18, 1, 0.001, "a rayleigh at H alpha")
	check.Near(t, Rayleigh(astro.Nm(500.7))/7.42e-18, 1, 0.001, "a rayleigh at [O III]")
	check.Near(t, SurfaceOf(math.Pi, 2), 1, 1e-12, "the diameter is the full one")
	if !Small(1.9, Image{FWHMArcsec: 1}) || Small(2.1, Image{FWHMArcsec: 1}) {
		t.Error("small nebulae")
	}
	check.Near(t, DopplerShift(astro.Nm(656.3), 300).Nm(), 0.6568, 1e-3, "300 km/s")
	// A surface of magnitude 20 over 4 arcsec² is a star of 18.495.
	through := Through{0.13, 1.2, astro.MagArcsec2(21.6)}
	x, err := Extended{ZeroES: 5.784e9, Surface: astro.MagArcsec2(20), AreaArcsec2: 4, Through: through, PixelArcsec: 0.35}.Rates()
	if err != nil {
		t.Fatal(err)
	}
	p, err := Point{ZeroES: 5.784e9, Mag: astro.Mags(20 - 2.5*math.Log10(4)), Through: through, Image: Image{FWHMArcsec: 0.01}, PixelArcsec: 0.35, Aperture: 900}.Rates()
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, x.SourceES/p.SourceES, 1, 1e-6, "star and surface")
	check.Near(t, x.SkyES, p.SkyES, 1e-12, "their sky")
	s := Slit{At: astro.Nm(550), ZeroES: 1e8, DispersionA: 2, WidthArcsec: 1.2, ScalePixel: 4, PixelArcsec: 0.25, Through: through}
	f, err := SlitSurface{Slit: s, Surface: astro.MagArcsec2(20), Height: 5}.Rates()
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, f.SourceES, 1e8*math.Pow(10, -0.4*(20+0.156))*6, 1e-6*f.SourceES, "surface in a slit")
	check.Near(t, f.SkyES/f.PeakES, math.Pow(10, -0.4*(21.6-20.156)), 1e-9, "sky against source")
	l := LineImage{Line: astro.Nm(500.7), ZeroES: 1e8, PixelArcsec: 0.35, Through: through}
	l.Zero, err = NarrowZero(astro.Nm(500.7), 60)
	if err != nil {
		t.Fatal(err)
	}
	l.Surface, l.AreaArcsec2 = 1e-13/4, 4
	whole, err := l.Rates()
	if err != nil {
		t.Fatal(err)
	}
	point, err := l.LinePoint(1e-13, Image{FWHMArcsec: 0.01}, 900)
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, point.SourceES/whole.SourceES, 1, 1e-6, "a nebula as a star")
}
