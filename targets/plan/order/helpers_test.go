package order

import (
	"encoding/json"
	"os"
	"path/filepath"
	"testing"
)

// known is what is known of a problem: the best plan anyone found and a value
// that none exceeds.
type known struct {
	Best  int      `json:"best_value"`
	Bound int      `json:"upper_bound"`
	Plan  [][2]int `json:"plan"`
}

// problems reads the shared problems by name, or skips the test without them.
func problems(t testing.TB, names ...string) (map[string]*Problem, map[string]known) {
	t.Helper()
	dir := filepath.Join("..", "..", "..", "..", "shared", "problems")
	raw, err := os.ReadFile(filepath.Join(dir, "known.json"))
	if err != nil {
		t.Skip("the shared problems are not here: ", err)
	}
	var all struct{ Instances map[string]known }
	if err := json.Unmarshal(raw, &all); err != nil {
		t.Fatal(err)
	}
	ps := map[string]*Problem{}
	for _, n := range names {
		f, err := os.Open(filepath.Join(dir, n+".json"))
		if err != nil {
			t.Skip("a shared problem is not here: ", err)
		}
		ps[n], err = Read(f)
		f.Close()
		if err != nil {
			t.Fatal(n, err)
		}
	}
	return ps, all.Instances
}

var everyProblem = []string{"a01", "a03", "b01", "b03", "c01", "c03", "m80", "p60", "x01"}

// shape says what kind of problem to make up.
type shape struct {
	items, slots int
	multi, std   bool
	locks        int
}

// madeUp makes a problem from numbers that only look random: windows with
// holes, moves without triangle rule, durations that jump.
func madeUp(r *random, sh shape) *Problem {
	p := &Problem{Name: "made up", SlotMin: 5, T: sh.slots, Now: r.below(1 + sh.slots/4)}
	for i := range sh.items {
		it := Item{ID: "i" + string(rune('A'+i%26)), Kind: Science, Mode: r.below(2), Visits: 1, First: r.below(1 + sh.slots/2)}
		if sh.multi && r.one(3) {
			it.Visits, it.MinGap, it.Bonus = 2+r.below(2), r.below(sh.slots/3+1), r.below(300)
		}
		switch {
		case sh.std && i%4 == 3:
			it.Kind = Standard
		case sh.std && r.one(2):
			it.Calib = &Calib{Window: r.below(sh.slots/2 + 1), DX: r.below(400), Loss: r.below(1001)}
		}
		for range r.below(sh.slots - it.First + 2) {
			d, v := 1+r.below(1+sh.slots/5), r.below(1000)
			if r.one(5) {
				d = 0
			}
			if it.Kind == Standard {
				v = 0
			}
			it.Dur, it.Val, it.Airmass = append(it.Dur, d), append(it.Val, v), append(it.Airmass, 1000+r.below(500))
		}
		p.Items = append(p.Items, it)
		p.Setup0 = append(p.Setup0, r.below(3))
	}
	for range p.Items {
		row := make([]int, len(p.Items))
		for j := range row {
			row[j] = r.below(4)
		}
		p.Setup = append(p.Setup, row)
	}
	for range min(sh.locks, 5*len(p.Items)) {
		if i := r.below(len(p.Items)); len(p.Items[i].Dur) > 0 {
			p.Locks = append(p.Locks, Take{i, p.Items[i].First + r.below(len(p.Items[i].Dur))})
		}
	}
	p.Locks = withoutFaults(p)
	return p
}

// withoutFaults is the locks of a problem that can be kept.
func withoutFaults(p *Problem) []Take {
	bad := map[int]bool{}
	for _, f := range p.LockFaults() {
		bad[f.Index] = true
	}
	var kept []Take
	for k, l := range p.Locks {
		if !bad[k] {
			kept = append(kept, l)
		}
	}
	return kept
}

// brute is the best value of all plans, by trying every order and start.
func brute(p *Problem) int {
	best := 0
	if len(p.Locks) > 0 {
		best = -1
	}
	var plan []Take
	var try func(free, last int)
	try = func(free, last int) {
		if v, err := p.Evaluate(plan); err == nil && v > best {
			best = v
		}
		for i := range p.Items {
			it := &p.Items[i]
			count, from := 0, free+p.Setup0[i]
			if last >= 0 {
				from = free + p.Setup[last][i]
			}
			for _, t := range plan {
				if t.Item == i {
					count, from = count+1, max(from, t.Start+it.MinGap)
				}
			}
			if count >= it.Visits {
				continue
			}
			for u := max(from, it.First); u < it.First+len(it.Dur); u++ {
				if d := it.Dur[u-it.First]; d > 0 && u+d <= p.T {
					plan = append(plan, Take{i, u})
					try(u+d, i)
					plan = plan[:len(plan)-1]
				}
			}
		}
	}
	try(p.Now, -1)
	return best
}
