package order

import "slices"

// Tuned figures of the search; measured on nights of 10 to 109 items.
const (
	reach        = 2    // neighbouring blocks a replacement may leave out
	noisePermill = 150  // by which gains are shaken, either way
	paceMinutes  = 4    // added to a take's length when gains are taken per time
	rounds       = 30   // of replacing and filling in one descent, at most
	coolSteps    = 64   // steps in which the threshold falls to a hundredth
	coolPermille = 931  // 0.01^(1/64)
	heat         = 600  // threshold at first, parts in 100 000 of the value
	mostDropped  = 5    // blocks left out in an ordinary step
	iterWork     = 1500 // least work counted for one step
)

// found is a plan of the search, with what it is worth to the search: takes,
// preferences and bonuses.
type found struct {
	b     []block
	worth int32
}

func (f *found) set(b []block, worth int32) {
	f.b, f.worth = append(f.b[:0], b...), worth
}

// search looks for good plans by leaving out a few takes of one and filling the
// time again, in the manner of large neighbourhood search.
//
// Source: [cite.Shaw1998], [cite.RopkePisinger2006]; the rule of acceptance is
// that of [cite.KirkpatrickEtAl1983] with a threshold.
type search struct {
	q         seq
	rnd       *random
	cur, top  found // where the search stands, and the best it has seen
	wants     []want
	gain      []int32 // scratch of recovery
	spare     []block
	try       []block // scratch of step
	less      []block // scratch of squeeze
	mark      []bool
	standards []int32
	multis    []int32
	pace      int32
	barred    int32 // item that fill must not put in; -1 for none
	late      int32 // slots by which a standard of an old plan may be put off
	steps     int
}

func newSearch(g *night, lean []int32, seed uint64) *search {
	s := &search{q: *newSeq(g, lean), rnd: newRandom(seed), gain: make([]int32, g.w), barred: -1}
	if s.pace = 1; g.p.SlotMin > 0 {
		s.pace = max(1, int32(paceMinutes/g.p.SlotMin))
	}
	for i := range int32(g.n) {
		switch {
		case len(g.matches[i]) > 0:
			s.standards = append(s.standards, i)
		case g.visits[i] > 1 && g.lo[i] <= g.hi[i]:
			s.multis = append(s.multis, i)
		}
	}
	for _, v := range lean {
		s.q.leanTop = max(s.q.leanTop, v)
	}
	s.cur.worth, s.top.worth = never, never
	return s
}

// keep copies the sequence into a buffer.
func (s *search) keep(to *[]block) []block {
	*to = append((*to)[:0], s.q.b...)
	return *to
}

// worth is what the sequence is worth to the search.
func (s *search) worth() int32 {
	v := s.q.total()
	for _, i := range s.multis {
		if s.q.placed[i] == s.q.g.visits[i] {
			v += s.q.g.bonus[i]
		}
	}
	for _, i := range s.standards {
		if s.q.placed[i] == s.q.g.visits[i] {
			v += s.q.g.bonus[i]
		}
	}
	return v
}

// locked is the plan of nothing but the locks.
func (g *night) locked() []block {
	var b []block
	for _, l := range g.locks {
		b = append(b, block{item: int32(l.Item), start: int32(l.Start), fixed: true})
	}
	return b
}

// first makes a plan from nothing: filled by gain and by gain per time, the
// better of the two improved. False when the locks alone cannot be done.
func (s *search) first() bool {
	for _, perTime := range []bool{false, true} {
		if !s.q.load(s.q.g.locked()) {
			return false
		}
		s.complete(manner{perTime: perTime}, true)
		s.note()
	}
	return true
}

// note keeps the sequence when it is the best so far, as the place to go on
// from too.
func (s *search) note() bool {
	w := s.worth()
	if w > s.cur.worth {
		s.cur.set(s.q.b, w)
	}
	if w <= s.top.worth {
		return false
	}
	s.top.set(s.q.b, w)
	return true
}

// complete fills the sequence; thorough also descends and moves standards.
func (s *search) complete(m manner, thorough bool) {
	s.fill(m)
	if len(s.standards) > 0 {
		s.serveAll()
	}
	if thorough {
		s.descend(m)
		if len(s.standards) > 0 {
			s.shift()
			s.fill(manner{})
		}
	}
	s.trim()
}

// descend replaces one or two neighbouring takes by a better one and fills,
// until nothing gains. A round must end above its start, or it is the last: the
// sharing of slack between visits can otherwise make it go in circles.
func (s *search) descend(m manner) {
	s.q.widen(reach)
	defer s.q.narrow()
	for range rounds {
		before := s.worth()
		if !s.replace(m) {
			return
		}
		s.fill(m)
		if s.worth() <= before {
			return
		}
	}
}

// loose tells whether block k may be left out by a replacement.
func (s *search) loose(k int) bool {
	b := &s.q.b[k]
	return !b.fixed && !b.firm && len(s.q.g.matches[b.item]) == 0
}

// debit is the part of its bonus that leaving a take of i out costs.
func (s *search) debit(i int32, m manner) int32 {
	b, n := s.q.g.bonus[i], s.q.g.visits[i]
	switch {
	case b == 0:
		return 0
	case !m.strict:
		return b / n
	case s.q.placed[i] == n:
		return b
	}
	return 0
}

// replace goes once through the sequence, and where one take is worth more than
// the one or two that stand there, puts it in.
func (s *search) replace(m manner) bool {
	q := &s.q
	gained := false
	for k := 0; k < len(q.b); k++ {
		cost := int32(0)
		for e := k + 1; e <= min(k+reach, len(q.b)) && s.loose(e-1); e++ {
			cost += s.debit(q.b[e-1].item, m)
			item, at := s.better(k, e, q.total()+cost, m)
			if item < 0 {
				continue
			}
			was := s.keep(&s.spare)
			before := s.worth()
			q.drop(k, e)
			q.add(k, block{item: item, start: at.start})
			if !q.settle() || s.worth() <= before && !m.strict && q.g.bonus[item] == 0 && cost == 0 {
				q.load(was)
				continue
			}
			gained = true
			break
		}
	}
	return gained
}

// better finds the item that is worth most in place of blocks k..m-1, when that
// is more than base.
func (s *search) better(k, m int, base int32, mn manner) (int32, site) {
	q := &s.q
	most, item, at := int32(0), int32(-1), site{}
	for j := range int32(q.g.n) {
		if q.placed[j] >= q.g.visits[j] || q.lo[j] > q.late[m] || q.g.hi[j] < q.free[k] ||
			len(q.g.matches[j]) > 0 || s.barred == j || j == q.b[k].item || j == q.b[m-1].item {
			continue
		}
		bonus := q.bonusOf(j, mn)
		here := site{start: -1, value: base - bonus + most}
		q.look(j, k, m, q.worthOf(j), q.top(j), &here)
		if here.start >= 0 {
			most, item, at = here.value-base+bonus, j, here
		}
	}
	return item, at
}

// step makes one move of the search: some takes out, the time filled, and the
// result taken when it is not much worse. It tells whether it is the best yet.
func (s *search) step(threshold int32) bool {
	q := &s.q
	was := q.work
	s.steps++
	m := manner{perTime: s.rnd.one(2), strict: len(s.multis) > 0 && s.rnd.one(3), noise: noisePermill}
	s.choose()
	s.try = s.try[:0]
	for k, b := range s.cur.b {
		if !s.mark[k] {
			s.try = append(s.try, b)
		}
	}
	better := false
	if q.load(s.try) {
		if n := len(s.standards); n > 0 {
			switch s.rnd.below(6) {
			case 0, 1:
				s.seed(s.standards[s.rnd.below(n)])
			case 2:
				s.couple(int32(s.rnd.below(q.g.n)))
			}
		}
		if n := len(s.multis); n > 0 && s.rnd.one(4) {
			s.force(s.multis[s.rnd.below(n)])
		}
		s.complete(m, s.rnd.one(3))
		if w := s.worth(); w > s.cur.worth-threshold {
			s.cur.set(q.b, w)
			if better = w > s.top.worth; better {
				s.top.set(q.b, w)
			}
		}
	}
	q.work = max(q.work, was+iterWork)
	return better
}

// force puts in all visits of a request, at a loss too, leaving one take out
// where there is no room.
func (s *search) force(j int32) {
	q := &s.q
	if s.barred == j {
		return
	}
	for n := q.placed[j]; n < q.g.visits[j]; n++ {
		at := q.best(j, q.worthOf(j), q.top(j), 0)
		if at.start >= 0 {
			if !q.insert(j, at) {
				return
			}
			continue
		}
		q.widen(1)
		for k := range q.b {
			if s.loose(k) && q.b[k].item != j {
				q.look(j, k, k+1, q.worthOf(j), q.top(j), &at)
			}
		}
		q.narrow()
		if at.start < 0 {
			return
		}
		was := s.keep(&s.spare)
		q.drop(at.k, at.m)
		q.add(at.k, block{item: j, start: at.start})
		if !q.settle() {
			q.load(was)
			return
		}
	}
}

// run makes steps until the work is done or stop says so.
func (s *search) run(work int64, stop func() bool) {
	start := s.q.work
	threshold := int64(s.cur.worth) * heat / 100_000
	for stage := int64(0); s.q.work-start < work; {
		if s.steps&3 == 0 && stop() {
			return
		}
		for ; stage < (s.q.work-start)*coolSteps/work; stage++ {
			threshold = threshold * coolPermille / 1000
		}
		s.step(int32(threshold * int64(s.rnd.below(1000)) / 1000))
	}
}

// takes is the best plan as takes.
func (f *found) takes() []Take {
	plan := make([]Take, len(f.b))
	for k, b := range f.b {
		plan[k] = Take{int(b.item), int(b.start)}
	}
	return plan
}

// adopt goes on from a plan found elsewhere, when it is better.
func (s *search) adopt(f *found) {
	if f.worth > s.cur.worth {
		s.cur.set(slices.Clone(f.b), f.worth)
	}
	if f.worth > s.top.worth {
		s.top.set(f.b, f.worth)
	}
}
