package taking

import (
	"fmt"
	"slices"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/ephem"
	"evenfall/astro/frame"
	"evenfall/targets/exposure"
	"evenfall/targets/moment"
)

// WantsStandard returns the sort of standard that a target is wanted with: flux,
// telluric, velocity; false: none.
func WantsStandard(w moment.Want) (string, bool) {
	if w.Request == nil || w.Request.Standard == "" || w.Request.Standard == "none" {
		return "", false
	}
	return w.Request.Standard, true
}

// standardSNR is the S/N that a standard is exposed to. Common practice, no
// source.
const standardSNR = 100

// MatchStandard chooses the standard to take with a target's exposure.
//
// Given:
//   - list: targets that may serve; those of other sorts are passed over.
//
// Returns:
//   - false where none is wanted; an error where none can be had.
//
// Checked: TestStandard.
func MatchStandard(s *moment.Scene, p *moment.Prepared, m *moment.Moment, w moment.Want, list []*moment.Prepared) (exposure.Matched, bool, error) {
	sort, ok := WantsStandard(w)
	if !ok || !m.AirOK {
		return exposure.Matched{}, false, nil
	}
	need := exposure.Need{Name: p.Target.Name, At: m.At, Airmass: float64(m.Airmass)}
	if m.ExposureOK {
		need.At = need.At.Add(time.Duration(m.Exposure.ClockS * float64(time.Second)))
	}
	var from []exposure.Candidate
	for _, q := range list {
		if q == p || !exposure.IsStandard(&q.Target, sort) {
			continue
		}
		from = append(from, candidate(s, q, w))
	}
	got, err := exposure.Match(need, from)
	return got, err == nil, err
}

// candidate is a star that may serve, exposed in the target's own mode where
// it stands now.
func candidate(s *moment.Scene, q *moment.Prepared, w moment.Want) exposure.Candidate {
	n := s.Night
	c := exposure.Candidate{Name: q.Target.Name}
	c.AirmassAt = func(at astro.Instant) (float64, bool) {
		f := frame.At(n.Site, at)
		h := air.Refract(f.Horizontal(&q.Star).Alt, n.Site.Air)
		x, err := air.Mass(h)
		limits := n.Limits
		if w.Instrument != nil {
			limits = w.Instrument.Limits
		}
		return float64(x), err == nil && !h.Less(limits.MinAltitude) && !limits.MaxAltitude.Less(h)
	}
	if w.Goal != nil {
		g := *w.Goal
		g.SNR, g.Per, g.ExposureS, g.Frames, g.DurationS, g.Line, g.AreaArcsec2 = standardSNR, "", 0, 0, 0, "", 0
		own := w
		own.Goal, own.Request = &g, nil
		course := moment.Course{}
		m := moment.Of(s, q, &course, own)
		c.Mag = m.Expect.Mag
		if m.AirOK {
			a := m.Exposure
			c.Answer, c.Mag = &a, a.Mag
		}
	}
	return c
}

// Standards says which standard goes with a target.
//
// Returns:
//   - nil where none is wanted.
func Standards(s *moment.Scene, p *moment.Prepared, m *moment.Moment, w moment.Want, list []*moment.Prepared) []Line {
	var l lines
	sort, ok := WantsStandard(w)
	if !ok {
		return nil
	}
	got, ok, err := MatchStandard(s, p, m, w, list)
	switch {
	case err != nil:
		l.warn("%s: %v", sort, err)
	case ok:
		l.say("%s: %s", sort, got.Words)
	default:
		l.say("%s: none while the target is below the horizon", sort)
	}
	return l
}

// Wanted is a target with what is wanted of it.
type Wanted struct {
	Prepared *moment.Prepared
	Moment   *moment.Moment
	Want     moment.Want
}

// Serving names the standard of a sort that serves most targets as they stand
// now, exposed in the mode of one of them.
//
// Given:
//   - all: the targets of the list; those that want no such standard, or cannot
//     be taken, are passed over.
//
// Returns:
//   - "" where fewer than two targets are served by one.
//
// Checked: TestStandard.
func Serving(s *moment.Scene, sort string, w moment.Want, all []Wanted, list []*moment.Prepared) string {
	var needs []exposure.Need
	for _, q := range all {
		if own, ok := WantsStandard(q.Want); ok && own == sort && q.Moment.InCan && q.Moment.AirOK {
			needs = append(needs, exposure.Need{Name: q.Prepared.Target.Name, At: q.Moment.At, Airmass: float64(q.Moment.Airmass)})
		}
	}
	if len(needs) < 2 {
		return ""
	}
	var from []exposure.Candidate
	for _, q := range list {
		if exposure.IsStandard(&q.Target, sort) {
			from = append(from, candidate(s, q, w))
		}
	}
	best := exposure.Serving(needs, from)
	if len(best) == 0 || len(best[0].Serves) < 2 {
		return ""
	}
	return fmt.Sprintf("%s serves most: %s", best[0].Name, strings.Join(best[0].Serves, ", "))
}

// Flats says when flats can be taken in a night, by filter, in the order of
// dusk and of dawn.
//
// Returns:
//   - nil where there is no instrument or it takes none.
//
// Checked: TestFlatLines.
func Flats(n *moment.Night, w moment.Want) []Line {
	if w.Instrument == nil {
		return nil
	}
	var l lines
	for _, part := range []struct {
		name    string
		evening bool
	}{{"dusk", true}, {"dawn", false}} {
		list, err := exposure.Flats(exposure.FlatAsk{Instrument: w.Instrument, Evening: part.evening,
			SunAlt: func(at astro.Instant) astro.Angle {
				f := frame.At(n.Site, at)
				return ephem.Sun(&f).Place.Alt
			},
			When: func(alt astro.Angle) (astro.Instant, bool) { return sunAt(n, alt, part.evening) }})
		if err != nil {
			l.warn("%s: %v", part.name, err)
			return l
		}
		for i := range list {
			flat(&l, part.name, &list[i])
		}
	}
	return l
}

// flat says when one filter's flats are taken.
func flat(l *lines, part string, f *exposure.Flat) {
	if len(f.EachS) == 0 {
		l.say("%s %s: none; %s", part, f.Mode, strings.Join(f.Skipped, "; "))
		return
	}
	each := make([]string, len(f.EachS))
	for i, s := range f.EachS {
		each[i] = Seconds(s)
	}
	text := fmt.Sprintf("%s %s: from %s UTC, Sun at %.1f deg: %s", part, f.Mode, f.From.UTC().Format("15:04:05"), f.SunAlt.Deg(), strings.Join(each, ", "))
	if len(f.Skipped) > 0 {
		text += "; " + strings.Join(f.Skipped, "; ")
	}
	l.say("%s", text)
}

// sunAt is when the Sun passes an altitude in one of the night's twilights.
func sunAt(n *moment.Night, alt astro.Angle, evening bool) (astro.Instant, bool) {
	below := n.SunBelow(alt)
	if len(below) == 0 {
		return astro.Instant{}, false
	}
	if evening {
		from := below[0].From
		return from, from.After(n.Span.From)
	}
	until := slices.MaxFunc(below, func(a, b astro.Span) int { return int(a.Until.Sub(b.Until) / time.Second) }).Until
	return until, until.Before(n.Span.Until)
}
