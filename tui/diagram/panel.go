package diagram

import (
	"fmt"

	"evenfall/tui/kit"
)

// panel writes the lines beside the plot.
func (s Screen) panel(w *kit.World, sel *spot, width int) []words {
	var out []words
	say := func(role kit.Role, text string) {
		for _, line := range kit.Break(text, width, 2) {
			out = append(out, words{{role, line}})
		}
	}
	gap := func() { out = append(out, nil) }
	out = append(out, heading(w, sel))
	if sel != nil {
		if why := s.missing(sel); why != "" {
			say(kit.Warn, why)
		}
		for k := range pairs {
			for _, f := range figures(&sel.v.Place, (k+s.axes)%2) {
				say(kit.Text, f)
			}
		}
		if m := sel.v.MassMsun; m > 0 {
			say(kit.Text, fmt.Sprintf("%s Msun now, [Fe/H] %+.1f", short(m), sel.v.FeH))
		}
		for i, e := range sel.v.Evidence {
			if i < 2 {
				say(kit.Dim, fmt.Sprintf("%+.1f %s", e.Log10Odds, e.What))
			}
		}
	}
	gap()
	if sel != nil {
		if n := s.company(sel); n > 0 {
			say(kit.Text, fmt.Sprintf("+%d: that many more in its cell", n))
		}
	}
	for _, p := range s.notes(sel) {
		say(p.role, p.text)
	}
	if s.pic != nil && s.pic.source != "" {
		say(kit.Dim, "source: "+s.pic.source)
	}
	gap()
	return append(out, s.legend(width)...)
}

// legend lists the letters on the diagram, with how many each stands for.
func (s Screen) legend(width int) []words {
	if s.placed == nil {
		return nil
	}
	out := []words{{{kit.Title, "letters"}, {kit.Dim, ", capitals for several"}}}
	for _, g := range kit.Stages {
		n := s.placed.signs[g.Sign]
		if n == 0 {
			continue
		}
		out = append(out, words{{kit.Text, fmt.Sprintf("%c %5d  ", g.Sign, n)}, {kit.Dim, kit.Cut(g.Words, width-9)}})
	}
	out = append(out, words{{kit.Selected, "[ ]"}, {kit.Dim, " selected, bars 68 %"}}, words{{kit.Mark, "*"}, {kit.Dim, "   marked"}})
	return out
}
