package order

import "slices"

// site is a place for one more take: before block k, blocks k..m-1 left out.
type site struct {
	k, m  int
	start int32
	value int32 // worth of the whole sequence then, without bonuses; never: no place
}

// insert puts a take in at a site without leftovers and settles the times. If
// they cannot be settled it undoes the change and returns false.
func (s *seq) insert(j int32, at site) bool {
	plain := s.g.visits[j] < 2 && !s.g.std[j]
	if !plain {
		kept := slices.Clone(s.b)
		s.add(at.k, block{item: j, start: at.start})
		if s.settle() {
			return true
		}
		s.load(kept)
		return false
	}
	k := at.k
	s.add(k, block{item: j, start: at.start, lo: s.lo[j], hi: s.g.hi[j]})
	if !s.bounds() {
		s.b = slices.Delete(s.b, k, k+1)
		s.placed[j]--
		s.settle()
		return false
	}
	// Rows before the new block of P, and after it of Q, stay as they are.
	n := len(s.b)
	s.p, s.q = opened(s.p, k+1, n), opened(s.q, k, n)
	if !s.covered(k) {
		s.buildP(0)
		s.buildQ(n)
		return s.timed()
	}
	s.buildP(k)
	s.buildQ(k)
	return s.timed()
}

// covered tells whether the rows that stay after a block was put in at k reach
// as far as they must. They do, unless some move is longer than two others with
// a take between them.
func (s *seq) covered(k int) bool {
	for i := 0; i <= k; i++ {
		if _, to := s.span(i); s.p[i].off+int32(len(s.p[i].v))-1 < to {
			return false
		}
	}
	for i := k + 1; i <= len(s.b); i++ {
		if from, _ := s.span(i); s.q[i].off > from {
			return false
		}
	}
	return true
}

// opened makes room for a row at k in the first n rows, using a spare one.
func opened(rows []row, k, n int) []row {
	if len(rows) <= n {
		rows = append(rows, row{})
	}
	spare := rows[n]
	copy(rows[k+1:n+1], rows[k:n])
	rows[k] = spare
	return rows
}

// between says from when to when visit j may start before block m, its other
// visits standing where they are, blocks k..m-1 left out.
func (s *seq) between(j int32, k, m int) (lo, hi int32) {
	lo, hi = s.lo[j], s.g.hi[j]
	if s.placed[j] == 0 {
		return lo, hi
	}
	for i := k - 1; i >= 0; i-- {
		if s.b[i].item == j {
			lo = max(lo, s.b[i].start+s.g.gap[j])
			break
		}
	}
	for i := m; i < len(s.b); i++ {
		if s.b[i].item == j {
			hi = min(hi, s.b[i].start-s.g.gap[j])
			break
		}
	}
	return lo, hi
}

// look finds the best start of j before block k with blocks k..m-1 left out,
// worth being more than best.value; worth is the row of worths of j.
func (s *seq) look(j int32, k, m int, worth []int32, top int32, best *site) {
	var in, out int32
	if k == 0 {
		in = s.g.setup0[j]
	} else {
		in = s.g.setup[int(s.b[k-1].item)*s.g.n+int(j)]
	}
	if m < len(s.b) {
		out = s.g.setup[int(j)*s.g.n+int(s.b[m].item)]
	}
	u, last := max(s.free[k]+in, s.lo[j]), min(s.late[m]-out-s.g.short[j], s.g.hi[j])
	if u > last {
		return
	}
	p, q := &s.p[k], &s.q[m]
	s.work++
	pv, qv := p.v, q.v
	po, qo := p.off+in, q.off-out
	if pv[min(last-po, int32(len(pv)-1))]+qv[max(u+s.g.short[j]-qo, 0)]+top <= best.value {
		return
	}
	if s.g.visits[j] > 1 {
		lo, hi := s.between(j, k, m)
		u, last = max(u, lo), min(last, hi)
	}
	if u > last {
		return
	}
	s.work += int64(last - u + 1)
	c := int(j) * s.g.w
	dur := s.g.dur[c : c+s.g.w]
	limit := s.late[m] - out
	value, start := best.value, int32(-1)
	ptop := int32(len(pv) - 1)
	for ; u <= last; u++ {
		d := dur[u]
		if d == 0 || u+d > limit {
			continue
		}
		if v := pv[min(u-po, ptop)] + worth[u] + qv[u+d-qo]; v > value {
			value, start = v, u
		}
	}
	if start >= 0 {
		*best = site{k, m, start, value}
	}
}

// best finds the best site of j anywhere that makes the sequence worth more
// than floor.
func (s *seq) best(j int32, worth []int32, top, floor int32) site {
	at := site{start: -1, value: floor}
	lo, hi := s.lo[j], s.g.hi[j]
	for k := s.lead; k <= len(s.b); k++ {
		if s.free[k] > hi {
			break
		}
		if s.late[k] > lo {
			s.look(j, k, k, worth, top, &at)
		}
	}
	return at
}

// worthOf is the row of present worths of an item.
func (s *seq) worthOf(j int32) []int32 {
	c := int(j) * s.g.w
	return s.eff[c : c+s.g.w]
}

// want is one item that might be put in.
type want struct {
	item  int32
	noise int64 // permille, multiplies what it gains
	at    site
	score int64
	age   int // the number of changes it was judged after
}

// manner is how a search step judges what to put in.
type manner struct {
	perTime bool // gain per time instead of gain
	strict  bool // a bonus counts for the visit that completes it only
	noise   int  // permille, either way
}

// bonusOf is the part of its bonus that one more take of j is credited.
func (s *seq) bonusOf(j int32, m manner) int32 {
	b, n := s.g.bonus[j], s.g.visits[j]
	switch {
	case b == 0:
		return 0
	case !m.strict:
		return b / n
	case s.placed[j] == n-1:
		return b
	}
	return 0
}

// fill puts in what gains most until nothing gains. Gains only rarely grow when
// a take is put in, so an old judgement stands until its item is on top.
func (s *search) fill(m manner) {
	q := &s.q
	wants := s.wants[:0]
	for j := range int32(q.g.n) {
		if q.placed[j] >= q.g.visits[j] || q.lo[j] > q.g.hi[j] || q.g.std[j] && len(q.g.matches[j]) > 0 || s.barred == j {
			continue
		}
		w := want{item: j, noise: 1000, age: -1, score: int64(1) << 60}
		if m.noise > 0 {
			w.noise += int64(s.rnd.below(2*m.noise+1) - m.noise)
		}
		wants = append(wants, w)
	}
	for age := 0; len(wants) > 0 && len(q.b) < maxBlocks; {
		k := 0
		for i := range wants {
			if wants[i].score > wants[k].score {
				k = i
			}
		}
		w := &wants[k]
		if w.age < age {
			s.judge(w, m)
			if w.age = age; w.score <= 0 {
				wants = slices.Delete(wants, k, k+1)
			}
			continue
		}
		if !q.insert(w.item, w.at) {
			wants = slices.Delete(wants, k, k+1)
			continue
		}
		age++
		if q.placed[w.item] >= q.g.visits[w.item] {
			wants = slices.Delete(wants, k, k+1)
		} else {
			w.score = int64(1) << 60
		}
	}
	s.wants = wants[:0]
}

// judge finds where an item gains most, and how much.
func (s *search) judge(w *want, m manner) {
	q := &s.q
	base, bonus := q.total(), q.bonusOf(w.item, m)
	w.at = q.best(w.item, q.worthOf(w.item), q.top(w.item), base-bonus)
	w.score = 0
	if w.at.start < 0 {
		return
	}
	gain := int64(w.at.value-base+bonus) * w.noise
	if m.perTime {
		d := q.g.dur[int(w.item)*q.g.w+int(w.at.start)]
		gain = gain * 64 / int64(d+s.pace)
	}
	w.score = gain
}

// top is the most that a start of j can be worth to the search.
func (s *seq) top(j int32) int32 {
	if s.lean != nil {
		return s.g.top[j] + s.leanTop
	}
	return s.g.top[j]
}
