package dome

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"evenfall/astro"
	"evenfall/astro/air"
	"evenfall/astro/frame"
	"evenfall/targets"
	"evenfall/targets/finding"
	"evenfall/targets/moment"
	"evenfall/tui/kit"
)

// piece is text in a role; words are a line of them.
type (
	piece struct {
		role kit.Role
		text string
	}
	words []piece
)

// where writes azimuth and altitude.
func where(azDeg, altDeg float64) string {
	return fmt.Sprintf("az %03.0f %s, alt %.0f", math.Mod(math.Round(azDeg), 360), finding.Compass(azDeg), altDeg)
}

// skyWords writes how bright the sky is.
func skyWords(s *moment.SkyNow) string {
	if !s.Known {
		return "sky not known"
	}
	return fmt.Sprintf("sky %s %.1f", s.Band, s.Total.MagArcsec2())
}

// heading says where the selected star is.
func (s Screen) heading(w *kit.World, m *moment.Moment) words {
	if w.Entry() == nil {
		return words{{kit.Dim, "no star is selected"}}
	}
	name := w.Entry().Target.Name
	if w.Marks[w.Selected] {
		name = "* " + name
	}
	out := words{{kit.Selected, name}}
	if m == nil {
		return append(out, piece{kit.Dim, "  working it out ..."})
	}
	text := fmt.Sprintf("  %c  %s %s", kit.StageSign(m.Stage.Best), where(m.Place.Az.Deg(), m.Apparent.Deg()), kit.Sense(m.Rising))
	if m.AirOK {
		text += fmt.Sprintf("  X %.2f  %s", float64(m.Airmass), skyWords(&m.Sky))
	}
	return append(out, piece{kit.Text, text + fmt.Sprintf("  Moon %.0f deg", m.MoonSep.Deg())})
}

// change is when a limit begins or ends to hold.
type change struct {
	at   astro.Instant
	text string
}

// limitWords says what forbids the selected star now and until when, and what
// will.
func limitWords(sc *moment.Scene, m *moment.Moment) []words {
	var out []words
	blocked := map[targets.Code]bool{}
	for _, b := range m.BlockedBy {
		blocked[b.Code] = true
		text := b.Words
		if b.Code == targets.CodeSun {
			text = "refused: " + text + "; the observatory's rules come first"
		}
		out = append(out, words{{kit.Warn, text}})
	}
	var coming []change
	for _, l := range m.Course.HardLimits() {
		if !blocked[l.Code] && l.Code != targets.CodeBelow { // too low comes first
			coming = append(coming, begins(sc, l)...)
		}
	}
	if flip, ok := m.Course.Flip(); ok && flip.Until.After(sc.Instant) {
		coming = append(coming, change{flip.From, fmt.Sprintf("%s-%s mount turns over", kit.Clock(flip.From), kit.Clock(flip.Until))})
	}
	slices.SortStableFunc(coming, func(a, b change) int { return a.at.UTC().Compare(b.at.UTC()) })
	if len(m.BlockedBy) == 0 {
		text := "can be taken"
		if m.InShould {
			text = "can and should be taken"
		}
		out = append(out, words{{kit.Good, text}})
		if len(coming) == 0 {
			out[0] = append(out[0], piece{kit.Text, "; nothing forbids it for the rest of the night"})
		}
	}
	if len(coming) > 0 {
		parts := make([]string, len(coming))
		for i := range coming {
			parts[i] = coming[i].text
		}
		text := strings.Join(parts, ", ")
		if !strings.Contains(parts[0][:min(6, len(parts[0]))], "-") {
			text = "from " + text
		}
		if len(m.BlockedBy) == 0 {
			out[0] = append(out[0], piece{kit.Text, "; " + text})
		} else {
			out = append(out, words{{kit.Text, text}})
		}
	}
	return out
}

// begins says when a limit forbids next.
func begins(sc *moment.Scene, l moment.LimitTimes) []change {
	for i, k := range l.Kept {
		if !k.Contains(sc.Instant) || !k.Until.Before(sc.Night.Span.Until) {
			continue
		}
		when := kit.Clock(k.Until)
		if i+1 < len(l.Kept) {
			when = kit.Clock(k.Until) + "-" + kit.Clock(l.Kept[i+1].From)
		}
		name := kit.ShortReason(l.Code)
		if l.Code == targets.CodeZenith && sc.Night.Limits.Mount == "altaz" {
			name = "zenith keyhole"
		}
		return []change{{k.Until, when + " " + name}}
	}
	return nil
}

// cursorWords says what is at the cursor.
func (s Screen) cursorWords(w *kit.World) words {
	az, alt, ok := s.cursor(w)
	if !ok {
		return nil
	}
	sc := &w.Snap.Scene
	p := towards(&sc.Frame, az, air.Unrefract(astro.Deg(alt), sc.Night.Site.Air).Deg())
	now := sc.SkyAt(&p, moment.SkyBand)
	text := "{ } " + where(az, alt)
	if x, err := air.Mass(astro.Deg(alt)); err == nil {
		text += fmt.Sprintf("  X %.2f", float64(x))
	}
	text += fmt.Sprintf("  %s  Moon %.0f", skyWords(&now), astro.Separation(p.Dir, sc.Moon.Dir).Deg())
	out := words{{kit.Key, text}}
	if why := forbids(sc, &p, alt); why != "" {
		out = append(out, piece{kit.Warn, "  " + why})
	}
	if s.pic != nil {
		if i, away := s.pic.nearest(p.Dir); i >= 0 && int(s.pic.spots[i].row) < w.Snap.Roster.Len() {
			out = append(out, piece{kit.Text, fmt.Sprintf("  nearest %s %.1f deg", w.Snap.Roster.Entry(int(s.pic.spots[i].row)).Target.Name, away.Deg())})
		}
	}
	return out
}

// forbids says why the telescope cannot point at a place.
func forbids(sc *moment.Scene, p *frame.Place, altDeg float64) string {
	l := &sc.Night.Limits
	z := zonesOf(sc)
	sign, _ := z.sign(&sc.Frame, p.Az.Deg(), p.Alt.Deg())
	h := p.HourAngle.Hours()
	switch {
	case sign == 'x':
		return fmt.Sprintf("refused: %.0f deg from the Sun, limit %.0f; the observatory's rules come first", astro.Separation(p.Dir, sc.Sun.Dir).Deg(), l.Sun.Deg())
	case altDeg < l.MinAltitude.Deg():
		return fmt.Sprintf("too low, limit %.0f", l.MinAltitude.Deg())
	case len(l.Horizon) > 0 && altDeg < moment.HorizonAt(l.Horizon, p.Az).Deg():
		return "behind the horizon"
	case altDeg > moment.Top(l, sc.Night.Site.Lat).Deg():
		return fmt.Sprintf("near the zenith, limit %.1f", moment.Top(l, sc.Night.Site.Lat).Deg())
	case h < l.HourAngleH[0] || h > l.HourAngleH[1]:
		return fmt.Sprintf("hour angle %+.1f h", h)
	case p.Dec.Deg() < l.DeclinationDeg[0] || p.Dec.Deg() > l.DeclinationDeg[1]:
		return fmt.Sprintf("declination %+.0f", p.Dec.Deg())
	case sign == 'o':
		return "near the Moon"
	case sign == '~':
		return "cloud"
	case sign == '/':
		return "wind"
	}
	return ""
}

// corner writes what stands beside the arch: where Moon and Sun are, and what
// the shades mean.
func (s Screen) corner(w *kit.World) (left, right []string) {
	sc := &w.Snap.Scene
	left = append(left, fmt.Sprintf("Moon %.0f %%, alt %+.0f", 100*sc.Phase.Illuminated, sc.Moon.Place.Alt.Deg()), fmt.Sprintf("Sun alt %+.0f", sc.Sun.Place.Alt.Deg()))
	if s.pic == nil {
		return left, nil
	}
	if s.pic.skyKnown {
		right = append(right, fmt.Sprintf("V/sq\" darkest %.1f", s.pic.darkest))
		text := ""
		for _, d := range s.pic.shades {
			text += fmt.Sprintf(" %c%.1f", d.sign, s.pic.darkest-d.from)
		}
		if text != "" {
			right = append(right, text[1:])
		}
	} else {
		right = append(right, "sky not known")
	}
	return left, right
}

// legend says what the signs mean, for screens with room.
func (s Screen) legend(w *kit.World) []string {
	out := []string{"letters: stages as on the diagram, capitals for several", "+ rises, - sinks; [ ] selected; its path with hours UTC", "numbers: V mag per square arcsec; left altitude, right airmass", "dots: least altitude, limits of the hour angle, horizon; Z zenith, in dots how near it one may go"}
	if s.pic == nil {
		return out
	}
	for _, z := range []struct {
		sign byte
		text string
	}{{'x', "near the Sun: refused"}, {'o', "near the Moon"}, {'~', "cloud"}, {'/', "wind"}} {
		if s.pic.zones[z.sign] {
			out = append(out, fmt.Sprintf("%c %s", z.sign, z.text))
		}
	}
	if n := len(w.Snap.Order); n > most {
		out = append(out, fmt.Sprintf("the first %d of %d targets", most, n))
	}
	return append(out, fmt.Sprintf("%d targets up, %d below the horizon", len(s.pic.spots), s.pic.below))
}
