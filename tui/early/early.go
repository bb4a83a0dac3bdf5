// Package early settles what the terminal looks like before Bubble Tea can
// ask. Bubble Tea's own package asks the terminal for its background colour as
// soon as it is linked in, waits up to 5 s for an answer and loses what is
// typed meanwhile; over a bad link a late answer arrives as keys. Go starts
// packages in the order of their import paths, dependencies first, and
// evenfall/tui/early comes before github.com/charmbracelet/bubbletea: so this
// init runs first and the question is never put.
//
// It must be imported by the program's main package, and must itself import
// Lip Gloss alone.
package early

import "github.com/charmbracelet/lipgloss"

func init() { lipgloss.SetHasDarkBackground(true) }
