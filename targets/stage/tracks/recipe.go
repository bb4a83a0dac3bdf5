package tracks

import "math"

// Edition identifies the recipe of the population grid and the corrections to
// the tracks; it changes when either does, and with it every judgement.
const Edition = "tracks 1 (Hurley, Pols & Tout 2000, radii of giants read between model metallicities; wind 0.4; 12 Gyr of stars; giants moved to measured ones)"

// Recipe says which stars a population grid is made of.
type Recipe struct {
	FeH             []float64 // nodes in [Fe/H], dex, increasing
	MeanFeH, SigFeH float64   // of the stars, a Gaussian
	FromMyr, ToMyr  float64   // ages of the stars, evenly spread
	FromMass        float64   // Msun: masses even in the logarithm,
	ToMass          float64
	Masses          int
	Dwarfs          int     // masses between 0.1 and FromMass, likewise
	Eta             float64 // factor of the wind
	Corrected       bool    // move giants to where measured ones stand
}

// Disc returns the recipe for stars of the solar neighbourhood: constant star
// formation over 12 Gyr, [Fe/H] -0.1 +- 0.22, wind 0.4.
//
// Source: common practice, no source.
func Disc() Recipe {
	return Recipe{FeH: []float64{-0.8, -0.5, -0.3, -0.1, 0.1, 0.3}, MeanFeH: -0.1, SigFeH: 0.22, ToMyr: 12000,
		FromMass: 0.75, ToMass: 8, Masses: 110, Dwarfs: 60, Eta: 0.4, Corrected: true}
}

// Old returns the recipe for thick disc and halo: 9 to 12.5 Gyr, [Fe/H] -0.7
// +- 0.4.
//
// Source: common practice, no source.
func Old() Recipe {
	return Recipe{FeH: []float64{-1.9, -1.5, -1.1, -0.8, -0.5, -0.2}, MeanFeH: -0.7, SigFeH: 0.4, FromMyr: 9000, ToMyr: 12500,
		FromMass: 0.7, ToMass: 1.3, Masses: 110, Dwarfs: 60, Eta: 0.4, Corrected: true}
}

// valid tells whether a grid can be made of the recipe.
func (r *Recipe) valid() bool {
	ok := len(r.FeH) > 0 && len(r.FeH) <= mostNodes && r.SigFeH > 0 && r.FromMyr >= 0 && r.ToMyr > r.FromMyr && r.ToMyr < 20000 &&
		r.FromMass >= LeastMass && r.ToMass > r.FromMass && r.ToMass <= MostMass && r.Masses >= 2 && r.Masses <= 2000 &&
		r.Dwarfs >= 0 && r.Dwarfs <= 2000 && r.Eta >= 0 && r.Eta <= 3 && !math.IsNaN(r.MeanFeH)
	for i, v := range r.FeH {
		ok = ok && v > -2.4 && v < 1 && (i == 0 || v > r.FeH[i-1])
	}
	return ok
}

// born is how many stars are born per unit of mass.
//
//	M^-1.3 below 0.5 solar masses, M^-2.3 above, joined
//
// Source: [cite.Kroupa2001], equation 2; the paper was not at hand.
//
// Checked: TestBorn.
func born(m float64) float64 {
	if m < 0.5 {
		return 2 * pow(m, -1.3)
	}
	return pow(m, -2.3)
}

// Metals returns Z for [Fe/H], within the range of the formulas, and the
// [Fe/H] that it stands for.
//
//	Z = 0.02 10^[Fe/H], between 0.0001 and 0.03
//
// Source: [cite.HurleyPolsTout2000], whose Sun has Z = 0.02.
//
// Checked: TestMetals.
func Metals(feH float64) (z, effective float64) {
	z = clamp(0.02*pow10(feH), LeastZ, MostZ)
	return z, math.Log10(z / 0.02)
}

// Where measured giants stand against the tracks: offsets in log temperature,
// dex, at solar metallicity, per dex of [Fe/H] and per dex of luminosity; the
// luminosities between which the first was measured; and the map of the
// luminosity of the clump.
//
// Source: measured on the giants of known stage of [cite.ElsworthEtAl2019],
// with the colours of [cite.CasagrandeEtAl2021] and the bolometric corrections
// of [cite.AndraeEtAl2018].
const (
	giantShift  = 0.0047
	giantMetal  = 0.037
	giantRise   = 0.019
	giantMiddle = 1.75
	giantLow    = 1.2
	giantHigh   = 2.3
	giantFade   = 0.7 // dex of luminosity to either side over which the shift fades
	giantSlope  = 0.019
	clumpShift  = 0.0035
	clumpMetal  = 0.034
	clumpSlope  = 0.032
	clumpTrack  = 1.891
	clumpStars  = 1.739
	clumpWidth  = 3.0
	clumpFade   = 0.5  // Msun above the flash mass over which the map fades
	clumpCool   = 3.74 // log temperature at which the map begins to fade,
	clumpHot    = 3.85 // and has faded
)

// smooth rises from 0 at a to 1 at b without corners.
func smooth(x, a, b float64) float64 {
	t := clamp((x-a)/(b-a), 0, 1)
	return t * t * (3 - 2*t)
}

// correct moves a point of a track to where measured giants stand.
//
//	giants: log T += 0.0047 + 0.037 [Fe/H] + 0.019 (log L - 1.75)
//	clump:  log L -> 1.739 + (log L - 1.891) / 3
//	        log T += 0.0035 + 0.034 [Fe/H]
//
// Given:
//   - feH, effective: [Fe/H] wanted, and that of the formulas, which stop at
//     Z = 0.03; the stars' own slope bridges the rest.
//
// Notes:
//  1. The first is measured at log L 1.2 to 2.3; it fades over 0.7 dex to
//     either side, and the early asymptotic giant branch moves along, as it
//     lies beside the giant branch for the same reason.
//  2. The second holds for stars that ignite helium in a flash; it fades over
//     the 0.5 solar masses above the flash mass, where nothing was measured,
//     and between 5500 and 7080 K.
//
// Source: as for the constants.
//
// Checked: TestCorrect, TestKnownGiants.
func (f *Formulas) correct(p *Point, feH, effective float64) (logL, logT float64) {
	logL, logT = p.LogL, p.LogT
	switch p.Phase {
	case PhaseRGB, PhaseEAGB:
		w := smooth(logL, giantLow-giantFade, giantLow) * smooth(logL, giantHigh+giantFade, giantHigh)
		shift := giantShift + giantMetal*effective - giantSlope*(feH-effective)
		logT += w * (shift + giantRise*(clamp(logL, giantLow, giantHigh)-giantMiddle))
	case PhaseClump, PhaseHB, PhaseSecondClump:
		w := smooth(p.Mass, f.mHeF+clumpFade, f.mHeF) * smooth(logT, clumpHot, clumpCool)
		logL += w * (clumpStars + (logL-clumpTrack)/clumpWidth - logL)
		logT += w * (clumpShift + clumpMetal*effective - clumpSlope*(feH-effective))
	}
	return logL, logT
}
