package kit

import (
	"fmt"
	"io"
	"strings"

	"github.com/charmbracelet/lipgloss"
	"github.com/muesli/termenv"
)

// Level is what a terminal can do with a character.
type Level int

// The levels, each with all that comes before it.
const (
	NoAttributes Level = iota
	Mono               // bold, underline
	Colours16
	Colours256
)

// Role is what a piece of text is, from which a theme makes how it looks.
// Nothing is told by a role alone: a sign, a letter or a word stands beside it.
type Role uint8

// The roles.
const (
	Text Role = iota
	Dim
	Title
	Selected
	Key
	Good
	Warn
	Bad
	Civil
	Nautical
	Astro
	Dark
	Moon
	Curve
	Mark
	roles
)

// Theme is a set of looks.
type Theme string

// The themes.
const (
	DarkTheme  Theme = "dark"  // for a dark terminal
	RedTheme   Theme = "red"   // night vision: no cell that is not red
	PlainTheme Theme = "plain" // bold and underline, no colour
)

// Themes lists the themes in the order in which a key goes through them.
var Themes = []Theme{DarkTheme, RedTheme, PlainTheme}

// dye is how a role looks: a colour of 256, one of 16, and attributes. "" is
// the terminal's own.
type dye struct {
	c256, c16       string
	bold, underline bool
}

// dark leaves the ground and most of the text as the terminal has them.
var dark = [roles]dye{
	Dim: {"245", "7", false, false}, Title: {"", "", true, false}, Selected: {"229", "11", true, false}, Key: {"110", "14", false, false},
	Good: {"114", "10", false, false}, Warn: {"215", "11", true, false}, Bad: {"210", "9", true, false},
	Civil: {"180", "11", false, false}, Nautical: {"109", "14", false, false}, Astro: {"67", "12", false, false},
	Dark: {"243", "7", false, false}, Moon: {"230", "15", false, false}, Curve: {"151", "10", false, false}, Mark: {"222", "11", true, false},
}

// red gives every role a red of its own, the default too: the terminal's own
// foreground is white light.
var red = [roles]dye{
	Text: {"124", "1", false, false}, Dim: {"88", "1", false, false}, Title: {"160", "9", true, false}, Selected: {"196", "9", true, true},
	Key: {"160", "1", false, false}, Good: {"160", "1", false, false}, Warn: {"196", "9", true, false}, Bad: {"196", "9", true, false},
	Civil: {"160", "9", false, false}, Nautical: {"124", "1", false, false}, Astro: {"88", "1", false, false},
	Dark: {"52", "1", false, false}, Moon: {"160", "9", false, false}, Curve: {"196", "9", false, false}, Mark: {"196", "9", true, false},
}

// plain has attributes alone.
var plain = [roles]dye{
	Title: {bold: true}, Selected: {bold: true}, Warn: {bold: true}, Bad: {bold: true, underline: true},
	Curve: {bold: true}, Mark: {bold: true}, Moon: {bold: true},
}

// Glyphs is which characters charts are drawn with.
type Glyphs string

// The glyphs.
const (
	ASCII   Glyphs = "ascii"
	Unicode Glyphs = "unicode" // half blocks
	Braille Glyphs = "braille"
)

// Look is a theme made ready for a terminal.
type Look struct {
	Theme  Theme
	Level  Level
	Glyphs Glyphs
	start  [roles]string // what switches a role on; "" where it looks as plain text
}

// NewLook makes a theme ready.
//
// Notes:
//  1. Where the terminal has no colours the red theme is as the plain one:
//     its own light is then what it is.
func NewLook(t Theme, l Level, g Glyphs) *Look {
	k := &Look{Theme: t, Level: l, Glyphs: g}
	dyes := dark
	switch {
	case t == PlainTheme || l <= Mono:
		dyes = plain
	case t == RedTheme:
		dyes = red
	}
	if l == NoAttributes {
		return k
	}
	for r := range roles {
		k.start[r] = dyes[r].sgr(l)
	}
	return k
}

// sgr asks Lip Gloss for what switches a look on. Its own profile without
// colours drops bold and underline too, hence the third branch.
func (d dye) sgr(l Level) string {
	r := lipgloss.NewRenderer(io.Discard)
	colour := d.c256
	switch l {
	case Colours256:
		r.SetColorProfile(termenv.ANSI256)
	case Colours16:
		r.SetColorProfile(termenv.ANSI)
		colour = d.c16
	default:
		r.SetColorProfile(termenv.ANSI)
		colour = ""
	}
	s := r.NewStyle().Bold(d.bold).Underline(d.underline).UnderlineSpaces(d.underline)
	if colour != "" {
		s = s.Foreground(lipgloss.Color(colour))
	}
	before, _, found := strings.Cut(s.Render("x"), "x")
	if !found {
		return ""
	}
	return before
}

// Settings is what the environment and the user say about the screen.
type Settings struct {
	Theme  string // dark, red, plain; "" dark
	Glyphs string // auto, ascii, unicode, braille; "" auto
	Getenv func(string) string
}

// Look settles the look for a terminal.
//
// Returns:
//   - an error that names what may be written, for a theme or glyphs unknown.
//
// Notes:
//  1. TERM decides what the terminal can do, NO_COLOR takes the colours away,
//     the first of LC_ALL, LC_CTYPE and LANG that is set says whether it shows
//     more than ASCII; a setting wins over all of them. Nothing is asked of the
//     terminal itself.
func (s Settings) Look() (*Look, error) {
	theme := Theme(s.Theme)
	switch theme {
	case "":
		theme = DarkTheme
	case DarkTheme, RedTheme, PlainTheme:
	default:
		return nil, fmt.Errorf("theme %q: use one of dark, red, plain", s.Theme)
	}
	glyphs := Glyphs(s.Glyphs)
	switch glyphs {
	case "", "auto":
		glyphs = s.autoGlyphs()
	case ASCII, Unicode, Braille:
	default:
		return nil, fmt.Errorf("glyphs %q: use one of auto, ascii, unicode, braille", s.Glyphs)
	}
	return NewLook(theme, s.level(), glyphs), nil
}

func (s Settings) level() Level {
	term := s.Getenv("TERM")
	level := Mono
	switch {
	case term == "dumb" || term == "":
		return NoAttributes
	case strings.Contains(term, "256color") || s.Getenv("COLORTERM") != "" ||
		term == "xterm-kitty" || term == "xterm-ghostty" || term == "alacritty" || term == "foot":
		level = Colours256
	case term == "linux" || strings.HasPrefix(term, "xterm") || strings.HasPrefix(term, "screen") ||
		strings.HasPrefix(term, "tmux") || strings.HasPrefix(term, "rxvt") || strings.HasSuffix(term, "-color"):
		level = Colours16
	}
	if s.Getenv("NO_COLOR") != "" {
		return Mono
	}
	return level
}

func (s Settings) autoGlyphs() Glyphs {
	for _, poor := range []string{"linux", "vt100", "vt102", "vt220", "dumb", ""} {
		if s.Getenv("TERM") == poor {
			return ASCII
		}
	}
	for _, name := range []string{"LC_ALL", "LC_CTYPE", "LANG"} {
		if v := strings.ToLower(s.Getenv(name)); v != "" {
			if strings.Contains(v, "utf-8") || strings.Contains(v, "utf8") {
				return Braille
			}
			return ASCII
		}
	}
	return ASCII
}

// Numbered returns a look that colours each role with its own number of the
// 256, so that a test can read the roles off a terminal.
func Numbered(g Glyphs) *Look {
	k := &Look{Theme: DarkTheme, Level: Colours256, Glyphs: g}
	for r := range roles {
		if r != Text {
			k.start[r] = fmt.Sprintf("\x1b[38;5;%dm", 100+int(r))
		}
	}
	return k
}

// RoleNames names the roles, for tests that read them off a terminal.
var RoleNames = [roles]string{"text", "dim", "title", "selected", "key", "good", "warn", "bad", "civil", "nautical", "astro", "dark", "moon", "curve", "mark"}

// NumberedRole returns the role that a colour of Numbered stands for.
func NumberedRole(colour int) (Role, bool) {
	r := Role(colour - 100)
	return r, colour > 100 && r < roles
}
