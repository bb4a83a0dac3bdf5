package order

import (
	"cmp"
	"context"
	"fmt"
	"slices"
)

// Tuned figures of what to take next.
const (
	soonMinutes = 5  // a candidate must be able to start this soon
	baseBound   = 70 // per cent of that share that goes into the bound and its paths
	baseParts   = 2  // the share of the effort that goes into the plan itself is one in these
	fewChoices  = 8  // compared in the second round, half of them in the third
	nextRounds  = 3
)

// Choice is one item that could be taken now, and what that costs.
type Choice struct {
	Take
	Value int    // of the best plan found that begins with it
	Loss  int    // below the best plan known; never negative
	Plan  []Take // that plan
}

// Ask is a question about the night under way.
type Ask struct {
	Effort Effort // iterations for the whole answer
	Seed   int64
	Plan   []Take // the plan in hand; none: one is made first
}

// Answer is what to take next.
type Answer struct {
	Value   int      // of the best plan known
	Plan    []Take   // that plan; it may begin with a wait
	Choices []Choice // in order of loss, then of item
}

// Next compares what could be taken now: for each item that can start within
// five minutes of being reached it plans the rest of the night behind it.
//
//	loss(X) = value of the best plan known - value of the best found with X first
//
// Returns:
//   - choices in order of loss. An item that would break a lock is none.
//   - an error as [SolveWith] does; that of ctx, with the choices compared so
//     far, when it is done early.
//
// Notes:
//  1. All choices are planned with a little effort, the best eight and then the
//     best four of them with more. Little effort overstates losses: one or two
//     digits of them mean something.
//  2. Choices are planned side by side on as many processors as there are; the
//     answer does not depend on how many.
//
// Checked: TestNext, TestNextAgrees.
func Next(ctx context.Context, p *Problem, a Ask) (Answer, error) {
	v, err := prepare(ctx, p, a)
	if err != nil {
		return Answer{}, err
	}
	rest := int64(max(0, min(a.Effort, mostEffort))) * workPerIteration * (baseParts - 1) / baseParts
	rivals := v.rivals()
	in := rivals
	for round := range nextRounds {
		if round > 0 {
			in = in[:min(len(in), fewChoices>>(round-1))]
		}
		share := rest / nextRounds / int64(max(len(in), 1))
		v.sideBySide(len(in), func(s *search, k int) { in[k].plan(s, v.best, share, uint64(v.o.Seed)+uint64(round)) })
		for _, r := range in {
			if r.top.worth > v.best.worth {
				v.best.set(r.top.b, r.top.worth)
			}
		}
		slices.SortStableFunc(in, func(x, y *rival) int {
			return cmp.Or(cmp.Compare(y.top.worth, x.top.worth), cmp.Compare(x.item, y.item))
		})
		if ctx.Err() != nil {
			break
		}
	}
	return v.answer(rivals), ctx.Err()
}

// prepare lays a problem out and finds the plan that choices are judged by.
func prepare(ctx context.Context, p *Problem, a Ask) (*solver, error) {
	if err := p.Check(); err != nil {
		return nil, err
	}
	if faults := p.LockFaults(); len(faults) > 0 {
		return nil, fmt.Errorf("locks[%d]: %s", faults[0].Index, faults[0].Why)
	}
	v := newSolver(ctx, p, Options{Seed: a.Seed})
	if !v.s.first() {
		return nil, fmt.Errorf("locks: cannot all be kept")
	}
	v.warm(a.Plan)
	if work := int64(max(0, min(a.Effort, mostEffort))) * workPerIteration / baseParts; work > 0 {
		v.b = newBounder(v.g)
		v.seek(work * (100 - baseBound) / 100)
		v.tighten(work * baseBound / 100)
	}
	return v, nil
}

// rival is a candidate for the next take.
type rival struct {
	item   int32
	start  int32 // earliest
	latest int32
	locked bool // it is a lock
	top    found
}

// rivals lists the items that can start soon.
func (v *solver) rivals() []*rival {
	g := v.g
	soon := int32(soonMinutes / v.p.SlotMin)
	var rs []*rival
	for i := range int32(g.n) {
		from := max(g.now+g.setup0[i], g.lo[i])
		for u := from; u <= min(g.now+g.setup0[i]+soon, g.hi[i]); u++ {
			if g.dur[int(i)*g.w+int(u)] > 0 {
				lock := slices.Contains(g.locks, Take{int(i), int(u)})
				rs = append(rs, &rival{item: i, start: u, latest: u + soon, locked: lock, top: found{worth: never}})
				break
			}
		}
	}
	return rs
}

// plan finds a plan that begins with the rival: the best known with the rival
// put in front, and what a search from the better of that and the rival's own
// best so far makes of it.
func (r *rival) plan(s *search, base found, work int64, seed uint64) {
	s.rnd = newRandom(seed ^ uint64(r.item)<<32)
	s.cur.worth, s.top.worth = never, never
	s.q.lead, s.q.firm = 1, r.latest
	defer func() { s.q.lead = 0 }()
	if s.lead(r, base.b) {
		s.complete(manner{}, true)
		s.note()
	}
	s.adopt(&r.top)
	if s.top.worth == never {
		return
	}
	if work > 0 {
		s.run(work, func() bool { return false })
	}
	r.top.set(s.top.b, s.top.worth)
}

// lead loads a plan with a rival in front; what then no longer fits is left
// out, the earliest first. False when a lock forbids the rival.
func (s *search) lead(r *rival, plan []block) bool {
	head := block{item: r.item, start: r.start, fixed: r.locked, firm: true}
	if len(plan) > 0 && plan[0].item == r.item && plan[0].start <= r.latest {
		head.start, plan = plan[0].start, plan[1:] // it is in front already
	}
	try := append(s.try[:0], head)
	count := int32(1)
	for _, b := range plan {
		if b.fixed && b.item == r.item && b.start == head.start {
			continue
		}
		b.firm = false
		if try = append(try, b); b.item == r.item {
			count++
		}
	}
	s.try = try
	for k := 1; k < len(try) && count > s.q.g.visits[r.item]; {
		if try[k].item == r.item && !try[k].fixed {
			try = slices.Delete(try, k, k+1)
			count--
			continue
		}
		k++
	}
	if count > s.q.g.visits[r.item] {
		return false
	}
	return s.squeeze(try, 1)
}

// nearby is how many takes are looked at for one to leave out.
const nearby = 8

// squeeze loads a plan, leaving out what no longer fits: of the first few
// blocks from k on the one without which most is left, or when no single one is
// enough the first. False when the locks do not fit.
func (s *search) squeeze(plan []block, k int) bool {
	for !s.q.load(plan) {
		best, pick, first := int32(-1), -1, -1
		for i := k; i < min(len(plan), k+nearby); i++ {
			if plan[i].fixed || plan[i].firm {
				continue
			}
			if first < 0 {
				first = i
			}
			s.less = append(append(s.less[:0], plan[:i]...), plan[i+1:]...)
			if s.q.load(s.less) && s.q.total() > best {
				best, pick = s.q.total(), i
			}
		}
		for first < 0 && k < len(plan) { // nothing but locks so near
			if !plan[k].fixed && !plan[k].firm {
				first = k
			}
			k++
		}
		if pick < 0 {
			pick = first
		}
		if pick < 0 {
			return false
		}
		plan = slices.Delete(plan, pick, pick+1)
		k = min(k, pick)
	}
	return true
}

// answer puts rivals in order of loss.
func (v *solver) answer(rs []*rival) Answer {
	a := Answer{Value: int(v.best.worth), Plan: v.best.takes()}
	for _, r := range rs {
		if r.top.worth == never {
			continue
		}
		plan := r.top.takes()
		a.Choices = append(a.Choices, Choice{Take: plan[0], Value: int(r.top.worth), Loss: a.Value - int(r.top.worth), Plan: plan})
	}
	slices.SortStableFunc(a.Choices, func(x, y Choice) int {
		return cmp.Or(cmp.Compare(x.Loss, y.Loss), cmp.Compare(x.Item, y.Item))
	})
	return a
}
