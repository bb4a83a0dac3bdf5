package events

import (
	"context"
	"slices"
	"time"

	"evenfall/astro"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// most is how many targets are dated; longer lists are to be filtered first.
const most = roster.Bulk

// How much is done in one go; between two portions the work can be dropped.
const (
	portionTargets = 100
	portionEvents  = 200
)

// ranges are the nights ahead that the keys go through, tonight included.
var ranges = []int{1, 3, 7, 30}

// dated is what the targets of the list do in some nights, as far as it has
// been worked out. It does not change once made.
type dated struct {
	roster *roster.Roster
	night  *moment.Night
	order  []int32 // of the list
	set    []int32 // the same, sorted
	nights int

	rows   int                // targets dated so far
	list   []roster.Happening // in order of time once all are
	placed int                // of those, from the first on
}

// same tells whether it is about these targets and nights.
func (d *dated) same(r *roster.Roster, n *moment.Night, order []int32, nights int) bool {
	if d == nil || d.roster != r || d.night != n || d.nights != nights || len(d.order) != len(order) {
		return false
	}
	if len(order) == 0 || &d.order[0] == &order[0] {
		return true
	}
	set := slices.Clone(order)
	slices.Sort(set)
	return slices.Equal(set, d.set)
}

// start begins with some targets and nights.
func start(r *roster.Roster, n *moment.Night, order []int32, nights int) *dated {
	d := &dated{roster: r, night: n, order: order, set: slices.Clone(order), nights: nights}
	slices.Sort(d.set)
	return d
}

// known tells whether all targets are dated, done whether all is placed too.
func (d *dated) known() bool { return d.rows == len(d.set) }
func (d *dated) done() bool  { return d.known() && d.placed == len(d.list) }

// span is from this night's noon on.
func (d *dated) span() astro.Span {
	s := d.night.Span
	return astro.Span{From: s.From, Until: s.Until.Add(time.Duration(d.nights-1) * 24 * time.Hour)}
}

// further dates some more targets, or places some more events. The old one
// goes on as it was.
func (d *dated) further(ctx context.Context, w *source) (*dated, error) {
	out := *d
	if !d.known() {
		until := min(d.rows+portionTargets, len(d.set))
		more, err := d.roster.Happenings(ctx, d.set[d.rows:until], d.night.Site, d.span(), w.dates(d.roster, d.night.Site))
		if err != nil {
			return nil, err
		}
		out.rows, out.list = until, slices.Concat(d.list, more)
		if out.known() {
			roster.SortHappenings(out.list)
		}
		return &out, nil
	}
	out.list = slices.Clone(d.list)
	from := d.placed
	until := from
	for until < len(out.list) && until < from+portionEvents && out.list[until].Night == out.list[from].Night {
		until++
	}
	n := d.night
	if date := out.list[from].Night; date != n.Date {
		var err error
		if n, err = w.night(date); err != nil {
			return nil, err
		}
	}
	if err := d.roster.Stand(ctx, n, out.list[from:until]); err != nil {
		return nil, err
	}
	out.placed = until
	return &out, nil
}

// source is where nights and dates come from.
type source struct {
	night  func(astro.Date) (*moment.Night, error)
	lights kit.Lights
	asOf   astro.Instant // magnitudes teach up to there
}

func (w *source) dates(r *roster.Roster, site astro.Site) roster.Dates {
	return func(row int, from, until astro.Instant) []light.Event {
		return w.lights.Events(r.Prepared(row), site, w.asOf, from, until)
	}
}
