package light

import (
	"math"
	"testing"

	"evenfall/astro/bands"
	"evenfall/targets"
	"evenfall/targets/builtin"
)

// Every magnitude of the built-in list's stars without a type of variable,
// left out and carried from the others: of 129 the 80 % intervals hold 76.7 %,
// of J and K alone 53 %.
func TestLeaveOneOut(t *testing.T) {
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	in, all, square := map[bands.Band]int{}, map[bands.Band]int{}, 0.0
	inside, count := 0, 0
	for i := range stars {
		star := &stars[i]
		if star.Var.Type != "" || star.Kind == targets.PN {
			continue
		}
		s := newSteady(star, nil)
		for b, m := range s.known {
			rest := map[bands.Band]bands.Measure{}
			for o, x := range s.known {
				if o != b {
					rest[o] = x
				}
			}
			c, err := bands.Carry(rest, b, s.hints)
			if err != nil {
				continue
			}
			own := m.Err
			if !(own > 0) {
				own = bands.AssumedErr
			}
			z := (m.Mag - c.Mag) / math.Sqrt(c.Err*c.Err+own*own+math.Pow(s.intrinsic(targets.Band(b)), 2))
			all[b]++
			count++
			square += math.Min(z*z, 25)
			if math.Abs(z) < 1.2816 {
				in[b]++
				inside++
			}
			if math.Abs(z) > 4 {
				t.Logf("%s %s: %.2f carried %.2f +- %.2f: %s", star.Name, b, m.Mag, c.Mag, c.Err, c.Route)
			}
		}
	}
	for b, n := range all {
		t.Logf("%s: %d of %d", b, in[b], n)
	}
	share := float64(inside) / float64(count)
	t.Logf("%d of %d, %.1f %%; rms %.2f sigma", inside, count, 100*share, math.Sqrt(square/float64(count)))
	if share < leastCoverage || count < 100 {
		t.Errorf("80 %% intervals hold %.1f %% of %d", 100*share, count)
	}
}

// leastCoverage is under what the test reaches by a few in a hundred.
const leastCoverage = 0.70
