package moment

import (
	"errors"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/frame"
	"evenfall/targets"
	"evenfall/targets/exposure"
)

// costing works out what a target costs through its night.
type costing struct {
	*tracker
	p *Prepared
	w Want

	prices []price
}

// price is what an exposure costs that is begun at an instant.
type price struct {
	at     astro.Instant
	clockS float64
	err    error
}

// forbids tells whether nothing can be exposed, and the code.
func (q *price) forbids() (targets.Code, bool) {
	var r *exposure.Reason
	if errors.As(q.err, &r) && (r.Code == targets.CodeSaturates || r.Code == targets.CodeTooFaint) {
		return r.Code, true
	}
	return "", false
}

// cost returns the exposure of a look by the clock.
func (t *tracker) cost(p *Prepared, w Want, k look, at astro.Instant) price {
	x, err := air.Mass(air.Refract(k.place.Alt, t.night.Site.Air))
	if err != nil {
		return price{at: at, err: err}
	}
	_, clock, err := exposure.Cost(w.setting(t.night, p, at, &k.place, x, t.skyOf(&k)))
	return price{at, clock, err}
}

// slitTonight is the slit that suits the image at the least airmass of the
// windows; 0: none, or one is wanted.
func (t *tracker) slitTonight(c *Course, p *Prepared, w Want) float64 {
	if w.Goal == nil || !w.slit() || w.Goal.SlitArcsec > 0 {
		return 0
	}
	t.best(c)
	if c.Best == nil || c.BestAirmass == 0 {
		return 0
	}
	f := frame.At(t.night.Site, *c.Best)
	k := look{f.Look(f.Observed(t.star)), &f, nil}
	return exposure.Solve(w.setting(t.night, p, *c.Best, &k.place, c.BestAirmass, t.skyOf(&k))).SlitArcsec
}

// costAt is the price between the nodes.
func (c *costing) costAt(at astro.Instant) price {
	f := frame.At(c.night.Site, at)
	return c.cost(c.p, c.w, look{f.Look(f.Observed(c.star)), &f, nil}, at)
}

// beforeEnd is how long before the end of a window still belongs to it.
const beforeEnd = time.Millisecond

// everyNode is how many of the night's nodes go by between two prices: the cost
// follows airmass, Moon and twilight, which are smooth over 20 minutes.
const everyNode = 2

// work finds the prices at nodes inside the windows, and at the windows' ends, and closes the times at which nothing can be exposed. That the brightness
// is not known, or something of the instrument, closes nothing.
func (c *costing) work(course *Course) {
	if c.w.Goal == nil {
		return
	}
	for _, w := range course.Can {
		c.prices = append(c.prices, c.costAt(w.From))
		for i := 0; i < len(c.night.nodes); i += everyNode {
			if n := &c.night.nodes[i]; n.at.After(w.From) && n.at.Before(w.Until) {
				c.prices = append(c.prices, c.cost(c.p, c.w, look{c.places[i], &n.frame, n}, n.at))
			}
		}
		c.prices = append(c.prices, c.costAt(w.Until.Add(-beforeEnd)))
	}
	c.close(course)
}

// close takes the times off at which nothing can be exposed.
func (c *costing) close(course *Course) {
	var code targets.Code
	var kept []astro.Span
	for i := range c.prices {
		no, forbidden := c.prices[i].forbids()
		if forbidden && code == "" {
			code = no
		}
	}
	if code == "" {
		return
	}
	// between two prices the edge is closed in on; outside the windows nothing
	// is said
	from, open := c.night.Span.From, true
	for i := range c.prices {
		q := &c.prices[i]
		_, no := q.forbids()
		switch {
		case i == 0 && no:
			open = false
		case no && open:
			kept = append(kept, astro.Span{From: from, Until: c.edge(c.prices[i-1].at, q.at)})
			open = false
		case !no && !open:
			from, open = c.edge(c.prices[i-1].at, q.at), true
		}
	}
	if open {
		kept = append(kept, astro.Span{From: from, Until: c.night.Span.Until})
	}
	course.limits = append(course.limits, limit{code, kept})
	course.Can = astro.Intersect(course.Can, kept)
}

// edge is where between two instants it begins or ends that nothing can be
// exposed, to a second.
func (c *costing) edge(a, b astro.Instant) astro.Instant {
	qa := c.costAt(a)
	_, was := qa.forbids()
	for b.Sub(a) > time.Second {
		mid := a.Add(b.Sub(a) / 2)
		q := c.costAt(mid)
		if _, no := q.forbids(); no == was {
			a = mid
		} else {
			b = mid
		}
	}
	return b
}

// best finds the moment of least exposure time in the windows.
//
// Returns:
//   - false where nothing can be exposed, or the time is given: that of least
//     airmass is the best then.
func (c *costing) best(course *Course) bool {
	if c.w.Goal == nil || !(c.w.Goal.SNR > 0) || c.w.Goal.ExposureS > 0 || c.w.Goal.DurationS > 0 {
		return false
	}
	var least *price
	try := func(q price) {
		// a tie within what the figures are right to goes to the earlier
		if q.err != nil || least != nil && !(q.clockS < least.clockS*(1-1e-6) || q.clockS <= least.clockS*(1+1e-6) && q.at.Before(least.at)) {
			return
		}
		least = &q
	}
	for _, w := range course.windows() {
		try(c.costAt(w.From))
		for i := range c.prices {
			if w.Contains(c.prices[i].at) {
				try(c.prices[i])
			}
		}
		if course.Transit != nil && w.Contains(*course.Transit) {
			try(c.costAt(*course.Transit))
		}
		try(c.costAt(w.Until.Add(-beforeEnd)))
	}
	if least == nil {
		return false
	}
	middle := least.at
	for _, by := range []time.Duration{-nodeStep, -nodeStep / 2, nodeStep / 2, nodeStep} {
		at := middle.Add(by)
		if _, ok := within(course.windows(), at); ok {
			try(c.costAt(at))
		}
	}
	at := least.at
	course.Best, course.BestS = &at, least.clockS
	course.BestAltitude = air.Refract(c.place(at).Alt, c.night.Site.Air)
	if m, err := air.Mass(course.BestAltitude); err == nil {
		course.BestAirmass = m
	}
	return true
}
