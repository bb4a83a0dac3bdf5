package order

import (
	"cmp"
	"context"
	"fmt"
	"slices"
)

// Effort is how much work a plan may cost, in iterations.
//
// An iteration is a fixed amount of counted work, cells of tables looked at, and
// not a move of the search, so that nights of 10 and of 100 requests take alike
// long: about a millisecond of one core.
type Effort int

// Efforts that take about 1, 2 and 5 seconds of one core.
const (
	Quick    Effort = 1000
	Usual    Effort = 2000
	Thorough Effort = 5000

	mostEffort Effort = 1_000_000_000
)

// The work of one iteration, and how the search's cells and the bound's labels
// are brought to one measure.
const (
	workPerIteration = 250_000
	boundCost        = 2
)

// Inertia is the preference, permille of a take's mean worth, that keeps a plan
// made again near the old one at little cost.
const Inertia = 60

// Solution is a plan and what is known about it.
type Solution struct {
	Value      int     // thousandths of a point
	Bound      int     // no plan is worth more
	Gap        float64 // (Bound - Value) / Bound; 0 when both are 0
	Plan       []Take  // in order of time
	Iterations int     // spent
	Seed       int64
}

// Optimal tells whether the plan is proved to be the best possible.
func (s *Solution) Optimal() bool { return s.Value == s.Bound }

// Options are what a plan may be asked for besides.
type Options struct {
	Effort  Effort
	Seed    int64
	Start   []Take // a previous plan to begin with; what no longer fits is left out
	Inertia int    // permille of a take's mean worth that a take near its old start is preferred by
	Lost    int    // slots by which takes of Start may be late and still count as near
	// Progress is called when the plan or the bound has become better, from the
	// goroutine of the caller; it must not keep the plan's memory.
	Progress func(Solution)
}

// Solve looks for the best plan of a night and for a value no plan exceeds.
//
// Given:
//   - effort: iterations; 0 or less gives the first plan and no bound but the
//     sum of all worths.
//   - seed: of the search; the same problem, effort and seed give the same
//     plan on any machine.
//
// Returns:
//   - a feasible plan, also when ctx is done early: then with its error.
//   - an error and no plan when the problem or its locks are faulty: see
//     [Problem.Check] and [Problem.LockFaults].
//
// Checked: TestKnownProblems, TestBruteForce, TestSameBytes, FuzzSolve.
func Solve(ctx context.Context, p *Problem, effort Effort, seed int64) (Solution, error) {
	return SolveWith(ctx, p, Options{Effort: effort, Seed: seed})
}

// SolveWith is [Solve] with options: a plan to begin with, and to stay near.
//
// Notes:
//  1. With Inertia the search prefers takes within 15 minutes of their old
//     start, or Lost slots later; value and bound do not count the preference.
//
// Checked: TestStability, TestWarmStart.
func SolveWith(ctx context.Context, p *Problem, o Options) (Solution, error) {
	if err := p.Check(); err != nil {
		return Solution{}, err
	}
	if faults := p.LockFaults(); len(faults) > 0 {
		return Solution{}, fmt.Errorf("locks[%d]: %s", faults[0].Index, faults[0].Why)
	}
	v := newSolver(ctx, p, o)
	if !v.s.first() {
		return Solution{}, fmt.Errorf("locks: cannot all be kept")
	}
	v.warm(o.Start)
	v.tell()
	v.work(int64(max(0, min(o.Effort, mostEffort))) * workPerIteration)
	s, err := v.solution()
	return s, cmp.Or(err, ctx.Err())
}

// solver runs search and bound in turn.
type solver struct {
	ctx   context.Context
	p     *Problem
	o     Options
	g     *night
	s     *search
	b     *bounder // nil before it is wanted
	best  found    // by worth to the search, preferences included
	known int      // highest value of a plan seen, preferences left out
	most  int      // sum of all worths, a bound before there is one
	told  Solution
}

func newSolver(ctx context.Context, p *Problem, o Options) *solver {
	g := layout(p)
	v := &solver{ctx: ctx, p: p, o: o, g: g, best: found{worth: never}, known: -1}
	v.s = newSearch(g, v.leaning(), uint64(o.Seed))
	v.s.late = int32(min(max(o.Lost, 0), p.T))
	for i := range p.Items {
		if g.lo[i] <= g.hi[i] {
			v.most += int(g.top[i])*p.Items[i].Visits + int(g.bonus[i])
		}
	}
	return v
}

// nearMinutes is how far a take may move and still be preferred.
const nearMinutes = 15

// leaning is the preference for starts near those of an old plan; nil for none.
func (v *solver) leaning() []int32 {
	if v.o.Inertia <= 0 || len(v.o.Start) == 0 {
		return nil
	}
	g, sum, n := v.g, 0, 0
	for _, t := range v.o.Start {
		if t.Item >= 0 && t.Item < g.n && t.Start >= 0 && t.Start < g.w {
			_, val, _ := v.p.Items[t.Item].at(t.Start)
			sum, n = sum+val, n+1
		}
	}
	if n == 0 {
		return nil
	}
	prefer := int32(sum / n * min(v.o.Inertia, 1000) / 1000)
	near := int(nearMinutes / v.p.SlotMin)
	lean := make([]int32, len(g.dur))
	for _, t := range v.o.Start {
		if t.Item < 0 || t.Item >= g.n {
			continue
		}
		for u := max(0, t.Start-near); u <= min(g.w-1, t.Start+max(v.o.Lost, 0)+near); u++ {
			lean[t.Item*g.w+u] = prefer
		}
	}
	return lean
}

// warm begins with a previous plan: what of it can still be done, in its order.
func (v *solver) warm(plan []Take) {
	if len(plan) == 0 {
		v.settleBest()
		return
	}
	if v.s.q.lean != nil {
		v.settleBest()
		v.s.cur.worth = never // go on from the old plan, not from a better new one
	}
	v.s.resume(plan)
	v.settleBest()
}

// resume loads what of a plan can still be done, in its order, and completes
// it.
func (s *search) resume(plan []Take) {
	g := s.q.g
	if _, err := g.p.Evaluate(plan); err == nil && s.q.load(g.blocks(plan)) {
		s.note()
		s.complete(manner{}, true)
		s.note()
		return
	}
	count := make([]int32, g.n)
	var tail []block
	for _, t := range plan {
		if t.Item >= 0 && t.Item < g.n && s.q.lo[t.Item] <= g.hi[t.Item] && !slices.Contains(g.locks, t) {
			tail = append(tail, block{item: int32(t.Item), start: int32(t.Start)})
		}
	}
	if !s.q.load(g.locked()) {
		return
	}
	for _, b := range s.q.b {
		count[b.item]++
	}
	for _, t := range tail {
		if count[t.item] < g.visits[t.item] && s.append(t) {
			count[t.item]++
		}
	}
	s.complete(manner{}, true)
	s.note()
}

// blocks turns takes into blocks, locks held.
func (g *night) blocks(plan []Take) []block {
	b := make([]block, len(plan))
	for k, t := range plan {
		b[k] = block{item: int32(t.Item), start: int32(t.Start), fixed: slices.Contains(g.locks, t)}
	}
	return b
}

// append puts a take after all those that came before it, at the start nearest
// its old one at which it can stand; false when it cannot.
func (s *search) append(t block) bool {
	q := &s.q
	k := len(q.b)
	for k > 0 && q.b[k-1].fixed && q.b[k-1].start > t.start {
		k--
	}
	at := site{start: -1, value: 0}
	if g := q.g; g.std[t.item] {
		// A standard stays where it was, or as soon after as may be.
		for u := max(t.start, q.lo[t.item]); u <= g.hi[t.item] && u <= t.start+s.late; u++ {
			if g.dur[int(t.item)*g.w+int(u)] > 0 && q.insert(t.item, site{k: k, m: k, start: u}) {
				return true
			}
		}
		return false
	}
	q.look(t.item, k, k, q.worthOf(t.item), q.top(t.item), &at)
	return at.start >= 0 && q.insert(t.item, at)
}

// settleBest keeps the search's best plan when it is the best yet, and tells
// the bound what it is truly worth.
func (v *solver) settleBest() {
	if v.s.top.worth > v.best.worth {
		v.best.set(v.s.top.b, v.s.top.worth)
	}
	if value, err := v.p.Evaluate(v.s.top.takes()); err == nil {
		v.known = max(v.known, value)
	}
}
