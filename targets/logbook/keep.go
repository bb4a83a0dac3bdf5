package logbook

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/store"
	"evenfall/targets/table"
)

// Mark marks or unmarks a target by name.
func (b *Book) Mark(ctx context.Context, target string, on bool) error {
	return b.db.Do(ctx, func(tx *store.Tx) error {
		if err := tx.Delete(store.Marks, "target = ?", target); err != nil || !on {
			return err
		}
		_, err := tx.Insert(store.Marks, store.Row{"target": target, "observer": b.observer, "entered_utc": stamp(b.now())})
		return err
	})
}

// Marked returns the names of the marked targets.
func (b *Book) Marked(ctx context.Context) ([]string, error) {
	rows, err := b.db.Select(ctx, store.Marks, "")
	out := make([]string, len(rows))
	for i, r := range rows {
		out[i] = r.Text("target")
	}
	return out, err
}

// AddTarget keeps a target that was typed in, as a row of a target list.
func (b *Book) AddTarget(ctx context.Context, t targets.Target) error {
	var row strings.Builder
	if err := table.Write(&row, []targets.Target{t}); err != nil {
		return fmt.Errorf("writing out %s: %w", t.Name, err)
	}
	return b.db.Do(ctx, func(tx *store.Tx) error {
		_, err := tx.Insert(store.Added, store.Row{"name": t.Name, "list_row": row.String(), "observer": b.observer, "entered_utc": stamp(b.now())})
		return err
	})
}

// Added returns the targets that were typed in.
func (b *Book) Added(ctx context.Context) ([]targets.Target, error) {
	rows, err := b.db.Select(ctx, store.Added, "")
	if err != nil {
		return nil, err
	}
	var out []targets.Target
	for _, r := range rows {
		list, _ := table.Read(strings.NewReader(r.Text("list_row")), "run.db, table added")
		out = append(out, list...)
	}
	return out, nil
}

// AddMagnitude writes a measured magnitude.
func (b *Book) AddMagnitude(ctx context.Context, m targets.Magnitude) (int64, error) {
	if m.Target == "" || m.Band == "" {
		return 0, fmt.Errorf("a magnitude needs a target and a band")
	}
	if !(m.Mag > -30 && m.Mag < 40) || !(m.Err >= 0 && m.Err < 20) {
		return 0, fmt.Errorf("magnitude %g +- %g: no magnitude with its error", m.Mag, m.Err)
	}
	if !(m.JD > 2e6 && m.JD < 3e6) {
		return 0, fmt.Errorf("Julian date %g: outside 2,000,000 to 3,000,000", m.JD)
	}
	var id int64
	err := b.db.Do(ctx, func(tx *store.Tx) error {
		var err error
		row := store.Row{"target": m.Target, "jd": m.JD, "time_scale": m.TimeScale, "band": string(m.Band), "mag": m.Mag, "faint_limit": bit(m.Limit),
			"source": m.Source, "observer": b.observer, "entered_utc": stamp(b.now())}
		if m.Err > 0 {
			row["err"] = m.Err
		}
		id, err = tx.Insert(store.Magnitudes, row)
		return err
	})
	return id, err
}

// EnteredAt is the file that entered magnitudes name as where they stand, and
// their number its line.
const EnteredAt = "run.db, table magnitudes"

// Entered returns the number under which a magnitude was entered in this run;
// false: it comes from a file.
func Entered(m *targets.Magnitude) (id int64, ok bool) {
	return int64(m.At.Line), m.At.File == EnteredAt
}

// ErrNoMagnitude is returned for a magnitude that is not there or void.
var ErrNoMagnitude = errors.New("no such magnitude was entered, or it is void already")

// VoidMagnitude declares an entered magnitude void; it stays in the store.
func (b *Book) VoidMagnitude(ctx context.Context, id int64) error {
	return b.db.Do(ctx, func(tx *store.Tx) error {
		rows, err := tx.Select(store.Magnitudes, "id = ? AND void IS NULL", id)
		if err == nil && len(rows) == 0 {
			return fmt.Errorf("magnitude %d: %w", id, ErrNoMagnitude)
		}
		if err != nil {
			return err
		}
		_, err = tx.Update(store.Magnitudes, id, store.Row{"void": int64(1)})
		return err
	})
}

// Magnitudes returns the magnitudes entered in this run, without void ones.
func (b *Book) Magnitudes(ctx context.Context) ([]targets.Magnitude, error) {
	rows, err := b.db.Select(ctx, store.Magnitudes, "void IS NULL")
	if err != nil {
		return nil, err
	}
	out := make([]targets.Magnitude, len(rows))
	for i, r := range rows {
		m := targets.Magnitude{Target: r.Text("target"), TimeScale: r.Text("time_scale"), Band: targets.Band(r.Text("band")), Limit: r.Int("faint_limit") != 0, Source: r.Text("source")}
		m.At = targets.Where{File: EnteredAt, Line: int(r.Int("id"))}
		m.JD, _ = r.Real("jd")
		m.Mag, _ = r.Real("mag")
		m.Err, _ = r.Real("err")
		out[i] = m
	}
	return out, nil
}

// SaveDraft keeps what is half typed on a screen of a session; "" forgets it.
func (b *Book) SaveDraft(ctx context.Context, session, screen, detail string) error {
	return b.db.Do(ctx, func(tx *store.Tx) error {
		if err := tx.Delete(store.Drafts, "session = ? AND screen = ?", session, screen); err != nil || detail == "" {
			return err
		}
		_, err := tx.Insert(store.Drafts, store.Row{"session": session, "screen": screen, "detail": detail, "saved_utc": stamp(b.now())})
		return err
	})
}

// Draft returns what was half typed; "" nothing.
func (b *Book) Draft(ctx context.Context, session, screen string) (string, error) {
	rows, err := b.db.Select(ctx, store.Drafts, "session = ? AND screen = ?", session, screen)
	if err != nil || len(rows) == 0 {
		return "", err
	}
	return rows[len(rows)-1].Text("detail"), nil
}

// Drafts returns all that was half typed in a session, by screen.
func (b *Book) Drafts(ctx context.Context, session string) (map[string]string, error) {
	rows, err := b.db.Select(ctx, store.Drafts, "session = ?", session)
	out := map[string]string{}
	for _, r := range rows {
		out[r.Text("screen")] = r.Text("detail")
	}
	return out, err
}

// Session is a session at the screen.
type Session struct {
	ID                 int64
	Name               string // the same again after a dropped link: who and where from
	Observer, Host     string
	PID                int
	Began, Seen, Ended time.Time
	State              string // of the screen, as the screen wrote it
}

func sessionOf(r store.Row) Session {
	return Session{ID: r.Int("id"), Name: r.Text("name"), Observer: r.Text("observer"), Host: r.Text("host"), PID: int(r.Int("pid")),
		Began: parse(r.Text("began_utc")), Seen: parse(r.Text("seen_utc")), Ended: parse(r.Text("ended_utc")), State: r.Text("state")}
}

// SaveSession writes a session's state; the first time it makes the session.
func (b *Book) SaveSession(ctx context.Context, s Session) (int64, error) {
	row := store.Row{"name": s.Name, "observer": s.Observer, "host": s.Host, "pid": int64(s.PID), "began_utc": stamp(s.Began), "seen_utc": stamp(b.now()), "state": s.State}
	if !s.Ended.IsZero() {
		row["ended_utc"] = stamp(s.Ended)
	}
	id := s.ID
	err := b.db.Do(ctx, func(tx *store.Tx) error {
		if id != 0 {
			_, err := tx.Update(store.Sessions, id, row)
			return err
		}
		var err error
		id, err = tx.Insert(store.Sessions, row)
		return err
	})
	return id, err
}

// LastSession returns the latest session of a name; false: there was none.
func (b *Book) LastSession(ctx context.Context, name string) (Session, bool, error) {
	rows, err := b.db.Select(ctx, store.Sessions, "name = ?", name)
	if err != nil || len(rows) == 0 {
		return Session{}, false, err
	}
	return sessionOf(rows[len(rows)-1]), true, nil
}

// Former returns the sessions of a name and its further logins, the latest
// first.
func (b *Book) Former(ctx context.Context, name string) ([]Session, error) {
	rows, err := b.db.Select(ctx, store.Sessions, "name = ? OR name LIKE ? || ', login %'", name, name)
	if err != nil {
		return nil, err
	}
	out := make([]Session, len(rows))
	for i, r := range rows {
		out[i] = sessionOf(r)
	}
	slices.SortStableFunc(out, func(x, y Session) int { return y.Seen.Compare(x.Seen) })
	return out, nil
}

// Others returns the sessions of other names that were seen since a time and
// have not ended.
func (b *Book) Others(ctx context.Context, name string, since time.Time) ([]Session, error) {
	rows, err := b.db.Select(ctx, store.Sessions, "name <> ? AND ended_utc IS NULL", name)
	if err != nil {
		return nil, err
	}
	var out []Session
	for _, r := range rows {
		if s := sessionOf(r); s.Seen.After(since) {
			out = append(out, s)
		}
	}
	slices.SortFunc(out, func(x, y Session) int { return x.Seen.Compare(y.Seen) })
	return out, nil
}

// Set keeps a setting; Setting returns it, "" where it was never set.
func (b *Book) Set(ctx context.Context, name, value string) error {
	return b.db.Do(ctx, func(tx *store.Tx) error {
		if err := tx.Delete(store.Settings, "name = ?", name); err != nil {
			return err
		}
		_, err := tx.Insert(store.Settings, store.Row{"name": name, "value": value})
		return err
	})
}

// Setting returns a setting.
func (b *Book) Setting(ctx context.Context, name string) (string, error) {
	rows, err := b.db.Select(ctx, store.Settings, "name = ?", name)
	if err != nil || len(rows) == 0 {
		return "", err
	}
	return rows[0].Text("value"), nil
}
