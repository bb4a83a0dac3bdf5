package exposure

import (
	"math"
	"testing"

	"evenfall/astro"
	"evenfall/astro/photon"
	"evenfall/astro/skyglow"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// The three invented instruments of the demonstration.
func img15() *instrument.Instrument {
	i := &instrument.Instrument{Name: "IMG15", Kind: instrument.Imager, ApertureM: 1.5, ObstructionM: 0.5, PixelArcsec: 0.35, FieldArcmin: 23.9,
		ReadNoiseE: 5, GainEADU: 1.4, DarkES: 0.002, LinearE: 80000, BiasADU: 1000, ADCBits: 16, DeadS: 15, ShutterMinS: 0.2,
		ShutterErrorS: 0.01, ImageQualityArcsec: 0.6}
	for _, m := range []struct {
		band targets.Band
		eta  float64
	}{{"U", .16}, {"B", .34}, {"V", .42}, {"R", .44}, {"I", .36}, {"Ha", .40}, {"O3", .36}} {
		i.Modes = append(i.Modes, instrument.Mode{Name: string(m.band), Band: m.band, Throughput: targets.Known(m.eta), ChangeS: 20})
	}
	return i
}

func spec25() *instrument.Instrument {
	return &instrument.Instrument{Name: "SPEC25", Kind: instrument.Slit, ApertureM: 2.5, ObstructionM: 1, PixelArcsec: 0.25, ReadNoiseE: 3.5,
		GainEADU: 1.1, DarkES: 0.001, LinearE: 62000, BiasADU: 1000, ADCBits: 16, DeadS: 40, ShutterMinS: 1, SlitLengthArcsec: 360, ImageQualityArcsec: 0.5,
		Modes: []instrument.Mode{{Name: "low", RangeNm: [2]float64{340, 930}, SlitArcsec: []float64{.8, 1, 1.2, 1.5, 2, 5}, SlitScalePixel: 4, DispersionNm: 0.2,
			ThroughputAt: [][2]float64{{350, .10}, {450, .22}, {550, .28}, {650, .30}, {750, .26}, {850, .18}, {950, .10}}}}}
}

func quick() *instrument.Instrument {
	return &instrument.Instrument{Name: "QUICK", Kind: instrument.Fast, ApertureM: 3.2, ObstructionM: 1, PixelArcsec: 0.42, FieldArcmin: 7.4, ReadNoiseE: 2.6,
		GainEADU: 1, DarkES: 0.01, LinearE: 55000, BiasADU: 600, ADCBits: 16, DeadS: 0.05, ShutterMinS: 0.03, ImageQualityArcsec: 0.5,
		Modes: []instrument.Mode{{Name: "blue", Band: "g", Throughput: targets.Known(0.42)}, {Name: "red", Band: "r", Throughput: targets.Known(0.45)}}}
}

func skyOf(mu float64) func(skyglow.Band) (skyglow.Brightness, error) {
	return func(skyglow.Band) (skyglow.Brightness, error) {
		return skyglow.Brightness{Total: astro.MagArcsec2(mu), Sigma: 0.2}, nil
	}
}

func air(t testing.TB) *skyglow.Extinction {
	t.Helper()
	e, err := skyglow.NewExtinction(skyglow.AirAbove{HeightM: 2400, OzoneDU: 260, Measured: map[string]float64{"U": .48, "B": .235, "V": .13, "R": .085, "I": .042}})
	if err != nil {
		t.Fatal(err)
	}
	return e
}

// set is an exposure of a star with one sky.
func set(t testing.TB, i *instrument.Instrument, mode string, mag, x, k, mu, seeing float64) Setting {
	t.Helper()
	m, ok := i.Mode(mode)
	if !ok {
		t.Fatal(mode)
	}
	band := m.Band
	if band == "" {
		band = "V"
	}
	return Setting{Instrument: i, Mode: m, Source: Source{Band: band, Light: Steady(astro.Mags(mag))}, Sky: skyOf(mu), Extinction: air(t),
		ExtinctionMag: targets.Known(k), Airmass: astro.Airmass(x), SeeingArcsec: seeing, HeightM: 2400}
}

// solved wants an answer.
func solved(t testing.TB, s Setting) Answer {
	t.Helper()
	a := Solve(s)
	if a.Err != nil {
		t.Fatalf("%+v: %v", s.Goal, a.Err)
	}
	return a
}

// sky is a real sky of one moment.
func sky(t testing.TB, moonAlt, sunAlt, phase float64) (*skyglow.Sky, skyglow.Direction) {
	t.Helper()
	site, err := skyglow.NewSite(skyglow.Conditions{Air: skyglow.AirAbove{HeightM: 2400, Measured: map[string]float64{"V": 0.13}}})
	if err != nil {
		t.Fatal(err)
	}
	moon := astro.Direction(astro.Deg(60), astro.Deg(20))
	s, err := skyglow.NewSky(skyglow.Scene{Site: site, Sun: skyglow.Direction{Dir: astro.Direction(astro.Deg(250), astro.Deg(-22)), Alt: astro.Deg(sunAlt)},
		Moon: skyglow.Direction{Dir: moon, Alt: astro.Deg(moonAlt)}, MoonPhase: astro.Deg(phase)})
	if err != nil {
		t.Fatal(err)
	}
	return s, skyglow.Direction{Dir: astro.Direction(astro.Deg(100), astro.Deg(-20)), Alt: astro.Deg(60)}
}

// abOf makes a magnitude in V of one in AB, for spectra.
func abOf(ab float64) float64 {
	z, _ := photon.ZeroPointOf("V")
	return ab - z.ABMinusVega
}

func finite(v ...float64) bool {
	for _, x := range v {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return false
		}
	}
	return true
}
