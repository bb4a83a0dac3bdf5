package tracks

import (
	"math"
	"testing"

	"evenfall/astro/check"
	"evenfall/targets"
)

// The shares sum to 1, and the density integrated over the diagram gives each
// stage its share back, with a metallicity too.
func TestDensity(t *testing.T) {
	g, err := NewGrid(Disc())
	if err != nil {
		t.Fatal(err)
	}
	sum := 0.0
	for _, v := range g.Shares() {
		sum += v
	}
	check.Near(t, sum, 1, 0.02, "sum of the shares; the coolest white dwarfs lie outside the grid")
	const stepT, stepL = 0.02, 0.08
	for _, metal := range []bool{false, true} {
		clump, branch := 0.0, 0.0
		for logT := 3.45; logT < 4.3; logT += stepT {
			for logL := 0.0; logL < 4; logL += stepL {
				p := g.Posterior(Seen{LogT: logT, LogTErr: stepT, LogL: logL, LogLErr: stepL, HasFeH: metal, FeH: -0.1, FeHErr: 0.4})
				clump += p.Density(targets.RC) * stepT * stepL
				branch += p.Density(targets.EAGB) * stepT * stepL
			}
		}
		check.Near(t, clump/g.Shares()[targets.RC], 1, 0.05, "share of the clump, metallicity %v", metal)
		check.Near(t, branch/g.Shares()[targets.EAGB], 1, 0.05, "share of the early AGB, metallicity %v", metal)
	}
	if none := g.Posterior(Seen{LogT: math.NaN()}); none.Density(targets.RC) != 0 {
		t.Error("a star that is nowhere has a density")
	}
}
