package dome

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// The corners of the arch, and the altitude that halves its area: 30 degrees,
// as half of the hemisphere lies below it. Mollweide's auxiliary angle for the
// sine 0.5 is 0.41586 radians.
func TestPlane(t *testing.T) {
	for _, c := range []struct{ az, alt, x, y float64 }{
		{180, 0, 0, 0}, {90, 0, -0.5, 0}, {270, 0, 0.5, 0}, {180, 90, 0, 1}, {33, 90, 0, 1},
		{180, 30, 0, 0.40397}, {90, 30, -0.5 * 0.91477, 0.40397},
	} {
		x, y, ok := plane(180, c.az, c.alt)
		if !ok || math.Abs(x-c.x) > 1e-4 || math.Abs(y-c.y) > 1e-4 {
			t.Errorf("az %v alt %v: %.5f %.5f %v, want %.5f %.5f", c.az, c.alt, x, y, ok, c.x, c.y)
		}
	}
	for _, bad := range [][2]float64{{0, -0.1}, {0, math.NaN()}, {math.NaN(), 10}} {
		if _, _, ok := plane(0, bad[0], bad[1]); ok {
			t.Errorf("%v has a place", bad)
		}
	}
}

// From the sky to the plane and back; each cell is the same piece of sky.
func TestPlaneProperty(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		middle := rapid.Float64Range(0, 360).Draw(t, "middle")
		az, alt := rapid.Float64Range(0, 360).Draw(t, "az"), rapid.Float64Range(0, 89.9).Draw(t, "alt")
		x, y, ok := plane(middle, az, alt)
		if !ok {
			t.Fatal("no place")
		}
		x *= 1 - 1e-9
		gotAz, gotAlt, ok := sky(middle, x, y)
		if !ok || math.Abs(math.Remainder(gotAz-az, 360))*math.Cos(alt*math.Pi/180) > 1e-3 || math.Abs(gotAlt-alt) > 1e-3 {
			t.Fatalf("az %v alt %v came back as %v %v %v", az, alt, gotAz, gotAlt, ok)
		}
		// the area above an altitude is 1 - sin of it
		above := 0.0
		for k := range 2000 {
			if h := (float64(k) + 0.5) / 2000; h > y {
				above += math.Sqrt(1-h*h) / 2000
			}
		}
		if want := math.Pi / 4 * (1 - math.Sin(alt*math.Pi/180)); math.Abs(above-want) > 2e-3 {
			t.Fatalf("area above %v: %v, want %v", alt, above, want)
		}
	})
}
