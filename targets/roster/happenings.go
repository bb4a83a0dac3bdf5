package roster

import (
	"cmp"
	"context"
	"fmt"
	"maps"
	"slices"

	"evenfall/astro"
	"evenfall/astro/ephem"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
)

// Happening is a dated event of a target, and how the target stands then.
type Happening struct {
	Row int32
	light.Event
	Night    astro.Date // that it falls into
	Placed   bool       // what follows has been worked out
	Altitude astro.Angle
	Apparent astro.Angle // refracted
	Airmass  astro.Airmass
	AirOK    bool // Airmass is given: above the horizon
	Can      bool // under the hard limits, at the event's instant
	Code     targets.Code
	Why      string // what forbids it, in words; "" where it can be observed
}

// Dates dates what a target does from one instant until another, unsorted.
type Dates func(row int, from, until astro.Instant) []light.Event

// Happenings dates what targets do.
//
// Given:
//   - rows: which targets.
//   - site: whose nights they fall into.
//   - dates: where events come from; nil: the targets' own forecasts.
//
// Returns:
//   - the happenings in order of time, then of the list; none placed yet.
//   - the context's error where it ends the work early.
//
// Checked: TestHappenings.
func (r *Roster) Happenings(ctx context.Context, rows []int32, site astro.Site, span astro.Span, dates Dates) ([]Happening, error) {
	if dates == nil {
		dates = func(row int, from, until astro.Instant) []light.Event {
			return r.Prepared(row).Light.Events(site, from, until)
		}
	}
	var out []Happening
	for k, row := range rows {
		if k%checkEvery == 0 && ctx.Err() != nil {
			return nil, fmt.Errorf("dating what %d targets do: %w", len(rows), ctx.Err())
		}
		for _, e := range append(dates(int(row), span.From, span.Until), r.phases(int(row), site, span)...) {
			if span.Contains(e.At) {
				out = append(out, Happening{Row: row, Event: e, Night: ephem.DateAt(site, e.At.UTC())})
			}
		}
	}
	SortHappenings(out)
	return out, nil
}

// phases dates the windows of phase that requests want a target in; none where
// its phase is not known.
func (r *Roster) phases(row int, site astro.Site, span astro.Span) []light.Event {
	var out []light.Event
	for _, p := range r.entries[row].Phases {
		if list, err := r.Prepared(row).Light.PhaseWindows(site, p[0], p[1], span.From, span.Until); err == nil {
			out = append(out, list...)
		}
	}
	return out
}

// SortHappenings puts happenings into the order of time; of the same instant,
// into that of the list and of their kinds.
func SortHappenings(list []Happening) {
	slices.SortStableFunc(list, func(a, b Happening) int {
		return cmp.Or(a.At.UTC().Compare(b.At.UTC()), cmp.Compare(a.Row, b.Row), cmp.Compare(a.Kind, b.Kind))
	})
}

// Stand works out how targets stand at the instants of happenings that fall
// into one night.
//
// Notes:
//  1. Everything comes from [moment.Of] at the event's instant. Courses are
//     used that the roster keeps of that night and none is added: nights ahead
//     would push out the one that the list is shown for.
//
// Checked: TestStand.
func (r *Roster) Stand(ctx context.Context, n *moment.Night, list []Happening) error {
	kept := map[int32]*moment.Course{}
	for k := range list {
		h := &list[k]
		if ctx.Err() != nil {
			return fmt.Errorf("placing %d happenings: %w", len(list), ctx.Err())
		}
		i := int(h.Row)
		p, want := r.Prepared(i), r.Want(n, i)
		c := kept[h.Row]
		if c == nil {
			if c = r.known(n, i); c == nil {
				made := moment.Tonight(n, p, want)
				c = &made
			}
			kept[h.Row] = c
		}
		// counted from the night's own noon it has the site's UT1-UTC
		sc := moment.NewScene(n, n.Span.From.Add(h.At.Sub(n.Span.From)))
		m := moment.Of(&sc, p, c, want)
		h.Placed, h.Altitude, h.Apparent, h.Airmass, h.AirOK, h.Can = true, m.Place.Alt, m.Apparent, m.Airmass, m.AirOK, m.InCan
		h.Code, h.Why = "", ""
		if len(m.BlockedBy) > 0 && !m.InCan {
			h.Code, h.Why = m.BlockedBy[0].Code, m.BlockedBy[0].Words
		}
	}
	return nil
}

// known returns a course that is kept; nil: none is.
func (r *Roster) known(n *moment.Night, i int) *moment.Course {
	r.mu.Lock()
	k := r.nights[n]
	r.mu.Unlock()
	if k == nil {
		return nil
	}
	k.mu.Lock()
	defer k.mu.Unlock()
	return k.courses[i]
}

// WithMagnitudes returns a roster in which some targets have other measured
// magnitudes: their forecasts are made anew, all else that was prepared is
// kept, the nights' courses too, as magnitudes do not move a star.
//
// Given:
//   - change: the magnitudes by place in the list.
//
// Checked: TestWithMagnitudes.
func (r *Roster) WithMagnitudes(change map[int][]targets.Magnitude) *Roster {
	n := &Roster{entries: r.entries, over: maps.Clone(r.over), stars: r.stars, search: r.search, byName: r.byName, models: r.models, wants: r.wants,
		nights: map[*moment.Night]*nightly{}}
	if n.over == nil {
		n.over = map[int]*Entry{}
	}
	for i, mags := range change {
		e := *r.Entry(i)
		e.Magnitudes = mags
		n.over[i] = &e
	}
	r.mu.Lock()
	defer r.mu.Unlock()
	n.prepared, n.judged = slices.Clone(r.prepared), slices.Clone(r.judged)
	for i := range change {
		n.prepared[i] = nil
	}
	for night, k := range r.nights {
		k.mu.Lock()
		n.nights[night] = &nightly{courses: maps.Clone(k.courses), sky: k.sky}
		k.mu.Unlock()
	}
	return n
}
