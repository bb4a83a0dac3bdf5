package light

import (
	"fmt"
	"math"
	"regexp"

	"evenfall/astro/cite"
	"evenfall/targets"
)

// What states of dwarf novae last, days: between outbursts, and in one. The
// middles of what is usual, which spreads over a factor of two either way;
// from memory, not checked against a publication.
const (
	ugTn, ugD         = 50.0, 9.0 // 20 to 120, 5 to 15
	zCamTn, zCamD     = 18.0, 6.0 // 10 to 30
	suTn, suD         = 32.0, 3.0 // 10 to 100
	superTn, superD   = 224.0, 14.0
	wzTn, wzD         = 4470.0, 25.0 // 5 to 30 years
	superBrighter     = 0.7          // than a normal outburst, mag
	standstillFainter = 0.7          // than maximum, mag
	monthsD           = 60.0         // what polars stay in a state
)

// class is what the type of an interacting binary makes of its extremes; a is
// mag_max, b mag_min.
type class struct {
	pattern *regexp.Regexp // of type, or of what the list notes beside the kind
	how     string
	states  func(a, b float64) []state
}

const novaLike, detached = "nova-like star", "detached eclipsing binary"

// classes are looked through in order; the first that fits counts. All shares
// and times are from memory, not checked against a publication; extremes are
// extremes, so usual values lie some tenths inside them.
var classes = []class{
	{regexp.MustCompile(`^E[AB]?/?(D|WD|RS)?(/|\+X|$)`), detached, func(a, b float64) []state {
		return []state{{name: "out of eclipse", p: 1, mag: a, sd: 0.08}}
	}},
	{regexp.MustCompile(`UGWZ`), "dwarf nova of the rarest outbursts", func(a, b float64) []state {
		return outbursts(b-0.2, 0.3, wzTn, wzD, state{name: "superoutburst", p: wzD / wzTn, mag: a + 0.7, sd: 0.7})
	}},
	{regexp.MustCompile(`intermediate polar \(propeller\)|^XM|^XP|DQ`), "intermediate polar", func(a, b float64) []state {
		return []state{{name: "usual state", p: 0.97, mag: a + 0.65*(b-a), sd: math.Min(0.15*(b-a)+0.2, 0.5)},
			{name: "flare or outburst", p: 0.03, mag: a + 0.3, sd: 0.4}}
	}},
	{regexp.MustCompile(`^AM|(^|[^e] |eclipsing )polar`), "polar", func(a, b float64) []state {
		return []state{{name: "high state", p: 0.5, mag: a + 0.6, sd: 0.4, dwell: monthsD}, {name: "low state", p: 0.5, mag: b - 0.5, sd: 0.5, dwell: monthsD}}
	}},
	{regexp.MustCompile(`intermediate polar$`), "intermediate polar with rare outbursts", func(a, b float64) []state {
		return outbursts(b-0.5, 0.4, 300, 3, state{name: "outburst", p: 0.01, mag: a + 0.7, sd: 0.5})
	}},
	{regexp.MustCompile(`UGZ`), "dwarf nova with standstills", func(a, b float64) []state {
		l := outbursts(b-0.3, 0.35, zCamTn, zCamD, state{name: "outburst", p: 0.30, mag: a + 0.4, sd: 0.35},
			state{name: "standstill", p: 0.15, mag: a + standstillFainter, sd: 0.25, dwell: 150})
		return l
	}},
	{regexp.MustCompile(`UGSU`), "dwarf nova with superoutbursts", func(a, b float64) []state {
		return outbursts(b-0.4, 0.4, suTn, suD, state{name: "outburst", p: suD / suTn, mag: a + 0.3 + superBrighter, sd: 0.4},
			state{name: "superoutburst", p: superD / superTn, mag: a + 0.3, sd: 0.3, dwell: superD})
	}},
	{regexp.MustCompile(`UG`), "dwarf nova", func(a, b float64) []state {
		return outbursts(b-0.4, 0.4, ugTn, ugD, state{name: "outburst", p: ugD / ugTn, mag: a + 0.5, sd: 0.4})
	}},
	{regexp.MustCompile(`ZAND`), "symbiotic star", func(a, b float64) []state {
		return []state{{name: "quiescence", p: 0.85, mag: b - 0.25*(b-a), sd: 0.15*(b-a) + 0.2, dwell: 4100},
			{name: "outburst", p: 0.15, mag: a + 0.5, sd: 0.5, dwell: 730}}
	}},
	{regexp.MustCompile(`^NC`), "symbiotic nova long after its outburst", novaStates},
	{regexp.MustCompile(`^N[ABR]?(\b|:|\+)`), "nova long after its outburst", novaStates},
	{regexp.MustCompile(`NL|nova-like`), novaLike, func(a, b float64) []state {
		if b-a < 1.5 {
			return []state{{name: "usual state", p: 1, mag: (a + b) / 2, sd: (b-a)/4 + 0.1}}
		}
		return []state{{name: "high state", p: 0.9, mag: a + 0.4, sd: 0.3, dwell: 900}, {name: "low state", p: 0.1, mag: b - 0.7, sd: 0.7, dwell: 100}}
	}},
	{regexp.MustCompile(`XM|XP`), "magnetic binary", func(a, b float64) []state {
		return []state{{name: "usual state", p: 0.5, mag: a + 0.6, sd: 0.4, dwell: monthsD}, {name: "low state", p: 0.5, mag: b - 0.5, sd: 0.5, dwell: monthsD}}
	}},
}

func novaStates(a, b float64) []state {
	return []state{{name: "quiescence", p: 0.9995, mag: b - 0.3, sd: 0.5, dwell: 1e5}, {name: "eruption", p: 0.0005, mag: a + 0.7, sd: 0.7, dwell: 50}}
}

// outbursts makes the states of a star that is quiet but for outbursts which
// begin once in so many days and last so many.
func outbursts(quiet, sd, tn, d float64, bright ...state) []state {
	rest := 1.0
	for i := range bright {
		rest -= bright[i].p
		if bright[i].dwell == 0 {
			bright[i].dwell = d
		}
	}
	return append([]state{{name: "quiescence", p: rest, mag: quiet, sd: sd, dwell: tn - d, fixed: d}}, bright...)
}

// Helium binaries are told by their periods, minutes: below 22 always bright,
// between 22 and 44 with outbursts, above quiet. From memory.
const heliumLongestMin, heliumBrightMin, heliumQuietMin = 70, 22, 44

var heliumBinary = regexp.MustCompile(`AM CVn|helium`)

// helium returns the states of an AM CVn star by its period.
func helium(a, b, periodMin float64) ([]state, string) {
	switch {
	case periodMin < heliumBrightMin:
		return []state{{name: "permanent high state", p: 1, mag: a + 0.4*(b-a), sd: math.Min((b-a)/4, 0.3) + 0.05}}, "helium binary of short period"
	case periodMin < heliumQuietMin:
		return outbursts(b-0.3, 0.4, 20, 6, state{name: "outburst", p: 0.3, mag: a + 0.4, sd: 0.4}), "helium binary with outbursts"
	}
	return outbursts(b-0.2, 0.3, 2500, 25, state{name: "outburst", p: 0.01, mag: a + 0.5, sd: 0.5}), "helium binary of long period"
}

// newBinary prepares an interacting binary.
func newBinary(t *targets.Target, list []reading, timed []timed, steady *steady) model {
	a, b, words, ok := extremesOf(t)
	if r, found := recurrents[targets.Key(t.Name)]; found {
		return newRecurrent(t, r, list, steady)
	}
	if !ok {
		return steady
	}
	if n := newNova(t, list, steady, a, b); n != nil {
		return n
	}
	s := &states{t: t, readings: list, steady: steady, band: bandOf(t.Var.MagBand), faint: b,
		source: "shares and lengths of states " + fromMemory, eclipse: clockOf(timed, kindEclipse)}
	periodMin := math.NaN()
	if p := t.Var.PeriodD; usable(p) {
		periodMin = p.Value * 1440
	}
	c := classOf(t)
	quiet, quietSD, eclipseWords, eclipses := outOfEclipse(t, s.eclipse, a, b)
	if c != nil && c.how == detached {
		eclipses = false // its class speaks of the brightest alone
	}
	faint := b
	if eclipses {
		b = math.Min(b, quiet+quietInside)
	}
	switch {
	case periodMin > 0 && periodMin < heliumLongestMin && (heliumBinary.MatchString(t.KindNote) || c == nil):
		s.list, s.how = helium(a, b, periodMin)
	case c != nil && c.how == novaLike && s.eclipse != nil && s.eclipse.halfMin > 0: // the faintest is the eclipse
		s.list, s.how = []state{{name: "high state", p: 1, mag: a + 0.4, sd: 0.3}}, c.how
	case c != nil:
		s.list, s.how = c.states(a, b), c.how
	default:
		s.list, s.how = []state{{name: "usual state", p: 1, mag: (a + b) / 2, sd: math.Max((b-a)/rangeSigmas, 0.1)}}, "variable of no predictable kind"
	}
	if eclipses && !(c != nil && c.how == novaLike) {
		quieten(s.list, quiet, quietSD)
		words += eclipseWords
	}
	s.how = fmt.Sprintf("%s (type %s), extremes %.1f to %.1f in %s%s", s.how, t.Var.Type, a, faint, s.band, words)
	return s
}

// classOf returns the class of a binary: by what the list notes beside the
// kind, which is the more particular, then by its type; nil: none.
func classOf(t *targets.Target) *class {
	texts := []string{t.KindNote, t.Var.Type}
	if oldNova.MatchString(t.Var.Type) {
		texts = []string{t.Var.Type} // its extremes are those of the nova, whatever else it is
	}
	for _, text := range texts {
		for i := range classes {
			if text != "" && classes[i].pattern.MatchString(text) {
				return &classes[i]
			}
		}
	}
	return nil
}

// Absolute magnitudes that stand in for an extreme that is not listed.
//
// Source: [cite.Warner1987].
const novaQuietMV = 4.4

// DwarfNovaMV returns how bright a dwarf nova gets in outburst.
//
//	M_V = 5.64 - 0.259 P     P: orbital period, hours
//
// Source: [cite.Warner1987].
//
// Checked: TestBinaryFigures.
func DwarfNovaMV(periodH float64) float64 { return 5.64 - 0.259*periodH }

// extremesOf returns brightest and faintest magnitude, as listed or, in V, by
// absolute magnitude and parallax, and says so.
func extremesOf(t *targets.Target) (a, b float64, words string, ok bool) {
	max, min, plx := t.Var.MagMax, t.Var.MagMin, t.Place.Plx
	a, b = max.Value, min.Value
	near := usable(plx) && plx.Value > 0 && plx.Value > 5*plx.Err && bandOf(t.Var.MagBand) == "V"
	modulus := 10 - 5*math.Log10(math.Max(plx.Value, 1e-9))
	if p := t.Var.PeriodD; !usable(max) && usable(min) && near && usable(p) && p.Value > 0 && p.Value < 1 && dwarfNova.MatchString(t.Var.Type) {
		a = DwarfNovaMV(p.Value*24) + modulus
		words = fmt.Sprintf("; outburst of %.1f by M_V = 5.64 - 0.259 P(h) and the parallax, no extinction (%s)", a, cite.Warner1987)
		return a, b, words, b >= a
	}
	if !usable(min) && usable(max) && near && oldNova.MatchString(t.Var.Type) {
		b = novaQuietMV + modulus
		return a, b, fmt.Sprintf("; quiescence of %.1f by M_V = 4.4 and the parallax, no extinction (%s)", b, cite.Warner1987), b >= a
	}
	return a, b, "", usable(max) && usable(min) && b >= a
}

var (
	dwarfNova = regexp.MustCompile(`UG`)
	oldNova   = regexp.MustCompile(`^N[ABCR]?(\b|:|\+)`)
)

// What R CrB stars do: the share of time more than a magnitude down and the
// wander of their light there are common practice, no source; the time between
// declines, days, is from memory.
const (
	fadedShare = 0.25
	fadeAfterD = 1100.0
	fadedD     = fadeAfterD * fadedShare / (1 - fadedShare)
	fadedWalk  = 0.15
)

// newFading prepares a star that fades without notice.
func newFading(t *targets.Target, list []reading, steady *steady) model {
	max, min := t.Var.MagMax, t.Var.MagMin
	if !usable(max) || !usable(min) || min.Value < max.Value+1 {
		return steady
	}
	a, b := max.Value, min.Value
	return &states{t: t, readings: list, steady: steady, band: bandOf(t.Var.MagBand), faint: b,
		source: "shares and walk common practice, no source; 1100 d between declines " + fromMemory,
		list: []state{{name: "at maximum", p: 1 - fadedShare, mag: a + 0.2, sd: 0.2, dwell: fadeAfterD, fixed: fadedD},
			{name: "in decline", p: fadedShare, mag: (a + 1 + b) / 2, sd: (b-a-1)/4 + 0.2, dwell: fadedD, walks: fadedWalk}},
		how: fmt.Sprintf("R Coronae Borealis star, extremes %.1f to %.1f", a, b)}
}
