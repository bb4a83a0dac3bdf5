package roster

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"evenfall/targets"
	"evenfall/targets/moment"
)

// Filter is what a line of the screen asks of targets: words that must occur,
// and conditions on figures. The zero value lets everything pass.
type Filter struct {
	words []string
	conds []condition
}

// condition is one comparison, e.g. alt>35.
type condition struct {
	column, op, text string
	value            float64
}

// operators, the longer first.
var operators = []string{">=", "<=", "!=", ">", "<", "="}

// textColumns can be compared with = and != alone.
var textColumns = []string{"kind", "stage", "ends", "mark"}

// numberColumns are figures of the moment; bands of magnitudes come on top.
var numberColumns = []string{"alt", "x", "moon", "sun", "ha", "ra", "dec", "mag", "sb", "left", "best", "bestx", "period", "p"}

// ParseFilter reads a line such as
//
//	lep kind=wd alt>35 V<16 stage=TPAGB
//
// Returns:
//   - an error that names the word it stumbled on and what may stand there.
//
// Notes:
//  1. Figures: alt deg, x airmass, moon and sun deg, ha h, ra and dec deg, mag
//     expected, sb mag/arcsec2, left min, best UTC hour, bestx airmass then,
//     period d; mark=yes the marked; a band of
//     magnitudes means the expected one in it, nebulae answer with sb; p the
//     probability of the likeliest stage, and the code of a stage, such as
//     RGB, its own, 0 to 1.
func ParseFilter(line string) (Filter, error) {
	var f Filter
	for _, word := range strings.Fields(line) {
		column, op, text := split(word)
		if op == "" {
			f.words = append(f.words, strings.ToLower(word))
			continue
		}
		if text == "" {
			return Filter{}, fmt.Errorf("%s: write what to compare with after %s", word, op)
		}
		c := condition{column: column, op: op, text: text}
		low := strings.ToLower(column)
		switch {
		case slices.Contains(textColumns, low):
			if op != "=" && op != "!=" {
				return Filter{}, fmt.Errorf("%s: %s is compared with = or !=", word, low)
			}
			c.column = low
		case slices.Contains(numberColumns, low) && !isBand(column), isBand(column), stageNamed(column) != "":
			v, err := strconv.ParseFloat(text, 64)
			if err != nil {
				return Filter{}, fmt.Errorf("%s: write a number after %s", word, op)
			}
			c.value = v
			if code := stageNamed(column); code != "" {
				c.column = string(code)
			} else if !isBand(column) {
				c.column = low
			}
		default:
			return Filter{}, fmt.Errorf("%s: no column %s; there are %s, bands such as V and stages such as WD", word, column,
				strings.Join(append(slices.Clone(textColumns), numberColumns...), " "))
		}
		f.conds = append(f.conds, c)
	}
	return f, nil
}

func split(word string) (column, op, text string) {
	for _, o := range operators {
		if i := strings.Index(word, o); i > 0 {
			return word[:i], o, word[i+len(o):]
		}
	}
	return word, "", ""
}

// Settled returns the part of a filter being typed that can be applied: a last
// word that may yet become the name of a column is left out.
func Settled(line string) string {
	if line == "" || strings.HasSuffix(line, " ") {
		return line
	}
	at := strings.LastIndex(line, " ") + 1
	last := strings.ToLower(line[at:])
	for _, c := range slices.Concat(textColumns, numberColumns) {
		if strings.HasPrefix(c, last) && len(last) > 1 || c == last {
			return line[:at]
		}
	}
	return line
}

func isBand(s string) bool { return slices.Contains(targets.Bands, targets.Band(s)) }

// Empty tells whether everything passes.
func (f *Filter) Empty() bool { return len(f.words)+len(f.conds) == 0 }

// text tells whether a target's texts pass; cheap.
func (f *Filter) text(search string) bool {
	for _, w := range f.words {
		if !strings.Contains(search, w) {
			return false
		}
	}
	return true
}

// passes tells whether a target's figures pass. What is not known does not.
func (f *Filter) passes(r *Roster, i int, m *moment.Moment, marks map[int]bool) bool {
	for _, c := range f.conds {
		if c.column == "mark" {
			if word := strings.ToLower(c.text); (marks[i] == (word != "no")) != (c.op == "=") {
				return false
			}
			continue
		}
		if !c.holds(r, i, m) {
			return false
		}
	}
	return true
}

func (c *condition) holds(r *Roster, i int, m *moment.Moment) bool {
	t := &r.entries[i].Target
	switch c.column {
	case "kind":
		return c.same(string(t.Kind))
	case "stage":
		return c.same(m.Stage.Best)
	case "ends":
		return c.same(string(m.EndsBy))
	}
	v, ok := c.figure(t, m)
	return ok && c.compare(v)
}

func (c *condition) same(s string) bool { return strings.EqualFold(s, c.text) == (c.op == "=") }

// figure returns the number that a condition is about.
func (c *condition) figure(t *targets.Target, m *moment.Moment) (float64, bool) {
	switch c.column {
	case "alt":
		return m.Apparent.Deg(), true
	case "x":
		return float64(m.Airmass), m.AirOK
	case "moon":
		return m.MoonSep.Deg(), true
	case "sun":
		return m.SunSep.Deg(), true
	case "ha":
		return m.Place.HourAngle.Hours(), true
	case "ra":
		return m.RA.Deg(), true
	case "dec":
		return m.Dec.Deg(), true
	case "left":
		return m.Left.Minutes(), m.Left > 0
	case "best":
		if m.Course.Best == nil {
			return 0, false
		}
		t := m.Course.Best.UTC()
		return float64(t.Hour()) + float64(t.Minute())/60, true
	case "bestx":
		return float64(m.Course.BestAirmass), m.Course.Best != nil
	case "p":
		return m.Stage.Sureness(), true
	case "period":
		return t.Var.PeriodD.Value, t.Var.PeriodD.Known
	case "mag":
		return m.Expect.Mag.Mags(), m.Expect.Known
	case "sb":
		if m.Expect.SB == nil {
			return 0, false
		}
		return m.Expect.SB.Value.MagArcsec2(), true
	}
	if code := targets.Stage(c.column); stageNamed(c.column) == code {
		return m.Stage.P[code], true
	}
	if m.Expect.SB != nil {
		return m.Expect.SB.Value.MagArcsec2(), true
	}
	if string(m.Expect.Band) == c.column {
		return m.Expect.Mag.Mags(), m.Expect.Known
	}
	b := t.Mags[targets.Band(c.column)]
	return b.Value, b.Known
}

func (c *condition) compare(v float64) bool {
	switch c.op {
	case ">":
		return v > c.value
	case "<":
		return v < c.value
	case ">=":
		return v >= c.value
	case "<=":
		return v <= c.value
	case "!=":
		return v != c.value
	}
	return v == c.value
}
