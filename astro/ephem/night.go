package ephem

import (
	"fmt"
	"math"
	"time"

	"evenfall/astro"
	"evenfall/astro/frame"
	"evenfall/astro/timescale"
)

// Altitudes of the Sun's centre that divide day from night, without
// refraction but for sunrise and sunset, which hold 34' of it and 16' for the
// Sun's radius.
//
// Source: [cite.USNOAlmanac]; the same everywhere by definition.
var (
	SunsetAltitude = astro.Deg(-50.0 / 60)
	CivilAltitude  = astro.Deg(-6)
	NauticalAlt    = astro.Deg(-12)
	AstroAltitude  = astro.Deg(-18)
)

// horizonRefraction is the refraction taken at the horizon for rise and set.
//
// Source: [cite.USNOAlmanac].
var horizonRefraction = astro.Arcsec(34 * 60)

// step between samples when looking for events.
const step = 30 * time.Minute

// Twilight is when the Sun passes one altitude in a night.
type Twilight struct {
	Dusk, Dawn *astro.Instant // nil: it does not pass it downwards, upwards
	Below      []astro.Span   // when it is below
}

// The words for what the Sun does in a night.
const (
	RisesAndSets = "rises_and_sets"
	NeverSets    = "never_sets"
	NeverRises   = "never_rises"
)

// Night is what Sun and Moon do from one noon of local mean solar time to the
// next at one site.
type Night struct {
	Site astro.Site
	Date astro.Date // of the evening
	Span astro.Span // noon to noon
	Sun  string     // RisesAndSets, NeverSets or NeverRises

	Sunset, Sunrise      *astro.Instant
	Day                  []astro.Span // Sun's upper limb up
	Civil, Nautical, Ast Twilight
	SunLowest            astro.Angle // centre, airless, in the night
	SunHighest           astro.Angle

	Moonrise, Moonset []astro.Instant
	MoonUp            []astro.Span
	Midnight          astro.Instant // half way: local mean solar midnight
	MoonLit           float64       // illuminated fraction at midnight, 0 to 1
	Dark              []astro.Span  // Sun below -18 degrees and Moon below the horizon
}

// DateAt returns the date of the night, noon to noon of local mean solar time,
// that an instant falls in.
func DateAt(site astro.Site, t time.Time) astro.Date {
	local := t.UTC().Add(solarOffset(site))
	return astro.DateOf(local.Add(-12 * time.Hour))
}

// solarOffset is local mean solar time less UTC.
func solarOffset(site astro.Site) time.Duration {
	return time.Duration(math.Round(site.Lon.Signed().Hours() * 3600e9))
}

// NoonToNoon returns the span of the night named by a date.
//
//	UTC 12 h - longitude/15 of the date, and a day later
func NoonToNoon(site astro.Site, date astro.Date) (astro.Span, error) {
	noon := date.Midnight().Add(12*time.Hour - solarOffset(site))
	from, err := timescale.AtDUT1(noon, site.DUT1)
	if err != nil {
		return astro.Span{}, fmt.Errorf("night %s: %w", date, err)
	}
	return astro.Span{From: from, Until: from.Add(24 * time.Hour)}, nil
}

// NightOf returns what Sun and Moon do in one night.
//
// Returns:
//   - an error for dates outside 1860 to 2150 alone.
//
// Notes:
//  1. At any latitude: what does not happen is nil, and Sun says why.
//  2. Rise and set are those of the upper limb on a sea-level horizon, the
//     Moon's from the site.
//
// Checked: TestNightAgainstUSNO, to their rounding; TestCrossingsDense, to 1 s.
func NightOf(site astro.Site, date astro.Date) (Night, error) {
	span, err := NoonToNoon(site, date)
	if err != nil {
		return Night{}, err
	}
	n := Night{Site: site, Date: date, Span: span, Midnight: span.Middle()}
	n.sun()
	n.moon()
	f := frame.At(site, n.Midnight)
	n.MoonLit = MoonPhase(Moon(&f), Sun(&f)).Illuminated
	n.Dark = astro.Intersect(n.Ast.Below, complement(n.MoonUp, span))
	return n, nil
}

// sunAltitude returns the airless altitude of the Sun's centre, degrees.
func sunAltitude(site astro.Site) func(astro.Instant) float64 {
	return func(t astro.Instant) float64 {
		f := frame.At(site, t)
		s := Sun(&f)
		return s.Place.Alt.Deg()
	}
}

func (n *Night) sun() {
	alt := remember(sunAltitude(n.Site))
	pass := func(threshold astro.Angle) (Twilight, []astro.Span) {
		g := func(t astro.Instant) float64 { return alt(t) - threshold.Deg() }
		found, values := Crossings(g, n.Span, step)
		above := SpansAbove(found, values[0], n.Span)
		tw := Twilight{Below: complement(above, n.Span)}
		for i := range found {
			switch c := &found[i]; {
			case !c.Up && tw.Dusk == nil:
				tw.Dusk = &c.At
			case c.Up:
				tw.Dawn = &c.At
			}
		}
		return tw, above
	}
	set, day := pass(SunsetAltitude)
	n.Sunset, n.Sunrise, n.Day = set.Dusk, set.Dawn, day
	switch {
	case n.Sunset != nil || n.Sunrise != nil:
		n.Sun = RisesAndSets
	case len(day) > 0:
		n.Sun = NeverSets
	default:
		n.Sun = NeverRises
	}
	n.Civil, _ = pass(CivilAltitude)
	n.Nautical, _ = pass(NauticalAlt)
	n.Ast, _ = pass(AstroAltitude)
	n.SunLowest, n.SunHighest = extremes(alt, n.Span)
}

// extremes returns the least and greatest of an altitude over the night.
func extremes(alt func(astro.Instant) float64, span astro.Span) (low, high astro.Angle) {
	const n = 48
	at := func(i int) astro.Instant { return span.From.Add(span.Length() * time.Duration(i) / n) }
	lo, hi := math.Inf(1), math.Inf(-1)
	var v [n + 1]float64
	for i := range v {
		v[i] = alt(at(i))
		lo, hi = math.Min(lo, v[i]), math.Max(hi, v[i])
	}
	for i := 1; i < n; i++ { // the top of the parabola through three samples
		d2 := v[i-1] - 2*v[i] + v[i+1]
		if (v[i]-v[i-1])*(v[i+1]-v[i]) > 0 || d2 == 0 {
			continue
		}
		d1 := (v[i+1] - v[i-1]) / 2
		top := v[i] - d1*d1/(2*d2)
		lo, hi = math.Min(lo, top), math.Max(hi, top)
	}
	return astro.Deg(lo), astro.Deg(hi)
}

// MoonLimb returns how far the Moon's upper limb, refraction at the horizon
// included, stands above the sea-level horizon of the frame's site.
func MoonLimb(f *frame.Frame) astro.Angle {
	m := Moon(f)
	return m.Place.Alt.Plus(m.Semidiam).Plus(horizonRefraction)
}

func (n *Night) moon() {
	g := remember(func(t astro.Instant) float64 {
		f := frame.At(n.Site, t)
		return MoonLimb(&f).Deg()
	})
	found, values := Crossings(g, n.Span, step)
	for _, c := range found {
		if c.Up {
			n.Moonrise = append(n.Moonrise, c.At)
		} else {
			n.Moonset = append(n.Moonset, c.At)
		}
	}
	n.MoonUp = SpansAbove(found, values[0], n.Span)
}

// remember returns a function that works out each instant once.
func remember(f func(astro.Instant) float64) func(astro.Instant) float64 {
	known := map[int64]float64{}
	return func(t astro.Instant) float64 {
		key := t.UTC().UnixNano()
		v, ok := known[key]
		if !ok {
			v = f(t)
			known[key] = v
		}
		return v
	}
}

// complement returns the parts of span outside the given spans.
func complement(spans []astro.Span, span astro.Span) []astro.Span {
	var out []astro.Span
	from := span.From
	for _, s := range spans {
		if from.Before(s.From) {
			out = append(out, astro.Span{From: from, Until: s.From})
		}
		from = s.Until
	}
	if from.Before(span.Until) {
		out = append(out, astro.Span{From: from, Until: span.Until})
	}
	return out
}
