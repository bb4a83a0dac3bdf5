package tracks

import (
	"math"

	"evenfall/targets"
)

// Shares returns which part of the population is in each stage.
//
// Checked: TestDensity.
func (g *Grid) Shares() map[targets.Stage]float64 { return g.shares }

// Density returns how densely the stars of a stage stand where a star was seen,
// as a share of the whole population per square dex of the diagram, among stars
// of its metallicity where that is known.
//
//	sum of weights exp(-chi²/2) / (2 π sigma(T) sigma(L))
//
// Returns:
//   - 0 where the stage has none there.
//
// Checked: TestDensity.
func (p *Posterior) Density(code targets.Stage) float64 {
	if p.area <= 0 || p.metals <= 0 {
		return 0
	}
	return p.P[code] * p.Weight / p.area / p.metals
}

// metals is how much of the population a metallicity lets through.
func (q *query) metals(r *Recipe) float64 {
	sum, all := 0.0, 0.0
	for k := range r.FeH {
		w := r.share(k)
		sum, all = sum+w*q.node[k], all+w
	}
	return sum / all
}

// share is the part of the stars that a metallicity stands for, unnormalised.
func (r *Recipe) share(k int) float64 {
	x := (r.FeH[k] - r.MeanFeH) / r.SigFeH
	return math.Exp(-x*x/2) * r.width(k)
}
