package tracks

import (
	"crypto/md5"
	"math"
	"strings"
	"testing"

	"evenfall/astro/check"
	"evenfall/astro/numeric"
	"evenfall/targets"
)

// casagrande is the temperature of a giant, log g 2.5, from (G-Ks)0 and
// [Fe/H]: Casagrande et al. 2021.
func casagrande(c, feH float64) float64 {
	const g = 2.5
	return 8031.7804 - 1815.3523*c + 70.7201*c*c*c - 1.7309*math.Pow(c, 5) + g*(252.9647-342.0817*c+161.3031*c*c-26.7714*c*c*c) +
		feH*(-120.1133+42.6723*c+10.0433*g*c)
}

// andrae is the bolometric correction in G: Andrae et al. 2018.
func andrae(teffK float64) float64 {
	d := teffK - 5772
	if teffK < 4000 {
		return 1.749 + 1.977e-3*d + 3.737e-7*d*d - 8.966e-11*d*d*d - 4.183e-14*d*d*d*d
	}
	return 6e-2 + 6.731e-5*d - 6.647e-8*d*d + 2.859e-11*d*d*d - 7.197e-15*d*d*d*d
}

// giant is a red giant of known stage on the diagram.
type giant struct {
	Seen
	core bool    // burns helium
	mK   float64 // absolute Ks
}

// knownGiants reads the half of the list that no constant was fitted to:
// lowest bit of the first byte of the MD5 of the number. Temperature and
// [Fe/H] are spectroscopic; parallaxes with 0.03 mas added where they look
// like EDR3, 0.052 where like DR2.
func knownGiants(t *testing.T) []giant {
	t.Helper()
	var out []giant
	for _, r := range check.Table(t, check.Shared(t, "data/giants_known_stage.csv"), check.PlainComments).Rows() {
		id := strings.TrimSuffix(r.String("KIC"), ".0")
		if sum := md5.Sum([]byte(id)); sum[0]&1 == 0 {
			continue
		}
		plx, err := r.Float("parallax"), r.Float("parallax_error")
		if err < 0.0155 {
			plx += 0.030
		} else {
			plx += 0.052
		}
		teff, feH := r.Float("teff_apogee"), r.Float("feh")
		mK := r.Float("Ks") + 5*math.Log10(plx) - 10 - 0.306*r.Float("ebv")
		c, e := numeric.Root(func(c float64) float64 { return casagrande(c, feH) - teff }, 1.2, 3.6, 1e-6)
		if e != nil {
			continue
		}
		logL := 0.4 * (4.74 - mK - c - andrae(teff))
		out = append(out, giant{Seen{LogT: math.Log10(teff), LogTErr: 50 / teff / math.Ln10, LogL: logL, LogLErr: math.Hypot(0.4*2.171*err/plx, 0.02),
			FeH: feH, FeHErr: 0.05, HasFeH: true, Floor: true}, strings.HasPrefix(r.String("elsworth2019_consensus"), "RC") || strings.Contains(r.String("elsworth2019_consensus"), "CL"), mK})
	}
	return out
}

// Red giants whose stage is known from their oscillations, Elsworth et al.
// 2019: the corrected tracks, no constant fitted to this half, a prior of the
// sky. What was reached with offsets fitted alike elsewhere: raw 0.893 right
// and mean squared error 0.081, corrected 0.904 and 0.067.
func TestKnownGiants(t *testing.T) {
	stars := knownGiants(t)
	for _, corrected := range []bool{false, true} {
		g := grid(t, corrected)
		right, brier, n := 0., 0., 0.
		rightBox, box := 0., 0.
		for _, s := range stars {
			p := g.Posterior(s.Seen)
			rc, rgb := p.P[targets.RC], p.P[targets.RGB]+p.P[targets.SG]+p.P[targets.EAGB]
			x, y := 0.5, 0.
			if rc+rgb > 0 {
				x = rc / (rc + rgb)
			}
			if s.core {
				y = 1
			}
			hit := 0.
			if (x > 0.5) == s.core {
				hit = 1
			}
			n++
			right += hit
			brier += (x - y) * (x - y)
			if math.Abs(s.mK+1.6) < 0.4 {
				box++
				rightBox += hit
			}
		}
		t.Logf("corrected %v: %g stars, right %.3f, Brier %.4f; clump box %.3f of %g", corrected, n, right/n, brier/n, rightBox/box, box)
		if corrected && (right/n < 0.89 || brier/n > 0.080) {
			t.Errorf("right %.3f, Brier %.4f", right/n, brier/n)
		}
	}
}
