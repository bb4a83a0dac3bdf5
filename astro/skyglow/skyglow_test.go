package skyglow

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/check"
)

// highSite is the site of the reference rows: 2.6 km, 260 DU, and the
// extinction of a high site.
func highSite(t testing.TB, solar float64) *Site {
	t.Helper()
	s, err := NewSite(Conditions{
		Air: AirAbove{HeightM: 2600, OzoneDU: 260,
			Measured: map[string]float64{"U": 0.48, "B": 0.235, "V": 0.13, "R": 0.085, "I": 0.042}},
		SolarActivity: solar})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// case_ is a sky given by its angles alone.
type case_ struct{ z, zodiacal, solar, phase, sep, zm, sun float64 }

func (c case_) brightness(t testing.TB, b Band) Brightness {
	t.Helper()
	up := astro.Vec{Z: 1}
	sky, err := NewSky(Scene{Site: highSite(t, c.solar), Sun: Direction{up, astro.Deg(c.sun)},
		Moon: Direction{up, astro.Deg(90 - c.zm)}, MoonPhase: astro.Deg(c.phase)})
	if err != nil {
		t.Fatal(err)
	}
	x := path(c.z)
	l := look{x: x, zodiacal: c.zodiacal, stars: Starlight(astro.Deg(60)), moonSep: astro.Deg(c.sep)}
	if sky.moonUp {
		l.moonPath = x
	}
	return sky.brightness(b, l)
}

func band(t testing.TB, name string) Band {
	t.Helper()
	b, ok := BandOf(name)
	if !ok {
		t.Fatalf("no band %s", name)
	}
	return b
}

func TestCombined(t *testing.T) {
	for _, row := range check.Table(t, "testdata/astro/skyglow.csv").Rows() {
		c := case_{row.Float("z"), row.Float("zodiacal"), row.Float("solar"), row.Float("phase"), row.Float("sep"), row.Float("zm"), row.Float("sun")}
		for _, name := range []string{"U", "B", "V", "R", "I"} {
			check.Near(t, c.brightness(t, band(t, name)).Total.MagArcsec2(), row.Float(name), 0.006, "%s in %s", row.String("case"), name)
		}
	}
}

// TestTrends: what observers found, V unless said: 0.25 mag brighter at 1.5
// airmasses, 0.4 at low ecliptic latitude and at solar maximum (Benn & Ellison
// 1998; 0.6 after Krisciunas 1997); near a Moon ten days old up to 3 mag in B
// and 1.2 in I (Patat 2003); ten days after new 20.7 20.7 20.3 19.5 in B V R I
// (Walker 1987, NOAO Newsletter 10, 16).
func TestTrends(t *testing.T) {
	v := band(t, "V")
	dark := case_{zodiacal: 60, solar: 0.8, zm: 180, sun: -90}
	at := func(change func(*case_), b Band) float64 {
		c := dark
		change(&c)
		return c.brightness(t, b).Total.MagArcsec2()
	}
	zenith := at(func(*case_) {}, v)
	check.Near(t, zenith-at(func(c *case_) { c.z = 48.19 }, v), 0.25, 0.03, "1.5 airmasses")
	check.Near(t, zenith-at(func(c *case_) { c.zodiacal = 140 }, v), 0.4, 0.1, "low ecliptic latitude")
	check.Near(t, zenith-at(func(c *case_) { c.solar = 2 }, v), 0.5, 0.12, "solar maximum")
	near := func(c *case_) { c.z, c.zm, c.phase, c.sep = 45, 45, 58, 30 }
	for name, want := range map[string]float64{"B": 3.0, "I": 1.2} {
		b := band(t, name)
		check.Near(t, at(func(c *case_) { c.z = 45 }, b)-at(near, b), want, 0.3, "near the Moon in %s", name)
	}
	for name, want := range map[string][2]float64{"B": {20.7, 20.72}, "V": {20.7, 20.37}, "R": {20.3, 20.09}, "I": {19.5, 19.56}} {
		got := at(func(c *case_) { c.z, c.zm, c.phase, c.sep = 30, 60, 58, 90 }, band(t, name))
		check.Near(t, got, want[0], 0.35, "ten days after new in %s", name)
		check.Near(t, got, want[1], 0.006, "the same, evaluated independently, in %s", name)
	}
}

// TestZenithDistance: brightening by zenith distance in U B V R I, table C.1 of
// Patat 2003, with its extinction and 0.6 of the light airglow.
func TestZenithDistance(t *testing.T) {
	k := []float64{0.43, 0.22, 0.11, 0.07, 0.05}
	for z, row := range map[float64][]float64{10: {0, .01, .01, .01, .01}, 20: {.01, .03, .03, .03, .04}, 30: {.03, .06, .08, .08, .08},
		40: {.05, .11, .14, .15, .16}, 50: {.07, .18, .24, .26, .27}} {
		x, err := air.VanRhijn(astro.Deg(90 - z))
		if err != nil {
			t.Fatal(err)
		}
		for i, want := range row {
			got := 2.5*math.Log10(0.4+0.6*float64(x)) - k[i]*(float64(x)-1)
			check.Near(t, got, want, 0.0051, "z = %v, band %d", z, i)
		}
	}
}

// TestDarkSky: 145 + 60 + 15 stars of V = 10 make 21.93 (Benn & Ellison 1998
// print 21.9); airglow alone by band.
func TestDarkSky(t *testing.T) {
	check.Near(t, s10Mag, 27.78, 0.005, "one S10")
	check.Near(t, s10Mag-2.5*math.Log10(145+60+15), 21.93, 0.005, "the reference")
	check.Near(t, Starlight(astro.Deg(-10)), 12+100/math.E, 1e-9, "starlight at 10 degrees")
	s := highSite(t, 0.8)
	for i, want := range []float64{22.20, 23.22, 22.34, 21.24, 20.13} {
		check.Near(t, mag(s.airglow[i]), want, 0.006, "airglow, band %d", i)
	}
}

func TestMoonlight(t *testing.T) {
	for _, row := range check.Table(t, "testdata/astro/moonlight.csv").Rows() {
		m := Moonlight{Phase: astro.Deg(row.Float("phase")), Separation: astro.Deg(row.Float("sep")), Zenith: astro.Deg(row.Float("z")),
			MoonZenith: astro.Deg(row.Float("zm")), Extinction: row.Float("k")}
		b := m.Brightness()
		check.Near(t, float64(b), row.Float("b"), 0.06, "%s: nL", row.Where())
		check.Near(t, b.V().MagArcsec2(), row.Float("v"), 6e-4, "%s: V", row.Where())
		m.MoonZenith = astro.Deg(90)
		if m.Brightness() != 0 {
			t.Errorf("%s: light from a Moon that has set", row.Where())
		}
	}
	// Phase law against Allen's table, magnitudes from full.
	full := moonIlluminance(Moonlight{})
	for a, want := range map[float64]float64{10: .23, 30: .79, 60: 1.62, 90: 2.63, 120: 3.93, 150: 5.9} {
		check.Near(t, 2.5*math.Log10(full/moonIlluminance(Moonlight{Phase: astro.Deg(-a)})), want, 0.04, "phase %v", a)
	}
	check.Near(t, moonIlluminance(Moonlight{Surge: true})/full, 1.35, 1e-12, "surge at full")
	check.Near(t, moonIlluminance(Moonlight{DistanceKm: 2 * meanMoonKm})/full, 0.25, 1e-12, "twice as far")
}

func TestNanolamberts(t *testing.T) {
	check.Near(t, float64(NanolambertsOf(astro.MagArcsec2(21.587))), 79.0, 0.05, "the dark zenith of Krisciunas & Schaefer 1991")
	check.Near(t, float64(NanolambertsOf(astro.MagArcsec2(s10Mag))), 0.2629, 1e-4, "one S10")
	check.Near(t, NanolambertsOf(astro.MagArcsec2(20)).V().MagArcsec2(), 20, 1e-12, "there and back")
}

// TestMoonWeights: weights and extinction at 2.6 km, 260 DU, k_V 0.13.
func TestMoonWeights(t *testing.T) {
	w := weightsOf(highSite(t, 0.8).ext)
	for i, want := range map[int][3]float64{bandU: {1.458, .489, .460}, bandB: {1.367, .754, .233}, bandV: {1, 1, .130},
		bandR: {.784, 1.212, .086}, bandI: {.833, 2.309, .033}} {
		check.Near(t, w[i].rayleigh, want[0], 6e-4, "molecules, band %d", i)
		check.Near(t, w[i].mie, want[1], 6e-4, "aerosols, band %d", i)
		check.Near(t, w[i].k, want[2], 6e-4, "extinction, band %d", i)
	}
}

func TestZodiacal(t *testing.T) {
	for _, c := range []struct{ lon, lat, want float64 }{{90, 0, 202}, {180, 0, 180}, {60, 30, 143}, {120, 60, 60}, {97.5, 37.5, 87.34},
		{-90, 0, 202}, {300, -30, 143}, {15, 0, 9000}, {10, 10, 3700}, {0, 90, 60}} {
		s, err := Zodiacal(astro.Deg(c.lon), astro.Deg(c.lat))
		if err != nil {
			t.Error(err)
		}
		check.Near(t, s, c.want, 0.01, "zodiacal at %v, %v", c.lon, c.lat)
	}
	for _, c := range [][2]float64{{0, 0}, {10, 5}, {14.9, 0}, {-3, 14}} {
		if s, err := Zodiacal(astro.Deg(c[0]), astro.Deg(c[1])); !errors.Is(err, ErrNearSun) || !math.IsNaN(s) {
			t.Errorf("zodiacal at %v: %v, %v", c, s, err)
		}
	}
}

// TestTwilight: the polynomials of Patat, Ugolnikov & Postylyakov 2006 at 100
// and, with their night sky (Patat 2003, table 4), at 104 and 105 degrees.
func TestTwilight(t *testing.T) {
	night := []float64{22.28, 22.64, 21.61, 20.87, 19.71}
	for i, want := range [][2]float64{{17.685, 21.64}, {17.870, 21.85}, {18.005, 21.32}, {17.635, 20.67}, {16.73, 19.43}} {
		a := twilightFit[i]
		fit := func(x float64) float64 { return a[0] + a[1]*x + a[2]*x*x }
		check.Near(t, fit(10), want[1], 0.011, "printed fit at 105, band %d", i)
		m, ok := Twilight(fiveBand(i), astro.Deg(-10))
		if !ok {
			t.Fatal("no twilight at -10")
		}
		check.Near(t, m.MagArcsec2(), want[0], 1e-9, "at 100, band %d", i)
		for zeta, tol := range map[float64]float64{104: 0.25, 105: 0.17} {
			m, _ := twilightMag(i, zeta)
			check.Near(t, mag(flux(m)+flux(night[i])), fit(zeta-95), tol, "with the night at %v, band %d", zeta, i)
		}
	}
	if _, ok := Twilight(band(t, "V"), astro.Deg(-18.6)); ok {
		t.Error("twilight at -18.6")
	}
	if m, _ := Twilight(band(t, "V"), astro.Deg(20)); m.MagArcsec2() != twilightLimit {
		t.Errorf("day: %v", m)
	}
}

func TestTwilightSun(t *testing.T) {
	for _, name := range []string{"U", "B", "V", "R", "I", "u", "g", "r", "i", "z"} {
		b := band(t, name)
		for down := 0.5; down < 18; down += 0.5 {
			m, ok := Twilight(b, astro.Deg(-down))
			if !ok {
				t.Fatal(name, down)
			}
			h, err := TwilightSun(b, m)
			if err != nil {
				t.Fatal(err)
			}
			check.Near(t, h.Deg(), -down, 1e-6, "%s at -%v", name, down)
		}
		if _, err := TwilightSun(b, astro.MagArcsec2(40)); !errors.Is(err, ErrNoTwilight) {
			t.Error(name, err)
		}
	}
}

// TestUgriz: the dark zenith in AB, table 2 of Ivezić et al. 2019: 22.26, 21.20,
// 20.48, 19.60 in g r i z; ours 22.4, 21.4, 20.7, 19.5, so 0.22 mag of it at most.
func TestUgriz(t *testing.T) {
	dark := case_{zodiacal: 60, solar: 0.8, zm: 180, sun: -90}
	for name, want := range map[string][2]float64{"g": {22.26, 22.4}, "r": {21.20, 21.4}, "i": {20.48, 20.7}, "z": {19.60, 19.5}} {
		got := dark.brightness(t, band(t, name)).Total.MagArcsec2()
		check.Near(t, got, want[0], 0.22, "%s against the survey", name)
		check.Near(t, got, want[1], 0.05, "%s as the recipe has it", name)
	}
	u := dark.brightness(t, band(t, "u")).Total.MagArcsec2()
	check.Near(t, u, 22.01+0.768, 0.006, "u")
	// Under the Moon z is that of I: the 0.9 mag are the airglow's.
	moon := case_{zodiacal: 60, solar: 0.8, sun: -90, z: 30, zm: 45, sep: 45}
	z, ok := moon.brightness(t, band(t, "z")).Of(PartMoon)
	i, ok2 := moon.brightness(t, band(t, "I")).Of(PartMoon)
	if !ok || !ok2 {
		t.Fatal("no moonlight")
	}
	check.Near(t, z.MagArcsec2(), i.MagArcsec2()+0.442, 1e-9, "moonlight in z")
}

func TestNarrow(t *testing.T) {
	dark := case_{zodiacal: 60, solar: 0.8, zm: 180, sun: -90}
	at := func(nm, width float64) float64 {
		b, err := Narrow(astro.Nm(nm), astro.Nm(width))
		if err != nil {
			t.Fatal(err)
		}
		return dark.brightness(t, b).Total.MagArcsec2()
	}
	check.Near(t, at(545, 1), 21.91-0.001, 0.006, "at V")
	check.Near(t, at(557, 0.1)-at(557, 6), 0.5, 1e-9, "with [O I] 557.7")
	check.Near(t, at(656.3, 6.5), at(656.3, 0), 1e-12, "H alpha holds no line")
	if _, err := Narrow(astro.Nm(200), astro.Nm(5)); err == nil {
		t.Error("200 nm")
	}
	if _, err := Narrow(astro.Nm(500), astro.Nm(math.NaN())); err == nil {
		t.Error("no width")
	}
}

// TestParts: shares sum to 1 and the parts to the whole, in every band.
func TestParts(t *testing.T) {
	c := case_{zodiacal: 100, solar: 1.1, sun: -14, z: 50, zm: 50, sep: 70, phase: 80}
	for _, name := range []string{"U", "B", "V", "R", "I", "J", "H", "K", "u", "g", "r", "i", "z", "G", "BP", "RP"} {
		b := c.brightness(t, band(t, name))
		sum, light := 0.0, 0.0
		for p := range parts {
			sum += b.Share(p)
			if m, ok := b.Of(p); ok {
				light += flux(m.MagArcsec2())
			}
		}
		check.Near(t, sum, 1, 1e-12, "shares in %s", name)
		check.Near(t, mag(light), b.Total.MagArcsec2(), 1e-9, "sum of the parts in %s", name)
		if d, ok := b.Without(PartMoon, PartTwilight); !ok || d.MagArcsec2() < b.Total.MagArcsec2()-1e-9 {
			t.Errorf("%s: %v without the Moon, %v with it", name, d, b.Total)
		}
	}
}

// TestMeasuredDark: what was measured at the zenith comes back.
func TestMeasuredDark(t *testing.T) {
	want := map[string]float64{"V": 21.2, "g": 21.7, "z": 18.9, "K": 12.5}
	s, err := NewSite(Conditions{Dark: want, Air: AirAbove{HeightM: 500}, LightPollution: map[string]float64{"R": 21}})
	if err != nil {
		t.Fatal(err)
	}
	for _, bad := range []Conditions{{Dark: map[string]float64{"V": 4}}, {LightPollution: map[string]float64{"": math.NaN()}},
		{SolarActivity: -1}, {Air: AirAbove{OzoneDU: -1}}} {
		if _, err := NewSite(bad); err == nil {
			t.Errorf("no error for %+v", bad)
		}
	}
	if _, err := NewSite(Conditions{Dark: map[string]float64{"W1": 12}, LightPollution: map[string]float64{"W1": 12}}); err != nil {
		t.Error(err)
	}
	still := &Sky{site: s, infra: s.infrared}
	for name, m := range want {
		got := still.brightness(band(t, name), look{x: 1, zodiacal: darkZodiacal, stars: darkStars})
		check.Near(t, got.Total.MagArcsec2(), m, 1e-9, "%s", name)
		if !s.MeasuredDark(band(t, name)) {
			t.Error(name, "is not marked as measured")
		}
	}
	r := still.brightness(band(t, "R"), look{x: 1, zodiacal: darkZodiacal, stars: darkStars})
	check.Near(t, r.Total.MagArcsec2(), mag(flux(21)+flux(21)), 1e-9, "as many lamps as sky")
}

func TestBandNames(t *testing.T) {
	for _, name := range []string{"U", "B", "V", "R", "I", "J", "H", "K", "u", "g", "r", "i", "z", "G", "BP", "RP"} {
		if b := band(t, name); b.Name() != name || b.IsZero() {
			t.Error(name)
		}
	}
	for _, name := range []string{"", "W1", "Ha", "v"} {
		if b, ok := BandOf(name); ok || !b.IsZero() {
			t.Error(name)
		}
	}
}

func TestExtinctionPublished(t *testing.T) {
	for _, row := range check.Table(t, "testdata/astro/extinction.csv").Rows() {
		at := astro.Nm(row.Float("nm"))
		var k float64
		switch row.String("site") {
		case "rayleigh":
			k = Rayleigh(at, 0)
		case "aerosol":
			a := AerosolByHeight(0)
			k = a.K * math.Pow(at.Micron(), -a.Alpha)
		default:
			e, err := NewExtinction(AirAbove{HeightM: row.Float("height") * 1000, OzoneDU: row.Float("ozone"),
				Aerosol: Aerosol{row.Float("k1"), row.Float("alpha")}})
			if err != nil {
				t.Fatal(err)
			}
			k = e.At(at)
		}
		check.Near(t, k, row.Float("k"), row.Float("tol"), "%s at %v nm", row.String("site"), row.Float("nm"))
	}
	// The same by another printing of molecular extinction: Bird & Riordan 1984.
	for _, l := range []float64{.4, .55, .8} {
		check.Near(t, Rayleigh(astro.Micron(l), 0), magsPerNeper/(l*l*l*l*(115.6406-1.335/(l*l))), 0.002, "molecules at %v", l)
	}
	// u g r i z at 2.4 to 2.635 km: .53 .19 .107 .046 .027.
	e, err := NewExtinction(AirAbove{HeightM: 2635, OzoneDU: 258, Aerosol: ParanalAerosol})
	if err != nil {
		t.Fatal(err)
	}
	for name, want := range map[string]float64{"u": .53, "g": .19, "r": .107, "i": .046, "z": .027} {
		check.Near(t, e.In(band(t, name)), want, 0.02, "%s", name)
	}
}

// TestMeasuredExtinction: a measured band keeps its value, others follow V.
func TestMeasuredExtinction(t *testing.T) {
	e, err := NewExtinction(AirAbove{HeightM: 0, Measured: map[string]float64{"V": 0.35, "B": 0.6, "W1": 0.1}})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, e.In(band(t, "V")), 0.35, 1e-12, "V")
	check.Near(t, e.At(astro.Micron(0.545)), 0.35, 1e-9, "the model in V")
	check.Near(t, e.In(band(t, "B")), 0.6, 1e-12, "B")
	check.Near(t, e.Dim(astro.Mags(10), band(t, "V"), 2).Mags(), 10.7, 1e-12, "through two airmasses")
	low, err := NewExtinction(AirAbove{HeightM: 0, Measured: map[string]float64{"V": 0}})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, low.aerosol.K, leastAerosol, 0, "least aerosols")
	if _, err := NewExtinction(AirAbove{Measured: map[string]float64{"V": -0.1}}); err == nil {
		t.Error("an extinction below nothing")
	}
	if _, err := NewExtinction(AirAbove{HeightM: math.NaN()}); err == nil {
		t.Error("no height")
	}
}

// TestSkyProperty: everywhere above the horizon the sky is a number, and the
// Moon, twilight and lamps only brighten it.
func TestSkyProperty(t *testing.T) {
	site := highSite(t, 1)
	names := []string{"U", "B", "V", "R", "I", "J", "H", "K", "u", "g", "r", "i", "z", "G", "BP", "RP"}
	rapid.Check(t, func(rt *rapid.T) {
		dir := func(what string) Direction {
			d := astro.Direction(astro.Deg(rapid.Float64Range(0, 360).Draw(rt, what)), astro.Deg(rapid.Float64Range(-90, 90).Draw(rt, what)))
			return Direction{d, astro.Deg(rapid.Float64Range(-90, 90).Draw(rt, what))}
		}
		scene := Scene{Site: site, Sun: dir("sun"), Moon: dir("moon"), MoonPhase: astro.Deg(rapid.Float64Range(0, 180).Draw(rt, "phase"))}
		sky, err := NewSky(scene)
		if err != nil {
			rt.Fatal(err)
		}
		scene.Moon.Alt, scene.Sun.Alt = astro.Deg(-20), astro.Deg(-40)
		dark, err := NewSky(scene)
		if err != nil {
			rt.Fatal(err)
		}
		at := dir("at")
		b, _ := BandOf(rapid.SampledFrom(names).Draw(rt, "band"))
		got, err := sky.At(at, b)
		if err != nil {
			if !errors.Is(err, ErrNearSun) && !errors.Is(err, air.ErrBelowHorizon) || !math.IsNaN(got.Total.MagArcsec2()) {
				rt.Fatal(err)
			}
			return
		}
		base, err := dark.At(at, b)
		if err != nil {
			rt.Fatal(err)
		}
		if m := got.Total.MagArcsec2(); !(m > 0 && m < 30 && m <= base.Total.MagArcsec2()+1e-9) {
			rt.Fatalf("%v, dark %v", m, base.Total)
		}
	})
}

func FuzzSky(f *testing.F) {
	f.Add(2000.0, 21.5, 0.1, 1.0, 30.0, -20.0, 45.0, 60.0, 500.0, 5.0)
	f.Add(2000.0, 21.5, 600.075, 8.0, 4.0, -47.0, 45.0, 360.0, 500.0, 5.0)
	f.Add(math.NaN(), math.Inf(1), -1.0, 0.0, 90.0, 0.0, -90.0, 180.0, 0.0, -1.0)
	f.Fuzz(func(t *testing.T, height, dark, k, solar, alt, sun, moon, phase, nm, width float64) {
		s, err := NewSite(Conditions{Air: AirAbove{HeightM: height, Measured: map[string]float64{"V": k}}, Dark: map[string]float64{"V": dark, "g": dark},
			SolarActivity: solar})
		if err != nil {
			return
		}
		sky, err := NewSky(Scene{Site: s, Sun: Direction{astro.Direction(astro.Deg(sun), astro.Deg(sun/3)), astro.Deg(sun)},
			Moon: Direction{astro.Vec{X: 1}, astro.Deg(moon)}, MoonPhase: astro.Deg(phase), MoonDistKm: height})
		if err != nil {
			return
		}
		b, err := Narrow(astro.Nm(nm), astro.Nm(width))
		if err != nil {
			b, _ = BandOf("g")
		}
		got, err := sky.At(Direction{astro.Vec{Y: 1}, astro.Deg(alt)}, b)
		if m := got.Total.MagArcsec2(); (err == nil) == math.IsNaN(m) || err == nil && math.IsInf(m, 0) {
			t.Errorf("%v, %v", m, err)
		}
		if _, err := TwilightSun(b, astro.MagArcsec2(dark)); err == nil && math.IsNaN(dark) {
			t.Error("a twilight of no brightness")
		}
	})
}

func benchSky(b *testing.B) (*Sky, Direction) {
	site := highSite(b, 1)
	sky, err := NewSky(Scene{Site: site, Sun: Direction{astro.Direction(astro.Deg(200), astro.Deg(-10)), astro.Deg(-14)},
		Moon: Direction{astro.Direction(astro.Deg(80), astro.Deg(20)), astro.Deg(40)}, MoonPhase: astro.Deg(50)})
	if err != nil {
		b.Fatal(err)
	}
	return sky, Direction{astro.Direction(astro.Deg(40), astro.Deg(30)), astro.Deg(55)}
}

func BenchmarkAt(b *testing.B) {
	sky, d := benchSky(b)
	for _, name := range []string{"V", "g", "z"} {
		band := band(b, name)
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				if _, err := sky.At(d, band); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkNewSky(b *testing.B) {
	site := highSite(b, 1)
	scene := Scene{Site: site, Sun: Direction{astro.Direction(astro.Deg(200), astro.Deg(-10)), astro.Deg(-14)},
		Moon: Direction{astro.Direction(astro.Deg(80), astro.Deg(20)), astro.Deg(40)}, MoonPhase: astro.Deg(50)}
	for b.Loop() {
		if _, err := NewSky(scene); err != nil {
			b.Fatal(err)
		}
	}
}
