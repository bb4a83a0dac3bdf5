package order

// prices are what breaking the dropped rules costs, in fixed point: a unit is
// 1/(scale 2^priceBits) of a value.
type prices struct {
	p       []int64 // all prices, one after the other
	grad    []int32 // how much the last path keeps each rule, negative when it breaks it
	dir     []int64 // direction of the steps, thousandths
	least   []int64 // prices of the least bound
	live    []int32 // entries of dir that are not 0
	longest []int32 // longest take of an item

	once    int     // index of the price on "at most once" of node 0
	chain   int     // on "visit k before visit k+1" of node 0; 0 for last ones
	served  []int   // [item] index of the price on being served in bucket 0; -1
	bucket  int32   // slots
	top     []int64 // highest sensible price on being served, by item
	runs    [][]run // [price - first served] starts of standards that serve it
	first   int     // first price on being served
	windows []window
	used    []int64 // [price - first served] price that is in the standards' income
	income  []int64 // [item*w+slot] what a start of a standard earns, scaled
	buckets int     // prices on being served of one item
}

// run is a stretch of cells of one standard.
type run struct{ from, to int32 }

// window forbids a second visit of an item within its gap, from a slot on.
type window struct {
	item int
	from int32
	at   int // index of its price
}

// mostWindows keeps the prices on gaps from growing without end.
const mostWindows = 400

// What keeps prices and their steps within 64 bits.
const (
	mostDir   = int64(1) << 16
	mostPrice = int64(1) << (30 + priceBits)
)

// init makes all prices zero.
func (x *prices) init(b *bounder) {
	g, m := b.g, len(b.nodes)
	x.longest = make([]int32, g.n)
	for i := range g.n {
		for u := g.lo[i]; u <= g.hi[i]; u++ {
			x.longest[i] = max(x.longest[i], g.dur[i*g.w+int(u)])
		}
	}
	x.once, x.chain, x.first = 0, m, 2*m
	x.bucket = 1
	if g.p.SlotMin > 0 {
		x.bucket = max(1, int32(bucketMinutes/g.p.SlotMin))
	}
	x.buckets = (g.w + int(x.bucket) - 1) / int(x.bucket)
	x.served, x.top = make([]int, g.n), make([]int64, g.n)
	n := x.first
	for i := range g.n {
		x.served[i] = -1
		if c := g.p.Items[i].Calib; c == nil || c.Loss == 0 || g.lo[i] > g.hi[i] {
			continue
		}
		x.served[i], n = n, n+x.buckets
		for u := g.lo[i]; u <= g.hi[i]; u++ {
			x.top[i] = max(x.top[i], int64(g.val[i*g.w+int(u)]-g.cut[i*g.w+int(u)])*b.scale)
		}
	}
	x.p, x.grad, x.dir = make([]int64, n), make([]int32, n), make([]int64, n)
	x.runs, x.used = make([][]run, n-x.first), make([]int64, n-x.first)
	x.income = make([]int64, g.n*g.w)
	for s := range g.n {
		x.lend(g, s)
	}
	x.least = append([]int64(nil), x.p...)
}

// lend lists which starts of standard s serve which item and bucket.
func (x *prices) lend(g *night, s int) {
	if len(g.matches[s]) == 0 {
		return
	}
	for w := g.lo[s]; w <= g.hi[s]; w++ {
		cell := int32(s*g.w) + w
		if g.dur[cell] == 0 {
			continue
		}
		g.served(s, w, func(j, c int) {
			k := x.served[j] - x.first + (c-j*g.w)/int(x.bucket)
			rs := x.runs[k]
			switch n := len(rs); {
			case n > 0 && rs[n-1].to == cell:
			case n > 0 && rs[n-1].to == cell-1:
				rs[n-1].to = cell
			default:
				x.runs[k] = append(rs, run{cell, cell})
			}
		})
	}
}

// price is a price as used: rounded down to 1/scale of a value.
func (x *prices) price(k int) int64 { return x.p[k] >> priceBits }

// constant is what all prices cost when every rule is used up, scaled.
func (b *bounder) constant() int64 {
	x, sum := &b.prices, int64(0)
	for j, nd := range b.nodes {
		n := int64(1)
		if nd.repeat {
			n = int64(b.g.visits[nd.item])
		}
		sum += n * x.price(x.once+j)
	}
	for _, w := range x.windows {
		sum += x.price(w.at)
	}
	return sum
}

// weigh sets the weight of every open start.
func (b *bounder) weigh() {
	g, x := b.g, &b.prices
	for k := range x.used {
		now := x.price(x.first + k)
		if change := now - x.used[k]; change != 0 {
			for _, r := range x.runs[k] {
				for c := r.from; c <= r.to; c++ {
					x.income[c] += change
				}
			}
			x.used[k] = now
		}
	}
	for j, nd := range b.nodes {
		fixed := -x.price(x.once + j)
		switch {
		case nd.repeat: // a part of the bonus for each, rounded up
			n := int64(g.visits[nd.item])
			fixed += (int64(g.bonus[nd.item])*b.scale + n - 1) / n
		case nd.last:
			fixed += int64(g.bonus[nd.item]) * b.scale
		default:
			fixed += x.price(x.chain + j)
		}
		if nd.copy > 1 {
			fixed -= x.price(x.chain + j - 1)
		}
		row, src := j*g.w, nd.item*g.w
		for u := int(nd.lo); u <= int(nd.hi); u++ {
			if b.open[row+u] {
				b.weight[row+u] = fixed + x.income[src+u] + b.takeWorth(nd.item, u)
			}
		}
	}
	for _, w := range x.windows {
		price := x.price(w.at)
		if price == 0 {
			continue
		}
		for j := range b.nodes {
			nd := &b.nodes[j]
			if nd.item != w.item {
				continue
			}
			for u := max(w.from, nd.lo); u < min(w.from+g.gap[w.item], nd.hi+1); u++ {
				b.weight[j*g.w+int(u)] -= price
			}
		}
	}
}

// takeWorth is what a start is worth, scaled: served at the price of that, or
// not served.
func (b *bounder) takeWorth(item, u int) int64 {
	x, c := &b.prices, item*b.g.w+u
	v := int64(b.g.val[c]) * b.scale
	if k := x.served[item]; k >= 0 {
		v = max(v-x.price(k+u/int(x.bucket)), int64(b.g.cut[c])*b.scale)
	}
	return v
}

// blame works out how far a path keeps the rules.
func (b *bounder) blame(path []step) {
	g, x := b.g, &b.prices
	clear(x.grad)
	for j, nd := range b.nodes {
		x.grad[x.once+j] = 1
		if nd.repeat {
			x.grad[x.once+j] = g.visits[nd.item]
		}
	}
	for _, w := range x.windows {
		x.grad[w.at] = 1
	}
	for _, st := range path {
		nd := &b.nodes[st.node]
		x.grad[x.once+st.node]--
		if !nd.last {
			x.grad[x.chain+st.node]++
		}
		if nd.copy > 1 {
			x.grad[x.chain+st.node-1]--
		}
		if k := x.served[nd.item]; k >= 0 {
			c := nd.item*g.w + int(st.start)
			k += int(st.start) / int(x.bucket)
			if int64(g.val[c]-g.cut[c])*b.scale > x.price(k) {
				x.grad[k]--
			}
		}
		for _, w := range x.windows {
			if w.item == nd.item && st.start >= w.from && st.start < w.from+g.gap[w.item] {
				x.grad[w.at]--
			}
		}
		if len(g.matches[nd.item]) > 0 {
			b.credit(nd.item, st.start)
		}
	}
}

// credit counts what a standard of the path serves.
func (b *bounder) credit(s int, w int32) {
	x, last := &b.prices, -1
	b.g.served(s, w, func(j, c int) {
		if k := x.served[j] + (c-j*b.g.w)/int(x.bucket); k != last {
			x.grad[k]++
			last = k
		}
	})
}

// move takes one step along the smoothed direction, as long as Polyak's rule
// says, and keeps prices from becoming negative.
//
// Source: [cite.Polyak1969].
func (b *bounder) move(bound int64) {
	x := &b.prices
	norm := int64(0)
	for k := range x.p {
		gr := int64(x.grad[k])
		if gr > 0 && x.p[k] == 0 {
			gr = 0 // the price cannot fall further
		}
		x.dir[k] = min(max(700*gr+3*x.dir[k]/10, -mostDir), mostDir)
		norm += x.dir[k] * x.dir[k] / 16
	}
	if norm == 0 {
		return
	}
	reach := min(bound-b.lower, int64(1)<<30) * b.theta << priceBits / 16
	for k, d := range x.dir {
		if d != 0 {
			// Below 2^46 times 2^16: fits.
			x.p[k] = min(max(0, x.p[k]-reach/norm*d-reach%norm*d/norm), mostPrice)
		}
	}
	for i, k := range x.served {
		if k < 0 {
			continue
		}
		for c := range x.buckets {
			x.p[k+c] = min(x.p[k+c], x.top[i]<<priceBits)
		}
	}
}
