package star

import (
	"fmt"
	"strings"

	"evenfall/astro"
	"evenfall/targets/taking"
	"evenfall/tui/kit"
)

// layout is how the lines are shared out.
type layout struct{ header, curve, chart, doc int }

const (
	labels     = 6 // columns left of the lanes
	lanesBelow = 4 // take, sun, moon, hours
)

// The least heights and widths of a screen for what is drawn.
const (
	tall           = 50 // the night's course and the light curve
	leastForChart  = 14
	leastForLabels = 40
	leastChart     = chartAxis + chartWords + 2 // lines of it
)

// bare is how many lines a light curve takes of which there is nothing to draw.
const bare = 2

// layout shares the lines out as they are shown.
func (s Screen) layout(width, height int) layout {
	l := s.full(width, height)
	if c := s.chart; l.chart > bare && c != nil && c.raster == nil && c.key == s.askedChart {
		l.doc += l.chart - bare
		l.chart = bare
	}
	return l
}

// full gives the drawing a third of a high screen, and none of a low one; the
// light curve half of it.
func (s Screen) full(width, height int) layout {
	l := layout{header: 2}
	if height < 12 {
		l.header = 1
	}
	rest := height - l.header
	if s.detail != nil {
		rest -= len(handOver(s.detail, width)) + 1
		if len(taking.Short(&s.detail.Moment)) > 0 {
			rest--
		}
	}
	switch {
	case height >= tall:
		l.curve, l.chart = 9, 18
	case s.light && height >= leastForChart:
		l.chart = height * 12 / 20
	case height >= 46:
		l.curve = 16
	case height >= 34:
		l.curve = 10
	case height >= 20:
		l.curve = 5
	}
	if l.curve > 0 && l.curve+lanesBelow > rest { // long hand-over lines
		l.curve = 0
	}
	if l.curve > 0 {
		rest -= l.curve + lanesBelow
	}
	if l.chart = min(l.chart, rest); l.chart < leastChart {
		l.chart = 0
	}
	l.doc = max(rest-l.chart, 0)
	return l
}

// handOver is the lines for the operator, broken where they are too long.
func handOver(d *Detail, width int) []string {
	var out []string
	for _, line := range d.HandOver {
		out = append(out, kit.Break(line, width, 4)...)
	}
	return out
}

// View draws the screen.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	d := s.detail
	if d != nil && d.Row != w.Selected {
		d = nil
	}
	l := s.layout(width, height)
	kit.Header(w, p, l.header)
	switch {
	case w.Entry() == nil:
		p.Put(kit.Dim, "no star is selected; esc goes back to the list").Line()
	case d == nil:
		p.Put(kit.Title, w.Entry().Target.Name).Put(kit.Dim, "  working it out ...").Line()
	default:
		s.draw(w, p, l, d, height)
	}
	p.Fill(height)
	return p.String()
}

func (s Screen) draw(w *kit.World, p *kit.Pen, l layout, d *Detail, height int) {
	for i, line := range handOver(d, p.Width()) {
		role := kit.Text
		if i == 0 {
			role = kit.Selected
		} else if strings.HasPrefix(line, "!") {
			role = kit.Warn
		}
		if p.Lines() < height {
			p.Put(role, line).Line()
		}
	}
	if p.Lines() < height {
		summary(w, p, d)
	}
	if how := taking.Short(&d.Moment); len(how) > 0 && p.Lines() < height {
		exposureLine(p, d, how)
	}
	if l.curve > 0 {
		lanes(p, d, l.curve)
	}
	if l.chart > 0 {
		s.lightCurve(w, p, l)
	}
	doc := d.document(p.Width())
	top := s.clamp(p.Width(), height)
	for i := top; i < min(top+l.doc, len(doc)); i++ {
		if i == top+l.doc-1 && top+l.doc < len(doc) {
			more := fmt.Sprintf("  j for %d more lines", len(doc)-i)
			p.Put(doc[i].Role, kit.Cut(doc[i].Text, p.Width()-len(more)-1)).Right(kit.Key, p.Width(), more).Line()
			return
		}
		p.Put(doc[i].Role, doc[i].Text).Line()
	}
}

// summary is the line that decides.
func summary(w *kit.World, p *kit.Pen, d *Detail) {
	m := &d.Moment
	if w.Marks[d.Row] {
		p.Put(kit.Mark, "* ")
	}
	p.Put(kit.Good, strings.Join(strings.Fields(kit.StageWord(&m.Stage)), " ")+" %")
	items := []string{"left " + kit.Left(m.Left), fmt.Sprintf("alt %.0f%s", m.Apparent.Deg(), kit.Sense(m.Rising)),
		strings.TrimSpace(kit.ExpectWord(&m.Expect)), fmt.Sprintf("X %.2f", float64(m.Airmass)), fmt.Sprintf("Moon %.0f", m.MoonSep.Deg())}
	if !m.InCan {
		items = []string{kit.BlockedWord(m), strings.TrimSpace(kit.ExpectWord(&m.Expect))}
	}
	for i, item := range items { // whole ones, what decides first
		if p.Used()+2+len(item) > p.Width() {
			continue
		}
		role := kit.Text
		if i == 0 && !m.InCan {
			role = kit.Warn
		}
		p.Put(role, "  "+item)
	}
	p.Line()
}

// exposureLine says how long to expose, in as many whole clauses as fit.
func exposureLine(p *kit.Pen, d *Detail, how []string) {
	role := kit.Text
	if !d.Moment.ExposureOK {
		role = kit.Warn
	}
	text := how[0]
	for _, c := range how[1:] {
		if len(text)+2+len(c) <= p.Width() {
			text += "; " + c
		}
	}
	p.Put(role, kit.Cut(text, p.Width())).Line()
}

// lanes draws the night's course: what the star costs, when it may be taken,
// how dark it is, when the Moon is up.
func lanes(p *kit.Pen, d *Detail, rows int) {
	n := d.Scene.Night
	span := kit.Stretch(n)
	columns := max(p.Width()-labels-1, 10)
	canvas := kit.NewCanvas(columns, rows)
	sc := scaleOf(d.Curve)
	trace(canvas, d.Curve, sc, span, columns, rows)
	for r := range rows {
		p.Put(kit.Dim, sc.label(float64(r)/float64(rows), r == 0))
		canvas.Row(p, r)
		p.Line()
	}
	p.Put(kit.Dim, " take|")
	takeLane(p, d, span, columns)
	p.Line()
	p.Put(kit.Dim, "  sun|")
	cells := kit.Cells(n, span, columns)
	for i := range cells {
		p.Put(cells[i].Role, string(cells[i].Sign))
	}
	p.Line()
	p.Put(kit.Dim, fmt.Sprintf("%4.0f%%|", 100*d.Scene.Phase.Illuminated))
	from := p.Used()
	for i := range cells {
		if cells[i].MoonUp {
			p.To(from+i).Put(kit.Moon, "m")
		}
	}
	if p.Used() == from {
		p.Put(kit.Dim, "Moon down all night")
	}
	p.Line()
	p.Put(kit.Dim, "  UTC|")
	kit.HourLine(p, span, columns, d.Scene.Instant)
	p.Line()
}

// takeLane draws = where the star should and - where it merely can be taken, b
// where it is best.
func takeLane(p *kit.Pen, d *Detail, span astro.Span, columns int) {
	co := &d.Moment.Course
	from := p.Used()
	best := -1
	if co.Best != nil {
		if at, ok := kit.Column(span, columns, *co.Best); ok {
			best = at
		}
	}
	lane := make([]byte, columns)
	fill := func(list []astro.Span, sign byte) {
		for _, s := range list {
			a, okA := kit.Column(span, columns, s.From)
			if !okA && s.From.Before(span.From) && s.Until.After(span.From) {
				a, okA = 0, true
			}
			b, okB := kit.Column(span, columns, s.Until)
			if !okB && s.Until.After(span.From) {
				b, okB = columns-1, true
			}
			for i := a; okA && okB && i <= b; i++ {
				lane[i] = sign
			}
		}
	}
	fill(co.Can, '-')
	fill(co.Should, '=')
	for i, sign := range lane {
		switch {
		case i == best:
			p.To(from+i).Put(kit.Selected, "b")
		case sign == '=':
			p.Put(kit.Good, "=")
		case sign == '-':
			p.Put(kit.Text, "-")
		default:
			p.To(from + i + 1)
		}
	}
	if len(co.Can) == 0 {
		p.Put(kit.Dim, " not tonight")
	}
}
