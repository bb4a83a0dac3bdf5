package order

import "slices"

// block is one take of a sequence. Its start may be moved within lo to hi
// while the order stays.
type block struct {
	item   int32
	start  int32
	lo, hi int32
	fixed  bool // a lock: neither moved nor dropped
	firm   bool // never dropped, and held to an early start
}

// row is a table over a stretch of slots, from off on.
type row struct {
	off int32
	v   []int32
}

// fit makes a row cover from..to, with room kept.
func (r *row) fit(from, to int32) {
	n := int(to - from + 1)
	if cap(r.v) < n {
		r.v = make([]int32, n+n/2)
	}
	r.off, r.v = from, r.v[:n]
}

// seq is an order of takes with tables that answer, exactly and at once, what
// the best starts are when one more take is put in, or some are left out:
//
//	P[k][t]  most that blocks before k can be worth, the machine free at t
//	Q[k][u]  most that blocks from k on can be worth, block k ready at u
//
// Starts of standards are held, and the slack between two visits of a request
// is shared out between them, so that blocks do not depend on one another
// otherwise than by order; both are settled anew after every change.
type seq struct {
	g       *night
	lo      []int32 // first start of an item, that of the night or later
	now     int32   // first slot that can be used, that of the night or later
	lead    int     // blocks at the front before which nothing may be put
	firm    int32   // latest start of a firm block
	eff     []int32 // [item*w+slot] worth of a start with the standards that are in
	count   []int16 // [item*w+slot] standards that serve a start
	lean    []int32 // nil, or what a start is preferred by, on top of its worth
	placed  []int32 // takes of an item that are in
	b       []block
	free    []int32 // earliest the machine is free before block k
	late    []int32 // latest start of block k; end of night after the last
	p, q    []row
	reach   int     // how many neighbouring blocks a move may leave out
	work    int64   // cells looked at, the measure of effort
	last    []int32 // scratch of ranges
	leanTop int32   // highest preference
}

// maxBlocks is the number of takes at which a plan counts as full.
const maxBlocks = 1500

func newSeq(g *night, lean []int32) *seq {
	s := &seq{g: g, lo: slices.Clone(g.lo), now: g.now, lean: lean, eff: make([]int32, len(g.cut)), count: make([]int16, len(g.cut)),
		placed: make([]int32, g.n), last: make([]int32, g.n)}
	for c := range s.eff {
		s.eff[c] = s.bare(c, false)
	}
	return s
}

// bare is the worth of a cell, served or not, with the preference of the user.
func (s *seq) bare(c int, served bool) int32 {
	v := s.g.cut[c]
	if served {
		v = s.g.val[c]
	}
	if s.lean != nil {
		v += s.lean[c]
	}
	return v
}

// place counts a take in, and what a standard then serves.
func (s *seq) place(item, start int32) {
	s.placed[item]++
	if !s.g.std[item] {
		return
	}
	s.work += int64(60 * len(s.g.matches[item]))
	s.g.served(int(item), start, func(_, c int) {
		if s.count[c]++; s.count[c] == 1 {
			s.eff[c] = s.bare(c, true)
		}
	})
}

// unplace takes it back.
func (s *seq) unplace(item, start int32) {
	s.placed[item]--
	if !s.g.std[item] {
		return
	}
	s.work += int64(60 * len(s.g.matches[item]))
	s.g.served(int(item), start, func(_, c int) {
		if s.count[c]--; s.count[c] == 0 {
			s.eff[c] = s.bare(c, false)
		}
	})
}

// add puts a block in before position k, without settling the times.
func (s *seq) add(k int, b block) {
	s.b = slices.Insert(s.b, k, b)
	s.place(b.item, b.start)
}

// drop leaves the blocks k..m-1 out, without settling the times.
func (s *seq) drop(k, m int) {
	for _, b := range s.b[k:m] {
		s.unplace(b.item, b.start)
	}
	s.b = slices.Delete(s.b, k, m)
}

// load makes the sequence that of a plan, with standards changed only where
// they differ, and settles the times. It tells whether the plan is feasible.
func (s *seq) load(plan []block) bool {
	for _, b := range s.b {
		if s.g.std[b.item] && !slices.ContainsFunc(plan, func(c block) bool { return c.item == b.item && c.start == b.start }) {
			s.unplace(b.item, b.start)
			s.placed[b.item]++
		}
	}
	for _, b := range plan {
		if s.g.std[b.item] && !slices.ContainsFunc(s.b, func(c block) bool { return c.item == b.item && c.start == b.start }) {
			s.place(b.item, b.start)
			s.placed[b.item]--
		}
	}
	clear(s.placed)
	for _, b := range plan {
		s.placed[b.item]++
	}
	s.b = append(s.b[:0], plan...)
	return s.settle()
}

// settle shares out slack, rebuilds all tables and moves every block to its
// best start. It tells whether there is one; without, tables are undefined.
func (s *seq) settle() bool {
	s.ranges()
	if !s.bounds() {
		return false
	}
	s.buildP(0)
	s.buildQ(len(s.b))
	return s.timed()
}

// ranges says between which slots each block may start.
func (s *seq) ranges() {
	for i := range s.last {
		s.last[i] = -1
	}
	for k := range s.b {
		b := &s.b[k]
		b.lo, b.hi = s.lo[b.item], s.g.hi[b.item]
		if b.fixed || s.g.std[b.item] {
			b.lo, b.hi = b.start, b.start
		}
		if b.firm {
			b.hi = min(b.hi, s.firm)
		}
		if s.g.visits[b.item] < 2 {
			continue
		}
		if a := s.last[b.item]; a >= 0 {
			before := &s.b[a]
			slack := b.start - before.start - s.g.gap[b.item]
			give := slack / 2
			switch {
			case before.lo == before.hi:
				give = 0
			case b.lo == b.hi:
				give = slack
			}
			before.hi = min(before.hi, before.start+give)
			b.lo = max(b.lo, before.start+give+s.g.gap[b.item])
		}
		s.last[b.item] = int32(k)
	}
}

// into is the move to block k, or 0 after the last.
func (s *seq) into(k int) int32 {
	switch {
	case k == len(s.b):
		return 0
	case k == 0:
		return s.g.setup0[s.b[0].item]
	}
	return s.g.setup[int(s.b[k-1].item)*s.g.n+int(s.b[k].item)]
}

// bounds finds the earliest free times and latest starts; false when the order
// cannot be kept.
func (s *seq) bounds() bool {
	n := len(s.b)
	s.free, s.late = resized(s.free, n+1), resized(s.late, n+1)
	s.free[0] = s.now
	for k := range s.b {
		b := &s.b[k]
		dur := s.g.dur[int(b.item)*s.g.w:]
		e := int32(maxSlots * 4)
		u := max(s.free[k]+s.into(k), b.lo)
		for ; u <= b.hi && u+s.g.short[b.item] < e; u++ {
			if d := dur[u]; d > 0 {
				e = min(e, u+d)
			}
		}
		if e > s.g.end {
			return false
		}
		s.free[k+1] = e
	}
	s.late[n] = s.g.end
	for k := n - 1; k >= 0; k-- {
		b := &s.b[k]
		dur := s.g.dur[int(b.item)*s.g.w:]
		limit := s.late[k+1] - s.into(k+1)
		u := min(b.hi, limit-s.g.short[b.item])
		for u >= b.lo && (dur[u] == 0 || u+dur[u] > limit) {
			u--
		}
		if u < max(b.lo, s.free[k]+s.into(k)) {
			return false
		}
		s.late[k] = u
	}
	s.work += int64(12 * n)
	return true
}

func resized(xs []int32, n int) []int32 {
	if cap(xs) < n {
		xs = slices.Grow(xs[:0], n+n/2)
	}
	return xs[:n]
}

// span is the stretch of slots that tables of position k must cover.
func (s *seq) span(k int) (from, to int32) {
	return s.free[max(k-s.reach, 0)], s.late[min(k+s.reach, len(s.b))]
}

// widen makes the tables cover moves that leave out up to r neighbouring blocks.
func (s *seq) widen(r int) {
	if s.reach < r {
		s.reach = r
		s.buildP(0)
		s.buildQ(len(s.b))
	}
}

// narrow lets the tables cover no more than insertions from the next change on.
func (s *seq) narrow() { s.reach = 0 }

// buildP builds the rows of P after position k, that of k when k is 0.
func (s *seq) buildP(k int) {
	n := len(s.b)
	for len(s.p) < n+1 {
		s.p = append(s.p, row{})
	}
	if k == 0 {
		s.p[0].fit(s.span(0))
		clear(s.p[0].v)
	}
	for ; k < n; k++ {
		b, in := &s.b[k], s.into(k)
		from, to := s.span(k + 1)
		r, prev := &s.p[k+1], &s.p[k]
		r.fit(from, to)
		for t := range r.v {
			r.v[t] = never
		}
		c := int(b.item) * s.g.w
		dur, eff := s.g.dur[c:c+s.g.w], s.eff[c:c+s.g.w]
		off := prev.off + in
		top := int32(len(prev.v) - 1)
		u := max(s.free[k]+in, b.lo)
		last := min(b.hi, to-s.g.short[b.item])
		s.work += int64(len(r.v)) + int64(max(0, last-u))
		for ; u <= last; u++ {
			e := u + dur[u]
			if dur[u] == 0 || e > to {
				continue
			}
			v := prev.v[min(u-off, top)] + eff[u]
			if e = max(e-from, 0); v > r.v[e] {
				r.v[e] = v
			}
		}
		best := never
		for t, v := range r.v {
			best = max(best, v)
			r.v[t] = best
		}
	}
}

// buildQ builds the rows of Q from position k down to 0.
func (s *seq) buildQ(k int) {
	n := len(s.b)
	for len(s.q) < n+1 {
		s.q = append(s.q, row{})
	}
	if k == n {
		s.q[n].fit(s.span(n))
		clear(s.q[n].v)
		k--
	}
	for ; k >= 0; k-- {
		b, in := &s.b[k], s.into(k+1)
		from, to := s.span(k)
		r, next := &s.q[k], &s.q[k+1]
		r.fit(from, to)
		c := int(b.item) * s.g.w
		dur, eff := s.g.dur[c:c+s.g.w], s.eff[c:c+s.g.w]
		limit := next.off + int32(len(next.v)) - 1
		s.work += int64(len(r.v))
		best := never
		for u := to; u >= from; u-- {
			if u >= b.lo && u <= b.hi && dur[u] > 0 {
				if e := u + dur[u] + in; e <= limit {
					best = max(best, eff[u]+next.v[max(e-next.off, 0)])
				}
			}
			r.v[u-from] = best
		}
	}
}

// total is what the sequence is worth to the search: takes and preferences,
// without bonuses.
func (s *seq) total() int32 {
	r := &s.p[len(s.b)]
	return r.v[len(r.v)-1]
}

// timed moves each block to the earliest of its best starts.
func (s *seq) timed() bool {
	t := s.now
	for k := range s.b {
		b := &s.b[k]
		ready := t + s.into(k)
		q, next := &s.q[k], &s.q[k+1]
		goal := q.v[ready-q.off]
		if goal < 0 {
			return false
		}
		out := s.into(k + 1)
		c := int(b.item) * s.g.w
		u := max(ready, b.lo)
		for ; ; u++ {
			d := s.g.dur[c+int(u)]
			if d == 0 {
				continue
			}
			e := u + d + out
			if e <= s.late[k+1] && s.eff[c+int(u)]+next.v[e-next.off] == goal {
				break
			}
		}
		s.work += int64(u - ready + 1)
		b.start = u
		t = u + s.g.dur[c+int(u)]
	}
	return true
}
