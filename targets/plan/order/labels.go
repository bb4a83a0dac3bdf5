package order

import "slices"

// label is a suffix: its value, and what of it is remembered.
type label struct {
	v    int64
	mask uint32
}

// step is one start of a path.
type step struct {
	node  int
	start int32
}

// backward finds, for every node and slot, the suffixes that may be best, and
// returns the value of the best path of all; none when no path can beat the
// best plan known.
func (b *bounder) backward() int64 {
	g, m := b.g, len(b.nodes)
	b.arena = b.arena[:0]
	clear(b.hm)
	clear(b.bs)
	clear(b.ends)
	base := b.constant()
	for j := range b.nodes {
		nd := &b.nodes[j]
		b.order[j] = int32(j)
		for u := nd.lo; u <= nd.hi; u++ {
			if c := j*g.w + int(u); b.open[c] && b.before[c] > none {
				b.ends[j*g.w+int(u+g.dur[nd.item*g.w+int(u)])] = true
			}
		}
	}
	for u := g.end; u >= g.now; u-- {
		row, next := b.hm[int(u)*m:int(u+1)*m], b.hm[int(u+1)*m:int(u+2)*m]
		locked := b.lockAt[u]
		for j := range b.nodes {
			if !locked {
				row[j] = next[j]
			}
			nd := &b.nodes[j]
			c := j*g.w + int(u)
			if u < nd.lo || u > nd.hi || !b.open[c] || b.before[c] == none || locked && !b.isLock(nd.item, u) {
				continue
			}
			b.start(j, u, base, &row[j])
		}
		b.work += int64(7 * m)
		b.sortBy(func(j int32) int64 {
			t := min(u+b.minGo, g.end+1)
			if s := b.hm[int(t)*m+int(j)]; s.n > 0 {
				return b.arena[s.off].v
			}
			return none
		})
		for i := range b.nodes {
			if b.ends[i*g.w+int(u)] {
				b.suffixes(i, u, base)
			}
		}
	}
	best := none
	if b.lastLk < 0 {
		best = 0
	}
	for j := range b.nodes {
		t := g.now + g.setup0[b.nodes[j].item]
		if t > g.end {
			continue
		}
		for _, l := range b.labels(b.hm[int(t)*m+j]) {
			if l.mask&b.debts[j] == 0 {
				best = max(best, l.v)
				break
			}
		}
	}
	if best == none {
		return none
	}
	return best + base
}

func (b *bounder) labels(s span) []label { return b.arena[s.off : s.off+s.n] }

// isLock tells whether an item is locked to start at u.
func (b *bounder) isLock(item int, u int32) bool {
	return slices.Contains(b.g.locks, Take{item, int(u)})
}

// start puts node j, started at u, in front of the suffixes after its end, and
// adds the survivors to those that start later.
func (b *bounder) start(j int, u int32, base int64, into *span) {
	g := b.g
	c := j*g.w + int(u)
	w := b.weight[c]
	least := b.lower - base - b.before[c]
	later := b.labels(*into)
	list := append(b.list[:0], later...)
	changed, alive := false, false
	for _, l := range b.labels(b.bs[j*g.w+int(u+g.dur[b.nodes[j].item*g.w+int(u)])]) {
		l.v += w
		if l.v <= least {
			break
		}
		alive = true
		l.mask = l.mask&^b.same[j] | b.own[j]
		var took bool
		if list, took = joined(list, l); took {
			changed = true
		}
		b.work += 3
	}
	b.work += int64(4 + len(later))
	if !alive && !b.keepOpen {
		b.open[c] = false
	}
	b.list = list
	if changed {
		b.store(list, into)
	}
}

// store writes a list to the arena, merging what is too much: the highest value
// with what all remember is a valid suffix to the bound.
func (b *bounder) store(list []label, into *span) {
	if len(list) > mostLabels {
		tail := list[mostLabels-1]
		for _, l := range list[mostLabels:] {
			tail.mask &= l.mask
		}
		list = list[:mostLabels]
		list[mostLabels-1] = tail
	}
	*into = span{int32(len(b.arena)), int32(len(list))}
	b.arena = append(b.arena, list...)
}

// joined adds a label to a list in order of falling value unless another is as
// good in value and memory, and removes those it betters.
func joined(list []label, l label) ([]label, bool) {
	k := 0
	for ; k < len(list) && list[k].v >= l.v; k++ {
		if list[k].mask&^l.mask == 0 {
			return list, false
		}
	}
	n := k
	for i := k; i < len(list); i++ {
		if l.mask&^list[i].mask != 0 {
			list[n] = list[i]
			n++
		}
	}
	return slices.Insert(list[:n], k, l), true
}

// suffixes finds what may follow node i when it ends at t.
func (b *bounder) suffixes(i int, t int32, base int64) {
	g, m := b.g, len(b.nodes)
	least := b.lower - base - b.ended[i*g.w+int(t)]
	list := b.list[:0]
	floor := least // what a suffix must exceed
	if t > b.lastLk {
		list = append(list, label{})
		floor = max(floor, 0)
	}
	self := &b.nodes[i]
	for _, j := range b.order {
		if b.tops[j] <= floor {
			break
		}
		nd := &b.nodes[j]
		b.work++
		if nd.item == self.item && !(nd.repeat || nd.copy == self.copy+1) {
			continue
		}
		at := b.after(i, int(j), t)
		if at > g.end {
			continue
		}
		for _, l := range b.labels(b.hm[int(at)*m+int(j)]) {
			if l.v <= floor {
				break
			}
			if l.mask = b.read(l.mask, int(j), i); l.mask&b.dead[i] != 0 {
				continue
			}
			b.work += 4 + int64(len(list)/2)
			list, _ = joined(list, l)
			if l.mask == 0 {
				floor = l.v
			}
		}
	}
	if len(list) > 0 {
		b.store(list, &b.bs[i*g.w+int(t)])
	}
	b.list = list
}
