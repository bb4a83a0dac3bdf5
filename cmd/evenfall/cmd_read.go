package main

import (
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"evenfall/targets"
	"evenfall/targets/table"
)

func readCommand(w world, o *options) *cobra.Command {
	var columns []string
	c := &cobra.Command{
		Use:   "read FILE [--column ra_deg=RAJ2000 ...]",
		Short: "read a table and print it as an evenfall list",
		Long: "Reads a table (CSV) and prints it as an evenfall list, CSV or JSON. Columns that are not\n" +
			"recognised are kept; --column says which column of the file is which of the list's.",
		Example: "  evenfall read survey.csv --column ra_deg=RAJ2000 --column dec_deg=DEJ2000",
		Args:    exactly(1, "one file, or - for standard input"),
		RunE: func(_ *cobra.Command, args []string) error {
			if !o.formatSet {
				o.format = "csv"
			}
			if err := o.oneOf("csv", "json"); err != nil {
				return err
			}
			return runRead(w, o, args[0], columns)
		},
	}
	c.Flags().StringArrayVar(&columns, "column", nil, "`OURS=THEIRS`: take a column of the file for one of the list's; repeatable")
	return c
}

func runRead(w world, o *options, file string, columns []string) error {
	rename := map[string]string{}
	for _, c := range columns {
		ours, theirs, ok := strings.Cut(c, "=")
		if !ok || ours == "" || theirs == "" {
			return usagef("--column %s: write OURS=THEIRS, e.g. ra_deg=RAJ2000", quote(c))
		}
		if !table.IsColumn(ours) {
			return usagef("--column %s: %s is no column of an evenfall list; see README, Lists", quote(c), quote(ours))
		}
		rename[theirs] = ours
	}
	s := &session{siteChoice: &siteChoice{}}
	list, err := readFile(w, file, table.ReaderWith(rename), s)
	if err != nil {
		return err
	}
	if o.format == "json" {
		var shape any
		if shape, err = readShape(list); err == nil {
			err = printJSON(w.out, shape)
		}
	} else {
		err = table.Write(w.out, list)
	}
	if err != nil {
		return err
	}
	return s.status()
}

// readShape is a list as JSON: each target by its columns, numbers as numbers.
func readShape(list []targets.Target) (any, error) {
	out := []map[string]any{}
	for i := range list {
		t := &list[i]
		v := view{t: t}
		listed, err := v.listed()
		if err != nil {
			return nil, err
		}
		row := map[string]any{"name": t.Name, "kind": string(t.Kind)}
		for name, text := range map[string]string{"id": t.ID, "kind_note": t.KindNote, "notes": t.Notes, "source": t.Source, "conflicts": t.Conflicts} {
			if text != "" {
				row[name] = text
			}
		}
		if len(t.Unconfirmed) > 0 {
			row["unconfirmed"] = t.Unconfirmed
		}
		for _, l := range listed {
			row[l.Column] = l.Value
			if n, err := strconv.ParseFloat(l.Value, 64); err == nil && table.IsNumber(l.Column) {
				row[l.Column] = n
			}
		}
		out = append(out, row)
	}
	return map[string]any{"targets": out}, nil
}
