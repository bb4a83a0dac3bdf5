package degenerate

import (
	"math"

	"evenfall/astro"
)

// ignored is how far below the best, in the logarithm, a cell no longer counts.
const ignored = 11.0

// answer turns the weights of the cells into intervals.
func (p *problem) answer() Answer {
	g := p.g
	rows := (g.rows-1)/p.stepT + 1
	cols := (g.cols-1)/p.stepM + 1
	buffer := make([]float64, 3*rows+cols)
	p.rowW, p.rowMW, p.rowBest = buffer[:rows], buffer[rows:2*rows], buffer[2*rows:3*rows]
	p.colW = buffer[3*rows:]
	for k := range rows {
		p.rowBest[k] = math.Inf(-1)
	}
	kept := p.cells[:0]
	var lo, hi [derivedQuantities]float64
	for k := range lo {
		lo[k], hi[k] = math.Inf(1), math.Inf(-1)
	}
	for _, c := range p.cells {
		if c.ln < p.best-ignored {
			continue
		}
		w := math.Exp(c.ln - p.best)
		i, j := int(c.i)/p.stepT, int(c.j)/p.stepM
		p.rowW[i] += w
		p.rowMW[i] += w * g.massAt(int(c.j))
		p.colW[j] += w
		p.rowBest[i] = math.Max(p.rowBest[i], -c.chi2/2)
		for k, v := range g.derived(int(c.i), int(c.j)) {
			lo[k], hi[k] = math.Min(lo[k], v), math.Max(hi[k], v)
		}
		kept = append(kept, cell{c.i, c.j, w, c.chi2})
	}
	a := Answer{Chi2: p.minChi2, Solutions: p.solutions()}
	logT := quantiles(p.rowW)
	mass := quantiles(p.colW)
	a.TeffK = powers(logT, g.logT0, gridLogT*float64(p.stepT))
	a.MassMsun = scaled(mass, g.mass0, gridMass*float64(p.stepM))
	d := p.histograms(kept, lo, hi)
	a.LogG = d[dLogG]
	a.RadiusRsun = tenTo(d[dLogR])
	a.LumLsun = tenTo(d[dLogL])
	a.CoolingAgeYr = tenTo(d[dLogAge])
	if p.line != nil {
		a.AbsMag, a.AVMag, a.DistancePc = p.line.middle, p.line.avMiddle, p.line.distance
	}
	if p.colour {
		a.BPRP0Mag = p.bprp
		if p.line != nil {
			a.BPRP0Mag = p.line.colourMiddle
		}
	}
	return a
}

// Quantities of a model that follow from its temperature and mass.
const (
	dLogG = iota
	dLogR
	dLogL
	dLogAge
	derivedQuantities
)

func (g *grid) derived(i, j int) [derivedQuantities]float64 {
	at := i*g.cols + j
	logG := float64(g.cell[qLogG][at])
	logR := (float64(g.logMass[j]) + sunLogG - logG) / 2
	return [derivedQuantities]float64{
		dLogG:   logG,
		dLogR:   logR,
		dLogL:   2*logR + 4*(g.logTAt(i)-sunLogT),
		dLogAge: float64(g.cell[qLogAge][at]),
	}
}

// histogramBins is how finely the quantities that follow are sorted.
const histogramBins = 96

// histograms gives the interval of each quantity that follows; kept holds the
// weights themselves in place of their logarithms.
func (p *problem) histograms(kept []cell, lo, hi [derivedQuantities]float64) (out [derivedQuantities]astro.Interval) {
	var bins [derivedQuantities][histogramBins]float64
	var per [derivedQuantities]float64
	for k := range per {
		per[k] = (histogramBins - 1) / math.Max(hi[k]-lo[k], 1e-9)
	}
	for _, c := range kept {
		for k, v := range p.g.derived(int(c.i), int(c.j)) {
			u := (v - lo[k]) * per[k]
			b := min(int(u), histogramBins-2)
			f := u - float64(b)
			bins[k][b] += c.ln * (1 - f)
			bins[k][b+1] += c.ln * f
		}
	}
	for k := range out {
		out[k] = scaled(quantiles(bins[k][:]), lo[k], 1/per[k])
	}
	return out
}

// quantiles returns where the 16th, 50th and 84th per cent of a row of weights
// lie, in cells; each weight fills its cell evenly.
func quantiles(w []float64) (out [3]float64) {
	total := 0.0
	for _, v := range w {
		total += v
	}
	const lower, middle, upper = (1 - oneSigma) / 2, 0.5, (1 + oneSigma) / 2
	for n, part := range [...]float64{lower, middle, upper} {
		left := part * total
		for k, v := range w {
			if v > 0 && left <= v {
				out[n] = float64(k) - 0.5 + left/v
				break
			}
			left -= v
			out[n] = float64(k)
		}
	}
	return out
}

func scaled(x [3]float64, zero, step float64) astro.Interval {
	return span(zero+step*x[0], zero+step*x[1], zero+step*x[2])
}

func powers(x [3]float64, zero, step float64) astro.Interval { return tenTo(scaled(x, zero, step)) }

func tenTo(i astro.Interval) astro.Interval {
	return span(math.Pow(10, i.Lo), math.Pow(10, i.Mid), math.Pow(10, i.Hi))
}

// When a second solution is one: its peak less than this below the best, and
// the valley between them deeper than this, both in the logarithm.
const (
	solutionWithin = 4.6
	solutionValley = 0.5
)

// solutions finds the separate peaks of the likelihood along the temperature,
// without the prior, so that a way to explain the star is listed even where the
// prior finds it less likely.
func (p *problem) solutions() []Solution {
	type peak struct{ row, from, upto int }
	var peaks []peak
	valley, valleyAt := math.Inf(1), 0
	for k, v := range p.rowBest {
		if v < valley {
			valley, valleyAt = v, k
		}
		n := len(peaks)
		switch {
		case math.IsInf(v, -1):
		case n == 0:
			peaks = append(peaks, peak{k, 0, len(p.rowBest)})
			valley = v
		case v-valley > solutionValley && p.rowBest[peaks[n-1].row]-valley > solutionValley:
			peaks[n-1].upto = valleyAt
			peaks = append(peaks, peak{k, valleyAt, len(p.rowBest)})
			valley, valleyAt = v, k
		case v > p.rowBest[peaks[n-1].row]:
			peaks[n-1].row = k
			valley, valleyAt = v, k
		}
	}
	total := 0.0
	for _, w := range p.rowW {
		total += w
	}
	var out []Solution
	for _, q := range peaks {
		if p.rowBest[q.row] < -p.minChi2/2-solutionWithin {
			continue
		}
		var w, t, m float64
		for k := q.from; k < q.upto; k++ {
			w += p.rowW[k]
			t += p.rowW[k] * p.g.logTAt(k*p.stepT)
			m += p.rowMW[k]
		}
		out = append(out, Solution{math.Pow(10, t/w), m / w, -2 * p.rowBest[q.row], w / total})
	}
	return out
}
