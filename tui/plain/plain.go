// Package plain is the screen that shows the hand-over lines with nothing
// around them, to be read out or copied by hand.
package plain

import (
	"strings"

	"evenfall/tui/kit"
)

// Screen is the lines, as they were when they were asked for.
type Screen struct{ lines []string }

// New shows lines.
func New(lines []string) Screen { return Screen{lines} }

// Title names it.
func (s Screen) Title() string { return kit.OnCopy }

// Typing is never the case here.
func (s Screen) Typing() bool { return false }

// Key has nothing to obey.
func (s Screen) Key(*kit.World, string) (kit.Screen, kit.Job) { return s, nil }

// Apply takes nothing.
func (s Screen) Apply(*kit.World, kit.Result) kit.Screen { return s }

// Prompt has nothing to say.
func (s Screen) Prompt(*kit.World, *kit.Pen) bool { return false }

// Text is what goes to the clipboard.
func (s Screen) Text() string { return strings.Join(s.lines, "\n") + "\n" }

// View writes the lines, the first broken between its parts where it is too
// long.
func (s Screen) View(w *kit.World, width, height int) string {
	p := kit.NewPen(w.Look, width)
	for _, line := range s.lines {
		for _, part := range kit.Break(line, width, 0) {
			if p.Lines() < height {
				p.Put(kit.Text, part).Line()
			}
		}
	}
	p.Fill(height)
	return p.String()
}
