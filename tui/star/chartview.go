package star

import (
	"strings"

	"evenfall/tui/kit"
)

// How the light curve's lines are shared out.
const (
	chartLabels = 7   // columns left of the plot, the axis included
	chartAxis   = 2   // lines below it
	chartWords  = 3   // lines of words below that, where they do not stand beside
	chartBeside = 110 // from this width on they do
	chartPanel  = 40
)

// plot returns the size of the plot in cells.
func (l layout) plot(width int) (cols, rows int) {
	if width >= chartBeside {
		return width - chartLabels - chartPanel - 1, l.chart - chartAxis
	}
	return width - chartLabels - 1, l.chart - chartAxis - chartWords
}

// lightCurve draws the chart, and beside or below it why the forecast is what
// it is.
func (s Screen) lightCurve(w *kit.World, p *kit.Pen, l layout) {
	full := s.full(p.Width(), w.Body())
	cols, rows := full.plot(p.Width())
	from := p.Lines()
	c := s.chart
	if c != nil && c.raster == nil && c.row == w.Selected {
		for _, line := range kit.Wrap("no light curve: "+c.basis, p.Width()-chartLabels, 2) {
			if p.Lines() < from+l.chart {
				p.To(chartLabels).Put(kit.Dim, line).Line()
			}
		}
		p.Fill(from + l.chart)
		return
	}
	if c == nil || c.row != w.Selected || c.key.cols != cols || c.key.rows != rows {
		p.To(chartLabels+1).Put(kit.Dim, "drawing the light curve ...").Line()
		p.Fill(from + l.chart)
		return
	}
	wide := p.Width() >= chartBeside
	var side []Line
	if wide {
		side = c.panel(chartPanel-1, rows+chartAxis)
	}
	beside := func(i int) {
		if i < len(side) {
			p.To(p.Width()-chartPanel+1).Put(side[i].Role, side[i].Text)
		}
		p.Line()
	}
	for r := range rows {
		if c.y[r] != "" {
			p.Right(kit.Text, chartLabels-1, c.y[r]).Put(kit.Text, "+")
		} else {
			p.To(chartLabels-1).Put(kit.Text, "|")
		}
		c.raster.Row(p, r, nil)
		beside(r)
	}
	p.To(chartLabels-1).Put(kit.Text, "+"+c.rule)
	beside(rows)
	p.To(chartLabels).Put(kit.Text, c.dates)
	beside(rows + 1)
	if wide {
		return
	}
	text := strings.TrimSpace(c.head + ": " + c.basis)
	lines := kit.Wrap(text, p.Width()-4, 2)
	for i := range chartWords - 1 {
		if i < len(lines) {
			p.Put(kit.Text, lines[i])
		}
		if i == chartWords-2 && len(lines) > chartWords-1 {
			p.Put(kit.Dim, " ...") // the document below has the whole of it
		}
		p.Line()
	}
	for _, item := range c.legend {
		if p.Used()+2+len(item) <= p.Width() {
			p.Put(kit.Dim, item+"  ")
		}
	}
	p.Line()
}

// panel is the words beside the plot.
func (c *chart) panel(width, lines int) []Line {
	var out []Line
	say := func(role kit.Role, text string) {
		for _, l := range kit.Wrap(text, width, 2) {
			out = append(out, Line{Role: role, Text: l})
		}
	}
	say(kit.Title, c.head)
	say(kit.Text, c.basis)
	if room := lines - len(c.legend) - 1; len(out) > room && room > 1 {
		out = append(out[:room-1], Line{Role: kit.Dim, Text: "..."})
	}
	out = append(out, Line{})
	for _, item := range c.legend {
		say(kit.Dim, item)
	}
	return out
}
