package desk

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/reckon"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// sessionEntry makes an entry of the roster of a target typed in.
func sessionEntry(t targets.Target, band targets.Band, level float64) roster.Entry {
	return roster.Entry{Target: t, Want: moment.Want{Band: band, Level: level, Weight: 1}, Session: true}
}

// setup is what the next take is taken with.
type setup struct {
	kind   string // type of the entry; "" science
	frames int
	each   float64
	file   string
}

// ofSky tells whether the take is of a star, not of a lamp or the dark.
func (s setup) ofSky() bool {
	return slices.Contains([]string{"", "science", "standard", "telluric", "acquisition", "test"}, s.kind)
}

// parseSetup reads "3x90 obs0042": frames, seconds each, the first file.
func parseSetup(s string) (setup, error) {
	var out setup
	for _, word := range strings.Fields(s) {
		n, each, ok := strings.Cut(word, "x")
		count, err1 := strconv.Atoi(n)
		sec, err2 := strconv.ParseFloat(each, 64)
		switch {
		case slices.Contains(logbook.Types[:10], word):
			out.kind = word
		case ok && err1 == nil && err2 == nil:
			if count < 1 || count > 100_000 || !(sec > 0 && sec < 1e6) {
				return out, fmt.Errorf("%s: frames from 1 on, seconds above 0", word)
			}
			out.frames, out.each = count, sec
		case out.file == "":
			out.file = word
		default:
			return out, fmt.Errorf("%s: write frames x seconds and the first file, e.g. 3x90 obs0042, or flat 11x3", word)
		}
	}
	return out, nil
}

func (s setup) String() string {
	text := ""
	if s.frames > 0 {
		text = fmt.Sprintf("%dx%g", s.frames, s.each)
	}
	return strings.Join(strings.Fields(s.kind+" "+text+" "+s.file), " ")
}

// setTake takes over what is under way in this session; nil: nothing.
func (d *Desk) setTake(t *logbook.Take) {
	d.w.Take, d.takeRow = t, -1
	if t == nil {
		return
	}
	r := d.src.Roster
	for i := range r.Len() {
		if r.Entry(i).Target.Name == t.Target {
			d.takeRow = i
			return
		}
	}
}

// advance moves the loop on by one step; quick goes from idle straight to
// exposing.
func (d *Desk) advance(quick bool) []Task {
	if d.src.Book == nil {
		d.say("there is no log here; make a run with evenfall new DIR", true)
		return nil
	}
	t := d.w.Take
	if t == nil {
		if m := d.w.Moment(); m != nil && !m.InCan && d.setup.ofSky() && len(m.BlockedBy) > 0 {
			d.sure("y begins it all the same: "+m.BlockedBy[0].Words, func(d *Desk) []Task {
				return d.named(func(d *Desk) []Task { return d.begin(quick, false) })
			})
			return nil
		}
		return d.named(func(d *Desk) []Task { return d.begin(quick, false) })
	}
	switch t.Phase {
	case logbook.Slewing:
		return d.phase(*t, logbook.Acquiring)
	case logbook.Acquiring:
		return d.phase(*t, logbook.Exposing)
	}
	how := logbook.Accepted
	if !t.At(d.w.Wall).Over && t.Frames > 0 {
		d.sure(fmt.Sprintf("y logs what is done: the series is not complete, frame %d of %d", t.At(d.w.Wall).Frame, t.Frames), func(d *Desk) []Task {
			return d.end(logbook.Stopped)
		})
		return nil
	}
	return d.end(how)
}

// begin starts a take of the selected star.
func (d *Desk) begin(quick, confirmed bool) []Task {
	e := d.w.Entry()
	ofSky := d.setup.ofSky()
	if e == nil && ofSky {
		d.say("no star is selected", false)
		return nil
	}
	name := d.setup.kind
	if ofSky {
		name = e.Target.Name
	}
	t := logbook.Take{Type: d.setup.kind, Target: name, Phase: logbook.Slewing, PhaseAt: d.w.Wall, Began: d.w.Wall, Done: -1, Session: d.src.Session, Observer: d.w.Observer}
	if quick || !ofSky {
		t.Phase = logbook.Exposing
	}
	if d.src.Request != nil && ofSky {
		if q, ok := d.src.Request(name); ok {
			t.Request, t.Instrument, t.Mode, t.Band = q.ID, q.Instrument, q.Mode, q.Band
			if q.Frames > 0 && q.ExposureS.Known {
				t.Frames, t.EachS = q.Frames, q.ExposureS.Value
			}
		}
	}
	if d.setup.frames > 0 {
		t.Frames, t.EachS = d.setup.frames, d.setup.each
	}
	t.FileFirst = d.setup.file
	t.ReadoutS = d.src.Readout
	return d.save(write{
		what: "start of " + t.Target,
		run: func(ctx context.Context, b *logbook.Book) (any, error) {
			id, err := b.Begin(ctx, t, confirmed)
			t.ID = id
			return t, err
		},
		done: func(d *Desk, r any) []Task {
			t := r.(logbook.Take)
			d.setTake(&t)
			d.say(t.Phase+" "+t.Target+": saved", false)
			return nil
		},
		held: func(d *Desk, h logbook.Held) []Task {
			d.sure("y starts it too: "+h.Error(), func(d *Desk) []Task { return d.begin(quick, true) })
			return nil
		},
	})
}

// phase moves the take under way to another phase.
func (d *Desk) phase(t logbook.Take, to string) []Task {
	t.Phase, t.PhaseAt = to, d.w.Wall
	d.rung = ""
	return d.change(t, to+" "+t.Target)
}

func (d *Desk) change(t logbook.Take, what string) []Task {
	return d.save(write{what: what,
		run: func(ctx context.Context, b *logbook.Book) (any, error) { return t, b.Phase(ctx, t) },
		done: func(d *Desk, r any) []Task {
			t := r.(logbook.Take)
			d.setTake(&t)
			d.say(what+": saved", false)
			return nil
		}})
}

// frameDone counts a frame by hand.
func (d *Desk) frameDone() []Task {
	t := d.w.Take
	if t == nil || t.Phase != logbook.Exposing {
		d.say("no exposure is under way", false)
		return nil
	}
	n := *t
	if n.Done < 0 { // the clock has counted so far
		n.Done = n.At(d.w.Wall).Done
	}
	n.Done++
	return d.change(n, fmt.Sprintf("frame %d done", n.Done))
}

// end ends the take under way and writes its entry.
func (d *Desk) end(how string) []Task {
	t := d.w.Take
	if t == nil {
		d.say("nothing is under way", false)
		return nil
	}
	k := *t
	e := d.entryOf(&k, how)
	var prepared *moment.Prepared
	if d.takeRow >= 0 {
		prepared = d.src.Roster.Prepared(d.takeRow)
	}
	sky := reckon.Sky{Site: d.src.Site, Night: d.src.Night}
	words := fmt.Sprintf("%s %s %s-%s", e.Type, e.Target, e.Start.Format("15:04:05"), e.End.Format("15:04:05"))
	if e.Frames > 0 {
		words += fmt.Sprintf(" %dx%gs", e.Frames, e.EachS.Value)
	}
	return d.save(write{
		what: words,
		run: func(ctx context.Context, b *logbook.Book) (any, error) {
			filled := e
			// a date out of range leaves the airmass out, the entry is written
			// all the same
			_ = reckon.Fill(&filled, prepared, sky)
			return b.End(ctx, k, how, filled)
		},
		done: func(d *Desk, r any) []Task {
			d.setTake(nil)
			d.rung = ""
			d.say(fmt.Sprintf("entry %d saved: %s", r.(int64), words), false)
			if next, ok := logbook.Count(e.FileLast, 1); ok {
				d.setup.file = next
			}
			if k.Type != "" { // flats are over, science goes on
				d.setup.kind, d.setup.frames = "", 0
			}
			return nil
		},
	})
}

// entryOf writes the entry that a take becomes.
func (d *Desk) entryOf(k *logbook.Take, how string) logbook.Entry {
	now := d.w.Wall
	s := k.At(now)
	e := logbook.Entry{Type: cmp.Or(k.Type, "science"), Request: k.Request, Target: k.Target, Start: k.PhaseAt, End: now, Instrument: k.Instrument, Mode: k.Mode, Band: k.Band,
		Observer: d.w.Observer, FileFirst: k.FileFirst, Seeing: d.w.Conditions.Seeing, Extinction: d.w.Conditions.Extinction, ClockOffsetS: d.offset}
	if k.Phase != logbook.Exposing { // ended before the first frame
		e.Type, e.Start = "acquisition", k.Began
	}
	if e.End.Before(e.Start) { // the clock was set back meanwhile
		e.End = e.Start
		e.Note = "the clock was set back during the take"
	}
	if k.Phase == logbook.Exposing && k.EachS > 0 {
		e.Frames, e.EachS = s.Done, targets.Known(k.EachS)
		if k.Done < 0 && s.Over { // ended by itself before it was accepted
			if end := k.PhaseAt.Add(time.Duration((float64(k.Frames)*(k.EachS+k.ReadoutS) - k.ReadoutS) * float64(time.Second))); end.Before(e.End) {
				e.End = end
			}
		}
		if last, ok := logbook.Count(k.FileFirst, e.Frames-1); ok && e.Frames > 0 {
			e.FileLast = last
		} else if e.Frames == 0 { // no frame was completed: no file
			e.FileFirst = ""
		}
	}
	if how == logbook.Stopped {
		e.Note = strings.TrimPrefix(e.Note+"; stopped early", "; ")
	}
	if how == logbook.Aborted {
		e.Note = strings.TrimPrefix(e.Note+"; aborted", "; ")
	}
	return e
}

// loopLine writes where in the loop we are and what fits before the next
// fixed moment.
func (d *Desk) loopLine(p *kit.Pen) {
	w := &d.w
	if t := w.Take; t != nil {
		s := t.At(w.Wall)
		p.Put(kit.Mark, s.Phase).Put(kit.Title, " "+t.Target)
		switch {
		case t.Phase != logbook.Exposing:
			p.Put(kit.Text, "  "+clockText(s.Frac))
		case s.Over:
			p.Put(kit.Warn, fmt.Sprintf("  COMPLETE %d of %d: t accepts", s.Done, t.Frames))
		case t.Frames > 0:
			p.Put(kit.Text, fmt.Sprintf("  frame %d of %d, %s left", s.Frame, t.Frames, clockText(s.Left)))
		default:
			p.Put(kit.Text, fmt.Sprintf("  %s, t ends it", clockText(s.Frac)))
		}
	} else {
		p.Put(kit.Text, "idle")
	}
	if d.offset.Known {
		p.Put(kit.Text, fmt.Sprintf("  (instrument's clock %+g s)", d.offset.Value))
	}
	if what, at, ok := d.fixed(); ok {
		role, sign := kit.Dim, ""
		if at.Sub(w.Wall) < bellBefore {
			role, sign = kit.Warn, "! "
		}
		p.Put(role, fmt.Sprintf("   %sfits %s: %s %s", sign, kit.Left(at.Sub(w.Wall)), what, at.UTC().Round(time.Minute).Format("15:04")))
	}
	for _, o := range w.Others {
		p.Put(kit.Warn, fmt.Sprintf("   %s: %s %s", o.Observer, o.At(w.Wall).Phase, o.Target))
	}
	if n := len(d.queue); n > 0 && d.refused != nil {
		p.Put(kit.Bad, fmt.Sprintf("   %d NOT SAVED", n))
	}
}

// clockText writes minutes and seconds.
func clockText(t time.Duration) string {
	s := int(t.Round(time.Second).Seconds())
	return fmt.Sprintf("%d:%02d", s/60, s%60)
}

// fixed returns the next moment that does not move: the end of the window of
// the star under way, or selected, an event of it, or the end of darkness.
func (d *Desk) fixed() (what string, at time.Time, ok bool) {
	w := &d.w
	if w.Snap == nil || !w.Live { // another time is being looked at
		return "", at, false
	}
	take := func(name string, t time.Time) {
		if t.After(w.Wall) && (!ok || t.Before(at)) {
			what, at, ok = name, t, true
		}
	}
	n := w.Snap.Scene.Night
	for _, s := range n.CanDark() {
		take("dusk", s.From.UTC())
		take("dawn", s.Until.UTC())
	}
	row := w.Selected
	if w.Take != nil {
		row = d.takeRow
	}
	if row >= 0 && row < w.Snap.Roster.Len() {
		if m := w.Snap.Peek(row); m != nil && m.InCan && m.WindowOK {
			take("limit", m.Window.Until.UTC())
		}
		for _, e := range d.eventsOf(row, w.Snap.Scene.Instant) {
			take(e.Kind, e.At.UTC())
		}
	}
	return what, at, ok
}

// bells returns what there is to ring for, each once.
func (d *Desk) bells(now time.Time) {
	w := &d.w
	if w.Silent {
		return
	}
	ring := func(what string) {
		if d.rung != what {
			d.rung, d.bell = what, true
		}
	}
	if t := w.Take; t != nil && t.At(now).Over {
		ring(fmt.Sprint("end of ", t.ID))
		return
	}
	if what, at, ok := d.fixed(); ok && w.Take != nil {
		if left := at.Sub(now); left > 0 && left < bellBefore {
			ring(what + at.Format(time.RFC3339))
		}
	}
}

// bellBefore is how long before an event or a limit the bell rings.
const bellBefore = 5 * time.Minute

// Rings tells whether to ring the bell now; once.
func (d *Desk) Rings() bool {
	r := d.bell
	d.bell = false
	return r
}

// eventsOf lists the eclipses of a target; maxima are no matter of minutes.
func (d *Desk) eventsOf(row int, at astro.Instant) []light.Event {
	var out []light.Event
	for _, e := range d.src.Roster.Prepared(row).Light.Next(at) {
		if e.Kind == "eclipse" {
			out = append(out, e)
		}
	}
	return out
}
