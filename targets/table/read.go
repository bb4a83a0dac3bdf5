// Package table reads and writes lists: targets, requests, magnitudes. It
// works on readers and writers, opens no file, and reports every cell that it
// cannot take, with its place and what to write instead; the good rows still
// load. It never fills in a value that a list does not give.
package table

import (
	"fmt"
	"io"
	"slices"
	"strings"
	"unicode/utf8"

	"evenfall/astro"
	"evenfall/targets"
)

// Read reads a list of targets.
//
// Given:
//   - r: CSV, UTF-8, one header row, lines beginning with # are comments.
//   - name: the file's name, for messages.
//
// Returns:
//   - the rows that have a name and a position. A bad cell elsewhere costs
//     only itself.
//   - every problem: the first 50 one by one, then the count of the rest.
//     Warnings are things that were taken all the same.
//
// Checked: TestReadBad, TestRoundTrip, FuzzRead.
func Read(r io.Reader, name string) ([]targets.Target, []*Error) {
	return ReaderWith(nil)(r, name)
}

// ReaderWith returns a reader of lists in which some headings mean one of our
// columns: theirs to ours.
func ReaderWith(rename map[string]string) func(io.Reader, string) ([]targets.Target, []*Error) {
	return func(r io.Reader, name string) ([]targets.Target, []*Error) {
		s := cut(r, name)
		l := &list{sheet: s, rename: rename}
		if !l.head() {
			return nil, told(name, s.problems)
		}
		l.checkHours()
		for _, row := range s.rows {
			l.row(row)
		}
		l.after()
		return l.targets, told(name, s.problems)
	}
}

// list is a list being read.
type list struct {
	*sheet
	rename  map[string]string
	names   []string // canonical column by position; "" for unknown ones
	by      map[string]int
	known   map[string]*column
	inHours bool
	targets []targets.Target
}

// head settles which column is which; false: nothing can be read.
func (l *list) head() bool {
	top := targets.Where{File: l.name}
	if l.header.cells == nil {
		l.problem(top, "", "", "no header row", "begin with a line of column names, e.g. name,ra_deg,dec_deg")
		return false
	}
	if sep := separatorHint(l.header); sep != "" {
		l.problem(l.where(l.header.cells[0]), "", "", "columns are separated by "+sep, "write commas")
		return false
	}
	l.by, l.known = map[string]int{}, map[string]*column{}
	for i := range columns {
		l.known[columns[i].Name] = &columns[i]
	}
	for i, c := range l.header.cells {
		name := canonical(c.text)
		if ours, ok := l.rename[c.text]; ok {
			name = ours
		}
		if first, twice := l.by[name]; name != "" && twice {
			l.problem(l.where(c), "", c.text, fmt.Sprintf("a second column for %s, after %q", name, Clean(l.header.cells[first].text)),
				"keep one; this one is kept as it is under its own heading")
			name = ""
		}
		l.names = append(l.names, name)
		if name != "" {
			l.by[name] = i
		}
	}
	ok := l.needs("name", "name") && l.needs("right ascension", "ra_deg", "ra") && l.needs("declination", "dec_deg", "dec")
	for theirs := range l.rename {
		if !slices.ContainsFunc(l.header.cells, func(c cell) bool { return c.text == theirs }) {
			l.problem(top, "", theirs, "no such column in the file", "its columns are "+l.headings())
		}
	}
	return ok
}

func (l *list) headings() string {
	var h []string
	for _, c := range l.header.cells {
		h = append(h, Clean(c.text))
	}
	return strings.Join(h, ", ")
}

func (l *list) needs(what string, any ...string) bool {
	for _, n := range any {
		if _, ok := l.by[n]; ok {
			return true
		}
	}
	if _, ok := l.by["id"]; ok && what == "name" {
		return true
	}
	l.problem(targets.Where{File: l.name, Line: l.header.line}, "", "", "no column for the "+what,
		"name it "+strings.Join(any, " or ")+"; the columns found are "+l.headings())
	return false
}

// at returns a cell of a row by column; false: not there or empty.
func (l *list) at(r row, name string) (cell, bool) {
	i, ok := l.by[name]
	if !ok || i >= len(r.cells) || isNull(r.cells[i].text) {
		return cell{}, false
	}
	return r.cells[i], true
}

// row reads one target.
func (l *list) row(r row) {
	t := targets.Target{At: targets.Where{File: l.name, Line: r.line}}
	if len(r.cells) > len(l.names) {
		l.problem(l.where(r.cells[len(l.names)]), "", r.cells[len(l.names)].text,
			fmt.Sprintf("%d cells in a row of %d columns; the rest is left out", len(r.cells), len(l.names)), "quote texts that hold a comma")
	}
	if c, ok := l.at(r, "id"); ok {
		t.ID = l.clean(c)
	}
	if c, ok := l.at(r, "name"); ok {
		t.Name = l.clean(c)
	} else {
		t.Name = t.ID
	}
	if t.Name == "" {
		l.problem(targets.Where{File: l.name, Line: r.line}, "name", "", "empty; the row is left out", "give the target a name")
		return
	}
	if !l.position(r, &t) {
		return
	}
	for i, c := range r.cells {
		if i < len(l.names) && !isNull(c.text) {
			l.cell(i, c, &t)
		}
	}
	l.finish(r, &t)
	l.targets = append(l.targets, t)
}

// clean returns a cell's text fit to be shown, and warns where bytes were not
// UTF-8.
func (l *list) clean(c cell) string {
	if !utf8.ValidString(c.text) {
		l.warn(l.where(c), "", c.text, "bytes that are not UTF-8 are shown as \ufffd", "save the file as UTF-8")
	}
	return Clean(c.text)
}

// position reads where a target is; false: the row cannot be used.
func (l *list) position(r row, t *targets.Target) bool {
	read := func(what string, names [2]string, hours bool, lo, hi float64, fix string) (astro.Angle, bool) {
		for _, n := range names {
			c, ok := l.at(r, n)
			if !ok {
				continue
			}
			a, wrong := parseAngle(c.text, hours)
			if n == "ra_deg" && strings.ContainsAny(c.text, " :h") && wrong == "" {
				a, wrong = parseAngle(c.text, true)
			}
			if wrong == "" && (a.Deg() < lo || a.Deg() > hi) {
				wrong = "outside the circle"
				if !hours {
					wrong = "beyond the pole"
				}
			}
			if wrong != "" {
				l.problem(l.where(c), what, c.text, wrong+"; the row is left out", fix)
				return a, false
			}
			return a, true
		}
		l.problem(targets.Where{File: l.name, Line: r.line}, what, "", "empty; the row is left out", fix)
		return astro.Angle{}, false
	}
	ra, ok1 := read("ra", [2]string{"ra_deg", "ra"}, true, -360, 360.0000001, "write degrees from 0 to 360, or HH MM SS in column ra")
	dec, ok2 := read("dec", [2]string{"dec_deg", "dec"}, false, -90, 90, "write degrees from -90 to +90, as ±DD MM SS or decimal")
	if !ok1 || !ok2 || l.inHours {
		return false
	}
	t.Place.RA, t.Place.Dec, t.Place.EpochJyr = ra.Turn(), dec, 2000
	if c, ok := l.at(r, "epoch_jyr"); ok {
		v, wrong, fix := parseNumber(strings.TrimLeft(c.text, "JBj"))
		if wrong == "" && (v < 1800 || v > 2200) {
			wrong, fix = "no year of a catalogue", "write the Julian year, e.g. 2016.0"
		}
		if wrong != "" {
			l.problem(l.where(c), "epoch_jyr", c.text, wrong+"; 2000.0 assumed", fix)
		} else {
			t.Place.EpochJyr, t.Place.EpochGiven = v, true
		}
	}
	return true
}

// cell reads one cell that is neither name nor position.
func (l *list) cell(i int, c cell, t *targets.Target) {
	name := l.names[i]
	switch name {
	case "id", "name", "ra_deg", "dec_deg", "ra", "dec", "epoch_jyr", "kind":
		return
	case "notes":
		t.Notes = l.clean(c)
	case "source":
		t.Source = l.clean(c)
	case "conflicts":
		t.Conflicts = l.clean(c)
	case "unconfirmed":
		for _, w := range strings.Fields(l.clean(c)) {
			if !IsColumn(w) {
				l.warn(l.where(c), "unconfirmed", w, "no column of a list", "write names of columns with blanks between")
			}
			t.Unconfirmed = append(t.Unconfirmed, w)
		}
	case "":
		t.Extra = append(t.Extra, targets.Field{Name: Clean(l.header.cells[i].text), Value: l.clean(c)})
	default:
		l.known[name].read(l, c, t)
	}
}

// read takes a cell of a column that holds one number or one text.
func (col *column) read(l *list, c cell, t *targets.Target) {
	if col.text != nil {
		text := l.clean(c)
		if col.words != nil {
			k := slices.IndexFunc(col.words, func(w string) bool { return strings.EqualFold(w, text) })
			if k < 0 {
				l.problem(l.where(c), col.Name, c.text, "not one of the words for it", "use one of "+strings.Join(col.words, ", "))
				return
			}
			text = col.words[k]
		}
		*col.text(t) = text
		return
	}
	text := c.text
	if rest, ok := strings.CutPrefix(text, "<"); ok && col.Name == "mag_min" {
		text, t.Var.MagMinIsLimit = strings.TrimSpace(rest), true
	}
	if rest, ok := strings.CutSuffix(text, ":"); ok {
		text = rest
		l.warn(l.where(c), col.Name, c.text, "marked as uncertain; taken as it is", "")
	}
	v, wrong, fix := parseNumber(text)
	if wrong == "" && (v < col.lo || v > col.hi) && (col.lo != 0 || col.hi != 0) {
		wrong = fmt.Sprintf("outside %g to %g %s", col.lo, col.hi, col.Unit)
		fix = "check the unit: " + col.Meaning + " in " + col.Unit
	}
	if wrong != "" {
		l.problem(l.where(c), col.Name, c.text, strings.TrimSpace(wrong), fix)
		return
	}
	col.set(t, v)
	if m := col.measure; m != nil && !col.isErr && (col.Name == "period_d" || strings.HasPrefix(col.Name, "epoch_")) {
		if q := m(t); q.Err == 0 {
			q.Err, q.Assumed = LastDigitHalf(text), true
		}
	}
}
