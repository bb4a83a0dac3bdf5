package tui

import (
	"fmt"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
)

func page(n int) Page {
	p := Page{Title: "DEMONSTRATION", Time: "now"}
	for i := range n {
		p.Rows = append(p.Rows, Row{Name: fmt.Sprintf("star %02d", i), Kind: "wd", Altitude: "45.0+", Airmass: "1.41", Stage: "WD    99", Expected: "V  12.0 11.9..12.1"})
	}
	return p
}

func start(n, w, h int) model {
	p := page(n)
	m := model{make: func() Page { return p }, page: p}
	return send(m, tea.WindowSizeMsg{Width: w, Height: h})
}

func send(m model, msg tea.Msg) model {
	next, _ := m.Update(msg)
	return next.(model)
}

func typed(m model, s string) model { return send(m, tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(s)}) }

// cursor returns the row that carries the mark.
func cursor(t *testing.T, m model) string {
	t.Helper()
	for _, line := range strings.Split(m.View(), "\n") {
		if strings.HasPrefix(line, "> ") {
			return line[2:9]
		}
	}
	t.Fatalf("no row is marked in\n%s", m.View())
	return ""
}

// Ten keys in one write are ten keys obeyed.
func TestKeysInOneWrite(t *testing.T) {
	m := typed(start(50, 80, 24), "jjjjjjjjjj")
	if got := cursor(t, m); got != "star 10" {
		t.Errorf("after ten j: %s", got)
	}
	m = typed(m, "kkk")
	if got := cursor(t, m); got != "star 07" {
		t.Errorf("after three k: %s", got)
	}
	for range 100 {
		m = typed(m, "j")
	}
	if got := cursor(t, m); got != "star 49" {
		t.Errorf("at the end: %s", got)
	}
}

// A pasted block is no command.
func TestPasteIsIgnored(t *testing.T) {
	m := send(start(50, 80, 24), tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("jjq"), Paste: true})
	if got := cursor(t, m); got != "star 00" {
		t.Errorf("after a paste: %s", got)
	}
}

func TestLeaving(t *testing.T) {
	for _, k := range []tea.KeyMsg{{Type: tea.KeyRunes, Runes: []rune("q")}, {Type: tea.KeyCtrlC}} {
		if _, cmd := start(5, 80, 24).Update(k); cmd == nil {
			t.Errorf("%v does not leave", k)
		}
	}
}

// The selection stays on its star when the order changes.
func TestSelectionFollowsItsStar(t *testing.T) {
	m := typed(start(30, 80, 24), "jjj")
	p := page(30)
	p.Rows[3], p.Rows[20] = p.Rows[20], p.Rows[3]
	m = send(m, fresh{p})
	if got := cursor(t, m); got != "star 03" || m.selected != 20 {
		t.Errorf("on %s at %d", got, m.selected)
	}
}

// Any size gives its own number of lines, none wider than it.
func TestSizes(t *testing.T) {
	for _, size := range [][2]int{{80, 24}, {120, 40}, {200, 60}, {40, 10}, {20, 5}, {1, 1}, {0, 0}} {
		m := start(300, size[0], size[1])
		lines := strings.Split(m.View(), "\n")
		if len(lines) > max(size[1], 1) {
			t.Errorf("%v: %d lines", size, len(lines))
		}
		for _, l := range lines {
			if len([]rune(l)) > max(size[0], 0) {
				t.Errorf("%v: %q is wider", size, l)
			}
		}
	}
	if v := start(0, 80, 24).View(); !strings.Contains(v, "q leave") {
		t.Errorf("an empty list:\n%s", v)
	}
}

func BenchmarkView(b *testing.B) {
	m := start(360, 80, 24)
	for b.Loop() {
		_ = m.View()
	}
}
