package table

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// Clean returns text that is safe to show: without control characters,
// without escape sequences of terminals (the whole sequence, not just its
// first character), without characters that turn the direction of writing or
// take no width. Line ends and tabs become blanks; bytes that are not UTF-8
// become the replacement character.
//
// Checked: TestClean, FuzzClean.
func Clean(s string) string {
	var b strings.Builder
	for len(s) > 0 {
		if n := escapeLength(s); n > 0 {
			s = s[n:]
			continue
		}
		r, n := utf8.DecodeRuneInString(s)
		s = s[n:]
		switch {
		case r == '\n' || r == '\r' || r == '\t' || r == 0x2028 || r == 0x2029:
			b.WriteByte(' ')
		case unicode.IsControl(r) || hidden(r):
		default:
			b.WriteRune(r)
		}
	}
	return strings.TrimSpace(b.String())
}

// hidden tells characters that change direction or take no width.
func hidden(r rune) bool {
	switch {
	case r >= 0x200B && r <= 0x200F, r >= 0x202A && r <= 0x202E, r >= 0x2060 && r <= 0x206F,
		r == 0xFEFF, r == 0x061C, r == 0x00AD, r >= 0xFFF9 && r <= 0xFFFB, r >= 0xE0000 && r <= 0xE007F:
		return true
	}
	return false
}

// escapeLength returns how many bytes at the start of s are one escape
// sequence (ECMA-48: CSI, strings such as OSC, single functions); 0: none.
func escapeLength(s string) int {
	intro := 0
	var kind byte
	switch {
	case len(s) > 1 && s[0] == 0x1b:
		intro, kind = 2, s[1]
	case s[0] == 0x1b:
		return 1
	case len(s) > 1 && s[0] == 0xC2 && s[1] >= 0x80 && s[1] <= 0x9f: // the same as one 8-bit character
		intro, kind = 2, s[1]-0x40
	default:
		return 0
	}
	switch kind {
	case '[':
		for i := intro; i < len(s); i++ {
			if s[i] >= 0x40 && s[i] <= 0x7e {
				return i + 1
			}
			if s[i] < 0x20 || s[i] > 0x3f {
				return i
			}
		}
		return len(s)
	case ']', 'P', 'X', '^', '_':
		for i := intro; i < len(s); i++ {
			switch {
			case s[i] == 0x07:
				return i + 1
			case s[i] == 0x1b && i+1 < len(s) && s[i+1] == '\\':
				return i + 2
			case s[i] == '\n':
				return i
			}
		}
		return len(s)
	}
	if kind >= 0x80 { // an escape before a letter beyond ASCII: only the escape goes
		return 1
	}
	return intro
}
