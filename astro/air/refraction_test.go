package air

import (
	"math"
	"os"
	"path/filepath"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/meeusfence"
)

// published is the air of testdata/astro/refraction_published.csv.
var published = astro.Weather{PressureHPa: 1010, TemperatureC: 10, Colour: astro.Micron(0.574)}

// tangents is A tan z + B tan³ z by apparent altitude, arcmin.
func tangents(apparent astro.Angle) float64 {
	a, b := Constants(published)
	tz := apparent.Cos() / apparent.Sin()
	return astro.Rad(a*tz+b*tz*tz*tz).Deg() * 60
}

func TestRefractionPublished(t *testing.T) {
	for _, row := range check.Table(t, "testdata/astro/refraction_published.csv").Rows() {
		h := astro.Deg(row.Float("h"))
		var got float64
		switch f := row.String("formula"); f {
		case "bennett":
			got = meeusfence.Bennett(h).Deg() * 60
		case "bennett_refined":
			got = meeusfence.BennettRefined(h).Deg() * 60
		case "saemundsson":
			got = meeusfence.Saemundsson(h).Deg() * 60
		case "constants":
			got = tangents(h)
		case "refined_excess":
			got = 100 * (meeusfence.BennettRefined(h).Deg()*60/tangents(h) - 1)
		default:
			t.Fatalf("%s: no formula %q", row.Where(), f)
		}
		check.Near(t, got, row.Float("r"), row.Float("tol"), "%s: %s at %v deg", row.Where(), row.String("formula"), row.String("h"))
	}
}

// TestConstants: the case that ERFA tests its refco with, 800 hPa, 10 C,
// humidity 0.9, 0.4 micrometres (test program t_erfa_c.c).
func TestConstants(t *testing.T) {
	a, b := Constants(astro.Weather{PressureHPa: 800, TemperatureC: 10, Humidity: 0.9, Colour: astro.Micron(0.4)})
	check.Near(t, a, 0.2264949956241415009e-3, 1e-15, "A")
	check.Near(t, b, -0.2598658261729343970e-6, 1e-18, "B")
}

func TestWeatherBeyondNature(t *testing.T) {
	nan := math.NaN()
	std := astro.DefaultWeather(0)
	bent := func(w astro.Weather) float64 { return Refract(astro.Deg(20), w).Deg() - 20 }
	for name, c := range map[string]struct{ w, same astro.Weather }{
		"no colour":         {astro.Weather{PressureHPa: 1000, TemperatureC: 5}, astro.Weather{PressureHPa: 1000, TemperatureC: 5, Colour: astro.Micron(0.55)}},
		"negative pressure": {astro.Weather{PressureHPa: -5, Colour: std.Colour}, astro.Weather{}},
		"pressure nowhere":  {astro.Weather{PressureHPa: nan, Colour: std.Colour}, astro.Weather{}},
		"humidity 2":        {astro.Weather{PressureHPa: 1000, Humidity: 2, Colour: std.Colour}, astro.Weather{PressureHPa: 1000, Humidity: 1, Colour: std.Colour}},
		"colder than air":   {astro.Weather{PressureHPa: 1000, TemperatureC: -400, Colour: std.Colour}, astro.Weather{PressureHPa: 1000, TemperatureC: -150, Colour: std.Colour}},
		"temperature lost":  {astro.Weather{PressureHPa: 1000, TemperatureC: nan, Colour: std.Colour}, astro.Weather{PressureHPa: 1000, Colour: std.Colour}},
		"radio":             {astro.Weather{PressureHPa: 1000, Colour: astro.Micron(5000)}, astro.Weather{PressureHPa: 1000, Colour: astro.Micron(100)}},
	} {
		check.Near(t, bent(c.w), bent(c.same), 0, "%s", name)
	}
	if got := bent(astro.Weather{}); got != 0 {
		t.Errorf("without air %v degrees", got)
	}
	if got := Refract(astro.Deg(nan), std).Deg(); !math.IsNaN(got) {
		t.Errorf("a star nowhere is seen at %v", got)
	}
	if got := Unrefract(astro.Deg(nan), std).Deg(); !math.IsNaN(got) {
		t.Errorf("a star nowhere is at %v", got)
	}
}

// TestRefractTable: against ERFA's atio13, above 8 degrees, 1 arcsec; the same
// formula and the same constants meet it in 0.01.
func TestRefractTable(t *testing.T) {
	const path = "testdata/astro/refraction.csv"
	if _, err := os.Stat(filepath.Join(check.Root(t), filepath.FromSlash(path))); err != nil {
		t.Skipf("%s is not there; the comparison with ERFA is left out", path)
	}
	againstERFA(t, check.Table(t, path))
}

// TestRefractVectors: the same against the larger table kept beside the repository.
func TestRefractVectors(t *testing.T) {
	againstERFA(t, check.Table(t, check.Shared(t, "vectors/erfa_vectors.csv"), check.PlainComments))
}

func againstERFA(t *testing.T, table *check.Reference) {
	t.Helper()
	worst, n := 0.0, 0
	for _, row := range table.Rows() {
		want := astro.Deg(row.Float("alt_refr"))
		if want.Deg() < 8 {
			continue
		}
		n++
		w := astro.Weather{PressureHPa: row.Float("p_hpa"), TemperatureC: row.Float("t_c"), Humidity: row.Float("rh"), Colour: astro.Micron(row.Float("wl_um"))}
		got := Refract(astro.Deg(row.Float("alt")), w)
		check.Near(t, got.Arcsec(), want.Arcsec(), 1, "%s: refracted altitude, arcsec", row.Where())
		if want.Deg() > 8.2 {
			worst = max(worst, math.Abs(got.Minus(want).Arcsec()))
		}
		back := Unrefract(want, w)
		check.Near(t, back.Arcsec(), astro.Deg(row.Float("alt")).Arcsec(), 1, "%s: altitude without air, arcsec", row.Where())
	}
	if n < 50 {
		t.Fatalf("only %d rows above 8 degrees", n)
	}
	if worst > 0.01 {
		t.Errorf("%.4f arcsec at worst; the formula is ERFA's own and meets it in 0.01", worst)
	}
	t.Logf("%d rows, %.5f arcsec at worst", n, worst)
}

// TestPublishedDifferences: what the choice of formulas rests on, 1010 hPa and
// 10 C: the two differ by 11 arcsec at 8 degrees and 10 at 10.
func TestPublishedDifferences(t *testing.T) {
	b := bendingOf(astro.Weather{PressureHPa: 1010, TemperatureC: 10, Humidity: 0.3, Colour: astro.Micron(0.55)})
	for hDeg, want := range map[float64]float64{8: 11, 10: 10} {
		h := astro.Deg(hDeg)
		d := b.saemundsson(h).Arcsec() - b.tangents(h).Arcsec()
		check.Near(t, math.Abs(d), want, 2.5, "difference at %v deg, arcsec", hDeg)
	}
}

func TestRefractEnds(t *testing.T) {
	w := astro.DefaultWeather(0)
	for hDeg, want := range map[float64]float64{90: 90, -1: -1, -1.5: -1.5, -4.4: -4.4, -5.11: -5.11, -90: -90} {
		check.Near(t, Refract(astro.Deg(hDeg), w).Deg(), want, 1e-12, "apparent altitude of %v deg", hDeg)
		check.Near(t, Unrefract(astro.Deg(want), w).Deg(), hDeg, 1e-9, "true altitude of %v deg", hDeg)
	}
	// Saemundsson 1986: 28.982 arcmin at a true altitude of 0, 1010 hPa, 10 C.
	check.Near(t, Refract(astro.Angle{}, published).Deg()*60, 28.982, 0.0005, "at the true horizon")
}

// drawWeather draws the air of any observatory on Earth, and somewhat beyond.
func drawWeather(rt *rapid.T) astro.Weather {
	return astro.Weather{
		PressureHPa:  rapid.Float64Range(300, 1085).Draw(rt, "hPa"),
		TemperatureC: rapid.Float64Range(-60, 50).Draw(rt, "C"),
		Humidity:     rapid.Float64Range(0, 1).Draw(rt, "humidity"),
		Colour:       astro.Micron(rapid.Float64Range(0.3, 2.5).Draw(rt, "micron")),
	}
}

// TestRefractProperty: apparent altitude rises with true altitude, refraction
// falls with it from -0.9 degrees up, is never negative, and can be undone to
// 1e-9 degrees.
func TestRefractProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		w := drawWeather(rt)
		hDeg := rapid.Float64Range(-2, 89.99).Draw(rt, "alt")
		step := rapid.Float64Range(1e-6, 0.01).Draw(rt, "step")
		h, next := astro.Deg(hDeg), astro.Deg(hDeg+step)
		low, high := Refract(h, w), Refract(next, w)
		if !low.Less(high) {
			rt.Fatalf("at %v deg: apparent %v, then %v", hDeg, low, high)
		}
		r, rNext := low.Minus(h).Deg(), high.Minus(next).Deg()
		if r < 0 || r > 1 {
			rt.Fatalf("refraction %v deg at %v", r, hDeg)
		}
		if hDeg > fadeFromDeg && rNext > r+1e-13 {
			rt.Fatalf("refraction rises from %v to %v at %v deg", r, rNext, hDeg)
		}
		if back := Unrefract(low, w); math.Abs(back.Deg()-hDeg) > 1e-9 {
			rt.Fatalf("%v deg comes back as %v", hDeg, back.Deg())
		}
	})
}

// TestRefractNoJump: a fine scan finds no jump where formulas meet.
func TestRefractNoJump(t *testing.T) {
	const stepDeg = 1e-4
	for _, w := range []astro.Weather{astro.DefaultWeather(0), astro.DefaultWeather(5000), {PressureHPa: 1060, TemperatureC: -40, Colour: astro.Micron(0.35)}} {
		before := Refract(astro.Deg(-1.1), w).Deg()
		for i := 1; i < 110000; i++ {
			at := Refract(astro.Deg(-1.1+float64(i)*stepDeg), w).Deg()
			// The fade is the steepest part: 1.5 x R / 0.1 degrees a degree.
			if rise := (at - before) / stepDeg; !(rise > 0 && rise < 16) {
				t.Fatalf("at %v deg apparent altitude rises by %v a degree", -1.1+float64(i)*stepDeg, rise)
			}
			before = at
		}
	}
}

func BenchmarkRefract(b *testing.B) {
	w := astro.DefaultWeather(2400)
	for b.Loop() {
		if Refract(astro.Deg(33), w).Deg() < 33 {
			b.Fatal("not lifted")
		}
	}
}

func BenchmarkUnrefract(b *testing.B) {
	w := astro.DefaultWeather(2400)
	for b.Loop() {
		if Unrefract(astro.Deg(33), w).Deg() > 33 {
			b.Fatal("lifted")
		}
	}
}
