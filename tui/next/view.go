package next

import (
	"math"
	"strconv"
	"time"

	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// layout is how the lines of a screen are shared out.
type layout struct {
	width, header, heading, room, pane int
	rank                               int // width of the rank
}

func layoutOf(w *kit.World) layout { return share(w, w.Width, w.Body()) }

// share gives the list what the head and the reasons leave.
func share(w *kit.World, width, height int) layout {
	l := layout{width: width, rank: 3}
	if w.Snap != nil {
		for n := w.Snap.Take; n > 999 && l.rank < 7; n /= 10 {
			l.rank++
		}
	}
	switch {
	case height >= 46:
		l.header, l.heading, l.pane = 4, 1, 8
	case height >= 34:
		l.header, l.heading, l.pane = 4, 1, 7
	case height >= 20:
		l.header, l.heading, l.pane = 4, 1, 3
	case height >= 13:
		l.header, l.heading, l.pane = 3, 1, 2
	default:
		l.header, l.heading, l.pane = 1, 1, min(max(height-4, 0), 1)
	}
	l.room = max(height-l.header-l.heading-l.pane, 0)
	return l
}

// From which width on a list has which columns.
const (
	withBest  = 80
	withKind  = 108
	withPlace = 132
	withMore  = 156
	withNotes = 182
)

// columns of a list, from the left.
const (
	nameWidth     = 14
	stageWidth    = 8
	expectWidth   = 18
	narrowName    = 11
	withStage     = 50
	withExpect    = 70
	extraKind     = 11
	extraEnds     = 13
	extraPlace    = 23
	extraSpectrum = 12
	extraPeriod   = 9
)

// View draws the screen.
func (s Screen) View(w *kit.World, width, height int) string {
	l := share(w, width, height)
	p := kit.NewPen(w.Look, width)
	kit.Header(w, p, l.header)
	if l.heading > 0 {
		l.headings(p)
	}
	list := order(w)
	top := scroll(s.top, w.Place, len(list), l.room)
	for k := top; k < min(top+l.room, len(list)); k++ {
		l.row(w, p, int(list[k]), k == w.Place)
	}
	if len(list) == 0 && l.room > 0 {
		empty(w, p)
	}
	p.Fill(l.header + l.heading + l.room)
	reasons(w, p, l.pane)
	p.Fill(height)
	return p.String()
}

// empty says why there are no rows and what to do.
func empty(w *kit.World, p *kit.Pen) {
	text := "working out the list ..."
	switch {
	case w.Snap == nil:
	case w.Snap.Total == 0:
		text = "the list is empty: a types a target; lists go into the run's folder targets, or come with --targets"
	case w.Filter != "":
		text = "/ changes the filter: nothing passes " + strconv.Quote(w.Filter)
	}
	for _, line := range kit.Wrap(text, p.Width(), 2) {
		p.Put(kit.Dim, line).Line()
	}
}

// headings names the columns.
func (l layout) headings(p *kit.Pen) {
	at := l.columns()
	p.Put(kit.Dim, "  ").Right(kit.Dim, 2+l.rank, "#").To(at.name).Put(kit.Dim, "name")
	l.wideHeadings(p, at)
	p.Line()
}

func (l layout) wideHeadings(p *kit.Pen, at columns) {
	if at.stage > 0 {
		p.To(at.stage).Put(kit.Dim, "what  %")
	}
	if at.expect > 0 {
		p.To(at.expect).Put(kit.Dim, "expected")
	}
	p.Right(kit.Dim, at.x-2, "alt").Right(kit.Dim, at.x+4, "X")
	if at.best > 0 {
		p.Right(kit.Dim, at.best+5, "best").Right(kit.Dim, at.bestX+4, "X")
	}
	p.Right(kit.Dim, at.left+5, "left")
	if at.moon > 0 {
		p.Right(kit.Dim, at.moon+3, "Mn")
	}
	for _, c := range []struct {
		at   int
		word string
	}{{at.kind, "kind"}, {at.ends, "ends by"}, {at.place, "ICRS at the moment"}, {at.spectrum, "spectrum"}, {at.period, "period d"}, {at.notes, "why, and notes"}} {
		if c.at > 0 {
			p.To(c.at).Put(kit.Dim, c.word)
		}
	}
}

// columns is where each begins; 0: not shown.
type columns struct {
	name, nameTo                               int
	stage, expect, alt, x, best, bestX         int
	left, moon                                 int
	kind, ends, place, spectrum, period, notes int
}

func (l layout) columns() columns {
	c := columns{name: 4 + l.rank}
	at := c.name + nameWidth - (l.rank - 3) + 1
	if l.width < withStage {
		at = c.name + narrowName + 1
	}
	c.nameTo = at - 1
	if l.width >= withStage {
		c.stage, at = at, at+stageWidth+1
	}
	if l.width >= withExpect {
		c.expect, at = at, at+expectWidth+1
	}
	c.alt, c.x, at = at, at+altWidth(l.width)+2, at+altWidth(l.width)+7
	if l.width >= withBest {
		c.best, c.bestX, at = at, at+6, at+11
	}
	c.left, at = at, at+6
	if l.width >= withBest {
		c.moon, at = at, at+5
	}
	more := func(from, wide int) int {
		if l.width < from {
			return 0
		}
		at += wide
		return at - wide
	}
	c.kind, c.ends = more(withKind, extraKind+1), more(withKind, extraEnds+1)
	c.place = more(withPlace, extraPlace+1)
	c.spectrum, c.period = more(withMore, extraSpectrum+1), more(withMore, extraPeriod+1)
	c.notes = more(withNotes, 1)
	return c
}

// altWidth is how wide altitudes are: whole degrees where columns and bytes
// are dear, as every digit that changes sends its row anew.
func altWidth(width int) int {
	if width < withKind {
		return 3
	}
	return 5
}

func altText(deg float64, width int) string {
	if width < withKind {
		return strconv.Itoa(int(math.Round(deg)))
	}
	return strconv.FormatFloat(deg, 'f', 1, 64)
}

// row draws one target.
func (l layout) row(w *kit.World, p *kit.Pen, i int, selected bool) {
	e, m, at := w.Snap.Roster.Entry(i), w.Snap.Peek(i), l.columns()
	role := kit.Text
	if selected {
		role = kit.Selected
	}
	cursor := " "
	if selected {
		cursor = ">"
	}
	p.Put(role, cursor)
	if w.Marks[i] {
		p.Put(kit.Mark, "*")
	}
	if m == nil {
		l.quick(w, p, i, role)
		return
	}
	if !m.InCan {
		if !selected {
			role = kit.Dim
		}
		p.Right(role, 2+l.rank, "-")
	} else {
		p.Right(role, 2+l.rank, strconv.Itoa(m.Rank))
		if !m.InShould {
			p.Put(role, "~")
		}
	}
	p.To(at.name).Put(role, kit.Cut(e.Target.Name, at.nameTo-at.name))
	if at.stage > 0 {
		p.To(at.stage).Put(role, kit.Cut(kit.StageWord(&m.Stage), stageWidth))
	}
	if at.expect > 0 {
		p.To(at.expect).Put(role, kit.Cut(kit.ExpectWord(&m.Expect), expectWidth))
	}
	place(p, at, m, role)
	if m.InCan {
		figures(p, at, m, role)
	} else {
		l.reason(p, at, m, role)
	}
	l.extras(p, at, e, m, role)
	p.Line()
}

// reason writes why a target cannot be taken and when that ends, in place of
// best and left.
func (l layout) reason(p *kit.Pen, at columns, m *moment.Moment, role kit.Role) {
	from, until := at.left, l.width
	if at.best > 0 {
		from = at.best
	}
	if at.kind > 0 {
		until = at.kind - 1
	}
	text := kit.BlockedWord(m)
	if len(text) > until-from {
		text = kit.BlockedShort(m)
	}
	if len(text) > until-from {
		text = kit.BlockedEnd(m)
	}
	p.To(from).Put(role, kit.Cut(text, until-from))
}

// place writes where a target stands.
func place(p *kit.Pen, at columns, m *moment.Moment, role kit.Role) {
	p.Right(role, at.x-2, altText(m.Apparent.Deg(), p.Width())).Put(role, kit.Sense(m.Rising))
	if m.AirOK && m.Airmass < 10 {
		p.Right(role, at.x+4, strconv.FormatFloat(float64(m.Airmass), 'f', 2, 64))
	}
}

// figures writes when a target that can be taken is best and how long it is
// left.
func figures(p *kit.Pen, at columns, m *moment.Moment, role kit.Role) {
	if at.best > 0 && m.Course.Best != nil {
		p.Right(role, at.best+5, kit.Clock(*m.Course.Best))
		p.Right(role, at.bestX+4, strconv.FormatFloat(float64(m.Course.BestAirmass), 'f', 2, 64))
	}
	p.Right(role, at.left+5, kit.Left(m.Left))
	if at.moon > 0 {
		p.Right(role, at.moon+3, strconv.Itoa(int(m.MoonSep.Deg()+0.5)))
	}
}

// extras writes the columns of a wide screen.
func (l layout) extras(p *kit.Pen, at columns, e *roster.Entry, m *moment.Moment, role kit.Role) {
	t := &e.Target
	if at.kind > 0 {
		p.To(at.kind).Put(role, kit.Cut(string(t.Kind), extraKind))
	}
	if at.ends > 0 && m.InCan {
		p.To(at.ends).Put(role, kit.Cut(limit(m), extraEnds))
	}
	if at.place > 0 {
		p.To(at.place).Put(role, m.RA.HMS(1)+" "+m.Dec.DMS(0))
	}
	if at.spectrum > 0 {
		p.To(at.spectrum).Put(role, kit.Cut(t.Physics.SpType, extraSpectrum))
	}
	if at.period > 0 && t.Var.PeriodD.Known {
		p.Right(role, at.period+8, strconv.FormatFloat(t.Var.PeriodD.Value, 'g', 6, 64))
	}
	if at.notes > 0 {
		note := t.Notes
		if len(m.Stage.Evidence) > 0 {
			note = m.Stage.Evidence[0].What + "; " + note
		}
		p.To(at.notes).Put(kit.Dim, note)
	}
}

// quick draws a row of a long list that has not been worked out in full.
func (l layout) quick(w *kit.World, p *kit.Pen, i int, role kit.Role) {
	q, at := w.Snap.Quick(i), l.columns()
	if q.InCan {
		p.Right(role, 2+l.rank, strconv.Itoa(q.Rank))
		if !q.InShould {
			p.Put(role, "~")
		}
	} else {
		p.Right(role, 2+l.rank, "-")
	}
	p.To(at.name).Put(role, kit.Cut(w.Snap.Roster.Entry(i).Target.Name, at.nameTo-at.name))
	p.Right(role, at.x-2, altText(q.Altitude.Deg(), p.Width()))
	if q.AirOK {
		p.Right(role, at.x+4, strconv.FormatFloat(float64(q.Airmass), 'f', 2, 64))
	}
	if q.InCan {
		p.Right(role, at.left+5, kit.Left(q.Left))
	} else if q.Opens {
		p.To(at.left).Put(role, "opens "+w.Shown.Add(q.Left).Round(time.Minute).Format("15:04"))
	}
	p.Line()
}
