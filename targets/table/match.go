package table

import (
	"fmt"

	"evenfall/targets"
)

// Match finds the target that a name means: by id, else by name. Case, spaces
// and underscores do not count.
//
// Returns:
//   - the place in the list.
//   - an error where none or more than one answers, with what to write.
//
// Checked: TestMatch.
func Match(list []targets.Target, name string) (int, error) {
	key := targets.Key(name)
	for _, of := range []func(*targets.Target) string{
		func(t *targets.Target) string { return t.ID },
		func(t *targets.Target) string { return t.Name },
	} {
		found := -1
		for i := range list {
			if k := targets.Key(of(&list[i])); k == "" || k != key {
				continue
			}
			if found >= 0 {
				return 0, fmt.Errorf("%q means two targets, %q (%s) and %q (%s); use an id",
					name, list[found].Name, list[found].At, list[i].Name, list[i].At)
			}
			found = i
		}
		if found >= 0 {
			return found, nil
		}
	}
	if near := nearest(list, key); near != "" {
		return 0, fmt.Errorf("no target %q; did you mean %q", name, near)
	}
	return 0, fmt.Errorf("no target %q in the list; see evenfall list --sort name", name)
}

// nearest returns the name that a slip of the pen may have meant.
func nearest(list []targets.Target, key string) string {
	best, at := 3, "" // up to two letters off
	for i := range list {
		for _, n := range []string{list[i].Name, list[i].ID} {
			if d := Distance(key, targets.Key(n)); d < best && n != "" && d < len(key)/2+1 {
				best, at = d, list[i].Name
			}
		}
	}
	return at
}

// Distance returns how many letters must be changed, added or left out to
// make one word of another.
//
// Source: the distance of Levenshtein; common practice, no source.
func Distance(a, b string) int {
	x, y := []rune(a), []rune(b)
	prev := make([]int, len(y)+1)
	for j := range prev {
		prev[j] = j
	}
	for i := range x {
		cur := make([]int, len(y)+1)
		cur[0] = i + 1
		for j := range y {
			cost := 1
			if x[i] == y[j] {
				cost = 0
			}
			cur[j+1] = min(cur[j]+1, prev[j+1]+1, prev[j]+cost)
		}
		prev = cur
	}
	return prev[len(y)]
}
