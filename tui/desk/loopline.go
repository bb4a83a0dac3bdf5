package desk

import (
	"fmt"
	"time"

	"evenfall/astro"
	"evenfall/targets/light"
	"evenfall/targets/logbook"
	"evenfall/tui/kit"
)

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
	if name := d.following(); name != "" && p.Used()+9+len(name) <= p.Width() {
		p.Put(kit.Dim, "   next: "+name)
	}
	for _, o := range w.Others {
		p.Put(kit.Warn, fmt.Sprintf("   %s: %s %s", o.Observer, o.At(w.Wall).Phase, o.Target))
	}
	if n := len(d.queue); n > 0 && d.refused != nil {
		p.Put(kit.Bad, fmt.Sprintf("   %d NOT SAVED", n))
	}
}

// following names the first of the list that is not being taken.
func (d *Desk) following() string {
	w := &d.w
	if w.Snap == nil || w.Take == nil || !w.Sort.Plain() {
		return ""
	}
	for _, row := range w.Snap.Order[:min(2, len(w.Snap.Order))] {
		if m := w.Snap.Peek(int(row)); m != nil && m.InCan && int(row) != d.takeRow {
			return w.Snap.Roster.Entry(int(row)).Target.Name
		}
	}
	return ""
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
	// while idle the line does not follow the selection: it would be sent anew
	// with every step of the cursor, and the reasons below the list say it
	row := -1
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
	for _, e := range kit.LightsOf(&d.w).Next(d.src.Roster.Prepared(row), at) {
		if e.Kind == "eclipse" {
			out = append(out, e)
		}
	}
	return out
}
