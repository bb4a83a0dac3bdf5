package order

import (
	"cmp"
	"slices"
)

// choose marks the takes of the present plan to leave out.
func (s *search) choose() {
	n := len(s.cur.b)
	s.mark = append(s.mark[:0], make([]bool, n)...)
	if n == 0 {
		return
	}
	count := 1 + s.rnd.below(mostDropped)
	if s.rnd.one(16) {
		count = 1 + s.rnd.below(1+n/3)
	}
	if len(s.standards) > 0 && s.rnd.one(8) {
		s.chooseStandard()
	}
	switch way := s.rnd.below(8); {
	case way < 3:
		from := s.rnd.below(n)
		for k := from; k < min(from+count, n); k++ {
			s.mark[k] = true
		}
	case way < 5:
		for range count {
			s.mark[s.rnd.below(n)] = true
		}
	case way < 7:
		s.choosePoor(count)
	default:
		item := s.cur.b[s.rnd.below(n)].item
		for k := range s.cur.b {
			s.mark[k] = s.cur.b[k].item == item
		}
	}
	for k, b := range s.cur.b {
		if b.fixed || b.firm {
			s.mark[k] = false
		}
	}
}

// chooseStandard marks one standard.
func (s *search) chooseStandard() {
	n := len(s.cur.b)
	from := s.rnd.below(n)
	for k := range n {
		if at := (from + k) % n; len(s.q.g.matches[s.cur.b[at].item]) > 0 {
			s.mark[at] = true
			return
		}
	}
}

// choosePoor marks takes that are worth little for their time, by a draw of
// three each.
func (s *search) choosePoor(count int) {
	g := s.q.g
	n := len(s.cur.b)
	for range count {
		pick, least := 0, int64(1)<<62
		for range 3 {
			k := s.rnd.below(n)
			b := &s.cur.b[k]
			c := int(b.item)*g.w + int(b.start)
			rate := int64(g.val[c]+g.bonus[b.item]/g.visits[b.item]) * 1024 / int64(g.dur[c]+s.pace)
			if !s.mark[k] && rate < least {
				pick, least = k, rate
			}
		}
		s.mark[pick] = true
	}
}

// repair makes a plan of a path of the bound: repeats left out, locks held,
// times settled, the rest filled. It tells whether it is the best yet.
func (s *search) repair(b *bounder, path []step) bool {
	g := s.q.g
	count, last := make([]int32, g.n), make([]int32, g.n)
	try := g.locked()
	for _, l := range try {
		count[l.item]++
	}
	for i := range last {
		last[i] = never
	}
	for _, st := range path {
		i := int32(b.nodes[st.node].item)
		lock := b.isLock(int(i), st.start)
		if !lock && count[i] >= g.visits[i] || st.start-last[i] < g.gap[i] && last[i] != never {
			continue
		}
		last[i] = st.start
		if !lock {
			count[i]++
			try = append(try, block{item: i, start: st.start})
		}
	}
	slices.SortStableFunc(try, func(x, y block) int { return cmp.Compare(x.start, y.start) })
	if !s.q.load(try) {
		return false
	}
	s.complete(manner{}, true)
	return s.note()
}
