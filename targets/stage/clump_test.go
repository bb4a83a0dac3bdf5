package stage

import (
	"math"
	"testing"

	"evenfall/astro/check"
)

// Twelve values of the odds, computed independently in another language from
// the same fit; absolute magnitude, its error, the sorting quantity, [Fe/H].
func TestClumpOdds(t *testing.T) {
	lg := math.Log10
	for _, c := range []struct {
		by            sorting
		mk, e, v, feh float64
		odds, p       float64
	}{
		{byTemperature, -1.62, .05, lg(4760), 0, 4.290, 0.986},
		{byTemperature, -1.62, .05, lg(4680), 0, 2.796, 0.942},
		{byTemperature, -1.62, .05, lg(4600), 0, 0.947, 0.720},
		{byTemperature, -1.62, .05, lg(4900), -0.4, 5.145, 0.994},
		{byTemperature, -2.0, .05, lg(4700), 0, -0.354, 0.412},
		{byTemperature, -1.1, .05, lg(4800), 0, -1.494, 0.183},
		{byTemperature, -0.5, .05, lg(4850), 0, -5.942, 0.003},
		{byColour, -1.62, .05, 2.10, 0, 3.980, 0.982},
		{byColour, -1.62, .05, 2.35, 0, 1.188, 0.766},
		{byColour, -1.62, .20, 2.10, 0, 3.227, 0.962},
		{byColour, -2.4, .05, 2.40, 0, -3.934, 0.019},
		{byColourAndMetal, -1.62, .05, 2.20, .2, 4.437, 0.988},
	} {
		g := giantSeen{mk: c.mk, mkErr: c.e, by: c.by, v: c.v, feh: c.feh}
		evidence, prior := g.clumpOdds(rgbPerClump)
		check.Near(t, evidence+prior, c.odds, 0.002, "ln odds %+v", c)
		check.Near(t, 1/(1+math.Exp(-evidence-prior)), c.p, 0.001, "probability %+v", c)
		check.Near(t, prior, -math.Log(0.21), 1e-12, "what the prior gives")
	}
}

// With the metallicity unknown the odds lie between those of poor and of rich
// stars, and a range is a range.
func TestClumpOddsWithoutMetals(t *testing.T) {
	g := giantSeen{mk: -1.62, mkErr: .05, by: byTemperature, v: math.Log10(4700)}
	e, p := g.overMetals(rgbPerClump)
	poor, rich := g, g
	poor.feh, rich.feh = -0.4, 0.3
	lo, _ := poor.clumpOdds(rgbPerClump)
	hi, _ := rich.clumpOdds(rgbPerClump)
	if lo > hi {
		lo, hi = hi, lo
	}
	if e < lo || e > hi || p <= 0 {
		t.Errorf("odds without [Fe/H] %.3f, with %.3f to %.3f", e, lo, hi)
	}
	for _, c := range []giantSeen{{mk: -3}, {mk: 1}, {mk: -1.6, feh: -2}, {mk: -1.6, mkErr: 1}} {
		if ok, why := c.inRange(4700, true); ok || why == "" {
			t.Errorf("%+v is taken as in range", c)
		}
	}
}
