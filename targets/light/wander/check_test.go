package wander

import (
	"math"
	"testing"

	"evenfall/astro/check"
)

// sample is the star and the magnitudes of the worked figures: P = 300 d,
// A = 2, no catalogue phase, the three factors of restlessness alike.
func sampleModel() *model {
	m := &model{elements: Elements{PeriodD: 300}, periodD: 300, calibrated: true, mean: [nFixed]float64{11, 2, -0.12, 0.13, -0.05, 0.05}}
	for i, sd := range [nFixed]float64{0.38, 0.29, 0.32, 0.16, 0.115, 0.126} {
		m.cov[i][i] = sd * sd
	}
	m.process()
	m.restlessP = [len(restless)]float64{1, 1, 1}
	return m
}

func sampleFilter(t testing.TB, n int) *Filter {
	f, err := newFilter(sampleModel(), Grid{0, 10 * float64(n)})
	if err != nil {
		t.Fatal(err)
	}
	for i := range n {
		jd := 10 * float64(i+1-n)
		mag := 11.3 - 1.9*math.Cos(2*math.Pi*(jd/303+0.2)) + 0.15*math.Sin(float64(i*i))
		if err := f.Update(Obs{JD: jd, Mag: mag, Err: 0.1}); err != nil {
			t.Fatal(err)
		}
	}
	return f
}

// Figures worked by two independent programs, agreeing to 0.001 mag; tolerance
// 0.01.
func TestForecastFigures(t *testing.T) {
	for _, c := range []struct {
		n             int
		q10, q50, q90 float64
		r             float64
	}{
		{0, 8.861, 11.085, 13.020, math.NaN()}, {1, 9.118, 11.091, 12.170, math.NaN()}, {3, 10.881, 11.562, 12.201, 0.897},
		{10, 11.022, 11.626, 12.216, math.NaN()}, {30, 11.299, 11.707, 12.114, 0.992}, {100, 11.483, 11.830, 12.179, math.NaN()},
	} {
		f, err := sampleFilter(t, c.n).At(30)
		if err != nil {
			t.Fatal(err)
		}
		t.Logf("n %d: %.4f %.4f %.4f R %.4f", c.n, f.Quantile(0.1), f.Median(), f.Quantile(0.9), f.R)
		check.Near(t, f.Quantile(0.1), c.q10, 0.01, "10 %% quantile with %d magnitudes", c.n)
		check.Near(t, f.Median(), c.q50, 0.01, "median with %d magnitudes", c.n)
		check.Near(t, f.Quantile(0.9), c.q90, 0.01, "90 %% quantile with %d magnitudes", c.n)
		if !math.IsNaN(c.r) {
			check.Near(t, f.R, c.r, 0.0006, "resultant with %d magnitudes", c.n)
		}
	}
}
