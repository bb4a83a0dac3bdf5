package finder

import (
	"fmt"
	"math"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/finding"
	"evenfall/tui/kit"
)

// compass draws north and east in the lower left corner and the scale in the
// lower right one.
func (s *sketch) compass() {
	if s.cols < 24 || s.rows < 8 {
		return
	}
	arm := 9.0 // dots
	x0, y0 := 14, 4*s.rows-16
	for _, d := range []struct {
		east, north float64
		sign        string
	}{{0, 1, "N"}, {1, 0, "E"}} {
		right, up, _ := s.camera.On(finding.Offset{EastArcsec: d.east, NorthArcsec: d.north})
		x, y := x0+int(math.Round(right*arm)), y0-int(math.Round(up*arm))
		s.canvas.Line(x0, y0, x, y, kit.Title)
		s.write(x+int(math.Round(2*right)), y-int(math.Round(3*up)), kit.Title, d.sign)
	}
	long, label := barOf(s.perDot * float64(s.cols) / 2)
	cells := max(int(math.Round(long/s.perDot/2)), 1)
	from := s.cols - cells - 2
	s.put(from-len(label)-2, s.rows-1, kit.Title, " "+label+" ")
	for c := from; c < from+cells; c++ {
		s.put(c, s.rows-1, kit.Title, "=")
	}
}

// barOf returns a round length no longer than asked, arcsec.
func barOf(most float64) (arcsec float64, label string) {
	steps := []float64{0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 30, 60, 120, 300, 600, 1200, 1800, 3600, 7200, 18000}
	arcsec = steps[0]
	for _, v := range steps {
		if v <= most {
			arcsec = v
		}
	}
	if arcsec >= 60 {
		return arcsec, fmt.Sprintf("%g'", arcsec/60)
	}
	return arcsec, fmt.Sprintf("%g\"", arcsec)
}

// target marks the middle.
func (s *sketch) target(t *targets.Target) {
	x, y := s.dot(0, 0)
	if t.Kind == targets.PN && t.Nebula.DiamArcsec.Known {
		s.write(x, y, kit.Selected, "+")
		return
	}
	if !s.write(x-2, y, kit.Selected, "[+]") {
		s.write(x, y, kit.Selected, "+")
	}
}

// guides writes the stars to offset from by their numbers.
func (s *sketch) guides(list []finding.Guide) {
	for k := range list {
		o := list[k].From // from the star to the target
		x, y := s.dot(-o.EastArcsec, -o.NorthArcsec)
		if !s.write(x-2, y, kit.Key, fmt.Sprintf("(%d)", k+1)) {
			s.write(x, y, kit.Key, fmt.Sprint(k+1))
		}
	}
}

// signs stand for brightness: down to a magnitude.
var signs = []struct {
	to   float64
	sign string
}{{10, "#"}, {13, "O"}, {16, "o"}}

// neighbours draws the field stars on the night.
func (s *sketch) neighbours(list []targets.Target, own *finding.Found, at astro.Instant) {
	for i := range list {
		o := finding.Between(own.Dir, finding.Tonight(&list[i], at).Dir)
		if o.SepArcsec < 1 {
			continue
		}
		x, y := s.dot(o.EastArcsec, o.NorthArcsec)
		sign := "."
		if mag, ok := brightness(&list[i]); ok {
			for k := len(signs) - 1; k >= 0; k-- {
				if mag <= signs[k].to {
					sign = signs[k].sign
				}
			}
		}
		s.write(x, y, kit.Text, sign)
	}
}

// brightness is a magnitude in a band that the eye or a guider sees.
func brightness(t *targets.Target) (float64, bool) {
	for _, b := range []targets.Band{"V", "G", "r", "R", "RP", "g", "BP", "B", "I", "i"} {
		if m, ok := t.Mags[b]; ok && m.Known && !math.IsNaN(m.Value) {
			return m.Value, true
		}
	}
	return 0, false
}

// companion draws a listed close companion.
func (s *sketch) companion(t *targets.Target) {
	g, ok := finding.GlareOf(t, 0, "V")
	if !ok {
		return
	}
	if t.Physics.CompP.Known {
		x, y := s.dot(g.EastArcsec, g.NorthArcsec)
		if s.write(x, y, kit.Warn, "c") {
			s.say(ofCompanion, kit.Warn, "c: "+g.Words)
			return
		}
	}
	s.say(ofCompanion, kit.Warn, g.Words)
}

// words says the rest: the motion, the offsets.
func (s *sketch) words(f *finding.Found, guides []finding.Guide, all, near int) {
	s.say(ofMotion, kit.Text, f.Words)
	switch {
	case all == 0:
		s.say(ofGuide, kit.Dim, "no neighbours are known: put tables of them into field/ of the run folder")
	case near == 0:
		s.say(ofGuide, kit.Dim, "no neighbours here in field/")
	case len(guides) == 0:
		s.say(ofGuide, kit.Dim, "none of the neighbours will do to offset from")
	}
	for k := range guides {
		g := &guides[k]
		role, rank := kit.Text, ofOthers
		if k == 0 {
			role, rank = kit.Key, ofGuide
		}
		s.say(rank, role, fmt.Sprintf("(%d) %s", k+1, g.Words))
	}
	if near > 0 {
		s.say(ofOthers, kit.Dim, "# to 10 mag, O 13, o 16, . fainter; [+] target")
	}
}
