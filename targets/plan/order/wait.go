package order

import (
	"context"
	"runtime"
	"slices"
	"sync"
)

// sideBySide runs n jobs on as many processors as there are, each with a search
// of its own. A job must depend on nothing that another changes, so that the
// number of processors does not matter.
func (v *solver) sideBySide(n int, job func(s *search, k int)) {
	workers := min(runtime.GOMAXPROCS(0), n)
	next := make(chan int)
	var wait sync.WaitGroup
	for range workers {
		wait.Go(func() {
			s := newSearch(v.g, nil, 0)
			for k := range next {
				if v.ctx.Err() == nil {
					job(s, k)
				}
			}
		})
	}
	for k := range n {
		next <- k
	}
	close(next)
	wait.Wait()
}

// Wait is what it costs when something does not begin before a slot.
type Wait struct {
	Item  int   // -1: nothing begins
	Loss  []int // for each delay asked for, below the best plan known; never negative or falling
	Value []int // of the best plan found then
}

// Waits tells what it costs to put off each take of the plan in hand that
// begins within the longest delay, everything else free to be arranged anew;
// and what it costs when nothing at all can begin.
//
//	loss(X, d) = value of the best plan known - value of the best found in
//	             which X does not begin before now + d
//
// Given:
//   - delays: slots from now, rising.
//
// Returns:
//   - one Wait for nothing at all, then one an item in order of item. Items not
//     listed can wait at no cost.
//   - an error as [SolveWith] does; that of ctx, with losses of 0 for what was
//     not looked at, when it is done early.
//
// Notes:
//  1. A take put off for long may be given up; the loss is then that.
//
// Checked: TestWaits.
func Waits(ctx context.Context, p *Problem, a Ask, delays []int) ([]Wait, error) {
	v, err := prepare(ctx, p, a)
	if err != nil {
		return nil, err
	}
	longest := int32(0)
	for _, d := range delays {
		longest = max(longest, int32(min(max(d, 0), p.T)))
	}
	ws := []Wait{{Item: -1}}
	for i := range v.g.n {
		if slices.ContainsFunc(v.best.b, func(b block) bool {
			return int(b.item) == i && b.start < v.g.now+longest && !b.fixed
		}) {
			ws = append(ws, Wait{Item: i})
		}
	}
	jobs := len(ws) * len(delays)
	values := make([]int32, jobs)
	work := int64(max(0, min(a.Effort, mostEffort))) * workPerIteration * (baseParts - 1) / baseParts / int64(max(jobs, 1))
	v.sideBySide(jobs, func(s *search, k int) {
		d := int32(min(max(delays[k%len(delays)], 0), p.T))
		values[k] = s.put(ws[k/len(delays)].Item, v.g.now+d, v.best, work, uint64(a.Seed)+uint64(k))
	})
	for k := range ws {
		ws[k].fill(values[k*len(delays):(k+1)*len(delays)], v.best.worth)
	}
	return ws, ctx.Err()
}

// fill turns values into losses that do not fall: a plan that waits longer is
// one that waits.
func (w *Wait) fill(values []int32, best int32) {
	for k := len(values) - 2; k >= 0; k-- {
		values[k] = max(values[k], values[k+1])
	}
	for _, v := range values {
		if v < 0 { // not looked at, or the locks forbid it
			v = 0
		}
		w.Value = append(w.Value, int(v))
		w.Loss = append(w.Loss, max(0, int(best-v)))
	}
}

// put finds the worth of a plan in which an item, or with -1 everything, does
// not begin before a slot; negative when the locks forbid that.
func (s *search) put(item int, from int32, base found, work int64, seed uint64) int32 {
	g := s.q.g
	s.rnd = newRandom(seed)
	s.cur.worth, s.top.worth = never, never
	early := func(b block) bool { return b.start < from && (item < 0 || int(b.item) == item) }
	if item >= 0 && !slices.ContainsFunc(base.b, early) {
		return base.worth
	}
	if item < 0 && from > g.end {
		if len(g.locks) > 0 {
			return never
		}
		return 0
	}
	now, lo := s.q.now, int32(0)
	if item < 0 {
		s.q.now = max(from, g.now)
	} else {
		lo = s.q.lo[item]
		s.q.lo[item] = max(lo, from)
	}
	defer func() {
		if s.q.now = now; item >= 0 {
			s.q.lo[item] = lo
		}
	}()
	try := append(s.try[:0], base.b...)
	s.try = try
	if !s.squeeze(try, 0) {
		return never
	}
	s.complete(manner{}, true)
	s.note()
	if work > 0 {
		s.run(work, func() bool { return false })
	}
	return s.top.worth
}

// Slack is how late a take of a plan may begin, its order kept.
type Slack struct {
	Take
	Free   int // latest start at no cost
	Within int // latest start at the cost asked for, at most
	Latest int // latest start at which all other takes are still possible
}

// Slacks tells for each take of a plan how late it may begin, the others moved
// as is best in their order.
//
// Given:
//   - cost: thousandths of a point that Within may cost.
//
// Returns:
//   - one Slack a take, with the take at its best start, which may differ from
//     that given.
//   - an error when the plan is none, as [Problem.Evaluate] says.
//
// Notes:
//  1. Standards are held where they are, and the slack between two visits of a
//     request is shared between them; so the truth may be later, not earlier.
//
// Checked: TestSlacks.
func Slacks(p *Problem, plan []Take, cost int) ([]Slack, error) {
	if err := p.Check(); err != nil {
		return nil, err
	}
	if _, err := p.Evaluate(plan); err != nil {
		return nil, err
	}
	g := layout(p)
	s := newSeq(g, nil)
	b := g.blocks(plan)
	if !s.load(b) {
		return nil, nil
	}
	slacks := make([]Slack, len(b))
	best := s.total()
	for k, b := range s.b {
		x := Slack{Take: Take{int(b.item), int(b.start)}, Free: int(b.start), Within: int(b.start), Latest: int(s.late[k])}
		in, out := s.into(k), s.into(k+1)
		pr, q := &s.p[k], &s.q[k+1]
		for u := b.start; u <= s.late[k]; u++ {
			c := int(b.item)*g.w + int(u)
			e := u + g.dur[c] + out
			if g.dur[c] == 0 || e > s.late[k+1] {
				continue
			}
			v := pr.v[min(u-in-pr.off, int32(len(pr.v)-1))] + s.eff[c] + q.v[e-q.off]
			if v >= best {
				x.Free = int(u)
			}
			if int(best-v) <= cost {
				x.Within = int(u)
			}
		}
		slacks[k] = x
	}
	return slacks, nil
}
