package degenerate

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"
	"strings"

	"evenfall/astro/numeric"
)

//go:embed wd_da_cooling.csv
var hydrogenCSV string

//go:embed wd_db_cooling.csv
var heliumCSV string

//go:embed wd_crystallisation.csv
var crystalCSV string

// Models holds the tables of white-dwarf models and the fine grids made of
// them. It does not change once made and may be shared between goroutines.
type Models struct {
	sheets [2]*sheet
	grids  [2]*grid
	frozen [len(frozenParts)]*numeric.Curve
}

// Model is one model star.
type Model struct {
	TeffK, MassMsun float64
	LogG            float64 // of cm/s²
	MbolMag         float64
	MVMag, MGMag    float64 // absolute, Vega; G of Gaia EDR3
	BPRPMag         float64 // Gaia EDR3
	CoolingAgeYr    float64 // since the white dwarf was born; no main-sequence time
	RadiusRsun      float64
	LumLsun         float64
}

// quantity numbers what the tables hold for each star.
type quantity int

const (
	qLogG quantity = iota
	qMbol
	qMV
	qMG
	qColour
	qLogAge
	quantities
)

// youngestYr stands in for the age 0 of models before the start of their
// sequence; the least age that the tables print is 1.2e5 years.
const youngestYr = 1e5

// sheet is one table: for each of its masses a curve in log Teff of each
// quantity.
type sheet struct {
	mass  []float64
	curve [][quantities]*numeric.Curve
	lo    []float64 // first and last log Teff of each mass
	hi    []float64
}

// NewModels reads the tables that the program carries and makes the fine grids
// that fits go over.
//
// Notes:
//  1. It takes some tens of milliseconds and 6 megabytes; make it once.
//  2. Masses 0.2 to 1.3; hydrogen 3000 to 100 000 K, helium from 3500 K; up to
//     30 000 K at 0.2, 60 000 K at 0.3 and 80 000 K at 0.4 solar masses.
//  3. Below 0.45 solar masses the core of a real star is helium; the ages of
//     these carbon-oxygen models are indicative there.
//  4. Where the tables print an age of 0, before the start of a sequence, it is
//     taken as 1e5 years; this touches 0.6 solar masses above 80 000 K and
//     lighter ones from lower temperatures on.
//
// Source: the tables of the Montreal group at 26 temperatures, magnitudes in
// the Vega system: [cite.BedardEtAl2020], [cite.HolbergBergeron2006],
// [cite.KowalskiSaumon2006], [cite.TremblayEtAl2011], [cite.BlouinEtAl2018].
//
// Checked: TestTables; TestModelsAgainstSequences, TestModelsAgainstPhotometry;
// BenchmarkNewModels.
func NewModels() *Models {
	m := &Models{}
	for c, text := range [...]string{Hydrogen: hydrogenCSV, Helium: heliumCSV} {
		s, err := readSheet(text)
		if err != nil {
			panic(fmt.Sprintf("degenerate: the table of %s models cannot be used: %v", Composition(c), err))
		}
		m.sheets[c] = s
		m.grids[c] = newGrid(s)
	}
	if err := m.readFrozen(crystalCSV); err != nil {
		panic(fmt.Sprintf("degenerate: the table of crystallisation cannot be used: %v", err))
	}
	return m
}

// readRows returns the columns of a table of numbers in the order asked.
func readRows(text string, columns ...string) ([][]float64, error) {
	r := csv.NewReader(strings.NewReader(text))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		return nil, err
	}
	if len(rows) < 2 {
		return nil, numeric.ErrData
	}
	at := map[string]int{}
	for i, name := range rows[0] {
		at[name] = i
	}
	var out [][]float64
	for n, row := range rows[1:] {
		line := make([]float64, len(columns))
		for k, name := range columns {
			i, ok := at[name]
			if !ok {
				return nil, fmt.Errorf("no column %q", name)
			}
			if line[k], err = strconv.ParseFloat(row[i], 64); err != nil {
				return nil, fmt.Errorf("row %d: %w", n+1, err)
			}
		}
		out = append(out, line)
	}
	return out, nil
}

// readSheet makes the curves of one table, whose rows go by mass, then by
// temperature.
func readSheet(text string) (*sheet, error) {
	rows, err := readRows(text, "logg", "mbol", "mv", "mg", "bp_rp", "age", "mass", "teff")
	if err != nil {
		return nil, err
	}
	const mass, teff = 6, 7
	s := &sheet{}
	for from := 0; from < len(rows); {
		upto := from
		for upto < len(rows) && rows[upto][mass] == rows[from][mass] {
			upto++
		}
		var logT []float64
		var y [quantities][]float64
		for _, row := range rows[from:upto] {
			logT = append(logT, math.Log10(row[teff]))
			for q := range quantities {
				v := row[q]
				if q == qLogAge {
					v = math.Log10(math.Max(v, youngestYr))
				}
				y[q] = append(y[q], v)
			}
		}
		var curves [quantities]*numeric.Curve
		for q := range quantities {
			if curves[q], err = numeric.Monotone(logT, y[q]); err != nil {
				return nil, fmt.Errorf("mass %g: %w", rows[from][mass], err)
			}
		}
		s.mass = append(s.mass, rows[from][mass])
		s.curve = append(s.curve, curves)
		s.lo = append(s.lo, logT[0])
		s.hi = append(s.hi, logT[len(logT)-1])
		from = upto
	}
	return s, nil
}

// across returns the curve of a quantity with mass at one temperature, over the
// masses whose models reach it.
func (s *sheet) across(logT float64, q quantity) (*numeric.Curve, error) {
	var x, y []float64
	for k, m := range s.mass {
		if v, ok := s.curve[k][q].At(logT); ok {
			x, y = append(x, m), append(y, v)
		}
	}
	return numeric.Monotone(x, y)
}

// at interpolates every quantity.
func (s *sheet) at(logT, massMsun float64) (out [quantities]float64, ok bool) {
	for q := range quantities {
		c, err := s.across(logT, q)
		if err != nil {
			return out, false
		}
		if out[q], ok = c.At(massMsun); !ok {
			return out, false
		}
	}
	return out, true
}

// At returns the model star of a temperature and a mass.
//
//	R = √(M 10^(4.438 - log g))     L = R² (T / 5772 K)⁴     solar units
//
// Given:
//   - teffK: 3000 to 100 000 K, helium from 3500 K.
//   - massMsun: 0.2 to 1.3; light models end at lower temperatures.
//
// Returns:
//   - the model; [ErrOffTable] outside, [ErrNotANumber].
//
// Notes:
//  1. Monotone cubics in log Teff for each mass, then in mass; log of the age.
//     Against the full tables at log g 8, 4500 to 40 000 K: M_G to 0.003 mag,
//     BP-RP to 0.001.
//  2. MbolMag is as in the tables, in which the Sun has 4.75, not 4.74.
//
// Source: [cite.BedardEtAl2020] and the works named at [NewModels].
//
// Checked: TestTables; TestModelsAgainstSequences, TestModelsAgainstPhotometry.
func (m *Models) At(teffK, massMsun float64, c Composition) (Model, error) {
	if !positive(teffK, massMsun) || c != Hydrogen && c != Helium {
		return Model{}, ErrNotANumber
	}
	v, ok := m.sheets[c].at(math.Log10(teffK), massMsun)
	if !ok {
		return Model{}, ErrOffTable
	}
	return newModel(teffK, massMsun, v), nil
}

// newModel completes a model from the quantities of the tables.
func newModel(teffK, massMsun float64, v [quantities]float64) Model {
	radius := math.Sqrt(massMsun * math.Pow(10, sunLogG-v[qLogG]))
	return Model{
		TeffK: teffK, MassMsun: massMsun, LogG: v[qLogG], MbolMag: v[qMbol],
		MVMag: v[qMV], MGMag: v[qMG], BPRPMag: v[qColour],
		CoolingAgeYr: math.Pow(10, v[qLogAge]),
		RadiusRsun:   radius,
		LumLsun:      radius * radius * math.Pow(teffK/sunTeffK, 4),
	}
}

// FromGravity returns the model star of a temperature and a surface gravity, as
// spectra give them.
//
// Given:
//   - teffK: as for [Models.At].
//   - logG: of cm/s², about 6 to 9.3.
//
// Returns:
//   - the model whose gravity is that; [ErrOffTable], [ErrNotANumber].
//
// Notes:
//  1. For errors, use [Models.Fit] with the temperature and gravity filled in.
//
// Source: [cite.BedardEtAl2020].
//
// Checked: TestFromGravity: it gives back the mass of [Models.At].
func (m *Models) FromGravity(teffK, logG float64, c Composition) (Model, error) {
	if !positive(teffK, logG) || c != Hydrogen && c != Helium {
		return Model{}, ErrNotANumber
	}
	curve, err := m.sheets[c].across(math.Log10(teffK), qLogG)
	if err != nil {
		return Model{}, ErrOffTable
	}
	lo, hi := curve.Range()
	mass, err := numeric.Root(func(x float64) float64 {
		g, _ := curve.At(x)
		return g - logG
	}, lo, hi, 1e-9)
	if err != nil {
		return Model{}, ErrOffTable
	}
	return m.At(teffK, mass, c)
}
