// Package order puts the takes of one night in order: given what may start in
// which minute, how long it then lasts and what it is worth, it looks for the
// sequence worth most, and for a figure that no plan can exceed.
//
// It knows whole numbers only (slots of time, thousandths of a point), so that
// the same problem gives the same plan, byte for byte, on every machine. It
// counts its work and never looks at a clock; a context can stop it between
// two steps, and what it has then is a complete plan.
//
// It refuses to know a star, a telescope or a date: whatever forbids a start
// must have been written into the tables as a duration of zero, and whatever
// makes a take good into its value.
package order

import (
	"cmp"
	"fmt"
	"slices"
)

// Format is the name of the file format that [Read] and [Problem.Write] know.
const Format = "night-instance/1"

// Limits of a problem, so that no sum below can leave its integer type.
const (
	maxSlots   = 6_000      // slots of one night: 15 s for a day
	maxItems   = 2_000      // requests and standards
	maxCells   = 2_000_000  // items times slots
	maxVisits  = 64         // visits of one request
	maxPoints  = 50_000_000 // thousandths of a point in one night, all told
	maxAirmass = 1_000_000  // thousandths
)

// Kinds of item.
const (
	Science  = "science"  // worth something by itself
	Standard = "standard" // lends worth to science takes of its mode
)

// Problem is one night as integers.
//
// Notes:
//  1. Times are slots counted from 0; slot 0 begins the night and takes must
//     end by slot T. Values are thousandths of a point.
//  2. Weight, RAh, Decd, Latitude, SlotMin and Seed of the file are carried
//     along and do not enter the plan.
type Problem struct {
	Name     string
	Seed     int64   // of the generator; 0 for a real night
	SlotMin  float64 // length of a slot, minutes
	T        int     // slots; every take ends at T or before
	Now      int     // first slot that can still be used
	Latitude float64 // degrees
	Items    []Item
	Setup    [][]int // slots from the end of a take of row to the start of one of column
	Setup0   []int   // slots from Now to the start of a take, when it is the first
	Locks    []Take  // takes that must be in the plan
}

// Item is one request, or one standard.
type Item struct {
	ID      string
	Kind    string  // [Science] or [Standard]
	Weight  float64 // for people to read
	Mode    int     // a standard serves takes of its own mode
	RAh     float64 // hours, for people to read
	Decd    float64 // degrees, for people to read
	Visits  int     // takes at most, from 1
	MinGap  int     // slots between the starts of two visits
	Bonus   int     // paid once, when all of two or more visits are made
	Calib   *Calib  // nil: the value does not depend on a standard
	First   int     // slot of index 0 of the next three
	Dur     []int   // slots on target for a start in that slot; 0: cannot start
	Val     []int   // worth of a take started there
	Airmass []int   // thousandths, at the middle of the take
}

// Calib says when a standard serves a take: same mode, starts at most Window
// slots apart, airmasses at most DX thousandths apart. Without one the take is
// worth floor(value (1000 - Loss) / 1000).
type Calib struct {
	Window int // slots
	DX     int // thousandths of an airmass
	Loss   int // permille, 0 to 1000
}

// Take is one item started in one slot.
type Take struct {
	Item  int
	Start int
}

// at returns duration, value and airmass of a start; a duration of 0 when the
// item cannot start there.
func (it *Item) at(slot int) (dur, val, air int) {
	k := slot - it.First
	if k < 0 || k >= len(it.Dur) {
		return 0, 0, 0
	}
	return it.Dur[k], it.Val[k], it.Airmass[k]
}

// End returns the slot in which a take ends, and whether it can start at all.
func (p *Problem) End(t Take) (end int, ok bool) {
	if t.Item < 0 || t.Item >= len(p.Items) {
		return 0, false
	}
	d, _, _ := p.Items[t.Item].at(t.Start)
	return t.Start + d, d > 0
}

// Check says what is wrong with a problem, with the place in the words of the
// file; nil when all is well. Locks that contradict one another or cannot
// start are not its business: see [Problem.LockFaults].
func (p *Problem) Check() error {
	n := len(p.Items)
	switch {
	case p.T < 0 || p.T > maxSlots:
		return fmt.Errorf("T %d: a night has 0 to %d slots", p.T, maxSlots)
	case p.Now < 0 || p.Now > p.T:
		return fmt.Errorf("now %d: outside the night, which is 0 to T = %d", p.Now, p.T)
	case n > maxItems:
		return fmt.Errorf("items: %d are more than %d; leave out what cannot be observed", n, maxItems)
	case n*(p.T+1) > maxCells:
		return fmt.Errorf("items: %d in %d slots are too many; take longer slots", n, p.T)
	case !(p.SlotMin > 0 && p.SlotMin <= 1440):
		return fmt.Errorf("slot_min %v: a slot lasts more than 0 and at most 1440 minutes", p.SlotMin)
	case !(p.Latitude >= -90 && p.Latitude <= 90):
		return fmt.Errorf("latitude %v: write degrees from -90 to 90", p.Latitude)
	}
	total := 0
	for i := range p.Items {
		if err := p.Items[i].check(p.T); err != nil {
			return fmt.Errorf("items[%d].%w", i, err)
		}
		if total += p.Items[i].most(); total > maxPoints {
			return fmt.Errorf("items[%d]: values add up to more than %d; make them smaller", i, maxPoints)
		}
	}
	if err := p.checkSetups(); err != nil {
		return err
	}
	for k, l := range p.Locks {
		if l.Item < 0 || l.Item >= n {
			return fmt.Errorf("locks[%d].item %d: items are 0 to %d", k, l.Item, n-1)
		}
	}
	return nil
}

// most is the largest worth an item can add to a plan.
func (it *Item) most() int {
	top := 0
	for _, v := range it.Val {
		top = max(top, v)
	}
	return top*it.Visits + it.Bonus
}

// check says what is wrong with one item.
func (it *Item) check(slots int) error {
	switch {
	case it.Kind != Science && it.Kind != Standard:
		return fmt.Errorf("kind %q: write %q or %q", it.Kind, Science, Standard)
	case it.Visits < 1 || it.Visits > maxVisits:
		return fmt.Errorf("visits %d: from 1 to %d", it.Visits, maxVisits)
	case it.MinGap < 0 || it.MinGap > maxSlots:
		return fmt.Errorf("min_gap %d: from 0 to %d slots", it.MinGap, maxSlots)
	case it.Bonus < 0 || it.Bonus > maxPoints:
		return fmt.Errorf("bonus %d: from 0 to %d", it.Bonus, maxPoints)
	case it.First < 0 || it.First > slots+1:
		return fmt.Errorf("first %d: from 0 to T = %d", it.First, slots)
	case len(it.Val) != len(it.Dur):
		return fmt.Errorf("val: %d entries, but dur has %d", len(it.Val), len(it.Dur))
	case len(it.Airmass) != len(it.Dur):
		return fmt.Errorf("airmass: %d entries, but dur has %d", len(it.Airmass), len(it.Dur))
	case it.First+len(it.Dur) > slots+1:
		return fmt.Errorf("dur: %d entries from slot %d run past T = %d", len(it.Dur), it.First, slots)
	}
	if c := it.Calib; c != nil {
		switch {
		case it.Kind == Standard:
			return fmt.Errorf("calib: a standard needs no standard; write null")
		case c.Window < 0 || c.Window > maxSlots:
			return fmt.Errorf("calib.window %d: from 0 to %d slots", c.Window, maxSlots)
		case c.DX < 0 || c.DX > maxAirmass:
			return fmt.Errorf("calib.dx %d: from 0 to %d thousandths of an airmass", c.DX, maxAirmass)
		case c.Loss < 0 || c.Loss > 1000:
			return fmt.Errorf("calib.loss %d: from 0 to 1000 permille", c.Loss)
		}
	}
	for k := range it.Dur {
		switch {
		case it.Dur[k] < 0 || it.Dur[k] > maxSlots:
			return fmt.Errorf("dur[%d] %d: from 0, for cannot start, to %d slots", k, it.Dur[k], maxSlots)
		case it.Val[k] < 0 || it.Val[k] > maxPoints:
			return fmt.Errorf("val[%d] %d: from 0 to %d", k, it.Val[k], maxPoints)
		case it.Airmass[k] < 0 || it.Airmass[k] > maxAirmass:
			return fmt.Errorf("airmass[%d] %d: from 0 to %d thousandths", k, it.Airmass[k], maxAirmass)
		}
	}
	return nil
}

// checkSetups says what is wrong with the moves.
func (p *Problem) checkSetups() error {
	n := len(p.Items)
	bad := func(s int) bool { return s < 0 || s > maxSlots }
	switch {
	case len(p.Setup) != n:
		return fmt.Errorf("setup: %d rows for %d items", len(p.Setup), n)
	case len(p.Setup0) != n:
		return fmt.Errorf("setup0: %d entries for %d items", len(p.Setup0), n)
	}
	for j, s := range p.Setup0 {
		if bad(s) {
			return fmt.Errorf("setup0[%d] %d: from 0 to %d slots", j, s, maxSlots)
		}
	}
	for i, row := range p.Setup {
		if len(row) != n {
			return fmt.Errorf("setup[%d]: %d entries for %d items", i, len(row), n)
		}
		for j, s := range row {
			if bad(s) {
				return fmt.Errorf("setup[%d][%d] %d: from 0 to %d slots", i, j, s, maxSlots)
			}
		}
	}
	return nil
}

// LockFault is a lock that no plan can hold, and why.
type LockFault struct {
	Index int // in Problem.Locks
	Why   string
}

// LockFaults lists the locks that must go before the rest can be planned.
// Locks are tried in order of time, at equal times in order of the list; the
// later of two that do not fit together is the faulty one.
func (p *Problem) LockFaults() []LockFault {
	order := make([]int, len(p.Locks))
	for k := range order {
		order[k] = k
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(p.Locks[a].Start, p.Locks[b].Start) })
	var faults []LockFault
	var kept []Take
	for _, k := range order {
		if why := p.lockFault(kept, p.Locks[k]); why != "" {
			faults = append(faults, LockFault{k, why})
			continue
		}
		if !slices.Contains(kept, p.Locks[k]) {
			kept = append(kept, p.Locks[k])
		}
	}
	return faults
}

// lockFault says why a lock cannot follow those kept before it.
func (p *Problem) lockFault(kept []Take, l Take) string {
	it := &p.Items[l.Item]
	end, ok := p.End(l)
	switch {
	case !ok:
		return fmt.Sprintf("%s cannot start in slot %d", it.ID, l.Start)
	case end > p.T:
		return fmt.Sprintf("%s started in slot %d ends in %d, after the night's end %d", it.ID, l.Start, end, p.T)
	case slices.Contains(kept, l):
		return "" // said twice
	}
	ready := p.Now + p.Setup0[l.Item]
	visits := 0
	for k, t := range kept {
		if k == len(kept)-1 {
			before, _ := p.End(t)
			ready = before + p.Setup[t.Item][l.Item]
		}
		if t.Item != l.Item {
			continue
		}
		if visits++; l.Start-t.Start < it.MinGap {
			return fmt.Sprintf("%s is locked %d slots after its visit in slot %d; its visits are at least %d apart",
				it.ID, l.Start-t.Start, t.Start, it.MinGap)
		}
	}
	switch {
	case visits >= it.Visits:
		return fmt.Sprintf("%s is locked more often than its %d visits", it.ID, it.Visits)
	case l.Start < ready && len(kept) == 0:
		return fmt.Sprintf("%s is locked in slot %d, but can be reached in %d at the earliest", it.ID, l.Start, ready)
	case l.Start < ready:
		return fmt.Sprintf("%s is locked in slot %d, but after the locked %s it can be reached in %d at the earliest",
			it.ID, l.Start, p.Items[kept[len(kept)-1].Item].ID, ready)
	}
	return ""
}
