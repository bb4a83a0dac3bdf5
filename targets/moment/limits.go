package moment

import (
	"math"
	"sort"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
	"evenfall/targets"
)

// moonIgnoredBelow is how low the Moon must be to disturb nothing. Common
// practice, no source.
var moonIgnoredBelow = astro.Deg(-2)

// look is a star at one instant; Sun and Moon are worked out when asked for.
type look struct {
	place frame.Place
	frame *frame.Frame
	node  *node // nil: not at one of the night's nodes
}

func (k *look) sun() ephem.Body {
	if k.node != nil {
		return k.node.sun
	}
	return ephem.Sun(k.frame)
}

func (k *look) moon() ephem.Body {
	if k.node != nil {
		return k.node.moon
	}
	return ephem.Moon(k.frame)
}

// rule is a limit as a function that is not negative while it is kept.
type rule struct {
	code targets.Code
	kept func(look) float64
}

// hard returns the limits of telescope and site with the times they are kept.
func (t *tracker) hard(sunAt astro.Angle) []limit {
	out := []limit{{targets.CodeDaylight, t.night.SunBelow(sunAt)}}
	if t.night.Allocated != nil {
		out = append(out, limit{targets.CodeWindow, t.night.Allocated})
	}
	if t.night.Conditions.Closed {
		out = append(out, limit{targets.CodeClosed, nil})
	}
	for _, r := range t.rules() {
		out = append(out, limit{r.code, t.times(r)})
	}
	return out
}

// wish returns the wished-for limits.
func (t *tracker) wish() []limit {
	high := rule{targets.CodeAltitude, func(l look) float64 { return l.place.Alt.Minus(t.edges.wish).Deg() }}
	return []limit{
		{targets.CodeDaylight, t.night.SunBelow(ShouldSunAltitude)},
		{targets.CodeAltitude, t.times(high)},
	}
}

// rules lists the limits that depend on where the star is.
func (t *tracker) rules() []rule {
	l := &t.limits
	rules := []rule{
		{targets.CodeBelow, func(k look) float64 { return k.place.Alt.Minus(t.edges.horizon).Deg() }},
		{targets.CodeAltitude, func(k look) float64 { return k.place.Alt.Minus(t.edges.hard).Deg() }},
		{targets.CodeSun, func(k look) float64 {
			return astro.Separation(k.place.Dir, k.sun().Dir).Minus(l.Sun).Deg()
		}},
		{targets.CodeMoon, func(k look) float64 {
			moon := k.moon()
			far := astro.Separation(k.place.Dir, moon.Dir).Minus(l.Moon).Deg()
			return math.Max(far, moonIgnoredBelow.Minus(moon.Place.Alt).Deg())
		}},
		{targets.CodeDeclination, func(k look) float64 {
			d := k.place.Dec.Deg()
			return math.Min(d-l.DeclinationDeg[0], l.DeclinationDeg[1]-d)
		}},
	}
	if Top(l, t.night.Site.Lat).Deg() < 90 {
		rules = append(rules, rule{targets.CodeZenith, func(k look) float64 { return t.edges.top.Minus(k.place.Alt).Deg() }})
	}
	if len(l.Horizon) > 0 {
		corners := sortedHorizon(l.Horizon)
		rules = append(rules, rule{targets.CodeHorizon, func(k look) float64 {
			return air.Refract(k.place.Alt, t.night.Site.Air).Minus(horizonAt(corners, k.place.Az)).Deg()
		}})
	}
	if l.HourAngleH[0] > -12 || l.HourAngleH[1] < 12 {
		rules = append(rules, rule{targets.CodeHourAngle, func(k look) float64 {
			h := k.place.HourAngle.Hours()
			return math.Min(h-l.HourAngleH[0], l.HourAngleH[1]-h)
		}})
	}
	if c := t.night.Conditions; c.WindMS.Known && c.WindFromDeg.Known && c.WindMS.Value > l.WindMS {
		rules = append(rules, rule{targets.CodeWind, func(k look) float64 {
			off := math.Abs(k.place.Az.Minus(astro.Deg(c.WindFromDeg.Value)).Signed().Deg())
			return off - l.WindSector.Deg()/2
		}})
	}
	if middle, half, ok := CloudSector(&t.night.Conditions); ok {
		rules = append(rules, rule{targets.CodeCloud, func(k look) float64 {
			return math.Abs(k.place.Az.Minus(middle).Signed().Deg()) - half
		}})
	}
	return rules
}

// CloudSector returns the middle of the sector of cloud and half its width,
// degrees; false: there is none.
func CloudSector(c *targets.Conditions) (middle astro.Angle, half float64, ok bool) {
	if !c.CloudFrom.Known || !c.CloudTo.Known || c.CloudFrom.Value == c.CloudTo.Value {
		return middle, 0, false
	}
	wide := astro.Deg(c.CloudTo.Value - c.CloudFrom.Value).Turn().Deg()
	return astro.Deg(c.CloudFrom.Value + wide/2), wide / 2, true
}

// times returns when a rule is kept tonight: the values at the nodes, with
// hidden extremes searched and edges closed in on.
func (t *tracker) times(r rule) []astro.Span {
	nodes := t.night.nodes
	next := 0
	value := func(at astro.Instant) float64 {
		// the nodes come in order, as Crossings asks for them first
		if next < len(nodes) && at.Sub(nodes[next].at) == 0 {
			k := next
			next++
			return r.kept(look{t.places[k], &nodes[k].frame, &nodes[k]})
		}
		f := frame.At(t.night.Site, at)
		return r.kept(look{f.Look(f.Observed(t.star)), &f, nil})
	}
	found, values := ephem.Crossings(value, t.night.Span, nodeStep)
	return ephem.SpansAbove(found, values[0], t.night.Span)
}

// sortedHorizon returns the corners of a horizon by azimuth.
func sortedHorizon(corners []targets.HorizonPoint) []targets.HorizonPoint {
	sorted := append([]targets.HorizonPoint(nil), corners...)
	sort.SliceStable(sorted, func(i, j int) bool { return sorted[i].Azimuth.Turn().Less(sorted[j].Azimuth.Turn()) })
	return sorted
}

// horizonAt returns the altitude of the site's horizon at an azimuth: straight
// lines between the sorted corners, round the circle.
func horizonAt(sorted []targets.HorizonPoint, az astro.Angle) astro.Angle {
	a := az.Turn().Deg()
	n := len(sorted)
	for i := range sorted {
		from, to := sorted[i], sorted[(i+1)%n]
		lo, hi := from.Azimuth.Turn().Deg(), to.Azimuth.Turn().Deg()
		if hi <= lo {
			hi += 360
		}
		x := a
		if x < lo {
			x += 360
		}
		if x >= lo && x <= hi {
			return astro.Deg(from.Altitude.Deg() + (to.Altitude.Deg()-from.Altitude.Deg())*(x-lo)/(hi-lo))
		}
	}
	return sorted[0].Altitude
}

// HorizonAt returns the altitude of a site's horizon at an azimuth; the corners
// may come in any order.
func HorizonAt(corners []targets.HorizonPoint, az astro.Angle) astro.Angle {
	return horizonAt(sortedHorizon(corners), az)
}

// nextKept returns when a limit is kept again after an instant; nil: not again
// this night.
func (l *limit) nextKept(at astro.Instant) *astro.Instant {
	for _, s := range l.kept {
		if s.From.After(at) {
			from := s.From
			return &from
		}
	}
	return nil
}
