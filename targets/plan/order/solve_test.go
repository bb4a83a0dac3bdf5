package order

import (
	"context"
	"errors"
	"reflect"
	"slices"
	"testing"
)

// TestBruteForce tries all orders and starts of small nights; the solver finds
// a plan worth as much, its bound is not below it, and it says "optimal" only
// of the best.
func TestBruteForce(t *testing.T) {
	r := newRandom(3)
	proved := 0
	for n := range 160 {
		sh := shape{items: 2 + r.below(6), slots: 10 + r.below(4), multi: n%4 == 1 || n%4 == 3, std: n%4 >= 2, locks: r.below(2)}
		if sh.multi || sh.std {
			sh.items = min(sh.items, 5)
		}
		p := madeUp(r, sh)
		want := brute(p)
		s, err := Solve(t.Context(), p, 40, int64(n))
		if err != nil {
			t.Fatal(n, err)
		}
		if v, err := p.Evaluate(s.Plan); err != nil || v != s.Value {
			t.Fatal(n, v, s.Value, err)
		}
		if s.Value != want {
			t.Errorf("night %d: value %d, all orders %d (%+v)", n, s.Value, want, sh)
		}
		if s.Bound < want {
			t.Errorf("night %d: bound %d, but a plan is worth %d", n, s.Bound, want)
		}
		if s.Optimal() {
			proved++
		}
	}
	if proved < 80 {
		t.Errorf("only %d of 160 small nights proved optimal", proved)
	}
}

// TestBruteForceSeven does the same for plain nights of seven requests.
func TestBruteForceSeven(t *testing.T) {
	r := newRandom(11)
	for n := range 6 {
		p := madeUp(r, shape{items: 7, slots: 15})
		want := brute(p)
		s, err := Solve(t.Context(), p, 40, int64(n))
		if err != nil || s.Value != want || s.Bound < want {
			t.Errorf("night %d: value %d, bound %d, all orders %d, %v", n, s.Value, s.Bound, want, err)
		}
	}
}

// TestKnownProblems solves the shared problems with little effort. The figures
// are what the plan of that effort must reach, in parts of the best value known;
// no bound may be below a known plan.
func TestKnownProblems(t *testing.T) {
	ps, ks := problems(t, everyProblem...)
	permille := map[string]int{"a01": 1000, "a03": 970, "b01": 980, "b03": 950, "c01": 990, "c03": 940, "m80": 985, "p60": 992, "x01": 990}
	for _, n := range everyProblem {
		s, err := Solve(t.Context(), ps[n], 300, 1)
		if err != nil {
			t.Fatal(n, err)
		}
		v, err := ps[n].Evaluate(s.Plan)
		if err != nil || v != s.Value {
			t.Errorf("%s: value %d, judged %d, %v", n, s.Value, v, err)
		}
		if s.Value*1000 < ks[n].Best*permille[n] {
			t.Errorf("%s: value %d is below %d permille of %d", n, s.Value, permille[n], ks[n].Best)
		}
		if s.Bound < ks[n].Best || s.Bound < s.Value {
			t.Errorf("%s: bound %d is below a known plan %d or our own %d", n, s.Bound, ks[n].Best, s.Value)
		}
		if s.Value > ks[n].Bound {
			t.Errorf("%s: value %d is above a proved bound %d", n, s.Value, ks[n].Bound)
		}
	}
}

// TestSameBytes solves twice, and with progress watched; nothing may differ.
func TestSameBytes(t *testing.T) {
	ps, _ := problems(t, "b01", "b03")
	for n, p := range ps {
		one, err := Solve(t.Context(), p, 120, 9)
		if err != nil {
			t.Fatal(err)
		}
		told := 0
		last := Solution{}
		two, err := SolveWith(t.Context(), p, Options{Effort: 120, Seed: 9, Progress: func(s Solution) {
			if told++; last.Value > s.Value || last.Bound > 0 && last.Bound < s.Bound {
				t.Errorf("%s: from value %d, bound %d to %d, %d", n, last.Value, last.Bound, s.Value, s.Bound)
			}
			last = s
		}})
		if err != nil || !reflect.DeepEqual(one, two) {
			t.Errorf("%s: %+v and %+v, %v", n, one, two, err)
		}
		if told == 0 || last.Value != two.Value {
			t.Errorf("%s: told %d times, at last %d of %d", n, told, last.Value, two.Value)
		}
	}
}

// TestCancelled gives the plan at hand and the context's error.
func TestCancelled(t *testing.T) {
	ps, _ := problems(t, "c01")
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	s, err := Solve(ctx, ps["c01"], Thorough, 1)
	if !errors.Is(err, context.Canceled) || len(s.Plan) == 0 {
		t.Errorf("%d takes, %v", len(s.Plan), err)
	}
	if v, err := ps["c01"].Evaluate(s.Plan); err != nil || v != s.Value || s.Bound < v {
		t.Errorf("judged %d, said %d, bound %d, %v", v, s.Value, s.Bound, err)
	}
	if a, err := Next(ctx, ps["c01"], Ask{Effort: 100}); !errors.Is(err, context.Canceled) || len(a.Plan) == 0 {
		t.Errorf("next: %d takes, %v", len(a.Plan), err)
	}
}

// TestWarmStart never ends below the plan it was given.
func TestWarmStart(t *testing.T) {
	ps, ks := problems(t, everyProblem...)
	for _, n := range everyProblem {
		var plan []Take
		for _, x := range ks[n].Plan {
			plan = append(plan, Take{x[0], x[1]})
		}
		s, err := SolveWith(t.Context(), ps[n], Options{Effort: 20, Seed: 1, Start: plan})
		if err != nil {
			t.Fatal(n, err)
		}
		if s.Value < ks[n].Best {
			t.Errorf("%s: began with %d, ended with %d", n, ks[n].Best, s.Value)
		}
	}
	// A plan of nonsense is no harm.
	bad := []Take{{-1, 3}, {9999, 3}, {0, -5}, {0, 1 << 30}, {1, 2}, {1, 2}}
	if _, err := SolveWith(t.Context(), ps["a01"], Options{Effort: 5, Start: bad, Inertia: 50, Lost: -7}); err != nil {
		t.Error(err)
	}
}

// TestFaultyLocks names locks that cannot be kept.
func TestFaultyLocks(t *testing.T) {
	r := newRandom(5)
	p := madeUp(r, shape{items: 4, slots: 30})
	p.Now = 0
	for i := range p.Items {
		p.Items[i].First, p.Items[i].Dur, p.Items[i].Val, p.Items[i].Airmass = 0, slices.Repeat([]int{5}, 25), make([]int, 25), make([]int, 25)
	}
	p.Locks = []Take{{0, 10}, {1, 12}, {2, 29}, {3, 0}, {0, 20}}
	p.Setup0[3] = 2
	faults := p.LockFaults()
	if len(faults) != 4 {
		t.Fatalf("%v", faults)
	}
	for k, at := range []int{3, 1, 4, 2} {
		if faults[k].Index != at || faults[k].Why == "" {
			t.Errorf("fault %d: %+v, want lock %d", k, faults[k], at)
		}
	}
	if _, err := Solve(t.Context(), p, 1, 1); err == nil {
		t.Error("contradictory locks were planned")
	}
	p.Locks = withoutFaults(p)
	if s, err := Solve(t.Context(), p, 1, 1); err != nil || !slices.Contains(s.Plan, Take{0, 10}) {
		t.Error(s, err)
	}
}

func FuzzSolve(f *testing.F) {
	f.Add(uint64(1), uint8(5), uint8(20), uint8(3), uint8(1))
	f.Add(uint64(2), uint8(12), uint8(60), uint8(1), uint8(0))
	f.Add(uint64(3), uint8(9), uint8(40), uint8(2), uint8(3))
	f.Add(uint64(4), uint8(0), uint8(0), uint8(0), uint8(0))
	f.Fuzz(func(t *testing.T, seed uint64, items, slots, kind, locks uint8) {
		p := madeUp(newRandom(seed), shape{items: int(items % 14), slots: int(slots%80) + 3, multi: kind&1 > 0, std: kind&2 > 0, locks: int(locks % 4)})
		o := Options{Effort: 8, Seed: int64(seed)}
		s, err := SolveWith(t.Context(), p, o)
		if err != nil {
			t.Fatal(err)
		}
		v, err := p.Evaluate(s.Plan)
		if err != nil || v != s.Value || s.Bound < v {
			t.Fatal(v, s, err)
		}
		o.Start, o.Inertia, o.Seed, o.Effort = s.Plan, 80, o.Seed+1, 20
		s2, err := SolveWith(t.Context(), p, o)
		if err != nil || s2.Bound < s.Value || s.Bound < s2.Value {
			t.Fatal(s2, s, err)
		}
		if v, err := p.Evaluate(s2.Plan); err != nil || v != s2.Value {
			t.Fatal(v, s2, err)
		}
		a, err := Next(t.Context(), p, Ask{Effort: 8, Seed: 1, Plan: s.Plan})
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range a.Choices {
			if v, err := p.Evaluate(c.Plan); err != nil || v != c.Value || c.Loss < 0 || v > s.Bound || v > s2.Bound {
				t.Fatal(v, c, err)
			}
		}
		if _, err := Waits(t.Context(), p, Ask{Effort: 4, Plan: s.Plan}, []int{2, 5}); err != nil {
			t.Fatal(err)
		}
		if sl, err := Slacks(p, s.Plan, 50); err != nil || len(sl) != len(s.Plan) {
			t.Fatal(sl, err)
		}
	})
}
