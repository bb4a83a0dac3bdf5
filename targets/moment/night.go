package moment

import (
	"sync"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
	"evenfall/astro/skyglow"
	"evenfall/targets"
)

// nodeStep is the time between the instants at which a night keeps the sky
// ready for all targets.
const nodeStep = 10 * time.Minute

// node is the sky at one of those instants.
type node struct {
	index     int
	at        astro.Instant
	frame     frame.Frame
	sun, moon ephem.Body
}

// Night is what all targets share in one night at one site. It is safe for
// use by several goroutines once made.
type Night struct {
	ephem.Night
	Limits     targets.Limits
	Conditions targets.Conditions
	Sky        *skyglow.Site // dark sky, air, lamps; a dark site of that height unless set
	Seeing     float64       // at the zenith, 500 nm, arcsec, unless the conditions say otherwise; 0: 1
	Allocated  []astro.Span  // when the telescope is ours; nil: the whole night

	nodes []node
	edges edges
	skies struct {
		once sync.Once
		at   []*skyglow.Sky // at the nodes; nil: none
	}

	mu       sync.Mutex
	sunBelow map[float64][]astro.Span // by threshold, degrees
}

// edges are the limits on refracted altitude turned into airless altitudes,
// which a star crosses at computable times.
type edges struct {
	horizon, hard, wish, top astro.Angle
	flat                     bool // no profile of the horizon
}

// NewNight prepares a night.
//
// Returns:
//   - an error where the date is out of range.
func NewNight(site astro.Site, date astro.Date, limits targets.Limits, conditions targets.Conditions) (*Night, error) {
	e, err := ephem.NightOf(site, date)
	if err != nil {
		return nil, err
	}
	n := &Night{Night: e, Limits: limits, Conditions: conditions, Sky: defaultSky(site), sunBelow: map[float64][]astro.Span{
		ephem.NauticalAlt.Deg():   e.Nautical.Below,
		ephem.AstroAltitude.Deg(): e.Ast.Below,
	}}
	count := int(e.Span.Length() / nodeStep)
	for i := 0; i <= count; i++ {
		t := e.Span.From.Add(time.Duration(i) * nodeStep)
		f := frame.At(site, t)
		n.nodes = append(n.nodes, node{i, t, f, ephem.Sun(&f), ephem.Moon(&f)})
	}
	n.edges = findEdges(limits, site)
	return n, nil
}

// findEdges turns limits on refracted altitude into airless ones.
func findEdges(l targets.Limits, site astro.Site) edges {
	w := site.Air
	wish := l.WishAltitude
	if a := AltitudeOfAirmass(l.WishAirmass); wish.Less(a) {
		wish = a
	}
	return edges{
		horizon: air.Unrefract(astro.Angle{}, w),
		hard:    air.Unrefract(l.MinAltitude, w),
		wish:    air.Unrefract(wish, w),
		top:     air.Unrefract(Top(&l, site.Lat), w),
		flat:    len(l.Horizon) == 0,
	}
}

// AltitudeOfAirmass returns the refracted altitude at which the airmass is x:
// by bisection, as airmass falls with altitude.
func AltitudeOfAirmass(x float64) astro.Angle {
	lo, hi := 0.0, 90.0
	for range 60 {
		mid := (lo + hi) / 2
		m, err := air.Mass(astro.Deg(mid))
		if err != nil || float64(m) > x {
			lo = mid
		} else {
			hi = mid
		}
	}
	return astro.Deg(hi)
}

// SunBelow returns when the Sun's centre stands below an altitude tonight.
func (n *Night) SunBelow(altitude astro.Angle) []astro.Span {
	n.mu.Lock()
	defer n.mu.Unlock()
	key := altitude.Deg()
	if s, ok := n.sunBelow[key]; ok {
		return s
	}
	above := func(t astro.Instant) float64 {
		f := frame.At(n.Site, t)
		sun := ephem.Sun(&f)
		return altitude.Minus(sun.Place.Alt).Deg()
	}
	found, values := ephem.Crossings(above, n.Span, 30*time.Minute)
	s := ephem.SpansAbove(found, values[0], n.Span)
	n.sunBelow[key] = s
	return s
}

// CanDark returns the darkness that targets without a mode can be observed in.
func (n *Night) CanDark() []astro.Span { return n.SunBelow(DefaultSunAltitude) }

// DefaultSunAltitude is how low the Sun must be for observing where no mode
// says otherwise, and ShouldSunAltitude how low one wants it.
var (
	DefaultSunAltitude = ephem.NauticalAlt
	ShouldSunAltitude  = ephem.AstroAltitude
)

// DefaultMoment returns the middle of the darkness targets can be observed in,
// or of the night where there is none.
func (n *Night) DefaultMoment() astro.Instant {
	dark := n.CanDark()
	if len(dark) == 0 {
		return n.Midnight
	}
	longest := dark[0]
	for _, s := range dark[1:] {
		if s.Length() > longest.Length() {
			longest = s
		}
	}
	return longest.Middle()
}

// DateOfTonight returns the night that an observer at an instant means: the
// one under way, or in daylight the one to come.
func DateOfTonight(site astro.Site, t astro.Instant) (astro.Date, error) {
	date := ephem.DateAt(site, t.UTC())
	n, err := ephem.NightOf(site, date)
	if err != nil {
		return date, err
	}
	if n.Sunrise != nil && !t.Before(*n.Sunrise) && t.After(n.Midnight) && n.Day[len(n.Day)-1].Contains(t) {
		return date.Next(1), nil
	}
	return date, nil
}
