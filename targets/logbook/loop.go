package logbook

import (
	"context"
	"fmt"
	"time"

	"evenfall/targets"
	"evenfall/targets/store"
)

// The phases of the loop at the telescope.
const (
	Idle      = "idle"
	Slewing   = "slewing"
	Acquiring = "acquiring"
	Exposing  = "exposing"
	Reading   = "reading out"
)

// How a take ended.
const (
	Accepted = "accepted"
	Stopped  = "stopped" // early; what was done counts
	Aborted  = "aborted" // nothing of it counts
)

// Take is what is being done at the telescope, or was.
type Take struct {
	ID               int64
	Type             string // of the entry it will be; "" science
	Request, Target  string
	Phase            string
	PhaseAt, Began   time.Time
	Frames           int     // wanted; 0: until stopped
	EachS            float64 // seconds a frame
	ReadoutS         float64 // seconds between frames
	Done             int     // frames said to be done by hand; -1: the clock counts
	Instrument, Mode string
	Band             targets.Band
	FileFirst        string
	Observer         string
	Session          string
	Ended            time.Time // zero: under way
	How              string
	Entry            int64 // the log's entry it became
}

// name is what two sessions must not start at the same time.
func (t *Take) name() string {
	if t.Request != "" {
		return targets.Key(t.Request)
	}
	return targets.Key(t.Target)
}

// Held says that another session has started the same take.
type Held struct{ By Take }

// Error says who has it and since when.
func (h Held) Error() string {
	who := h.By.Observer
	if who == "" {
		who = "another session"
	}
	what := h.By.Request
	if what == "" {
		what = h.By.Target
	}
	return fmt.Sprintf("%s has been %s %s since %s UTC", who, h.By.Phase, what, h.By.PhaseAt.UTC().Format("15:04:05"))
}

func takeRow(t *Take) store.Row {
	r := store.Row{"phase": t.Phase, "phase_utc": stamp(t.PhaseAt), "began_utc": stamp(t.Began), "frames": int64(t.Frames), "each_s": t.EachS,
		"readout_s": t.ReadoutS, "done": int64(t.Done)}
	for column, s := range map[string]string{"request": t.Request, "target": t.Target, "instrument": t.Instrument, "mode": t.Mode, "band": string(t.Band),
		"file_first": t.FileFirst, "observer": t.Observer, "session": t.Session, "ended_utc": stamp(t.Ended), "how": t.How, "type": t.Type} {
		if s != "" {
			r[column] = s
		}
	}
	if t.Entry != 0 {
		r["entry"] = t.Entry
	}
	return r
}

func takeOf(r store.Row) Take {
	t := Take{ID: r.Int("id"), Request: r.Text("request"), Target: r.Text("target"), Phase: r.Text("phase"), PhaseAt: parse(r.Text("phase_utc")),
		Began: parse(r.Text("began_utc")), Frames: int(r.Int("frames")), Done: int(r.Int("done")), Instrument: r.Text("instrument"), Mode: r.Text("mode"),
		Band: targets.Band(r.Text("band")), FileFirst: r.Text("file_first"), Observer: r.Text("observer"), Session: r.Text("session"),
		Ended: parse(r.Text("ended_utc")), How: r.Text("how"), Type: r.Text("type"), Entry: r.Int("entry")}
	t.EachS, _ = r.Real("each_s")
	t.ReadoutS, _ = r.Real("readout_s")
	return t
}

// Begin starts a take.
//
// Given:
//   - confirmed: start it although another session has the same one.
//
// Returns:
//   - its number, once on the disk; [Held] where another session has started
//     the same request, or target, and not ended it.
//
// Checked: TestHeld: of two that begin at once one is told.
func (b *Book) Begin(ctx context.Context, t Take, confirmed bool) (int64, error) {
	var id int64
	err := b.db.Do(ctx, func(tx *store.Tx) error {
		rows, err := tx.Select(store.Takes, "ended_utc IS NULL")
		if err != nil {
			return err
		}
		for _, r := range rows {
			other := takeOf(r)
			if !confirmed && other.Session != t.Session && other.name() == t.name() {
				return Held{other}
			}
		}
		if t.Observer == "" {
			t.Observer = b.observer
		}
		id, err = tx.Insert(store.Takes, takeRow(&t))
		return err
	})
	return id, err
}

// Phase moves a take on: to another phase, or to another count of frames.
func (b *Book) Phase(ctx context.Context, t Take) error {
	return b.db.Do(ctx, func(tx *store.Tx) error {
		r := takeRow(&t)
		ok, err := tx.Update(store.Takes, t.ID, r)
		if err == nil && !ok {
			return fmt.Errorf("take %d: %w", t.ID, ErrNoEntry)
		}
		return err
	})
}

// End ends a take and writes its entry, both or neither; an aborted one is
// written as void. Ended twice it returns the first entry.
func (b *Book) End(ctx context.Context, t Take, how string, e Entry) (int64, error) {
	if how == Aborted {
		e.Void, e.Grade = true, "void"
	}
	if err := e.Check(); err != nil {
		return 0, err
	}
	var id int64
	err := b.db.Do(ctx, func(tx *store.Tx) error {
		rows, err := tx.Select(store.Takes, "id = ?", t.ID)
		if err != nil {
			return err
		}
		if len(rows) == 1 && rows[0].Text("ended_utc") != "" {
			id = rows[0].Int("entry")
			return nil
		}
		s := b.signed(e)
		if id, err = tx.Insert(store.Entries, rowOf(&s)); err != nil {
			return err
		}
		ended := t
		ended.Ended, ended.How, ended.Entry = b.now(), how, id
		_, err = tx.Update(store.Takes, t.ID, takeRow(&ended))
		return err
	})
	return id, err
}

// UnderWay returns the takes that have not ended, of all sessions.
func (b *Book) UnderWay(ctx context.Context) ([]Take, error) {
	rows, err := b.db.Select(ctx, store.Takes, "ended_utc IS NULL")
	if err != nil {
		return nil, err
	}
	out := make([]Take, len(rows))
	for i, r := range rows {
		out[i] = takeOf(r)
	}
	return out, nil
}

// State is where in the loop a take is at a time, by the clock.
type State struct {
	Phase string
	Frame int           // being exposed or read out, from 1
	Done  int           // frames complete
	Left  time.Duration // of the series; exposing without an end: 0
	Frac  time.Duration // since the phase began
	Over  bool          // the series is complete: to be accepted
}

// At returns where in the loop the take is.
//
//	a frame takes each_s + readout_s, the last one's readout included
func (t *Take) At(now time.Time) State {
	s := State{Phase: t.Phase, Frac: max(now.Sub(t.PhaseAt), 0)}
	if t.Phase != Exposing {
		return s
	}
	each, cycle := seconds(t.EachS), seconds(t.EachS+t.ReadoutS)
	if t.Done >= 0 { // counted by hand
		s.Done, s.Frame = t.Done, t.Done+1
		s.Over = t.Frames > 0 && s.Done >= t.Frames
		return s
	}
	if cycle <= 0 || each <= 0 {
		s.Frame = 1
		return s
	}
	passed := s.Frac
	s.Done = int(passed / cycle)
	if t.Frames > 0 {
		total := time.Duration(t.Frames) * cycle
		s.Left = max(total-passed, 0)
		if passed >= total {
			s.Done, s.Frame, s.Over, s.Phase = t.Frames, t.Frames, true, Reading
			return s
		}
	}
	s.Frame = s.Done + 1
	if passed%cycle >= each {
		s.Phase = Reading
	}
	return s
}

func seconds(v float64) time.Duration { return time.Duration(v * float64(time.Second)) }
