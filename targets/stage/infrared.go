package stage

import (
	"fmt"

	"evenfall/astro/cite"
	"evenfall/targets"
)

// Limits of W_RP - W_K among the long-period variables of the Galaxy.
//
// Source: [cite.LebzelterEtAl2018]; the limits as one later work has them.
const (
	carbonRich  = 0.9
	carbonOnly  = 1.7
	rpWeight    = 1.3   // of BP-RP in W_RP
	kWeight     = 0.686 // of J-K in W_K
	shellJK     = 2.0   // J-K of a star behind its own dust
	warmDustW   = 0.6   // W1-W2 of the same
	coolGiantJK = 0.9   // below, no giant that pulsates strongly
)

// oxygenRich are spectra that say what the colours would guess.
var oxygenRich = match(`^g?[MS]\d`)

// infraredOf weighs what the infrared says of a cool giant: carbon in its
// atmosphere, or a shell of its own dust. Either belongs to the thermally
// pulsing giant branch.
//
//	W_RP = RP - 1.3 (BP-RP),  W_K = K - 0.686 (J-K),  D = W_RP - W_K
//
// Notes:
//  1. D above 0.9 is evidence of 5 to 1, no decision: mass from a companion
//     makes carbon stars too.
//
// Source: [cite.LebzelterEtAl2018]; the limits as one later work has them.
//
// Checked: TestInfrared.
func infraredOf(t *targets.Target) (factor, bool) {
	if t.Kind != targets.Giant && t.Kind != targets.LPV && t.Kind != "" || oxygenRich.MatchString(t.Physics.SpType) {
		return factor{}, false
	}
	j, k := t.Mags["J"], t.Mags["K"]
	if !finite(j) || !finite(k) || j.Value-k.Value < coolGiantJK {
		return factor{}, false
	}
	jk := j.Value - k.Value
	w1, w2 := t.Mags["W1"], t.Mags["W2"]
	switch dusty := finite(w1) && finite(w2) && w1.Value-w2.Value > warmDustW; {
	case jk > shellJK:
		return factor{what: fmt.Sprintf("J-K = %.2f: behind dust of its own, losing mass", jk), source: practice,
			weight: shares{targets.TPAGB: 1, targets.PAGB: 0.3, targets.RSG: 0.3, targets.ACC: 0.3, targets.Neb: 0.3}, rest: 0.03}, true
	case dusty:
		return factor{what: fmt.Sprintf("W1-W2 = %.2f: warm dust, losing mass", w1.Value-w2.Value), source: practice,
			weight: shares{targets.TPAGB: 1, targets.PAGB: 1, targets.RSG: 0.5, targets.ACC: 0.5, targets.Neb: 1}, rest: 0.1}, true
	}
	bp, rp := t.Mags["BP"], t.Mags["RP"]
	if !finite(bp) || !finite(rp) {
		return factor{}, false
	}
	d := rp.Value - rpWeight*(bp.Value-rp.Value) - k.Value + kWeight*jk
	if d <= carbonRich {
		return factor{}, false
	}
	words := "carbon rich"
	if d > carbonOnly {
		words = "very rich in carbon"
	}
	return factor{what: fmt.Sprintf("W_RP - W_K = %.2f: %s", d, words),
		source: cite.LebzelterEtAl2018.String() + "; limits as one later work has them",
		weight: shares{targets.TPAGB: 1}, rest: 0.2}, true
}
