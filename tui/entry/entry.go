// Package entry is the screen on which a new target is typed or pasted. It
// checks what is typed as a list is checked, says where the star would stand,
// and keeps what is half typed until it is used or emptied.
package entry

import (
	"context"
	"fmt"
	"strings"
	"time"

	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/targets/table"
	"evenfall/tui/kit"
)

// The fields, in the order in which they are typed.
const (
	name = iota
	position
	kind
	mag
	motion
	epoch
)

var lines = []kit.FormField{
	{Label: "name", Hint: "or paste a whole line: name, position, V=12.3, pm +12 -30"},
	{Label: "position", Hint: "ICRS: 05 34 31.9 +22 00 52 or degrees 83.633 +22.015"},
	{Label: "kind", Hint: "giant lpv postagb pn wd interacting standard other"},
	{Label: "magnitude", Hint: "V 12.3, or G 15.2"},
	{Label: "motion", Hint: "mas/yr in RA (with cos dec) and dec: +12.3 -45"},
	{Label: "epoch", Hint: "year of the position: 2000 unless given"},
}

// Screen is the form.
type Screen struct {
	form   kit.Form
	look   *Look // where it would stand; of what was typed when asked
	asked  table.Typed
	minute time.Time // of what was asked
}

// Look is where a target as typed would stand.
type Look struct {
	typed  table.Typed
	moment moment.Moment
	stage  string
}

// New returns an empty form.
func New() Screen { return Screen{form: kit.NewForm(lines)} }

// Draft writes what is typed, for keeping; Recall reads it back.
func (s Screen) Draft() string { return s.form.Draft() }

// Recall returns the form as a draft had it.
func (s Screen) Recall(draft string) kit.Screen {
	s.form = s.form.Recall(draft)
	return s
}

// Title names it.
func (s Screen) Title() string { return kit.OnEntry }

// Typing is always the case here.
func (s Screen) Typing() bool { return true }

// HalfTyped tells whether anything is typed.
func (s Screen) HalfTyped() bool { return s.typed() != table.Typed{} }

func (s Screen) typed() table.Typed {
	f := s.form.Text
	return table.Typed{Name: f(name), Position: f(position), Kind: f(kind), Mag: f(mag), Motion: f(motion), Epoch: f(epoch)}
}

// Key obeys a key.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	if kit.Lookup(kit.OnEntry, press) == kit.Back {
		return s, kit.Close{}
	}
	form, finished := s.form.Press(kit.OnEntry, press)
	s.form = form
	if finished {
		return s.finish(w)
	}
	return s, nil
}

// Paste puts text into the field; a whole line is taken apart.
func (s Screen) Paste(w *kit.World, text string) (kit.Screen, kit.Job) {
	y, whole := table.FromPaste(text)
	if !whole || s.form.At != name && y.Name == "" {
		s.form = s.form.With(s.form.At, s.form.Fields[s.form.At].Insert(text))
		return s, nil
	}
	for i, v := range [...]string{y.Name, y.Position, y.Kind, y.Mag, y.Motion, y.Epoch} {
		if v != "" {
			s.form = s.form.With(i, kit.NewField(v))
		}
	}
	return s, kit.Say{Text: "taken apart; check the fields, enter on the last one adds the target"}
}

// finish adds the target, or goes to the first field that is wrong.
func (s Screen) finish(w *kit.World) (kit.Screen, kit.Job) {
	t, problems := s.typed().Target()
	for _, p := range problems {
		if !p.Warning {
			s.form.At = fieldOf(p.Field)
			return s, kit.Say{Text: p.Field + ": " + p.Text, Bad: true}
		}
	}
	e := roster.Entry{Target: t, Want: moment.Want{Band: w.Band, Level: w.Level, Weight: 1}, Session: true}
	return s, kit.Add{Entry: e} // emptied once it is in the list
}

// fieldOf returns the field that a problem is about.
func fieldOf(column string) int {
	switch column {
	case "position":
		return position
	case "kind":
		return kind
	case "motion":
		return motion
	case "epoch":
		return epoch
	case "name", "":
		return name
	}
	return mag
}

// Refresh asks where the target would stand as soon as it can be used.
func (s Screen) Refresh(w *kit.World) (kit.Screen, kit.Job) {
	y := s.typed()
	if w.Snap == nil {
		return s, nil
	}
	minute := w.Snap.Scene.Instant.UTC().Truncate(time.Minute)
	if y == s.asked && minute.Equal(s.minute) {
		return s, nil
	}
	s.asked, s.minute = y, minute
	t, problems := y.Target()
	for _, p := range problems {
		if !p.Warning {
			s.look = nil
			return s, nil
		}
	}
	sc := w.Snap.Scene
	r := roster.New([]roster.Entry{{Target: t, Want: moment.Want{Band: w.Band, Level: w.Level, Weight: 1}}}, w.Snap.Roster.Models(), nil)
	return s, kit.Work{Name: "placing it", Run: func(context.Context) (kit.Result, error) {
		m := r.Moment(&sc, 0)
		return &Look{y, m, kit.StageWord(&m.Stage)}, nil
	}}
}

// Apply takes where it would stand.
func (s Screen) Apply(_ *kit.World, r kit.Result) kit.Screen {
	if l, ok := r.(*Look); ok && l.typed == s.typed() {
		s.look = l
	}
	return s
}

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// View draws the form and what is wrong with it.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	header := 2
	if height < 12 {
		header = 1
	}
	kit.Header(w, p, header)
	if height >= 16 {
		p.Line().Put(kit.Title, "a new target, kept for this session").Line().Line()
	}
	s.form.Draw(p, height-p.Lines())
	if height >= 16 {
		p.Line()
	}
	s.judgement(p, height)
	p.Fill(height)
	return p.String()
}

// judgement says what is wrong, else where the star would stand.
func (s Screen) judgement(p *kit.Pen, height int) {
	say := func(r kit.Role, text string) {
		for _, line := range kit.Wrap(text, p.Width(), 2) {
			if p.Lines() < height {
				p.Put(r, line).Line()
			}
		}
	}
	if !s.HalfTyped() {
		say(kit.Dim, "name and position are needed, the rest sharpens what can be said")
		return
	}
	t, problems := s.typed().Target()
	ready := true
	for _, pr := range problems {
		ready = ready && pr.Warning
		if s.form.Text(fieldOf(pr.Field)) != "" || pr.Warning {
			say(kit.Warn, "! "+pr.Field+": "+pr.Text)
		}
	}
	if !ready {
		return
	}
	say(kit.Text, "ICRS "+t.Place.RA.HMS(2)+" "+t.Place.Dec.DMS(1)+fmt.Sprintf("  (%.5f %+.5f deg)", t.Place.RA.Deg(), t.Place.Dec.Deg()))
	if s.look != nil && s.look.typed == s.typed() {
		m := &s.look.moment
		text := strings.Join(strings.Fields(s.look.stage), " ") + " %; "
		if m.InCan {
			text += fmt.Sprintf("now at altitude %.0f%s, X %.2f, left %s, %.0f deg from the Moon", m.Apparent.Deg(), kit.Sense(m.Rising), float64(m.Airmass), kit.Left(m.Left), m.MoonSep.Deg())
		} else {
			text += kit.BlockedWord(m)
		}
		say(kit.Good, text)
	}
	if s.form.At == epoch {
		say(kit.Key, "enter adds it to the list")
	}
}
