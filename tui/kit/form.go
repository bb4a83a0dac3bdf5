package kit

import "strings"

// FormField is a line of a form: its label, and what may stand there.
type FormField struct{ Label, Hint string }

// Form is several lines to be typed.
type Form struct {
	Lines  []FormField
	Fields []Field
	At     int
}

// NewForm returns an empty form.
func NewForm(lines []FormField) Form { return Form{Lines: lines, Fields: make([]Field, len(lines))} }

// Press obeys a key; finished: enter on the last line.
func (f Form) Press(screen, press string) (_ Form, finished bool) {
	n := len(f.Lines)
	switch Lookup(screen, press) {
	case NextField:
		if press == "enter" && f.At == n-1 {
			return f, true
		}
		f.At = (f.At + 1) % n
		return f, false
	case PriorField:
		f.At = (f.At + n - 1) % n
		return f, false
	}
	if field, ok := f.Fields[f.At].Press(press); ok {
		f = f.With(f.At, field)
	}
	return f, false
}

// With returns the form with another field.
func (f Form) With(i int, field Field) Form {
	f.Fields = append([]Field{}, f.Fields...)
	f.Fields[i] = field
	return f
}

// Text returns what is typed in a line.
func (f Form) Text(i int) string { return strings.TrimSpace(f.Fields[i].String()) }

// Empty tells whether nothing is typed.
func (f Form) Empty() bool {
	for i := range f.Fields {
		if f.Text(i) != "" {
			return false
		}
	}
	return true
}

// Draft writes the form for keeping; Recall reads it back.
func (f Form) Draft() string {
	if f.Empty() {
		return ""
	}
	parts := make([]string, len(f.Fields))
	for i := range f.Fields {
		parts[i] = f.Fields[i].String()
	}
	return strings.Join(parts, "\n")
}

// Recall returns the form as a draft had it.
func (f Form) Recall(draft string) Form {
	for i, s := range strings.Split(draft, "\n") {
		if i < len(f.Fields) {
			f = f.With(i, NewField(s))
		}
	}
	return f
}

// Draw writes the form's lines, those about the one being typed where there
// is no room for all.
func (f Form) Draw(p *Pen, room int) {
	from := max(min(f.At-room/2, len(f.Lines)-room), 0)
	for i, l := range f.Lines[from:min(from+max(room, 0), len(f.Lines))] {
		i += from
		cursor := "  "
		if i == f.At {
			cursor = "> "
		}
		p.Put(Selected, cursor).Put(Dim, l.Label).To(13)
		f.Fields[i].Show(p, i == f.At)
		if f.Fields[i].String() == "" {
			p.Put(Dim, "  "+l.Hint)
		}
		p.Line()
	}
}
