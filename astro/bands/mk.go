package bands

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

// Luminosity is what a star broadly is, as far as relations care.
type Luminosity int

// The kinds. A dwarf is a star of the main sequence; subgiants count as
// neither.
const (
	UnknownLuminosity Luminosity = iota
	Dwarf
	Subgiant
	Giant // bright giants too
	Supergiant
	WhiteDwarf
)

// Type is a spectral type of the MK system, as far as colours need it.
type Type struct {
	Class      byte       // O B A F G K M; C, S, D (white dwarf), W for others
	Subclass   float64    // 0 to below 10; the middle of a range
	Known      bool       // the subclass is given
	Spread     float64    // half the range, for a type that varies (M5e-M9e), subclasses
	Luminosity Luminosity // of the luminosity class or the prefix g, d, sg, c, sd
	Emission   bool       // e follows the type
	Uncertain  bool       // a colon follows
	Composite  bool       // a companion is in the spectrum
}

var (
	prefixed  = regexp.MustCompile(`^(sd|sg|g|d|c)([OBAFGKM])`)
	firstType = regexp.MustCompile(`^([OBAFGKMCSDW])(\d+(?:\.\d+)?)?`)
	refined   = regexp.MustCompile(`^[-+](?:[IV(:e]|$)`)
	second    = regexp.MustCompile(`^[/-]([OBAFGKM])?(\d+(?:\.\d+)?)`)
	lumClass  = regexp.MustCompile(`^(Ia\+?|Iab|Ib|III|II|IV|VI|V|I)`)
	companion = regexp.MustCompile(`\+(?:\.\.\.|[A-Zdsp(])`)
)

// letters orders the classes along the sequence of temperature.
const letters = "OBAFGKM"

// ParseType reads a spectral type of the MK system or of older ones.
//
// Given:
//   - s: e.g. K5III, M3/4III, M6-III, M2.5II-III, gM4, M5e-M9e, K0+IV,
//     G8:III, C5,5J, DA3.3; what follows the luminosity class is passed over.
//
// Returns:
//   - the type; class and, where it is given, subclass and luminosity.
//   - a [Refusal] of reason BadType where no class begins the text.
//
// Notes:
//  1. Two subclasses with a slash or a dash (M3/4, M5e-M9e) give the middle,
//     and half their distance as spread.
//  2. A plus or minus after the subclass (M6-) moves it by a quarter of a
//     subclass; common practice, no source.
//  3. Of a composite spectrum (K2V+DA) the first component is read. A type
//     given for the companion alone is not looked for.
//
// Checked: TestParseType, TestBuiltinTypes, FuzzType.
func ParseType(s string) (Type, error) {
	text := strings.Join(strings.Fields(s), "")
	t := Type{}
	rest := text
	if m := prefixed.FindStringSubmatch(rest); m != nil {
		t.Luminosity = map[string]Luminosity{"g": Giant, "d": Dwarf, "sg": Subgiant, "c": Supergiant}[m[1]]
		rest = rest[len(m[1]):]
	}
	m := firstType.FindStringSubmatch(rest)
	if m == nil || len(text) > longestType {
		return Type{}, &Refusal{Reason: BadType, Words: fmt.Sprintf("spectral type %q: no class of the MK system begins it; write e.g. K5III", clip(s))}
	}
	t.Class = m[1][0]
	if v, err := strconv.ParseFloat(m[2], 64); err == nil && v < 10 {
		t.Subclass, t.Known = v, true
	}
	rest = rest[len(m[0]):]
	if t.Known && refined.MatchString(rest) {
		t.Subclass = math.Max(0, t.Subclass+map[byte]float64{'+': 0.25, '-': -0.25}[rest[0]])
		rest = rest[1:]
	}
	if t.Class == 'D' {
		t.Luminosity = WhiteDwarf
		t.Composite = companion.MatchString(rest)
		return t, nil
	}
	t.tail(rest)
	return t, nil
}

// longestType is the length of text beyond which a type is none, bytes.
const longestType = 200

// tail reads what follows the first subclass: marks, a second subclass and
// the luminosity class, in either order.
func (t *Type) tail(rest string) {
	if loc := companion.FindStringIndex(rest); loc != nil {
		t.Composite = true
		rest = rest[:loc[0]]
	}
	rest = t.marks(rest)
	m := lumClass.FindString(rest) // M5IIIe-M6IIIe: before the second
	rest = t.marks(rest[len(m):])
	if n := second.FindStringSubmatch(rest); n != nil && t.Known {
		if v, err := strconv.ParseFloat(n[2], 64); err == nil && v < 10 {
			t.widen(n[1], v)
		}
		rest = t.marks(rest[len(n[0]):])
	}
	if i := strings.IndexAny(rest, "IV"); m == "" && i >= 0 {
		m = lumClass.FindString(rest[i:])
	}
	if m != "" && t.Luminosity == UnknownLuminosity {
		t.Luminosity = luminosities[m]
	}
}

var luminosities = map[string]Luminosity{"Ia+": Supergiant, "Ia": Supergiant, "Iab": Supergiant, "Ib": Supergiant, "I": Supergiant,
	"II": Giant, "III": Giant, "IV": Subgiant, "V": Dwarf, "VI": Dwarf}

// marks takes e, p, n, s and colons off.
func (t *Type) marks(rest string) string {
	for rest != "" {
		switch rest[0] {
		case 'e':
			t.Emission = true
		case ':':
			t.Uncertain = true
		case 'p', 'n', 's', 'v':
		default:
			return rest
		}
		rest = rest[1:]
	}
	return rest
}

// widen makes the type a range up to a second one.
func (t *Type) widen(class string, sub float64) {
	var far float64
	if class != "" {
		far = 10*float64(strings.Index(letters, class)) + sub
	} else {
		far = 10*math.Floor(t.index()/10) + sub
	}
	near := t.index()
	if near < 0 || math.Abs(far-near) > 20 {
		return
	}
	t.Spread = math.Abs(far-near) / 2
	mid := (far + near) / 2
	t.Class, t.Subclass = letters[int(mid/10)], mid-10*math.Floor(mid/10)
}

// index places the type along O0 = 0, B0 = 10, ... M0 = 60; -1 for others.
func (t *Type) index() float64 {
	i := strings.IndexByte(letters, t.Class)
	if i < 0 || !t.Known {
		return -1
	}
	return 10*float64(i) + t.Subclass
}

// String writes class and subclass, e.g. M3.5.
func (t Type) String() string {
	if t.Class == 0 {
		return ""
	}
	if !t.Known {
		return string(t.Class)
	}
	return string(t.Class) + strconv.FormatFloat(math.Round(t.Subclass*100)/100, 'f', -1, 64)
}

// clip keeps a text for a message short.
func clip(s string) string {
	r := []rune(s)
	if len(r) > 40 {
		return string(r[:40]) + "..."
	}
	return s
}
