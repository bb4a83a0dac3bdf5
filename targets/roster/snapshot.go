package roster

import (
	"context"
	"fmt"
	"slices"
	"strings"
	"sync"
	"time"

	"evenfall/targets/moment"
)

// Ask is what a snapshot is asked for.
type Ask struct {
	Scene  moment.Scene
	Filter Filter
	Sort   Sort
}

// Sort is an order: a key, reversed or not. The zero value is the order of
// what to take next.
type Sort struct {
	Key     string
	Reverse bool
}

// SortKeys lists what a list can be ordered by; the first is what to take next.
var SortKeys = []string{"next", "name", "alt", "left", "mag", "moon", "ra", "dec", "kind", "stage"}

// Snapshot is a list at one instant: its order, and each row when asked for.
// It never changes but for rows worked out on the way.
type Snapshot struct {
	Roster *Roster
	Scene  moment.Scene
	Order  []int // places in the roster, first to take first; filtered
	Total  int   // before filtering
	Bulk   bool  // ends of windows from the sweep, to a minute

	mu   sync.Mutex
	rows map[int]*moment.Moment
	rank map[int]int
}

// Row returns a target's moment; exact, worked out when first asked for.
func (s *Snapshot) Row(i int) *moment.Moment {
	s.mu.Lock()
	m := s.rows[i]
	s.mu.Unlock()
	if m != nil {
		return m
	}
	made := s.Roster.Moment(&s.Scene, i)
	s.mu.Lock()
	defer s.mu.Unlock()
	made.Rank = s.rank[i]
	s.rows[i] = &made
	return &made
}

// Find returns the place in the order of a target; -1: filtered out.
func (s *Snapshot) Find(i int) int { return slices.Index(s.Order, i) }

// checkEvery is how many rows are worked on between looks at the context.
const checkEvery = 64

// Snapshot works out the list at an instant.
//
// Given:
//   - ctx: ends the work early.
//   - ask: scene, filter, order.
//
// Returns:
//   - the snapshot, or the context's error.
//
// Notes:
//  1. Lists of up to Bulk targets are exact in every figure. Longer ones are
//     ranked by the sweep: altitude and airmass exact, ends of windows by the
//     closed form of the hour angle, to a minute.
//
// Checked: TestSnapshotRanks, TestSweepRanksLikeMoments, BenchmarkSnapshotBulk.
func (r *Roster) Snapshot(ctx context.Context, ask Ask) (*Snapshot, error) {
	s := &Snapshot{Roster: r, Scene: ask.Scene, Total: r.Len(), rows: map[int]*moment.Moment{}, rank: map[int]int{}}
	if r.Len() > Bulk {
		return s, r.bulk(ctx, s, ask)
	}
	return s, r.exact(ctx, s, ask)
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
		s.rank[i] = all[i].Rank
	}
	for _, i := range order {
		if ask.Filter.text(r.search[i]) && ask.Filter.passes(r, i, &all[i]) {
			s.Order = append(s.Order, i)
		}
	}
	if less := s.less(ask.Sort); less != nil {
		slices.SortStableFunc(s.Order, less)
	}
	return nil
}

// less returns how an order compares two targets; nil: what to take next.
func (s *Snapshot) less(o Sort) func(a, b int) int {
	if o.Key == "" || o.Key == SortKeys[0] {
		if !o.Reverse {
			return nil
		}
	}
	sign := 1
	if o.Reverse {
		sign = -1
	}
	return func(a, b int) int { return sign * s.compare(o.Key, a, b) }
}

func (s *Snapshot) compare(key string, a, b int) int {
	r := s.Roster
	switch key {
	case "name":
		return int(r.byName[a]) - int(r.byName[b])
	case "kind":
		return strings.Compare(string(r.entries[a].Target.Kind), string(r.entries[b].Target.Kind))
	}
	x, y := s.Row(a), s.Row(b)
	switch key {
	case "alt":
		return number(y.Apparent.Deg() - x.Apparent.Deg())
	case "moon":
		return number(y.MoonSep.Deg() - x.MoonSep.Deg())
	case "ra":
		return number(x.RA.Deg() - y.RA.Deg())
	case "dec":
		return number(x.Dec.Deg() - y.Dec.Deg())
	case "stage":
		return strings.Compare(x.Stage.Best, y.Stage.Best)
	case "left":
		return presentFirst(x.Left > 0, y.Left > 0, x.Left.Seconds()-y.Left.Seconds())
	case "mag":
		return presentFirst(x.Expect.Known, y.Expect.Known, x.Expect.Mag.Mags()-y.Expect.Mag.Mags())
	}
	return presentFirst(x.Rank > 0, y.Rank > 0, float64(x.Rank-y.Rank))
}

func number(d float64) int {
	switch {
	case d < 0:
		return -1
	case d > 0:
		return 1
	}
	return 0
}

// presentFirst puts what is known before what is not.
func presentFirst(a, b bool, d float64) int {
	switch {
	case a && !b:
		return -1
	case b && !a:
		return 1
	case !a:
		return 0
	}
	return number(d)
}

// timeOf turns hours into a duration.
func timeOf(hours float32) time.Duration { return time.Duration(float64(hours) * float64(time.Hour)) }
