package moment

import (
	"evenfall/astro"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
	"evenfall/astro/skyglow"
)

// Scene is what all targets share at one instant.
type Scene struct {
	Night   *Night
	Instant astro.Instant
	Frame   frame.Frame
	Sun     ephem.Body
	Moon    ephem.Body
	Phase   ephem.Phase
	Sky     *skyglow.Sky // nil: none for this site
	Part    string       // what part of the night it is: day, twilight, night
}

// NewScene works out what all targets share at an instant, which lies in the
// night or near it.
func NewScene(n *Night, t astro.Instant) Scene {
	f := frame.At(n.Site, t)
	sun, moon := ephem.Sun(&f), ephem.Moon(&f)
	s := Scene{
		Night: n, Instant: t, Frame: f, Sun: sun, Moon: moon,
		Phase: ephem.MoonPhase(moon, sun), Part: partOf(sun.Place.Alt),
	}
	s.Sky = makeSky(n.Sky, sun, moon)
	return s
}

// partOf names the part of the night by the Sun's altitude.
func partOf(sun astro.Angle) string {
	switch alt := sun.Deg(); {
	case alt >= ephem.SunsetAltitude.Deg():
		return "day"
	case alt >= ephem.CivilAltitude.Deg():
		return "civil twilight"
	case alt >= ephem.NauticalAlt.Deg():
		return "nautical twilight"
	case alt >= ephem.AstroAltitude.Deg():
		return "astronomical twilight"
	}
	return "night"
}
