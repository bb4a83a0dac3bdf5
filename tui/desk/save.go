package desk

import (
	"context"
	"errors"
	"fmt"
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
}

// ask1 asks for a line; what was typed for it before and not used is there
// again.
func (d *Desk) ask1(p prompt) {
	if kept, ok := d.kept[p.label]; ok && p.field.String() == "" {
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
		delete(d.kept, p.label)
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
	session, alive := d.src.Session, d.src.Alive
	return []Task{{"looking at the log", func() any {
		var n news
		ctx := context.Background()
		if n.changed, n.err = book.Store().Changed(ctx); n.err != nil || !n.changed && !force {
			return n
		}
		n.changed = true
		if n.takes, n.err = book.UnderWay(ctx); n.err != nil {
			return n
		}
		n.orphans = map[int64]bool{}
		for _, t := range n.takes {
			if t.Session == session || alive == nil || baseOf(t.Session) != baseOf(session) {
				continue
			}
			if s, ok, err := book.LastSession(ctx, t.Session); err == nil && ok && !alive(s.PID) {
				n.orphans[t.ID] = true
			}
		}
		if n.marks, n.err = book.Marked(ctx); n.err != nil {
			return n
		}
		if n.conditions, n.err = book.At(ctx, at); n.err != nil {
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
		if !d.deaf {
			d.say("the log cannot be read: "+n.err.Error(), true)
		}
		d.deaf = true
		return nil
	}
	d.deaf, d.polled = false, true
	if !n.changed {
		return nil
	}
	d.w.Changed++
	d.w.Silent = n.bell == "off"
	d.w.Others = nil
	d.setTake(nil)
	var tasks []Task
	for i := range n.takes {
		t := n.takes[i]
		if n.orphans[t.ID] { // of a login of ours that is gone: it goes on here
			t.Session = d.src.Session
			tasks = append(tasks, d.change(t, "the take under way goes on: "+t.Target)...)
		}
		if t.Session == d.src.Session {
			d.setTake(&t)
		} else {
			d.w.Others = append(d.w.Others, t)
		}
	}
	d.marked(n.marks)
	for _, a := range n.added {
		tasks = append(tasks, d.add(a.Entry, false))
	}
	if was := d.w.Conditions.Of(); was != n.conditions.Of() || d.w.Conditions.Words() != n.conditions.Words() {
		d.w.Conditions = n.conditions
		if was != n.conditions.Of() && d.src.Changed != nil {
			d.src.Changed(n.conditions.Of())
			tasks = append(tasks, d.ask(nil)...)
		}
	}
	return tasks
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
