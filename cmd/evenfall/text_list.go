package main

import (
	"fmt"
	"io"
	"strings"
	"time"

	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/moment"
	"evenfall/targets/stage"
)

const (
	defaultWidth = 80  // where output is no terminal
	wideFrom     = 116 // from here on, the limit that ends the window and the position
	widestFrom   = 129 // and the kind
	nameWidth    = 14
)

// listText prints the list for people: a head of three lines, the targets to
// take, the blocked ones below.
func (s *session) listText(w io.Writer, width int) error {
	if width == 0 {
		width = defaultWidth
	}
	var b strings.Builder
	s.head(&b)
	fmt.Fprintln(&b, cut(listHeading(width), width))
	said := false
	for _, i := range s.order {
		m := &s.moments[i]
		if !m.InCan && !said {
			fmt.Fprintln(&b, "not now:")
			said = true
		}
		if m.InCan {
			said = false
		}
		fmt.Fprintln(&b, cut(s.row(i, width), width))
	}
	if len(s.order) == 0 {
		fmt.Fprintln(&b, "no targets: the list is empty")
	}
	fmt.Fprintf(&b, "%s\n", s.legend())
	_, err := io.WriteString(w, b.String())
	return err
}

// head prints site, time and sky.
func (s *session) head(b *strings.Builder) {
	fmt.Fprintln(b, s.heading())
	t := s.at.UTC()
	line := t.Format("Mon 2 Jan 2006 15:04:05 UTC")
	if s.site.Zone != "" {
		line += t.In(s.location()).Format("  15:04 local")
	}
	fmt.Fprintf(b, "%s  LST %s  night of %s\n", line, s.scene.Frame.LST.HMS(0), s.night.Date)
	moon := &s.scene.Moon
	fmt.Fprintf(b, "%s, Sun %+.1f deg  Moon %+.1f deg, %.0f %% lit\n", s.scene.Part,
		s.scene.Sun.Place.Alt.Deg(), moon.Place.Alt.Deg(), 100*s.scene.Phase.Illuminated)
}

func listHeading(width int) string {
	h := fmt.Sprintf("take %-*s %-8s %-18s %6s %4s %5s %4s %5s %3s", nameWidth, "name", "stage  %",
		"expected", "alt ", "X", "best", "X", "left", "Mn")
	if width >= wideFrom {
		h += "  ends by      ICRS at the moment"
	}
	if width >= widestFrom {
		h += "    kind"
	}
	return h
}

// row prints one target.
func (s *session) row(i, width int) string {
	t, m := &s.targets[i], &s.moments[i]
	head := fmt.Sprintf("%-*s %-8s %-18s", nameWidth, cut(t.Name, nameWidth), stageWord(&m.Stage), expectWord(&m.Expect))
	if !m.InCan {
		return "  -  " + head + " " + blockedWord(m)
	}
	sign, mark := "-", " "
	if m.Rising {
		sign = "+"
	}
	if !m.InShould {
		mark = "~"
	}
	best, bestX := "--:--", "-"
	if m.Course.Best != nil {
		best = m.Course.Best.UTC().Round(time.Minute).Format("15:04")
		bestX = fmt.Sprintf("%.2f", float64(m.Course.BestAirmass))
	}
	line := fmt.Sprintf("%3d%s %s %5.1f%s %4.2f %5s %4s %5s %3.0f", m.Rank, mark, head, m.Apparent.Deg(), sign,
		float64(m.Airmass), best, bestX, left(m.Left), m.MoonSep.Deg())
	if width >= wideFrom {
		line += fmt.Sprintf("  %-11s  %s %s", m.EndsBy, m.RA.HMS(1), m.Dec.DMS(0))
	}
	if width >= widestFrom {
		line += "  " + string(t.Kind)
	}
	return line
}

// blockedWord says why a target cannot be taken and when that ends.
func blockedWord(m *moment.Moment) string {
	open := m.NextOpen()
	reason := firstReason(m)
	if open == nil {
		if len(m.Course.Can) == 0 {
			return reason + "; not tonight"
		}
		return reason + "; no more tonight"
	}
	return reason + "; from " + open.UTC().Round(time.Minute).Format("15:04")
}

// firstReason shortens the most telling block for a list.
func firstReason(m *moment.Moment) string {
	short := map[targets.Code]string{
		targets.CodeDaylight: "daylight", targets.CodeSun: "near the Sun", targets.CodeBelow: "below horizon",
		targets.CodeAltitude: "too low", targets.CodeHorizon: "behind the horizon", targets.CodeZenith: "near the zenith",
		targets.CodeHourAngle: "hour angle", targets.CodeDeclination: "declination", targets.CodeMoon: "near the Moon",
		targets.CodeWind: "wind", targets.CodeWindow: "not our hours", targets.CodeClosed: "closed",
		targets.CodeInstrument: "not mounted",
	}
	for _, b := range m.BlockedBy {
		if w, ok := short[b.Code]; ok {
			return w
		}
		return string(b.Code)
	}
	return "blocked"
}

// stageWord is the judgement with its probability in per cent, 99 at most;
// two codes merged go without.
func stageWord(v *stage.Verdict) string {
	word := v.Best
	switch v.Best {
	case targets.Undecided:
		word = "undec"
	case targets.Merged:
		return v.Best
	}
	return fmt.Sprintf("%-5s %2.0f", word, min(100*stageP(v), 99))
}

// stageP is the probability of the answer given.
func stageP(v *stage.Verdict) float64 {
	switch v.Best {
	case targets.Merged:
		return v.P[targets.RGB] + v.P[targets.EAGB]
	case targets.Undecided:
		most := 0.0
		for _, p := range v.P {
			most = max(most, p)
		}
		return most
	}
	return v.P[targets.Stage(v.Best)]
}

// expectWord is the expected brightness: band, value, interval.
func expectWord(f *light.Forecast) string {
	switch {
	case f.SB != nil:
		return fmt.Sprintf("%-2s%5.1f %5.1f/sq\"", f.Band, f.Mag.Mags(), f.SB.Value.MagArcsec2())
	case !f.Known:
		return "not known"
	case f.Phase != nil && f.Phase.Status == light.PhaseUnknown:
		return fmt.Sprintf("%-2s  any %.1f..%.1f", f.Band, f.Lo.Mags(), f.Hi.Mags())
	}
	return fmt.Sprintf("%-2s%5.1f %.1f..%.1f", f.Band, f.Mag.Mags(), f.Lo.Mags(), f.Hi.Mags())
}

// left writes a duration as hours and minutes.
func left(d time.Duration) string {
	minutes := int(d.Round(time.Minute).Minutes())
	if minutes < 60 {
		return fmt.Sprintf("%dm", minutes)
	}
	return fmt.Sprintf("%dh%02d", minutes/60, minutes%60)
}

// cut shortens a line to a width in characters.
func cut(s string, width int) string {
	r := []rune(s)
	if len(r) <= width {
		return s
	}
	return strings.TrimRight(string(r[:width]), " ")
}

func (s *session) legend() string {
	level := 100 * light.DefaultLevel
	if len(s.moments) > 0 {
		level = 100 * s.moments[0].Expect.Level
	}
	return fmt.Sprintf("alt: refracted, deg, + rising - sinking; X: airmass; best, from: UTC; Mn: deg\n"+
		"from the Moon; ~ possible but outside the wished-for limits; stage: likeliest,\n"+
		"its %%; expected: band, magnitude, %.0f %% interval with the brighter end first", level)
}
