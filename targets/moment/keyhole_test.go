package moment

import (
	"math"
	"testing"
	"time"

	"evenfall/astro"
	"evenfall/targets"
)

// The zone by speed and by acceleration at latitude 30, after Borkowski 1987.
func TestKeyhole(t *testing.T) {
	lat := astro.Deg(30)
	for _, c := range []struct{ rate, accel, want float64 }{{0.5, 0, 0.4146}, {1, 0, 0.2073}, {2, 0, 0.1037}, {0, 0.05, 0.0987}, {2, 0.05, 0.1037}, {0, 0, 0}} {
		l := targets.Limits{Mount: "altaz", AzimuthRateDegS: c.rate, AzimuthAccelDegS2: c.accel, MaxAltitude: astro.Deg(90)}
		if got := Keyhole(&l, lat).Deg(); math.Abs(got-c.want) > 0.00005 {
			t.Errorf("rate %v, acceleration %v: %.5f deg, want %.4f", c.rate, c.accel, got, c.want)
		}
		top := 90.0
		if c.want > 0 {
			top = 90 - c.want - 0.1
		}
		if got := Top(&l, lat).Deg(); math.Abs(got-top) > 0.0001 {
			t.Errorf("rate %v: up to %.4f deg, want %.4f", c.rate, got, top)
		}
	}
	l := targets.DefaultLimits()
	if got := Top(&l, lat).Deg(); got != 88 {
		t.Errorf("the limit that is set counts where it is lower: %v", got)
	}
	l.Mount = "equatorial"
	if Keyhole(&l, lat).Rad() != 0 {
		t.Error("an equatorial mount has a keyhole")
	}
	for _, bad := range []float64{math.NaN(), math.Inf(1), -1, 1e-300} {
		l := targets.Limits{Mount: "altaz", AzimuthRateDegS: bad, AzimuthAccelDegS2: bad, MaxAltitude: astro.Deg(90)}
		if z := Keyhole(&l, lat).Deg(); !(z >= 0 && z <= 90) {
			t.Errorf("rate %v: %v", bad, z)
		}
	}
}

// A star at latitude 29, declination 20, hour angle -15 degrees; confirmed by
// finite differences of ERFA.
func TestRates(t *testing.T) {
	if got := AzimuthRate(astro.Deg(29), astro.Deg(120.087), astro.Deg(73.675)); math.Abs(got-29.8088) > 0.002 {
		t.Errorf("%.4f arcsec/s, want 29.8088", got)
	}
}

// A slow drive cannot follow near the zenith, and the times are those at which
// a star is that near; an equatorial mount turns over at the transit.
func TestKeyholeTimes(t *testing.T) {
	l := targets.DefaultLimits()
	l.MaxAltitude, l.AzimuthRateDegS = astro.Deg(90), 0.05
	n := testNight(t, l)
	if want := 90 - Keyhole(&l, testSite.Lat).Deg() - 0.1; math.Abs(n.edges.top.Deg()-want) > 0.01 {
		t.Errorf("edge at %v, want %v", n.edges.top.Deg(), want)
	}
	found := 0
	for _, p := range testStars(t) {
		c := Tonight(n, &p, Want{})
		for _, k := range c.HardLimits() {
			if k.Code == targets.CodeZenith && len(k.Kept) == 2 {
				found++
				middle := astro.Span{From: k.Kept[0].Until, Until: k.Kept[1].From}.Middle()
				if gap := middle.Sub(*c.Transit); c.Transit == nil || math.Abs(gap.Seconds()) > 60 {
					t.Errorf("%s: the middle is %v from the transit", p.Target.Name, gap)
				}
			}
		}
		if _, ok := c.Flip(); ok {
			t.Fatal("an alt-azimuth mount turns over")
		}
	}
	if found == 0 {
		t.Error("no star passes near the zenith")
	}
	l.Mount, l.FlipMin = "equatorial", 5
	p := testStars(t)[0]
	c := Tonight(testNight(t, l), &p, Want{})
	if s, ok := c.Flip(); !ok || s.Length() != 5*time.Minute || !s.From.UTC().Equal(c.Transit.UTC()) {
		t.Errorf("%v, %v", s, ok)
	}
}
