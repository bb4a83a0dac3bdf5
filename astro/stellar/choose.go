package stellar

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"evenfall/astro/cite"
)

// Colours are a star's colours without reddening, magnitudes.
type Colours struct {
	BPRP Measure // Gaia's BP-RP
	GK   Measure // Gaia's G less Ks of 2MASS
	VK   Measure // Johnson's V less Ks of 2MASS
	BV   Measure // Johnson's B-V
}

// Try is one relation that was asked for a temperature.
type Try struct {
	Method string
	Teff   TeffEstimate
	Err    error // why it gives none
}

// String writes the outcome as one line.
func (t Try) String() string {
	if t.Err != nil {
		return t.Err.Error()
	}
	return t.Teff.String()
}

// ErrNoTeff says that no relation gives a temperature.
var ErrNoTeff = errors.New("no colour of this star is within the range of a temperature relation")

// TeffFromColours returns the temperature by the relation that is valid and
// promises the smallest error.
//
// Given:
//   - c: whatever colours there are; feH where known.
//   - giant: log g below 3.5. Without it ask once for a dwarf, work out log g,
//     and ask again.
//
// Returns:
//   - the estimate, and every relation asked, each with its own estimate or the
//     reason it gives none.
//   - [ErrNoTeff] where none does.
//
// Notes:
//  1. One relation is chosen, never an average: their errors are not
//     independent.
//  2. Of equal errors the first counts, in the order BP-RP, G-Ks, V-K, B-V.
//  3. The relation of G-Ks is for giants; dwarfs are refused it.
//
// Source: as for [TeffFromBPRP], [TeffFromGK], [TeffFromVK], [TeffFromBV].
//
// Checked: TestTeffFromColours.
func TeffFromColours(c Colours, feH Measure, giant bool) (TeffEstimate, []Try, error) {
	tried := make([]Try, 0, 4)
	add := func(method string, t TeffEstimate, err error) {
		if err == nil {
			method = t.Method
		}
		tried = append(tried, Try{method, t, err})
	}
	t, err := TeffFromBPRP(c.BPRP, feH, giant)
	add("BP-RP", t, err)
	if giant {
		t, err = TeffFromGK(c.GK, GiantLogG, feH)
	} else {
		t, err = TeffEstimate{}, error(notForDwarfs)
	}
	add("G-Ks", t, err)
	t, err = TeffFromVK(c.VK, feH, giant)
	add("V-K", t, err)
	t, err = TeffFromBV(c.BV, feH, giant)
	add("B-V", t, err)
	best := -1
	for i := range tried {
		if tried[i].Err == nil && (best < 0 || tried[i].Teff.SigmaK < tried[best].Teff.SigmaK) {
			best = i
		}
	}
	if best < 0 {
		return TeffEstimate{}, tried, ErrNoTeff
	}
	return tried[best].Teff, tried, nil
}

var notForDwarfs = &NoCalibration{Method: gkMethod, Quantity: "(G-Ks)0", Value: math.NaN(), Lo: gkLo, Hi: gkHi,
	Reason: "made for giants only"}

// mGiantK is the temperature of giants M0 to M8; from memory, not checked
// against a publication.
var mGiantK = [...]float64{3895, 3810, 3735, 3640, 3560, 3420, 3250, 3100, 2900}

const (
	mGiantErrK   = 100
	mGiantMethod = "spectral type of M giants"
	// The temperatures at mean light of Miras and of carbon stars, lowest and
	// highest; from memory, not checked against a publication.
	miraLoK, miraHiK     = 2500.0, 3300.0
	carbonLoK, carbonHiK = 2400.0, 3400.0
)

// TeffFromMType returns the temperature of an M giant from its spectral type.
//
//	M0 3895, M1 3810, M2 3735, M3 3640, M4 3560, M5 3420, M6 3250, M7 3100, M8 2900 K; ± 100 K
//
// Given:
//   - spType: e.g. "M5III", "M6.5", "M3-4 III", "M7e"; a range counts as its
//     middle.
//
// Returns:
//   - Teff, straight lines between the types.
//   - [NoCalibration] for other classes, dwarfs, subgiants and supergiants, and
//     later than M8.
//
// Notes:
//  1. The numbers are from memory, not checked against a publication; the
//     estimate says so. Of the scale of [cite.VanBelleEtAl1999] and
//     [cite.PerrinEtAl1998].
//
// Source: from memory, not checked against a publication.
//
// Checked: TestMType.
func TeffFromMType(spType string) (TeffEstimate, error) {
	refuse := func(why string) (TeffEstimate, error) {
		return TeffEstimate{}, &NoCalibration{Method: mGiantMethod, Quantity: "subtype", Value: math.NaN(), Hi: 8,
			Reason: fmt.Sprintf("spectral type %q: %s", clip(spType), why)}
	}
	rest, isM := strings.CutPrefix(strings.TrimSpace(spType), "M")
	if !isM {
		return refuse("not of class M")
	}
	first, rest := subtype(rest)
	if math.IsNaN(first) {
		return refuse("no subtype")
	}
	sub := first
	if after, isRange := strings.CutPrefix(rest, "-"); isRange {
		after = strings.TrimPrefix(after, "M")
		if last, left := subtype(after); !math.IsNaN(last) {
			sub, rest = (first+last)/2, left
		}
	}
	switch class := luminosityClass(rest); {
	case class != "" && class != "III" && class != "II-III":
		return refuse("luminosity class " + class + ", not a giant")
	case !(sub >= 0 && sub <= 8):
		return refuse("outside M0 to M8")
	}
	i := min(int(sub), len(mGiantK)-2)
	t := mGiantK[i] + (sub-float64(i))*(mGiantK[i+1]-mGiantK[i])
	return TeffEstimate{t, mGiantErrK, mGiantMethod, cite.Ref{}, FromMemory}, nil
}

// clip keeps an absurd text out of a message.
func clip(s string) string {
	if len(s) > 24 {
		return s[:24] + "..."
	}
	return s
}

// subtype takes a number such as 5 or 6.5 off the front.
func subtype(s string) (float64, string) {
	n := 0
	for n < len(s) && (s[n] >= '0' && s[n] <= '9' || s[n] == '.') {
		n++
	}
	v, err := strconv.ParseFloat(s[:n], 64)
	if err != nil {
		return math.NaN(), s
	}
	return v, s[n:]
}

// luminosityClass returns the first word of I, V and hyphens, e.g. "III", and
// nothing where there is none. A small v is a variable's, not a class.
func luminosityClass(s string) string {
	from := strings.IndexAny(s, "IV")
	if from < 0 {
		return ""
	}
	to := from
	for to < len(s) && strings.ContainsRune("IV-", rune(s[to])) {
		to++
	}
	return strings.TrimRight(s[from:to], "-")
}

// TeffOfMira returns the temperature that Miras have at mean light, 2500 to
// 3300 K; from memory, not checked against a publication.
//
// Checked: TestMType.
func TeffOfMira() TeffEstimate { return evenly(miraLoK, miraHiK, "Mira at mean light") }

// TeffOfCarbonStar returns the temperature of carbon stars of type N, 2400 to
// 3400 K; from memory, not checked against a publication.
//
// Checked: TestMType.
func TeffOfCarbonStar() TeffEstimate { return evenly(carbonLoK, carbonHiK, "carbon star of type N") }

// evenly is a temperature that may lie anywhere between two.
func evenly(lo, hi float64, method string) TeffEstimate {
	return TeffEstimate{(lo + hi) / 2, (hi - lo) / math.Sqrt(12), method, cite.Ref{}, FromMemory}
}
