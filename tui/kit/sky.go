package kit

import (
	"time"

	"evenfall/astro"
	"evenfall/targets/moment"
)

// Stretch is the part of a night that is drawn: from sunset to sunrise, or
// noon to noon where the Sun does not set or rise.
func Stretch(n *moment.Night) astro.Span {
	if n.Sunset != nil && n.Sunrise != nil && n.Sunset.Before(*n.Sunrise) {
		return astro.Span{From: *n.Sunset, Until: *n.Sunrise}
	}
	return n.Span
}

// Cell is one column of a night: its middle, how dark it is, whether the Moon
// is up.
type Cell struct {
	At     astro.Instant
	Sign   byte // s Sun up, c n a the twilights, . dark
	Role   Role
	MoonUp bool
}

// Cells cuts a stretch of a night into columns.
func Cells(n *moment.Night, s astro.Span, columns int) []Cell {
	out := make([]Cell, max(columns, 0))
	step := time.Duration(float64(s.Length()) / float64(max(columns, 1)))
	for i := range out {
		at := s.From.Add(time.Duration(i)*step + step/2)
		out[i] = Cell{At: at, MoonUp: inside(n.MoonUp, at)}
		out[i].Sign, out[i].Role = darkness(n, at)
	}
	return out
}

func darkness(n *moment.Night, at astro.Instant) (byte, Role) {
	switch {
	case inside(n.Ast.Below, at):
		return '.', Dark
	case inside(n.Nautical.Below, at):
		return 'a', Astro
	case inside(n.Civil.Below, at):
		return 'n', Nautical
	case inside(n.Day, at):
		return 's', Warn
	}
	return 'c', Civil
}

func inside(spans []astro.Span, at astro.Instant) bool {
	for i := range spans {
		if spans[i].Contains(at) {
			return true
		}
	}
	return false
}

// Column returns the column of a stretch that an instant falls into; false:
// it lies outside.
func Column(s astro.Span, columns int, at astro.Instant) (int, bool) {
	if !s.Contains(at) || s.Length() <= 0 {
		return 0, false
	}
	return min(int(float64(at.Sub(s.From))/float64(s.Length())*float64(columns)), columns-1), true
}

// Strip draws the night as one line: the twilights by letters, the dark by
// dots, m where the Moon is up, hours of UTC where they begin, | the moment
// shown.
func Strip(p *Pen, n *moment.Night, at astro.Instant) {
	s := Stretch(n)
	label := func(t astro.Instant) string { return Clock(t) }
	p.Put(Dim, label(s.From)+" ")
	columns := max(p.Width()-p.Used()-6, 0)
	cells := Cells(n, s, columns)
	now, shown := Column(s, columns, at)
	hours := hourMarks(s, columns)
	if shown {
		unlabel(hours, now)
	}
	for i := range cells {
		c := &cells[i]
		switch {
		case shown && i == now:
			p.Put(Selected, "|")
		case hours[i] != 0:
			p.Put(Dim, string(hours[i]))
		case c.Sign == '.' && c.MoonUp:
			p.Put(Moon, "m")
		default:
			p.Put(c.Role, string(c.Sign))
		}
	}
	p.Put(Dim, " "+label(s.Until))
}

// hourMarks places the hours of UTC along a stretch, each from the column
// where it begins, as close as they stay readable.
func hourMarks(s astro.Span, columns int) []rune {
	out := make([]rune, max(columns, 0))
	perHour := float64(columns) / max(s.Length().Hours(), 1)
	every := 1
	for perHour*float64(every) < 5 && every < 24 {
		every++
	}
	first := s.From.UTC().Truncate(time.Hour).Add(time.Hour)
	for h := first; h.Before(s.Until.UTC()); h = h.Add(time.Hour) {
		if h.Hour()%every != 0 {
			continue
		}
		at := int(float64(h.Sub(s.From.UTC())) / float64(s.Length()) * float64(columns))
		if at >= 0 && at+1 < columns {
			out[at], out[at+1] = rune('0'+h.Hour()/10), rune('0'+h.Hour()%10)
		}
	}
	return out
}

// unlabel takes away an hour that the mark of the moment shown would cover.
func unlabel(hours []rune, now int) {
	for i := 0; i+1 < len(hours); i++ {
		if hours[i] == 0 {
			continue
		}
		if now == i || now == i+1 {
			hours[i], hours[i+1] = 0, 0
		}
		i++ // an hour has two figures
	}
}

// HourLine draws the hours of UTC along a stretch as a line of their own, with
// a sign under the moment shown.
func HourLine(p *Pen, s astro.Span, columns int, at astro.Instant) {
	from := p.Used()
	now, shown := Column(s, columns, at)
	hours := hourMarks(s, columns)
	if shown {
		unlabel(hours, now)
	}
	for i, r := range hours {
		switch {
		case shown && i == now:
			p.Put(Selected, "^")
		case r != 0:
			p.Put(Dim, string(r))
		default:
			p.To(from + i + 1)
		}
	}
}
