package degenerate

import (
	"math"

	"evenfall/astro/numeric"
)

// Mestel returns the cooling age of a white dwarf by the simplest law.
//
//	t = 8.8e6 yr (A/12)^-1 M^(5/7) (μ/2)^(-2/7) L^(-5/7)     solar units
//
// Given:
//   - massMsun, lumLsun: positive.
//   - nucleons: A, mass number of the ions, 12 for carbon, 16 for oxygen.
//   - mu: mean molecular weight of the envelope to 2; 2 where not known.
//
// Returns:
//   - years; not a number for what is not positive.
//
// Notes:
//  1. Only where the tables do not reach. For 0.6 solar masses it is 1.41 times
//     the table at log L -1.59 (neutrinos), 1.02 times at -2.83 and 0.77 times at
//     -4.07 (crystallisation).
//  2. The coefficient is from memory, not checked against a publication, and
//     kept because it fits the table at -2.83.
//
// Source: [cite.Mestel1952], with constants as in [cite.IbenTutukov1984].
//
// Checked: TestMestel.
func Mestel(massMsun, lumLsun, nucleons, mu float64) (ageYr float64) {
	if !positive(massMsun, lumLsun, nucleons, mu) {
		return math.NaN()
	}
	return 8.8e6 / (nucleons / 12) * math.Pow(massMsun, 5.0/7) *
		math.Pow(mu/2, -2.0/7) * math.Pow(lumLsun, -5.0/7)
}

// frozenParts are the crystallised parts of the mass that the table knows.
var frozenParts = [...]float64{0, 0.2, 0.5, 0.8}

// readFrozen makes the curves of temperature with mass.
func (m *Models) readFrozen(text string) error {
	rows, err := readRows(text, "mass", "frac", "teff")
	if err != nil {
		return err
	}
	for k, part := range frozenParts {
		var x, y []float64
		for _, row := range rows {
			if row[1] == part {
				x, y = append(x, row[0]), append(y, math.Log10(row[2]))
			}
		}
		if m.frozen[k], err = numeric.Monotone(x, y); err != nil {
			return err
		}
	}
	return nil
}

// Crystal is how far the core of a white dwarf has turned solid.
type Crystal struct {
	OnsetK, HalfK, MostK float64 // where 0, 50 and 80 per cent of the mass are solid
	Part                 float64 // of the mass that is solid, about; 0.8 stands for that or more
	Words                string  // "liquid core", "crystallising", "mostly crystallised"
}

// Crystallisation returns how far a white dwarf has turned solid.
//
// Given:
//   - massMsun: 0.45 to 1.3; lighter ones have cores of helium.
//   - teffK: effective temperature.
//
// Returns:
//   - temperatures of onset, half and 80 per cent, and the state; [ErrOffTable],
//     [ErrNotANumber].
//
// Notes:
//  1. Carbon-oxygen cores under thick hydrogen. The delay of up to about 1 Gyr
//     seen in the pile-up of real stars, 8 Gyr for a few heavy ones, is not in
//     the ages.
//
// Source: read off the sequences of [cite.BedardEtAl2020]; the pile-up is
// [cite.TremblayEtAl2019].
//
// Checked: TestCrystallisation.
func (m *Models) Crystallisation(massMsun, teffK float64) (Crystal, error) {
	if !positive(massMsun, teffK) {
		return Crystal{}, ErrNotANumber
	}
	var at [len(frozenParts)]float64
	for k, c := range m.frozen {
		v, ok := c.At(massMsun)
		if !ok {
			return Crystal{}, ErrOffTable
		}
		at[k] = math.Pow(10, v)
	}
	c := Crystal{OnsetK: at[0], HalfK: at[2], MostK: at[3]}
	switch {
	case teffK > at[0]:
		c.Words = "liquid core"
		return c, nil
	case teffK < at[3]:
		c.Words, c.Part = "mostly crystallised", frozenParts[3]
		return c, nil
	}
	c.Words = "crystallising"
	for k := 1; k < len(at); k++ {
		if teffK >= at[k] {
			f := (at[k-1] - teffK) / (at[k-1] - at[k])
			c.Part = frozenParts[k-1] + f*(frozenParts[k]-frozenParts[k-1])
			break
		}
	}
	return c, nil
}
