package finding

import (
	"math"
	"strings"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/astro/check"
	"evenfall/astro/frame"
	"evenfall/astro/skyglow"
	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/instrument"
)

func instant(t testing.TB, jdDay, frac float64) astro.Instant {
	t.Helper()
	days := jdDay - 2440587.5
	i, err := timescale.At(time.Unix(0, 0).Add(time.Duration(days) * 24 * time.Hour).Add(time.Duration(frac * 86400e9)))
	if err != nil {
		t.Fatal(err)
	}
	return i
}

// TestPairs: separations, position angles and offsets of pairs with motion and
// parallax against ERFA: 0.01 arcsec and 0.01 deg.
func TestPairs(t *testing.T) {
	worst, worstPA := 0.0, 0.0
	for _, r := range check.Table(t, "testdata/astro/pairs.csv").Rows() {
		at := instant(t, r.Float("jd_day"), r.Float("jd_frac"))
		star := func(k string) *targets.Target {
			return &targets.Target{Place: targets.Place{RA: astro.Deg(r.Float("ra" + k)), Dec: astro.Deg(r.Float("dec" + k)), EpochJyr: r.Float("epoch" + k), EpochGiven: true,
				PMRA: targets.Known(r.Float("pmra" + k)), PMDec: targets.Known(r.Float("pmdec" + k)), Plx: targets.Known(r.Float("plx" + k)), RV: targets.Known(r.Float("rv" + k))}}
		}
		one, two := Tonight(star("1"), at), Tonight(star("2"), at)
		o := Between(one.Dir, two.Dir)
		check.Near(t, o.SepArcsec, r.Float("sep"), 0.01, "%s: separation", r.Where())
		check.Near(t, math.Mod(o.PADeg-r.Float("pa")+540, 360), 180, 0.01, "%s: position angle", r.Where())
		check.Near(t, o.EastArcsec, r.Float("east"), 0.01, "%s: east", r.Where())
		check.Near(t, o.NorthArcsec, r.Float("north"), 0.01, "%s: north", r.Where())
		check.Near(t, one.MovedArcsec, r.Float("moved"), 0.01, "%s: moved", r.Where())
		if r.Float("moved") > 1 {
			check.Near(t, math.Mod(one.TowardsDeg-r.Float("towards")+540, 360), 180, 0.01, "%s: towards", r.Where())
		}
		worst = math.Max(worst, math.Hypot(o.EastArcsec-r.Float("east"), o.NorthArcsec-r.Float("north")))
		worstPA = math.Max(worstPA, math.Abs(math.Mod(o.PADeg-r.Float("pa")+540, 360)-180))
		back := Between(one.Dir, At(one.Dir, o.EastArcsec, o.NorthArcsec))
		check.Near(t, math.Hypot(back.EastArcsec-o.EastArcsec, back.NorthArcsec-o.NorthArcsec), 0, 1e-6, "there and back")
	}
	t.Logf("offsets within %.5f arcsec, position angles within %.6f deg", worst, worstPA)
}

func FuzzBetween(f *testing.F) {
	f.Add(10.0, 20.0, 10.1, 20.1)
	f.Add(0.0, 90.0, 0.0, -90.0)
	f.Fuzz(func(t *testing.T, ra1, dec1, ra2, dec2 float64) {
		for _, v := range []float64{ra1, dec1, ra2, dec2} {
			if math.IsNaN(v) || math.Abs(v) > 1e6 {
				return
			}
		}
		o := Between(astro.Direction(astro.Deg(ra1), astro.Deg(dec1)), astro.Direction(astro.Deg(ra2), astro.Deg(dec2)))
		if math.IsNaN(o.SepArcsec+o.PADeg+o.EastArcsec+o.NorthArcsec+o.RASeconds+o.DecArcsec) || o.PADeg < 0 || o.PADeg >= 360.0000001 {
			t.Fatalf("%+v", o)
		}
		Tonight(&targets.Target{Place: targets.Place{RA: astro.Deg(ra1), Dec: astro.Deg(dec1), PMRA: targets.Known(ra2), PMDec: targets.Known(dec2)}}, instant(t, 2461376.5, 0.5))
	})
}

// listed is a star of a list.
func listed(name string, ra, dec, v float64) targets.Target {
	t := targets.Target{Name: name, Kind: targets.WD, Mags: map[targets.Band]targets.Measure{"V": targets.Known(v)}}
	t.Place = targets.Place{RA: astro.Deg(ra), Dec: astro.Deg(dec), EpochJyr: 2000, EpochGiven: true}
	return t
}

func moving(t targets.Target, pmra, pmdec float64) targets.Target {
	t.Place.PMRA, t.Place.PMDec = targets.Known(pmra), targets.Known(pmdec)
	return t
}

func TestTonight(t *testing.T) {
	at := instant(t, 2461376.5, 0.1) // 2026.92
	wd := moving(listed("w", 100, -20, 15), 0, -1000)
	f := Tonight(&wd, at)
	check.Near(t, f.MovedArcsec, 26.92, 0.01, "moved")
	check.Near(t, f.TowardsDeg, 180, 1e-6, "towards")
	if !strings.Contains(f.Words, "26.9 arcsec to the S ") || f.SearchArcsec != 0 {
		t.Error(f.Words)
	}
	wd.Place.PMDec.Err = 10
	check.Near(t, Tonight(&wd, at).SearchArcsec, 0.81, 0.01, "three times the error")
	plain := listed("p", 100, -20, 15)
	f = Tonight(&plain, at)
	check.Near(t, f.SearchArcsec, 1.4*26.92, 0.02, "search")
	if f.Known || !strings.Contains(f.Words, "no proper motion listed") {
		t.Error(f.Words)
	}
	for pa, want := range map[float64]string{0: "N", 359: "N", 90: "E", 225: "SW", -45: "NW", math.NaN(): "?"} {
		if got := Compass(pa); got != want {
			t.Errorf("%v: %s", pa, got)
		}
	}
}

func TestOffsetStars(t *testing.T) {
	at := instant(t, 2461376.5, 0.1)
	target := moving(listed("target", 100, 0, 17), 0, 0)
	field := []targets.Target{
		moving(listed("far", 100.05, 0, 9), 0, 0), moving(listed("near", 100, 100.0/3600, 12), 0, 0), moving(listed("faint", 100, 50.0/3600, 18), 0, 0),
		listed("no motion", 100, 30.0/3600, 10), moving(listed("target again", 100, 0, 14), 0, 0), moving(listed("too far", 101, 0, 5), 0, 0),
	}
	g := OffsetStars(&target, field, at, Rule{})
	if len(g) != 3 || g[0].Name != "near" || g[1].Name != "far" || g[2].Name != "no motion" {
		t.Fatalf("%+v", g)
	}
	check.Near(t, g[0].From.NorthArcsec, -100, 1e-3, "from it to the target")
	check.Near(t, g[1].From.EastArcsec, -180, 1e-3, "from it to the target")
	check.Near(t, g[1].From.RASeconds, -12, 1e-6, "seconds of right ascension")
	check.Near(t, g[2].UncertainBy, 0.02*26.92, 0.01, "uncertain by")
	if !strings.Contains(g[0].Words, "100.00 arcsec south") {
		t.Error(g[0].Words)
	}
}

func TestCamera(t *testing.T) {
	c := Camera{WidthArcsec: 600, HighArcsec: 300}
	o := Offset{EastArcsec: 100, NorthArcsec: 50}
	r, u, in := c.On(o)
	if r != -100 || u != 50 || !in {
		t.Error(r, u, in)
	}
	c.RotationDeg = 90 // up is east, right is north
	r, u, _ = c.On(o)
	check.Near(t, r, 50, 1e-9, "right")
	check.Near(t, u, 100, 1e-9, "up")
	c.Flip, c.RotationDeg = true, 33
	r, u, _ = c.On(o)
	e, n := c.Corner(r, u)
	check.Near(t, math.Hypot(e-100, n-50), 0, 1e-9, "back")
	if _, _, in := c.On(Offset{NorthArcsec: 900}); in {
		t.Error("outside")
	}
}

func setting(t testing.TB) exposure.Setting {
	t.Helper()
	e, err := skyglow.NewExtinction(skyglow.AirAbove{HeightM: 2400})
	if err != nil {
		t.Fatal(err)
	}
	i := &instrument.Instrument{Name: "IMG15", Kind: instrument.Imager, ApertureM: 1.5, ObstructionM: 0.5, PixelArcsec: 0.35, FieldArcmin: 10, ReadNoiseE: 5,
		GainEADU: 1.4, LinearE: 80000, DeadS: 15, ShutterMinS: 0.2, ImageQualityArcsec: 0.6, Modes: []instrument.Mode{{Name: "V", Band: "V", Throughput: targets.Known(.42)}}}
	return exposure.Setting{Instrument: i, Mode: &i.Modes[0], Source: exposure.Source{Band: "V", Light: exposure.Steady(astro.Mags(14))}, Goal: exposure.Goal{SNR: 100},
		Sky: func(skyglow.Band) (skyglow.Brightness, error) {
			return skyglow.Brightness{Total: astro.MagArcsec2(21.5)}, nil
		}, Extinction: e, Airmass: 1.2, SeeingArcsec: 1.1, HeightM: 2400}
}

func TestComparisons(t *testing.T) {
	at := instant(t, 2461376.5, 0.1)
	s := setting(t)
	a := exposure.Solve(s)
	target := moving(listed("target", 100, 0, 14), 0, 0)
	v := moving(listed("variable", 100.02, 0, 12), 0, 0)
	v.Var.Type = "EA"
	field := []targets.Target{moving(listed("bright", 100, 100.0/3600, 3), 0, 0), moving(listed("good", 100.01, 0, 12.5), 0, 0), v,
		moving(listed("as good", 100, -0.01, 14), 0, 0), moving(listed("outside", 100.2, 0, 12), 0, 0), moving(listed("lost", 100, 0.02, 22), 0, 0)}
	c := Comparisons(s, a, &target, field, at)
	if len(c) != 4 || c[0].Name != "good" || c[1].Name != "as good" || !c[1].Survives {
		t.Fatalf("%+v", c)
	}
	check.Near(t, c[1].SNR, a.SNR, 1e-6*a.SNR, "S/N of a star like the target")
	for _, x := range c[2:] {
		if x.Why == "" || (x.Name == "bright") == x.Survives {
			t.Errorf("%+v", x)
		}
	}
	if Comparisons(s, exposure.Answer{}, &target, field, at) != nil {
		t.Error("without an answer")
	}
}

func TestGlare(t *testing.T) {
	w := listed("Sirius B", 101.29, -16.7, 8.4)
	if _, ok := GlareOf(&w, 1, "V"); ok {
		t.Error("no companion is listed")
	}
	w.Physics.CompMag, w.Physics.CompSepArcsec, w.Physics.CompP = targets.Known(-1.46), targets.Known(11.2), targets.Known(68-180)
	g, ok := GlareOf(&w, 1, "V")
	if !ok || g.Blends || !strings.Contains(g.Words, "in the glare of a star of -1.5, 11.2 arcsec away, to the WSW") {
		t.Errorf("%+v", g)
	}
	check.Near(t, g.Times, math.Pow(10, 0.4*9.86), 1, "times brighter")
	if g, _ = GlareOf(&w, 6, "V"); !g.Blends {
		t.Error("apart in a seeing of 6")
	}
}

func TestAim(t *testing.T) {
	at := instant(t, 2461376.5, 0.1)
	n := moving(listed("n", 100, 0, 14), 0, 0)
	n.Nebula = targets.Nebula{DiamArcsec: targets.Known(60), Diam2Arcsec: targets.Known(40), PADeg: targets.Known(0)}
	a := AimAt(&n, at, 0, 25)
	check.Near(t, a.Dec.Arcsec(), 25, 1e-6, "aim")
	check.Near(t, a.Sky.SepArcsec, 40, 1e-6, "sky")
	check.Near(t, a.Sky.PADeg, 90, 1e-6, "sky to the east")
	if !a.Inside || AimAt(&n, at, 25, 0).Inside {
		t.Error("inside the ellipse")
	}
	check.Near(t, AimAt(&n, at, -5, 0).Sky.PADeg, 270, 1e-6, "sky to the west")
	n.Nebula.DiamArcsec = targets.Measure{}
	if a := AimAt(&n, at, 1, 1); len(a.Words) == 0 {
		t.Error("no size")
	}
}

func TestAlongAxis(t *testing.T) {
	s := setting(t)
	s.Instrument = &instrument.Instrument{Name: "S", Kind: instrument.Slit, ApertureM: 2.5, ObstructionM: 1, PixelArcsec: 0.25, ReadNoiseE: 3.5, LinearE: 60000,
		Modes: []instrument.Mode{{Name: "low", RangeNm: [2]float64{340, 930}, Throughput: targets.Known(.2), SlitArcsec: []float64{1.2}, SlitScalePixel: 4, DispersionNm: .2}}}
	s.Mode = &s.Instrument.Modes[0]
	if _, err := AlongAxis(s, 30); err == nil {
		t.Error("without a pointing")
	}
	s.Pointing = &exposure.Pointing{Lat: astro.Deg(-29), Dec: astro.Deg(-10), HourAngle: astro.Hours(3.5)}
	s.Airmass = 1.7
	x, err := AlongAxis(s, 30)
	if err != nil || !(x.ApartDeg > 80) || !(x.LossAxis > x.LossParallactic+0.2) || !(x.ShiftArcsec > 1.5) || x.AxisDeg != 30 {
		t.Errorf("%+v %v", x, err)
	}
}

var sink astro.Vec

func BenchmarkDirection(b *testing.B) {
	at := instant(b, 2461376.5, 0.1)
	c := frame.Catalogue{RA: astro.Deg(100), Dec: astro.Deg(-20), EpochJyr: 2016, PMRA: astro.Arcsec(1), Parallax: astro.Arcsec(0.1)}
	for range b.N {
		sink = Direction(c, at)
	}
}
