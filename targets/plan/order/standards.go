package order

// What standards are worth follows from the takes they serve: these functions
// put them in, move them and leave them out with the science takes where they
// are at the moment.

// recovery adds up, for each start of standard x, what the takes now in the
// sequence that no standard serves would gain. It returns the row and its top.
func (s *search) recovery(x int32) (gain []int32, top int32) {
	q := &s.q
	gain = s.gain[:q.g.w]
	clear(gain)
	q.work += int64(q.g.w/2 + 4*len(q.b))
	for i := range q.b {
		b := &q.b[i]
		it := &q.g.p.Items[b.item]
		if it.Calib == nil || it.Mode != q.g.p.Items[x].Mode {
			continue
		}
		c := int(b.item)*q.g.w + int(b.start)
		lost := q.g.val[c] - q.g.cut[c]
		if q.count[c] > 0 || lost == 0 {
			continue
		}
		win, dx, air := int32(it.Calib.Window), int32(it.Calib.DX), q.g.air[c]
		row := q.g.air[int(x)*q.g.w : (int(x)+1)*q.g.w]
		q.work += int64(win)
		for u := max(b.start-win, q.lo[x]); u <= min(b.start+win, q.g.hi[x]); u++ {
			if y := row[u] - air; y <= dx && y >= -dx {
				gain[u] += lost
			}
		}
	}
	own := q.worthOf(x)
	for u := q.lo[x]; u <= q.g.hi[x]; u++ {
		gain[u] += own[u]
		top = max(top, gain[u])
	}
	return gain, top
}

// seed puts in a take of standard x where it gains most, at a loss too.
func (s *search) seed(x int32) bool {
	q := &s.q
	if q.placed[x] >= q.g.visits[x] || q.lo[x] > q.g.hi[x] {
		return false
	}
	gain, top := s.recovery(x)
	at := q.best(x, gain, top, 0)
	return at.start >= 0 && q.insert(x, at)
}

// serveAll puts in standards as long as one gains.
func (s *search) serveAll() {
	q := &s.q
	for range maxBlocks {
		base := q.total()
		best, item := site{start: -1, value: base}, int32(-1)
		for _, x := range s.standards {
			if q.placed[x] >= q.g.visits[x] || q.lo[x] > q.g.hi[x] {
				continue
			}
			gain, top := s.recovery(x)
			if at := q.best(x, gain, top, best.value); at.start >= 0 {
				best, item = at, x
			}
		}
		if item < 0 || !q.insert(item, best) || q.total() <= base {
			return
		}
	}
}

// lent is what the takes in the sequence would lose without the standard at
// block k.
func (s *search) lent(k int) int32 {
	q := &s.q
	x := q.b[k]
	lost := int32(0)
	for i := range q.b {
		b := &q.b[i]
		c := int(b.item)*q.g.w + int(b.start)
		if q.count[c] == 1 && q.g.val[c] > q.g.cut[c] && q.g.serves(int(x.item), x.start, int(b.item), b.start) {
			lost += q.g.val[c] - q.g.cut[c]
		}
	}
	return lost
}

// trim leaves out standards that serve nothing, and those without which the
// rest, timed anew, is worth more.
func (s *search) trim() {
	q := &s.q
	for k := len(q.b) - 1; k >= 0; k-- {
		x := q.b[k]
		if !q.g.std[x.item] || x.fixed || x.firm || q.g.bonus[x.item] > 0 {
			continue
		}
		if own := q.eff[int(x.item)*q.g.w+int(x.start)]; own > 0 {
			continue
		}
		lost := s.lent(k)
		if lost > 0 && q.without(k)-lost <= q.total() {
			continue
		}
		was := s.keep(&s.spare)
		base := q.total()
		q.drop(k, k+1)
		if !q.settle() || q.total() < base {
			q.load(was)
		}
	}
}

// without is what the blocks other than k are worth, timed anew, with their
// present worths; never when they cannot be done, as a move may be longer than
// two.
func (s *seq) without(k int) int32 {
	m := k + 1
	if m == len(s.b) {
		r := &s.p[k]
		return r.v[len(r.v)-1]
	}
	in := s.g.setup0[s.b[m].item]
	if k > 0 {
		in = s.g.setup[int(s.b[k-1].item)*s.g.n+int(s.b[m].item)]
	}
	p, q := &s.p[k], &s.q[m]
	best := never
	for t := p.off; t < p.off+int32(len(p.v)); t++ {
		if u := t + in - q.off; u < int32(len(q.v)) {
			best = max(best, p.v[t-p.off]+q.v[max(u, 0)])
		}
	}
	s.work += int64(len(p.v))
	return best
}

// shift takes each standard out and puts the best of its mode in again, where
// that gains.
func (s *search) shift() {
	q := &s.q
	for k := 0; k < len(q.b); k++ {
		x := q.b[k]
		if !q.g.std[x.item] || x.fixed || x.firm || len(q.g.matches[x.item]) == 0 {
			continue
		}
		base := q.total()
		was := s.keep(&s.spare)
		q.drop(k, k+1)
		if !q.settle() {
			q.load(was)
			continue
		}
		best, item := site{start: -1, value: 0}, int32(-1)
		for _, y := range s.standards {
			if q.g.p.Items[y].Mode != q.g.p.Items[x.item].Mode || q.placed[y] >= q.g.visits[y] || q.lo[y] > q.g.hi[y] {
				continue
			}
			gain, top := s.recovery(y)
			if at := q.best(y, gain, top, best.value); at.start >= 0 {
				best, item = at, y
			}
		}
		same := item == x.item && best.start == x.start
		if item < 0 || same || !q.insert(item, best) || q.total() <= base {
			q.load(was)
		}
	}
}

// couple puts in an item that wants a standard, as if it had one, and then the
// standard that gains most, both at a loss too.
func (s *search) couple(j int32) {
	q := &s.q
	c := q.g.p.Items[j].Calib
	if c == nil || q.placed[j] >= q.g.visits[j] || q.lo[j] > q.g.hi[j] || s.barred == j {
		return
	}
	row := q.g.val[int(j)*q.g.w : (int(j)+1)*q.g.w]
	at := q.best(j, row, q.g.top[j], 0)
	if at.start < 0 || !q.insert(j, at) {
		return
	}
	best, item := site{start: -1, value: 0}, int32(-1)
	for _, x := range s.standards {
		if q.g.p.Items[x].Mode != q.g.p.Items[j].Mode || q.placed[x] >= q.g.visits[x] || q.lo[x] > q.g.hi[x] {
			continue
		}
		gain, top := s.recovery(x)
		if at := q.best(x, gain, top, best.value); at.start >= 0 {
			best, item = at, x
		}
	}
	if item >= 0 {
		q.insert(item, best)
	}
}
