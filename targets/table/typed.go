package table

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"regexp"
	"strings"

	"evenfall/targets"
)

// Typed is a target as somebody types it.
type Typed struct {
	Name     string
	Position string // ICRS or FK5 J2000, in any usual notation
	Kind     string
	Mag      string // "V 12.3", "12.3" (V)
	Motion   string // mas/yr: along right ascension with cos dec, along declination
	Epoch    string // Julian year of the position
}

// TypedProblem is what is wrong with one field as typed.
type TypedProblem struct {
	Field   string // a column, or "position", "mag", "motion"
	Text    string
	Warning bool
}

// longestTyped is how long a field or a pasted line may be, bytes.
const longestTyped = 1000

// minutes and seconds of a sexagesimal figure, each with its sign or blank.
const tail = `[\s:hdm°]+\d{1,2}(?:\.\d+)?(?:[\s:m'′]+\d{1,2}(?:\.\d+)?[s"″]?)?`

var (
	sexagesimalPair = regexp.MustCompile(`(\d{1,2}` + tail + `)[\s,;]*([+\-−]\s?\d{1,2}` + tail + `)`)
	decimalPair     = regexp.MustCompile(`(?:^|[\s,;])(\d{1,3}\.\d+)\s*[,;\s]\s*([+\-−]?\d{1,2}\.\d+)`)
	packed          = regexp.MustCompile(`(\d{2})(\d{2})(\d{2}(?:\.\d+)?)([+\-−])(\d{2})(\d{2})(\d{2}(?:\.\d+)?)`)
	magnitudeWord   = regexp.MustCompile(`(?:^|[\s,;])(BP|RP|W1|W2|[GUBVRIugrizJHK])\s*[=~ ]\s*(-?\d{1,2}(?:\.\d+)?)\b|(?:^|[\s,;])(?:mag|magnitude)\s*[=~ ]?\s*(-?\d{1,2}(?:\.\d+)?)\b`)
	motionWord      = regexp.MustCompile(`(?:^|[\s,;])pm\s*[=:]?\s*([+\-−]?\d+(?:\.\d+)?)[\s,;]+([+\-−]?\d+(?:\.\d+)?)`)
	motionPair      = regexp.MustCompile(`^\s*([+\-−]?\d+(?:\.\d+)?)[\s,;]+([+\-−]?\d+(?:\.\d+)?)\s*(?:mas/yr)?\s*$`)
)

// SplitPosition separates right ascension and declination.
//
// Given:
//   - s: e.g. "05 34 31.94 +22 00 52.2", "05:34:31.9 +22:00:52",
//     "5h34m31.9s +22d00m52s", "83.6331 22.0145" (degrees), "J053431.94+220052.2".
//
// Returns:
//   - the two as a list's cells have them; false where there is no position.
func SplitPosition(s string) (ra, dec string, ok bool) {
	if m := sexagesimalPair.FindStringSubmatch(s); m != nil {
		return m[1], strings.ReplaceAll(m[2], " ", " "), true
	}
	if m := packed.FindStringSubmatch(s); m != nil {
		return m[1] + " " + m[2] + " " + m[3], m[4] + m[5] + " " + m[6] + " " + m[7], true
	}
	if m := decimalPair.FindStringSubmatch(s); m != nil {
		return m[1], m[2], true
	}
	return "", "", false
}

// FromPaste takes a line apart that holds a whole target: what stands before
// the position is the name, magnitude and motion are found by their signs
// (V=12.3, mag 12.3, pm +12 -30). False: there is no position in it.
func FromPaste(line string) (Typed, bool) {
	if len(line) > longestTyped {
		return Typed{}, false
	}
	line = Clean(strings.Join(strings.Fields(line), " "))
	var at []int
	for _, re := range []*regexp.Regexp{sexagesimalPair, packed, decimalPair} {
		if at = re.FindStringIndex(line); at != nil {
			break
		}
	}
	if at == nil {
		return Typed{}, false
	}
	t := Typed{Name: strings.Trim(line[:at[0]], " ,;|"), Position: strings.Trim(line[at[0]:at[1]], " ,;")}
	if packed.MatchString(t.Position) && strings.HasSuffix(t.Name, "J") {
		t.Name = line[:at[1]] // a designation is its own position
	}
	rest := line[at[1]:]
	if m := magnitudeWord.FindStringSubmatch(rest); m != nil {
		t.Mag = strings.TrimSpace(m[1] + " " + m[2] + m[3])
	}
	if m := motionWord.FindStringSubmatch(rest); m != nil {
		t.Motion = m[1] + " " + m[2]
	}
	return t, true
}

// Target checks what was typed, by the rules of target lists.
//
// Returns:
//   - the target and what is wrong or doubtful; it can be used where no
//     problem is more than a warning.
//
// Checked: TestTyped, FuzzTyped.
func (y Typed) Target() (targets.Target, []TypedProblem) {
	var problems []TypedProblem
	wrong := func(field, format string, a ...any) {
		problems = append(problems, TypedProblem{Field: field, Text: fmt.Sprintf(format, a...)})
	}
	for _, f := range []string{y.Name, y.Position, y.Kind, y.Mag, y.Motion, y.Epoch} {
		if len(f) > longestTyped {
			wrong("name", "a field of %d bytes; nobody types that, write one target", len(f))
			return targets.Target{}, problems
		}
	}
	cells := [][2]string{{"name", strings.TrimSpace(y.Name)}, {"kind", strings.TrimSpace(y.Kind)}, {"epoch_jyr", strings.TrimSpace(y.Epoch)}}
	if strings.TrimSpace(y.Name) == "" {
		wrong("name", "a target needs a name")
	}
	if strings.HasPrefix(strings.TrimSpace(y.Name), "#") {
		wrong("name", "a name does not begin with #, which begins a comment in lists")
		return targets.Target{}, problems
	}
	ra, dec, ok := SplitPosition(y.Position)
	switch {
	case strings.TrimSpace(y.Position) == "":
		wrong("position", "a target needs a position, e.g. 05 34 31.9 +22 00 52 or 83.6331 +22.0145")
	case !ok:
		wrong("position", "not a position; write e.g. 05 34 31.9 +22 00 52, or degrees 83.6331 +22.0145")
	}
	cells = append(cells, [2]string{"ra", ra}, [2]string{"dec", dec})
	if s := strings.TrimSpace(y.Mag); s != "" {
		if m := magnitudeWord.FindStringSubmatch(s); m != nil && m[1] != "" {
			cells = append(cells, [2]string{m[1], m[2]})
		} else {
			cells = append(cells, [2]string{"V", strings.TrimSpace(strings.TrimPrefix(s, "mag"))})
		}
	}
	if s := strings.TrimSpace(y.Motion); s != "" {
		if m := motionPair.FindStringSubmatch(s); m != nil {
			cells = append(cells, [2]string{"pmra_masyr", m[1]}, [2]string{"pmdec_masyr", m[2]})
		} else {
			wrong("motion", "write two numbers in mas/yr, e.g. +12.3 -45")
		}
	}
	if len(problems) > 0 && !ok {
		return targets.Target{}, problems
	}
	list, found := Read(asList(cells), "typed")
	for _, p := range found {
		field := p.Field
		switch field {
		case "ra", "dec":
			field = "position"
		case "pmra_masyr", "pmdec_masyr":
			field = "motion"
		case "epoch_jyr":
			field = "epoch"
		case "":
			field = "name"
		}
		text := strings.TrimSuffix(p.Problem, "; the row is left out")
		if p.Fix != "" {
			text += "; " + p.Fix
		}
		problems = append(problems, TypedProblem{field, text, p.Warning})
	}
	if len(list) != 1 {
		if len(problems) == 0 {
			wrong("position", "not a target; write name and position")
		}
		return targets.Target{}, problems
	}
	return list[0], problems
}

// asList writes the cells as a list of one row.
func asList(cells [][2]string) *bytes.Buffer {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	var head, row []string
	for _, c := range cells {
		if c[1] == "" && c[0] != "name" && c[0] != "ra" && c[0] != "dec" {
			continue
		}
		head, row = append(head, c[0]), append(row, strings.ReplaceAll(c[1], "−", "-"))
	}
	w.Write(head)
	w.Write(row)
	w.Flush()
	return &b
}
