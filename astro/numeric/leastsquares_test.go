package numeric

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"evenfall/astro/check"
)

func TestLeastSquares(t *testing.T) {
	var rows []Row
	for _, r := range check.Table(t, "testdata/astro/longley.csv").Rows() {
		rows = append(rows, Row{Value: r.Float("y"), Sigma: 1, Terms: []float64{1, r.Float("deflator"), r.Float("gnp"),
			r.Float("unemployed"), r.Float("armed"), r.Float("population"), r.Float("year")}})
	}
	fit, err := LeastSquares(rows)
	if err != nil {
		t.Fatal(err)
	}
	// NIST's certified values.
	for i, want := range []float64{-3482258.63459582, 15.0618722713733, -0.358191792925910e-1,
		-2.02022980381683, -1.03322686717359, -0.511041056535807e-1, 1829.15146461355} {
		check.Near(t, fit.Coef[i], want, 1e-9*math.Abs(want), "coefficient %d", i)
	}
	s := math.Sqrt(fit.Chi2 / float64(fit.Free))
	check.Near(t, s, 304.854073561965, 1e-9*304.9, "residual standard deviation")
	check.Near(t, s*math.Sqrt(fit.Cov[0][0]), 890420.383607373, 1e-9*890420, "standard error 0")
	check.Near(t, s*math.Sqrt(fit.Cov[6][6]), 455.478499142212, 1e-9*455.5, "standard error 6")
}

func TestLeastSquaresLine(t *testing.T) {
	// By hand: y = 1 + 2x at x = 0, 1, 4 with errors 1, 1, 2. The covariance is
	// the inverse of [[2.25, 2], [2, 5]], whose determinant is 7.25.
	fit, err := LeastSquares([]Row{
		{[]float64{1, 0}, 1, 1}, {[]float64{1, 1}, 3, 1}, {[]float64{1, 4}, 9, 2}})
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, fit.Coef[0], 1, 1e-13, "intercept")
	check.Near(t, fit.Coef[1], 2, 1e-13, "slope")
	check.Near(t, fit.Chi2, 0, 1e-24, "chi squared of a perfect line")
	check.Near(t, fit.Cov[0][0], 5/7.25, 1e-14, "variance of the intercept")
	check.Near(t, fit.Cov[1][1], 2.25/7.25, 1e-14, "variance of the slope")
	check.Near(t, fit.Cov[0][1], -2/7.25, 1e-14, "covariance")
	check.Near(t, fit.Cov[1][0], fit.Cov[0][1], 1e-15, "symmetry")
	if fit.Free != 1 {
		t.Errorf("%d degrees of freedom", fit.Free)
	}
}

func TestLeastSquaresFailures(t *testing.T) {
	for name, c := range map[string]struct {
		rows []Row
		want error
	}{
		"nothing":         {nil, ErrData},
		"no terms":        {[]Row{{nil, 1, 1}}, ErrData},
		"too few":         {[]Row{{[]float64{1, 2}, 1, 1}}, ErrData},
		"lengths":         {[]Row{{[]float64{1}, 1, 1}, {[]float64{1, 2}, 1, 1}}, ErrData},
		"no error":        {[]Row{{[]float64{1}, 1, 0}}, ErrData},
		"no number":       {[]Row{{[]float64{1}, math.NaN(), 1}}, ErrNotANumber},
		"dependent":       {[]Row{{[]float64{1, 2}, 1, 1}, {[]float64{2, 4}, 1, 1}, {[]float64{3, 6}, 1, 1}}, ErrSingular},
		"a column of 0":   {[]Row{{[]float64{1, 0}, 1, 1}, {[]float64{2, 0}, 1, 1}}, ErrSingular},
		"error no number": {[]Row{{[]float64{1}, 1, math.NaN()}}, ErrNotANumber},
	} {
		if _, err := LeastSquares(c.rows); !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
}

// TestLeastSquaresProperty: any line is found from points on it.
func TestLeastSquaresProperty(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		c0 := rapid.Float64Range(-100, 100).Draw(rt, "c0")
		c1 := rapid.Float64Range(-100, 100).Draw(rt, "c1")
		var rows []Row
		for i := range rapid.IntRange(2, 12).Draw(rt, "n") {
			x := float64(i) - 3
			sigma := rapid.Float64Range(0.1, 10).Draw(rt, "sigma")
			rows = append(rows, Row{[]float64{1, x}, c0 + c1*x, sigma})
		}
		fit, err := LeastSquares(rows)
		if err != nil {
			rt.Fatal(err)
		}
		if math.Abs(fit.Coef[0]-c0) > 1e-9 || math.Abs(fit.Coef[1]-c1) > 1e-9 {
			rt.Fatalf("got %v, want %v %v", fit.Coef, c0, c1)
		}
	})
}
