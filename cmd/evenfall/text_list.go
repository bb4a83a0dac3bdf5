package main

import (
	"fmt"
	"io"
	"strings"
	"time"

	"evenfall/targets/light"
	"evenfall/tui/kit"
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
	head := fmt.Sprintf("%-*s %-8s %-18s", nameWidth, cut(t.Name, nameWidth), kit.StageWord(&m.Stage), kit.ExpectWord(&m.Expect))
	if !m.InCan {
		return "  -  " + head + " " + kit.BlockedWord(m)
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
		float64(m.Airmass), best, bestX, kit.Left(m.Left), m.MoonSep.Deg())
	if width >= wideFrom {
		line += fmt.Sprintf("  %-11s  %s %s", m.EndsBy, m.RA.HMS(1), m.Dec.DMS(0))
	}
	if width >= widestFrom {
		line += "  " + string(t.Kind)
	}
	return line
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
