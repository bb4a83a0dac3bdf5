package numeric

import "math"

// Fit is the outcome of a linear least-squares fit.
type Fit struct {
	Coef []float64   // one for each column
	Cov  [][]float64 // their covariance where Sigma is the true error of a row
	Chi2 float64     // sum of squared residuals in units of Sigma
	Free int         // rows less columns; Chi2/Free is near 1 for honest errors
}

// Row is one equation of a fit: the sum of coefficients times Terms is Value,
// give or take Sigma.
type Row struct {
	Terms []float64
	Value float64
	Sigma float64 // standard error, positive
}

// singular is how small a diagonal element may get, against the longest column
// scaled to 1, before columns count as dependent. Doubles give 2e-16; four
// digits are wanted to be left.
const singular = 1e-12

// LeastSquares fits coefficients so that the sum of squared residuals is least.
//
//	minimise Σ [(Value - Σ coef·Terms) / Sigma]²
//
// Given:
//   - rows: at least as many as coefficients, all with the same number of Terms.
//
// Returns:
//   - the fit.
//   - [ErrData], [ErrNotANumber], or [ErrSingular] where columns depend on each
//     other.
//
// Notes:
//  1. Columns are scaled, then made upper triangular by Householder's
//     reflections; the normal equations are not formed, so half as many digits
//     are lost.
//  2. Cov is that of the errors given; multiply by Chi2/Free where Sigma is 1
//     for want of better.
//
// Source: [cite.GolubVanLoan1996], algorithm 5.3.2.
//
// Checked: TestLeastSquares, against testdata/astro/longley.csv, to 1e-9 of
// each certified coefficient.
func LeastSquares(rows []Row) (Fit, error) {
	a, y, err := scaledRows(rows)
	if err != nil {
		return Fit{}, err
	}
	n, m := len(rows), len(rows[0].Terms)
	norm := make([]float64, m)
	for j := range m {
		for i := range n {
			norm[j] = math.Hypot(norm[j], a[i][j])
		}
		if norm[j] == 0 {
			return Fit{}, ErrSingular
		}
		for i := range n {
			a[i][j] /= norm[j]
		}
	}
	for j := range m {
		if !reflect(a, y, j) {
			return Fit{}, ErrSingular
		}
	}
	inv := invertUpper(a, m)
	fit := Fit{Coef: make([]float64, m), Cov: make([][]float64, m), Free: n - m}
	for i := range m {
		fit.Cov[i] = make([]float64, m)
		for k := i; k < m; k++ {
			fit.Coef[i] += inv[i][k] * y[k] / norm[i]
		}
		for j := range m {
			for k := max(i, j); k < m; k++ {
				fit.Cov[i][j] += inv[i][k] * inv[j][k] / (norm[i] * norm[j])
			}
		}
	}
	for i := m; i < n; i++ {
		fit.Chi2 += y[i] * y[i]
	}
	if !finite(fit.Coef...) {
		return Fit{}, ErrSingular
	}
	return fit, nil
}

// scaledRows copies the equations, each divided by its error.
func scaledRows(rows []Row) (a [][]float64, y []float64, err error) {
	if len(rows) == 0 || len(rows[0].Terms) == 0 || len(rows) < len(rows[0].Terms) {
		return nil, nil, ErrData
	}
	for _, r := range rows {
		if len(r.Terms) != len(rows[0].Terms) || r.Sigma <= 0 {
			return nil, nil, ErrData
		}
		if !finite(r.Terms...) || !finite(r.Value, r.Sigma) {
			return nil, nil, ErrNotANumber
		}
		line := make([]float64, len(r.Terms))
		for j, v := range r.Terms {
			line[j] = v / r.Sigma
		}
		a, y = append(a, line), append(y, r.Value/r.Sigma)
	}
	return a, y, nil
}

// reflect makes column j zero below the diagonal, here and in y; false where
// nothing is left of the column.
func reflect(a [][]float64, y []float64, j int) bool {
	size := 0.0
	for i := j; i < len(a); i++ {
		size = math.Hypot(size, a[i][j])
	}
	if size < singular {
		return false
	}
	size = math.Copysign(size, a[j][j])
	v := make([]float64, len(a))
	for i := j; i < len(a); i++ {
		v[i] = a[i][j] / size
	}
	v[j]++
	// The reflection is 1 - v vᵀ / v[j].
	for k := j; k < len(a[0]); k++ {
		s := 0.0
		for i := j; i < len(a); i++ {
			s += v[i] * a[i][k]
		}
		for i := j; i < len(a); i++ {
			a[i][k] -= s / v[j] * v[i]
		}
	}
	s := 0.0
	for i := j; i < len(a); i++ {
		s += v[i] * y[i]
	}
	for i := j; i < len(a); i++ {
		y[i] -= s / v[j] * v[i]
	}
	return true
}

// invertUpper inverts the upper triangle of a, m by m.
func invertUpper(a [][]float64, m int) [][]float64 {
	inv := make([][]float64, m)
	for i := m - 1; i >= 0; i-- {
		inv[i] = make([]float64, m)
		inv[i][i] = 1 / a[i][i]
		for j := i + 1; j < m; j++ {
			s := 0.0
			for k := i + 1; k <= j; k++ {
				s += a[i][k] * inv[k][j]
			}
			inv[i][j] = -s / a[i][i]
		}
	}
	return inv
}
