package order

import (
	"cmp"
	"slices"
)

// path follows the best path of the last backward pass.
func (b *bounder) path(value int64) []step {
	g, m := b.g, len(b.nodes)
	var path []step
	for j := range b.nodes {
		t := g.now + g.setup0[b.nodes[j].item]
		if t > g.end {
			continue
		}
		for _, l := range b.labels(b.hm[int(t)*m+j]) {
			if l.v != value || l.mask&b.debts[j] != 0 {
				continue
			}
			for l, ok := l, true; ok; {
				var st step
				if st, l, ok = b.begin(j, t, l); !ok {
					return path
				}
				path = append(path, st)
				end := st.start + g.dur[b.nodes[st.node].item*g.w+int(st.start)]
				j, t, l, ok = b.follow(st.node, end, l)
			}
			return path
		}
	}
	return path
}

// begin finds the start that made a label of the suffixes that begin with node
// j at t or later, and the label that follows it.
func (b *bounder) begin(j int, t int32, want label) (step, label, bool) {
	g := b.g
	for u := t; u <= b.nodes[j].hi; u++ {
		c := j*g.w + int(u)
		if !b.open[c] {
			continue
		}
		for _, l := range b.labels(b.bs[j*g.w+int(u+g.dur[b.nodes[j].item*g.w+int(u)])]) {
			if l.v+b.weight[c] == want.v && want.mask&^(l.mask&^b.same[j]|b.own[j]) == 0 {
				return step{j, u}, l, true
			}
		}
	}
	return step{}, label{}, false
}

// follow finds the node, slot and label that a suffix after the end of node i
// at t was made from; false when it is the end of the night.
func (b *bounder) follow(i int, t int32, want label) (int, int32, label, bool) {
	g, m := b.g, len(b.nodes)
	if want.v == 0 && want.mask == 0 && t > b.lastLk {
		return 0, 0, label{}, false
	}
	self := &b.nodes[i]
	for j := range b.nodes {
		nd := &b.nodes[j]
		at := b.after(i, j, t)
		if at > g.end || nd.item == self.item && !(nd.repeat || nd.copy == self.copy+1) {
			continue
		}
		for _, l := range b.labels(b.hm[int(at)*m+j]) {
			mask := b.read(l.mask, j, i)
			if l.v == want.v && want.mask&^mask == 0 && mask&b.dead[i] == 0 {
				return j, at, l, true
			}
		}
	}
	return 0, 0, label{}, false
}

// grow makes places along a path remember what it repeats: the nodes between
// the two places of a repeat, shortest stretches first. It tells whether
// anything was added.
func (b *bounder) grow(path []step) bool {
	type stretch struct{ from, to, node int }
	var found []stretch
	last := make([]int, b.g.n) // index of the next step of the item, plus one
	for k := len(path) - 1; k >= 0; k-- {
		nd := &b.nodes[path[k].node]
		if nd.repeat {
			continue
		}
		if e := last[nd.item]; e > 0 {
			if next := &b.nodes[path[e-1].node]; next.copy != nd.copy+1 {
				found = append(found, stretch{k, e - 1, path[e-1].node})
			}
		}
		last[nd.item] = k + 1
	}
	for _, e := range last {
		if e > 0 && b.nodes[path[e-1].node].copy > 1 {
			found = append(found, stretch{-1, e - 1, path[e-1].node})
		}
	}
	slices.SortStableFunc(found, func(x, y stretch) int { return cmp.Compare(x.to-x.from, y.to-y.from) })
	grew := false
	for _, f := range found[:min(len(found), growRepeats)] {
		for k := f.from + 1; k < f.to; k++ {
			j := path[k].node
			if len(b.ng[j]) < mostMemory && !slices.Contains(b.ng[j], int32(f.node)) {
				b.ng[j] = append(b.ng[j], int32(f.node))
				grew = true
			}
		}
	}
	if grew {
		b.relate()
	}
	return grew
}

// windowsFor puts a price on gaps that a path breaks.
func (b *bounder) windowsFor(path []step) {
	x := &b.prices
	last := make([]int32, b.g.n)
	for i := range last {
		last[i] = -1
	}
	for _, st := range path {
		i := b.nodes[st.node].item
		if b.g.gap[i] == 0 || b.g.visits[i] < 2 {
			continue
		}
		if a := last[i]; a >= 0 && st.start-a < b.g.gap[i] && len(x.windows) < mostWindows &&
			!slices.ContainsFunc(x.windows, func(w window) bool { return w.item == i && w.from == a }) {
			x.windows = append(x.windows, window{i, a, len(x.p)})
			x.p, x.grad = append(x.p, 0), append(x.grad, 0)
			x.dir, x.least = append(x.dir, 0), append(x.least, 0)
		}
		last[i] = st.start
	}
}

// round does one pass: weights, prefixes, suffixes, and a step of the prices.
// It returns the path for the search to repair; nil when bound and plan have
// met.
func (b *bounder) round() []step {
	x := &b.prices
	b.rounds++
	b.weigh()
	b.forward()
	best := b.backward()
	if best == none || best <= b.lower {
		b.upper, b.closed = b.lower, true
		return nil
	}
	path := b.path(best - b.constant())
	if best < b.upper {
		b.upper, b.bad = best, 0
		copy(x.least, x.p)
	} else if b.bad++; b.bad >= patience {
		b.bad = 0
		b.theta = b.theta * 7 / 10
	}
	b.windowsFor(path)
	if b.rounds >= relaxedRounds {
		if b.rounds == relaxedRounds {
			b.theta = memoryStep
		}
		if b.rounds%growEvery == 0 && b.grow(path) {
			b.theta = max(b.theta, leastStep)
		}
	}
	b.blame(path)
	b.move(best)
	return path
}

// know tells the bound of a plan.
func (b *bounder) know(value int32) {
	b.lower = max(b.lower, int64(value)*b.scale)
	if b.upper <= b.lower {
		b.upper, b.closed = b.lower, true
	}
}

// bound is the value that no plan exceeds.
func (b *bounder) bound() int64 { return max(b.upper, b.lower) / b.scale }
