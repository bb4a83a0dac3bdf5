package store

import (
	"context"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"slices"
	"sort"
	"strconv"
	"strings"
	"time"
)

// Names lists the tables.
func Names() []string {
	out := make([]string, len(Tables))
	for i, t := range Tables {
		out[i] = t.Name
	}
	return out
}

// ExportCSV writes one table with a header row; what is unknown is empty.
func (d *DB) ExportCSV(ctx context.Context, table string, w io.Writer) error {
	rows, err := d.Select(ctx, table, "")
	if err != nil {
		return err
	}
	t, _ := find(table)
	out := csv.NewWriter(w)
	head := []string{"id"}
	for _, c := range t.Columns {
		head = append(head, c.Name)
	}
	if err := out.Write(head); err != nil {
		return err
	}
	for _, r := range rows {
		line := make([]string, len(head))
		for i, c := range head {
			line[i] = text(r[c])
		}
		if err := out.Write(line); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}

func text(v any) string {
	switch v := v.(type) {
	case string:
		return v
	case int64:
		return strconv.FormatInt(v, 10)
	case float64:
		return strconv.FormatFloat(v, 'g', -1, 64)
	}
	return ""
}

// Dump is every table, as written to JSON: rows by table.
type Dump struct {
	Schema int              `json:"schema"`
	Tables map[string][]Row `json:"tables"`
}

// ExportJSON writes the tables named, all of them where none is.
func (d *DB) ExportJSON(ctx context.Context, w io.Writer, tables ...string) error {
	if len(tables) == 0 {
		tables = Names()
	}
	dump := Dump{Schema: Version, Tables: map[string][]Row{}}
	for _, name := range tables {
		rows, err := d.Select(ctx, name, "")
		if err != nil {
			return err
		}
		for _, r := range rows {
			for c, v := range r {
				if v == nil {
					delete(r, c)
				}
			}
		}
		dump.Tables[name] = append([]Row{}, rows...)
	}
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	e.SetEscapeHTML(false)
	return e.Encode(dump)
}

// ImportJSON takes rows in, each with its id, in one transaction: all or
// nothing. A row whose id is there already with the same content is passed
// over; with another content it is an error that names it.
//
// Returns:
//   - how many rows came in.
func (d *DB) ImportJSON(ctx context.Context, r io.Reader) (int, error) {
	dec := json.NewDecoder(r)
	dec.UseNumber()
	var dump Dump
	if err := dec.Decode(&dump); err != nil {
		return 0, fmt.Errorf("not an export of evenfall: %w", err)
	}
	if len(dump.Tables) == 0 {
		return 0, fmt.Errorf("not an export of evenfall: it holds no tables")
	}
	if dump.Schema > Version {
		return 0, fmt.Errorf("schema %d: %w", dump.Schema, ErrNewer)
	}
	names := make([]string, 0, len(dump.Tables))
	for name := range dump.Tables {
		names = append(names, name)
	}
	sort.Strings(names)
	count := 0
	err := d.Do(ctx, func(tx *Tx) error {
		for _, name := range names {
			t, ok := find(name)
			if !ok {
				return fmt.Errorf("no table %q; the tables are %v", name, Names())
			}
			for k, row := range dump.Tables[name] {
				in, err := tx.take(t, row)
				if err != nil {
					return fmt.Errorf("%s, row %d: %w", name, k+1, err)
				}
				count += in
			}
		}
		return nil
	})
	if err != nil {
		return 0, err
	}
	return count, nil
}

// ImportCSV takes one table's rows in, by the same rules.
func (d *DB) ImportCSV(ctx context.Context, table string, r io.Reader) (int, error) {
	t, ok := find(table)
	if !ok {
		return 0, fmt.Errorf("no table %q; the tables are %v", table, Names())
	}
	in := csv.NewReader(r)
	head, err := in.Read()
	if err != nil {
		return 0, fmt.Errorf("no header row: %w", err)
	}
	for _, c := range head {
		if !t.has(c) {
			return 0, fmt.Errorf("table %s has no column %q", table, c)
		}
	}
	rest, err := in.ReadAll()
	if err != nil {
		return 0, err
	}
	count := 0
	err = d.Do(ctx, func(tx *Tx) error {
		for k, line := range rest {
			row := Row{}
			for i, c := range head {
				if line[i] != "" {
					row[c] = line[i]
				}
			}
			n, err := tx.take(t, row)
			if err != nil {
				return fmt.Errorf("line %d: %w", k+2, err)
			}
			count += n
		}
		return nil
	})
	if err != nil {
		return 0, err
	}
	return count, nil
}

// take inserts one row of an import; 0: it is there already.
func (t *Tx) take(table Table, row Row) (int, error) {
	clean := Row{}
	for c, v := range row {
		value, err := table.value(c, v)
		if err != nil {
			return 0, err
		}
		clean[c] = value
	}
	if id, ok := clean["id"].(int64); ok {
		old, err := t.Select(table.Name, "id = ?", id)
		if err != nil {
			return 0, err
		}
		if len(old) == 1 {
			for _, c := range table.Columns {
				if text(old[0][c.Name]) != text(clean[c.Name]) {
					return 0, fmt.Errorf("id %d is there already with %s %q, not %q; import into a new run folder", id, c.Name, text(old[0][c.Name]), text(clean[c.Name]))
				}
			}
			return 0, nil
		}
	}
	_, err := t.Insert(table.Name, clean)
	return 1, err
}

// value makes what a file says a value of the column's kind.
func (t *Table) value(column string, v any) (any, error) {
	kind := Integer
	if column != "id" {
		i := slices.IndexFunc(t.Columns, func(c Column) bool { return c.Name == column })
		if i < 0 {
			return nil, fmt.Errorf("table %s has no column %q", t.Name, column)
		}
		kind = t.Columns[i].Type
	}
	if v == nil {
		return nil, nil
	}
	s, ok := v.(string)
	if n, number := v.(json.Number); number {
		s, ok = n.String(), true
	}
	if !ok {
		return nil, fmt.Errorf("%s: neither text nor number", column)
	}
	switch kind {
	case Integer:
		n, err := strconv.ParseInt(s, 10, 64)
		if err != nil {
			return nil, fmt.Errorf("%s %q: not a whole number", column, s)
		}
		return n, nil
	case Real:
		f, err := strconv.ParseFloat(s, 64)
		if err != nil {
			return nil, fmt.Errorf("%s %q: not a number", column, s)
		}
		return f, nil
	}
	if strings.HasSuffix(column, "_utc") && s != "" {
		if _, err := time.Parse(time.RFC3339Nano, s); err != nil {
			return nil, fmt.Errorf("%s %q: not a time as 2026-12-02T04:00:00Z", column, s)
		}
	}
	return s, nil
}
