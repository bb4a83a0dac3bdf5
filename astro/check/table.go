package check

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// Reference is a table that results are compared with.
type Reference struct {
	name    string
	head    map[string]string
	columns map[string]int
	rows    []Row
}

// Row is one line of a reference table.
type Row struct {
	table *Reference
	t     testing.TB
	line  int
	cells []string
}

// Option changes what a table must look like.
type Option func(*layout)

type layout struct{ plain bool }

// PlainComments accepts a table whose `#` lines are free text, as in tables
// taken over from elsewhere; there must still be at least one.
func PlainComments(l *layout) { l.plain = true }

// Table reads a reference table, comma-separated under a header of `#` lines,
// and ends the test where it cannot.
//
//	# what: airmass by zenith distance
//	# source: Kasten & Young 1989, Appl. Opt. 28, 4735
//	# columns: z[deg] x[1]
//	# tolerance: 5e-4, half a unit of the last printed digit
//	z,x
//	60,1.9943
//
// Given:
//   - path: below the repository's root, with forward slashes; or absolute, as
//     from [Shared].
//   - opts: [PlainComments] for a table without that header.
//
// Notes:
//  1. Wanted are `what`, `made by` or `source`, `columns` and `tolerance`, none
//     empty. A `#` line without a key of its own continues the one above.
//  2. The names under `columns`, each with its unit in brackets, must be those
//     of the first line after the header, in the same order.
//  3. A table without rows is refused: it would check nothing.
//
// Checked: TestParse, TestRefusals.
func Table(t testing.TB, path string, opts ...Option) *Reference {
	t.Helper()
	file := filepath.FromSlash(path)
	if !filepath.IsAbs(file) {
		file = filepath.Join(Root(t), file)
	}
	f, err := os.Open(file)
	if err != nil {
		t.Fatalf("check: reference table %s: %v", path, err)
	}
	defer f.Close()
	var l layout
	for _, o := range opts {
		o(&l)
	}
	r, err := parse(f, filepath.ToSlash(path), l)
	if err != nil {
		t.Fatal(err)
	}
	for i := range r.rows {
		r.rows[i].t = t
	}
	return r
}

// Len returns the number of rows, at least 1.
func (r *Reference) Len() int { return len(r.rows) }

// Rows returns the rows in the order of the file.
func (r *Reference) Rows() []Row { return r.rows }

// Head returns what the header says under a key, e.g. "tolerance".
func (r *Reference) Head(key string) string { return r.head[key] }

// Has tells whether the table has a column of that name.
func (r *Reference) Has(column string) bool {
	_, ok := r.columns[column]
	return ok
}

// Where returns file and line, for messages.
func (r Row) Where() string { return fmt.Sprintf("%s:%d", r.table.name, r.line) }

// String returns the cell without outer blanks; a column that is not there
// ends the test.
func (r Row) String(column string) string {
	r.t.Helper()
	i, ok := r.table.columns[column]
	if !ok {
		r.t.Fatalf("%s: there is no column %q", r.table.name, column)
		return ""
	}
	return r.cells[i]
}

// Empty tells whether the cell holds nothing.
func (r Row) Empty(column string) bool {
	r.t.Helper()
	return r.String(column) == ""
}

// Float returns the cell as a number; anything else ends the test, an empty
// cell and not-a-number too.
func (r Row) Float(column string) float64 {
	r.t.Helper()
	cell := r.String(column)
	v, err := strconv.ParseFloat(cell, 64)
	if err != nil || v != v {
		r.t.Fatalf("%s: column %s: %q is not a number", r.Where(), column, cell)
	}
	return v
}

// parse reads a table.
func parse(in io.Reader, name string, l layout) (*Reference, error) {
	text, err := io.ReadAll(in)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	lines := strings.SplitAfter(strings.ReplaceAll(string(text), "\r\n", "\n"), "\n")
	n := 0
	for n < len(lines) && strings.HasPrefix(lines[n], "#") {
		n++
	}
	r := &Reference{name: name, head: header(lines[:n])}
	if n == 0 {
		return nil, fmt.Errorf("%s:1: no header; begin with # lines that say what, source or made by, columns, tolerance", name)
	}
	if !l.plain {
		if err := r.complete(); err != nil {
			return nil, err
		}
	}
	if err := r.body(strings.Join(lines[n:], ""), n); err != nil {
		return nil, err
	}
	if l.plain {
		return r, nil
	}
	return r, r.namesAgree(n + 1)
}

// header turns `# key: text` lines into a map.
func header(lines []string) map[string]string {
	out := map[string]string{}
	last := ""
	for _, line := range lines {
		text := strings.TrimSpace(strings.TrimLeft(line, "#"))
		key, value, ok := strings.Cut(text, ":")
		if ok && isKey(key) {
			last = key
			text = strings.TrimSpace(value)
		}
		out[last] = strings.TrimSpace(out[last] + " " + text)
	}
	return out
}

// isKey tells a header's key from running text: one or two lower-case words.
func isKey(s string) bool {
	for _, r := range s {
		if r != ' ' && (r < 'a' || r > 'z') {
			return false
		}
	}
	return s != "" && len(strings.Fields(s)) <= 2
}

// complete refuses a header that leaves out what a reader must know.
func (r *Reference) complete() error {
	for _, keys := range [][]string{{"what"}, {"source", "made by"}, {"columns"}, {"tolerance"}} {
		found := false
		for _, k := range keys {
			found = found || r.head[k] != ""
		}
		if !found {
			return fmt.Errorf("%s: the header has no `# %s:` line; say it before the first row",
				r.name, strings.Join(keys, ":` or `# "))
		}
	}
	return nil
}

// body reads the column names and rows that follow n header lines. A `#` line
// among the rows is a comment.
func (r *Reference) body(text string, n int) error {
	in := csv.NewReader(strings.NewReader(text))
	in.Comment = '#'
	in.TrimLeadingSpace = true
	names, err := in.Read()
	if err != nil {
		return fmt.Errorf("%s:%d: no line of column names: %w", r.name, n+1, err)
	}
	r.columns = map[string]int{}
	for i, name := range names {
		name = strings.TrimSpace(name)
		if _, twice := r.columns[name]; twice || name == "" {
			return fmt.Errorf("%s:%d: column %d is called %q; give each column a name of its own", r.name, n+1, i+1, name)
		}
		r.columns[name] = i
	}
	for {
		cells, err := in.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return fmt.Errorf("%s: below line %d: %w", r.name, n, err)
		}
		line, _ := in.FieldPos(0)
		for i := range cells {
			cells[i] = strings.TrimSpace(cells[i])
		}
		r.rows = append(r.rows, Row{table: r, line: n + line, cells: cells})
	}
	if len(r.rows) == 0 {
		return fmt.Errorf("%s: no rows; a table without rows checks nothing", r.name)
	}
	return nil
}

// namesAgree compares the header's list of columns with the names in use.
func (r *Reference) namesAgree(line int) error {
	listed := columnNames(r.head["columns"])
	if len(listed) != len(r.columns) {
		return fmt.Errorf("%s:%d: %d columns, but the header describes %d: %v", r.name, line, len(r.columns), len(listed), listed)
	}
	for i, name := range listed {
		if at, ok := r.columns[name]; !ok || at != i {
			return fmt.Errorf("%s:%d: the header describes column %d as %q, which is not its name", r.name, line, i+1, name)
		}
	}
	return nil
}

// columnNames takes the names out of "jd[day] lon[deg, east +] what".
func columnNames(s string) []string {
	var out []string
	depth := 0
	var word strings.Builder
	flush := func() {
		if word.Len() > 0 {
			out = append(out, word.String())
			word.Reset()
		}
	}
	for _, c := range s {
		switch {
		case c == '[':
			depth++
		case c == ']':
			depth--
		case depth == 0 && (c == ' ' || c == ','):
			flush()
		case depth == 0:
			word.WriteRune(c)
		}
	}
	flush()
	return out
}
