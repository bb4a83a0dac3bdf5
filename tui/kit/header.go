package kit

import (
	"fmt"
	"strings"
	"time"

	"evenfall/astro"
	"evenfall/targets/moment"
)

// Header draws the lines above a screen: what run this is, the time and
// whether it is the clock's, and where there is room the night as a strip and
// the state of the sky.
func Header(w *World, p *Pen, lines int) {
	if lines <= 0 {
		return
	}
	if lines >= 2 {
		titleLine(w, p)
	}
	clockLine(w, p, lines < 4)
	if lines >= 3 {
		if w.Snap != nil {
			Strip(p, w.Snap.Scene.Night, w.Snap.Scene.Instant)
		}
		p.Line()
	}
	if lines >= 4 {
		if w.Snap != nil {
			skyLine(w, p)
		}
		p.Line()
	}
}

func titleLine(w *World, p *Pen) {
	p.Put(Title, "evenfall")
	if w.Demo {
		p.Put(Warn, "  DEMONSTRATION")
	}
	p.Put(Text, "  "+w.Site.Name)
	if w.Snap != nil {
		p.Put(Dim, "  night of "+w.Snap.Scene.Night.Date.String())
	}
	p.Line()
}

// clockLine is the one line that changes each second: a short one where the
// rest has a place elsewhere.
func clockLine(w *World, p *Pen, alone bool) {
	if !w.Live {
		p.Put(Warn, "NOT NOW ")
	}
	p.Put(Title, w.Shown.Format("Mon 2 Jan 15:04:05")).Put(Text, " UTC")
	switch {
	case w.Live && w.Fixed:
		p.Put(Warn, "  clock stopped by --at")
	case w.Live && !w.Ticks:
		p.Put(Text, "  at the last key")
	case w.Live:
		p.Put(Text, "  live")
	default:
		p.Put(Dim, "  n: back to "+w.Wall.Format("2 Jan 15:04"))
	}
	if alone {
		p.Put(Text, "  "+otherClocks(w))
	}
	p.Line()
}

// otherClocks writes local and sidereal time, to the minute.
func otherClocks(w *World) string {
	text := ""
	if w.Zone != nil && w.Zone != time.UTC {
		text = w.Shown.In(w.Zone).Format("15:04 local  ")
	}
	if w.Snap == nil {
		return text
	}
	sc := &w.Snap.Scene
	past := w.Shown.Sub(sc.Instant.UTC()).Hours() * 1.00273790935
	return text + "LST " + strings.Replace(astro.Hours(sc.Frame.LST.Hours() + past).Turn().HMS(0)[:5], " ", "h", 1)
}

// skyLine says what part of the night it is, until when it is dark, and where
// Sun and Moon are.
func skyLine(w *World, p *Pen) {
	sc := &w.Snap.Scene
	p.Put(Text, otherClocks(w)+"  "+partWords(sc)+fmt.Sprintf("  Sun %+.0fd", sc.Sun.Place.Alt.Deg()))
	m := &sc.Moon
	p.Put(Text, fmt.Sprintf("  Moon %.0f%% %+.0fd", 100*sc.Phase.Illuminated, m.Place.Alt.Deg()))
	n := sc.Night
	next := ""
	if set := following(n.Moonset, sc.Instant); m.Place.Alt.Deg() > 0 && set != nil {
		next = " sets " + Clock(*set)
	} else if rise := following(n.Moonrise, sc.Instant); m.Place.Alt.Deg() <= 0 && rise != nil {
		next = " rises " + Clock(*rise)
	}
	if p.Used()+len(next) <= p.Width() { // never half a time
		p.Put(Text, next)
	}
}

func following(list []astro.Instant, at astro.Instant) *astro.Instant {
	for i := range list {
		if at.Before(list[i]) {
			return &list[i]
		}
	}
	return nil
}

// partWords names the part of the night and its next change.
func partWords(sc *moment.Scene) string {
	n, at := sc.Night, sc.Instant
	for _, s := range n.Ast.Below {
		switch {
		case s.Contains(at):
			return "dark till " + Clock(s.Until)
		case at.Before(s.From):
			return short(sc.Part) + ", dark " + Clock(s.From)
		}
	}
	if len(n.Ast.Below) == 0 {
		return short(sc.Part) + ", never dark"
	}
	return short(sc.Part) + ", sunrise " + clockOf(n.Sunrise)
}

// short leaves the word twilight to the reader's wits where it is long.
func short(part string) string {
	return strings.NewReplacer("astronomical twilight", "astro. twilight", "nautical twilight", "naut. twilight").Replace(part)
}

func clockOf(t *astro.Instant) string {
	if t == nil {
		return "-"
	}
	return Clock(*t)
}
