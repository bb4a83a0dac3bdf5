package nebular

import (
	"fmt"
	"math"
	"strings"

	"evenfall/astro/cite"
)

// shapes and parts are the letters of the code of shapes; from memory, not
// checked against a publication.
var (
	shapes = map[byte]string{'E': "elliptical", 'R': "round", 'B': "bipolar", 'I': "irregular", 'A': "asymmetric", 'S': "star-like"}
	parts  = map[byte]string{'a': "asymmetric in brightness", 'm': "multiple shells", 'p': "point-symmetric", 'r': "ring", 's': "internal structure"}
	status = map[string]string{"T": "true planetary nebula", "L": "likely planetary nebula", "P": "possible planetary nebula"}
)

// Morphology puts a code of shape into words.
//
// Given:
//   - code: one capital of E, R, B, I, A, S, and small letters of a, m, p, r,
//     s, e.g. "Bmps"; a "/" or "?" between or behind is left out.
//
// Returns:
//   - the words, e.g. "bipolar; multiple shells, point-symmetric"; false for a
//     code that is none.
//
// Notes:
//  1. The letters are from memory, not checked against a publication.
//
// Source: [cite.ParkerEtAl2006].
//
// Checked: TestWords.
func Morphology(code string) (string, bool) {
	code = strings.Map(func(r rune) rune {
		if strings.ContainsRune("/? ", r) {
			return -1
		}
		return r
	}, code)
	if code == "" || len(code) > 6 || shapes[code[0]] == "" {
		return "", false
	}
	var more []string
	for i := 1; i < len(code); i++ {
		word := parts[code[i]]
		if word == "" || strings.IndexByte(code[1:], code[i]) != i-1 {
			return "", false
		}
		more = append(more, word)
	}
	if more == nil {
		return shapes[code[0]], true
	}
	return shapes[code[0]] + "; " + strings.Join(more, ", "), true
}

// Status puts a flag of certainty, T, L or P, into words; false for any other.
//
// Source: [cite.ParkerEtAl2006].
//
// Checked: TestWords.
func Status(flag string) (string, bool) {
	s, ok := status[strings.TrimSpace(flag)]
	return s, ok
}

// Excitation returns the excitation class of a nebula, 0 to 10.
//
//	E = 0.45 F(5007)/F(Hβ)                below 5
//	E = 5.54 [F(4686)/F(Hβ) + 0.78]       5 to 10
//
// Given:
//   - o3: 5007 over H beta, 0 or more; he2: He II 4686 over H beta, not a
//     number where not measured. Both without dust.
//
// Returns:
//   - the class, kept between 5 and 10 in the second form. Without he2 a class
//     that would be 5 or more is 5, and atLeast is true.
//   - [ErrInput] for ratios below 0 or, o3, not a number.
//
// Source: [cite.DopitaMeatheringham1990], seen in one copy.
//
// Checked: TestNebulae.
func Excitation(o3, he2 float64) (class float64, atLeast bool, err error) {
	if !(o3 >= 0 && o3 < 1e4) || he2 < 0 || he2 > 1e4 {
		return math.NaN(), false, bad("ratios of 5007 and 4686 to H beta", o3, he2)
	}
	if low := 0.45 * o3; low < 5 {
		return low, false, nil
	}
	if math.IsNaN(he2) {
		return 5, true, nil
	}
	return math.Min(math.Max(5.54*(he2+0.78), 5), 10), false, nil
}

// Ratios are the ratios of lines that tell planetary nebulae from what looks
// like them. Not a number stands for one that was not measured.
type Ratios struct {
	NIIOverHa  float64 // 6548 + 6584 over H alpha
	SIIOverHa  float64 // 6716 + 6731 over H alpha
	HaOverOIII float64 // H alpha over 5007
}

// Warning is a doubt about what an object is.
type Warning struct{ Text, Source string }

const (
	// shockedSII is [S II] over H alpha from which gas is shocked; nitrogenNII
	// the same of [N II], which nitrogen-rich nebulae reach as well; lowOIII
	// the H alpha over 5007 under which planetary nebulae commonly stay. Common
	// practice, no source.
	shockedSII, nitrogenNII, lowOIII = 0.4, 0.4, 0.5
)

// Mimics returns what speaks for an object that is not a planetary nebula.
//
//	[S II]/Hα > 0.4               a supernova remnant
//	Hα/[O III] 5007 not < 0.5     not typical
//
// Returns:
//   - one warning for each doubt; none where nothing speaks against it or
//     nothing was measured.
//
// Notes:
//  1. [N II] strengthens the first; alone it says little, since nitrogen-rich
//     planetary nebulae have as much.
//  2. Common practice, no source; each warning says so.
//  3. Nebulae of the lowest excitation are warned of as well.
//
// Source: common practice, no source.
//
// Checked: TestMimics.
func Mimics(r Ratios) []Warning {
	var out []Warning
	add := func(format string, a ...any) {
		out = append(out, Warning{fmt.Sprintf(format, a...), CommonPractice})
	}
	usable := func(v float64) bool { return v >= 0 && v < 1e6 }
	nitrogen := usable(r.NIIOverHa) && r.NIIOverHa > nitrogenNII
	switch {
	case usable(r.SIIOverHa) && r.SIIOverHa > shockedSII && nitrogen:
		add("[S II]/Ha = %.2f and [N II]/Ha = %.2f, both over 0.4: shocked gas, perhaps a supernova remnant", r.SIIOverHa, r.NIIOverHa)
	case usable(r.SIIOverHa) && r.SIIOverHa > shockedSII:
		add("[S II]/Ha = %.2f, over 0.4: shocked gas, perhaps a supernova remnant", r.SIIOverHa)
	case nitrogen:
		add("[N II]/Ha = %.2f, over 0.4: rich in nitrogen, or shocked", r.NIIOverHa)
	}
	if usable(r.HaOverOIII) && r.HaOverOIII >= lowOIII {
		add("Ha/[O III] = %.2f, planetary nebulae commonly have less than 0.5: perhaps an H II region, a symbiotic star or a shell about a Wolf-Rayet star, or of low excitation", r.HaOverOIII)
	}
	return out
}

// Sources returns the works that this package rests on, for a list of them.
func Sources() []cite.Ref {
	return []cite.Ref{cite.OsterbrockFerland2006, cite.CardelliEtAl1989, cite.Jacoby1989, cite.FrewEtAl2016, cite.StanghelliniEtAl2020,
		cite.JacobEtAl2013, cite.SchonbernerEtAl2005, cite.Zanstra1931, cite.VaccaEtAl1996, cite.CiardulloEtAl2002,
		cite.ScheuermannEtAl2022, cite.ParkerEtAl2006, cite.DopitaMeatheringham1990}
}
