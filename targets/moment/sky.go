package moment

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
	"evenfall/astro/skyglow"
	"evenfall/targets"
)

// SkyBand is the band that the sky is given in where nothing else is wanted.
const SkyBand targets.Band = "V"

// SkyNow is how bright the sky is behind a target.
type SkyNow struct {
	Band  targets.Band
	Known bool
	skyglow.Brightness
	MoonCost float64 // how many times brighter than without the Moon; 1 without it
	Why      string  // why it is not known
}

// NewSkySite makes the sky of a site ready from its height and what a run
// knows of it.
//
// Returns:
//   - an error where a measured value is beyond nature; the caller says so and
//     goes on with the default sky.
func NewSkySite(site astro.Site, c skyglow.Conditions) (*skyglow.Site, error) {
	c.Air.HeightM = site.HeightM
	return skyglow.NewSite(c)
}

// defaultSky is the sky of a dark site of that height.
func defaultSky(site astro.Site) *skyglow.Site {
	s, err := NewSkySite(site, skyglow.Conditions{})
	if err != nil {
		return nil // the height is beyond nature
	}
	return s
}

// makeSky makes the sky of an instant; nil where there is none to be had.
func makeSky(site *skyglow.Site, sun, moon ephem.Body) *skyglow.Sky {
	if site == nil {
		return nil
	}
	sky, err := skyglow.NewSky(skyglow.Scene{Site: site, Sun: skyglow.Direction{Dir: sun.Dir, Alt: sun.Place.Alt},
		Moon: skyglow.Direction{Dir: moon.Dir, Alt: moon.Place.Alt}, MoonPhase: ephem.MoonPhase(moon, sun).Angle, MoonDistKm: moon.DistanceKm})
	if err != nil {
		return nil
	}
	return sky
}

// skyName is the band that the sky behind a band is told in; nebulae's lines
// have the sky of V.
func skyName(band targets.Band) targets.Band {
	if band == "" || lineBand(band) {
		return SkyBand
	}
	return band
}

// SkyAt returns how bright the sky is at a place in a band; nebulae's lines
// have the sky of V, in which their neighbourhood lies.
//
// Notes:
//  1. Below the horizon there is none; nor close to the Sun.
func (s *Scene) SkyAt(p *frame.Place, band targets.Band) SkyNow {
	name := skyName(band)
	out := SkyNow{Band: name, MoonCost: 1}
	b, ok := skyglow.BandOf(string(name))
	switch {
	case s.Sky == nil:
		out.Why = "no sky for this site"
		return out
	case !ok:
		out.Why = "no sky in band " + string(name)
		return out
	}
	bright, err := s.Sky.At(skyglow.Direction{Dir: p.Dir, Alt: p.Alt}, b)
	if err != nil {
		out.Why = err.Error()
		return out
	}
	out.Known, out.Brightness = true, bright
	if without, ok := bright.Without(skyglow.PartMoon); ok {
		out.MoonCost = brighter(without, bright.Total)
	}
	return out
}

// brighter tells how many times brighter b is than a.
func brighter(a, b astro.SurfaceMag) float64 {
	return math.Pow(10, 0.4*(a.MagArcsec2()-b.MagArcsec2()))
}

func lineBand(b targets.Band) bool { return b == "Ha" || b == "Hb" || b == "O3" }
