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
func knownGiants(t *testing.T, half byte) []giant {
	t.Helper()
	var out []giant
	for _, r := range check.Table(t, check.Shared(t, "data/giants_known_stage.csv"), check.PlainComments).Rows() {
		id := strings.TrimSuffix(r.String("KIC"), ".0")
		if sum := md5.Sum([]byte(id)); sum[0]&1 != half {
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

// score is how often the likelier stage is right, and the mean squared error
// of the probability, with the odds of helium burning multiplied by a factor.
func score(g *Grid, stars []giant, factor float64) (right, brier, rightBox float64) {
	var n, box float64
	for _, s := range stars {
		p := g.Posterior(s.Seen)
		rc, rest := p.P[targets.RC]*factor, p.P[targets.RGB]+p.P[targets.SG]+p.P[targets.EAGB]
		x, y, hit := rc/math.Max(rc+rest, 1e-9), 0., 0.
		if s.core {
			y = 1
		}
		if x > 0.5 == s.core {
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
	return right / n, brier / n, rightBox / box
}

// Red giants whose stage is known from their oscillations, Elsworth et al.
// 2019, half of them that no offset was measured on. The list holds twice as
// many giants for each clump star as the sky: exp(-0.75) for its odds.
func TestKnownGiants(t *testing.T) {
	stars := knownGiants(t, 1)
	for _, corrected := range []bool{false, true} {
		g := grid(t, corrected)
		for _, factor := range []float64{1, math.Exp(-0.75)} {
			right, brier, box := score(g, stars, factor)
			t.Logf("corrected %v, odds times %.2f: %d stars, right %.3f, Brier %.4f; in the clump box right %.3f", corrected, factor, len(stars), right, brier, box)
			if corrected && factor < 1 && (right < 0.875 || brier > 0.082 || box < 0.79) {
				t.Errorf("right %.3f, Brier %.4f, in the box %.3f", right, brier, box)
			}
		}
	}
}
