package next

import (
	"fmt"
	"slices"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/taking"
	"evenfall/tui/kit"
)

// reasons draws what lies below the list: the selected star, why it stands
// where it stands, what it is, and what could spoil it.
func reasons(w *kit.World, p *kit.Pen, lines int) {
	if lines <= 0 {
		return
	}
	from := p.Lines()
	e := w.Entry()
	m := w.Moment()
	switch {
	case e == nil:
		p.Put(kit.Dim, counts(w)).Line()
		return
	case m == nil:
		p.Put(kit.Title, e.Target.Name).Put(kit.Dim, "  working it out ...").Line()
		return
	}
	p.Put(kit.Text, counts(w)).Put(kit.Title, e.Target.Name).Put(kit.Text, "  "+string(e.Target.Kind))
	if place := "  ICRS " + m.RA.HMS(2) + " " + m.Dec.DMS(1); p.Used()+len(place) <= p.Width() {
		p.Put(kit.Text, place) // never half a coordinate
	}
	p.Put(kit.Warn, flags(w, m)).Line()
	// the next happening stands beside what the star is, where nothing is said
	// twice
	is, later := whatItIs(m), coming(w, lines > 3)
	if len(later) > 0 && lines <= 3 {
		is, later = append([]string{is[0], later[0]}, is[1:]...), nil
		if len(is[0])+2+len(is[1]) > p.Width() {
			is = []string{is[1], stageOf(m)}
		}
	} else if len(later) > 0 {
		is, later = append([]string{later[0]}, is...), later[1:]
	}
	reason, is := how(m, why(w, m), is, p.Width(), lines <= 3)
	for _, clauses := range [][]string{reason, is, brightness(m)} {
		room := lines - (p.Lines() - from)
		if room <= 0 {
			return
		}
		if lines <= 3 {
			p.Put(kit.Text, fitting(clauses[:min(2, len(clauses))], p.Width())).Line()
			continue
		}
		for _, line := range short(strings.Join(clauses, "; "), p.Width(), room) {
			p.Put(kit.Text, line).Line()
		}
	}
	if p.Lines()-from >= lines {
		return
	}
	for _, text := range append(warnings(w, m), later...) {
		for _, line := range short(text, p.Width(), lines-(p.Lines()-from)) {
			p.Put(kit.Text, line).Line()
		}
	}
}

// how puts the exposure behind the reason. Where lines are dear it is but
// frames times seconds, on the line that has room; the columns say when the star
// is best.
func how(m *moment.Moment, why, is []string, width int, brief bool) (first, second []string) {
	switch {
	case !m.InCan || len(taking.Short(m)) == 0:
	case !brief:
		why = append(slices.Clone(why), taking.Short(m)...)
	default:
		text := taking.Brief(m)
		if text == "" {
			break
		}
		if len(why[0])+2+len(text) <= width {
			return []string{why[0], text}, is
		}
		return why, append([]string{text}, is...)
	}
	return why, is
}

// short wraps a text onto at most two lines.
func short(text string, width, lines int) []string {
	if lines <= 0 || text == "" {
		return nil
	}
	out := kit.Wrap(text, width, 2)
	return out[:min(len(out), lines, 2)]
}

// fitting joins as many clauses as fit on a line, whole ones; the first
// always.
func fitting(clauses []string, width int) string {
	text := clauses[0]
	for _, c := range clauses[1:] {
		if len(text)+2+len(c) <= width {
			text += "; " + c
		}
	}
	return kit.Cut(text, width)
}

// counts says where in the list the selection stands.
func counts(w *kit.World) string {
	if w.Snap == nil {
		return ""
	}
	if w.Place < 0 {
		return fmt.Sprintf("%d of %d  ", len(w.Snap.Order), w.Snap.Total)
	}
	return fmt.Sprintf("%d/%d  ", w.Place+1, len(w.Snap.Order))
}

// flags are the short warnings beside the name.
func flags(w *kit.World, m *moment.Moment) string {
	var out []string
	e := w.Entry()
	if e.Session {
		out = append(out, "typed in")
	}
	if e.Target.Physics.CompMag.Known {
		out = append(out, "! companion")
	}
	if w.Snap.Roster.Prepared(w.Selected).Drift.PerYear.Rad() > 0 {
		out = append(out, "! place uncertain")
	}
	if m.Stage.Best == string(targets.Undecided) {
		out = append(out, "! undecided")
	}
	if len(out) == 0 {
		return ""
	}
	return "  " + strings.Join(out, "  ")
}

// why says why the star stands where it stands, the main clause first.
func why(w *kit.World, m *moment.Moment) []string {
	end := fmt.Sprintf("until %s (%s)", kit.Clock(m.Window.Until), limit(m))
	switch {
	case !m.InCan:
		return blocked(m)
	case !m.InShould:
		return []string{"Outside the wishes (" + unwished(m) + "), possible " + end}
	case m.Rank == 1 && w.Snap.Take == 1:
		end = "The only one now, " + end
	case m.Rank == 1:
		end = fmt.Sprintf("First: no window closes sooner, %s (%s)", kit.Clock(m.Window.Until), limit(m))
	default:
		end = "Can wait " + end
	}
	return append([]string{end}, bestClause(m)...)
}

func bestClause(m *moment.Moment) []string {
	b := m.Course.Best
	if b == nil {
		return nil
	}
	switch gap := b.Sub(m.At); {
	case gap.Minutes() > 1:
		return []string{fmt.Sprintf("best in %s at X %.2f", kit.Left(gap), float64(m.Course.BestAirmass))}
	case gap.Minutes() < -1:
		return []string{fmt.Sprintf("past its best %s ago", kit.Left(-gap))}
	}
	return []string{"at its best now"}
}

// limit names what ends a window, as part of a sentence.
func limit(m *moment.Moment) string {
	l := &m.Course.Limits
	switch m.EndsBy {
	case "altitude":
		if m.InShould {
			if wish := l.WishAltitude; moment.AltitudeOfAirmass(l.WishAirmass).Less(wish) {
				return fmt.Sprintf("altitude %.0f", wish.Deg())
			}
			return fmt.Sprintf("X %.1f", l.WishAirmass)
		}
		return fmt.Sprintf("altitude %.0f", l.MinAltitude.Deg())
	case "daylight":
		return "twilight"
	case "moon":
		return "the Moon"
	case "hour_angle":
		return "the hour angle"
	case "zenith":
		return "the zenith"
	case "window":
		return "the allotted time"
	}
	return kit.ShortReason(m.EndsBy)
}

// unwished names the wished-for limit that a star is outside of.
func unwished(m *moment.Moment) string {
	l := &m.Course.Limits
	switch {
	case m.AirOK && float64(m.Airmass) > l.WishAirmass:
		return fmt.Sprintf("X %.2f, wished %.1f", float64(m.Airmass), l.WishAirmass)
	case m.Apparent.Less(l.WishAltitude):
		return fmt.Sprintf("altitude %.0f, wished %.0f", m.Apparent.Deg(), l.WishAltitude.Deg())
	}
	return "not fully dark"
}

// blocked says what forbids the star and when that ends.
func blocked(m *moment.Moment) []string {
	var out []string
	if open := m.NextOpen(); open != nil {
		out = append(out, "Not before "+kit.Clock(*open)+": "+m.BlockedBy[0].Words)
	} else {
		out = append(out, "Not now: "+m.BlockedBy[0].Words)
	}
	for _, b := range m.BlockedBy[1:] {
		out = append(out, b.Words)
	}
	return out
}

// stageOf is the likeliest stage with its probability.
func stageOf(m *moment.Moment) string {
	text := strings.Join(strings.Fields(kit.StageWord(&m.Stage)), " ")
	if strings.ContainsAny(text, "0123456789") {
		text += " %"
	}
	return text
}

// whatItIs gives the likeliest stage and what speaks for it.
func whatItIs(m *moment.Moment) []string {
	text := stageOf(m)
	var out []string
	for i, e := range m.Stage.Evidence {
		if i == 0 {
			out = append(out, text+": "+e.What)
		} else if i < 4 {
			out = append(out, e.What)
		}
	}
	if len(out) == 0 {
		return []string{text}
	}
	return out
}

// brightness says what the expected magnitude rests on.
func brightness(m *moment.Moment) []string {
	f := &m.Expect
	out := []string{"Expected " + strings.TrimSpace(kit.ExpectWord(f)) + fmt.Sprintf(" (%.0f %%)", 100*f.Level)}
	if f.Phase != nil && f.Phase.Status == light.PhaseUnknown {
		out = append(out, "phase unknown")
	} else if f.Phase != nil {
		out = append(out, fmt.Sprintf("phase %.2f +- %.2f, %s", f.Phase.Value, f.Phase.Sigma, f.Phase.Status))
	}
	for _, st := range f.States {
		out = append(out, fmt.Sprintf("%s %.0f %%: %.1f", st.Name, 100*st.P, st.Mag.Mags()))
	}
	if f.Basis != "" {
		out = append(out, f.Basis)
	}
	return out
}

// warnings are the lines that begin with a sign of their own.
func warnings(w *kit.World, m *moment.Moment) []string {
	var out []string
	p := w.Snap.Roster.Prepared(w.Selected)
	for _, line := range w.HandOver.Lines(&w.Entry().Target, m, p.Drift) {
		if strings.HasPrefix(line, "!") {
			out = append(out, line)
		}
	}
	if c := w.Entry().Target.Conflicts; c != "" {
		out = append(out, "! sources disagree: "+c)
	}
	return out
}

// coming dates what the star does next, with a countdown, the soonest first;
// expired dates where there is room for what says nothing.
func coming(w *kit.World, expired bool) []string {
	var out []string
	for i := range w.Coming {
		e := &w.Coming[i]
		if e.Status == light.EventExpired && !expired {
			continue
		}
		left := e.At.Sub(w.Snap.Scene.Instant)
		layout := "2006-01-02 15:04 UTC"
		switch {
		case !(e.SigmaS < 86400):
			layout = "2 Jan"
		case left < 20*time.Hour:
			layout = "15:04"
		}
		text := fmt.Sprintf("%s in %s, %s +- %s", e.Kind, kit.Until(left), e.At.UTC().Round(time.Minute).Format(layout), kit.Duration(e.SigmaS))
		if e.Status != light.EventGood {
			text += ", " + e.Status
		}
		out = append(out, text)
	}
	return out
}
