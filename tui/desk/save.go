package desk

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
	"time"

	"evenfall/targets/logbook"
	"evenfall/targets/store"
	"evenfall/tui/kit"
)

// write is something to be brought to the disk. It is kept until it is there.
type write struct {
	what string // in words, to be copied by hand if need be
	run  func(ctx context.Context, b *logbook.Book) (any, error)
	done func(d *Desk, result any) []Task // nil: nothing more
	held func(d *Desk, h logbook.Held) []Task
	loop bool // of the take under way, which is shown as it will be
}

// wrote is what became of a write.
type wrote struct {
	result any
	err    error
}

// retryAfter is how long a write that the disk refused waits.
const retryAfter = 5 * time.Second

// save brings something to the disk, in the order in which it was asked.
func (d *Desk) save(w write) []Task {
	if d.src.Book == nil {
		return nil
	}
	d.queue = append(d.queue, w)
	return d.pump()
}

// pump starts the next write, one at a time.
func (d *Desk) pump() []Task {
	if d.writing || len(d.queue) == 0 || d.src.Book == nil {
		return nil
	}
	d.writing = true
	w, book := d.queue[0], d.src.Book.As(d.w.Observer)
	return []Task{{"saving " + w.what, func() any {
		r, err := w.run(context.Background(), book)
		return wrote{r, err}
	}}}
}

// written takes the end of a write. What the disk refused stays in the queue
// and is tried again; what is wrong in itself is said and dropped.
func (d *Desk) written(r wrote) []Task {
	d.writing = false
	w := d.queue[0]
	d.w.Pending = d.w.Pending[:0:0]
	var held logbook.Held
	switch {
	case r.err == nil:
		if d.refused != nil && strings.HasPrefix(d.message, "NOT SAVED") {
			d.message, d.bad = "", false
			d.say("the disk takes it again: "+w.what+" is saved", false)
		}
		d.queue, d.refused = d.queue[1:], nil
		d.w.Changed++
		var tasks []Task
		if w.done != nil {
			tasks = w.done(d, r.result)
		}
		return append(tasks, d.pump()...)
	case errors.As(r.err, &held) && w.held != nil:
		d.queue = d.queue[1:]
		return append(w.held(d, held), d.pump()...)
	case onDisk(r.err):
		d.failedAt = d.w.Wall
		if d.refused == nil || d.refused.Error() != r.err.Error() {
			d.say(fmt.Sprintf("NOT SAVED: %s: %v", w.what, r.err), true)
		}
		d.refused = r.err
		for _, q := range d.queue {
			d.w.Pending = append(d.w.Pending, q.what)
		}
		return nil
	}
	d.queue = d.queue[1:]
	if w.loop { // what is under way is read anew
		d.polled = false
	}
	d.say(w.what+": "+r.err.Error(), true)
	return d.pump()
}

// onDisk tells whether an error is the disk's, so that trying again may help.
func onDisk(err error) bool {
	for _, e := range []error{store.ErrFull, store.ErrBusy, store.ErrDisk, store.ErrReadOnly} {
		if errors.Is(err, e) {
			return true
		}
	}
	return false
}

// retry tries again what the disk refused.
func (d *Desk) retry(now time.Time) []Task {
	if d.refused == nil || now.Sub(d.failedAt) < retryAfter && !d.failedAt.After(now) {
		return nil
	}
	return d.pump()
}

// prompt is one line that is asked for.
type prompt struct {
	label, hint string
	field       kit.Field
	take        func(d *Desk, text string) []Task
	keep        bool // until what is done with it is on the disk
}

// ask1 asks for a line; what was typed for it before and not used is there
// again.
func (d *Desk) ask1(p prompt) {
	if kept, ok := d.kept[p.label]; ok {
		p.field = kit.NewField(kept)
	}
	d.prompt = &p
}

// promptKey obeys a key in a line that is asked for. Escape keeps what is
// typed for the next time.
func (d *Desk) promptKey(press string) []Task {
	p := d.prompt
	switch kit.Lookup(kit.OnField, press) {
	case kit.Finish:
		d.prompt = nil
		if !p.keep {
			delete(d.kept, p.label)
		}
		return p.take(d, p.field.String())
	case kit.Back:
		d.prompt = nil
		if s := p.field.String(); s != "" {
			d.kept[p.label] = s
			d.say("kept: "+p.label+" "+s, false)
		}
		return nil
	}
	if f, ok := p.field.Press(press); ok {
		p.field = f
	}
	return nil
}

// named has the observer's name asked once a session, before the first thing
// that bears it, and then does that.
func (d *Desk) named(then func(d *Desk) []Task) []Task {
	if d.w.Observer != "" || d.src.Book == nil {
		return then(d)
	}
	d.ask1(prompt{label: "who observes?", hint: "asked once a session: the log bears the name", take: func(d *Desk, text string) []Task {
		if text == "" {
			d.say("not written: the log needs the name of who observes", true)
			return nil
		}
		d.w.Observer = text
		return then(d)
	}})
	return nil
}

// sure asks for a y.
func (d *Desk) sure(question string, then func(d *Desk) []Task) {
	d.question, d.answer = question, then
}

// news is what other sessions wrote, or what there was at the start.
type news struct {
	takes      []logbook.Take
	orphans    map[int64]bool // takes of logins of this observer that are gone
	marks      []string
	conditions logbook.Conditions
	added      []kit.Add
	bell       string
	err        error
	changed    bool
}

// poll looks about once a second whether another session has written.
func (d *Desk) poll() []Task {
	if d.polling || d.src.Book == nil {
		return nil
	}
	d.polling = true
	book, at, r, level, band := d.src.Book, d.w.Wall, d.src.Roster, d.w.Level, d.w.Band
	force := !d.polled
	session, alive, observer := d.src.Session, d.src.Alive, d.w.Observer
	return []Task{{"looking at the log", func() any {
		var n news
		ctx := context.Background()
		if n.changed, n.err = book.Store().Changed(ctx); n.err != nil {
			return n
		}
		// conditions of the future come into force though nobody writes
		if n.conditions, n.err = book.At(ctx, at); n.err != nil || !n.changed && !force {
			return n
		}
		n.changed = true
		if n.takes, n.err = book.UnderWay(ctx); n.err != nil {
			return n
		}
		n.orphans = map[int64]bool{}
		for _, t := range n.takes {
			ours := baseOf(t.Session) == baseOf(session) || observer != "" && t.Observer == observer
			if t.Session == session || alive == nil || !ours {
				continue
			}
			if s, ok, err := book.LastSession(ctx, t.Session); err == nil && ok && !alive(s.PID) {
				n.orphans[t.ID] = true
			}
		}
		if n.marks, n.err = book.Marked(ctx); n.err != nil {
			return n
		}
		list, err := book.Added(ctx)
		for _, t := range list {
			if !r.Named(t.Name) {
				n.added = append(n.added, kit.Add{Entry: sessionEntry(t, band, level)})
			}
		}
		n.err = err
		if n.err == nil {
			n.bell, n.err = book.Setting(ctx, "bell")
		}
		return n
	}}}
}

// baseOf is a session's name without the number of a second login.
func baseOf(name string) string {
	base, _, _ := strings.Cut(name, ", login ")
	return base
}

// heard takes the news.
func (d *Desk) heard(n news) []Task {
	d.polling = false
	if n.err != nil {
		d.polled = false // what there was to read is still to be read
		if !d.deaf {
			d.say("the log cannot be read: "+n.err.Error(), true)
		}
		d.deaf = true
		return nil
	}
	d.deaf, d.polled = false, true
	tasks := d.heed(n.conditions)
	if !n.changed {
		return tasks
	}
	d.w.Changed++
	d.w.Silent = n.bell == "off"
	d.w.Others = nil
	pending := slices.ContainsFunc(d.queue, func(w write) bool { return w.loop })
	if pending { // our own take is ahead of what was read
		d.polled = false
	} else {
		d.setTake(nil)
	}
	for i := range n.takes {
		t := n.takes[i]
		if n.orphans[t.ID] && !pending { // of a login of ours that is gone: it goes on here
			t.Session = d.src.Session
			d.ref = &ref{id: t.ID}
			tasks = append(tasks, d.change(t, "the take under way goes on: "+t.Target)...)
		}
		switch {
		case t.Session == d.src.Session && pending:
		case t.Session == d.src.Session:
			d.ref = &ref{id: t.ID}
			d.setTake(&t)
		default:
			d.w.Others = append(d.w.Others, t)
		}
	}
	d.marked(n.marks)
	for _, a := range n.added {
		tasks = append(tasks, d.add(a.Entry, false))
	}
	return append(tasks, d.renew()...)
}

// heed takes over the conditions that hold now; where they change what can be
// taken, the list is worked out anew.
func (d *Desk) heed(c logbook.Conditions) []Task {
	was := d.w.Conditions.Of()
	d.w.Conditions = c
	if was == c.Of() || d.src.Changed == nil {
		return nil
	}
	d.src.Changed(c.Of())
	return d.ask(nil)
}

// marked takes over the marks of the run, by name.
func (d *Desk) marked(names []string) {
	if len(names) == 0 && len(d.w.Marks) == 0 {
		return
	}
	at := map[string]bool{}
	for _, n := range names {
		at[n] = true
	}
	marks := map[int]bool{}
	for i := range d.src.Roster.Len() {
		if at[d.src.Roster.Entry(i).Target.Name] {
			marks[i] = true
		}
	}
	d.w.Marks = marks
}
