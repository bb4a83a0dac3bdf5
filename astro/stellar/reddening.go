package stellar

import "math"

// TrueEBV is a reddening E(B-V) of the star itself, on the scale of the stars:
// A_V = 3.1 E(B-V). Magnitudes.
type TrueEBV float64

// MapEBV is a reddening E(B-V) as dust maps give it, on the scale of the first
// all-sky map, which is too large. Magnitudes.
type MapEBV float64

const (
	// mapToTrue puts a map's reddening on the true scale.
	//
	// Source: [cite.SchlaflyFinkbeiner2011].
	mapToTrue = 0.86
	// rV is A_V / E(B-V) of common dust.
	//
	// Source: [cite.CardelliEtAl1989].
	rV = 3.1
	// Per unit of map reddening: V and I seen in one copy of
	// [cite.SchlaflyFinkbeiner2011], Ks in another.
	avPerMap, aiPerMap, aksPerMap = 2.742, 1.505, 0.310
	// aksCasagrande is A_Ks per unit of map reddening that goes with [MapEBV.EGK].
	//
	// Source: [cite.CasagrandeEtAl2021].
	aksCasagrande = 0.306
	// Per unit of true reddening.
	//
	// Source: [cite.CasagrandeVandenBerg2018].
	rG, rBP, rRP = 2.740, 3.374, 2.035
	// dustHeightPc is the height of the dust over the plane within which all
	// but 1/e of it lies. Common practice, no source.
	dustHeightPc = 125.0
)

// True returns the reddening on the true scale, 0.86 of the map's.
//
// Source: [cite.SchlaflyFinkbeiner2011].
//
// Checked: TestReddening.
func (e MapEBV) True() TrueEBV { return TrueEBV(mapToTrue * float64(e)) }

// Map returns the reddening on the scale of the maps, for relations made with
// it.
//
// Checked: TestReddening.
func (e TrueEBV) Map() MapEBV { return MapEBV(float64(e) / mapToTrue) }

// AV returns the extinction in V, magnitudes: 3.1 E(B-V).
//
// Source: [cite.CardelliEtAl1989].
//
// Checked: TestReddening.
func (e TrueEBV) AV() float64 { return rV * float64(e) }

// AV returns the extinction in V by the table made for the maps, magnitudes.
//
//	A_V = 2.742 E_map
//
// Notes:
//  1. That is 3 per cent more than 3.1 x 0.86 E_map, since the table integrates
//     over the band.
//
// Source: [cite.SchlaflyFinkbeiner2011].
//
// Checked: TestReddening.
func (e MapEBV) AV() float64 { return avPerMap * float64(e) }

// AI returns the extinction in I, magnitudes: 1.505 E_map.
//
// Source: [cite.SchlaflyFinkbeiner2011].
//
// Checked: TestReddening.
func (e MapEBV) AI() float64 { return aiPerMap * float64(e) }

// AKs returns the extinction in Ks, magnitudes: 0.310 E_map.
//
// Source: [cite.SchlaflyFinkbeiner2011].
//
// Checked: TestReddening.
func (e MapEBV) AKs() float64 { return aksPerMap * float64(e) }

// AKsCasagrande returns the extinction in Ks that goes with [MapEBV.EGK],
// magnitudes: 0.306 E_map.
//
// Source: [cite.CasagrandeEtAl2021].
//
// Checked: TestReddening.
func (e MapEBV) AKsCasagrande() float64 { return aksCasagrande * float64(e) }

// EGK returns by how much dust reddens G-Ks, magnitudes.
//
//	E(G-Ks) = (2.609 - 0.475 x + 0.053 x² - 0.306) E_map      x = (BP-RP)0
//
// Given:
//   - bprp0: colour without reddening; not a number stands for 1.15, that of
//     the red clump, where it gives 1.827. Kept between 0 and 2.5.
//
// Notes:
//  1. Giants of the Kepler field give 1.81 to 2.07.
//
// Source: [cite.CasagrandeEtAl2021].
//
// Checked: TestReddening.
func (e MapEBV) EGK(bprp0 float64) float64 {
	if math.IsNaN(bprp0) {
		bprp0 = 1.15
	}
	x := clamp(bprp0, 0, 2.5)
	return (2.609 - 0.475*x + 0.053*x*x - aksCasagrande) * float64(e)
}

// Simple returns extinction in Gaia's bands by constants, magnitudes.
//
//	A_G = 2.740 E, A_BP = 3.374 E, A_RP = 2.035 E, so E(BP-RP) = 1.339 E
//
// Notes:
//  1. For every colour alike; [Dereddened] gives A_G = 2.50 E at (BP-RP)0 = 1.25.
//
// Source: [cite.CasagrandeVandenBerg2018].
//
// Checked: TestReddening.
func (e TrueEBV) Simple() GaiaExtinction {
	return GaiaExtinction{AG: rG * float64(e), ABP: rBP * float64(e), ARP: rRP * float64(e)}
}

// ColumnFraction returns how much of the dust on a line of sight lies in front
// of a star.
//
//	1 - exp(-|r sin b| / h)      h = 125 pc
//
// Given:
//   - rKpc: distance, kpc; sinB: sine of the galactic latitude.
//
// Returns:
//   - 0 to 1; not a number where something given is not one.
//
// Notes:
//  1. A plane layer: in the plane itself it gives 0, where the map is of no
//     use anyhow.
//  2. The height: common practice, no source. The reddening of giants in the
//     Kepler field asks for 79 pc.
//
// Source: common practice, no source.
//
// Checked: TestReddening.
func ColumnFraction(rKpc, sinB float64) float64 {
	return -math.Expm1(-math.Abs(rKpc*1000*sinB) / dustHeightPc)
}
