package kit

import (
	"strings"

	"github.com/charmbracelet/x/ansi"
)

// Pen writes a picture line by line: text in roles, each line cut at the
// width of the screen. Its zero value is not usable; see NewPen.
type Pen struct {
	look  *Look
	width int
	b     strings.Builder
	used  int // columns of the line so far
	lines int
	on    string // what is switched on
}

const reset = "\x1b[0m"

// NewPen returns a pen for lines of a width in columns.
func NewPen(l *Look, width int) *Pen {
	p := &Pen{look: l, width: max(width, 0)}
	p.b.Grow(2048)
	return p
}

// Put writes text in a role; what does not fit on the line is dropped.
func (p *Pen) Put(r Role, s string) *Pen {
	w := width(s)
	if p.used+w > p.width {
		s = Cut(s, p.width-p.used)
		w = width(s)
	}
	if s == "" {
		return p
	}
	p.turn(p.look.start[r])
	p.b.WriteString(s)
	p.used += w
	return p
}

// To writes blanks up to a column.
func (p *Pen) To(column int) *Pen {
	for n := min(column, p.width) - p.used; n > 0; n-- {
		p.b.WriteByte(' ')
		p.used++
	}
	return p
}

// Right writes text so that it ends at a column.
func (p *Pen) Right(r Role, column int, s string) *Pen {
	return p.To(column-width(s)).Put(r, s)
}

func (p *Pen) turn(on string) {
	if on == p.on {
		return
	}
	if p.on != "" {
		p.b.WriteString(reset)
	}
	p.b.WriteString(on)
	p.on = on
}

// Line ends the line.
func (p *Pen) Line() *Pen {
	p.turn("")
	p.b.WriteByte('\n')
	p.used = 0
	p.lines++
	return p
}

// Fill ends lines until there are n.
func (p *Pen) Fill(n int) *Pen {
	for p.lines < n {
		p.Line()
	}
	return p
}

// Lines returns how many lines were ended.
func (p *Pen) Lines() int { return p.lines }

// Used returns the columns written on the line so far.
func (p *Pen) Used() int { return p.used }

// Width returns the columns of a line.
func (p *Pen) Width() int { return p.width }

// String returns the picture without the last line's end.
func (p *Pen) String() string { return strings.TrimSuffix(p.b.String(), "\n") }

// width counts the columns that a text takes, as Lip Gloss does: characters
// of ambiguous width count as one.
func width(s string) int {
	if simple(s) {
		return len(s)
	}
	return ansi.StringWidth(s)
}

// simple tells whether each byte is a character of one column.
func simple(s string) bool {
	for i := 0; i < len(s); i++ {
		if s[i] >= 0x80 || s[i] < ' ' {
			return false
		}
	}
	return true
}

// Cut shortens a text to a number of columns.
func Cut(s string, columns int) string {
	if columns <= 0 {
		return ""
	}
	if simple(s) {
		return s[:min(len(s), columns)]
	}
	if width(s) <= columns {
		return s
	}
	return ansi.Truncate(s, columns, "")
}

const someBlanks = "                                                                                "

func blanks(n int) string {
	if n <= len(someBlanks) {
		return someBlanks[:n]
	}
	return strings.Repeat(" ", n)
}

// Wrap breaks a text at blanks into lines of a width; later lines are indented.
func Wrap(s string, columns, indent int) []string {
	columns = max(columns, 10)
	indent = min(indent, columns/2)
	var out []string
	line := ""
	for _, word := range strings.Fields(s) {
		for word != "" {
			room := columns
			if len(out) > 0 {
				room -= indent
			}
			switch {
			case line != "" && width(line)+1+width(word) <= room:
				line, word = line+" "+word, ""
			case line != "":
				out, line = append(out, line), ""
			case width(word) <= room:
				line, word = word, ""
			default:
				head := Cut(word, room)
				if head == "" { // a character wider than the line
					head = word
				}
				out, word = append(out, head), word[len(head):]
			}
		}
	}
	if line != "" || len(out) == 0 {
		out = append(out, line)
	}
	for i := 1; i < len(out); i++ {
		out[i] = blanks(indent) + out[i]
	}
	return out
}

// Break leaves a line that fits as it is, blanks and all, and wraps others.
func Break(s string, columns, indent int) []string {
	if width(s) <= columns {
		return []string{s}
	}
	return Wrap(s, columns, indent)
}
