package main

import (
	"fmt"
	"os"
	"strconv"

	"github.com/charmbracelet/x/term"

	"evenfall/tui"
)

// terminalSize returns the width of the terminal that standard output is, 0
// where it is none, and whether input and output are both a terminal. COLUMNS
// decides where there is no terminal.
func terminalSize() (width int, both bool) {
	out := term.IsTerminal(os.Stdout.Fd())
	if !out {
		width, _ = strconv.Atoi(os.Getenv("COLUMNS"))
		return max(width, 0), false
	}
	width, _, err := term.GetSize(os.Stdout.Fd())
	if err != nil || width <= 0 {
		width = defaultWidth
	}
	return width, term.IsTerminal(os.Stdin.Fd())
}

// openScreen shows the list in the terminal.
func openScreen(w world, o *options) error {
	if os.Getenv("TERM") == "dumb" {
		return runList(w, o)
	}
	quiet := w
	s, err := openSession(quiet, o)
	if err != nil {
		return err
	}
	return tui.Open(func() tui.Page {
		fresh := *s
		if o.at == "" && o.night == "" {
			if err := fresh.setTime(w, o); err != nil {
				fresh.at = s.at
			}
		}
		fresh.compute(o)
		return fresh.page()
	}, w.in, w.out)
}

// page makes the rows of the screen.
func (s *session) page() tui.Page {
	t := s.at.UTC()
	p := tui.Page{Title: "evenfall  " + s.site.Name}
	if s.demo {
		p.Title = "evenfall  DEMONSTRATION  " + s.site.Name
	}
	p.Time = fmt.Sprintf("%s  LST %s  %s  Moon %.0f %% lit", t.Format("Mon 2 Jan 2006 15:04 UTC"),
		s.scene.Frame.LST.HMS(0), s.scene.Part, 100*s.scene.Phase.Illuminated)
	for _, i := range s.order {
		m := &s.moments[i]
		row := tui.Row{Name: s.targets[i].Name, Kind: string(s.targets[i].Kind), Airmass: "-",
			Stage: stageWord(&m.Stage), Expected: expectWord(&m.Expect)}
		row.Altitude = fmt.Sprintf("%.1f%s", m.Apparent.Deg(), map[bool]string{true: "+", false: "-"}[m.Rising])
		if m.AirOK {
			row.Airmass = fmt.Sprintf("%.2f", float64(m.Airmass))
		}
		if !m.InCan {
			row.Blocked = blockedWord(m)
		}
		p.Rows = append(p.Rows, row)
	}
	return p
}
