package light

import (
	"math"
	"testing"
	"time"

	"evenfall/astro/check"
	"evenfall/targets"
	"evenfall/targets/builtin"
	"evenfall/targets/stage"
)

// Binaries of the list whose faintest magnitude is mid-eclipse: outside it is
// not theirs; in eclipse none is brighter than outside. IP Peg has BP 15.27 and
// G 14.71 listed, V2051 Oph G 15.37 and BP 15.46; for DQ Her 18.08 and HU Aqr
// 19.8 are 1.5 mag too faint, +- 1.
func TestQuietOutOfEclipse(t *testing.T) {
	want := map[string]struct{ mag, within float64 }{"IP Peg": {15.27, 0.01}, "V2051 Oph": {15.4, 0.2}, "DQ Her": {16.58, 0.01}, "HU Aqr": {18.3, 0.01}}
	stars, err := builtin.Stars()
	if err != nil {
		t.Fatal(err)
	}
	found := 0
	for _, star := range stars {
		s := NewState(star, stage.Verdict{}, nil)
		for k := range 40 {
			f := s.At(now.Add(time.Duration(k)*17*time.Minute), Ask{})
			out, in := math.NaN(), math.NaN()
			best := 0.0
			for _, x := range f.States {
				if x.Name == "in eclipse" {
					in = x.Mag.Mags()
				} else if x.P > best {
					best, out = x.P, x.Mag.Mags()
				}
			}
			if in < out {
				t.Errorf("%s: %.2f in eclipse, %.2f outside", star.Name, in, out)
			}
		}
		w, ok := want[star.Name]
		if !ok {
			continue
		}
		found++
		f := forecast(star, Ask{})
		for _, x := range f.States {
			if x.Name == "quiescence" || x.Name == "low state" {
				check.Near(t, x.Mag.Mags(), w.mag, w.within, "%s %s", star.Name, x.Name)
			}
		}
		t.Logf("%s: %.2f, %.2f to %.2f: %s", star.Name, f.Mag.Mags(), f.Lo.Mags(), f.Hi.Mags(), f.Basis)
	}
	if found != len(want) {
		t.Errorf("%d of %d found", found, len(want))
	}
	// V471 Tau: 9.4 outside, 9.71 in eclipse: sd 0.31/3
	mag, sd := eclipseOf([]state{{p: 1, mag: 9.4, sd: 0.08}}, 9.71)
	check.Near(t, mag, 9.71, 1e-9, "mid-eclipse")
	check.Near(t, sd, 0.1033, 1e-3, "its sd")
	mag, _ = eclipseOf([]state{{p: 1, mag: 10, sd: 0.08}}, 9.71)
	check.Near(t, mag, 10, 1e-9, "never brighter than outside")
	if _, _, _, ok := outOfEclipse(&targets.Target{}, nil, 8, 12); ok {
		t.Error("a star that is not known to eclipse")
	}
}
