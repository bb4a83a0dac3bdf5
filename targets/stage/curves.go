package stage

// Curves returns the lines that the judgement rests on, for drawing: the
// zero-age main sequence, the red clump, lives of some masses, cooling lines
// of white dwarfs with ages, and the strips of instability.
//
// Given:
//   - massMsun: a mass whose life is wanted among them, Msun; 0: none beyond
//     the usual ones.
//   - feh: metallicity of the lives, dex.
func (m *Models) Curves(massMsun, feh float64) []Curve { return nil }
