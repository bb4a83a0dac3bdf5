// Package log is the screen that answers "what did we get, what is owed?": the
// take under way, the entries of the night, and how far each request is.
package log

import (
	"context"
	"fmt"
	"slices"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/tui/kit"
)

// Screen is the log of the night.
type Screen struct {
	data   *Data
	asked  key
	place  int // the entry selected
	top    int
	atLast bool // follow new entries
}

type key struct {
	changed int
	from    time.Time
}

// Data is what the screen shows. It does not change once made.
type Data struct {
	Entries []logbook.Entry
	Owed    []Owed
	asked   key
}

// Owed is one request with what the log has of it.
type Owed struct {
	Request  targets.Request
	Progress logbook.Progress
}

// New returns the screen, at the last entry.
func New() Screen { return Screen{atLast: true} }

// Title names it.
func (s Screen) Title() string { return kit.OnLog }

// Typing is never the case here.
func (s Screen) Typing() bool { return false }

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// Refresh asks for the night's entries when the log or the night is another
// one.
func (s Screen) Refresh(w *kit.World) (kit.Screen, kit.Job) {
	if w.Snap == nil || w.Book == nil {
		return s, nil
	}
	span := w.Snap.Scene.Night.Span
	want := key{w.Changed + 1, span.From.UTC()}
	if want == s.asked {
		return s, nil
	}
	s.asked = want
	book, requests := w.Book, w.Requests
	from, until := span.From.UTC(), span.Until.UTC()
	return s, kit.Work{Name: "reading the log", Run: func(ctx context.Context) (kit.Result, error) {
		all, err := book.Entries(ctx, time.Time{}, time.Time{})
		if err != nil {
			return nil, err
		}
		d := &Data{asked: want}
		for _, e := range all {
			if !e.Start.Before(from) && e.Start.Before(until) {
				d.Entries = append(d.Entries, e)
			}
		}
		progress := logbook.ProgressOf(requests, all)
		for _, q := range requests {
			d.Owed = append(d.Owed, Owed{q, progress[targets.Key(q.ID)]})
		}
		return d, nil
	}}
}

// Apply takes the entries.
func (s Screen) Apply(_ *kit.World, r kit.Result) kit.Screen {
	switch r := r.(type) {
	case *Data:
		if r.asked == s.asked {
			s.data = r
			if s.atLast {
				s.place = max(len(r.Entries)-1, 0)
			}
			s.place = min(s.place, max(len(r.Entries)-1, 0))
		}
	case kit.Failed:
		s.asked = key{}
	}
	return s
}

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	if s.data == nil || len(s.data.Entries) == 0 {
		return s, nil
	}
	last := len(s.data.Entries) - 1
	switch kit.Lookup(kit.OnLog, press) {
	case kit.Down:
		s.place++
	case kit.Up:
		s.place--
	case kit.HalfDown:
		s.place += 7
	case kit.HalfUp:
		s.place -= 7
	case kit.First:
		s.place = 0
	case kit.Last:
		s.place = last
	case kit.GradeGood, kit.GradeUsable, kit.GradePoor:
		return s, kit.Amend{Entry: s.data.Entries[s.place].ID, Grade: string(kit.Lookup(kit.OnLog, press))}
	case kit.VoidEntry:
		e := &s.data.Entries[s.place]
		if e.Void {
			return s, kit.Say{Text: fmt.Sprintf("entry %d is void already", e.ID)}
		}
		return s, kit.Amend{Entry: e.ID, Void: true}
	}
	s.place = max(min(s.place, last), 0)
	s.atLast = s.place == last
	return s, nil
}

// View draws the screen.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	header := 2
	if height < 12 {
		header = 1
	}
	kit.Header(w, p, header)
	switch {
	case w.Book == nil:
		p.Put(kit.Dim, "there is no log here; make a run with evenfall new DIR").Line()
	case s.data == nil:
		p.Put(kit.Dim, "reading the log ...").Line()
	default:
		s.draw(w, p, height)
	}
	p.Fill(height)
	return p.String()
}

func (s Screen) draw(w *kit.World, p *kit.Pen, height int) {
	for _, text := range w.Pending {
		if p.Lines() < height {
			p.Put(kit.Bad, "NOT SAVED YET, copy by hand if need be: ").Put(kit.Text, text).Line()
		}
	}
	owed := min(len(s.data.Owed), max((height-p.Lines())/3, 1))
	if height < 14 {
		owed = 0
	}
	const detail = 2
	room := max(height-p.Lines()-owed-2-detail, 1)
	p.Put(kit.Dim, "   no  UTC          type        target         frames x s X  S/N files, note").Line()
	list := s.data.Entries
	top := max(min(s.place-room/2, len(list)-room), 0)
	for i := top; i < min(top+room, len(list)); i++ {
		row(p, &list[i], i == s.place)
	}
	if len(list) == 0 {
		for _, line := range kit.Wrap("nothing is logged this night; t takes the selected star, o writes a note, w conditions", p.Width(), 2) {
			p.Put(kit.Dim, line).Line()
		}
	}
	p.Fill(height - owed - 1 - detail)
	if s.place < len(list) && p.Lines()+detail < height {
		for k, line := range kit.Wrap(whole(&list[s.place]), p.Width(), 2) {
			if k < detail {
				p.Put(kit.Text, line).Line()
			}
		}
	}
	p.Fill(height - owed - 1)
	if owed == 0 || p.Lines() >= height {
		return
	}
	p.Put(kit.Title, "owed").Line()
	for _, o := range owedMost(s.data.Owed)[:owed] {
		if p.Lines() < height {
			owedRow(p, &o)
		}
	}
}

func row(p *kit.Pen, e *logbook.Entry, selected bool) {
	role, cursor := kit.Text, " "
	if selected {
		role, cursor = kit.Selected, ">"
	}
	if e.Void && !selected {
		role = kit.Dim
	}
	when := e.Start.Format("15:04")
	if !e.End.IsZero() {
		when += e.End.Format("-15:04")
	}
	p.Put(role, cursor).Right(role, 5, fmt.Sprint(e.ID)).To(7).Put(role, when).To(20).Put(role, e.Type).To(32).Put(role, kit.Cut(e.Target, 14)).To(47).Put(role, e.FramesText())
	if e.AirmassMid.Known {
		p.Right(role, 59, fmt.Sprintf("%.2f", e.AirmassMid.Value))
	}
	if e.SNR.Known {
		p.Right(role, 64, fmt.Sprintf("%.0f", e.SNR.Value))
	}
	var rest []string
	if e.Void {
		rest = append(rest, "VOID")
	} else if e.Grade != "" {
		rest = append(rest, e.Grade)
	}
	if e.FileFirst != "" {
		rest = append(rest, e.FileFirst+".."+e.FileLast)
	}
	for _, s := range []string{e.Reason, e.Note} {
		if s != "" {
			rest = append(rest, s)
		}
	}
	p.To(65).Put(role, strings.Join(rest, "; ")).Line()
}

// whole writes an entry in full.
func whole(e *logbook.Entry) string {
	parts := []string{fmt.Sprintf("%d by %s", e.ID, e.Observer)}
	add := func(format string, a ...any) { parts = append(parts, fmt.Sprintf(format, a...)) }
	if e.Request != "" {
		add("request %s", e.Request)
	}
	if e.AirmassStart.Known {
		add("X %.2f-%.2f", e.AirmassStart.Value, e.AirmEnd.Value)
	}
	if e.MidBJD.Known {
		add("mid BJD_TDB %.5f", e.MidBJD.Value)
	}
	if e.ExpectMag.Known {
		add("expected %.1f", e.ExpectMag.Value)
	}
	if e.MeasuredMag.Known {
		add("measured %.2f", e.MeasuredMag.Value)
	}
	if e.MoonSepDeg.Known {
		add("Moon %.0f deg off", e.MoonSepDeg.Value)
	}
	if e.Seeing.Known {
		add("seeing %.1f", e.Seeing.Value)
	}
	if e.ClockOffsetS.Known {
		add("clock %+.1f s", e.ClockOffsetS.Value)
	}
	if e.Note != "" {
		add("%s", e.Note)
	}
	return strings.Join(parts, "; ")
}

// owedMost orders requests by how many visits are missing.
func owedMost(list []Owed) []Owed {
	missing := func(o Owed) int { return max(o.Request.Visits, 1) - o.Progress.Visits }
	out := slices.Clone(list)
	slices.SortStableFunc(out, func(a, b Owed) int { return missing(b) - missing(a) })
	return out
}

func owedRow(p *kit.Pen, o *Owed) {
	q, g := &o.Request, &o.Progress
	role := kit.Text
	state := fmt.Sprintf("%d of %d visits", g.Visits, max(q.Visits, 1))
	if g.Visits >= max(q.Visits, 1) {
		role, state = kit.Dim, state+", done"
	}
	p.Put(role, fmt.Sprintf("  %-14s %-14s %s", kit.Cut(q.ID, 14), kit.Cut(q.Target, 14), state))
	if g.Exposed > 0 {
		p.Put(role, "  "+kit.Left(g.Exposed)+" exposed")
	}
	if g.SNR > 0 {
		p.Put(role, fmt.Sprintf("  S/N %.0f together", g.SNR))
		if q.SNR.Known {
			p.Put(role, fmt.Sprintf(" of %.0f", q.SNR.Value))
		}
	}
	p.Line()
}
