package desk

import (
	"fmt"
	"strings"

	"evenfall/tui/kit"
)

// The least size that anything can be read in.
const (
	leastWidth  = 40
	leastHeight = 10
)

// View draws the whole screen: exactly its height of lines, none wider than
// it.
func (d *Desk) View() string {
	w := &d.w
	if w.Width < leastWidth || w.Height < leastHeight {
		p := kit.NewPen(w.Look, w.Width)
		if w.Height > 0 {
			p.Put(kit.Text, fmt.Sprintf("too small: %d x %d", w.Width, w.Height)).Line()
		}
		return p.Fill(w.Height).String()
	}
	s := d.up()
	body := s.View(w, w.Width, w.Body())
	p := kit.NewPen(w.Look, w.Width)
	d.loopLine(p)
	p.Line()
	d.status(s, p)
	p.Line()
	foot := s.Title()
	if d.prompt != nil {
		foot = kit.OnField
	}
	p.Put(kit.Dim, kit.Footer(foot, w.Width)).Line()
	var b strings.Builder
	b.Grow(len(body) + 256)
	b.WriteString(body)
	b.WriteByte('\n')
	b.WriteString(p.String())
	return b.String()
}

// status writes the line above the footer: a question, a line being typed, a
// message, or what the list is like.
func (d *Desk) status(s kit.Screen, p *kit.Pen) {
	switch {
	case d.answer != nil:
		p.Put(kit.Warn, d.question)
	case d.prompt != nil:
		p.Put(kit.Key, d.prompt.label+" ")
		d.prompt.field.Show(p, true)
		p.Put(kit.Dim, "  "+d.prompt.hint)
	case d.asking && len(d.queue) > 0:
		p.Put(kit.Warn, fmt.Sprintf("y leaves, other keys stay: %d not saved; l shows them to copy by hand", len(d.queue)))
	case d.asking:
		p.Put(kit.Warn, "y leaves, other keys stay: something is half typed")
	case s.Prompt(&d.w, p):
	case d.message != "" && d.bad:
		text, rest := "! "+d.message, "  esc"
		if len(text)+len(rest) > p.Width() {
			rest = " ...  ? all, esc"
			text = kit.Wrap(text, p.Width()-len(rest), 0)[0]
		}
		p.Put(kit.Bad, text).Put(kit.Dim, rest)
	case d.message != "":
		p.Put(kit.Good, d.message)
	default:
		d.state(p)
	}
}
