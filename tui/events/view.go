package events

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// layout is how the lines are shared out.
type layout struct {
	header, lead, heading, room, detail int
}

func layoutOf(width, height int) layout {
	l := layout{header: 2, lead: 3, heading: 1, detail: 3}
	switch {
	case height < 12:
		l.header, l.lead, l.detail = 1, 1, 1
	case height < 16:
		l.lead, l.detail = 1, 1
	case height < 20:
		l.lead, l.detail = 2, 2
	}
	l.header = min(l.header, height)
	l.lead = min(l.lead, height-l.header)
	l.heading = min(l.heading, height-l.header-l.lead)
	l.detail = min(l.detail, height-l.header-l.lead-l.heading)
	l.room = height - l.header - l.lead - l.heading - l.detail
	return l
}

// columns is where each begins; 0: not shown.
type columns struct {
	date, utc, local, target, kind, sigma, alt, air, can, status, words int
	targetTo, kindTo                                                    int
}

// From which width on there are which columns.
const (
	withSeconds = 66
	withLocal   = 80
	withWords   = 108
)

func columnsOf(width int, zone bool) columns {
	c := columns{date: 2, utc: 9}
	at := 15
	if width >= withSeconds {
		at = 18
	}
	if zone && width >= withLocal {
		c.local, at = at, at+6
	}
	target, kind := 12, 9
	if width >= withWords {
		target, kind = 20, 16
	}
	c.target, c.targetTo = at, at+target
	c.kind, c.kindTo = at+target+1, at+target+1+kind
	at = c.kindTo + 1
	if width < withSeconds {
		return c
	}
	c.sigma, at = at, at+7
	if width >= withLocal {
		c.alt, c.air, at = at, at+4, at+9
	}
	c.can, at = at, at+10
	c.status, at = at, at+9
	if width >= withWords {
		c.words = at
	}
	return c
}

// View draws the screen.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	l := layoutOf(width, height)
	kit.Header(w, p, l.header)
	if text := s.instead(w); text != "" {
		for _, line := range kit.Wrap(text, width, 2) {
			if p.Lines() < height {
				p.Put(kit.Dim, line).Line()
			}
		}
		p.Fill(height)
		return p.String()
	}
	zone := w.Zone != nil && w.Zone != time.UTC
	s.lead(w, p, l.lead)
	if l.heading > 0 {
		headings(p, columnsOf(width, zone))
	}
	place := s.place(w)
	top := scroll(s.top, place, len(s.visible), l.room)
	c := columnsOf(width, zone)
	for i := top; i < min(top+l.room, len(s.visible)); i++ {
		row(w, p, &c, s.at(i), i == place)
	}
	if len(s.visible) == 0 && l.room > 0 {
		p.Put(kit.Dim, s.empty()).Line()
	}
	p.Fill(height - l.detail)
	s.detail(w, p, place, l.detail)
	p.Fill(height)
	return p.String()
}

// instead says why there is no list.
func (s Screen) instead(w *kit.World) string {
	switch {
	case w.Snap == nil:
		return "working out the list ..."
	case len(w.Snap.Order) > most:
		return fmt.Sprintf("%d targets are too many to date, %d at most: filter the list first (esc, then / and e.g. kind=interacting or alt>30), then come back with E", len(w.Snap.Order), most)
	case s.data == nil && s.failed:
		return "the dates could not be worked out; ? has the message, any key tries again"
	case s.data == nil && s.next != nil:
		return fmt.Sprintf("dating what happens: %d of %d targets ...", s.next.rows, len(s.next.set))
	case s.data == nil:
		return "dating what happens ..."
	}
	return ""
}

// empty says that nothing happens, and what to do.
func (s Screen) empty() string {
	if s.onlyCan && len(s.data.list) > 0 {
		return fmt.Sprintf("nothing that can be observed among %d; y shows everything, ] more nights", len(s.data.list))
	}
	return fmt.Sprintf("nothing is dated for %d targets in these nights; ] shows more", len(s.data.set))
}

// lead writes the next happening with its countdown, then the next that can be
// observed, or what the list is like.
func (s Screen) lead(w *kit.World, p *kit.Pen, lines int) {
	if lines <= 0 {
		return
	}
	from := p.Lines()
	next, can := -1, -1
	for i := s.upcoming(w.Shown); i < len(s.visible) && (next < 0 || can < 0); i++ {
		h := s.at(i)
		if h.Status == light.EventExpired {
			continue
		}
		if next < 0 {
			next = i
		}
		if can < 0 && h.Can {
			can = i
		}
	}
	if next < 0 {
		p.Put(kit.Title, "nothing dated is to come in these nights").Line()
	} else {
		leadLine(w, p, "next: ", s.at(next), kit.Title)
	}
	if lines > 1 && can > next {
		leadLine(w, p, "next that can be observed: ", s.at(can), kit.Good)
	}
	if p.Lines()-from < lines {
		p.Put(kit.Dim, s.about()).Line()
	}
	p.Fill(from + lines)
}

// about says how much is listed.
func (s Screen) about() string {
	text := fmt.Sprintf("%d in %d nights, of %d targets", len(s.visible), s.data.nights, len(s.data.set))
	if s.data.nights == 1 {
		text = fmt.Sprintf("%d tonight, of %d targets", len(s.visible), len(s.data.set))
	}
	if s.onlyCan {
		text += ", only what can be observed (y: all)"
	}
	switch n := s.next; {
	case n == nil || n.done():
	case !n.known():
		text += fmt.Sprintf("; dating %d of %d", n.rows, len(n.set))
	default:
		text += fmt.Sprintf("; placing %d of %d", n.placed, len(n.list))
	}
	return text
}

func leadLine(w *kit.World, p *kit.Pen, what string, h *roster.Happening, role kit.Role) {
	p.Put(role, what+h.Kind+" of "+name(w, h)+" in "+kit.Until(h.At.UTC().Sub(w.Shown)))
	last := ""
	if h.Placed && h.Can {
		last = fmt.Sprintf(", %.0f deg up", h.Apparent.Deg())
	} else if h.Placed {
		last = ", " + canWord(h)
	}
	when := stamp(h, h.At.UTC())
	if h.SigmaS < 86400 && h.At.UTC().Sub(w.Shown) < 20*time.Hour { // no other day can be meant
		when = when[strings.LastIndexByte(when, ' ')+1:]
	}
	for _, piece := range []string{", " + when + " UTC", " +- " + sigma(h.SigmaS), last} {
		if !whole(p, kit.Text, piece) {
			break
		}
	}
	p.Line()
}

// whole writes a piece where it fits on the line; never half a time.
func whole(p *kit.Pen, role kit.Role, text string) bool {
	if p.Used()+len(text) > p.Width() {
		return false
	}
	p.Put(role, text)
	return true
}

func name(w *kit.World, h *roster.Happening) string {
	if int(h.Row) >= w.Snap.Roster.Len() {
		return "?"
	}
	return w.Snap.Roster.Entry(int(h.Row)).Target.Name
}

// stamp writes a time as finely as it is known: date and minute, or seconds.
func stamp(h *roster.Happening, t time.Time) string {
	switch {
	case !(h.SigmaS < 86400):
		return t.Format("2 Jan")
	case h.SigmaS > 1800:
		return t.Round(time.Minute).Format("2 Jan 15:04")
	}
	return t.Round(time.Second).Format("2 Jan 15:04:05")
}

func sigma(s float64) string {
	if math.IsNaN(s) || s < 0 {
		return "?"
	}
	return kit.Duration(s)
}

// canWord says whether it can be observed, in few letters.
func canWord(h *roster.Happening) string {
	switch {
	case !h.Placed:
		return "..."
	case h.Can:
		return "can"
	case h.Code == targets.CodeDaylight:
		return "daylight"
	case h.Code == targets.CodeInstrument:
		return "unmounted"
	}
	return kit.ReasonShort(h.Code)
}

func headings(p *kit.Pen, c columns) {
	p.To(c.date).Put(kit.Dim, "date").To(c.utc).Put(kit.Dim, "UTC")
	if c.local > 0 {
		p.To(c.local).Put(kit.Dim, "local")
	}
	p.To(c.target).Put(kit.Dim, "target").To(c.kind).Put(kit.Dim, "kind")
	if c.sigma > 0 {
		p.Right(kit.Dim, c.sigma+6, "+-")
	}
	if c.alt > 0 {
		p.Right(kit.Dim, c.alt+3, "alt").Right(kit.Dim, c.air+4, "X")
	}
	if c.can > 0 {
		p.To(c.can).Put(kit.Dim, "observe").To(c.status).Put(kit.Dim, "status")
	}
	if c.words > 0 {
		p.To(c.words).Put(kit.Dim, "what is to be said")
	}
	p.Line()
}

// row draws one happening: dim where it is past or expired, with the word.
func row(w *kit.World, p *kit.Pen, c *columns, h *roster.Happening, selected bool) {
	t := h.At.UTC()
	past := t.Before(w.Shown)
	role, cursor := kit.Text, " "
	switch {
	case selected:
		role, cursor = kit.Selected, ">"
	case past || h.Status == light.EventExpired:
		role = kit.Dim
	}
	p.Put(role, cursor)
	if w.Marks[int(h.Row)] {
		p.Put(kit.Mark, "*")
	}
	p.To(c.date).Put(role, t.Format("2 Jan"))
	switch {
	case !(h.SigmaS < 86400):
	case h.SigmaS > 1800 || c.sigma == 0:
		p.To(c.utc).Put(role, t.Round(time.Minute).Format("15:04"))
	default:
		p.To(c.utc).Put(role, t.Round(time.Second).Format("15:04:05"))
	}
	if c.local > 0 && h.SigmaS < 86400 {
		p.To(c.local).Put(role, t.Round(time.Minute).In(w.Zone).Format("15:04"))
	}
	p.To(c.target).Put(role, kit.Cut(name(w, h), c.targetTo-c.target)).To(c.kind).Put(role, kit.Cut(h.Kind, c.kindTo-c.kind))
	if c.sigma > 0 {
		p.Right(role, c.sigma+6, sigma(h.SigmaS))
	}
	if c.alt > 0 && h.Placed {
		p.Right(role, c.alt+3, strconv.Itoa(int(math.Round(h.Apparent.Deg()))))
		if h.AirOK && h.Airmass < 10 {
			p.Right(role, c.air+4, strconv.FormatFloat(float64(h.Airmass), 'f', 2, 64))
		}
	}
	if c.can > 0 {
		good := role
		if h.Can && role == kit.Text {
			good = kit.Good
		}
		p.To(c.can).Put(good, kit.Cut(canWord(h), 9))
		status := h.Status
		if past && status != light.EventExpired {
			status = "past"
		}
		p.To(c.status).Put(role, kit.Cut(status, 8))
	}
	if c.words > 0 {
		p.To(c.words).Put(role, h.Words)
	}
	p.Line()
}

// detail writes the selected happening in full.
func (s Screen) detail(w *kit.World, p *kit.Pen, place, lines int) {
	if lines <= 0 {
		return
	}
	if place < 0 {
		text := "no star is selected"
		if e := w.Entry(); e != nil {
			text = e.Target.Name + ": nothing dated to come in these nights; j goes to the next happening, ] shows more nights"
		}
		for _, line := range kit.Wrap(text, p.Width(), 2)[:1] {
			p.Put(kit.Dim, line).Line()
		}
		return
	}
	h := s.at(place)
	t := h.At.UTC()
	p.Put(kit.Text, fmt.Sprintf("%d/%d  ", place+1, len(s.visible))).Put(kit.Title, name(w, h)).Put(kit.Text, "  "+h.Kind)
	switch left := kit.Until(t.Sub(w.Shown)); left {
	case "past":
		p.Put(kit.Text, "  "+kit.Until(w.Shown.Sub(t))+" ago")
	default:
		p.Put(kit.Good, "  in "+left)
	}
	for _, piece := range []string{"  " + stamp(h, t) + " UTC", "  +- " + sigma(h.SigmaS), "  " + h.Status} {
		if !whole(p, kit.Text, piece) {
			break
		}
	}
	p.Line()
	if lines < 2 {
		return
	}
	text := ""
	if w.Zone != nil && w.Zone != time.UTC {
		text = t.In(w.Zone).Round(time.Second).Format("15:04:05") + " local; "
	}
	if !math.IsNaN(h.BJDTDB) && h.BJDTDB > 0 {
		text += fmt.Sprintf("BJD_TDB %.5f; ", h.BJDTDB)
	}
	if h.Start != nil && h.End != nil {
		text += stamp(h, h.Start.UTC()) + " to " + stamp(h, h.End.UTC()) + "; "
	}
	switch {
	case !h.Placed:
		text += "working out where it stands"
	case h.Can:
		text += fmt.Sprintf("altitude %.1f deg, X %.2f; can be observed", h.Apparent.Deg(), float64(h.Airmass))
	default:
		text += fmt.Sprintf("altitude %.1f deg; cannot be observed: %s", h.Apparent.Deg(), h.Why)
	}
	if h.Words != "" {
		text += "; " + h.Words
	}
	for i, line := range kit.Wrap(text, p.Width(), 2) {
		if i < lines-1 {
			p.Put(kit.Text, line).Line()
		}
	}
}
