package roster

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"evenfall/astro"
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
		c := s.compare(ask.Sort.Key, ask.Marks, int(a), int(b))
		if ask.Sort.Reverse {
			return -c
		}
		return c
	})
}

func (s *Snapshot) compare(key string, marks map[int]bool, a, b int) int {
	r := s.Roster
	switch key {
	case "name":
		return int(r.byName[a]) - int(r.byName[b])
	case "kind":
		return strings.Compare(string(r.entries[a].Target.Kind), string(r.entries[b].Target.Kind))
	case "mark":
		return presentFirst(marks[a], marks[b], 0)
	case "period":
		x, y := r.entries[a].Target.Var.PeriodD, r.entries[b].Target.Var.PeriodD
		return presentFirst(x.Known, y.Known, x.Value-y.Value)
	}
	return compareMoments(key, s.Row(a), s.Row(b))
}

func compareMoments(key string, x, y *moment.Moment) int {
	switch key {
	case "alt":
		return number(y.Apparent.Deg() - x.Apparent.Deg())
	case "x":
		return presentFirst(x.AirOK, y.AirOK, float64(x.Airmass-y.Airmass))
	case "moon":
		return number(y.MoonSep.Deg() - x.MoonSep.Deg())
	case "ra":
		return number(x.RA.Deg() - y.RA.Deg())
	case "dec":
		return number(x.Dec.Deg() - y.Dec.Deg())
	case "stage":
		return strings.Compare(x.Stage.Best, y.Stage.Best)
	case "ends":
		return strings.Compare(string(x.EndsBy), string(y.EndsBy))
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
