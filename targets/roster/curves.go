package roster

import "evenfall/targets/stage"

// Curves returns the lines of the diagram that the judgement of this list
// rests on; see [stage.Models.Curves].
//
// Given:
//   - massMsun: a mass whose life is wanted among them, Msun; 0: no more than
//     the usual ones.
//   - feh: metallicity of the lives, dex.
func (r *Roster) Curves(massMsun, feh float64) []stage.Curve {
	return r.models.Stage.Curves(massMsun, feh)
}
