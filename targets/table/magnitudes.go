package table

import (
	"encoding/csv"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"
	"time"

	"evenfall/targets"
)

// headings settles which column is which in a file with fixed names.
func (s *sheet) headings(ours func(string) bool, needed ...string) (map[string]int, bool) {
	if s.header.cells == nil {
		s.problem(targets.Where{File: s.name}, "", "", "no header row", "begin with a line of column names: "+strings.Join(needed, ",")+",...")
		return nil, false
	}
	if sep := separatorHint(s.header); sep != "" {
		s.problem(s.where(s.header.cells[0]), "", "", "columns are separated by "+sep, "write commas")
		return nil, false
	}
	index := map[string]int{}
	for i, c := range s.header.cells {
		h := strings.ToLower(c.text)
		switch _, twice := index[h]; {
		case twice:
			s.problem(s.where(c), "", c.text, "a second column of that name; it is left out", "keep one")
		case ours(h):
			index[h] = i
			s.header.cells[i].text = h
		default:
			s.warn(s.where(c), "", c.text, "no column that is known; kept as it is", "see the README for the names")
		}
	}
	for _, n := range needed {
		if _, ok := index[n]; !ok {
			s.problem(targets.Where{File: s.name, Line: s.header.line}, "", "", "no column "+n, "add it")
			return nil, false
		}
	}
	return index, true
}

var magnitudeColumns = []string{"target", "jd", "utc", "band", "mag", "err", "time_scale", "source"}

// ReadMagnitudes reads measured magnitudes: target, jd or utc, band, mag, err,
// time_scale, source. A < before the magnitude means fainter than that, not
// seen. See [Read] for how problems are told.
//
// Checked: TestReadMagnitudesBad, FuzzReadMagnitudes.
func ReadMagnitudes(r io.Reader, name string) ([]targets.Magnitude, []*Error) {
	s := cut(r, name)
	index, ok := s.headings(func(h string) bool { return slices.Contains(magnitudeColumns, h) }, "target", "mag")
	if ok && !has(index, "jd") && !has(index, "utc") {
		s.problem(targets.Where{File: name, Line: s.header.line}, "", "", "no column for the time", "add jd or utc")
		ok = false
	}
	if !ok {
		return nil, told(name, s.problems)
	}
	var list []targets.Magnitude
	for _, row := range s.rows {
		if m, ok := s.magnitude(index, row); ok {
			list = append(list, m)
		}
	}
	return list, told(name, s.problems)
}

func has(index map[string]int, name string) bool {
	_, ok := index[name]
	return ok
}

// magnitude reads one row; false: it cannot be used.
func (s *sheet) magnitude(index map[string]int, r row) (targets.Magnitude, bool) {
	m := targets.Magnitude{At: targets.Where{File: s.name, Line: r.line}, TimeScale: "JD_UTC"}
	get := func(n string) (cell, bool) {
		i, ok := index[n]
		if !ok || i >= len(r.cells) || isNull(r.cells[i].text) {
			return cell{text: "", line: r.line}, false
		}
		return r.cells[i], true
	}
	fail := func(c cell, field, wrong, fix string) (targets.Magnitude, bool) {
		s.problem(s.where(c), field, c.text, wrong+"; the row is left out", fix)
		return m, false
	}
	c, ok := get("target")
	if !ok {
		return fail(c, "target", "empty", "name the target")
	}
	m.Target = Clean(c.text)
	if c, ok = get("mag"); !ok {
		return fail(c, "mag", "empty", "write the magnitude; < before it means fainter than that")
	}
	text, limit := strings.CutPrefix(c.text, "<")
	v, wrong, fix := parseNumber(strings.TrimSpace(text))
	if wrong == "" && (v < -30 || v > 40) {
		wrong, fix = "no magnitude", "write magnitudes"
	}
	if wrong != "" {
		return fail(c, "mag", wrong, fix)
	}
	m.Mag, m.Limit = v, limit
	if c, ok := get("err"); ok {
		if v, wrong, fix := parseNumber(c.text); wrong != "" || v < 0 || v > 10 {
			s.problem(s.where(c), "err", c.text, "no error of a magnitude; left out", fix)
		} else {
			m.Err = v
		}
	}
	if c, ok := get("band"); ok {
		m.Band = targets.Band(Clean(c.text))
	}
	if c, ok := get("source"); ok {
		m.Source = Clean(c.text)
	}
	if c, ok := get("time_scale"); ok {
		m.TimeScale = Clean(c.text)
	}
	return s.time(m, get, fail)
}

// time reads when a magnitude was measured.
func (s *sheet) time(m targets.Magnitude, get func(string) (cell, bool),
	fail func(cell, string, string, string) (targets.Magnitude, bool)) (targets.Magnitude, bool) {
	if c, ok := get("jd"); ok {
		v, wrong, fix := parseNumber(c.text)
		switch {
		case wrong != "":
			return fail(c, "jd", wrong, fix)
		case v > 15000 && v < 100000:
			return fail(c, "jd", "a modified Julian date?", "add 2400000.5")
		case v < 2.3e6 || v > 2.6e6:
			return fail(c, "jd", "no Julian date of our time", "write e.g. 2461376.67")
		}
		m.JD = v
		return m, true
	}
	c, ok := get("utc")
	if !ok {
		return fail(c, "jd", "no time given", "fill jd or utc")
	}
	for _, layout := range []string{time.RFC3339, "2006-01-02 15:04:05", "2006-01-02 15:04", "2006-01-02T15:04:05", "2006-01-02"} {
		if t, err := time.Parse(layout, c.text); err == nil {
			m.JD = 2440587.5 + float64(t.UnixMilli())/86400e3
			m.TimeScale = "JD_UTC"
			return m, true
		}
	}
	return fail(c, "utc", "no date and time", "write e.g. 2026-12-02T04:00:00Z")
}

// WriteMagnitudes writes magnitudes so that reading them gives the same.
func WriteMagnitudes(w io.Writer, list []targets.Magnitude) error {
	c := csv.NewWriter(w)
	c.Write([]string{"target", "jd", "band", "mag", "err", "time_scale", "source"})
	for _, m := range list {
		mag, err := number(m.Mag), ""
		if m.Limit {
			mag = "<" + mag
		}
		if m.Err > 0 {
			err = number(m.Err)
		}
		c.Write([]string{m.Target, number(m.JD), string(m.Band), mag, err, m.TimeScale, m.Source})
	}
	c.Flush()
	return c.Error()
}

// WriteRequests writes requests so that reading them gives the same.
func WriteRequests(w io.Writer, list []targets.Request) error {
	c := csv.NewWriter(w)
	var head []string
	for _, col := range requestColumns {
		head = append(head, col.Name)
	}
	c.Write(head)
	for i := range list {
		var row []string
		for k := range requestColumns {
			row = append(row, requestColumns[k].write(&list[i]))
		}
		c.Write(row)
	}
	c.Flush()
	return c.Error()
}

func (c *requestColumn) write(q *targets.Request) string {
	switch {
	case c.text != nil:
		return *c.text(q)
	case c.yes != nil && *c.yes(q):
		return "yes"
	case c.moment != nil && !c.moment(q).IsZero():
		return c.moment(q).Format(time.RFC3339)
	case c.count != nil && *c.count(q) != 0:
		return strconv.Itoa(*c.count(q))
	case c.plain != nil:
		return number(*c.plain(q))
	case c.measure != nil && c.measure(q).Known:
		return number(c.measure(q).Value)
	}
	return ""
}

// Lines writes problems one a line.
func Lines(problems []*Error) string {
	var b strings.Builder
	for _, p := range problems {
		fmt.Fprintln(&b, p)
	}
	return b.String()
}
