package bands

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"
	"strings"

	"evenfall/astro/cite"
	"evenfall/astro/numeric"
)

//go:embed giants_by_type.csv
var giantsCSV string

// column is one quantity along the types of giants, and its scatter.
type column struct{ value, scatter, low, high *numeric.Curve }

// giants are the columns of the embedded table by name.
//
// Source: [cite.ESA1997] for B - V, V - I and the range of brightness, not
// dereddened, and [cite.HealyEtAl2024] for the Gaia and 2MASS colours,
// dereddened; medians by type made for this program.
var giants = loadGiants()

// loadGiants reads the embedded table; one that cannot be read is a fault of
// the build.
func loadGiants() map[string]column {
	r := csv.NewReader(strings.NewReader(giantsCSV))
	r.Comment, r.FieldsPerRecord = '#', -1
	rows, err := r.ReadAll()
	if err != nil || len(rows) < 2 {
		panic("bands: the embedded table of giants cannot be read")
	}
	at := map[string]int{}
	for i, h := range rows[0] {
		at[h] = i
	}
	curve := func(name string) *numeric.Curve {
		i, ok := at[name]
		if !ok {
			return nil
		}
		points := map[float64]float64{}
		for _, row := range rows[1:] {
			t, err := ParseType(row[0])
			if v, e := strconv.ParseFloat(row[i], 64); err == nil && e == nil {
				points[t.index()] = v
			}
		}
		x, y := sorted(points)
		c, err := numeric.Linear(x, y)
		if err != nil {
			panic("bands: column " + name + " of the embedded table of giants: " + err.Error())
		}
		return c
	}
	out := map[string]column{}
	for name := range map[string]bool{"b_v": true, "v_i": true, "bp_rp": true, "g_k": true, "j_k": true} {
		out[name] = column{value: curve(name), scatter: curve("sd_" + name)}
	}
	out["hp_range"] = column{value: curve("hp_range"), low: curve("hp_range_16"), high: curve("hp_range_84")}
	return out
}

func sorted(points map[float64]float64) (x, y []float64) {
	for t := range points {
		x = append(x, t)
	}
	for i := range x { // a few dozen: insertion
		for j := i; j > 0 && x[j] < x[j-1]; j-- {
			x[j], x[j-1] = x[j-1], x[j]
		}
	}
	for _, t := range x {
		y = append(y, points[t])
	}
	return x, y
}

// typeColor is a colour that follows from the spectral type of a giant.
type typeColor struct {
	column     string
	blue, red  Band    // the colour is blue - red
	extinction float64 // colour excess per magnitude of extinction in V
	extra      float64 // error beside the scatter, mag
	source     cite.Ref
}

// jkScatter stands for the scatter of J - K by type, which the table does not
// hold, and gkBias for its G - K being up to 0.2 mag too red; common practice,
// no source.
const jkScatter, gkBias = 0.10, 0.15

// typeColors are the colours by type. Extinction: A_V = 3.1 E(B-V); the Gaia
// and 2MASS ones as the table was dereddened; V - I as 2.742 and 1.505.
var typeColors = []typeColor{
	{"b_v", B, V, 1 / 3.1, 0, cite.ESA1997},
	{"v_i", V, I, (2.742 - 1.505) / 2.742, 0, cite.ESA1997},
	{"bp_rp", BP, RP, 0.40, 0, cite.HealyEtAl2024},
	{"g_k", G, K, 0.67, gkBias, cite.HealyEtAl2024},
	{"j_k", J, K, 0.165, jkScatter, cite.HealyEtAl2024},
}

// of returns the colour of giants of a type and its one-sigma error.
func (tc *typeColor) of(t Type, avMag float64) (value, sd float64, ok bool) {
	col := giants[tc.column]
	x := t.index()
	value, ok = col.value.At(x)
	if !ok {
		return 0, 0, false
	}
	if col.scatter != nil {
		sd, _ = col.scatter.At(x)
	}
	// the steepest change of the colour over the type's own uncertainty
	half := math.Max(t.Spread, 0.5)
	if t.Uncertain {
		half = math.Max(half, 1)
	}
	slope := 0.0
	for _, d := range []float64{-half, half} {
		if v, in := col.value.At(x + d); in {
			slope = math.Max(slope, math.Abs(v-value))
		}
	}
	return value + tc.extinction*avMag, math.Sqrt(sd*sd + tc.extra*tc.extra + slope*slope/3), true
}

// Colour returns the mean colour of giants of a spectral type.
//
// Given:
//   - t: a giant's type; what its luminosity says is not looked at.
//   - blue, red: B V, V I, BP RP, G K or J K.
//   - avMag: extinction in V, mag, that reddens the colour; 0 for none. B - V
//     and V - I are means of near stars as they are, the others dereddened.
//
// Returns:
//   - the colour and its one-sigma error: the scatter among stars of the type,
//     and the uncertainty of the type itself, even over a subclass or over the
//     range of a varying type.
//   - a [Refusal]: G0 to M6 for B - V and V - I, K5 to M5 for the others.
//
// Notes:
//  1. G - K may be 0.1 to 0.2 mag too red, which is in the error; the scatter
//     of J - K, 0.10 mag, is common practice without a source.
//
// Source: [cite.ESA1997]; [cite.HealyEtAl2024].
//
// Checked: TestColour.
func Colour(t Type, blue, red Band, avMag float64) (value, sd float64, err error) {
	for i := range typeColors {
		tc := &typeColors[i]
		if tc.blue != blue || tc.red != red {
			continue
		}
		if !(avMag >= 0 && avMag < 100) {
			avMag = 0
		}
		value, sd, ok := tc.of(t, avMag)
		if !ok {
			return 0, 0, &Refusal{Reason: OutsideRange, Want: blue,
				Words: fmt.Sprintf("type %q is outside those of giants whose mean %s-%s is known", t.String(), blue, red)}
		}
		return value, sd, nil
	}
	return 0, 0, &Refusal{Reason: NoRelation, Want: blue, Words: fmt.Sprintf("no mean %s-%s of giants is known", blue, red)}
}

// Range is how much giants of a type vary: the width of the 5-95 % range of
// their magnitudes over some three years, with its own spread among stars.
type Range struct {
	Hp       float64 // median of stars, mag
	Hp16     float64 // 16th percentile
	Hp84     float64 // 84th percentile
	V        float64 // the same in V: 1.3 times Hp from M0 on
	Estimate bool    // beyond M6, where few stars stand behind it
	Source   string
}

const (
	// vPerHp is how much more M giants vary in V than in Hp. Common practice,
	// no source.
	vPerHp = 1.3
	// m8Range is the range of giants of M8, mag: about. It goes on from M6.
	m8Range = 0.9
)

// VariabilityOf returns how much giants of a type vary, be they classed as
// variable or not.
//
// Given:
//   - t: a type from G0 to M8; what its luminosity says is not looked at.
//
// Returns:
//   - widths in magnitudes, interpolated between types, and ok false outside.
//
// Notes:
//  1. To M6 the 5-95 % range of Hipparcos magnitudes less 0.02 of noise, medians
//     of 5 to 524 stars. Between M6 and M8 it rises to about 0.9, the spread in
//     proportion to that at M6: an estimate.
//  2. A one-sigma width is Hp/3.29 for a normal distribution.
//
// Source: [cite.ESA1997]; medians by type made for this program. The factor to
// V is common practice, no source.
//
// Checked: TestVariability.
func VariabilityOf(t Type) (Range, bool) {
	col := giants["hp_range"]
	x := t.index()
	r := Range{Source: cite.ESA1997.String()}
	_, last := col.value.Range()
	switch v, ok := col.value.At(x); {
	case ok:
		r.Hp = v
		r.Hp16, _ = col.low.At(x)
		r.Hp84, _ = col.high.At(x)
	case x > last && x <= last+2:
		end, _ := col.value.At(last)
		lo, _ := col.low.At(last)
		hi, _ := col.high.At(last)
		r.Hp = end + (m8Range-end)*(x-last)/2
		r.Hp16, r.Hp84 = r.Hp*lo/end, r.Hp*hi/end
		r.Estimate = true
	default:
		return Range{}, false
	}
	r.V = r.Hp
	if t.Class == 'M' {
		r.V *= vPerHp
	}
	return r, true
}
