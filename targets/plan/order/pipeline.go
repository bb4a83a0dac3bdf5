package order

// Tuned figures of the pipeline; shares are of the work of a whole solution.
const (
	searchFirst   = 12 // per cent: search before the bound is begun
	boundUpTo     = 55 // per cent: where the first bounding ends
	searchUpTo    = 75
	boundAgain    = 90
	repairFrom    = 15 // rounds of the bound before its paths are worth repairing
	repairEvery   = 2
	tellEvery     = 25 // iterations between two looks at whether to report
	smallestShare = workPerIteration / 4
)

// work runs search, bound and search in turn until the work is done, the bound
// is reached or the context is done. With standards the bound is left early, as
// it stays apart from the plans for long.
func (v *solver) work(total int64) {
	if total <= 0 {
		return
	}
	v.b = newBounder(v.g)
	stages := []struct {
		upTo  int64 // per cent
		bound bool
	}{{searchFirst, false}, {boundUpTo, true}, {searchUpTo, false}, {boundAgain, true}, {100, false}}
	for _, st := range stages {
		budget := total*st.upTo/100 - v.spent()
		if budget < smallestShare && st.upTo < 100 || budget <= 0 {
			continue
		}
		if st.bound {
			v.tighten(budget)
		} else {
			v.seek(budget)
		}
		if v.over() {
			return
		}
	}
}

// spent is the work done so far.
func (v *solver) spent() int64 {
	w := v.s.q.work
	if v.b != nil {
		w += v.b.work * boundCost
	}
	return w
}

// over tells whether there is nothing left to do.
func (v *solver) over() bool { return v.ctx.Err() != nil || v.met() }

// met tells whether the best plan is proved best.
func (v *solver) met() bool { return v.b != nil && v.b.closed && v.s.q.lean == nil }

// seek searches for an amount of work.
func (v *solver) seek(budget int64) {
	if v.s.cur.worth < v.best.worth {
		v.s.cur.set(v.best.b, v.best.worth)
	}
	next := v.s.q.work
	v.s.run(budget, func() bool {
		if v.s.q.work >= next {
			next = v.s.q.work + tellEvery*workPerIteration
			v.settleBest()
			v.tell()
		}
		return v.ctx.Err() != nil
	})
	v.settleBest()
	v.b.know(int32(v.known))
	v.tell()
}

// tighten lowers the bound for an amount of work, and makes plans of its paths.
func (v *solver) tighten(budget int64) {
	end := v.spent() + budget
	for v.spent() < end && !v.over() {
		v.b.know(int32(v.known))
		path := v.b.round()
		if v.b.rounds < repairFrom || v.b.rounds%repairEvery != 0 || len(path) == 0 {
			continue
		}
		v.s.cur.worth = never
		v.s.repair(v.b, path)
		v.settleBest()
		v.tell()
	}
	v.b.know(int32(v.known))
}

// bound is a value that no plan exceeds.
func (v *solver) bound() int {
	if v.b == nil || v.b.rounds == 0 {
		return max(v.most, v.known)
	}
	return max(int(v.b.bound()), v.known)
}

// solution is the best plan as it stands.
func (v *solver) solution() (Solution, error) {
	s := Solution{Plan: v.best.takes(), Bound: v.bound(), Seed: v.o.Seed,
		Iterations: int((v.spent() + workPerIteration - 1) / workPerIteration)}
	var err error
	if s.Value, err = v.p.Evaluate(s.Plan); err != nil {
		return Solution{}, err
	}
	if s.Bound > 0 {
		s.Gap = float64(s.Bound-s.Value) / float64(s.Bound)
	}
	return s, nil
}

// tell reports a better plan or bound.
func (v *solver) tell() {
	if v.o.Progress == nil {
		return
	}
	if s, err := v.solution(); err == nil && (s.Value != v.told.Value || s.Bound != v.told.Bound) {
		v.told = s
		v.o.Progress(s)
	}
}
