package order

import (
	"reflect"
	"slices"
	"testing"
)

// later is a night under way: a plan followed to a slot.
func later(t testing.TB, p *Problem, plan []Take, now, lost int) (rest *Problem, left []Take) {
	t.Helper()
	var done []Take
	for _, x := range plan {
		if e, _ := p.End(x); e <= now {
			done = append(done, x)
		} else {
			left = append(left, x)
		}
	}
	rest, err := p.Rest(min(now+lost, p.T), done)
	if err != nil {
		t.Fatal(err)
	}
	rest.Locks = withoutFaults(rest)
	return rest, left
}

// TestNext: every choice begins with its item soon, is a plan worth what it
// says, and the losses are in order; the answer is the same when asked again,
// and with one processor.
func TestNext(t *testing.T) {
	ps, _ := problems(t, "b03", "c01")
	for n, p := range ps {
		base, err := Solve(t.Context(), p, 30, 1)
		if err != nil {
			t.Fatal(err)
		}
		r, left := later(t, p, base.Plan, p.T/3, 0)
		a, err := Next(t.Context(), r, Ask{Effort: 150, Seed: 2, Plan: left})
		if err != nil || len(a.Choices) < 2 {
			t.Fatal(n, len(a.Choices), err)
		}
		if v, err := r.Evaluate(a.Plan); err != nil || v != a.Value {
			t.Errorf("%s: best plan %d, %d, %v", n, v, a.Value, err)
		}
		for k, c := range a.Choices {
			v, err := r.Evaluate(c.Plan)
			if err != nil || v != c.Value || c.Loss != a.Value-v || c.Loss < 0 || c.Plan[0] != c.Take {
				t.Errorf("%s: choice %d: %+v judged %d, %v", n, k, c, v, err)
			}
			if ready := r.Now + r.Setup0[c.Item]; c.Start < ready || c.Start > ready+2*soonMinutes/int(r.SlotMin) {
				t.Errorf("%s: %d starts in %d, ready in %d", n, c.Item, c.Start, ready)
			}
			if k > 0 && a.Choices[k-1].Loss > c.Loss {
				t.Errorf("%s: loss %d before %d", n, a.Choices[k-1].Loss, c.Loss)
			}
		}
		b, err := Next(t.Context(), r, Ask{Effort: 150, Seed: 2, Plan: left})
		if err != nil || !reflect.DeepEqual(a, b) {
			t.Errorf("%s: another answer to the same question, %v", n, err)
		}
	}
}

// TestNextAgrees: on plain nights the first choice of a quick answer is among
// the first three, or costs no more than a thousandth of the night, in a
// thorough one.
func TestNextAgrees(t *testing.T) {
	names := []string{"p60", "m80", "x01"}
	ps, _ := problems(t, names...)
	if testing.Short() {
		names = names[:1]
	}
	for _, n := range names {
		p := ps[n]
		base, err := Solve(t.Context(), p, 50, 1)
		if err != nil {
			t.Fatal(err)
		}
		r, _ := later(t, p, base.Plan, p.T/2, 0)
		quick, err := Next(t.Context(), r, Ask{Effort: 400, Seed: 1})
		if err != nil {
			t.Fatal(err)
		}
		slow, err := Next(t.Context(), r, Ask{Effort: 1000, Seed: 7})
		if err != nil {
			t.Fatal(err)
		}
		rank := slices.IndexFunc(slow.Choices, func(c Choice) bool { return c.Item == quick.Choices[0].Item })
		if rank < 0 || rank > 2 && slow.Choices[rank].Loss > slow.Value/1000 {
			t.Errorf("%s: first choice %d has rank %d in %v", n, quick.Choices[0].Item, rank, slow.Choices[:3])
		}
	}
}

// TestWaits: to wait longer never costs less, and never more than the plan.
func TestWaits(t *testing.T) {
	ps, _ := problems(t, "b01", "c03")
	for n, p := range ps {
		r, _ := later(t, p, nil, p.T/3, 0)
		delays := []int{10, 20, 40, 80}
		ws, err := Waits(t.Context(), r, Ask{Effort: 100, Seed: 1}, delays)
		if err != nil || len(ws) < 2 || ws[0].Item != -1 {
			t.Fatal(n, ws, err)
		}
		for _, w := range ws {
			if !slices.IsSorted(w.Loss) || len(w.Loss) != len(delays) {
				t.Errorf("%s: item %d loses %v", n, w.Item, w.Loss)
			}
		}
		if idle := ws[0].Loss; idle[3] <= 0 {
			t.Errorf("%s: eighty slots lost cost %v", n, idle)
		}
	}
}

// TestSlacks: a take moved to its latest free start leaves a plan worth as much;
// one moved as late as may be leaves a plan.
func TestSlacks(t *testing.T) {
	ps, ks := problems(t, "p60", "m80", "b03")
	for n, p := range ps {
		var plan []Take
		for _, x := range ks[n].Plan {
			plan = append(plan, Take{x[0], x[1]})
		}
		slacks, err := Slacks(p, plan, 800)
		if err != nil || len(slacks) != len(plan) {
			t.Fatal(n, len(slacks), err)
		}
		for k, s := range slacks {
			if s.Item != plan[k].Item || s.Free < s.Start || s.Within < s.Free || s.Latest < s.Within {
				t.Errorf("%s: %+v of %+v", n, s, plan[k])
			}
		}
		if n != "p60" {
			continue
		}
		for k, s := range slacks { // on a plain night, to be had by locking
			for _, c := range []struct{ start, least int }{{s.Free, ks[n].Best}, {s.Within, ks[n].Best - 800}} {
				q := *p
				q.Locks = []Take{{s.Item, c.start}}
				moved, err := SolveWith(t.Context(), &q, Options{Start: append(slices.Clone(plan[:k]), append([]Take{{s.Item, c.start}}, plan[k+1:]...)...)})
				if err != nil || moved.Value < c.least {
					t.Errorf("%s: %d at %d gives %d of %d, %v", n, s.Item, c.start, moved.Value, c.least, err)
				}
			}
		}
	}
}

// TestStability: after 10 or 30 lost minutes the plan is made again near the
// old one. Of twenty cases at least 85 in 100 takes of the new plan are the old
// ones in their order, and the value is on average within a hundredth of that
// of a plan made afresh with as much effort.
func TestStability(t *testing.T) {
	names := []string{"b01", "b03", "c01", "c03", "m80", "p60", "x01"}
	ps, _ := problems(t, names...)
	r := newRandom(5)
	same, takes, loss := 0.0, 0.0, 0.0
	for n := range 20 {
		p := ps[names[n%len(names)]]
		base, err := Solve(t.Context(), p, 100, 1)
		if err != nil {
			t.Fatal(err)
		}
		lost := []int{10, 30}[n%2] / int(p.SlotMin)
		rest, left := later(t, p, base.Plan, p.T/10+r.below(p.T/2), lost)
		fresh, err := Solve(t.Context(), rest, 100, 2)
		if err != nil {
			t.Fatal(err)
		}
		near, err := SolveWith(t.Context(), rest, Options{Effort: 100, Seed: 2, Start: left, Inertia: Inertia, Lost: lost})
		if err != nil {
			t.Fatal(err)
		}
		same += float64(common(left, near.Plan)) / float64(len(near.Plan))
		takes++
		loss += float64(fresh.Value-near.Value) / float64(fresh.Value)
	}
	t.Logf("kept in order %.1f %%, value lost %.2f %%", 100*same/takes, 100*loss/takes)
	if same/takes < 0.85 || loss/takes > 0.01 {
		t.Errorf("kept in order %.1f %%, value lost %.2f %%", 100*same/takes, 100*loss/takes)
	}
}

// common is how many takes two plans share in the same order.
func common(a, b []Take) int {
	d := make([][]int, len(a)+1)
	d[0] = make([]int, len(b)+1)
	for i := range a {
		d[i+1] = make([]int, len(b)+1)
		for j := range b {
			d[i+1][j+1] = max(d[i][j+1], d[i+1][j])
			if a[i].Item == b[j].Item {
				d[i+1][j+1] = max(d[i+1][j+1], d[i][j]+1)
			}
		}
	}
	return d[len(a)][len(b)]
}

// BenchmarkFirst is the first plan of a night of 109 items: budget 50 ms.
func BenchmarkFirst(b *testing.B) {
	ps, _ := problems(b, "c03")
	for b.Loop() {
		if _, err := Solve(b.Context(), ps["c03"], 0, 1); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkQuick is a plan with bound of 60 requests: about 1 s of one core.
func BenchmarkQuick(b *testing.B) {
	ps, _ := problems(b, "x01")
	for b.Loop() {
		if _, err := Solve(b.Context(), ps["x01"], Quick, 1); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkNext is what to take next of 109 items: about 1 s.
func BenchmarkNext(b *testing.B) {
	ps, _ := problems(b, "c03")
	p := *ps["c03"]
	p.Locks = nil
	r, err := p.Rest(200, nil)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := Next(b.Context(), r, Ask{Effort: Quick, Seed: 1}); err != nil {
			b.Fatal(err)
		}
	}
}
