package degenerate

import "math"

// window finds which cells of the grid lie within so many sigma of what was
// seen, and how far apart they may be taken.
func (p *problem) window(sigmas float64) bool {
	g := p.g
	p.rowFrom, p.rowUpto = -1, -1
	if p.from == nil {
		p.from, p.upto = make([]int, g.rows), make([]int, g.rows)
	}
	lo, hi, blue, red := math.Inf(-1), math.Inf(1), p.bprp, p.bprp
	colourErr := p.bprpErr
	if p.line != nil {
		lo, hi, blue, red = p.line.reach(sigmas)
		colourErr = p.line.colourErr
	}
	blue, red = blue-sigmas*colourErr, red+sigmas*colourErr
	for i := range g.rows {
		p.from[i], p.upto[i] = 0, 0
		if p.colour && (float64(g.red[i]) < blue || float64(g.blue[i]) > red) {
			continue
		}
		if p.logTErr > 0 && math.Abs(g.logTAt(i)-p.logT) > sigmas*p.logTErr {
			continue
		}
		a, b := g.first[i], g.cols
		if p.line != nil {
			a, b = g.within(p.q, i, lo, hi)
		}
		if p.logGErr > 0 {
			c, d := g.within(qLogG, i, p.logG-sigmas*p.logGErr, p.logG+sigmas*p.logGErr)
			a, b = max(a, c), min(b, d)
		}
		if a >= b {
			continue
		}
		p.from[i], p.upto[i] = a, b
		if p.rowFrom < 0 {
			p.rowFrom = i
		}
		p.rowUpto = i + 1
	}
	if p.rowFrom < 0 {
		return false
	}
	p.chooseSteps()
	return true
}

// How coarse the cells may be taken: a step may change no datum by more than
// this many of its sigmas.
const (
	largestStep  = 0.9
	largestSteps = 8
)

// chooseSteps takes wider steps where the data are wide.
func (p *problem) chooseSteps() {
	g := p.g
	magErr, colourErr := math.Inf(1), math.Inf(1)
	if p.line != nil {
		magErr, colourErr = p.line.spread, p.line.colourErr
	} else if p.colour {
		colourErr = p.bprpErr
	}
	if !p.colour {
		colourErr = math.Inf(1)
	}
	logGErr := math.Inf(1)
	if p.logGErr > 0 {
		logGErr = p.logGErr
	}
	mags, colours, gravities := g.cell[p.q], g.cell[qColour], g.cell[qLogG]
	sigmas := func(a, b int) float64 {
		x := float64(mags[b]-mags[a]) / magErr
		y := float64(colours[b]-colours[a]) / colourErr
		z := float64(gravities[b]-gravities[a]) / logGErr
		return x*x + y*y + z*z
	}
	alongT, alongM := 0.0, 0.0
	every := max(1, (p.rowUpto-p.rowFrom)/24)
	for i := p.rowFrom; i < p.rowUpto; i += every {
		a, b := p.from[i], p.upto[i]
		if a >= b {
			continue
		}
		j := (a + b) / 2
		at := i*g.cols + j
		if i+1 < g.rows && j >= g.first[i+1] {
			v := sigmas(at, at+g.cols)
			if p.logTErr > 0 {
				v += gridLogT / p.logTErr * gridLogT / p.logTErr
			}
			alongT = math.Max(alongT, v)
		}
		if j+1 < g.cols {
			alongM = math.Max(alongM, sigmas(at, at+1))
		}
	}
	p.stepT, p.stepM = stepsFor(alongT), stepsFor(alongM)
}

// stepsFor turns the square of sigmas to a step into a number of steps.
func stepsFor(square float64) int {
	if !(square > 0) {
		return 1
	}
	return max(1, min(largestSteps, int(largestStep/math.Sqrt(square))))
}

// weigh compares each cell of the window with what was seen.
func (p *problem) weigh() {
	g := p.g
	p.best, p.minChi2 = math.Inf(-1), math.Inf(1)
	if p.cells == nil {
		p.cells = make([]cell, 0, 1024)
	}
	mags, colours, gravities := g.cell[p.q], g.cell[qColour], g.cell[qLogG]
	for i := upTo(p.rowFrom, p.stepT); i < p.rowUpto; i += p.stepT {
		if p.from[i] >= p.upto[i] {
			continue
		}
		rowChi2 := 0.0
		if p.logTErr > 0 {
			d := (g.logTAt(i) - p.logT) / p.logTErr
			rowChi2 = d * d
		}
		base := i * g.cols
		for j := upTo(p.from[i], p.stepM); j < p.upto[i]; j += p.stepM {
			chi2, ln := rowChi2, p.prior[j]
			colour, weight := p.bprp, 0.0
			if p.line != nil {
				lnH, c, w, lnW, ok := p.line.at(float64(mags[base+j]))
				if !ok {
					continue
				}
				chi2 -= 2 * lnH
				colour, weight = c, w
				if p.colour {
					ln += lnW
				}
			} else if p.colour {
				weight = 1 / (p.bprpErr * p.bprpErr)
			}
			if p.colour {
				d := float64(colours[base+j]) - colour
				chi2 += d * d * weight
			}
			if p.logGErr > 0 {
				d := (float64(gravities[base+j]) - p.logG) / p.logGErr
				chi2 += d * d
			}
			ln -= chi2 / 2
			p.best = math.Max(p.best, ln)
			p.minChi2 = math.Min(p.minChi2, chi2)
			if ln >= p.best-ignored {
				p.cells = append(p.cells, cell{int32(i), int32(j), ln, chi2})
			}
		}
	}
}

// upTo rounds up to a multiple of step.
func upTo(i, step int) int { return (i + step - 1) / step * step }
