package logbook

import (
	"context"
	"fmt"
	"slices"
	"time"

	"evenfall/targets"
	"evenfall/targets/store"
)

// Conditions is what sky and dome are like from a time on. What is not Known,
// or "", was not said then: what was said before still holds.
type Conditions struct {
	ID                 int64
	From               time.Time
	Seeing             targets.Measure // arcsec
	Extinction         targets.Measure // mag, of thin cloud on top of the air
	CloudFrom, CloudTo targets.Measure // azimuth, deg; from through to, eastward
	WindFrom, WindMS   targets.Measure // deg, m/s
	Humidity           targets.Measure // 0 to 1
	DewMarginC         targets.Measure
	Photometric        string // yes, no
	Instrument         string // in use
	Dome               string // open, closed
	Reason             string // of closing: weather, fault, other
	Note, Observer     string
	Entered            time.Time
	Void               bool
}

// Reasons lists why a dome is closed.
var Reasons = []string{"weather", "fault", "other"}

type conditionAt struct {
	column string
	at     *targets.Measure
	lo, hi float64
}

func (c *Conditions) numbers() []conditionAt {
	return []conditionAt{{"seeing_arcsec", &c.Seeing, 0.1, 30}, {"extinction_mag", &c.Extinction, 0, 20}, {"cloud_from_deg", &c.CloudFrom, 0, 360},
		{"cloud_to_deg", &c.CloudTo, 0, 360}, {"wind_from_deg", &c.WindFrom, 0, 360}, {"wind_ms", &c.WindMS, 0, 100},
		{"humidity", &c.Humidity, 0, 1}, {"dew_margin_c", &c.DewMarginC, -30, 60}}
}

func (c *Conditions) texts() []textAt {
	return []textAt{{"photometric", &c.Photometric}, {"instrument", &c.Instrument}, {"dome", &c.Dome}, {"reason", &c.Reason}, {"note", &c.Note}, {"observer", &c.Observer}}
}

// Check tells what is wrong with conditions before they are written.
func (c *Conditions) Check() error {
	said := c.Note != ""
	for _, n := range c.numbers() {
		if n.at.Known {
			said = true
			if !(n.at.Value >= n.lo && n.at.Value <= n.hi) {
				return fmt.Errorf("%s %g: outside %g to %g", n.column, n.at.Value, n.lo, n.hi)
			}
		}
	}
	if c.CloudFrom.Known != c.CloudTo.Known {
		return fmt.Errorf("a sector of cloud needs both its azimuths")
	}
	for _, w := range []struct {
		name, value string
		of          []string
	}{{"photometric", c.Photometric, []string{"yes", "no"}}, {"dome", c.Dome, []string{"open", "closed"}}, {"reason", c.Reason, Reasons}} {
		if w.value != "" {
			said = true
			if !slices.Contains(w.of, w.value) {
				return fmt.Errorf("%s %q: use one of %v", w.name, w.value, w.of)
			}
		}
	}
	if !said && c.Instrument == "" {
		return fmt.Errorf("conditions that say nothing; give seeing, extinction, wind, humidity or others")
	}
	if c.From.IsZero() {
		return fmt.Errorf("conditions need the time from which they hold")
	}
	return nil
}

// Conditions writes conditions, and an entry of the log that says so.
//
// Returns:
//   - the number of the log's entry.
func (b *Book) Conditions(ctx context.Context, c Conditions) (int64, error) {
	if err := c.Check(); err != nil {
		return 0, err
	}
	if c.Observer == "" {
		c.Observer = b.observer
	}
	row := store.Row{"from_utc": stamp(c.From), "entered_utc": stamp(b.now())}
	for _, n := range c.numbers() {
		if n.at.Known {
			row[n.column] = n.at.Value
		}
	}
	for _, t := range c.texts() {
		if *t.at != "" {
			row[t.column] = *t.at
		}
	}
	e := b.signed(Entry{Type: "condition", Start: c.From, Note: c.Words(), Seeing: c.Seeing, Extinction: c.Extinction, Reason: c.Reason, Observer: c.Observer})
	var id int64
	err := b.db.Do(ctx, func(tx *store.Tx) error {
		if c.Dome != "" {
			if err := closure(tx, &c, &e); err != nil {
				return err
			}
		}
		var err error
		if id, err = tx.Insert(store.Entries, rowOf(&e)); err != nil {
			return err
		}
		row["entry"] = id
		_, err = tx.Insert(store.Conditions, row)
		return err
	})
	return id, err
}

// closure makes the entry of closing an open-ended one, and that of opening
// the end of it: so that time lost adds up from the entries alone.
func closure(tx *store.Tx, c *Conditions, e *Entry) error {
	if c.Dome == "closed" {
		e.Type = "closed" // for another reason than before, perhaps: that closure ends here
	}
	rows, err := tx.Select(store.Entries, "type = 'closed' AND end_utc IS NULL AND void IS NULL AND start_utc <= ? AND id NOT IN (SELECT replaces FROM entries WHERE replaces IS NOT NULL)", stamp(c.From))
	if err != nil {
		return err
	}
	for _, r := range rows {
		old := entryOf(r)
		amended := old
		amended.ID, amended.Replaces, amended.End, amended.Entered = 0, old.ID, c.From, e.Entered
		if _, err := tx.Insert(store.Entries, rowOf(&amended)); err != nil {
			return err
		}
	}
	return nil
}

// Words says the conditions in one line.
func (c *Conditions) Words() string {
	text := ""
	add := func(format string, a ...any) {
		if text != "" {
			text += ", "
		}
		text += fmt.Sprintf(format, a...)
	}
	if c.Dome != "" {
		add("dome %s", c.Dome)
	}
	if c.Reason != "" {
		add("%s", c.Reason)
	}
	if c.Seeing.Known {
		add("seeing %.1f arcsec", c.Seeing.Value)
	}
	if c.Extinction.Known {
		add("extinction %.2f mag", c.Extinction.Value)
	}
	if c.CloudFrom.Known {
		add("cloud from azimuth %.0f to %.0f", c.CloudFrom.Value, c.CloudTo.Value)
	}
	if c.WindMS.Known || c.WindFrom.Known {
		add("wind")
		if c.WindMS.Known {
			text += fmt.Sprintf(" %.0f m/s", c.WindMS.Value)
		}
		if c.WindFrom.Known {
			text += fmt.Sprintf(" from %.0f deg", c.WindFrom.Value)
		}
	}
	if c.Humidity.Known {
		add("humidity %.0f %%", 100*c.Humidity.Value)
	}
	if c.DewMarginC.Known {
		add("%.1f C above the dew point", c.DewMarginC.Value)
	}
	if c.Photometric != "" {
		add("photometric: %s", c.Photometric)
	}
	if c.Instrument != "" {
		add("instrument %s", c.Instrument)
	}
	if c.Note != "" {
		add("%s", c.Note)
	}
	return text
}

// At returns what holds at a time: of each figure the latest that was said.
func (b *Book) At(ctx context.Context, at time.Time) (Conditions, error) {
	rows, err := b.db.Select(ctx, store.Conditions, "from_utc <= ? AND void IS NULL", stamp(at))
	if err != nil {
		return Conditions{}, err
	}
	slices.SortStableFunc(rows, func(x, y store.Row) int { return parse(x.Text("from_utc")).Compare(parse(y.Text("from_utc"))) })
	now := Conditions{From: at}
	for _, r := range rows {
		for _, n := range now.numbers() {
			if v, ok := r.Real(n.column); ok {
				*n.at = targets.Known(v)
			}
		}
		for _, t := range now.texts() {
			// why it was closed, and notes, are of their time alone
			if s := r.Text(t.column); s != "" && t.column != "note" && t.column != "observer" {
				*t.at = s
			}
		}
		if now.Dome != "closed" {
			now.Reason = ""
		}
	}
	return now, nil
}

// Warnings says which limits of the site the conditions break, in words.
func (c *Conditions) Warnings(l *targets.Limits) []string {
	var out []string
	if c.Humidity.Known && c.Humidity.Value > l.Humidity {
		out = append(out, fmt.Sprintf("humidity %.0f %% is over the site's limit of %.0f %%: its rules for closing hold", 100*c.Humidity.Value, 100*l.Humidity))
	}
	if c.DewMarginC.Known && c.DewMarginC.Value < l.DewMarginC {
		out = append(out, fmt.Sprintf("only %.1f C above the dew point, the site wants %.1f: its rules for closing hold", c.DewMarginC.Value, l.DewMarginC))
	}
	if c.WindMS.Known && c.WindMS.Value > l.WindMS {
		text := fmt.Sprintf("wind %.0f m/s is over the site's limit of %.0f", c.WindMS.Value, l.WindMS)
		if c.WindFrom.Known {
			text += fmt.Sprintf(": point away from azimuth %.0f, or close", c.WindFrom.Value)
		}
		out = append(out, text)
	}
	return out
}

// Of returns what the rest of the program computes with.
func (c *Conditions) Of() targets.Conditions {
	return targets.Conditions{Closed: c.Dome == "closed", WindFromDeg: c.WindFrom, WindMS: c.WindMS, CloudFrom: c.CloudFrom, CloudTo: c.CloudTo,
		Seeing: c.Seeing, Extinction: c.Extinction, Hazy: c.Photometric == "no"}
}
