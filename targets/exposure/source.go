package exposure

import (
	"evenfall/astro"
	"evenfall/astro/bands"
	"evenfall/astro/nebular"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// SourceOf makes a source of a listed target and its forecast.
//
// Given:
//   - b: the band that the forecast is in.
//   - colours: from [ColoursOf], once a target; nil: none.
//
// Notes:
//  1. A nebula's companion and colours are left out; a star's companion counts
//     where magnitude and separation are listed.
func SourceOf(t *targets.Target, b targets.Band, light Brightness, colours map[targets.Band]float64) Source {
	s := Source{Name: t.Name, Band: b, Light: light}
	if _, line := instrument.Line(b); line && t.Kind == targets.PN {
		n := Nebula{}
		if t.Nebula.DiamArcsec.Known {
			n.DiamArcsec = t.Nebula.DiamArcsec.Value
		}
		if t.Nebula.Diam2Arcsec.Known {
			n.Diam2Arcsec = t.Nebula.Diam2Arcsec.Value
		}
		switch {
		case t.Nebula.CHb.Known:
			n.CHb = t.Nebula.CHb.Value
		case t.Physics.EBV.Known:
			n.CHb = nebular.CFromEBV(t.Physics.EBV.Value)
		}
		s.Nebula = &n
		return s
	}
	s.Colours = colours
	if p := &t.Physics; p.CompMag.Known && p.CompSepArcsec.Known {
		s.Companion = &Companion{astro.Mags(p.CompMag.Value), p.CompSepArcsec.Value}
	}
	return s
}

// shapeBands are the bands that a colour is wanted in.
var shapeBands = []targets.Band{"U", "B", "V", "R", "I", "J"}

// ColoursOf returns the magnitudes that a target's colour is taken from: those
// listed, and in U B V R I J those that follow from them by published relations.
//
// Returns:
//   - nil where nothing is listed. For colours alone: of a variable star they
//     are of no one moment.
//
// Notes:
//  1. Some tens of microseconds: once a target.
//
// Checked: TestColoursOf.
func ColoursOf(t *targets.Target) map[targets.Band]float64 {
	known := map[bands.Band]bands.Measure{}
	out := map[targets.Band]float64{}
	for b, m := range t.Mags {
		if m.Known {
			known[bands.Band(b)] = bands.Measure{Mag: m.Value, Err: m.Err}
			out[b] = m.Value
		}
	}
	if len(out) == 0 {
		return nil
	}
	h := bands.Hints{SpType: t.Physics.SpType, Emission: t.Kind == targets.Interacting || t.Kind == targets.PN}
	if t.Kind == targets.Giant || t.Kind == targets.LPV {
		h.Luminosity = bands.Giant
	}
	for _, b := range shapeBands {
		if _, ok := out[b]; ok {
			continue
		}
		if c, err := bands.Carry(known, bands.Band(b), h); err == nil {
			out[b] = c.Mag
		}
	}
	return out
}
