package run

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"evenfall/targets"
	"evenfall/targets/table"
)

// field names a key with its block, dotted.
func (b *block) field(key string) string { return strings.TrimPrefix(b.path+"."+key, ".") }

// ask returns the node of a key and remembers that the key is known.
func (b *block) ask(key string) (*node, bool) {
	if !slices.Contains(b.asked, key) {
		b.asked = append(b.asked, key)
	}
	n, ok := b.keys[key]
	return n, ok && n != nil
}

// wrong reports a value of another type than the key wants.
func (t *tree) wrong(b *block, key string, n *node, want, example string) {
	t.problem(n.at, b.field(key), n.text, "not "+want, "write "+key+" = "+example)
}

// limits says what a number may be.
type bounds struct {
	lo, hi  float64
	unit    string
	example string
}

// number reads a number into a field; the field keeps its default where the
// key is missing or wrong. It tells whether the key was given and right.
func (t *tree) number(b *block, key string, into *float64, may bounds) bool {
	n, ok := b.ask(key)
	if !ok {
		return false
	}
	v, ok := n.value.(float64)
	if !ok {
		t.wrong(b, key, n, "a number", may.example)
		return false
	}
	if math.IsNaN(v) || v < may.lo || v > may.hi {
		t.problem(n.at, b.field(key), n.text, "out of range", fmt.Sprintf("write %g to %g%s, e.g. %s = %s", may.lo, may.hi, blank(may.unit), key, may.example))
		return false
	}
	*into = v
	return true
}

func blank(unit string) string {
	if unit == "" {
		return ""
	}
	return " " + unit
}

func (t *tree) measure(b *block, key string, into *targets.Measure, may bounds) {
	var v float64
	if t.number(b, key, &v, may) {
		*into = targets.Known(v)
	}
}

// word reads a text, of a list of allowed ones where any are given.
func (t *tree) word(b *block, key string, into *string, example string, allowed ...string) bool {
	n, ok := b.ask(key)
	if !ok {
		return false
	}
	s, ok := n.value.(string)
	if !ok {
		t.wrong(b, key, n, "a text", `"`+example+`"`)
		return false
	}
	s = table.Clean(s)
	if len(allowed) > 0 && !slices.Contains(allowed, s) {
		t.problem(n.at, b.field(key), s, "not one of the words for it", "use one of "+strings.Join(allowed, ", "))
		return false
	}
	*into = s
	return true
}

func (t *tree) flag(b *block, key string, into *bool) {
	n, ok := b.ask(key)
	if !ok {
		return
	}
	v, ok := n.value.(bool)
	if !ok {
		t.wrong(b, key, n, "true or false", "true")
		return
	}
	*into = v
}

// numbers reads a list of numbers; count 0: any number of them.
func (t *tree) numbers(b *block, key string, count int, example string) ([]float64, bool) {
	n, ok := b.ask(key)
	if !ok {
		return nil, false
	}
	list, isList := n.value.([]*node)
	if v, single := n.value.(float64); single && count == 0 {
		return []float64{v}, true
	}
	var out []float64
	for _, e := range list {
		v, ok := e.value.(float64)
		if !ok || math.IsNaN(v) || math.IsInf(v, 0) {
			t.problem(e.at, b.field(key), e.text, "not a number", "write "+key+" = "+example)
			return nil, false
		}
		out = append(out, v)
	}
	if !isList || (count > 0 && len(out) != count) || len(out) == 0 {
		t.wrong(b, key, n, "a list of numbers", example)
		return nil, false
	}
	return out, true
}

// words reads a list of texts.
func (t *tree) words(b *block, key, example string) ([]string, bool) {
	n, ok := b.ask(key)
	if !ok {
		return nil, false
	}
	list, isList := n.value.([]*node)
	out := []string{}
	for _, e := range list {
		s, ok := e.value.(string)
		if !ok {
			t.problem(e.at, b.field(key), e.text, "not a text", "write "+key+" = "+example)
			return nil, false
		}
		out = append(out, table.Clean(s))
	}
	if !isList {
		t.wrong(b, key, n, "a list of texts", example)
		return nil, false
	}
	return out, true
}

// sub returns the block below a key; an empty one where it is missing.
func (t *tree) sub(b *block, key string) (*block, bool) {
	n, ok := b.ask(key)
	if !ok {
		return newBlock(b.field(key), b.at), false
	}
	s, ok := n.value.(*block)
	if !ok {
		t.problem(n.at, b.field(key), n.text, "not a table", "write ["+b.field(key)+"] on a line of its own")
		return newBlock(b.field(key), n.at), false
	}
	return s, true
}

// each returns the blocks of a list of tables.
func (t *tree) each(b *block, key string) []*block {
	n, ok := b.ask(key)
	if !ok {
		return nil
	}
	list, isList := n.value.([]*node)
	var out []*block
	for _, e := range list {
		s, ok := e.value.(*block)
		isList = isList && ok
		if ok {
			out = append(out, s)
		}
	}
	if !isList {
		t.problem(n.at, b.field(key), n.text, "not a list of tables", "write [["+b.field(key)+"]] on a line of its own before each")
	}
	return out
}

// leftovers reports keys that nobody asked for.
func (t *tree) leftovers(b *block) {
	for _, key := range b.order {
		n := b.keys[key]
		if !slices.Contains(b.asked, key) {
			fix := "the keys here are " + strings.Join(b.asked, ", ")
			best := 3
			for _, k := range b.asked {
				if d := table.Distance(key, k); d < best {
					best, fix = d, "did you mean "+k
				}
			}
			t.problem(n.key, b.field(key), "", "no such key", fix)
			continue
		}
		t.leftoversBelow(n)
	}
}

func (t *tree) leftoversBelow(n *node) {
	switch v := n.value.(type) {
	case *block:
		if len(v.asked) > 0 {
			t.leftovers(v)
		}
	case []*node:
		for _, e := range v {
			t.leftoversBelow(e)
		}
	}
}
