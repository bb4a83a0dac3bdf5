package main

import (
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
		err = printJSON(w.out, readShape(list))
	} else {
		err = table.Write(w.out, list)
	}
	if err != nil {
		return err
	}
	return s.status()
}

// readShape is a list as JSON: each target by its columns, as text exactly as
// it would be written to a list.
func readShape(list []targets.Target) any {
	var out []map[string]string
	for i := range list {
		row := map[string]string{}
		v := view{t: &list[i]}
		listed, err := v.listed()
		if err != nil {
			continue
		}
		row["name"], row["kind"] = list[i].Name, string(list[i].Kind)
		for _, l := range listed {
			row[l.Column] = l.Value
		}
		out = append(out, row)
	}
	return map[string]any{"targets": out}
}
