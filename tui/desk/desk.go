// Package desk is the program on the screen without the terminal: which
// screen is up, which moment is shown, the list and its selection, marks and
// messages. Keys, results and the clock come in as plain values; pictures and
// tasks go out. It knows no Bubble Tea, starts no goroutine and reads no clock.
package desk

import (
	"context"
	"time"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/roster"
	"evenfall/tui/entry"
	"evenfall/tui/help"
	"evenfall/tui/kit"
	"evenfall/tui/next"
	"evenfall/tui/weather"
)

// Desk is the program's state. It is used by one goroutine.
type Desk struct {
	src     Source
	w       kit.World
	screens []kit.Screen // the last is up
	entry   kit.Screen   // the form, kept while it is away
	message string
	bad     bool
	last    string // the last message, for help
	asking  bool   // whether to leave
	done    bool

	generation int
	cancel     context.CancelFunc // of the snapshot under way; nil: none
	filter     roster.Filter      // as parsed from World.Filter
	askedAt    time.Time          // clock's time of the last snapshot asked for
	keyAt      time.Time          // clock's time of the last key
	anchor     int                // the star that the user selected, also while it is filtered out
	works      int                // in flight
	under      map[int]underWay   // those of the screens, by number
	workID     int                // the last number
	foreseen   foreseen
	before     asked // what held before the user's last question

	queue     []write // not on the disk yet, the first being written
	writing   bool
	refused   error     // why the disk refused the first; nil: it did not
	failedAt  time.Time // when
	prompt    *prompt   // a line being asked for
	kept      map[string]string
	question  string // that a y is asked for
	answer    func(*Desk) []Task
	polling   bool
	polled    bool // once, at least
	deaf      bool // the log could not be read
	setup     setup
	offset    targets.Measure // of the instrument's clock, s
	takeRow   int
	ref       *ref   // of the take under way
	rung      string // what the bell was rung for last
	bell      bool
	weather   kit.Screen
	drafts    map[string]string // as they are on the disk
	saved     string            // the session's state as it is on the disk
	sessionID int64
	began     time.Time
	resume    *state // to be gone back to once the list is there
}

// asked is what a list is asked by, to be gone back to where it fails.
type asked struct {
	filter roster.Filter
	text   string
	sort   roster.Sort
	shown  time.Time
	live   bool
}

func (d *Desk) now() asked { return asked{d.filter, d.w.Filter, d.w.Sort, d.w.Shown, d.w.Live} }

// anchors are the actions after which the star that is selected is the user's
// own choice, though it was never moved to.
var anchors = map[kit.Action]bool{
	kit.OpenStar: true, kit.OpenDiagram: true, kit.OpenEvents: true, kit.OpenDome: true, kit.OpenFinder: true, kit.MarkStar: true, kit.CopyLines: true, kit.SortList: true, kit.ReverseSort: true, kit.RankAnew: true, kit.BackToNow: true,
	kit.MinuteLess: true, kit.MinuteMore: true, kit.TenLess: true, kit.TenMore: true, kit.HourLess: true, kit.HourMore: true, kit.NightLess: true, kit.NightMore: true,
}

// idleAfter is how long no key must have come before the list puts itself
// into a new order.
const idleAfter = time.Minute

// New opens the desk at a time of the clock.
func New(src Source, now time.Time) (*Desk, []Task) {
	d := &Desk{src: src, anchor: -1, entry: entry.New(), weather: weather.New(), screens: []kit.Screen{next.New()}, kept: map[string]string{},
		drafts: map[string]string{}, under: map[int]underWay{}, takeRow: -1, began: now}
	d.w = kit.World{Look: src.Look, Site: src.Site, Title: src.Title, Demo: src.Demo, Zone: src.Zone, HandOver: src.HandOver,
		Band: src.Band, Level: src.Level, Fixed: src.Fixed, Selected: -1, Place: -1, Wall: now, Shown: now, Live: true,
		Marks: map[int]bool{}, Width: 80, Height: 24, Ticks: src.Every > 0,
		Book: src.Book, Observer: src.Observer, Requests: src.Requests, Limits: src.Limits, ClockWords: src.ClockWords, Lives: src.Lives, Lights: src.Lights, Night: src.Night, Field: src.Field}
	if !src.Start.IsZero() {
		d.w.Shown, d.w.Live = src.Start, false
	}
	d.keyAt = now
	d.back(src.State)
	for _, n := range src.Notices {
		d.say(n, false)
	}
	return d, append(append(d.ask(nil), d.poll()...), d.recall()...)
}

// Done tells whether the user left.
func (d *Desk) Done() bool { return d.done }

// Resize tells the desk how large the screen is.
func (d *Desk) Resize(width, height int) []Task {
	d.w.Width, d.w.Height = max(width, 0), max(height, 0)
	return d.follow()
}

func (d *Desk) up() kit.Screen { return d.screens[len(d.screens)-1] }

func (d *Desk) put(s kit.Screen) {
	d.screens[len(d.screens)-1] = s
	switch s.Title() {
	case kit.OnEntry:
		d.entry = s
	case kit.OnWeather:
		d.weather = s
	}
}

// say puts a message on the status line; a bad one stays until dismissed.
func (d *Desk) say(text string, bad bool) {
	if d.bad && !bad {
		return
	}
	d.message, d.bad, d.last = text, bad, text
}

// Key obeys a key, named as the terminal names it.
func (d *Desk) Key(press string) []Task {
	d.keyAt = d.w.Wall
	if d.asking {
		d.asking = false
		d.done = press == "y" || press == "ctrl+c"
		return nil
	}
	if d.answer != nil {
		then := d.answer
		d.answer, d.question = nil, ""
		if press == "y" {
			return then(d)
		}
		d.say("not done", false)
		return nil
	}
	if press == "ctrl+c" {
		d.leave()
		return nil
	}
	if d.prompt != nil {
		return d.promptKey(press)
	}
	if !d.bad {
		d.message = ""
	}
	s := d.up()
	if !s.Typing() {
		if anchors[kit.Lookup(s.Title(), press)] && d.w.Selected >= 0 {
			d.anchor = d.w.Selected
		}
		if tasks, obeyed := d.common(kit.Lookup(s.Title(), press)); obeyed {
			return append(append(tasks, d.follow()...), d.catchUp()...)
		}
	} else if d.bad {
		d.message, d.bad = "", false // typing on reads it
	}
	s, job := s.Key(&d.w, press)
	d.put(s)
	tasks := d.do(job)
	return append(append(tasks, d.follow()...), d.catchUp()...)
}

// Paste takes pasted text: it goes to a field or is dropped, never to keys.
func (d *Desk) Paste(text string) []Task {
	d.keyAt = d.w.Wall
	if d.prompt != nil {
		d.prompt.field = d.prompt.field.Insert(text)
		return nil
	}
	p, ok := d.up().(kit.Paster)
	if !ok {
		d.say(kit.PasteWhere, false)
		return nil
	}
	s, job := p.Paste(&d.w, text)
	d.put(s)
	return append(d.do(job), d.follow()...)
}

// steps is what the keys of time do.
var steps = map[kit.Action]kit.Step{
	kit.MinuteLess: {By: -time.Minute}, kit.MinuteMore: {By: time.Minute},
	kit.TenLess: {By: -10 * time.Minute}, kit.TenMore: {By: 10 * time.Minute},
	kit.HourLess: {By: -time.Hour}, kit.HourMore: {By: time.Hour},
	kit.NightLess: {Nights: -1}, kit.NightMore: {Nights: 1},
}

// common obeys the keys that mean the same on every screen.
func (d *Desk) common(a kit.Action) ([]Task, bool) {
	if step, ok := steps[a]; ok {
		return d.do(step), true
	}
	if tasks, ok := d.atTelescope(a); ok {
		return tasks, true
	}
	switch a {
	case kit.BackToNow:
		return d.do(kit.Now{}), true
	case kit.MarkStar:
		return d.do(kit.Toggle{}), true
	case kit.AddStar:
		d.screens = append(d.screens, d.entry)
	case kit.CopyLines:
		return d.copy(), true
	case kit.OpenDiagram:
		d.open(kit.OnDiagram)
	case kit.OpenEvents:
		d.open(kit.OnEvents)
	case kit.OpenDome:
		d.open(kit.OnDome)
	case kit.OpenFinder:
		d.open(kit.OnFinder)
	case kit.EnterMag:
		d.enterMagnitude()
	case kit.RemoveMag:
		d.removeMagnitude()
	case kit.ShowHelp:
		d.screens = append(d.screens, help.New(d.up().Title(), d.last))
	case kit.ChangeTheme:
		d.theme()
	case kit.Back:
		switch {
		case d.message != "":
			d.message, d.bad = "", false
		case len(d.screens) > 1:
			d.close()
		}
	case kit.Leave:
		if len(d.screens) > 1 {
			d.close()
		} else {
			d.leave()
		}
	default:
		return nil, false
	}
	return nil, true
}

// leave ends the program, or asks first where something is half typed.
func (d *Desk) leave() {
	if len(d.queue) > 0 {
		d.asking = true
		return
	}
	for _, s := range append([]kit.Screen{d.entry, d.weather}, d.screens...) {
		if t, ok := s.(kit.Holder); ok && t.HalfTyped() {
			d.asking = true
			return
		}
	}
	d.done = true
}

// do carries out what a key asked for.
func (d *Desk) do(job kit.Job) []Task {
	switch j := job.(type) {
	case kit.All:
		var tasks []Task
		for _, one := range j {
			tasks = append(tasks, d.do(one)...)
		}
		return tasks
	case kit.Work:
		return []Task{d.work(j)}
	case kit.Say:
		d.say(j.Text, j.Bad)
	case kit.Select:
		d.anchor = j.Row
		d.selectRow(j.Row)
	case kit.Open:
		d.open(j.Screen)
	case kit.Close:
		d.close()
	case kit.Toggle:
		return d.toggle()
	case kit.Find:
		return d.find(j)
	case kit.Rerank:
		d.say("order of "+d.w.Shown.Format("15:04:05"), false)
		d.before = d.now()
		return d.ask(nil)
	case kit.Step:
		return d.step(j)
	case kit.Now:
		if !d.w.Live {
			d.say("back to now", false)
		}
		d.before = d.now()
		d.w.Live, d.w.Shown = true, d.w.Wall
		return d.ask(nil)
	case kit.Add:
		return []Task{d.add(j.Entry, true)}
	case kit.Weather:
		return d.named(func(d *Desk) []Task { return d.conditions(j.Conditions) })
	case kit.Amend:
		return d.amend(j)
	case kit.Copy:
		return []Task{d.clip(j.Text)}
	}
	return nil
}

func (d *Desk) selectRow(row int) {
	d.w.Selected = row
	d.w.Place = -1
	if d.w.Snap != nil {
		d.w.Place = d.w.Snap.Find(row)
	}
}

// toggle marks or unmarks the selected star. The map is never changed: tasks
// under way may be reading it.
func (d *Desk) toggle() []Task {
	if d.w.Entry() == nil {
		d.say("no star is selected", false)
		return nil
	}
	marks := make(map[int]bool, len(d.w.Marks)+1)
	for i := range d.w.Marks {
		marks[i] = true
	}
	on := !marks[d.w.Selected]
	if on {
		marks[d.w.Selected] = true
	} else {
		delete(marks, d.w.Selected)
	}
	d.w.Marks = marks
	name := d.w.Entry().Target.Name
	return d.save(write{what: "mark of " + name, run: func(ctx context.Context, b *logbook.Book) (any, error) {
		return nil, b.Mark(ctx, name, on)
	}})
}
