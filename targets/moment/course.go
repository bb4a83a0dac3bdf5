package moment

import (
	"math"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/frame"
	"evenfall/targets"
	"evenfall/targets/exposure"
	"evenfall/targets/instrument"
)

// Want is what brightness and limits are asked for.
type Want struct {
	Band       targets.Band           // "": the best known band
	Level      float64                // probability of the brightness interval; 0: 0.8
	Instrument *instrument.Instrument // nil: none, the site's limits hold
	Mode       *instrument.Mode       // nil: none
	Weight     float64                // of the target's request, 1 by default
	NotMounted string                 // the instrument wanted is not on the telescope tonight: its name
	// Goal is what is wanted of an exposure, nil: none is worked out. How fast a
	// series must be and the level are filled in for each target. Request is what
	// it was read from; its limits on sky and air hold. Many targets share both.
	Goal    *exposure.Goal
	Request *targets.Request
}

// limit is one limit and the times tonight at which it is kept.
type limit struct {
	code targets.Code
	kept []astro.Span
}

// Course is a target's night: when it can and should be observed, and when it
// is best.
type Course struct {
	Can, Should   []astro.Span
	Best          *astro.Instant // nil: no window tonight
	BestS         float64        // exposure then, by the clock; 0: least airmass decided
	BestAirmass   astro.Airmass
	BestAltitude  astro.Angle // refracted
	Transit       *astro.Instant
	Limits        targets.Limits // those that were applied
	limits        []limit        // hard
	wished        []limit
	SetAside      []targets.Code // limits that close the whole night by themselves
	ClosedAllOver bool           // no window tonight
	NotMounted    string         // as wanted
	asked         *targets.Request
	slit          float64 // that serves all night, arcsec; 0: as wanted, or none
}

// Tonight works out a target's night.
//
// Notes:
//  1. Every edge is exact to a second: limits on refracted altitude are turned
//     into airless ones, sampled every 10 minutes and closed in on.
//  2. Best is the moment of least exposure time in the wished-for windows, or,
//     where there are none, in the possible ones, to five minutes; the
//     earlier of equals. Without an exposure, or where its time is given, it is
//     that of least airmass.
//
// Checked: TestWindowsDense, TestBest, TestBestByExposure.
func Tonight(n *Night, p *Prepared, w Want) Course {
	t := tracker{night: n, star: &p.Star, limits: limitsOf(n, w)}
	t.edges = n.edges
	if w.Instrument != nil {
		t.edges = findEdges(t.limits, n.Site)
	}
	t.track()
	c := Course{Limits: t.limits, asked: w.Request}
	c.limits = t.hard(w.sunAt())
	if w.NotMounted != "" {
		c.NotMounted = w.NotMounted
		c.limits = append(c.limits, limit{targets.CodeInstrument, nil})
	}
	c.limits = append(c.limits, t.asked(w)...)
	c.wished = t.wish()
	c.Can = []astro.Span{n.Span}
	for _, l := range c.limits {
		c.Can = astro.Intersect(c.Can, l.kept)
	}
	c.Transit = t.transit()
	c.slit = t.slitTonight(&c, p, w)
	costs := costing{tracker: &t, p: p, w: w.with(c.slit)}
	costs.work(&c)
	for _, l := range c.limits {
		if len(l.kept) == 0 {
			c.SetAside = append(c.SetAside, l.code)
		}
	}
	c.Should = c.Can
	for _, l := range c.wished {
		c.Should = astro.Intersect(c.Should, l.kept)
	}
	c.ClosedAllOver = len(c.Can) == 0
	if !costs.best(&c) {
		t.best(&c)
	}
	return c
}

// limitsOf returns the limits of the instrument, or of the site.
func limitsOf(n *Night, w Want) targets.Limits {
	if w.Instrument != nil {
		return w.Instrument.Limits
	}
	return n.Limits
}

// sunAt is how high the Sun may stand.
func (w *Want) sunAt() astro.Angle {
	if w.Mode != nil && w.Mode.MaxSunAltitudeOK {
		return w.Mode.MaxSunAltitude
	}
	return DefaultSunAltitude
}

// tracker follows one star through a night.
type tracker struct {
	night  *Night
	star   *frame.Star
	limits targets.Limits
	edges  edges
	places []frame.Place // at the nodes
}

func (t *tracker) track() {
	t.places = make([]frame.Place, len(t.night.nodes))
	for i := range t.night.nodes {
		f := &t.night.nodes[i].frame
		t.places[i] = f.Look(f.Observed(t.star))
	}
}

// place returns where the star is at any instant.
func (t *tracker) place(at astro.Instant) frame.Place {
	f := frame.At(t.night.Site, at)
	return f.Look(f.Observed(t.star))
}

// transit returns the upper culmination nearest the middle of the night.
func (t *tracker) transit() *astro.Instant {
	at := t.night.Midnight
	for range 4 {
		ha := t.place(at).HourAngle.Hours()
		// sidereal hours to solar ones
		at = at.Add(-time.Duration(ha / 1.00273790935 * 3600e9))
	}
	for at.Before(t.night.Span.From) {
		at = at.Add(siderealDay)
	}
	for !at.Before(t.night.Span.Until) {
		at = at.Add(-siderealDay)
	}
	if at.Before(t.night.Span.From) {
		return nil
	}
	return &at
}

const siderealDay = time.Duration(86164.0905 * 1e9)

// best finds the moment of least airmass in the windows.
func (t *tracker) best(c *Course) {
	c.Best = nil
	highest := math.Inf(-1)
	try := func(at astro.Instant) {
		p := t.place(at)
		// a tie within what altitudes are right to goes to the earlier
		if p.Alt.Deg() > highest+1e-7 {
			highest = p.Alt.Deg()
			at := at
			c.Best = &at
			c.BestAltitude = air.Refract(p.Alt, t.night.Site.Air)
		}
	}
	for _, w := range c.windows() {
		last := w.Until.Add(-time.Millisecond)
		try(w.From)
		if c.Transit != nil {
			for _, shift := range []time.Duration{-siderealDay, 0, siderealDay} {
				if at := c.Transit.Add(shift); w.Contains(at) {
					try(at)
				}
			}
		}
		try(last)
	}
	if c.Best != nil {
		if m, err := air.Mass(c.BestAltitude); err == nil {
			c.BestAirmass = m
		}
	}
}

// windows are those that the best moment is sought in.
func (c *Course) windows() []astro.Span {
	if len(c.Should) > 0 {
		return c.Should
	}
	return c.Can
}

// Window returns the window to speak of at an instant: the one that holds it,
// wished for before possible, else the next wished for, else the next
// possible.
func (c *Course) Window(at astro.Instant) (w astro.Span, should, ok bool) {
	if w, ok := within(c.Should, at); ok {
		return w, true, true
	}
	if w, ok := within(c.Can, at); ok {
		return w, false, true
	}
	if w, ok := pick(c.Should, at); ok {
		return w, true, true
	}
	w, ok = pick(c.Can, at)
	return w, false, ok
}

// pick returns the span that holds an instant, or the next one.
func pick(spans []astro.Span, at astro.Instant) (astro.Span, bool) {
	for _, s := range spans {
		if at.Before(s.Until) {
			return s, true
		}
	}
	return astro.Span{}, false
}

// within returns the span that holds an instant.
func within(spans []astro.Span, at astro.Instant) (astro.Span, bool) {
	for _, s := range spans {
		if s.Contains(at) {
			return s, true
		}
	}
	return astro.Span{}, false
}

// endedBy returns the limit that ends a window.
func (c *Course) endedBy(w astro.Span, should bool) targets.Code {
	lists := [][]limit{c.limits}
	if should {
		lists = append(lists, c.wished)
	}
	for _, list := range lists {
		for _, l := range list {
			for _, k := range l.kept {
				if gap := k.Until.Sub(w.Until); gap > -time.Millisecond && gap < time.Millisecond {
					return l.code
				}
			}
		}
	}
	return targets.CodeWindow
}

// LimitTimes is one limit by name with the times at which it is kept, for
// showing why a night is as it is.
type LimitTimes struct {
	Code targets.Code
	Kept []astro.Span
}

// HardLimits lists the limits of telescope and site with the times tonight at
// which each is kept.
func (c *Course) HardLimits() []LimitTimes {
	out := make([]LimitTimes, len(c.limits))
	for i, l := range c.limits {
		out[i] = LimitTimes{l.code, append([]astro.Span(nil), l.kept...)}
	}
	return out
}
