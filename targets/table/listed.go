package table

import (
	"encoding/csv"
	"fmt"
	"strings"

	"evenfall/targets"
)

// ListedValue is one column of a target's list as it would be written back.
type ListedValue struct {
	Column, Value, Unit string
	Unconfirmed         bool // no open source bore it out
}

// setApart are the columns that are shown in a way of their own.
var setApart = map[string]bool{"id": true, "name": true, "kind": true, "source": true, "unconfirmed": true, "conflicts": true, "notes": true}

// Listed returns what a list says of a target, with units: all columns that
// are given but names, notes and sources.
func Listed(t *targets.Target) ([]ListedValue, error) {
	var b strings.Builder
	if err := Write(&b, []targets.Target{*t}); err != nil {
		return nil, fmt.Errorf("writing out %s: %w", t.Name, err)
	}
	rows, err := csv.NewReader(strings.NewReader(b.String())).ReadAll()
	if err != nil {
		return nil, fmt.Errorf("writing out %s: %w", t.Name, err)
	}
	if len(rows) != 2 {
		return nil, fmt.Errorf("writing out %s: %d rows, wanted 2", t.Name, len(rows))
	}
	units := map[string]string{}
	for _, c := range Columns() {
		units[c.Name] = c.Unit
	}
	var out []ListedValue
	for k, column := range rows[0] {
		if value := rows[1][k]; value != "" && !setApart[column] {
			out = append(out, ListedValue{column, value, units[column], t.IsUnconfirmed(column)})
		}
	}
	return out, nil
}
