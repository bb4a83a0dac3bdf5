package order

import "fmt"

// Evaluate is the judge: it returns what a plan is worth, or says why it is
// no plan.
//
//	value = sum of the takes' worth + bonuses of requests with all visits made
//
// Given:
//   - plan: takes in order of time.
//
// Returns:
//   - the value, thousandths of a point.
//   - an error that names the take when the plan breaks a window, a move, a
//     gap between visits, a number of visits, the night's end or a lock.
//
// Notes:
//  1. It shares no code with the search, and looks nothing up in tables
//     that the search has made.
//
// Checked: TestEvaluateRules, TestKnownPlans.
func (p *Problem) Evaluate(plan []Take) (int, error) {
	free := p.Now
	last := -1
	starts := map[int][]int{}
	for k, t := range plan {
		if t.Item < 0 || t.Item >= len(p.Items) {
			return 0, fmt.Errorf("take %d: there is no item %d", k, t.Item)
		}
		it := &p.Items[t.Item]
		if k := t.Start - it.First; k < 0 || k >= len(it.Dur) || it.Dur[k] <= 0 {
			return 0, fmt.Errorf("take %d: %s cannot start in slot %d", k, it.ID, t.Start)
		}
		ready := free
		if last < 0 {
			ready += p.Setup0[t.Item]
		} else {
			ready += p.Setup[last][t.Item]
		}
		if t.Start < ready {
			return 0, fmt.Errorf("take %d: %s in slot %d, but ready only in %d", k, it.ID, t.Start, ready)
		}
		free, last = t.Start+it.Dur[t.Start-it.First], t.Item
		earlier := starts[t.Item]
		if m := len(earlier); m > 0 && t.Start-earlier[m-1] < it.MinGap {
			return 0, fmt.Errorf("take %d: %s again after %d slots; its visits are at least %d apart", k, it.ID, t.Start-earlier[m-1], it.MinGap)
		}
		if len(earlier) >= it.Visits {
			return 0, fmt.Errorf("take %d: %s more often than its %d visits", k, it.ID, it.Visits)
		}
		starts[t.Item] = append(earlier, t.Start)
	}
	if free > p.T {
		return 0, fmt.Errorf("the last take ends in slot %d, after the night's end %d", free, p.T)
	}
	for _, l := range p.Locks {
		held := false
		for _, u := range starts[l.Item] {
			held = held || u == l.Start
		}
		if !held {
			return 0, fmt.Errorf("%s, locked in slot %d, is missing", p.Items[l.Item].ID, l.Start)
		}
	}
	total := 0
	for _, t := range plan {
		total += p.worth(t, plan)
	}
	for i, us := range starts {
		if it := &p.Items[i]; it.Visits > 1 && len(us) == it.Visits {
			total += it.Bonus
		}
	}
	return total, nil
}

// worth is the value of one take of a plan, cut where no standard of the plan
// serves it.
func (p *Problem) worth(t Take, plan []Take) int {
	it := &p.Items[t.Item]
	v, x := it.Val[t.Start-it.First], it.Airmass[t.Start-it.First]
	c := it.Calib
	if c == nil {
		return v
	}
	for _, s := range plan {
		std := &p.Items[s.Item]
		if std.Kind != Standard || std.Mode != it.Mode {
			continue
		}
		apart, dx := s.Start-t.Start, std.Airmass[s.Start-std.First]-x
		if max(apart, -apart) <= c.Window && max(dx, -dx) <= c.DX {
			return v
		}
	}
	return v * (1000 - c.Loss) / 1000
}
