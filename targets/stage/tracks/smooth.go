package tracks

import "math"

// NewSmoothFormulas is [NewFormulas] with the radii of giants read between the
// metallicities of the models that the formulas were fitted to. The corrected
// grid is made of these.
//
//	log R = (1 - x) log R(Z1) + x log R(Z2),  x = log(Z/Z1) / log(Z2/Z1)
//
// Given, Returns: as for [NewFormulas].
//
// Notes:
//  1. At those seven metallicities the giant branch of the published fit cools
//     steadily by 0.055 dex of temperature per dex of Z; between them its
//     coefficients swing, by up to +0.03 dex at Z = 0.005 and -0.05 at 0.0025.
//
// Source: [cite.HurleyPolsTout2000] for what is read; the reading between is
// ours.
//
// Checked: TestSmooth.
func NewSmoothFormulas(z float64) (*Formulas, error) {
	f, err := NewFormulas(z)
	if err != nil {
		return nil, err
	}
	models := [...]float64{1e-4, 3e-4, 1e-3, 4e-3, 1e-2, 2e-2, 3e-2}
	i := 0
	for i < len(models)-2 && z > models[i+1] {
		i++
	}
	x := math.Log(z/models[i]) / math.Log(models[i+1]/models[i])
	if x < 1e-6 || x > 1-1e-6 {
		return f, nil
	}
	below, err := NewFormulas(models[i])
	if err != nil {
		return nil, err
	}
	above, err := NewFormulas(models[i+1])
	if err != nil {
		return nil, err
	}
	f.below, f.above, f.mix = below, above, x
	f.join()
	return f, nil
}
