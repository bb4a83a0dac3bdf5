package table

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"evenfall/targets"
)

// cell is one field of a file and where it stands.
type cell struct {
	text         string
	line, column int
}

// row is one record.
type row struct {
	line  int
	cells []cell
}

// sheet is a file cut into cells, with what is wrong with it.
type sheet struct {
	name     string
	header   row
	rows     []row
	problems []*Error
}

// maxBytes bounds what is read into memory from one file.
const maxBytes = 1 << 30

// cut reads a CSV file into cells.
func cut(r io.Reader, name string) *sheet {
	s := &sheet{name: name}
	data, err := io.ReadAll(io.LimitReader(r, maxBytes))
	if err != nil {
		s.problem(targets.Where{File: name}, "", "", "reading stopped: "+err.Error(), "read it again")
	}
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	data = bytes.ReplaceAll(data, []byte("\r\n"), []byte("\n"))
	data = bytes.ReplaceAll(data, []byte("\r"), []byte("\n"))
	s.records(data, 1)
	return s
}

// records cuts data whose first line has the given number.
func (s *sheet) records(data []byte, firstLine int) {
	lines := bytes.Split(data, []byte("\n"))
	for start := 0; start < len(lines); {
		rest := bytes.Join(lines[start:], []byte("\n"))
		c := csv.NewReader(bytes.NewReader(rest))
		c.Comment, c.LazyQuotes, c.FieldsPerRecord = '#', true, -1
		next := len(lines)
		for {
			fields, err := c.Read()
			if errors.Is(err, io.EOF) {
				break
			}
			if err != nil {
				s.problem(targets.Where{File: s.name}, "", "", Clean(err.Error()), "mend the quotes")
				break
			}
			line, _ := c.FieldPos(0)
			if open := unclosed(fields, c, rest); open >= 0 {
				at, col := c.FieldPos(open)
				s.problem(targets.Where{File: s.name, Line: firstLine + start + at - 1, Column: char(lines[start+at-1], col)},
					"", "", "a quote is opened here and never closed; the row is left out", "close it with a second quote")
				next = start + at // go on with the line below
				break
			}
			s.add(fields, c, lines[start:], firstLine+start-1, line)
		}
		start = next
	}
}

// unclosed returns the field whose quote runs to the end of the data; -1: none.
func unclosed(fields []string, c *csv.Reader, data []byte) int {
	last := len(fields) - 1
	if c.InputOffset() < int64(len(data)) || !strings.Contains(fields[last], "\n") {
		return -1
	}
	if text := bytes.TrimRight(data, "\n"); bytes.HasSuffix(text, []byte(`"`)) {
		return -1
	}
	return last
}

func (s *sheet) add(fields []string, c *csv.Reader, lines [][]byte, before, line int) {
	r := row{line: before + line}
	blank := true
	for k, f := range fields {
		at, col := c.FieldPos(k)
		r.cells = append(r.cells, cell{strings.TrimSpace(f), before + at, char(lines[at-1], col)})
		blank = blank && strings.TrimSpace(f) == ""
	}
	switch {
	case blank:
	case s.header.cells == nil:
		s.header = r
	default:
		s.rows = append(s.rows, r)
	}
}

// char turns a column counted in bytes into one counted in characters.
func char(line []byte, column int) int {
	if column-1 > len(line) || column < 1 {
		return 1
	}
	return utf8.RuneCount(line[:column-1]) + 1
}

func (s *sheet) problem(at targets.Where, field, value, what, fix string) {
	s.problems = append(s.problems, &Error{At: at, Field: field, Value: Clean(value), Problem: what, Fix: fix})
}

func (s *sheet) warn(at targets.Where, field, value, what, fix string) {
	s.problem(at, field, value, what, fix)
	s.problems[len(s.problems)-1].Warning = true
}

func (s *sheet) where(c cell) targets.Where {
	return targets.Where{File: s.name, Line: c.line, Column: c.column}
}

// maxProblems is how many problems are told one by one.
const maxProblems = 50

// told shortens a list of problems: the first 50, then the count.
func told(name string, all []*Error) []*Error {
	if len(all) <= maxProblems {
		return all
	}
	rest := 0
	refused := false
	for _, e := range all[maxProblems:] {
		rest++
		refused = refused || !e.Warning
	}
	last := &Error{At: targets.Where{File: name}, Problem: fmt.Sprintf("and %d more problems", rest),
		Fix: "mend these first and read it again", Warning: !refused}
	return append(append([]*Error(nil), all[:maxProblems]...), last)
}

// separatorHint names a separator that is not a comma, if a header has one.
func separatorHint(h row) string {
	if len(h.cells) != 1 {
		return ""
	}
	for name, sep := range map[string]string{"semicolons": ";", "tabs": "\t", "bars": "|"} {
		if strings.Contains(h.cells[0].text, sep) {
			return name
		}
	}
	return ""
}
