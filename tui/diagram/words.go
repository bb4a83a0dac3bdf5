package diagram

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"evenfall/astro"
	"evenfall/targets/stage"
	"evenfall/tui/kit"
)

// piece is some text in a role, words a line of them.
type (
	piece struct {
		role kit.Role
		text string
	}
	words []piece
)

// figure writes a value with its interval, the smaller end first.
func figure(i astro.Interval, unit string, write func(float64) string) string {
	text := write(i.Mid)
	if i.Valid() && i.Lo < i.Hi {
		text += "  " + write(i.Lo) + ".." + write(i.Hi)
	}
	if unit != "" {
		text += " " + unit
	}
	return text
}

// power writes 10^x to three figures.
func power(x float64) string { return short(math.Pow(10, x)) }

// short writes a number to three figures.
func short(v float64) string {
	switch a := math.Abs(v); {
	case math.IsNaN(v) || math.IsInf(v, 0):
		return "?"
	case a >= 1e7 || a < 1e-3 && a > 0:
		return strings.Replace(strings.Replace(strconv.FormatFloat(v, 'e', 1, 64), "e+0", "e", 1), "e-0", "e-", 1)
	case a >= 100:
		unit := math.Pow(10, math.Floor(math.Log10(a))-2)
		return strconv.FormatFloat(math.Round(v/unit)*unit, 'f', 0, 64)
	}
	return strconv.FormatFloat(v, 'g', 3, 64)
}

func hundredths(v float64) string { return strconv.FormatFloat(v, 'f', 2, 64) }

// figures writes where a target stands on a pair of axes.
func figures(p *stage.Placing, k int) []string {
	if _, _, ok := pairs[k].place(p); !ok {
		return nil
	}
	if k == 0 {
		return []string{"T " + figure(p.LogT, "K", power), "L " + figure(p.LogL, "Lsun", power)}
	}
	return []string{"M_G " + figure(p.AbsG, "mag", hundredths), "BP-RP " + figure(p.Colour, "mag", hundredths)}
}

// heading is the selected star and what it is.
func heading(w *kit.World, sel *spot) words {
	var out words
	if w.Entry() == nil {
		return words{{kit.Dim, "no star is selected"}}
	}
	if w.Marks[w.Selected] {
		out = append(out, piece{kit.Mark, "* "})
	}
	out = append(out, piece{kit.Selected, w.Entry().Target.Name})
	if sel == nil {
		return append(out, piece{kit.Dim, "  placing it ..."})
	}
	if word := strings.Join(strings.Fields(kit.StageWord(sel.v)), " "); word != "" {
		out = append(out, piece{kit.Good, "  " + word + " %"})
	}
	return out
}

// below writes the lines under the plot: what is selected, then what one
// should know of the rest.
func (s Screen) below(w *kit.World, sel *spot, width, lines int) []words {
	if lines == 0 {
		return nil
	}
	first := heading(w, sel)
	used := 0
	for _, p := range first {
		used += len(p.text)
	}
	add := func(role kit.Role, text string) bool {
		if used+3+len(text) > width {
			return false
		}
		first, used = append(first, piece{role, "   " + text}), used+3+len(text)
		return true
	}
	if sel != nil {
		if why := s.missing(sel); why != "" && !add(kit.Warn, why) && !add(kit.Warn, "not placed: "+whyNot(sel.v)) {
			add(kit.Warn, "not placed")
		}
		for _, f := range figures(&sel.v.Place, s.axes) {
			add(kit.Text, f)
		}
		if m := sel.v.MassMsun; m > 0 {
			add(kit.Text, short(m)+" Msun")
		}
	}
	if lines == 1 {
		return []words{first}
	}
	var second words
	used = 0
	for _, p := range s.notes(sel) {
		if used > 0 {
			p.text = "   " + p.text
		}
		if used+len(p.text) > width {
			continue
		}
		second, used = append(second, p), used+len(p.text)
	}
	return []words{first, second}
}

// missing says why the selected star does not stand on the diagram, and
// whether it does on the other.
func (s Screen) missing(sel *spot) string {
	if _, _, ok := pairs[s.axes].place(&sel.v.Place); ok {
		return ""
	}
	text := "not placed: " + whyNot(sel.v)
	if _, _, ok := pairs[1-s.axes].place(&sel.v.Place); ok {
		text += "; h shows it by " + []string{"temperature", "colour"}[1-s.axes]
	}
	return text
}

// notes are what one should know of the diagram, most telling first.
func (s Screen) notes(sel *spot) []piece {
	var out []piece
	say := func(role kit.Role, format string, a ...any) {
		out = append(out, piece{role, fmt.Sprintf(format, a...)})
	}
	if s.placed == nil {
		return nil
	}
	if !s.placed.done() {
		say(kit.Warn, "placing %d of %d", len(s.placed.spots), s.placed.limit())
	}
	if s.pic != nil && sel != nil {
		switch {
		case s.pic.key.track != trackOf(sel.v):
			say(kit.Dim, "its life follows")
		case s.pic.life != "":
			say(kit.Curve, "%s", s.pic.life)
		default:
			say(kit.Dim, "no track for it")
		}
	}
	out = append(out, s.left()...)
	if s.zoom > 0 {
		say(kit.Text, "zoom %d x", 1<<s.zoom)
	}
	return out
}

// company is how many other stars stand in the selected one's cell.
func (s Screen) company(sel *spot) int {
	if s.pic == nil {
		return 0
	}
	k := &s.pic.key
	x, y, ok := pairs[k.axes].place(&sel.v.Place)
	if !ok {
		return 0
	}
	col, row, in := k.win.cell(x.Mid, y.Mid, k.cols, k.rows)
	if !in {
		return 0
	}
	n := int(s.pic.count[row*k.cols+col])
	if _, among := k.placed.index[sel.row]; among {
		n--
	}
	return max(n, 0)
}

// left says how many targets are not on the diagram, and why.
func (s Screen) left() []piece {
	var out []piece
	p := s.placed
	if n := len(p.spots) - p.on[s.axes]; n > 0 {
		text := fmt.Sprintf("%d of %d not placed: ", n, len(p.spots))
		for i, why := range p.why[s.axes] {
			switch {
			case i == 0 && why.n == n:
				text += why.text
			case i == 0:
				text += fmt.Sprintf("%s %d", why.text, why.n)
			case i == 1 && len(p.why[s.axes]) == 2:
				text += fmt.Sprintf(", %s %d", why.text, why.n)
			case i == 1:
				text += ", ..."
			}
		}
		out = append(out, piece{kit.Dim, text})
	}
	if len(p.order) > most {
		out = append(out, piece{kit.Warn, fmt.Sprintf("the first %d of %d", most, len(p.order))})
	}
	if s.pic != nil && s.pic.beyond > 0 {
		out = append(out, piece{kit.Dim, fmt.Sprintf("%d outside", s.pic.beyond)})
	}
	return out
}
