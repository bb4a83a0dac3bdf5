package degenerate

import (
	"math"
	"strconv"
	"strings"

	"evenfall/astro"
)

// Spectrum is a white dwarf's spectral class, taken apart.
type Spectrum struct {
	Text      string
	Primary   byte   // A, B, O, C, Z, Q or X
	Secondary string // further letters of the same, strongest first
	Polarised bool   // P: magnetic, polarised light
	Magnetic  bool   // H: magnetic, light not polarised
	Variable  bool   // V
	Emission  bool   // E
	Debris    bool   // d
	Peculiar  bool   // pec
	Uncertain bool   // : or ?
	Companion string // after a plus or a slash, as written
	Index     float64
	TeffK     astro.Interval // from the number, by its last digit; not valid without one
	Words     string
}

// Hydrogen tells whether hydrogen lines come first.
func (s Spectrum) Hydrogen() bool { return s.Primary == 'A' }

// Helium tells whether helium lines come first.
func (s Spectrum) Helium() bool { return s.Primary == 'B' || s.Primary == 'O' }

// teffIndex is the temperature of index 1.
const teffIndex = 50400.0

var primaryWords = map[byte]string{
	'A': "hydrogen lines", 'B': "neutral helium lines", 'O': "ionised helium lines",
	'C': "no lines deeper than 5 per cent", 'Z': "metal lines", 'Q': "carbon features", 'X': "unclassified",
}

var secondaryWords = map[byte]string{
	'A': "hydrogen", 'B': "neutral helium", 'O': "ionised helium", 'C': "continuum", 'Z': "metals", 'Q': "carbon", 'X': "unclassified",
}

// ParseSpectrum takes a white dwarf's spectral class apart.
//
//	D + primary + secondary letters + number     Teff = 50400 K / number
//
// Given:
//   - text: such as "DA4.1", "DBAZ", "DQpec", "DAV", "DZA6", "DA2+dM"; blanks
//     around it do not matter, and a colon or question mark says uncertain.
//
// Returns:
//   - the class, and true; false for what is no such class.
//
// Notes:
//  1. A number of one digit is good to half a unit of it: DA4 is 11 200 to
//     14 400 K. That is an interval of classification, given the level 0.68.
//  2. Small d for debris was added to the system later.
//  3. It is the spectrum's evidence for the surface; photometry gives none.
//
// Source: [cite.SionEtAl1983].
//
// Checked: TestParseSpectrum, FuzzParseSpectrum.
func ParseSpectrum(text string) (Spectrum, bool) {
	s := Spectrum{Text: strings.TrimSpace(text)}
	body := s.Text
	if k := strings.IndexAny(body, "+/"); k > 0 {
		s.Companion = strings.TrimSpace(body[k+1:])
		body = strings.TrimSpace(body[:k])
	}
	for _, mark := range []string{":", "?"} {
		if strings.Contains(body, mark) {
			s.Uncertain = true
			body = strings.ReplaceAll(body, mark, "")
		}
	}
	if short, found := strings.CutSuffix(body, "pec"); found {
		s.Peculiar, body = true, short
	}
	body = strings.TrimRight(body, " ")
	if len(body) < 2 || len(body) > 16 || body[0] != 'D' || primaryWords[body[1]] == "" {
		return Spectrum{}, false
	}
	s.Primary = body[1]
	rest := body[2:]
	k := 0
	for k < len(rest) && s.letter(rest[k]) {
		k++
	}
	number := k
	for k < len(rest) && (rest[k] == '.' || rest[k] >= '0' && rest[k] <= '9') {
		k++
	}
	if !s.number(rest[number:k]) {
		return Spectrum{}, false
	}
	for ; k < len(rest); k++ {
		if !s.letter(rest[k]) {
			return Spectrum{}, false
		}
	}
	s.Words = s.words()
	return s, true
}

// letter takes one letter after the primary.
func (s *Spectrum) letter(c byte) bool {
	switch c {
	case 'P', 'p':
		s.Polarised = true
	case 'H':
		s.Magnetic = true
	case 'V', 'v':
		s.Variable = true
	case 'E', 'e':
		s.Emission = true
	case 'd':
		s.Debris = true
	default:
		if secondaryWords[c] == "" {
			return false
		}
		s.Secondary += string(c)
	}
	return true
}

// number takes the temperature index; none is well.
func (s *Spectrum) number(text string) bool {
	if text == "" {
		return true
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || !(v > 0.1 && v < 30) {
		return false
	}
	half := 0.5
	if k := strings.IndexByte(text, '.'); k >= 0 {
		half *= math.Pow(10, -float64(len(text)-k-1))
	}
	half = math.Min(half, v/2)
	s.Index = v
	s.TeffK = span(teffIndex/(v+half), teffIndex/v, teffIndex/(v-half))
	return true
}

// words says what the class means.
func (s *Spectrum) words() string {
	parts := []string{"white dwarf, " + primaryWords[s.Primary]}
	for k := range len(s.Secondary) {
		parts = append(parts, "also "+secondaryWords[s.Secondary[k]])
	}
	for _, f := range []struct {
		is   bool
		text string
	}{
		{s.Polarised, "magnetic, light polarised"}, {s.Magnetic, "magnetic, light not polarised"},
		{s.Variable, "variable"}, {s.Emission, "emission lines"}, {s.Debris, "debris disc"},
		{s.Peculiar, "peculiar"}, {s.Index > 0, "about " + strconv.FormatFloat(math.Round(s.TeffK.Mid/100)*100, 'f', 0, 64) + " K"},
		{s.Companion != "", "with companion " + s.Companion}, {s.Uncertain, "class uncertain"},
	} {
		if f.is {
			parts = append(parts, f.text)
		}
	}
	return strings.Join(parts, ", ")
}
