// Package roster holds a list of targets ready to be ranked, sorted and
// filtered at any instant: exactly for lists of ordinary length, by a sweep for
// those of hundreds of thousands. Its answers are snapshots that never change,
// so that a screen can go on drawing one while the next is made. It knows no
// screen, reads no file and no clock.
package roster

import (
	"slices"
	"strings"
	"sync"

	"evenfall/astro/frame"
	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/targets/sweep"
)

// Bulk is the length of list from which on windows come from the sweep, to a
// minute, instead of target by target. Rows that are shown are exact always.
const Bulk = 3000

// Entry is one target with what is wanted of it.
type Entry struct {
	Target     targets.Target
	Magnitudes []targets.Magnitude
	Want       moment.Want
	Phases     [][2]float64 // from and to, cycles, that requests want it in
	Session    bool         // typed in on the screen, kept for the session
}

// Wants returns what a target is wanted with in a night, as instruments may
// be mounted in one night and not in another.
type Wants func(n *moment.Night, i int, e *Entry) moment.Want

// Roster is a list with what does not depend on the night. It never changes:
// With returns another. It is safe for use by several goroutines.
type Roster struct {
	entries []Entry
	over    map[int]*Entry // in place of those, after WithMagnitudes
	stars   []frame.Star
	search  []string // lower-case text that filters look into
	byName  []int32  // rank by name
	models  moment.Models
	wants   Wants

	mu       sync.Mutex
	prepared []*moment.Prepared
	judged   []*Judged                  // stages of long lists, judged when asked for
	nights   map[*moment.Night]*nightly // a night made anew, for other conditions, is another one
}

// nightly is what is kept of a night.
type nightly struct {
	mu      sync.Mutex
	courses map[int]*moment.Course
	sky     *sweep.Sky
}

// keepNights is how many nights' courses are kept before the store is emptied.
const keepNights = 4

// New makes a roster.
//
// Given:
//   - wants: what each target is wanted with in a night; nil: Entry.Want.
func New(entries []Entry, models moment.Models, wants Wants) *Roster {
	if wants == nil {
		wants = func(_ *moment.Night, _ int, e *Entry) moment.Want { return e.Want }
	}
	r := &Roster{entries: entries, models: models, wants: wants, nights: map[*moment.Night]*nightly{}}
	r.stars = make([]frame.Star, len(entries))
	r.search = make([]string, len(entries))
	r.prepared, r.judged = make([]*moment.Prepared, len(entries)), make([]*Judged, len(entries))
	order := make([]int32, len(entries))
	for i := range entries {
		t := &entries[i].Target
		r.stars[i] = moment.StarOf(t)
		r.search[i] = strings.ToLower(t.Name + " " + t.ID + " " + string(t.Kind) + " " + t.KindNote + " " + t.Physics.SpType + " " + t.Var.Type)
		order[i] = int32(i)
	}
	slices.SortStableFunc(order, func(a, b int32) int {
		return strings.Compare(strings.ToLower(entries[a].Target.Name), strings.ToLower(entries[b].Target.Name))
	})
	r.byName = make([]int32, len(entries))
	for rank, i := range order {
		r.byName[i] = int32(rank)
	}
	return r
}

// Len returns the number of targets.
func (r *Roster) Len() int { return len(r.entries) }

// Entry returns one target with what is wanted of it.
func (r *Roster) Entry(i int) *Entry {
	if e, ok := r.over[i]; ok {
		return e
	}
	return &r.entries[i]
}

// Named tells whether a target bears a name; it looks at all of them.
func (r *Roster) Named(name string) bool {
	key := targets.Key(name)
	return slices.ContainsFunc(r.entries, func(e Entry) bool { return targets.Key(e.Target.Name) == key })
}

// With returns a roster with one target more, at its end; what was prepared is
// kept.
func (r *Roster) With(e Entry) *Roster {
	list := append(slices.Clone(r.entries), e)
	for i, o := range r.over {
		list[i] = *o
	}
	n := New(list, r.models, r.wants)
	r.mu.Lock()
	defer r.mu.Unlock()
	copy(n.prepared, r.prepared)
	return n
}

// Prepared returns a target's judgement and forecast state, made when first
// asked for.
func (r *Roster) Prepared(i int) *moment.Prepared {
	r.mu.Lock()
	p := r.prepared[i]
	r.mu.Unlock()
	if p != nil {
		return p
	}
	made := moment.Prepare(r.Entry(i).Target, r.Entry(i).Magnitudes, r.models)
	r.mu.Lock()
	defer r.mu.Unlock()
	if r.prepared[i] == nil {
		r.prepared[i] = &made
	}
	return r.prepared[i]
}

// night returns what is kept of a night, a new store where there is none.
func (r *Roster) night(n *moment.Night) *nightly {
	r.mu.Lock()
	defer r.mu.Unlock()
	k, ok := r.nights[n]
	if !ok {
		if len(r.nights) >= keepNights {
			clear(r.nights)
		}
		k = &nightly{courses: map[int]*moment.Course{}}
		r.nights[n] = k
	}
	return k
}

// Want returns what a target is wanted with in a night.
func (r *Roster) Want(n *moment.Night, i int) moment.Want { return r.wants(n, i, r.Entry(i)) }

// Course returns a target's night, worked out when first asked for.
func (r *Roster) Course(n *moment.Night, i int) *moment.Course {
	k := r.night(n)
	k.mu.Lock()
	c := k.courses[i]
	k.mu.Unlock()
	if c != nil {
		return c
	}
	made := moment.Tonight(n, r.Prepared(i), r.Want(n, i))
	k.mu.Lock()
	defer k.mu.Unlock()
	if k.courses[i] == nil {
		k.courses[i] = &made
	}
	return k.courses[i]
}

// Moment returns everything of one target at the instant of a scene, exact.
func (r *Roster) Moment(s *moment.Scene, i int) moment.Moment {
	return moment.Of(s, r.Prepared(i), r.Course(s.Night, i), r.Want(s.Night, i))
}
