// Package help is the screen of keys and signs. The keys come from the one
// table that makes the handlers too.
package help

import (
	"fmt"

	"evenfall/tui/kit"
)

// Screen is the help for one screen.
type Screen struct {
	of      string // the screen it is about
	message string // the last message in full
	top     int
	kept    *kept // the text as broken for a width; used by who draws alone
}

type kept struct {
	width int
	lines []line
}

// New returns the help for a screen.
func New(of, message string) Screen { return Screen{of: of, message: message, kept: &kept{}} }

// Title names it.
func (s Screen) Title() string { return kit.OnHelp }

// Typing is never the case here.
func (s Screen) Typing() bool { return false }

// Apply takes nothing.
func (s Screen) Apply(*kit.World, kit.Result) kit.Screen { return s }

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// Key scrolls.
func (s Screen) Key(w *kit.World, press string) (kit.Screen, kit.Job) {
	page := max(w.Body()/2, 1)
	s.top = kit.Scroll(kit.Lookup(kit.OnHelp, press), s.top, page)
	s.top = max(min(s.top, len(s.text(w.Width))-w.Body()), 0)
	return s, nil
}

// line is one line of the text.
type line struct {
	key, text string
	head      bool
}

// signs says what the signs of the screens mean.
var signs = []string{
	"> the selected star   * marked   # place in the order of what to take next, - cannot be taken now",
	"~ beside the place: possible, but outside the wished-for limits",
	"what %: likeliest stage of its life and its probability; undec: none reaches 60 %",
	"expected: band, magnitude and 80 % interval, brighter end first; any: the phase is not known; /sq\": per square arcsec",
	"alt: refracted, degrees, + rising - sinking   X: airmass   best, X: when it is lowest tonight, UTC   left: until the window ends",
	"Mn: degrees from the Moon   Sun, Moon above the list: altitude in degrees (d), how much of the Moon is lit; left and the loop: h hours, m minutes",
	"night strip: s Sun up, c civil, n nautical, a astronomical twilight, . dark, m dark with the Moon up, | the moment shown, figures: hours UTC",
	"star: = should, - can be taken, b best; the curve is its airmass, 1 at the top",
	"light curve: o measured, v fainter than, ? V the forecast gave it less than 0.1 (kept all the same), x set aside, | ^ tonight; then the forecast: = or a line its median, dots its interval; brighter is up",
	"events: +- one sigma, X: airmass; observe: can, or what forbids it at that instant; status: assumed where an error of the elements had to be, expired where it is uncertain by over a tenth of the period, past",
	"diagram: m main sequence, s subgiant, g red giant, c clump, h horizontal branch, e t early and pulsing AGB, p past it, n k nebula and kernel,",
	"  b subdwarf, w white dwarf, r massive, a accretes, ? undecided; a capital: several; [ ] the selected star with 68 % bars, +3: three more in its cell; the track follows when you rest on it",
	"dome: the sky as an arch, Z the zenith, the horizon below, each cell the same piece of sky; letters as on the diagram, + rises - sinks, [ ] the selected star and its path with hours UTC, { } the cursor, (M) Moon, (S) Sun;",
	"  numbers: V mag per square arcsec, shades by how much brighter than the darkest place; altitude at the left edge, airmass at the right; dots: limits; x near the Sun, o near the Moon, ~ cloud, / wind",
	"field: [+] the target, (1) (2) (3) stars to offset from, # o O . neighbours by brightness, c a companion, x the aim, s the place for the sky; lines: detector, slit, nebula; dots in a ring: how far to search; N E the sky's directions, = the scale",
	"filter: words that must occur, and conditions such as kind=wd alt>35 x<1.5 V<16 stage=TPAGB moon>60 left>90 mark=yes; = != < <= > >=",
	"  columns: kind stage ends mark alt x moon sun ha ra dec mag sb left best bestx period, and bands of magnitudes",
	"NOT NOW: the moment shown is one of your own; n goes back to the clock",
	"over a slow link: ssh -C makes four in five bytes unnecessary; tmux keeps the program when the link drops",
	"Caution: the program moves no telescope. Pointing limits, the Sun and the safety of people and instruments are the observatory's; its rules come first.",
}

func (s Screen) text(width int) []line {
	if s.kept.lines == nil || s.kept.width != width {
		*s.kept = kept{width, s.broken(width)}
	}
	return s.kept.lines
}

// broken breaks the text into lines of a width.
func (s Screen) broken(width int) []line {
	var out []line
	if s.message != "" {
		out = append(out, line{text: "the last message", head: true})
		for _, t := range kit.Wrap(s.message, width-2, 2) {
			out = append(out, line{text: "  " + t})
		}
	}
	out = append(out, line{text: "keys on the screen " + s.of, head: true})
	for _, b := range kit.KeysOn(s.of) {
		for i, t := range kit.Wrap(b.Long, width-24, 0) {
			l := line{text: t}
			if i == 0 {
				l.key = b.Show
			}
			out = append(out, l)
		}
	}
	if s.of == kit.OnNext {
		out = append(out, line{key: "in the filter", text: "enter, esc: done   ctrl+u: empty it"})
		for i, text := range kit.Wrap(kit.SortLetters(0)+"  "+kit.SortLetters(1), width-24, 0) {
			l := line{text: text}
			if i == 0 {
				l.key = "orders after s"
			}
			out = append(out, l)
		}
	}
	out = append(out, line{text: "signs", head: true})
	for _, sign := range signs {
		for _, t := range kit.Wrap(sign, width-2, 2) {
			out = append(out, line{text: "  " + t})
		}
	}
	return out
}

// View draws the help.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	text := s.text(width)
	top := max(min(s.top, len(text)-height), 0)
	for i, l := range text[top:min(top+height, len(text))] {
		if rest := len(text) - top - height; i == height-1 && rest > 0 {
			p.Put(kit.Key, fmt.Sprintf("  j for %d more lines", rest+1)).Line()
			break
		}
		switch {
		case l.head:
			p.Put(kit.Title, l.text)
		case l.key != "" || len(l.text) > 0 && l.text[0] != ' ':
			p.Put(kit.Key, "  "+l.key).To(23).Put(kit.Text, l.text)
		default:
			p.Put(kit.Text, l.text)
		}
		p.Line()
	}
	p.Fill(height)
	return p.String()
}
