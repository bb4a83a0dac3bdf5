package meeusfence

import (
	"math"
	"testing"

	"github.com/soniakeys/meeus/v3/refraction"
	"github.com/soniakeys/unit"

	"evenfall/astro"
)

// TestRefractionTraps: the library's formulas have a pole near -4.4 and -5.11
// degrees and no meaning below; the fence gives 0 there.
func TestRefractionTraps(t *testing.T) {
	formulas := map[string]struct {
		raw    func(unit.Angle) unit.Angle
		fenced func(astro.Angle) astro.Angle
	}{
		"Saemundsson":    {refraction.Saemundsson, Saemundsson},
		"Bennett":        {refraction.Bennett, Bennett},
		"BennettRefined": {refraction.Bennett2, BennettRefined},
	}
	for name, f := range formulas {
		absurd := false
		for i := -9000; i <= 9000; i++ {
			hDeg := float64(i) / 100
			raw := f.raw(unit.AngleFromDeg(hDeg)).Deg()
			got := f.fenced(astro.Deg(hDeg)).Deg()
			switch {
			case hDeg < -1 && got != 0:
				t.Fatalf("%s at %v deg: %v, want 0", name, hDeg, got)
			case !(got >= 0 && got < 1):
				t.Fatalf("%s at %v deg: %v is no refraction", name, hDeg, got)
			case hDeg >= -1 && hDeg < 89 && math.Abs(got-raw) > 1e-12:
				t.Fatalf("%s at %v deg: %v, the library says %v", name, hDeg, got, raw)
			}
			if hDeg < -4.3 && !(raw >= 0 && raw < 1) {
				absurd = true
			}
		}
		if !absurd {
			t.Errorf("%s: the library is no longer absurd below -4.3 deg; the fence may move", name)
		}
		if got := f.raw(unit.AngleFromDeg(90)).Deg(); got >= 0 {
			t.Errorf("%s: the library no longer lifts a star past the zenith: %v", name, got)
		}
		for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
			if got := f.fenced(astro.Deg(v)).Deg(); got != 0 {
				t.Errorf("%s at %v: %v, want 0", name, v, got)
			}
		}
	}
}
