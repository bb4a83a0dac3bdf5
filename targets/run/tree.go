package run

import (
	"bytes"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"

	"github.com/pelletier/go-toml/v2"
	"github.com/pelletier/go-toml/v2/unstable"

	"evenfall/targets"
	"evenfall/targets/table"
)

// node is one value of a TOML file and where it stands.
type node struct {
	key   targets.Where // of the key
	at    targets.Where // of the value
	text  string        // as written
	value any           // string, float64, bool, []*node, *block
}

// block is one table of a TOML file: its keys, and which were asked for.
type block struct {
	path  string // dotted, "" at the top
	at    targets.Where
	keys  map[string]*node
	order []string
	asked []string
}

func newBlock(path string, at targets.Where) *block {
	return &block{path: path, at: at, keys: map[string]*node{}}
}

// tree is a file being read.
type tree struct {
	name     string
	data     []byte
	problems []*table.Error
}

func (t *tree) problem(at targets.Where, field, value, what, fix string) *table.Error {
	e := &table.Error{At: at, Field: field, Value: table.Clean(value), Problem: what, Fix: fix}
	t.problems = append(t.problems, e)
	return e
}

// maxSyntaxErrors is how many lines are given up before the file is.
const maxSyntaxErrors = 50

// parse cuts a file into blocks. A line that is no TOML is reported and left
// out; the rest still counts.
func (t *tree) parse() *block {
	root := newBlock("", targets.Where{File: t.name})
	if !utf8.Valid(t.data) {
		t.problem(targets.Where{File: t.name}, "", "", "bytes that are not UTF-8", "save the file as UTF-8")
		t.data = bytes.ToValidUTF8(t.data, []byte("?"))
	}
	t.data = bytes.TrimPrefix(t.data, []byte("\xef\xbb\xbf"))
	for range maxSyntaxErrors {
		if !t.dropBadLine() {
			break
		}
	}
	p := unstable.Parser{}
	p.Reset(t.data)
	current := root
	for p.NextExpression() {
		e := p.Expression()
		switch e.Kind {
		case unstable.Table, unstable.ArrayTable:
			current = t.open(root, e, e.Kind == unstable.ArrayTable)
		case unstable.KeyValue:
			t.keyValue(current, e)
		}
	}
	return root
}

// dropBadLine reports the first line that is no TOML and blanks it.
func (t *tree) dropBadLine() bool {
	var into map[string]any
	err := toml.Unmarshal(t.data, &into)
	var bad *toml.DecodeError
	if err == nil || !errors.As(err, &bad) {
		if err != nil {
			t.problem(targets.Where{File: t.name}, "", "", table.Clean(err.Error()), "write TOML")
			t.data = nil
		}
		return false
	}
	row, col := bad.Position()
	lines := bytes.SplitAfter(t.data, []byte("\n"))
	if row < 1 || row > len(lines) {
		t.data = nil
		return false
	}
	line := lines[row-1]
	col = min(max(col, 1), len(line)+1)
	what := strings.TrimPrefix(table.Clean(bad.Error()), "toml: ")
	t.problem(targets.Where{File: t.name, Line: row, Column: utf8.RuneCount(line[:col-1]) + 1}, "", "", what+"; the line is left out",
		`write key = value, texts in "quotes"`)
	end := bytes.TrimRight(line, "\n")
	if len(end) == 0 {
		t.data = nil // the fault lies in an empty line: something above never ends
		return false
	}
	copy(end, bytes.Repeat([]byte(" "), len(end)))
	return true
}

// where turns an offset into a place.
func (t *tree) where(r unstable.Range) targets.Where {
	before := t.data[:min(int(r.Offset), len(t.data))]
	start := bytes.LastIndexByte(before, '\n') + 1
	return targets.Where{File: t.name, Line: bytes.Count(before, []byte("\n")) + 1, Column: utf8.RuneCount(before[start:]) + 1}
}

func keyParts(it unstable.Iterator) (parts []string, first unstable.Range) {
	for it.Next() {
		if len(parts) == 0 {
			first = it.Node().Raw
		}
		parts = append(parts, string(it.Node().Data))
	}
	return parts, first
}

// open finds or makes the block of a [table] or [[table]] header.
func (t *tree) open(root *block, e *unstable.Node, array bool) *block {
	parts, first := keyParts(e.Key())
	at := t.where(first)
	b := root
	for i, name := range parts {
		path := strings.TrimPrefix(b.path+"."+name, ".")
		last := i == len(parts)-1
		n, ok := b.keys[name]
		if !ok {
			n = &node{key: at, at: at}
			b.keys[name] = n
			b.order = append(b.order, name)
		}
		switch {
		case last && array:
			list, _ := n.value.([]*node)
			next := newBlock(fmt.Sprintf("%s[%d]", path, len(list)+1), at)
			n.value = append(list, &node{at: at, value: next})
			return next
		default:
			b = descend(n, path, at)
		}
	}
	return b
}

// descend returns the block that a node holds, or the last of its list.
func descend(n *node, path string, at targets.Where) *block {
	switch v := n.value.(type) {
	case *block:
		return v
	case []*node:
		if len(v) > 0 {
			if b, ok := v[len(v)-1].value.(*block); ok {
				return b
			}
		}
	}
	b := newBlock(path, at)
	if n.value == nil {
		n.value = b
	}
	return b
}

func (t *tree) keyValue(b *block, e *unstable.Node) {
	parts, first := keyParts(e.Key())
	for _, name := range parts[:len(parts)-1] {
		n, ok := b.keys[name]
		if !ok {
			n = &node{key: t.where(first), at: t.where(first)}
			b.keys[name] = n
			b.order = append(b.order, name)
		}
		b = descend(n, strings.TrimPrefix(b.path+"."+name, "."), t.where(first))
	}
	name := parts[len(parts)-1]
	if _, ok := b.keys[name]; !ok {
		b.order = append(b.order, name)
	}
	b.keys[name] = t.value(e.Value(), strings.TrimPrefix(b.path+"."+name, "."), t.where(first))
}

// value turns a parsed value into a node; the key's place serves where the
// value has none of its own.
func (t *tree) value(v *unstable.Node, path string, key targets.Where) *node {
	n := &node{key: key, at: key, text: string(v.Data)}
	if v.Raw.Length > 0 {
		n.at = t.where(v.Raw)
	}
	switch v.Kind {
	case unstable.String:
		n.value = string(v.Data)
	case unstable.Bool:
		n.value = string(v.Data) == "true"
	case unstable.Float, unstable.Integer:
		f, err := strconv.ParseFloat(strings.ReplaceAll(string(v.Data), "_", ""), 64)
		if err == nil {
			n.value = f
		}
	case unstable.LocalDate, unstable.LocalDateTime, unstable.DateTime, unstable.LocalTime:
		n.value = string(v.Data)
	case unstable.Array:
		list := []*node{}
		it := v.Children()
		for it.Next() {
			if it.Node().Kind != unstable.Comment {
				list = append(list, t.value(it.Node(), fmt.Sprintf("%s[%d]", path, len(list)+1), key))
			}
		}
		n.value = list
	case unstable.InlineTable:
		b := newBlock(path, n.at)
		it := v.Children()
		for it.Next() {
			if it.Node().Kind == unstable.KeyValue {
				t.keyValue(b, it.Node())
			}
		}
		n.value = b
	}
	return n
}
