package tracks

import (
	"math"

	"evenfall/astro"
	"evenfall/targets"
)

// Seen is what is known of a star's place.
type Seen struct {
	LogT, LogTErr float64 // log10 of the effective temperature in kelvin; one sigma, dex
	LogL, LogLErr float64 // log10 of the luminosity in suns; one sigma, dex
	FeH, FeHErr   float64 // [Fe/H], dex; one sigma
	HasFeH        bool
	Floor         bool // add how far the tracks can be trusted: 0.009 and 0.04 dex
}

// Posterior is what the tracks say of a star.
type Posterior struct {
	// P sums to 1 over the stage codes that any track gives; nil where none
	// comes within four errors.
	P map[targets.Stage]float64
	Given
	ByStage map[targets.Stage]Given // for the stages of P above a thousandth
	// Weight is the share of the whole population that would look like this,
	// each star counting by exp(-chi²/2). It is small for rare phases too.
	Weight float64
	// Chi2 is that of the nearest star of the population; infinite where P is
	// nil. Above some 9 the star is off the tracks.
	Chi2 float64

	area   float64 // 2 pi times both errors, square dex
	metals float64 // part of the population of its metallicity
}

// Given is mass and age if the star is in a stage, or whatever its stage:
// median and the central 68 per cent.
type Given struct {
	Mass astro.Interval // present mass, Msun
	Age  astro.Interval // since birth, Myr
}

// How the grid is smoothed.
const (
	floorT, floorL = 0.009, 0.04 // dex, how far the tracks can be trusted
	grainT, grainL = 0.005, 0.02 // dex, least errors that see no holes in the grid
	grainFeH       = 0.4         // likewise, of the distance between nodes
	reach          = 4           // errors, beyond which a star is not like it
	central        = 0.68        // of the intervals
	worthwhile     = 1e-3        // probability from which a stage has intervals
)

// Posterior asks where stars like this one are in their lives.
//
//	P(stage) ~ sum of weights of the stage times exp(-chi²/2)
//
// Given:
//   - s: the place; errors may be 0; they are at least 0.005 dex in temperature, 0.02
//     dex in luminosity and 0.4 of the distance between nodes in [Fe/H].
//
// Returns:
//   - a Posterior with P nil and Chi2 infinite where no track comes near, or a
//     number is not finite or an error negative.
//
// Notes:
//  1. Cells far smaller than the errors are taken together; where the star is
//     on the tracks, a probability changes by at most 0.03.
//  2. Stages that no single star passes through, and binaries, have no part in
//     it: the caller keeps some probability for what is none of these.
//
// Source: [cite.HurleyPolsTout2000], [cite.Kroupa2001].
//
// Checked: TestGoldenPosteriors, TestPosteriorProperty, TestLevelsAgree,
// FuzzPosterior, BenchmarkPosterior.
func (g *Grid) Posterior(s Seen) Posterior {
	none := Posterior{Chi2: math.Inf(1)}
	for _, v := range []float64{s.LogT, s.LogTErr, s.LogL, s.LogLErr} {
		if math.IsNaN(v) || math.Abs(v) > 100 {
			return none
		}
	}
	if s.LogTErr < 0 || s.LogLErr < 0 || s.HasFeH && !(math.Abs(s.FeH) <= 100 && s.FeHErr >= 0 && s.FeHErr <= 100) {
		return none
	}
	sT, sL := math.Max(s.LogTErr, grainT), math.Max(s.LogLErr, grainL)
	if s.Floor {
		sT, sL = math.Hypot(s.LogTErr, floorT), math.Hypot(s.LogLErr, floorL)
	}
	v := g.level(sT, sL)
	q := query{t: window{s.LogT, sharper(sT, cellT, v.foldT)}, l: window{s.LogL, sharper(sL, cellL, v.foldL)}}
	var chi2 [mostNodes]float64
	least := math.Inf(1)
	for k, feH := range g.recipe.FeH {
		if s.HasFeH {
			x := (s.FeH - feH) / math.Max(s.FeHErr, grainFeH*g.recipe.width(k))
			chi2[k] = x * x
		}
		least = math.Min(least, chi2[k])
	}
	for k := range g.recipe.FeH {
		q.node[k] = math.Exp((least - chi2[k]) / 2)
	}
	q.add(v)
	out := q.answer(g.total, least)
	out.area, out.metals = 2*math.Pi*sT*sL, q.metals(&g.recipe)*math.Exp(-least/2)
	return out
}

// sharper takes off an error what cells larger than the finest blur.
func sharper(sigma, cell float64, fold int) float64 {
	return math.Sqrt(sigma*sigma - cell*cell*float64(fold*fold-1)/12)
}

// level picks cells well below the errors in size.
func (g *Grid) level(sT, sL float64) *level {
	i := 0
	switch {
	case sT > 0.14:
		i = 4
	case sT > 0.035:
		i = 2
	}
	if sL > 0.14 {
		i++
	}
	return &g.levels[i]
}

// window is one axis of a question.
type window struct{ mid, sigma float64 }

// weights fills in how much each cell counts, and returns the first cell and
// the number of cells.
func (w window) weights(into []float64, low, size float64, cells int) (first, n int) {
	first = max(int(math.Floor((w.mid-reach*w.sigma-low)/size)), 0)
	last := min(int(math.Floor((w.mid+reach*w.sigma-low)/size)), cells-1)
	for i := first; i <= last; i++ {
		x := (low + size*(float64(i)+0.5) - w.mid) / w.sigma
		into[i-first] = math.Exp(-x * x / 2)
	}
	return first, max(last-first+1, 0)
}

// query gathers the cells of one question.
type query struct {
	t, l window
	node [mostNodes]float64
	p    [codes]float64
	best float64
	age  [codes][bins]float64
	mass [codes][bins]float64
}

func (q *query) add(v *level) {
	var wT [cellsT]float64
	var wL [cellsL]float64
	t0, nT := q.t.weights(wT[:], lowT, cellT*float64(v.foldT), cellsT/v.foldT+1)
	l0, nL := q.l.weights(wL[:], lowL, cellL*float64(v.foldL), cellsL/v.foldL)
	if nT == 0 {
		return
	}
	for j := 0; j < nL; j++ {
		row := v.cells[v.first[l0+j]:v.first[l0+j+1]]
		for i := firstFrom(row, uint16(t0)); i < len(row) && int(row[i].t) < t0+nT; i++ {
			c := &row[i]
			near := wL[j] * wT[int(c.t)-t0] * q.node[c.node&(mostNodes-1)]
			if near > q.best {
				q.best = near
			}
			w := near * float64(c.weight)
			q.p[c.code] += w
			age, mass := &q.age[c.code], &q.mass[c.code]
			age[c.ageLo] += w
			age[c.ageHi] += w
			mass[c.mLo] += w
			mass[c.mHi] += w
		}
	}
}

// firstFrom finds the first cell of a row at or above a temperature.
func firstFrom(row []cell, t uint16) int {
	lo, hi := 0, len(row)
	for lo < hi {
		mid := (lo + hi) / 2
		if row[mid].t < t {
			lo = mid + 1
		} else {
			hi = mid
		}
	}
	return lo
}

// answer reads what was gathered; least is the chi² that the metallicity adds to
// every star.
func (q *query) answer(total, least float64) Posterior {
	out := Posterior{Chi2: math.Inf(1)}
	sum := 0.0
	for _, p := range q.p {
		sum += p
	}
	if !(sum > 0) {
		return out
	}
	out.P, out.ByStage = make(map[targets.Stage]float64, codes), make(map[targets.Stage]Given, codes)
	out.Weight, out.Chi2 = sum/total*math.Exp(-least/2), math.Max(0, least-2*math.Log(q.best))
	var age, mass [bins]float64
	for i, p := range q.p {
		if p <= 0 {
			continue
		}
		out.P[stages[i]] = p / sum
		for k := range age {
			age[k] += q.age[i][k]
			mass[k] += q.mass[i][k]
		}
		if p/sum > worthwhile {
			out.ByStage[stages[i]] = given(&q.age[i], &q.mass[i])
		}
	}
	out.Given = given(&age, &mass)
	return out
}

func given(age, mass *[bins]float64) Given {
	return Given{Age: quantiles(age, lowAge, stepAge), Mass: quantiles(mass, lowMass, stpMass)}
}

// quantiles reads median and central interval from a histogram of logarithms.
func quantiles(h *[bins]float64, low, step float64) astro.Interval {
	sum := 0.0
	for _, v := range h {
		sum += v
	}
	at := [3]float64{(1 - central) / 2 * sum, sum / 2, (1 + central) / 2 * sum}
	var out [3]float64
	k, below := 0, 0.0
	for i, v := range h {
		for k < 3 && v > 0 && below+v >= at[k] {
			out[k] = pow10(low + step*(float64(i)+(at[k]-below)/v))
			k++
		}
		below += v
	}
	for ; k < 3; k++ { // rounding
		out[k] = pow10(low + step*bins)
	}
	return astro.Interval{Lo: out[0], Mid: out[1], Hi: out[2], Level: central}
}
