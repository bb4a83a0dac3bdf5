// Package builtin holds what the program carries with it, so that it is of use
// before anyone has written a list. It reads nothing from outside: what it
// gives was embedded when the program was built. It refuses to add to a list,
// to correct it, or to fill in what is missing.
package builtin

import (
	"bytes"
	_ "embed"
	"errors"
	"fmt"
	"slices"
	"sync"

	"evenfall/targets"
	"evenfall/targets/table"
)

// StarsName stands for the built-in list where a message or a target says
// which file something came from.
const StarsName = "built-in list"

//go:embed stars.csv
var starsCSV []byte

var parseStars = sync.OnceValues(func() ([]targets.Target, error) {
	return parse(starsCSV, StarsName)
})

// Stars returns the built-in list: giants, long-period variables, post-AGB
// stars, planetary nebulae, white dwarfs and interacting binaries of both
// hemispheres.
//
// Returns:
//   - the targets in the order of the list. The slice is the caller's own; the
//     maps and slices inside each target are shared and must not be changed.
//   - an error only if the embedded list itself is at fault.
//
// Notes:
//  1. A value that no open file confirmed, or that one contradicts, is named
//     in Unconfirmed; Conflicts tells both values. Nothing is corrected.
//  2. The list is read once; later calls copy the slice.
//
// Source: each target's own Source; the rules stand in
// testdata/make/builtin.py.
//
// Checked: TestStars, TestSpots, and TestFacts against the table of facts.
func Stars() ([]targets.Target, error) {
	list, err := parseStars()
	return slices.Clone(list), err
}

// parse reads a list of which not one cell may be at fault.
func parse(csv []byte, name string) ([]targets.Target, error) {
	list, problems := table.Read(bytes.NewReader(csv), name)
	var faults []error
	for _, p := range problems {
		if !p.Warning {
			faults = append(faults, p)
		}
	}
	if err := errors.Join(faults...); err != nil {
		return nil, fmt.Errorf("reading the %s: %w", name, err)
	}
	return list, nil
}
