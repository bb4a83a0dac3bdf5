package logbook

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/store"
)

// Book is the log of a run. It is safe for use by several goroutines; every
// change is on the disk when its call returns.
type Book struct {
	db       *store.DB
	now      func() time.Time
	observer string
}

// Open begins to write in a store.
//
// Given:
//   - now: the clock; entries bear the time at which they were entered.
//   - observer: who writes; accounts are shared, so the name is asked.
func Open(db *store.DB, now func() time.Time, observer string) *Book {
	return &Book{db: db, now: now, observer: observer}
}

// As returns the same book written by somebody else.
func (b *Book) As(observer string) *Book { return Open(b.db, b.now, observer) }

// Observer returns who writes.
func (b *Book) Observer() string { return b.observer }

// Store returns the store behind the book.
func (b *Book) Store() *store.DB { return b.db }

// ErrNoEntry is returned for an entry that is not there.
var ErrNoEntry = errors.New("no such entry; log prints them with their numbers")

// signed completes an entry: who entered it and when.
func (b *Book) signed(e Entry) Entry {
	if e.Observer == "" {
		e.Observer = b.observer
	}
	e.Entered = b.now()
	return e
}

// Add writes an entry and returns its number.
//
// Returns:
//   - the number once the entry is on the disk. An entry with a Key that is
//     there already is not written again: its number is returned.
func (b *Book) Add(ctx context.Context, e Entry) (int64, error) {
	if err := e.Check(); err != nil {
		return 0, err
	}
	var id int64
	err := b.db.Do(ctx, func(tx *store.Tx) error {
		if e.Key != "" {
			old, err := tx.Select(store.Entries, "key = ?", e.Key)
			if err != nil {
				return err
			}
			if len(old) == 1 {
				id = old[0].Int("id")
				return nil
			}
		}
		s := b.signed(e)
		var err error
		id, err = tx.Insert(store.Entries, rowOf(&s))
		return err
	})
	return id, err
}

// Amend writes an entry in place of another. The old one stays, marked as
// replaced: nothing is ever deleted.
//
// Returns:
//   - the number of the new entry.
func (b *Book) Amend(ctx context.Context, id int64, change func(*Entry) error) (int64, error) {
	var made int64
	err := b.db.Do(ctx, func(tx *store.Tx) error {
		old, err := current(tx, id)
		if err != nil {
			return err
		}
		e := old
		e.ID, e.Key, e.Replaces = 0, "", id
		if b.observer != "" {
			e.Observer = b.observer
		}
		if err := change(&e); err != nil {
			return err
		}
		if err := e.Check(); err != nil {
			return err
		}
		s := b.signed(e)
		if made, err = tx.Insert(store.Entries, rowOf(&s)); err != nil {
			return err
		}
		if old.Void != e.Void {
			return unsay(tx, id, e.Void)
		}
		return nil
	})
	return made, err
}

// Void declares an entry void, with the reason; it stays in the log.
func (b *Book) Void(ctx context.Context, id int64, why string) (int64, error) {
	return b.Amend(ctx, id, func(e *Entry) error {
		e.Void, e.Grade = true, "void"
		if why != "" {
			e.Note = strings.TrimPrefix(e.Note+"; void: "+why, "; ")
		}
		return nil
	})
}

// unsay makes the conditions that a void entry said hold no more, and has
// them hold again where it is no longer void.
func unsay(tx *store.Tx, id int64, void bool) error {
	for id != 0 {
		rows, err := tx.Select(store.Conditions, "entry = ?", id)
		if err != nil {
			return err
		}
		for _, r := range rows {
			value := any(nil)
			if void {
				value = int64(1)
			}
			if _, err := tx.Update(store.Conditions, r.Int("id"), store.Row{"void": value}); err != nil {
				return err
			}
		}
		before, err := tx.Select(store.Entries, "id = ?", id)
		if err != nil || len(before) == 0 {
			return err
		}
		id = before[0].Int("replaces")
	}
	return nil
}

// current returns an entry that no other replaces.
func current(tx *store.Tx, id int64) (Entry, error) {
	rows, err := tx.Select(store.Entries, "id = ?", id)
	if err != nil {
		return Entry{}, err
	}
	if len(rows) == 0 {
		return Entry{}, fmt.Errorf("entry %d: %w", id, ErrNoEntry)
	}
	later, err := tx.Select(store.Entries, "replaces = ?", id)
	if err != nil {
		return Entry{}, err
	}
	if len(later) > 0 {
		return Entry{}, fmt.Errorf("entry %d was replaced by entry %d; amend that", id, later[0].Int("id"))
	}
	return entryOf(rows[0]), nil
}

// Entries returns the log: each entry as it stands now, by its start.
//
// Given:
//   - from, until: entries that begin in between; zero: no bound.
func (b *Book) Entries(ctx context.Context, from, until time.Time) ([]Entry, error) {
	all, err := b.History(ctx)
	if err != nil {
		return nil, err
	}
	replaced := map[int64]bool{}
	for i := range all {
		replaced[all[i].Replaces] = true
	}
	var out []Entry
	for _, e := range all {
		if replaced[e.ID] || !from.IsZero() && e.Start.Before(from) || !until.IsZero() && !e.Start.Before(until) {
			continue
		}
		out = append(out, e)
	}
	byStart(out)
	return out, nil
}

// History returns every entry ever written, also those replaced, by number.
func (b *Book) History(ctx context.Context) ([]Entry, error) {
	rows, err := b.db.Select(ctx, store.Entries, "")
	if err != nil {
		return nil, err
	}
	out := make([]Entry, len(rows))
	for i, r := range rows {
		out[i] = entryOf(r)
	}
	return out, nil
}

func byStart(list []Entry) {
	slices.SortStableFunc(list, func(a, b Entry) int { return a.Start.Compare(b.Start) })
}

// Progress is what the log says of one request.
type Progress struct {
	Visits  int           // takes that count
	SNR     float64       // in quadrature over takes that give it
	Exposed time.Duration // time exposing
	Last    time.Time
}

// ProgressOf sums up the log by request. An entry that names no request but a
// target counts for the one request that wants it, where there is one alone.
// Void and poor takes do not count as visits.
//
//	S/N = sqrt(sum of S/N^2)
//
// Returns:
//   - progress by the key of the request's id.
//
// Source: common practice, no source: independent takes add in quadrature.
//
// Checked: TestProgress.
func ProgressOf(requests []targets.Request, entries []Entry) map[string]Progress {
	byTarget := map[string]string{}
	for i := range requests {
		t := targets.Key(requests[i].Target)
		if _, twice := byTarget[t]; twice {
			byTarget[t] = ""
		} else {
			byTarget[t] = requests[i].ID
		}
	}
	out := map[string]Progress{}
	for i := range entries {
		e := &entries[i]
		name := e.Request
		if name == "" {
			name = byTarget[targets.Key(e.Target)]
		}
		if name == "" || e.Type != "science" || e.Void || e.Grade == "void" {
			continue
		}
		p := out[targets.Key(name)]
		if e.Grade != "poor" {
			p.Visits++
		}
		p.Exposed += e.Taken()
		if e.SNR.Known {
			p.SNR = math.Hypot(p.SNR, e.SNR.Value)
		}
		if e.Start.After(p.Last) {
			p.Last = e.Start
		}
		out[targets.Key(name)] = p
	}
	return out
}
