package order

import (
	"fmt"
	"slices"
)

// Rest is the problem of what is left of a night: the same items by index, with
// what is done taken off.
//
// Given:
//   - now: first slot that can still be used.
//   - done: takes done so far, in order of time, whether planned or not.
//
// Returns:
//   - a new problem that shares no memory with the old. An item with no visits
//     left has no starts; one with a single visit left carries its bonus in the
//     worth of that. Locks before now are gone. The first move is from the last
//     take done.
//   - an error for a take of an item that does not exist, or a slot outside
//     the night.
//
// Notes:
//  1. A take that all its starts left would find served by a standard already
//     taken loses nothing any more. The format cannot say that of single starts:
//     for an item served at some of them the loss still counts.
//
// Checked: TestRest.
func (p *Problem) Rest(now int, done []Take) (*Problem, error) {
	if now < 0 || now > p.T {
		return nil, fmt.Errorf("now %d: outside the night, which is 0 to T = %d", now, p.T)
	}
	r := *p
	r.Now = max(p.Now, now)
	r.Items = slices.Clone(p.Items)
	r.Setup0 = slices.Clone(p.Setup0)
	r.Setup = make([][]int, len(p.Setup))
	for i, row := range p.Setup {
		r.Setup[i] = slices.Clone(row)
	}
	r.Locks = slices.DeleteFunc(slices.Clone(p.Locks), func(l Take) bool { return l.Start < now })
	count, last := make([]int, len(p.Items)), make([]int, len(p.Items))
	for k, t := range done {
		if t.Item < 0 || t.Item >= len(p.Items) {
			return nil, fmt.Errorf("done take %d: there is no item %d", k, t.Item)
		}
		count[t.Item]++
		last[t.Item] = t.Start
		copy(r.Setup0, p.Setup[t.Item])
	}
	for i := range r.Items {
		r.Items[i].rest(r.Now, count[i], last[i])
	}
	for i := range r.Items {
		if r.Items[i].Calib != nil && r.allServed(p, i, done) {
			r.Items[i].Calib = nil
		}
	}
	return &r, nil
}

// rest takes visits done off an item, with the starts that they or the time
// rule out.
func (it *Item) rest(now, count, last int) {
	it.Dur, it.Val, it.Airmass = slices.Clone(it.Dur), slices.Clone(it.Val), slices.Clone(it.Airmass)
	from := now
	if count > 0 {
		from = max(now, last+it.MinGap)
	}
	if count >= it.Visits {
		it.Dur, it.Val, it.Airmass = nil, nil, nil
		it.Visits, it.Bonus = 1, 0
		return
	}
	for k := range it.Dur {
		if it.First+k < from {
			it.Dur[k] = 0
		}
	}
	if it.Visits -= count; count > 0 && it.Visits == 1 {
		for k := range it.Val {
			it.Val[k] += it.Bonus
		}
		it.Bonus = 0
	}
}

// allServed tells whether standards done serve every start left of an item.
func (p *Problem) allServed(whole *Problem, i int, done []Take) bool {
	it := &p.Items[i]
	for k, d := range it.Dur {
		if d == 0 {
			continue
		}
		served := false
		for _, s := range done {
			std := &whole.Items[s.Item]
			if std.Kind != Standard || std.Mode != it.Mode {
				continue
			}
			if _, _, air := std.at(s.Start); air > 0 {
				dt, dx := s.Start-it.First-k, air-it.Airmass[k]
				served = served || max(dt, -dt) <= it.Calib.Window && max(dx, -dx) <= it.Calib.DX
			}
		}
		if !served {
			return false
		}
	}
	return true
}
