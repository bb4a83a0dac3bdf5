package desk

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"time"

	"evenfall/astro"
	"evenfall/astro/timescale"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/entry"
	"evenfall/tui/kit"
)

// listed is what a snapshot's task brings back.
type listed struct {
	generation int
	snap       *roster.Snapshot
	err        error
	user       bool // asked for by the user: a new order
	shown      time.Time
}

// added is a roster with a new target.
type added struct {
	base, roster *roster.Roster
	entry        roster.Entry
	row          int
	typed        bool // in this session
}

// twice says that a new target's name is taken.
type twice struct {
	name  string
	typed bool
}

// ask makes the task of a new snapshot. A kept order is gone on with; nil is
// the user's word for a new one.
func (d *Desk) ask(keep []int32) []Task {
	if d.cancel != nil {
		d.cancel()
	}
	ctx, cancel := context.WithCancel(context.Background())
	d.generation++
	d.cancel, d.askedAt = cancel, d.w.Wall
	a := roster.Ask{Filter: d.filter, Sort: d.w.Sort, Marks: d.w.Marks, Keep: keep, Exact: d.rows(), Ahead: d.w.Height}
	r := d.src.Roster
	src, shown, generation := d.src, d.w.Shown, d.generation
	return []Task{{"working out the list", func() any {
		out := listed{generation: generation, user: keep == nil, shown: shown}
		a.Scene, out.err = sceneAt(src, shown)
		if out.err == nil {
			out.snap, out.err = r.Snapshot(ctx, a)
		}
		return out
	}}}
}

// sceneAt works out what all targets share at a time: in daylight, of the
// night to come.
func sceneAt(src Source, t time.Time) (moment.Scene, error) {
	at, err := timescale.AtDUT1(t, src.Site.DUT1)
	if err != nil {
		return moment.Scene{}, err
	}
	var date astro.Date
	if date, err = moment.DateOfTonight(src.Site, at); err != nil {
		return moment.Scene{}, err
	}
	n, err := src.Night(date)
	if err != nil {
		return moment.Scene{}, err
	}
	return moment.NewScene(n, at), nil
}

// rows names what the screen that is up shows.
func (d *Desk) rows() []int32 {
	if s, ok := d.up().(kit.Shows); ok {
		return slices.Clone(s.Rows(&d.w))
	}
	return nil
}

// Apply takes what a task brought back.
func (d *Desk) Apply(result any) []Task {
	switch r := result.(type) {
	case listed:
		return d.arrived(r)
	case brought:
		d.works--
		if d.over(r.id) {
			return nil // its screen was left meanwhile
		}
		for i, s := range d.screens {
			if s.Title() == r.screen {
				d.screens[i] = s.Apply(&d.w, r.result)
			}
		}
		if r.screen == kit.OnEntry {
			d.entry = d.entry.Apply(&d.w, r.result)
		}
		if f, ok := r.result.(kit.Failed); ok && !errors.Is(f.Err, context.Canceled) {
			d.say(f.Name+": "+f.Err.Error(), true)
		} else if !ok && r.screen == d.up().Title() {
			return d.follow() // some work goes on from here
		}
	case added:
		d.works--
		if r.base != d.src.Roster { // another was added meanwhile
			return []Task{d.add(r.entry, r.typed)}
		}
		if r.typed {
			if d.up().Title() == kit.OnEntry {
				d.close()
			}
			d.entry = entry.New()
		}
		d.src.Roster = r.roster
		t := r.entry.Target
		if !r.typed { // another session's
			d.say(t.Name+" was added by another session", false)
			return d.ask(nil)
		}
		d.anchor = r.row
		d.say(t.Name+" is in the list", false)
		tasks := d.save(write{what: "target " + t.Name + " " + t.Place.RA.HMS(2) + " " + t.Place.Dec.DMS(1),
			run: func(ctx context.Context, b *logbook.Book) (any, error) { return nil, b.AddTarget(ctx, t) }})
		return append(tasks, d.ask(nil)...)
	case wrote:
		return d.written(r)
	case news:
		return append(d.heard(r), d.follow()...)
	case renewed:
		return d.renewedBy(r)
	case recalled:
		d.remember(r)
	case twice:
		d.works--
		if !r.typed {
			return nil
		}
		d.say("name: "+r.name+" is in the list already; give the new one another name", true)
	case kit.Say:
		d.say(r.Text, r.Bad)
	}
	return nil
}

// arrived swaps the list shown for a new one, unless a later one was asked for.
func (d *Desk) arrived(r listed) []Task {
	if r.generation != d.generation {
		return nil
	}
	d.cancel()
	d.cancel = nil
	if r.err != nil {
		if errors.Is(r.err, context.Canceled) {
			return nil
		}
		d.say(r.err.Error(), true)
		if r.user && d.w.Snap != nil { // what is shown belongs to what held before
			d.filter, d.w.Filter, d.w.Sort, d.w.Shown, d.w.Live = d.before.filter, d.before.text, d.before.sort, d.before.shown, d.before.live
		}
		return nil
	}
	if d.w.Snap != nil && r.user && d.w.OrderAt != r.shown && !slices.Equal(r.snap.Order, d.w.Snap.Order) && d.message == "" && d.idle() {
		d.say("new order, of "+r.shown.Format("15:04")+", as no key was pressed for a while", false)
	}
	if r.user {
		d.w.OrderAt = r.shown
	}
	d.w.Snap = r.snap
	if d.resume != nil {
		d.comeBack()
	}
	place := d.w.Place
	switch {
	case d.anchor >= 0 && r.snap.Find(d.anchor) >= 0:
		d.selectRow(d.anchor)
	case len(r.snap.Order) == 0:
		d.w.Selected, d.w.Place = -1, -1
	default: // its star is filtered out: the row that stands in its place
		place = max(min(place, len(r.snap.Order)-1), 0)
		d.selectRow(int(r.snap.Order[place]))
	}
	return d.follow()
}

func (d *Desk) idle() bool { return d.w.Wall.Sub(d.keyAt) >= idleAfter }

// follow gives the screen that is up its say after a change, and has rows of
// long lists worked out that have come into sight.
func (d *Desk) follow() []Task {
	var tasks []Task
	d.foresee()
	if s, ok := d.up().(interface {
		Refresh(*kit.World) (kit.Screen, kit.Job)
	}); ok {
		n, job := s.Refresh(&d.w)
		d.put(n)
		tasks = append(tasks, d.do(job)...)
	}
	if d.w.Snap == nil || !d.w.Snap.Bulk {
		return tasks
	}
	snap := d.w.Snap
	var missing []int32
	for _, i := range d.rows() {
		if snap.Peek(int(i)) == nil {
			missing = append(missing, i)
		}
	}
	if len(missing) == 0 {
		return tasks
	}
	return append(tasks, d.work(kit.Work{Name: "working out rows", Run: func(ctx context.Context) (kit.Result, error) {
		for _, i := range missing {
			snap.Row(int(i))
		}
		return nil, nil
	}}))
}

// find filters and orders.
func (d *Desk) find(j kit.Find) []Task {
	f, err := roster.ParseFilter(j.Filter)
	if err != nil {
		d.say(err.Error(), true)
		return nil
	}
	d.before = d.now()
	d.filter, d.w.Filter, d.w.Sort = f, j.Filter, j.Sort
	return d.ask(nil)
}

// add takes a target into the list.
func (d *Desk) add(e roster.Entry, typed bool) Task {
	d.works++
	r := d.src.Roster
	return Task{"adding " + e.Target.Name, func() any {
		if r.Named(e.Target.Name) {
			return twice{e.Target.Name, typed}
		}
		return added{r, r.With(e), e, r.Len(), typed}
	}}
}

// clip sends text to the clipboard.
func (d *Desk) clip(text string) Task {
	send := d.src.Copy
	return Task{"copying", func() any {
		if send == nil {
			return kit.Say{Text: "no clipboard here: copy the lines by hand"}
		}
		where, err := send(text)
		if err != nil {
			return kit.Say{Text: "not sent to the clipboard (" + err.Error() + "): copy the lines by hand"}
		}
		return kit.Say{Text: "sent to " + where + "; nothing answers, so check before you rely on it"}
	}}
}

// step shows another moment.
func (d *Desk) step(j kit.Step) []Task {
	t := d.w.Shown.Add(j.By).AddDate(0, 0, j.Nights)
	if j.Nights == 0 {
		t = t.Truncate(time.Minute)
		if j.By < 0 && !t.Before(d.w.Shown) {
			t = t.Add(j.By)
		}
	}
	if _, err := timescale.AtDUT1(t, d.src.Site.DUT1); err != nil {
		d.say(err.Error(), true)
		return nil
	}
	d.before = d.now()
	d.w.Shown, d.w.Live = t, false
	return d.ask(nil)
}

// Clock tells the desk the time without asking for anything: before a key, so
// that it is obeyed at the time it was pressed.
func (d *Desk) Clock(now time.Time) {
	d.w.Wall = now
	if d.w.Live {
		d.w.Shown = now
	}
}

// catchUp has the list follow the clock with keys, where it does not tick.
func (d *Desk) catchUp() []Task {
	if d.src.Every > 0 || !d.w.Live || d.src.Fixed || d.cancel != nil || d.w.Snap == nil || d.w.Wall.Sub(d.askedAt) < time.Minute {
		return nil
	}
	return d.ask(d.w.Snap.Order)
}

// Tick tells the desk the time of the clock, about once a second.
func (d *Desk) Tick(now time.Time) []Task {
	back := now.Before(d.w.Wall.Add(-steppedBack))
	d.w.Wall = now
	if back {
		d.say("the clock was set back to "+now.Format("15:04:05")+"; entries keep the order of their numbers", true)
	}
	tasks := d.Beat(now)
	if !d.w.Live {
		return append(tasks, d.rest()...)
	}
	d.w.Shown = now
	return append(append(tasks, d.tickList(now)...), d.rest()...)
}

// Beat brings to the disk what is half typed, tries again what it refused,
// looks at what others wrote and rings: each second, however seldom the screen
// goes on.
func (d *Desk) Beat(now time.Time) []Task {
	d.bells(now)
	return append(append(d.retry(now), d.poll()...), d.keep()...)
}

// rest gives the screen that is up its say as time goes by, if it wants it.
func (d *Desk) rest() []Task {
	if _, ok := d.up().(kit.Rests); ok {
		return d.follow()
	}
	return nil
}

// steppedBack is how far back the clock must jump to be spoken of.
const steppedBack = 2 * time.Second

// tickList has the list follow the clock.
func (d *Desk) tickList(now time.Time) []Task {
	if d.src.Fixed || d.src.Every <= 0 || d.cancel != nil || now.Sub(d.askedAt) < d.src.Every {
		return nil
	}
	keep := []int32(nil)
	if d.w.Snap != nil {
		keep = d.w.Snap.Order
	}
	if d.idle() && len(d.screens) == 1 && !d.up().Typing() && d.w.Snap != nil && d.w.Snap.Stale {
		keep = nil
	}
	return d.ask(keep)
}

// state writes what the list is like, for the status line.
func (d *Desk) state(p *kit.Pen) {
	if d.w.Filter != "" && d.w.Snap != nil {
		p.Put(kit.Warn, "filter ").Put(kit.Text, d.w.Filter).Put(kit.Dim, fmt.Sprintf("  %d of %d   ", len(d.w.Snap.Order), d.w.Snap.Total))
	}
	if !d.w.Sort.Plain() {
		p.Put(kit.Warn, "order ").Put(kit.Text, d.w.Sort.Key)
		if d.w.Sort.Reverse {
			p.Put(kit.Text, " reversed")
		}
		p.Put(kit.Dim, "   ")
	}
	if d.w.Snap != nil && d.w.Snap.Stale {
		p.Put(kit.Dim, "order of "+d.w.OrderAt.Format("15:04")+", r for a new one   ")
	}
	if d.works > 0 || d.cancel != nil && d.w.Snap == nil {
		p.Put(kit.Dim, "working ...")
	}
}
