package degenerate

import "math"

// The fine grid: steps of log Teff and of solar masses.
const (
	gridLogT = 0.0025
	gridMass = 0.005
)

// gridded are the quantities that a fit reads.
var gridded = [...]quantity{qLogG, qMV, qMG, qColour, qLogAge}

// grid is a table interpolated once, so that a fit only reads it. Rows go by
// log Teff, in a row by mass; cells off the table are not numbers and lie at
// the low-mass end of a row.
type grid struct {
	rows, cols   int
	logT0        float64 // of row 0
	mass0        float64 // of column 0
	cell         [quantities][]float32
	first        []int // first column of each row that is on the table
	blue, red    []float32
	logMass      []float32 // of each column
	priorOf      [2][]float64
	magsIncrease bool // in every row M_G, M_V and log g increase with mass
}

func newGrid(s *sheet) *grid {
	lo, hi := math.Inf(1), math.Inf(-1)
	for k := range s.mass {
		lo, hi = math.Min(lo, s.lo[k]), math.Max(hi, s.hi[k])
	}
	const slack = 1e-9
	first, last := math.Ceil(lo/gridLogT-slack), math.Floor(hi/gridLogT+slack)
	g := &grid{logT0: first * gridLogT, mass0: s.mass[0], magsIncrease: true}
	g.rows = int(last-first) + 1
	g.cols = int(math.Round((s.mass[len(s.mass)-1]-s.mass[0])/gridMass)) + 1
	for _, q := range gridded {
		g.cell[q] = make([]float32, g.rows*g.cols)
	}
	g.first = make([]int, g.rows)
	g.blue, g.red = make([]float32, g.rows), make([]float32, g.rows)
	g.logMass = make([]float32, g.cols)
	for p := range g.priorOf {
		g.priorOf[p] = make([]float64, g.cols)
		for j := range g.cols {
			g.priorOf[p][j] = Prior(p).logDensity(g.massAt(j))
		}
	}
	for j := range g.cols {
		g.logMass[j] = float32(math.Log10(g.massAt(j)))
	}
	for i := range g.rows {
		g.fillRow(s, i)
	}
	return g
}

func (g *grid) massAt(j int) float64 { return g.mass0 + gridMass*float64(j) }
func (g *grid) logTAt(i int) float64 { return g.logT0 + gridLogT*float64(i) }

// fillRow interpolates one temperature at all masses.
func (g *grid) fillRow(s *sheet, i int) {
	logT := math.Min(g.logTAt(i), s.hi[len(s.hi)-1])
	nan := float32(math.NaN())
	for _, q := range gridded {
		c, err := s.across(logT, q)
		row := g.cell[q][i*g.cols : (i+1)*g.cols]
		g.first[i] = g.cols
		for j := g.cols - 1; j >= 0; j-- {
			row[j] = nan
			if err != nil {
				continue
			}
			lo, hi := c.Range()
			if x := g.massAt(j); x >= lo-1e-9 {
				v, _ := c.At(math.Max(lo, math.Min(hi, x)))
				row[j] = float32(v)
				g.first[i] = j
			}
		}
	}
	g.blue[i], g.red[i] = float32(math.Inf(1)), float32(math.Inf(-1))
	for j := g.first[i]; j < g.cols; j++ {
		at := i*g.cols + j
		c := g.cell[qColour][at]
		g.blue[i], g.red[i] = min(g.blue[i], c), max(g.red[i], c)
		if j > g.first[i] {
			for _, q := range [...]quantity{qMG, qMV, qLogG} {
				if g.cell[q][at] < g.cell[q][at-1] {
					g.magsIncrease = false
				}
			}
		}
	}
}

// within returns the columns of a row between which a quantity that increases
// with mass lies from lo to hi: from a up to but not b.
func (g *grid) within(q quantity, i int, lo, hi float64) (a, b int) {
	row := g.cell[q][i*g.cols : (i+1)*g.cols]
	if !g.magsIncrease {
		return g.first[i], g.cols
	}
	search := func(v float64) int {
		low, high := g.first[i], g.cols
		for low < high {
			if m := (low + high) / 2; float64(row[m]) < v {
				low = m + 1
			} else {
				high = m
			}
		}
		return low
	}
	return search(lo), search(hi)
}
