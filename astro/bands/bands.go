// Package bands knows the photometric bands: where they lie, how their zero
// points differ, and how a star's magnitude in one follows from others, by
// published relations inside their ranges and, for giants, by the mean colours
// of their spectral type. It never extrapolates, gives every magnitude with
// its error and the way it came by, and refuses with a reason. It knows no
// time: magnitudes of a variable star are taken as of one moment. White dwarfs
// beyond V from Gaia, and stars with emission lines, are not its business.
package bands

import (
	"math"

	"evenfall/astro"
	"evenfall/astro/cite"
)

// Band names a photometric band. Case counts: i and I, r and R, u and U, g and
// G are different bands.
type Band string

// The bands, R and I those of Cousins, J H K those of 2MASS, u g r i z those
// of the Sloan survey.
const (
	U  Band = "U"
	B  Band = "B"
	V  Band = "V"
	R  Band = "R"
	I  Band = "I"
	SU Band = "u"
	SG Band = "g"
	SR Band = "r"
	SI Band = "i"
	SZ Band = "z"
	G  Band = "G"
	BP Band = "BP"
	RP Band = "RP"
	J  Band = "J"
	H  Band = "H"
	K  Band = "K"
	W1 Band = "W1"
	W2 Band = "W2"
)

// All lists the bands by system, each from blue to red.
var All = []Band{U, B, V, R, I, SU, SG, SR, SI, SZ, G, BP, RP, J, H, K, W1, W2}

// System is what zero magnitude means.
type System string

// The systems: relative to Vega, or to a flat spectrum of 3631 Jy.
const (
	Vega System = "Vega"
	AB   System = "AB"
)

// Info is what is known of a band.
type Info struct {
	Band       Band
	System     System
	Wavelength astro.Wavelength // effective; of the Gaia bands the mean one
	FromMemory bool             // the wavelength was checked against no publication
	// ABOffset is AB magnitude less the band's own one; HasAB tells whether it
	// is known.
	ABOffset float64
	HasAB    bool
	Source   cite.Ref
}

// sdssU is u of the survey less AB.
const sdssU = 0.042

// infos is the table behind [Of]: wavelengths in angstrom, AB - own system in
// magnitudes. That of the Gaia bands is the difference of two zero points, AB
// less Vega: 25.8010 - 25.6874, 25.3540 - 25.3385, 25.1040 - 24.7479.
//
// Source: [cite.BessellCastelliPlez1998], table A2 (U to K);
// [cite.FukugitaEtAl1996] (u to z); [cite.RielloEtAl2021] (G, BP, RP);
// [cite.WrightEtAl2010] (W1, W2, from memory).
var infos = map[Band]Info{
	U:  bessell(U, 3660, 0.768),
	B:  bessell(B, 4380, -0.122),
	V:  bessell(V, 5450, -0.001),
	R:  bessell(R, 6410, 0.184),
	I:  bessell(I, 7980, 0.442),
	J:  bessell(J, 12200, 0.897),
	H:  bessell(H, 16300, 1.378),
	K:  bessell(K, 21900, 1.885),
	SU: sloan(SU, 3551, -sdssU),
	SG: sloan(SG, 4686, 0),
	SR: sloan(SR, 6166, 0),
	SI: sloan(SI, 7480, 0),
	SZ: sloan(SZ, 8932, 0),
	G:  gaia(G, 6390.7, 25.8010-25.6874),
	BP: gaia(BP, 5182.6, 25.3540-25.3385),
	RP: gaia(RP, 7825.1, 25.1040-24.7479),
	W1: {Band: W1, System: Vega, Wavelength: astro.Micron(3.4), FromMemory: true, Source: cite.WrightEtAl2010},
	W2: {Band: W2, System: Vega, Wavelength: astro.Micron(4.6), FromMemory: true, Source: cite.WrightEtAl2010},
}

func bessell(b Band, angstrom, ab float64) Info {
	return Info{Band: b, System: Vega, Wavelength: astro.Nm(angstrom / 10), ABOffset: ab, HasAB: true, Source: cite.BessellCastelliPlez1998}
}

func sloan(b Band, angstrom, ab float64) Info {
	return Info{Band: b, System: AB, Wavelength: astro.Nm(angstrom / 10), ABOffset: ab, HasAB: true, Source: cite.FukugitaEtAl1996}
}

func gaia(b Band, angstrom, ab float64) Info {
	return Info{Band: b, System: Vega, Wavelength: astro.Nm(angstrom / 10), ABOffset: ab, HasAB: true, Source: cite.RielloEtAl2021}
}

// Of returns what is known of a band.
//
// Returns:
//   - ok false where the name is none of [All].
//
// Checked: TestInfos, against the printed values.
func Of(b Band) (Info, bool) {
	i, ok := infos[b]
	return i, ok
}

// ToAB returns the AB magnitude of a magnitude in the band's own system.
//
//	m_AB = m + offset
//
// Returns:
//   - ok false for W1 and W2, whose offset is not given here, and for bands
//     that are none.
//
// Notes:
//  1. The offset holds for the band's zero point, so it is the same for stars
//     of every colour.
//  2. The survey's u is fainter than AB by 0.042: m_AB = u - 0.042.
//
// Checked: TestInfos.
func ToAB(b Band, m astro.Mag) (ab astro.Mag, ok bool) {
	i, ok := infos[b]
	if !ok || !i.HasAB || math.IsNaN(m.Mags()) {
		return astro.Mag{}, false
	}
	return m.Fainter(i.ABOffset), true
}
