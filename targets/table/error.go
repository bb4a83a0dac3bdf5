package table

import (
	"fmt"

	"evenfall/targets"
)

// Error is one cell, row or key that could not be taken as it stands: where
// it is, what it says, what is wrong with it and what to do.
type Error struct {
	At      targets.Where
	Field   string // column or key; "" for the row or file as a whole
	Value   string // as written, cleaned of control characters
	Problem string
	Fix     string
	Warning bool // taken all the same; the exit status stays 0
}

// Error writes: file:line:column: field "value": what is wrong; what to do.
func (e *Error) Error() string {
	what := e.Problem
	switch {
	case e.Field != "" && e.Value != "":
		what = fmt.Sprintf("%s %q: %s", e.Field, e.Value, e.Problem)
	case e.Field != "":
		what = fmt.Sprintf("%s: %s", e.Field, e.Problem)
	case e.Value != "":
		what = fmt.Sprintf("%q: %s", e.Value, e.Problem)
	}
	if e.Warning {
		what = "warning: " + what
	}
	if e.Fix != "" {
		what += "; " + e.Fix
	}
	return fmt.Sprintf("%s: %s", e.At, what)
}
