// Package tui shows the program in a terminal: at present one plain list of
// targets. It computes nothing about the sky; rows are made by who calls it.
package tui

import (
	"fmt"
	"io"
	"strings"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"
)

// Row is one target as the list shows it.
type Row struct {
	Name, Kind, Altitude, Airmass, Stage, Expected string
	Blocked                                        string // why it cannot be taken now; "" where it can
}

// Page is what the list shows at one time.
type Page struct {
	Title string // site and the word DEMONSTRATION where it is one
	Time  string
	Rows  []Row
}

// refreshEvery is how often the rows are worked out anew.
const refreshEvery = 30 * time.Second

// Open shows the list until the user leaves.
//
// Given:
//   - page: works out the rows for now; called from a command, never while a
//     screen is being drawn.
//   - in, out: the terminal.
func Open(page func() Page, in io.Reader, out io.Writer) error {
	m := model{make: page, page: page()}
	_, err := tea.NewProgram(m, tea.WithAltScreen(), tea.WithInput(in), tea.WithOutput(out)).Run()
	return err
}

type model struct {
	make          func() Page
	page          Page
	width, height int
	selected, top int
}

type tick struct{}
type fresh struct{ page Page }

func wait() tea.Cmd { return tea.Tick(refreshEvery, func(time.Time) tea.Msg { return tick{} }) }

// Init starts the clock.
func (m model) Init() tea.Cmd { return wait() }

// Update obeys keys, sizes and new rows.
func (m model) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		m.width, m.height = msg.Width, msg.Height
	case tick:
		work := m.make
		return m, func() tea.Msg { return fresh{work()} }
	case fresh:
		m.replace(msg.page)
		return m, wait()
	case tea.KeyMsg:
		for _, k := range keys(msg) {
			if k == "q" || k == "ctrl+c" {
				return m, tea.Quit
			}
			m.key(k)
		}
	}
	m.scroll()
	return m, nil
}

// keys splits a message that holds several typed characters: they arrive in
// one when a key repeats on a slow link.
func keys(msg tea.KeyMsg) []string {
	if msg.Type != tea.KeyRunes || msg.Paste {
		return []string{msg.String()}
	}
	var out []string
	for _, r := range msg.Runes {
		out = append(out, string(r))
	}
	return out
}

func (m *model) key(k string) {
	last := max(len(m.page.Rows)-1, 0)
	switch k {
	case "j", "down":
		m.selected = min(m.selected+1, last)
	case "k", "up":
		m.selected = max(m.selected-1, 0)
	}
}

// replace takes new rows and keeps the selection on its star.
func (m *model) replace(p Page) {
	name := ""
	if m.selected < len(m.page.Rows) {
		name = m.page.Rows[m.selected].Name
	}
	m.page = p
	m.selected = min(m.selected, max(len(p.Rows)-1, 0))
	for i, r := range p.Rows {
		if r.Name == name {
			m.selected = i
			break
		}
	}
	m.scroll()
}

// chrome is the number of lines that are not rows.
const chrome = 4

// scroll keeps the selection on the screen, jumping half a page at its edge.
func (m *model) scroll() {
	room := max(m.height-chrome, 1)
	switch {
	case m.selected < m.top:
		m.top = max(m.selected-room/2, 0)
	case m.selected >= m.top+room:
		m.top = m.selected - room/2
	}
	m.top = max(min(m.top, len(m.page.Rows)-room), 0)
}

var title = lipgloss.NewStyle().Bold(true)

// View draws the screen: exactly its height of lines, none wider than it.
func (m model) View() string {
	if m.width < 40 || m.height < chrome+1 {
		return fit(fmt.Sprintf("too small: %d x %d", m.width, m.height), m.width)
	}
	room := m.height - chrome
	lines := []string{title.Render(fit(m.page.Title, m.width)), fit(m.page.Time, m.width),
		fit(format(Row{Name: "name", Kind: "kind", Altitude: "alt deg", Airmass: "X", Stage: "stage", Expected: "expected"}, " "), m.width)}
	for i := m.top; i < min(m.top+room, len(m.page.Rows)); i++ {
		mark := " "
		if i == m.selected {
			mark = ">"
		}
		lines = append(lines, fit(format(m.page.Rows[i], mark), m.width))
	}
	for len(lines) < m.height-1 {
		lines = append(lines, "")
	}
	return strings.Join(append(lines, fit("j down  k up  q leave", m.width)), "\n")
}

func format(r Row, mark string) string {
	line := fmt.Sprintf("%s %-14s %-11s %7s %5s  %-8s %-18s", mark, fit(r.Name, 14), r.Kind, r.Altitude, r.Airmass, r.Stage, r.Expected)
	if r.Blocked != "" {
		line += " " + r.Blocked
	}
	return strings.TrimRight(line, " ")
}

// fit cuts a line to a width in characters.
func fit(s string, width int) string {
	r := []rune(s)
	if len(r) <= width {
		return s
	}
	return string(r[:max(width, 0)])
}
