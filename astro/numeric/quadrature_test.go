package numeric

import (
	"errors"
	"math"
	"testing"

	"evenfall/astro/check"
)

// integrands are the functions of testdata/astro/integrals.csv.
var integrands = map[string]func(float64) float64{
	"cubic":    func(x float64) float64 { return x * x * x },
	"reversed": func(x float64) float64 { return x * x * x },
	"arctan":   func(x float64) float64 { return 4 / (1 + x*x) },
	"sine":     math.Sin,
	"gauss":    func(x float64) float64 { return math.Exp(-x * x) },
	"exp":      math.Exp,
	"log2":     func(x float64) float64 { return 1 / x },
	"root":     math.Sqrt,
	"xlog":     func(x float64) float64 { return x * math.Log(x) },
	"bessel":   func(x float64) float64 { return math.Cos(math.Sin(x)) },
}

func TestIntegrals(t *testing.T) {
	for _, row := range check.Table(t, "testdata/astro/integrals.csv").Rows() {
		name := row.String("name")
		f := integrands[name]
		if f == nil {
			t.Fatalf("%s: no integrand %q", row.Where(), name)
		}
		lo, hi, want := row.Float("lo"), row.Float("hi"), row.Float("value")
		if n := int(row.Float("simpson_panels")); n > 0 {
			got, err := Simpson(f, lo, hi, n)
			if err != nil {
				t.Errorf("%s: %v", name, err)
			}
			check.Near(t, got, want, row.Float("simpson_tol"), "%s, Simpson, %d panels", name, n)
		}
		n := int(row.Float("gauss_nodes"))
		got, err := NewGauss(n).Over(f, lo, hi)
		if err != nil {
			t.Errorf("%s: %v", name, err)
		}
		check.Near(t, got, want, row.Float("gauss_tol"), "%s, Gauss, %d nodes", name, n)
	}
}

// TestGaussNodes: nodes and weights from Abramowitz & Stegun 1964, table 25.4.
func TestGaussNodes(t *testing.T) {
	for _, c := range []struct{ nodes, weights []float64 }{
		{[]float64{0}, []float64{2}},
		{[]float64{-0.577350269189626, 0.577350269189626}, []float64{1, 1}},
		{[]float64{-0.774596669241483, 0, 0.774596669241483}, []float64{0.555555555555556, 0.888888888888889, 0.555555555555556}},
		{[]float64{-0.906179845938664, -0.538469310105683, 0, 0.538469310105683, 0.906179845938664},
			[]float64{0.236926885056189, 0.478628670499366, 0.568888888888889, 0.478628670499366, 0.236926885056189}},
	} {
		g := NewGauss(len(c.nodes))
		for i := range c.nodes {
			check.Near(t, g.node[i], c.nodes[i], 1e-15, "node %d of %d", i, len(c.nodes))
			check.Near(t, g.weight[i], c.weights[i], 1e-15, "weight %d of %d", i, len(c.nodes))
		}
	}
	for n := 1; n <= gaussMost; n++ {
		sum := 0.0
		g := NewGauss(n)
		for i, w := range g.weight {
			sum += w
			if i > 0 && g.node[i] <= g.node[i-1] {
				t.Fatalf("%d nodes: out of order at %d", n, i)
			}
		}
		check.Near(t, sum, 2, 1e-12, "sum of %d weights", n)
	}
}

func TestQuadratureFailures(t *testing.T) {
	bad := func(x float64) float64 { return math.Log(x) }
	if v, err := Simpson(bad, 0, 1, 10); !errors.Is(err, ErrNotANumber) || !math.IsNaN(v) {
		t.Errorf("Simpson across a pole: %v %v", v, err)
	}
	if v, err := NewGauss(5).Over(bad, -1, 1); !errors.Is(err, ErrNotANumber) || !math.IsNaN(v) {
		t.Errorf("Gauss where undefined: %v %v", v, err)
	}
	for _, n := range []int{0, -1, gaussMost + 1} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("a rule of %d nodes was made", n)
				}
			}()
			NewGauss(n)
		}()
	}
	odd, err := Simpson(math.Sin, 0, math.Pi, 3) // rounded up to 4
	if err != nil {
		t.Fatal(err)
	}
	check.Near(t, odd, math.Pi/12*(4*math.Sin(math.Pi/4)+2+4*math.Sin(3*math.Pi/4)), 1e-15, "three panels become four")
}
