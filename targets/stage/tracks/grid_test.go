package tracks

import (
	"math"
	"testing"

	"evenfall/targets"
)

func grid(t testing.TB, corrected bool) *Grid {
	t.Helper()
	r := Disc()
	r.Corrected = corrected
	g, err := NewGrid(r)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

func seen(teffK, logL float64) Seen {
	return Seen{LogT: math.Log10(teffK), LogTErr: 0.008, LogL: logL, LogLErr: 0.06, FeH: 0, FeHErr: 0.2, HasFeH: true}
}

func TestGoldenPosteriors(t *testing.T) {
	g := grid(t, false)
	for _, c := range []struct {
		teffK, logL float64
		want        map[targets.Stage]float64
	}{
		{4800, 1.75, map[targets.Stage]float64{targets.RC: 0.89, targets.RGB: 0.11}},
		{4300, 2.2, map[targets.Stage]float64{targets.RC: 0.65, targets.RGB: 0.32, targets.EAGB: 0.03}},
		{4600, 1.4, map[targets.Stage]float64{targets.RGB: 1}},
		{5000, 1.75, map[targets.Stage]float64{targets.RC: 0.97}},
		{3600, 3.3, map[targets.Stage]float64{targets.RGB: 0.61, targets.EAGB: 0.39}},
		{3300, 3.8, map[targets.Stage]float64{targets.TPAGB: 0.99}},
		{5300, 0.8, map[targets.Stage]float64{targets.SG: 0.76, targets.RGB: 0.24}},
	} {
		p := g.Posterior(seen(c.teffK, c.logL))
		t.Logf("%g K, log L %g: %v weight %.2e chi2 %.2f mass %.2f age %.0f", c.teffK, c.logL, p.P, p.Weight, p.Chi2, p.Mass, p.Age)
		for s, want := range c.want {
			if got := p.P[s]; math.Abs(got-want) > 0.05 {
				t.Errorf("%g K, log L %g: %s has %.3f, want %.2f", c.teffK, c.logL, s, got, want)
			}
		}
	}
}

func BenchmarkNewGrid(b *testing.B) {
	for i := 0; i < b.N; i++ {
		grid(b, true)
	}
}

func BenchmarkPosterior(b *testing.B) {
	g := grid(b, true)
	for name, e := range map[string][2]float64{"typical": {0.008, 0.06}, "clump floor": {0.01, 0.1}, "wide": {0.3, 0.3}, "T .03 L .12": {0.029, 0.119}, "T wide": {0.3, 0.05}, "T .11 L .11": {0.11, 0.11}} {
		b.Run(name, func(b *testing.B) {
			s := seen(4700, 1.75)
			s.LogTErr, s.LogLErr, s.Floor = e[0], e[1], true
			for i := 0; i < b.N; i++ {
				g.Posterior(s)
			}
		})
	}
}
