package diagram

import (
	"slices"

	"evenfall/targets/roster"
	"evenfall/targets/stage"
	"evenfall/tui/kit"
)

// most is how many targets are drawn at once; of longer lists the first of
// the order.
const most = 5000

// spot is one target with its judgement.
type spot struct {
	row  int32
	sign byte
	v    *stage.Verdict
}

// placed is the targets shown as far as they have been judged. It does not
// change once made.
type placed struct {
	roster *roster.Roster
	order  []int32 // of the list, all of it
	spots  []spot  // in that order, as far as judged
	index  map[int32]int32
	signs  map[byte]int
	all    [2]window   // the whole diagram on each pair of axes
	on     [2]int      // how many stand on it
	why    [2][]reason // why others do not, the most frequent first
}

// reason is why some targets stand nowhere.
type reason struct {
	text string
	n    int
}

// limit is how many are to be judged.
func (p *placed) limit() int { return min(len(p.order), most) }

// done tells whether all are judged that are to be.
func (p *placed) done() bool { return len(p.spots) >= p.limit() }

// same tells whether it belongs to an order of a list.
func (p *placed) same(r *roster.Roster, order []int32) bool {
	if p == nil || p.roster != r || len(p.order) != len(order) {
		return false
	}
	return len(order) == 0 || &p.order[0] == &order[0] || slices.Equal(p.order, order)
}

// further judges so many more. The old one goes on as it was.
func (p *placed) further(lives kit.Lives, n int) *placed {
	until := min(len(p.spots)+n, p.limit())
	out := &placed{roster: p.roster, order: p.order, spots: make([]spot, 0, until), index: make(map[int32]int32, until), signs: map[byte]int{}}
	out.spots = append(out.spots, p.spots...)
	for _, row := range p.order[len(p.spots):until] {
		out.spots = append(out.spots, judged(lives, p.roster, row))
	}
	why := [2]map[string]int{{}, {}}
	for i := range out.spots {
		s := &out.spots[i]
		out.index[s.row] = int32(i)
		out.signs[s.sign]++
		for k := range pairs {
			if _, _, ok := pairs[k].place(&s.v.Place); ok {
				out.on[k]++
			} else {
				why[k][whyNot(s.v)]++
			}
		}
	}
	for k := range pairs {
		out.all[k] = pairs[k].around(out.spots)
		out.why[k] = ordered(why[k])
	}
	return out
}

func judged(lives kit.Lives, r *roster.Roster, row int32) spot {
	v := lives.Verdict(r, int(row))
	return spot{row, kit.StageSign(v.Best), v}
}

// whyNot says why a target stands nowhere.
func whyNot(v *stage.Verdict) string {
	if v.Place.Why != "" {
		return v.Place.Why
	}
	return "not known"
}

func ordered(why map[string]int) []reason {
	var out []reason
	for text, n := range why {
		out = append(out, reason{text, n})
	}
	slices.SortFunc(out, func(a, b reason) int {
		switch {
		case a.n != b.n:
			return b.n - a.n
		case a.text < b.text:
			return -1
		}
		return 1
	})
	return out
}
