package tracks

import (
	"math"
	"sync"

	"evenfall/targets"
)

// The diagram in cells, log temperature across and log luminosity up.
const (
	cellT, lowT, cellsT = 0.005, 3.30, 420 // dex; kelvin
	cellL, lowL, cellsL = 0.02, -5.2, 540  // dex; Lsun
	mostNodes           = 16
	codes               = 11
	hotCells            = 3 // after the asymptotic giant branch, in cells a side
	fleeting            = 7 // number of the first stage after it
)

// Ages and masses in the cells, by bins of their logarithms.
const (
	bins             = 256
	lowAge, stepAge  = 0.5, 3.65 / bins // log10 Myr
	lowMass, stpMass = -1.05, 2.0 / bins
)

// stages are the codes that a grid tells apart, by their number in it.
var stages = [codes]targets.Stage{targets.MS, targets.SG, targets.RGB, targets.RC, targets.HB, targets.EAGB, targets.TPAGB,
	targets.PAGB, targets.CSPN, targets.SDB, targets.Dwarf}

// Grid is a population of stars spread over the diagram. It does not change
// once made and may be shared.
type Grid struct {
	recipe Recipe
	levels []level
	total  float64
	shares map[targets.Stage]float64
}

// level is the grid in cells of one size.
type level struct {
	foldT, foldL int     // how many of the finest cells make one
	first        []int32 // where each row of luminosity begins
	cells        []cell
}

// cell is what the stars of one stage and metallicity are like in one place.
// Two bins each, one spread below and above the mean, stand for their ages and
// masses.
type cell struct {
	weight                 float32
	t                      uint16
	code, node             uint8
	ageLo, ageHi, mLo, mHi uint8
}

// NewGrid follows a population of stars.
//
//	weight of a cell ~ sum of M^-2.3 dM p([Fe/H]) dt over the tracks crossing it
//
// Returns:
//   - [ErrRecipe].
//
// Notes:
//  1. A cell holds for each stage and metallicity the weight, and mean and
//     spread of the logarithms of present mass and age.
//  2. Post-AGB and central stars have the durations of [Formulas.Track], for
//     the formulas do not resolve them.
//  3. It takes about a third of a second; see [Lazily].
//
// Source: [cite.HurleyPolsTout2000], [cite.Kroupa2001].
//
// Checked: TestGoldenPosteriors, TestGridShares, TestKnownGiants.
func NewGrid(r Recipe) (*Grid, error) {
	if !r.valid() {
		return nil, ErrRecipe
	}
	all, total, err := sowAll(&r)
	if err != nil {
		return nil, err
	}
	g := &Grid{recipe: r, total: total}
	g.shares = map[targets.Stage]float64{}
	for i := range all {
		g.shares[stages[all[i].code]] += all[i].w / g.total
	}
	fine := all
	for _, size := range [][2]int{{1, 1}, {4, 1}, {16, 1}} {
		fine = merge(fine, size[0], size[1])
		g.levels = append(g.levels, newLevel(fine, size[0], size[1]))
		tall := merge(fine, size[0], 4)
		g.levels = append(g.levels, newLevel(tall, size[0], 4))
	}
	return g, nil
}

// sowAll follows the stars of all metallicities, each on its own, and puts them
// together in order, so that the grid is the same whoever is first.
func sowAll(r *Recipe) (all []seed, total float64, err error) {
	var wait sync.WaitGroup
	sowers, errs := make([]*sower, len(r.FeH)), make([]error, len(r.FeH))
	for node := range r.FeH {
		wait.Go(func() {
			sowers[node] = newSower(r)
			errs[node] = sowers[node].node(node)
		})
	}
	wait.Wait()
	for node, s := range sowers {
		if errs[node] != nil {
			return nil, 0, errs[node]
		}
		all, total = append(all, s.all...), total+s.total
	}
	return all, total, nil
}

// Lazily returns a function that makes the grid when first called, and returns
// the same one ever after. It may be called from several goroutines.
func Lazily(r Recipe) func() (*Grid, error) {
	return sync.OnceValues(func() (*Grid, error) { return NewGrid(r) })
}

// Recipe returns what the grid is made of.
func (g *Grid) Recipe() Recipe {
	r := g.recipe
	r.FeH = append([]float64(nil), r.FeH...)
	return r
}

// seed gathers the stars of one stage and metallicity in one place.
type seed struct {
	row, t         uint16
	code, node     uint8
	foldT, foldL   uint8   // size of the cell
	w, age, age2   float64 // weight, and weighted sums of the logarithms
	mass, massSqrd float64
}

// sower drops stars on the diagram.
type sower struct {
	r     *Recipe
	where []int32 // which seed of the present node a cell and stage has, plus 1
	used  []int32
	all   []seed
	base  int // where the present node begins
	code  [phases]uint8
	total float64
}

func newSower(r *Recipe) *sower {
	s := &sower{r: r, where: make([]int32, codes*cellsT*cellsL), all: make([]seed, 0, 30000)}
	for p := Phase(0); p < phases; p++ {
		for i, code := range stages {
			if code == p.Stage(1) {
				s.code[p] = uint8(i)
			}
		}
	}
	return s
}

// node sows all masses of one metallicity.
func (s *sower) node(k int) error {
	r := s.r
	z, effective := Metals(r.FeH[k])
	evaluate := NewFormulas
	if r.Corrected {
		evaluate = NewSmoothFormulas
	}
	f, err := evaluate(z)
	if err != nil {
		return err
	}
	share := r.share(k)
	s.base = len(s.all)
	w := walk{f: f, eta: r.Eta, fine: 1, until: r.ToMyr}
	sow := func(from, to float64, n int) {
		step := math.Log(to/from) / float64(n)
		for i := 0; i < n; i++ {
			m := from * math.Exp(step*(float64(i)+0.5))
			w = walk{f: f, eta: r.Eta, fine: 1, until: r.ToMyr, birth: m, m: m, points: w.points[:0], starts: w.starts[:0]}
			w.live()
			s.sow(&w, k, effective, share*born(m)*m*step)
		}
	}
	if r.Dwarfs > 0 && r.FromMass > LeastMass {
		sow(LeastMass, r.FromMass, r.Dwarfs)
	}
	sow(r.FromMass, r.ToMass, r.Masses)
	for _, i := range s.used {
		s.where[i] = 0
	}
	s.used = s.used[:0]
	return nil
}

// width is the range of [Fe/H] that a node stands for.
func (r *Recipe) width(k int) float64 {
	n := len(r.FeH)
	switch {
	case n == 1:
		return 1
	case k == 0:
		return r.FeH[1] - r.FeH[0]
	case k == n-1:
		return r.FeH[n-1] - r.FeH[n-2]
	}
	return (r.FeH[k+1] - r.FeH[k-1]) / 2
}

// sow drops one track.
func (s *sower) sow(w *walk, node int, effective, weight float64) {
	f, feH := w.f, s.r.FeH[node]
	place := func(p *Point) (logL, logT float64) {
		if s.r.Corrected {
			return f.correct(p, feH, effective)
		}
		return p.LogL, p.LogT
	}
	l0, t0 := place(&w.points[0])
	for i := 1; i < len(w.points); i++ {
		p, q := &w.points[i-1], &w.points[i]
		l1, t1 := place(q)
		from, to := math.Max(p.AgeMyr, s.r.FromMyr), math.Min(q.AgeMyr, s.r.ToMyr)
		if to > from {
			length := q.AgeMyr - p.AgeMyr
			a, b := (from-p.AgeMyr)/length, (to-p.AgeMyr)/length
			s.drop(stretch{node, s.code[q.Phase], l0 + (l1-l0)*a, l0 + (l1-l0)*b, t0 + (t1-t0)*a, t0 + (t1-t0)*b,
				weight * (to - from), math.Log10((from + to) / 2), math.Log10((p.Mass + q.Mass) / 2)})
		}
		l0, t0 = l1, t1
		if p.AgeMyr > s.r.ToMyr {
			return
		}
	}
}

// stretch is a straight piece of a track.
type stretch struct {
	node           int
	code           uint8
	l0, l1, t0, t1 float64
	w, age, mass   float64 // weight, logarithms
}

// drop spreads the stars on a stretch over the cells it crosses.
func (s *sower) drop(k stretch) {
	s.total += k.w
	wide := 1
	if k.code >= fleeting {
		wide = hotCells
	}
	n := int(math.Max(math.Abs(k.t1-k.t0)/cellT, math.Abs(k.l1-k.l0)/cellL))/wide + 1
	w := k.w / float64(n)
	for i := 0; i < n; i++ {
		x := (float64(i) + 0.5) / float64(n)
		t := int((k.t0 + (k.t1-k.t0)*x - lowT) / cellT)
		row := int((k.l0 + (k.l1-k.l0)*x - lowL) / cellL)
		if t < 0 || t >= cellsT || row < 0 || row >= cellsL {
			continue
		}
		if wide > 1 {
			t, row = t/wide*wide+wide/2, row/wide*wide+wide/2
		}
		at := (int(k.code)*cellsL+row)*cellsT + t
		j := s.where[at]
		if j == 0 {
			s.all = append(s.all, seed{row: uint16(row), t: uint16(t), code: k.code, node: uint8(k.node), foldT: 1, foldL: 1})
			j = int32(len(s.all) - s.base)
			s.where[at] = j
			s.used = append(s.used, int32(at))
		}
		d := &s.all[s.base+int(j)-1]
		d.w += w
		d.age += w * k.age
		d.age2 += w * k.age * k.age
		d.mass += w * k.mass
		d.massSqrd += w * k.mass * k.mass
	}
}

// merge sorts seeds by larger cells, by row and then by temperature, and puts
// those together that agree in cell, stage and metallicity.
func merge(in []seed, foldT, foldL int) []seed {
	across := cellsT/foldT + 1
	place := func(d *seed) int {
		return int(d.row)*int(d.foldL)/foldL*across + int(d.t)*int(d.foldT)/foldT
	}
	first := make([]int32, across*(cellsL/foldL+1)+1)
	for i := range in {
		first[place(&in[i])+1]++
	}
	for i := 1; i < len(first); i++ {
		first[i] += first[i-1]
	}
	order := make([]int32, len(in))
	for i := range in {
		k := place(&in[i])
		order[first[k]] = int32(i)
		first[k]++
	}
	var known [codes * mostNodes]struct{ cell, at int } // cell plus 1
	out := make([]seed, 0, len(in))
	for _, i := range order {
		d, cell := in[i], place(&in[i])+1
		kind := &known[int(d.code)*mostNodes+int(d.node)]
		if kind.cell == cell {
			o := &out[kind.at]
			o.w += d.w
			o.age += d.age
			o.age2 += d.age2
			o.mass += d.mass
			o.massSqrd += d.massSqrd
			continue
		}
		kind.cell, kind.at = cell, len(out)
		d.row, d.t = uint16((cell-1)/across), uint16((cell-1)%across)
		d.foldT, d.foldL = uint8(foldT), uint8(foldL)
		out = append(out, d)
	}
	return out
}

// newLevel packs sorted seeds.
func newLevel(in []seed, foldT, foldL int) level {
	v := level{foldT: foldT, foldL: foldL, first: make([]int32, cellsL/foldL+2), cells: make([]cell, len(in))}
	for i := range in {
		d := &in[i]
		v.first[int(d.row)+1]++
		c := cell{weight: float32(d.w), t: d.t, code: d.code, node: d.node}
		c.ageLo, c.ageHi = pair(d.w, d.age, d.age2, lowAge, stepAge)
		c.mLo, c.mHi = pair(d.w, d.mass, d.massSqrd, lowMass, stpMass)
		v.cells[i] = c
	}
	for i := 1; i < len(v.first); i++ {
		v.first[i] += v.first[i-1]
	}
	return v
}

// pair returns the bins one spread below and above a mean.
func pair(w, sum, sqrd, low, step float64) (lo, hi uint8) {
	mean := sum / w
	spread := math.Sqrt(math.Max(0, sqrd/w-mean*mean))
	bin := func(x float64) uint8 { return uint8(clamp((x-low)/step, 0, bins-1)) }
	return bin(mean - spread), bin(mean + spread)
}
