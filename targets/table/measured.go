package table

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"evenfall/targets"
)

// The magnitudes that are believed; beyond lies a slip of the pen.
const (
	brightestMag = -2
	faintestMag  = 25
)

// moreBands are those of measured magnitudes that are no columns of a target
// list: visual estimates, photographic ones, and the lines of nebulae.
var moreBands = []targets.Band{"v", "p", "Ha", "Hb", "O3"}

// otherNames are what else some bands are called, in lower case.
var otherNames = map[string]targets.Band{"vis": "v", "vis.": "v", "visual": "v", "pg": "p", "pg.": "p", "photographic": "p"}

// NamedBand returns the band of a name: visual estimates as v, photographic
// magnitudes as p, whatever they are called; any other name as it is.
//
// Checked: TestNamedBand.
func NamedBand(b targets.Band) targets.Band {
	if known, ok := otherNames[strings.ToLower(string(b))]; ok {
		return known
	}
	return b
}

// KnownBand tells whether a magnitude may be measured in a band, by any of its
// names.
func KnownBand(b targets.Band) bool {
	b = NamedBand(b)
	return slices.Contains(targets.Bands, b) || slices.Contains(moreBands, b)
}

// bandList names the bands.
func bandList() string {
	var names []string
	for _, b := range slices.Concat(targets.Bands, moreBands) {
		names = append(names, string(b))
	}
	return strings.Join(names, " ")
}

// ahead is how far a time may lie in the future: clocks differ.
const ahead = 2.0 / 1440

// jdOf is the Julian date of a time, day of UTC.
func jdOf(t time.Time) float64 { return 2440587.5 + float64(t.UnixMilli())/86400e3 }

// CheckMagnitude says what makes a measured magnitude absurd, and what to do.
//
// Given:
//   - now: what the clock says, or --at.
//
// Returns:
//   - nil where it can be believed: in a known band, -2 to 25, not in the
//     future.
//
// Checked: TestCheckMagnitude.
func CheckMagnitude(m *targets.Magnitude, now time.Time) error {
	switch {
	case !(m.Mag >= brightestMag && m.Mag <= faintestMag):
		return fmt.Errorf("magnitude %g: outside %d to %d; write e.g. 8.1, or <12.5 for not seen", m.Mag, brightestMag, faintestMag)
	case !(m.Err >= 0 && m.Err <= 5):
		return fmt.Errorf("error %g mag: write one sigma, 0 to 5, e.g. 0.05", m.Err)
	case m.Band != "" && !KnownBand(m.Band):
		return fmt.Errorf("band %q: not known; use one of %s", string(m.Band), bandList())
	case !(m.JD > 2.3e6 && m.JD < 2.6e6):
		return fmt.Errorf("Julian date %g: none of our time; write e.g. 2461376.67", m.JD)
	case m.JD > jdOf(now)+ahead+oneHour(m.TimeScale):
		return fmt.Errorf("JD %.4f lies in the future: the clock says %s; write when it was measured", m.JD, now.UTC().Format("2006-01-02 15:04 UTC"))
	}
	return nil
}

// oneHour allows for the light-time and the seconds that other scales than
// JD_UTC are ahead by.
func oneHour(scale string) float64 {
	if scale == "" || scale == "JD_UTC" {
		return 0
	}
	return 1.0 / 24
}

// TypedMagnitude reads a magnitude as somebody types it at the telescope: the
// value, < before it for a limit, +- and its error behind it; then, if they are
// others than at hand, the band and the time.
//
// Given:
//   - text: e.g. 8.1, <12.5, 8.13+-0.02, 8.1 B, 8.1 B 2026-12-02T03:10.
//   - band: in which it is unless the text says so.
//   - now: when it is of unless the text says so; nothing later is taken.
//
// Returns:
//   - an error that says what to do.
//
// Checked: TestTypedMagnitude, FuzzTypedMagnitude.
func TypedMagnitude(text string, band targets.Band, now time.Time) (targets.Magnitude, error) {
	m := targets.Magnitude{TimeScale: "JD_UTC", Band: NamedBand(band), JD: jdOf(now)}
	words := strings.Fields(Clean(strings.ReplaceAll(strings.ReplaceAll(text, "< ", "<"), "+-", " +-")))
	const how = "write the value, e.g. 8.1, or <12.5 for not seen"
	if len(words) == 0 {
		return m, fmt.Errorf("no magnitude: %s", how)
	}
	value, limit := strings.CutPrefix(words[0], "<")
	v, wrong, _ := parseNumber(value)
	if wrong != "" || math.IsNaN(v) || math.IsInf(v, 0) {
		return m, fmt.Errorf("%q: no number; %s", words[0], how)
	}
	m.Mag, m.Limit = v, limit
	for i := 1; i < len(words); i++ {
		if err := typedWord(&m, words[i:], &i); err != nil {
			return m, err
		}
	}
	return m, CheckMagnitude(&m, now)
}

// typedWord reads the next of the words behind the value; next is moved on where it
// takes two.
func typedWord(m *targets.Magnitude, words []string, next *int) error {
	w := words[0]
	if rest, ok := strings.CutPrefix(w, "+-"); ok {
		if rest == "" && len(words) > 1 {
			rest = words[1]
			*next++
		}
		e, wrong, _ := parseNumber(rest)
		if wrong != "" || !(e >= 0) {
			return fmt.Errorf("%q: no error of a magnitude; write e.g. 8.1+-0.05", w+rest)
		}
		m.Err = e
		return nil
	}
	if KnownBand(targets.Band(w)) {
		m.Band = NamedBand(targets.Band(w))
		return nil
	}
	if len(words) > 1 {
		if t, err := time.Parse("2006-01-02 15:04", w+" "+strings.TrimSuffix(words[1], "UTC")); err == nil {
			m.JD = jdOf(t)
			*next++
			return nil
		}
	}
	for _, layout := range []string{time.RFC3339, "2006-01-02T15:04:05", "2006-01-02T15:04", "2006-01-02"} {
		if t, err := time.Parse(layout, w); err == nil {
			m.JD = jdOf(t)
			return nil
		}
	}
	return fmt.Errorf("%q: neither a band (%s) nor a time; write e.g. 8.1 B 2026-12-02T03:10", w, bandList())
}

// MagnitudeWord writes a measured magnitude: band, < for a limit, value and
// error.
func MagnitudeWord(m *targets.Magnitude) string {
	sign := ""
	if m.Limit {
		sign = "<"
	}
	text := fmt.Sprintf("%s %s%.2f", m.Band, sign, m.Mag)
	if m.Err > 0 {
		text += fmt.Sprintf("+-%.2g", m.Err)
	}
	return text
}

// SetAside sorts magnitudes into those that can be believed and those that
// cannot, each of these with the reason: absurd ones, and those that say the
// same as one before (target, band, value within 10 s). Bands get the one name
// that they have here, see [NamedBand].
//
// Checked: TestSetAside.
func SetAside(list []targets.Magnitude, now time.Time) (kept []targets.Magnitude, aside []*Error) {
	type same struct {
		target string
		band   targets.Band
		mag    float64
		when   int64
	}
	seen := map[same]bool{}
	for i := range list {
		one := list[i]
		m := &one
		m.Band = NamedBand(m.Band)
		problem, fix := "", ""
		if err := CheckMagnitude(m, now); err != nil {
			problem, fix, _ = strings.Cut(err.Error(), "; ")
		}
		key := same{targets.Key(m.Target), m.Band, m.Mag, int64(math.Round(m.JD * 8640))}
		if problem == "" && seen[key] {
			problem, fix = "the same as a magnitude before it", "keep one"
		}
		if problem == "" {
			seen[key] = true
			kept = append(kept, *m)
			continue
		}
		aside = append(aside, &Error{At: m.At, Field: "mag", Value: MagnitudeWord(m), Problem: problem + "; set aside", Fix: fix, Warning: true})
	}
	return kept, aside
}
