package roster

import (
	"context"
	"fmt"
	"slices"
	"sync"
	"time"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/targets/moment"
	"evenfall/targets/sweep"
)

// Ask is what a snapshot is asked for.
type Ask struct {
	Scene  moment.Scene
	Filter Filter
	Sort   Sort
	Marks  map[int]bool // marked targets, for filter and order; not changed afterwards
	// Keep is an order to go on showing: the new one is worked out too and
	// stands in Fresh. nil: show the new one.
	Keep []int32
	// Exact lists rows that will be shown: those of long lists are worked out
	// in full at once. Ahead is how many more from the top of a new order.
	Exact []int32
	Ahead int
}

// Snapshot is a list at one instant: its order, and each row when asked for.
// It never changes but for rows worked out on the way.
type Snapshot struct {
	Roster *Roster
	Scene  moment.Scene
	Order  []int32 // places in the roster, as shown: first to take first; filtered
	Fresh  []int32 // the order as it would be now; the same as Order unless one was kept
	Total  int     // before filtering
	Take   int     // how many can be taken now, before filtering
	Bulk   bool    // ends of windows from the sweep, to a minute
	Stale  bool    // Order is not Fresh

	quick []quick // by place in the roster; long lists only
	rank  []int32
	mu    sync.Mutex
	rows  map[int]*moment.Moment
}

// Row returns a target's moment; exact, worked out when first asked for.
func (s *Snapshot) Row(i int) *moment.Moment {
	if m := s.Peek(i); m != nil {
		return m
	}
	made := s.Roster.Moment(&s.Scene, i)
	s.mu.Lock()
	defer s.mu.Unlock()
	made.Rank = int(s.rank[i])
	s.rows[i] = &made
	return &made
}

// Peek returns a target's moment if it has been worked out, else nil.
func (s *Snapshot) Peek(i int) *moment.Moment {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.rows[i]
}

// Quick is what the sweep knows of a row that has not been worked out.
type Quick struct {
	Altitude astro.Angle // refracted
	Airmass  astro.Airmass
	AirOK    bool
	InCan    bool
	InShould bool
	Left     time.Duration // until the window ends; blocked: until it opens, if Opens
	Opens    bool
	Rank     int
}

// Quick returns what the sweep knows of a target of a long list.
func (s *Snapshot) Quick(i int) Quick {
	if s.quick == nil {
		return Quick{}
	}
	q := &s.quick[i]
	out := Quick{Altitude: air.Refract(sweep.Altitude(q.sinAlt), s.Scene.Night.Site.Air), InCan: q.class < 2, InShould: q.class == 0, Rank: int(s.rank[i])}
	if x, err := air.Mass(out.Altitude); err == nil {
		out.Airmass, out.AirOK = x, true
	}
	if q.hours < 48 {
		out.Left, out.Opens = timeOf(q.hours), true
	}
	return out
}

// Find returns the place in the order of a target; -1: filtered out.
func (s *Snapshot) Find(i int) int { return slices.Index(s.Order, int32(i)) }

// checkEvery is how many rows are worked on between looks at the context.
const checkEvery = 64

// Snapshot works out the list at an instant.
//
// Given:
//   - ctx: ends the work early.
//   - ask: scene, filter, order.
//
// Returns:
//   - the snapshot, or the context's error, or one that says why a long list
//     cannot be ordered so.
//
// Notes:
//  1. Lists of up to Bulk targets are exact in every figure. Longer ones are
//     ranked by the sweep: altitude and airmass exact, ends of windows by the
//     closed form of the hour angle, to a minute; the rows of Exact and the
//     first ones are exact there too.
//
// Checked: TestSnapshotRanks, TestSweepRanksLikeMoments, TestKeep, BenchmarkSnapshotBulk.
func (r *Roster) Snapshot(ctx context.Context, ask Ask) (*Snapshot, error) {
	s := &Snapshot{Roster: r, Scene: ask.Scene, Total: r.Len(), rows: map[int]*moment.Moment{}, rank: make([]int32, r.Len())}
	var err error
	if r.Len() > Bulk {
		err = r.bulk(ctx, s, ask)
	} else {
		err = r.exact(ctx, s, ask)
	}
	if err != nil {
		return s, err
	}
	s.Order = s.Fresh
	if ask.Keep != nil {
		s.Order, s.Stale = ask.Keep, !slices.Equal(ask.Keep, s.Fresh)
	}
	if s.Bulk {
		for _, i := range ask.Exact {
			s.Row(int(i))
		}
		for _, i := range s.Order[:min(ask.Ahead, len(s.Order))] {
			s.Row(int(i))
		}
	}
	return s, nil
}

// exact works out every row.
func (r *Roster) exact(ctx context.Context, s *Snapshot, ask Ask) error {
	all := make([]moment.Moment, r.Len())
	for i := range all {
		if i%checkEvery == 0 && ctx.Err() != nil {
			return fmt.Errorf("ranking %d targets: %w", r.Len(), ctx.Err())
		}
		all[i] = r.Moment(&s.Scene, i)
	}
	order := moment.Rank(all)
	for i := range all {
		s.rows[i] = &all[i]
		s.rank[i] = int32(all[i].Rank)
		if all[i].InCan {
			s.Take++
		}
	}
	s.Fresh = make([]int32, 0, r.Len())
	for _, i := range order {
		if ask.Filter.text(r.search[i]) && ask.Filter.passes(r, i, &all[i], ask.Marks) {
			s.Fresh = append(s.Fresh, int32(i))
		}
	}
	s.sort(ask)
	return nil
}
