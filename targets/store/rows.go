package store

import (
	"context"
	"database/sql"
	"fmt"
	"sort"
	"strings"
	"time"
)

// Row is one row: values by column. A value is a string, float64, int64 or
// nil; what is missing is nil.
type Row map[string]any

// Text returns a text, "" where there is none.
func (r Row) Text(column string) string {
	s, _ := r[column].(string)
	return s
}

// Int returns a whole number, 0 where there is none.
func (r Row) Int(column string) int64 {
	n, _ := r[column].(int64)
	return n
}

// Real returns a number; false where there is none.
func (r Row) Real(column string) (float64, bool) {
	switch v := r[column].(type) {
	case float64:
		return v, true
	case int64:
		return float64(v), true
	}
	return 0, false
}

// Tx is a transaction: all of it happens or nothing.
type Tx struct {
	ctx context.Context
	tx  *sql.Tx
}

// Fault has every write ask f first and fail as it does: for tests of what
// happens then.
func (d *DB) Fault(f func() error) {
	d.mu.Lock()
	defer d.mu.Unlock()
	d.fail = f
}

// Do runs one transaction. It begins by taking the right to write, so that
// what is read in it still holds when it writes. When it returns without error
// all is on the disk.
func (d *DB) Do(ctx context.Context, f func(*Tx) error) error {
	if d.readOnly {
		return ErrReadOnly
	}
	d.mu.Lock()
	fail := d.fail
	d.mu.Unlock()
	if fail != nil {
		if err := fail(); err != nil {
			return judge(err)
		}
	}
	if d.busy.Load() {
		time.Sleep(rest)
	}
	tx, err := d.sql.BeginTx(ctx, nil)
	if err != nil {
		return judge(err)
	}
	defer tx.Rollback() // does nothing after the commit; also where f panics
	if err := f(&Tx{ctx, tx}); err != nil {
		return err
	}
	err = judge(tx.Commit())
	d.busy.Store(true)
	time.AfterFunc(rest, func() { d.busy.Store(false) })
	return err
}

// Insert adds a row and returns its id, which was never used before.
func (t *Tx) Insert(table string, r Row) (int64, error) {
	cols, vals, err := parts(table, r)
	if err != nil {
		return 0, err
	}
	if len(cols) == 0 {
		res, err := t.tx.ExecContext(t.ctx, "INSERT INTO "+table+" DEFAULT VALUES")
		if err != nil {
			return 0, judge(err)
		}
		return res.LastInsertId()
	}
	marks := strings.TrimSuffix(strings.Repeat("?, ", len(cols)), ", ")
	res, err := t.tx.ExecContext(t.ctx, "INSERT INTO "+table+" ("+strings.Join(cols, ", ")+") VALUES ("+marks+")", vals...)
	if err != nil {
		return 0, judge(err)
	}
	return res.LastInsertId()
}

// Update changes columns of a row; false: there is none with that id.
func (t *Tx) Update(table string, id int64, r Row) (bool, error) {
	cols, vals, err := parts(table, r)
	if err != nil || len(cols) == 0 {
		return false, err
	}
	res, err := t.tx.ExecContext(t.ctx, "UPDATE "+table+" SET "+strings.Join(cols, " = ?, ")+" = ? WHERE id = ?", append(vals, id)...)
	if err != nil {
		return false, judge(err)
	}
	n, err := res.RowsAffected()
	return n == 1, judge(err)
}

// Delete takes rows away. The log is never deleted from: that is refused.
func (t *Tx) Delete(table, where string, args ...any) error {
	if table == Entries || table == Conditions || table == Magnitudes {
		panic("store: rows of " + table + " are never deleted")
	}
	if _, ok := find(table); !ok {
		return fmt.Errorf("no table %s", table)
	}
	_, err := t.tx.ExecContext(t.ctx, "DELETE FROM "+table+" WHERE "+where, args...)
	return judge(err)
}

// Select returns the rows that hold a condition, by id.
func (t *Tx) Select(table, where string, args ...any) ([]Row, error) {
	return selectRows(t.ctx, t.tx, table, where, args...)
}

// Select returns the rows that hold a condition ("" all), by id.
func (d *DB) Select(ctx context.Context, table, where string, args ...any) ([]Row, error) {
	return selectRows(ctx, d.sql, table, where, args...)
}

type querier interface {
	QueryContext(ctx context.Context, query string, args ...any) (*sql.Rows, error)
}

func selectRows(ctx context.Context, q querier, table, where string, args ...any) ([]Row, error) {
	t, ok := find(table)
	if !ok {
		return nil, fmt.Errorf("no table %s", table)
	}
	names := []string{"id"}
	for _, c := range t.Columns {
		names = append(names, quote(c.Name))
	}
	query := "SELECT " + strings.Join(names, ", ") + " FROM " + table
	if where != "" {
		query += " WHERE " + where
	}
	rows, err := q.QueryContext(ctx, query+" ORDER BY id", args...)
	if err != nil {
		return nil, judge(err)
	}
	defer rows.Close()
	var out []Row
	for rows.Next() {
		vals := make([]any, len(names))
		into := make([]any, len(names))
		for i := range vals {
			into[i] = &vals[i]
		}
		if err := rows.Scan(into...); err != nil {
			return nil, judge(err)
		}
		r := Row{"id": vals[0]}
		for i, c := range t.Columns {
			r[c.Name] = plain(vals[i+1])
		}
		out = append(out, r)
	}
	return out, judge(rows.Err())
}

// plain makes the driver's value one of the four kinds.
func plain(v any) any {
	switch v := v.(type) {
	case []byte:
		return string(v)
	case bool:
		if v {
			return int64(1)
		}
		return int64(0)
	}
	return v
}

// parts returns the columns of a row, quoted and sorted, and their values.
func parts(table string, r Row) ([]string, []any, error) {
	t, ok := find(table)
	if !ok {
		return nil, nil, fmt.Errorf("no table %s", table)
	}
	names := make([]string, 0, len(r))
	for c := range r {
		if !t.has(c) {
			return nil, nil, fmt.Errorf("table %s has no column %s", table, c)
		}
		names = append(names, c)
	}
	sort.Strings(names)
	vals := make([]any, len(names))
	for i, c := range names {
		vals[i] = r[c]
		names[i] = quote(c)
	}
	return names, vals, nil
}
