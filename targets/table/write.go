package table

import (
	"encoding/csv"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"evenfall/astro"
	"evenfall/targets"
)

// Write writes a list so that reading it gives the same targets: only columns
// that some target uses, numbers with every digit they have.
//
// Checked: TestRoundTrip.
func Write(w io.Writer, list []targets.Target) error {
	outs := writers(list)
	c := csv.NewWriter(w)
	var head []string
	for _, o := range outs {
		head = append(head, o.name)
	}
	if err := c.Write(head); err != nil {
		return err
	}
	for i := range list {
		var row []string
		for _, o := range outs {
			row = append(row, o.get(&list[i]))
		}
		if err := c.Write(row); err != nil {
			return err
		}
	}
	c.Flush()
	return c.Error()
}

// out is one column to write.
type out struct {
	name   string
	always bool
	get    func(*targets.Target) string
}

func writers(list []targets.Target) []out {
	all := []out{
		{"id", false, func(t tp) string { return t.ID }},
		{"name", true, func(t tp) string { return t.Name }},
		{"kind", false, kindText},
		{"ra_deg", true, func(t tp) string { return raText(t.Place.RA) }},
		{"dec_deg", true, func(t tp) string { return exactDeg(t.Place.Dec) }},
		{"epoch_jyr", false, func(t tp) string {
			if !t.Place.EpochGiven {
				return ""
			}
			return number(t.Place.EpochJyr)
		}},
	}
	for i := range columns {
		c := &columns[i]
		all = append(all, out{c.Name, false, c.write})
	}
	all = append(all,
		out{"notes", false, func(t tp) string { return t.Notes }},
		out{"source", false, func(t tp) string { return t.Source }},
		out{"unconfirmed", false, func(t tp) string { return strings.Join(t.Unconfirmed, " ") }},
		out{"conflicts", false, func(t tp) string { return t.Conflicts }})
	for _, name := range extras(list) {
		all = append(all, out{name, true, func(t tp) string { return extra(t, name) }})
	}
	return slices.DeleteFunc(all, func(o out) bool {
		return !o.always && !slices.ContainsFunc(list, func(t targets.Target) bool { return o.get(&t) != "" })
	})
}

// write returns the text of a column for a target; "" where it has none.
func (c *column) write(t *targets.Target) string {
	if c.text != nil {
		return *c.text(t)
	}
	m := c.get(t)
	switch {
	case c.isErr && (m.Err == 0 || m.Assumed):
		return ""
	case c.isErr:
		return number(m.Err)
	case !m.Known:
		return ""
	case c.Name == "mag_min" && t.Var.MagMinIsLimit:
		return "<" + number(m.Value)
	}
	return number(m.Value)
}

func number(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }

func kindText(t *targets.Target) string {
	switch {
	case t.KindInferred:
		return ""
	case t.KindNote != "":
		return string(t.Kind) + ":" + t.KindNote
	}
	return string(t.Kind)
}

// exactDeg writes an angle in the fewest digits that read back as itself: the
// catalogue's own digits, as a rule.
func exactDeg(a astro.Angle) string {
	for decimals := 0; decimals < 17; decimals++ {
		s := strconv.FormatFloat(a.Deg(), 'f', decimals, 64)
		if v, err := strconv.ParseFloat(s, 64); err == nil && astro.Deg(v) == a {
			return s
		}
	}
	return number(a.Deg())
}

// raText writes a right ascension, which is read back into one turn.
func raText(a astro.Angle) string {
	for decimals := 0; decimals < 17; decimals++ {
		s := strconv.FormatFloat(a.Deg(), 'f', decimals, 64)
		if v, err := strconv.ParseFloat(s, 64); err == nil && astro.Deg(v).Turn() == a && v >= 0 && v < 360 {
			return s
		}
	}
	return number(math.Max(a.Deg(), 0))
}

// extras lists the columns that are not ours, in order of appearance.
func extras(list []targets.Target) []string {
	var names []string
	for i := range list {
		for _, f := range list[i].Extra {
			if !slices.Contains(names, f.Name) {
				names = append(names, f.Name)
			}
		}
	}
	return names
}

func extra(t *targets.Target, name string) string {
	for _, f := range t.Extra {
		if f.Name == name {
			return f.Value
		}
	}
	return ""
}
