package logbook

import (
	"fmt"
	"strconv"
	"strings"
)

// Count returns the name of the file n after another, by its last figures:
// obs0042.fits and 3 make obs0045.fits. False: there are no figures in it.
func Count(name string, n int) (string, bool) {
	end := len(name)
	if dot := strings.IndexByte(name, '.'); dot > 0 && strings.ContainsAny(name[:dot], "0123456789") {
		end = dot
	}
	for end > 0 && (name[end-1] < '0' || name[end-1] > '9') {
		end--
	}
	from := end
	for from > 0 && name[from-1] >= '0' && name[from-1] <= '9' {
		from--
	}
	if from == end || end-from > 15 {
		return "", false
	}
	v, err := strconv.Atoi(name[from:end])
	if err != nil || v+n < 0 {
		return "", false
	}
	return name[:from] + fmt.Sprintf("%0*d", end-from, v+n) + name[end:], true
}

// SplitFiles takes FIRST..LAST apart; one name is both.
func SplitFiles(s string) (first, last string, err error) {
	if s == "" {
		return "", "", nil
	}
	first, last, ok := strings.Cut(s, "..")
	if !ok {
		return s, s, nil
	}
	if first == "" || last == "" {
		return "", "", fmt.Errorf("files %q: write FIRST..LAST, e.g. obs0042..obs0044", s)
	}
	return first, last, nil
}
