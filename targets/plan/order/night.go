package order

import (
	"cmp"
	"slices"
)

// never is worse than any plan; two of them still fit an int32.
const never = int32(-1) << 29

// night is a problem laid out for scanning: one row of w slots an item.
type night struct {
	p       *Problem
	n       int     // items
	end     int32   // T
	now     int32   // first usable slot
	w       int     // slots of a row, T+1
	dur     []int32 // [item*w+slot]; 0: cannot start
	val     []int32 // worth when a standard serves, or none is wanted
	cut     []int32 // worth when none does
	air     []int32 // thousandths
	lo, hi  []int32 // first and last start of an item; lo > hi: none
	short   []int32 // shortest duration of an item
	top     []int32 // highest worth of a start
	setup   []int32 // [from*n+to]
	setup0  []int32
	visits  []int32
	gap     []int32
	bonus   []int32
	std     []bool
	locks   []Take  // in order of time, each once
	matches [][]int // items that a standard may serve; nil for science
}

// layout makes the scanning tables of a problem that passed Check and has no
// faulty lock.
func layout(p *Problem) *night {
	n := len(p.Items)
	g := &night{p: p, n: n, end: int32(p.T), now: int32(p.Now), w: p.T + 1}
	cells := n * g.w
	g.dur, g.val, g.cut, g.air = make([]int32, cells), make([]int32, cells), make([]int32, cells), make([]int32, cells)
	g.setup, g.setup0 = make([]int32, n*n), make([]int32, n)
	g.visits, g.gap, g.bonus = make([]int32, n), make([]int32, n), make([]int32, n)
	g.std, g.matches = make([]bool, n), make([][]int, n)
	g.lo, g.hi, g.short, g.top = make([]int32, n), make([]int32, n), make([]int32, n), make([]int32, n)
	for i := range p.Items {
		it := &p.Items[i]
		g.setup0[i], g.visits[i], g.gap[i] = int32(p.Setup0[i]), int32(it.Visits), int32(it.MinGap)
		g.std[i] = it.Kind == Standard
		if it.Visits > 1 {
			g.bonus[i] = int32(it.Bonus)
		}
		for j := range n {
			g.setup[i*n+j] = int32(p.Setup[i][j])
		}
		for k, d := range it.Dur {
			u := it.First + k
			if d == 0 || u < p.Now || u+d > p.T {
				continue
			}
			c := i*g.w + u
			g.dur[c], g.val[c], g.cut[c], g.air[c] = int32(d), int32(it.Val[k]), int32(it.Val[k]), int32(it.Airmass[k])
			if it.Calib != nil {
				g.cut[c] = int32(it.Val[k] * (1000 - it.Calib.Loss) / 1000)
			}
		}
	}
	g.locks = slices.Clone(p.Locks)
	slices.SortFunc(g.locks, func(a, b Take) int {
		return cmp.Or(cmp.Compare(a.Start, b.Start), cmp.Compare(a.Item, b.Item))
	})
	g.locks = slices.Compact(g.locks)
	g.closeLocked()
	g.measure()
	g.pair()
	return g
}

// closeLocked takes away the starts that would run into a lock, leaving the
// shortest move before and after it; those too near a locked visit of the same
// item; and all others of an item whose visits are all locked.
func (g *night) closeLocked() {
	held := make([]int32, g.n)
	for _, l := range g.locks {
		held[l.Item]++
	}
	for _, l := range g.locks {
		a, i := int32(l.Start), l.Item
		b := a + g.dur[i*g.w+l.Start]
		before, after := int32(maxSlots), int32(maxSlots)
		for j := range g.n {
			before, after = min(before, g.setup[j*g.n+i]), min(after, g.setup[i*g.n+j])
		}
		for j := range g.n {
			for u := g.now; u <= g.end; u++ {
				d := &g.dur[j*g.w+int(u)]
				if *d == 0 || j == i && u == a {
					continue
				}
				full := j == i && held[i] >= g.visits[i] && !slices.Contains(g.locks, Take{i, int(u)})
				if u+*d+before > a && u < b+after || full || j == i && max(u-a, a-u) < g.gap[i] {
					*d = 0
				}
			}
		}
	}
}

// measure finds the range of starts, shortest take and highest worth of items.
func (g *night) measure() {
	for i := range g.n {
		g.lo[i], g.hi[i], g.short[i], g.top[i] = g.end+1, -1, int32(maxSlots), 0
		for u := g.now; u <= g.end; u++ {
			d := g.dur[i*g.w+int(u)]
			if d == 0 {
				continue
			}
			g.lo[i], g.hi[i] = min(g.lo[i], u), u
			g.short[i], g.top[i] = min(g.short[i], d), max(g.top[i], g.val[i*g.w+int(u)])
		}
	}
}

// pair lists which items each standard may serve.
func (g *night) pair() {
	for s := range g.n {
		if !g.std[s] || g.lo[s] > g.hi[s] {
			continue
		}
		for j := range g.n {
			if c := g.p.Items[j].Calib; c != nil && c.Loss > 0 && g.p.Items[j].Mode == g.p.Items[s].Mode && g.lo[j] <= g.hi[j] {
				g.matches[s] = append(g.matches[s], j)
			}
		}
	}
}

// served calls f for every start of items that standard s, started at w, would
// serve, given as cell of the tables.
func (g *night) served(s int, w int32, f func(j int, cell int)) {
	x := g.air[s*g.w+int(w)]
	for _, j := range g.matches[s] {
		c := g.p.Items[j].Calib
		win, dx := int32(c.Window), int32(c.DX)
		row := j * g.w
		for u := max(g.lo[j], w-win); u <= min(g.hi[j], w+win); u++ {
			if y := g.air[row+int(u)] - x; y <= dx && y >= -dx && g.dur[row+int(u)] > 0 {
				f(j, row+int(u))
			}
		}
	}
}

// serves tells whether standard s at w serves item j at u.
func (g *night) serves(s int, w int32, j int, u int32) bool {
	c := g.p.Items[j].Calib
	if c == nil || g.p.Items[s].Mode != g.p.Items[j].Mode {
		return false
	}
	dt, dx := w-u, g.air[s*g.w+int(w)]-g.air[j*g.w+int(u)]
	return max(dt, -dt) <= int32(c.Window) && max(dx, -dx) <= int32(c.DX)
}

// move is the time from the end of a take of item i, or from now when i is
// negative, to the start of one of item j.
func (g *night) move(i, j int32) int32 {
	if i < 0 {
		return g.setup0[j]
	}
	return g.setup[int(i)*g.n+int(j)]
}
