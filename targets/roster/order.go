package roster

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/moment"
)

// Sort is an order: a key, reversed or not. The zero value is the order of
// what to take next.
type Sort struct {
	Key     string
	Reverse bool
}

// Plain tells whether the order is that of what to take next.
func (o Sort) Plain() bool { return (o.Key == "" || o.Key == SortKeys[0]) && !o.Reverse }

// SortKeys lists what a list can be ordered by; the first is what to take
// next. Most bring the most wanted end first: high altitude, little air, bright
// stars, windows that close soon.
var SortKeys = []string{"next", "name", "kind", "stage", "mag", "alt", "x", "best", "bestx", "left", "ends", "moon", "ra", "dec", "period", "mark"}

// sort puts what passed into the order asked for, from that of what to take
// next.
func (s *Snapshot) sort(ask Ask) {
	if ask.Sort.Plain() {
		return
	}
	slices.SortStableFunc(s.Fresh, func(a, b int32) int {
		absent, c := s.compare(ask.Sort.Key, ask.Marks, int(a), int(b))
		switch {
		case absent != 0: // what is not known stands last, reversed too
			return absent
		case ask.Sort.Reverse:
			return -c
		}
		return c
	})
}

// compare says which of two has a figure at all, and which comes first.
func (s *Snapshot) compare(key string, marks map[int]bool, a, b int) (absent, order int) {
	r := s.Roster
	switch key {
	case "name":
		return 0, int(r.byName[a]) - int(r.byName[b])
	case "kind":
		return 0, slices.Index(targets.Kinds, r.entries[a].Target.Kind) - slices.Index(targets.Kinds, r.entries[b].Target.Kind)
	case "mark":
		absent, _ = presentFirst(marks[a], marks[b], 0)
		return 0, absent
	case "period":
		x, y := r.entries[a].Target.Var.PeriodD, r.entries[b].Target.Var.PeriodD
		return presentFirst(x.Known, y.Known, x.Value-y.Value)
	}
	return compareMoments(key, s.Row(a), s.Row(b))
}

func compareMoments(key string, x, y *moment.Moment) (absent, order int) {
	switch key {
	case "alt":
		return 0, number(y.Apparent.Deg() - x.Apparent.Deg())
	case "x":
		return presentFirst(x.AirOK, y.AirOK, float64(x.Airmass-y.Airmass))
	case "moon":
		return 0, number(y.MoonSep.Deg() - x.MoonSep.Deg())
	case "ra":
		return 0, number(x.RA.Deg() - y.RA.Deg())
	case "dec":
		return 0, number(x.Dec.Deg() - y.Dec.Deg())
	case "stage":
		return 0, strings.Compare(x.Stage.Best, y.Stage.Best)
	case "ends":
		return presentFirstWord(string(x.EndsBy), string(y.EndsBy))
	case "best":
		return presentFirst(x.Course.Best != nil, y.Course.Best != nil, seconds(x.Course.Best, y.Course.Best))
	case "bestx":
		return presentFirst(x.Course.Best != nil, y.Course.Best != nil, float64(x.Course.BestAirmass-y.Course.BestAirmass))
	case "left":
		return presentFirst(x.Left > 0, y.Left > 0, x.Left.Seconds()-y.Left.Seconds())
	case "mag":
		return presentFirst(x.Expect.Known, y.Expect.Known, x.Expect.Mag.Mags()-y.Expect.Mag.Mags())
	}
	return presentFirst(x.Rank > 0, y.Rank > 0, float64(x.Rank-y.Rank))
}

// seconds is the time from b to a; 0 where one is missing.
func seconds(a, b *astro.Instant) float64 {
	if a == nil || b == nil {
		return 0
	}
	return a.Sub(*b).Seconds()
}

func number(d float64) int { return cmp.Compare(d, 0) }

// presentFirst puts what is known before what is not.
func presentFirst(a, b bool, d float64) (absent, order int) {
	switch {
	case a && !b:
		return -1, 0
	case b && !a:
		return 1, 0
	case !a:
		return 0, 0
	}
	return 0, number(d)
}

func presentFirstWord(a, b string) (absent, order int) {
	absent, _ = presentFirst(a != "", b != "", 0)
	return absent, strings.Compare(a, b)
}

// place is a row of a long list with the number it is ordered by.
type place struct {
	key uint64
	row int32
}

func sortPlaces(list []place) {
	slices.SortFunc(list, func(a, b place) int {
		if a.key != b.key {
			if a.key < b.key {
				return -1
			}
			return 1
		}
		return int(a.row) - int(b.row)
	})
}

// bits turns a number into one that sorts alike as an unsigned integer.
func bits(v float64) uint64 {
	b := math.Float64bits(v)
	if b>>63 == 1 {
		return ^b
	}
	return b | 1<<63
}

// nextKey is the order of what to take next in one number: class, time until
// the window ends or opens, weight (to an eighth of itself), airmass.
func (q *quick) nextKey(weight float64) uint64 {
	w := uint64(math.Float32bits(float32(max(weight, 0)))>>20) & 0x7ff
	x := uint64(math.Float32bits(max(q.airmass, 0))>>11) & 0xfffff
	return uint64(q.class)<<62 | uint64(math.Float32bits(max(q.hours, 0)))<<31 | (0x7ff-w)<<20 | x
}
