package astro_test

import (
	"testing"

	"evenfall/astro"
	"evenfall/astro/check"
)

// TestStandardPressure: the standard atmosphere of ISO 2533, evaluated
// independently of this program, at three heights.
func TestStandardPressure(t *testing.T) {
	for _, c := range []struct{ heightM, hPa float64 }{{0, 1013.25}, {2400, 756.26}, {2635, 734.24}} {
		check.Near(t, astro.StandardPressure(c.heightM), c.hPa, 0.01, "pressure at %v m, hPa", c.heightM)
	}
	w := astro.DefaultWeather(2400)
	check.Near(t, w.PressureHPa, 756.26, 0.01, "assumed pressure at 2400 m")
	check.Near(t, w.Colour.Micron(), 0.55, 1e-12, "assumed colour")
}
