package kit

import (
	"strings"
	"unicode"

	"evenfall/targets/table"
)

// Field is a line being typed.
type Field struct {
	text []rune
	at   int // where the next character goes
}

// longestField is how many characters a field takes.
const longestField = 2000

// NewField starts a field with a text.
func NewField(s string) Field { return Field{[]rune(s), len([]rune(s))} }

// String returns what is typed.
func (f Field) String() string { return string(f.text) }

// Insert puts text in, as typed or pasted: control and direction characters
// are removed, line ends become blanks.
func (f Field) Insert(s string) Field {
	s = strings.Map(func(r rune) rune {
		if r == '\n' || r == '\r' || r == '\t' {
			return ' '
		}
		return r
	}, s)
	// cleaning trims blanks, which a field keeps
	s = strings.Trim(table.Clean("|"+s+"|"), "|")
	in := []rune(s)
	in = in[:min(len(in), max(longestField-len(f.text), 0))]
	text := make([]rune, 0, len(f.text)+len(in))
	text = append(append(append(text, f.text[:f.at]...), in...), f.text[f.at:]...)
	return Field{text, f.at + len(in)}
}

// Press obeys a key; false: not one of a field's.
func (f Field) Press(k string) (Field, bool) {
	cut := func(from, to int) Field {
		text := append(append([]rune{}, f.text[:from]...), f.text[to:]...)
		return Field{text, from}
	}
	switch k {
	case "left":
		f.at = max(f.at-1, 0)
	case "right":
		f.at = min(f.at+1, len(f.text))
	case "home":
		f.at = 0
	case "end":
		f.at = len(f.text)
	case "backspace", "ctrl+h":
		if f.at > 0 {
			f = cut(f.at-1, f.at)
		}
	case "delete":
		if f.at < len(f.text) {
			f = cut(f.at, f.at+1)
		}
	case "ctrl+w":
		from := f.at
		for from > 0 && f.text[from-1] == ' ' {
			from--
		}
		for from > 0 && f.text[from-1] != ' ' {
			from--
		}
		f = cut(from, f.at)
	case "ctrl+u":
		f = Field{}
	case " ", "space":
		f = f.Insert(" ")
	default:
		r := []rune(k)
		if len(r) != 1 || !unicode.IsPrint(r[0]) {
			return f, false
		}
		f = f.Insert(k)
	}
	return f, true
}

// Show writes the field with a sign where the next character goes.
func (f Field) Show(p *Pen, active bool) {
	if !active {
		p.Put(Text, f.String())
		return
	}
	from := 0
	for room := p.Width() - p.Used() - 2; from < f.at && width(string(f.text[from:f.at])) > room; { // keep the sign on the line
		from++
	}
	p.Put(Selected, string(f.text[from:f.at])).Put(Key, "_").Put(Selected, string(f.text[f.at:]))
}
