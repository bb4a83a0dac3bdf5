package desk

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/reckon"
	"evenfall/targets/roster"
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

// ref is the number of a take in the store: 0 while its beginning is on its
// way, dead where it never began. What follows on it waits in the queue behind
// its beginning.
type ref struct {
	id   int64
	dead bool
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
	if d.src.Readout != nil {
		t.ReadoutS = d.src.Readout(t.Instrument)
	}
	mine := &ref{}
	d.ref = mine
	d.setTake(&t)
	began := t
	return d.save(write{
		what: "start of " + t.Target, loop: true,
		run: func(ctx context.Context, b *logbook.Book) (any, error) {
			id, err := b.Begin(ctx, began, confirmed)
			return id, err
		},
		done: func(d *Desk, r any) []Task {
			mine.id = r.(int64)
			d.say(began.Phase+" "+began.Target+": saved", false)
			return nil
		},
		held: func(d *Desk, h logbook.Held) []Task {
			mine.dead = true
			d.setTake(nil)
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
	d.setTake(&t)
	mine := d.ref
	return d.save(write{what: what, loop: true,
		run: func(ctx context.Context, b *logbook.Book) (any, error) {
			if mine.dead {
				return nil, nil
			}
			t.ID = mine.id
			return nil, b.Phase(ctx, t)
		},
		done: func(d *Desk, r any) []Task {
			if !mine.dead {
				d.say(what+": saved", false)
			}
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
	if frames := e.FramesText(); frames != "" {
		words += " " + frames
	}
	mine := d.ref
	d.setTake(nil)
	d.rung = ""
	if next, ok := logbook.Count(e.FileLast, 1); ok {
		d.setup.file = next
	}
	if k.Type != "" { // flats are over, science goes on
		d.setup.kind, d.setup.frames = "", 0
	}
	return d.save(write{
		what: words, loop: true,
		run: func(ctx context.Context, b *logbook.Book) (any, error) {
			if mine.dead {
				return int64(0), nil
			}
			k.ID = mine.id
			filled := e
			// a date out of range leaves the airmass out, the entry is written
			// all the same
			_ = reckon.Fill(&filled, prepared, sky)
			return b.End(ctx, k, how, filled)
		},
		done: func(d *Desk, r any) []Task {
			if id := r.(int64); id > 0 {
				d.say(fmt.Sprintf("entry %d saved: %s", id, words), false)
			}
			return nil
		},
	})
}

// entryOf writes the entry that a take becomes.
func (d *Desk) entryOf(k *logbook.Take, how string) logbook.Entry {
	now := d.w.Wall
	s := k.At(now)
	e := logbook.Entry{Type: cmp.Or(k.Type, "science"), Request: k.Request, Target: k.Target, Start: k.PhaseAt, End: now, Instrument: k.Instrument, Mode: k.Mode, Band: k.Band, Programme: d.programmeOf(k.Request),
		Observer: d.w.Observer, FileFirst: k.FileFirst, Seeing: d.w.Conditions.Seeing, Extinction: d.w.Conditions.Extinction, ClockOffsetS: d.offset}
	if k.Phase != logbook.Exposing { // ended before the first frame
		e.Type, e.Start = "acquisition", k.Began
	}
	if e.End.Before(e.Start) { // the clock was set back meanwhile
		e.End = e.Start
		e.Note = "the clock was set back during the take"
	}
	if k.Phase == logbook.Exposing && k.EachS > 0 {
		e.EachS = targets.Known(k.EachS)
	}
	if k.Phase == logbook.Exposing && (k.EachS > 0 || k.Done >= 0) {
		e.Frames = s.Done
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
	} else {
		e.FileLast = e.FileFirst // nothing counted its frames: one file at least
	}
	if how == logbook.Stopped {
		e.Note = strings.TrimPrefix(e.Note+"; stopped early", "; ")
	}
	if how == logbook.Aborted {
		e.Note = strings.TrimPrefix(e.Note+"; aborted", "; ")
	}
	return e
}

// programmeOf returns the programme of a request.
func (d *Desk) programmeOf(request string) string {
	for i := range d.src.Requests {
		if request != "" && d.src.Requests[i].ID == request {
			return d.src.Requests[i].Programme
		}
	}
	return ""
}
