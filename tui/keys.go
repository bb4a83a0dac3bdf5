package tui

import (
	"strings"
	"unicode/utf8"

	tea "github.com/charmbracelet/bubbletea"
)

// joiner makes single keys of what Bubble Tea reports: it takes apart several
// characters of one read, and puts together the codes of arrows, and the
// terminal's answers, that a slow link delivered in two pieces.
type joiner struct {
	held  string // the beginning of a code: ESC, then [ or O, then figures
	timer int    // counts what is held, so that an old timer does not end it
}

// answer is the key that stands for the terminal's answer.
const answer = "status"

// codes are the keys that codes in pieces may be.
var codes = map[string]string{
	"[A": "up", "[B": "down", "[C": "right", "[D": "left", "[H": "home", "[F": "end",
	"OA": "up", "OB": "down", "OC": "right", "OD": "left", "OH": "home", "OF": "end",
	"[1~": "home", "[3~": "delete", "[4~": "end", "[5~": "pgup", "[6~": "pgdown", "[Z": "shift+tab", "[0n": answer, "[3n": answer, "[?0n": answer,
}

// keys returns the keys of a message; wait: an Escape is held for a moment.
func (j *joiner) keys(k tea.KeyMsg) (keys []string, wait bool) {
	if k.Type == tea.KeyRunes {
		for i, r := range k.Runes {
			if k.Alt && i == 0 { // ESC and a character in one read
				keys = append(keys, j.one("esc")...)
			}
			keys = append(keys, j.one(string(r))...)
		}
	} else {
		keys = j.one(k.String())
	}
	if j.held != "" {
		j.timer++
		return keys, true
	}
	return keys, false
}

// one takes one key and returns those that are now certain.
func (j *joiner) one(k string) []string {
	if j.held == "" {
		if k == "esc" {
			j.held = "\x1b"
			return nil
		}
		return []string{k}
	}
	if utf8.RuneCountInString(k) != 1 {
		return append(j.release(), j.one(k)...)
	}
	code := j.held[1:] + k
	last := k[0]
	switch {
	case code == "[" || code == "O":
		j.held += k
		return nil
	case j.held == "\x1b":
		return append(j.release(), k)
	case code[0] == '[' && strings.ContainsRune("0123456789;?", rune(last)) && len(code) < 16:
		j.held += k
		return nil
	}
	j.held = ""
	if known, ok := codes[code]; ok {
		return []string{known}
	}
	return nil // a code of no use
}

// release gives up waiting: what is held were keys.
func (j *joiner) release() []string {
	if j.held == "" {
		return nil
	}
	keys := []string{"esc"}
	for _, r := range j.held[1:] {
		keys = append(keys, string(r))
	}
	j.held = ""
	return keys
}
