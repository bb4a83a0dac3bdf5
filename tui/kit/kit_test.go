package kit

import (
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

var screensOfTable = []string{OnNext, OnStar, OnEntry, OnCopy, OnHelp, OnField, OnDiagram}

// On no screen does a key mean two things; every binding says what it does;
// movement has letters; nothing needs alt, a function key, or a ctrl key that
// tmux, screen, flow control or the shell own.
func TestBindings(t *testing.T) {
	for _, screen := range screensOfTable {
		seen := map[string]Action{}
		for _, b := range KeysOn(screen) {
			for _, k := range b.Press {
				if other, twice := seen[k]; twice && other != b.Do {
					t.Errorf("on %s %q means %q and %q", screen, k, other, b.Do)
				}
				seen[k] = b.Do
				if k != "ctrl+u" && (strings.HasPrefix(k, "ctrl+") || strings.HasPrefix(k, "alt+") || len(k) > 1 && k[0] == 'f' && k[1] <= '9') {
					t.Errorf("on %s: %q", screen, k)
				}
				if slices.Contains([]string{"A", "B", "C", "D", "H", "F", "O"}, k) {
					t.Errorf("on %s: %q ends the code of an arrow", screen, k)
				}
			}
			if b.Long == "" || b.Show == "" {
				t.Errorf("on %s: %q says nothing", screen, b.Do)
			}
		}
	}
	for _, do := range []Action{Down, Up, HalfDown, HalfUp, First, Last} {
		i := slices.IndexFunc(Bindings, func(b Binding) bool { return b.Do == do })
		if !slices.ContainsFunc(Bindings[i].Press, func(k string) bool { return len(k) == 1 && k != " " }) {
			t.Errorf("%s has no letter", do)
		}
	}
}

// Footers fit, and always hold help and leaving.
func TestFooter(t *testing.T) {
	for _, screen := range screensOfTable {
		for width := 40; width < 200; width++ {
			if f := Footer(screen, width); len(f) > width || f == "" {
				t.Errorf("%s at %d: %q", screen, width, f)
			}
		}
	}
	if f := Footer(OnNext, 40); !strings.Contains(f, "? help") || !strings.Contains(f, "q leave") {
		t.Errorf("at 40: %q", f)
	}
	for line := range 2 {
		if s := SortLetters(line); len(s) > 70 {
			t.Errorf("letters of orders, line %d: %d columns", line, len(s))
		}
	}
}

// What the environment says makes the look that people expect.
func TestLook(t *testing.T) {
	for _, c := range []struct {
		env    map[string]string
		theme  string
		glyphs string
		level  Level
		want   Glyphs
	}{
		{map[string]string{"TERM": "xterm-256color", "LANG": "en_US.UTF-8"}, "", "", Colours256, Braille},
		{map[string]string{"TERM": "xterm", "LANG": "C"}, "", "", Colours16, ASCII},
		{map[string]string{"TERM": "xterm", "COLORTERM": "truecolor", "LANG": "C", "LC_ALL": "de_CH.utf8"}, "", "", Colours256, Braille},
		{map[string]string{"TERM": "linux", "LANG": "en_US.UTF-8"}, "red", "", Colours16, ASCII},
		{map[string]string{"TERM": "vt100", "LANG": "en_US.UTF-8"}, "", "braille", Mono, Braille},
		{map[string]string{"TERM": "dumb"}, "", "", NoAttributes, ASCII},
		{map[string]string{"TERM": "tmux-256color", "NO_COLOR": "1", "LC_CTYPE": "C.UTF-8", "LANG": "C"}, "red", "auto", Mono, Braille},
		{map[string]string{"TERM": "screen-256color", "LANG": "C.UTF-8", "LC_ALL": "C"}, "", "unicode", Colours256, Unicode},
	} {
		l, err := Settings{Theme: c.theme, Glyphs: c.glyphs, Getenv: func(k string) string { return c.env[k] }}.Look()
		if err != nil || l.Level != c.level || l.Glyphs != c.want {
			t.Errorf("%v: level %v, glyphs %v, %v", c.env, l.Level, l.Glyphs, err)
		}
	}
	for _, s := range []Settings{{Theme: "blue"}, {Glyphs: "big"}} {
		s.Getenv = func(string) string { return "" }
		if _, err := s.Look(); err == nil || !strings.Contains(err.Error(), "use one of") {
			t.Errorf("%+v: %v", s, err)
		}
	}
}

// Lines are never wider than the screen, whatever is written; wrapping loses
// no letter.
func TestPen(t *testing.T) {
	look := NewLook(DarkTheme, Colours256, ASCII)
	rapid.Check(t, func(t *rapid.T) {
		wide := rapid.IntRange(0, 60).Draw(t, "width")
		p := NewPen(look, wide)
		for range rapid.IntRange(0, 5).Draw(t, "pieces") {
			s := rapid.StringOf(rapid.RuneFrom([]rune("ab é中\u0301★ x"))).Draw(t, "text")
			p.Put(Role(rapid.IntRange(0, int(roles)-1).Draw(t, "role")), s).To(rapid.IntRange(0, 70).Draw(t, "to"))
		}
		if w := width(p.String()); w > wide {
			t.Errorf("%d columns on a screen of %d", w, wide)
		}
		text := rapid.StringMatching(`[a-z ]{0,80}`).Draw(t, "wrapped")
		columns := rapid.IntRange(10, 40).Draw(t, "columns")
		var back []string
		for _, line := range Wrap(text, columns, 2) {
			if width(line) > columns {
				t.Errorf("%q is wider than %d", line, columns)
			}
			back = append(back, strings.TrimSpace(line))
		}
		if strings.ReplaceAll(strings.Join(back, ""), " ", "") != strings.ReplaceAll(text, " ", "") {
			t.Errorf("%q wraps to %q", text, back)
		}
	})
}

// A field edits like a line anywhere, and takes no codes.
func TestField(t *testing.T) {
	f := NewField("")
	for _, k := range []string{"R", " ", "L", "p", "left", "e", "end", "!", "backspace", "home", "delete", "r", "ctrl+w", "r"} {
		f, _ = f.Press(k)
	}
	if f.String() != "r Lep" {
		t.Errorf("typed %q", f.String())
	}
	f = f.Insert("a\x1b[31mb\tc\u202ed\n")
	if strings.ContainsAny(f.String(), "\x1b\t\n\u202e") || !strings.Contains(f.String(), "ab cd") {
		t.Errorf("pasted: %q", f.String())
	}
	if _, ok := f.Press("f5"); ok {
		t.Error("a function key is text")
	}
	if f, _ = f.Press("ctrl+u"); f.String() != "" {
		t.Errorf("emptied: %q", f.String())
	}
}

// The canvas draws the same line in dots, half blocks and ASCII.
func TestCanvas(t *testing.T) {
	for glyphs, want := range map[Glyphs]string{
		Braille: "\u2811\u2884 \n  \u2811",
		Unicode: "\u2580\u2584 \n  \u2580",
		ASCII:   "'. \n  '",
	} {
		c := NewCanvas(3, 2)
		c.Line(0, 0, 5, 5, Curve)
		c.Dot(-1, 0, Curve)
		c.Dot(6, 8, Curve)
		p := NewPen(NewLook(PlainTheme, NoAttributes, glyphs), 10)
		c.Row(p, 0)
		p.Line()
		c.Row(p, 1)
		if p.Line().String() != want {
			t.Errorf("%s: %q, wanted %q", glyphs, p.String(), want)
		}
	}
	c := NewCanvas(4, 1)
	c.Text(1, 0, Text, "abcdef")
	p := NewPen(NewLook(PlainTheme, NoAttributes, ASCII), 10)
	c.Row(p, 0)
	if p.String() != " abc" {
		t.Errorf("text: %q", p.String())
	}
}
