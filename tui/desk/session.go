package desk

import (
	"cmp"
	"context"
	"encoding/json"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
	"evenfall/tui/log"
)

// state is where a session stands, to come back to after a dropped link.
type state struct {
	Screen   string      `json:"screen"`
	Star     string      `json:"star,omitempty"`
	Shown    string      `json:"shown_utc,omitempty"` // "" live
	Filter   string      `json:"filter,omitempty"`
	Sort     roster.Sort `json:"sort"`
	Observer string      `json:"observer,omitempty"`
	Setup    string      `json:"setup,omitempty"`
	Theme    kit.Theme   `json:"theme"`
	Offset   *float64    `json:"clock_offset_s,omitempty"`
}

// State writes where the session stands.
func (d *Desk) State() string {
	s := state{Screen: d.up().Title(), Filter: d.w.Filter, Sort: d.w.Sort, Observer: d.w.Observer, Setup: d.setup.String(), Theme: d.w.Look.Theme}
	switch s.Screen { // where a line or an answer is asked for is no place to come back to
	case kit.OnStar, kit.OnDiagram, kit.OnEvents, kit.OnDome, kit.OnFinder, kit.OnLog, kit.OnEntry, kit.OnWeather:
	default:
		s.Screen = kit.OnNext
	}
	if d.offset.Known {
		s.Offset = &d.offset.Value
	}
	if e := d.w.Entry(); e != nil {
		s.Star = e.Target.Name
	}
	if !d.w.Live {
		s.Shown = d.w.Shown.Format(time.RFC3339)
	}
	text, err := json.Marshal(s)
	if err != nil {
		return ""
	}
	return string(text)
}

// back takes over what an earlier session left; the screen and the star come
// once the list is there.
func (d *Desk) back(text string) {
	var s state
	if text == "" || json.Unmarshal([]byte(text), &s) != nil {
		return
	}
	if f, err := roster.ParseFilter(s.Filter); err == nil {
		d.filter, d.w.Filter = f, s.Filter
	}
	d.w.Sort = s.Sort
	if s.Offset != nil {
		d.offset = targets.Known(*s.Offset)
	}
	if d.w.Observer == "" {
		d.w.Observer = s.Observer
	}
	if set, err := parseSetup(s.Setup); err == nil {
		d.setup = set
	}
	if t, err := time.Parse(time.RFC3339, s.Shown); err == nil && d.src.Start.IsZero() && !d.src.Fixed {
		d.w.Shown, d.w.Live = t.UTC(), false
	}
	if s.Theme != d.w.Look.Theme && s.Theme != "" {
		d.w.Look = kit.NewLook(s.Theme, d.w.Look.Level, d.w.Look.Glyphs)
	}
	d.resume = &s
}

// comeBack opens the screen and selects the star that were up.
func (d *Desk) comeBack() {
	s := d.resume
	d.resume = nil
	for i := range d.src.Roster.Len() {
		if s.Star != "" && d.src.Roster.Entry(i).Target.Name == s.Star {
			d.anchor = i
			d.selectRow(i)
			break
		}
	}
	switch s.Screen {
	case kit.OnStar, kit.OnDiagram, kit.OnEvents, kit.OnDome, kit.OnFinder:
		d.open(s.Screen)
	case kit.OnLog:
		d.screens = append(d.screens, log.New())
	case kit.OnEntry:
		d.screens = append(d.screens, d.entry)
	case kit.OnWeather:
		d.screens = append(d.screens, d.weather)
	}
	d.say("back where the last session stood", false)
}

// keptScreens are the forms whose text is kept.
func (d *Desk) keptScreens() []kit.Kept {
	var out []kit.Kept
	for _, s := range []kit.Screen{d.entry, d.weather} {
		if k, ok := s.(kit.Kept); ok {
			out = append(out, k)
		}
	}
	return out
}

// keep brings what is half typed, and where the session stands, to the disk:
// at every tick at which it has changed.
func (d *Desk) keep() []Task {
	if d.src.Book == nil || d.src.Book.Store().ReadOnly() || d.refused != nil || d.w.Snap == nil || d.writing {
		return nil
	}
	var tasks []Task
	now := map[string]string{}
	for _, k := range d.keptScreens() {
		now[k.Title()] = k.Draft()
	}
	for label, text := range d.kept {
		now["line "+label] = text
	}
	if d.prompt != nil { // what is being typed goes before what was
		now["line "+d.prompt.label] = d.prompt.field.String()
	}
	for screen := range d.drafts {
		if _, ok := now[screen]; !ok {
			now[screen] = ""
		}
	}
	for screen, text := range now {
		if d.drafts[screen] == text {
			continue
		}
		d.drafts[screen] = text
		session := d.src.Session
		tasks = append(tasks, d.save(write{what: "draft of " + screen, run: func(ctx context.Context, b *logbook.Book) (any, error) {
			return nil, b.SaveDraft(ctx, session, screen, text)
		}})...)
	}
	if text := d.State(); text != d.saved {
		d.saved = text
		s := logbook.Session{ID: d.sessionID, Name: d.src.Session, Observer: d.w.Observer, PID: d.src.PID, Began: d.began, State: text}
		tasks = append(tasks, d.save(write{what: "where the session stands", run: func(ctx context.Context, b *logbook.Book) (any, error) {
			return b.SaveSession(ctx, s)
		}, done: func(d *Desk, r any) []Task {
			d.sessionID = r.(int64)
			return nil
		}})...)
	}
	return tasks
}

// recalled are the drafts of an earlier session.
type recalled map[string]string

// recall reads the drafts.
func (d *Desk) recall() []Task {
	if d.src.Book == nil {
		return nil
	}
	book, session := d.src.Book, cmp.Or(d.src.Former, d.src.Session)
	return []Task{{"looking for drafts", func() any {
		drafts, err := book.Drafts(context.Background(), session)
		if err != nil {
			return kit.Say{Text: "drafts cannot be read: " + err.Error(), Bad: true}
		}
		return recalled(drafts)
	}}}
}

// remember puts drafts back where they were typed.
func (d *Desk) remember(r recalled) {
	for _, k := range d.keptScreens() {
		text, ok := r[k.Title()]
		if !ok || k.HalfTyped() {
			continue
		}
		s := k.Recall(text)
		switch s.Title() {
		case kit.OnEntry:
			d.entry = s
		case kit.OnWeather:
			d.weather = s
		}
		for i := range d.screens {
			if d.screens[i].Title() == s.Title() {
				d.screens[i] = s
			}
		}
		if d.src.Former == "" || d.src.Former == d.src.Session {
			d.drafts[k.Title()] = text // on the disk under this session's name
		}
		d.say("what was half typed on the screen "+k.Title()+" is there again", false)
	}
	for name, text := range r {
		if label, ok := strings.CutPrefix(name, "line "); ok && text != "" {
			d.kept[label] = text
			if d.src.Former == "" || d.src.Former == d.src.Session {
				d.drafts[name] = text
			}
			d.say("what was half typed is there again: "+label+" "+text, false)
		}
	}
}
