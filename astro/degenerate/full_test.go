package degenerate

import (
	"math"
	"math/rand/v2"
	"sync"
	"testing"

	"evenfall/astro"
)

var models = sync.OnceValue(NewModels)

// full fits by the plain recipe: every model of the grid, every distance by
// itself, with the correlation of the reddening in full. Slow.
func full(m *Models, s Seen, prior Prior, c Composition) (teffK, massMsun [3]float64) {
	g := m.grids[c]
	distances, err := s.distances()
	if err != nil {
		panic(err)
	}
	mean := 0.0
	for _, d := range distances {
		mean += d.Weight * d.Pc
	}
	e := s.reddeningErr(mean)
	vM := s.GErrMag*s.GErrMag + floorMag*floorMag + e*e/bprpByG/bprpByG
	vC := s.BPRPErrMag*s.BPRPErrMag + floorBPRP*floorBPRP + e*e
	cov := e * e / bprpByG
	det := vM*vC - cov*cov
	mu, ci := make([]float64, len(distances)), make([]float64, len(distances))
	for k, d := range distances {
		av := s.extinction(d.Pc)
		mu[k], ci[k] = s.GMag-5*math.Log10(d.Pc)+5-gByV*av, s.BPRPMag-bprpByG*gByV*av
	}
	rows, cols := make([]float64, g.rows), make([]float64, g.cols)
	for i := range g.rows {
		for j := g.first[i]; j < g.cols; j++ {
			at := i*g.cols + j
			p := 0.0
			for k, d := range distances {
				x, y := float64(g.cell[qMG][at])-mu[k], float64(g.cell[qColour][at])-ci[k]
				if chi2 := (x*x*vC - 2*x*y*cov + y*y*vM) / det; chi2 < 200 {
					p += d.Weight * math.Exp(-chi2/2)
				}
			}
			p *= math.Exp(g.priorOf[prior][j])
			rows[i] += p
			cols[j] += p
		}
	}
	for k, v := range quantiles(rows) {
		teffK[k] = math.Pow(10, g.logT0+gridLogT*v)
	}
	for k, v := range quantiles(cols) {
		massMsun[k] = g.mass0 + gridMass*v
	}
	return teffK, massMsun
}

// star makes what would be seen of a model star.
func star(t testing.TB, m *Models, c Composition, teffK, massMsun, rPc, plxErr float64) Seen {
	t.Helper()
	v, err := m.At(teffK, massMsun, c)
	if err != nil {
		t.Fatal(err)
	}
	s := Seen{AV: Dust(astro.Deg(35)), HasBPRP: true, GErrMag: 0.003, BPRPErrMag: 0.008, ParallaxMas: 1000 / rPc, ParallaxErrMas: plxErr}
	av := s.AV(rPc)
	s.GMag = v.MGMag + 5*math.Log10(rPc) - 5 + gByV*av
	s.BPRPMag = v.BPRPMag + bprpByG*gByV*av
	return s
}

// The quick fit against the plain recipe, from near and cool to far and hot.
func TestFastAgainstFull(t *testing.T) {
	if testing.Short() {
		t.Skip("slow: every model of the grid for every star")
	}
	m := models()
	r := rand.New(rand.NewPCG(1, 2))
	const stars = 60
	worstT, worstM, worstEdge := 0.0, 0.0, 0.0
	for n := range stars {
		c := Composition(n % 2)
		teff := 3700 * math.Pow(60000.0/3700, r.Float64())
		mass := 0.4 + 0.8*r.Float64()
		rPc := 10 * math.Pow(60, r.Float64())
		signal := 6 * math.Pow(50, r.Float64())
		s := star(t, m, c, teff, mass, rPc, 1000/rPc/signal)
		s.GMag += 0.02 * r.NormFloat64()
		s.BPRPMag += 0.012 * r.NormFloat64()
		prior := Prior(n / 2 % 2)
		a, err := m.Fit(s, prior, c)
		if err != nil {
			t.Errorf("%.0f K %.2f: %v", teff, mass, err)
			continue
		}
		wantT, wantM := full(m, s, prior, c)
		dT, dM := math.Abs(a.TeffK.Mid/wantT[1]-1), math.Abs(a.MassMsun.Mid-wantM[1])
		worstT, worstM = math.Max(worstT, dT), math.Max(worstM, dM)
		edge := math.Max(math.Abs(a.TeffK.Lo-wantT[0]), math.Abs(a.TeffK.Hi-wantT[2])) / (wantT[2] - wantT[0]) * 2
		worstEdge = math.Max(worstEdge, edge)
		if dT > 0.001 || dM > 0.002 || edge > 0.12 {
			t.Errorf("%v %v %.0f K %.2f at %.0f pc, parallax %.0f sigma: %.1f K %.4f, want %.1f %.4f; ends %.3f sigma; %.0f..%.0f want %.0f..%.0f", c, prior, teff, mass, rPc, signal,
				a.TeffK.Mid, a.MassMsun.Mid, wantT[1], wantM[1], edge, a.TeffK.Lo, a.TeffK.Hi, wantT[0], wantT[2])
		}
	}
	t.Logf("%d stars: medians differ by at most %.3f per cent in Teff and %.4f solar masses, ends by %.2f sigma", stars, 100*worstT, worstM, worstEdge)
}

func BenchmarkFit(b *testing.B) {
	m := models()
	for _, c := range []struct {
		name               string
		teff, mass, r, sig float64
	}{
		{"cool near", 6000, 0.6, 30, 300}, {"typical", 10000, 0.6, 100, 80}, {"faint", 12000, 0.7, 250, 12},
		{"far", 15000, 0.6, 500, 7}, {"hot far", 35000, 0.6, 600, 6}, {"turn", 3600, 0.6, 20, 150},
	} {
		s := star(b, m, Hydrogen, c.teff, c.mass, c.r, 1000/c.r/c.sig)
		b.Run(c.name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := m.Fit(s, WidePrior, Hydrogen); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkNewModels(b *testing.B) {
	for b.Loop() {
		NewModels()
	}
}
