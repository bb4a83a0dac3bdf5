package order

// none is worse than any path.
const none = int64(-1) << 60

// forward finds the best value of a path up to each start and each end, with
// repeats allowed, so that suffixes can be judged by what may stand before
// them; and rules out starts through which no plan can beat the best known.
func (b *bounder) forward() {
	g, m := b.g, len(b.nodes)
	for c := range b.before {
		b.before[c], b.ended[c] = none, none
	}
	for j := range b.order {
		b.order[j] = int32(j)
	}
	firstLock := g.end + 1
	if len(g.locks) > 0 {
		firstLock = int32(g.locks[0].Start)
	}
	for u := g.now; u <= g.end; u++ {
		row := b.fm[int(u)*m : int(u+1)*m]
		for j := range row {
			row[j] = b.ended[j*g.w+int(u)]
			if u > g.now && (u <= 0 || !b.lockAt[u-1]) {
				row[j] = max(row[j], b.fm[int(u-1)*m+j])
			}
		}
		b.work += int64(6 * m)
		b.sortBy(func(j int32) int64 {
			if u-b.minGo < g.now {
				return none
			}
			return b.fm[int(u-b.minGo)*m+int(j)]
		})
		for j := range b.nodes {
			nd := &b.nodes[j]
			c := j*g.w + int(u)
			if u < nd.lo || u > nd.hi || !b.open[c] {
				continue
			}
			b.work += 8
			best := b.prefix(j, u)
			if u >= g.now+g.setup0[nd.item] && u <= firstLock {
				best = max(best, 0)
			}
			b.before[c] = best
			if best > none {
				e := j*g.w + int(u+g.dur[nd.item*g.w+int(u)])
				b.ended[e] = max(b.ended[e], best+b.weight[c])
			}
		}
	}
}

// prefix is the best path that lets node j start at u and ends with another
// node.
func (b *bounder) prefix(j int, u int32) int64 {
	g, m := b.g, len(b.nodes)
	nd, best := &b.nodes[j], none
	for k, i := range b.order {
		if b.tops[i] <= best {
			b.work += int64(k)
			return best
		}
		from := &b.nodes[i]
		if from.item == nd.item && !(nd.repeat || nd.copy == from.copy+1) {
			continue
		}
		t := u - (b.after(int(i), j, 0))
		if t < g.now {
			continue
		}
		best = max(best, b.fm[int(t)*m+int(i)])
	}
	b.work += int64(m)
	return best
}

// sortBy puts the order of nodes by falling key; it is nearly sorted before.
func (b *bounder) sortBy(key func(j int32) int64) {
	for j := range b.tops {
		b.tops[j] = key(int32(j))
	}
	o, t := b.order, b.tops
	for i := 1; i < len(o); i++ {
		x := o[i]
		k := i
		for ; k > 0 && (t[o[k-1]] < t[x] || t[o[k-1]] == t[x] && o[k-1] > x); k-- {
			o[k] = o[k-1]
		}
		o[k] = x
	}
}
