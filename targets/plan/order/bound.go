package order

import "math/bits"

// Tuned figures of the bound.
const (
	mostMemory    = 12 // items a place may remember
	mostSplit     = 8  // visits of a request that are told apart
	mostLabels    = 40 // labels of one state; more are merged
	priceBits     = 10 // binary places of a price below one unit of value
	fullStep      = 1000
	relaxedRounds = 8 // before memory is used
	memoryStep    = 700
	leastStep     = 100 // after the memory has grown
	patience      = 3   // rounds without a better bound before steps shrink
	growEvery     = 2   // memory rounds between two growths
	growRepeats   = 6   // repeats forbidden by one growth
	bucketMinutes = 15  // of a price on being served
)

// node is one item to the bound; a request of n visits is n nodes, of which
// the k-th stands for its k-th visit and the last carries the bonus.
type node struct {
	item   int
	copy   int // from 1
	last   bool
	repeat bool // may come again, at a price: a standard, or a request of very many visits
	lo, hi int32
	group  int // index of the first node of its item
}

// bounder finds a value that no plan can exceed. It drops the rule that an item
// comes at most once and puts prices on breaking it; what remains is a longest
// path through (last item, time), found backward in time. Places along the
// path then remember some of the items behind them, as many as are needed.
//
// A request of several visits is split into its visits. To remember visit k in
// what follows is to owe visit k-1 before it. That a take served by a standard
// has one, and that visits keep their gap, is bought at prices only.
//
// Any prices give a valid bound; they are whole numbers of 1/scale of a unit.
//
// Source: [cite.Fisher1981], [cite.BaldacciEtAl2011],
// [cite.RighiniSalani2008].
type bounder struct {
	g      *night
	scale  int64
	nodes  []node
	open   []bool  // [node*w+slot] starts not yet ruled out
	weight []int64 // [node*w+slot] worth less prices, scaled
	minGo  int32   // shortest move of all
	lastLk int32   // start of the last lock; -1 for none
	lockAt []bool  // [slot] a lock starts there

	lower    int64 // value of the best plan known, scaled
	upper    int64 // least bound so far, scaled
	closed   bool  // upper and lower have met
	prices   prices
	ng       [][]int32 // items that a node remembers, itself first
	common   []uint32  // [from*m+to] bits of from that to remembers too
	pos      []int8    // [at*m+node] bit of a node in the memory of another; -1
	own      []uint32  // bit that a node sets
	same     []uint32  // bits of the node's item
	dead     []uint32  // bits a suffix must not have before this node
	debts    []uint32  // bits a suffix must not have at the start of the night
	keepOpen bool      // rule no start out
	work     int64
	rounds   int
	theta    int64
	bad      int
	sinceNG  int

	before []int64 // [node*w+slot] best prefix before a start there
	ended  []int64 // [node*w+slot] best prefix that ends there
	fm     []int64 // [slot*m+node] best prefix that ended there or before
	order  []int32
	tops   []int64
	arena  []label
	hm     []span // [slot*m+node] suffixes that start with the node there or later
	bs     []span // [node*w+slot] suffixes after the node ended there
	list   []label
	ends   []bool // [node*w+slot] node may end there
}

// span is a stretch of the arena.
type span struct{ off, n int32 }

func newBounder(g *night) *bounder {
	b := &bounder{g: g, scale: 16, theta: fullStep, lastLk: -1, lockAt: make([]bool, g.w)}
	for i := range g.n {
		if g.lo[i] > g.hi[i] {
			continue
		}
		if len(g.matches[i]) > 0 || g.visits[i] > mostSplit {
			b.nodes = append(b.nodes, node{item: i, copy: 1, last: true, repeat: g.visits[i] > 1, lo: g.lo[i], hi: g.hi[i], group: len(b.nodes)})
			continue
		}
		group := len(b.nodes)
		for k := range g.visits[i] {
			lo := g.lo[i] + k*g.gap[i]
			if lo > g.hi[i] {
				break // so many visits do not fit; the bonus is out of reach
			}
			b.nodes = append(b.nodes, node{item: i, copy: int(k) + 1, last: k == g.visits[i]-1, lo: lo, hi: g.hi[i], group: group})
		}
	}
	m := len(b.nodes)
	b.open, b.weight = make([]bool, m*g.w), make([]int64, m*g.w)
	b.before, b.ended, b.fm = make([]int64, m*g.w), make([]int64, m*g.w), make([]int64, m*g.w)
	b.hm, b.bs, b.ends = make([]span, m*(g.w+1)), make([]span, m*g.w), make([]bool, m*g.w)
	b.order, b.tops = make([]int32, m), make([]int64, m)
	for j := range b.nodes {
		b.order[j] = int32(j)
		for u := b.nodes[j].lo; u <= b.nodes[j].hi; u++ {
			b.open[j*g.w+int(u)] = g.dur[b.nodes[j].item*g.w+int(u)] > 0
		}
	}
	for _, l := range g.locks {
		b.lockAt[l.Start], b.lastLk = true, max(b.lastLk, int32(l.Start))
	}
	b.minGo = int32(maxSlots)
	for i := range g.n {
		for j := range g.n {
			b.minGo = min(b.minGo, g.setup[i*g.n+j])
		}
	}
	b.upper = int64(1) << 60
	b.prices.init(b)
	b.remember()
	return b
}

// remember starts the memory: each node knows the visits of its own item.
func (b *bounder) remember() {
	m := len(b.nodes)
	b.ng = make([][]int32, m)
	for j := range b.nodes {
		b.ng[j] = append(b.ng[j], int32(j))
		if b.nodes[j].repeat {
			continue
		}
		for k := range b.nodes {
			if k != j && b.nodes[k].item == b.nodes[j].item && len(b.ng[j]) < 31 {
				b.ng[j] = append(b.ng[j], int32(k))
			}
		}
	}
	b.common, b.pos = make([]uint32, m*m), make([]int8, m*m)
	b.own, b.same, b.dead, b.debts = make([]uint32, m), make([]uint32, m), make([]uint32, m), make([]uint32, m)
	b.relate()
}

// relate works out how the memory of one node is read at another.
func (b *bounder) relate() {
	m := len(b.nodes)
	for to := range m {
		pos := b.pos[to*m : (to+1)*m]
		for k := range pos {
			pos[k] = -1
		}
		for bit, k := range b.ng[to] {
			pos[k] = int8(bit)
		}
		for from := range m {
			c := uint32(0)
			for bit, k := range b.ng[from] {
				if pos[k] >= 0 {
					c |= 1 << bit
				}
			}
			b.common[from*m+to] = c
		}
		b.marks(to)
	}
}

// marks works out which remembered items a node sets, clears and forbids.
func (b *bounder) marks(j int) {
	nd := b.nodes[j]
	b.own[j], b.same[j], b.dead[j], b.debts[j] = 0, 0, 0, 0
	for bit, k := range b.ng[j] {
		other := b.nodes[k]
		if other.repeat {
			continue
		}
		if other.copy > 1 {
			b.debts[j] |= 1 << bit
		}
		if other.item == nd.item {
			b.same[j] |= 1 << bit
			if other.copy != nd.copy+1 {
				b.dead[j] |= 1 << bit
			}
		}
	}
	if !nd.repeat {
		b.own[j] = 1
	}
}

// read turns the memory of a suffix that starts with node from into that of
// node to.
func (b *bounder) read(mask uint32, from, to int) uint32 {
	at := from*len(b.nodes) + to
	mask &= b.common[at]
	if mask == 0 {
		return 0
	}
	out := uint32(0)
	pos := b.pos[to*len(b.nodes):]
	for ng := b.ng[from]; mask != 0; mask &= mask - 1 {
		out |= 1 << pos[ng[bits.TrailingZeros32(mask)]]
	}
	return out
}

// after is the first slot in which node j may start when node i ended at t.
func (b *bounder) after(i, j int, t int32) int32 {
	x, y := b.nodes[i].item, b.nodes[j].item
	go1 := b.g.setup[x*b.g.n+y]
	if x == y {
		go1 = max(go1, b.g.gap[x]-b.prices.longest[x])
	}
	return t + go1
}
