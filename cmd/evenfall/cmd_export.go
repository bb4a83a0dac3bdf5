package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"evenfall/targets/store"
)

func exportCommand(w world, o *options) *cobra.Command {
	return &cobra.Command{
		Use:   "export [TABLE...]",
		Short: "every table of run.db as JSON, or one as CSV",
		Long: "Writes the tables named, all of them where none is: as JSON, or with --format csv one table as CSV.\n" +
			"The tables are " + strings.Join(store.Names(), ", ") + ".",
		Example: "  evenfall export > run.json\n  evenfall export entries --format csv > log.csv",
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := knownTables(args); err != nil {
				return err
			}
			return within(w, o, func(x *writing) error {
				if o.format == "csv" {
					if len(args) != 1 {
						return usagef("--format csv writes one table; name one of %s", strings.Join(store.Names(), ", "))
					}
					return x.db.ExportCSV(cmd.Context(), args[0], w.out)
				}
				return x.db.ExportJSON(cmd.Context(), w.out, args...)
			})
		},
	}
}

func knownTables(names []string) error {
	for _, n := range names {
		if !slices.Contains(store.Names(), n) {
			return usagef("no table %s; the tables are %s", quote(n), strings.Join(store.Names(), ", "))
		}
	}
	return nil
}

func importCommand(w world, o *options) *cobra.Command {
	return &cobra.Command{
		Use:   "import FILE [TABLE]",
		Short: "take an export into run.db: JSON, or one table's CSV",
		Long: "Takes rows in with their numbers, all or none. A row that is there already is passed over;\n" +
			"one that contradicts what is there is named, and nothing comes in. - reads standard input.",
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) < 1 || len(args) > 2 {
				return usagef("import wants a file, and for CSV a table; see evenfall import --help")
			}
			return knownTables(args[1:])
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			in := w.in
			if args[0] != "-" {
				f, err := os.Open(args[0])
				if errors.Is(err, os.ErrNotExist) {
					return usagef("%s: no such file", quote(args[0]))
				}
				if err != nil {
					return err
				}
				defer f.Close()
				in = f
			}
			return within(w, o, func(x *writing) error {
				var n int
				var err error
				if len(args) == 2 {
					n, err = x.db.ImportCSV(cmd.Context(), args[1], in)
				} else {
					n, err = x.db.ImportJSON(cmd.Context(), in)
				}
				if err != nil {
					if refusedBy(err) {
						fmt.Fprintln(w.err, "evenfall: nothing was taken in:", err)
						return errRefused
					}
					return err
				}
				_, err = io.WriteString(w.err, fmt.Sprintf("evenfall: %s taken in\n", count(n, "row")))
				return err
			})
		},
	}
}

// refusedBy tells whether an error is about what was to be taken in, not
// about the disk.
func refusedBy(err error) bool {
	var usage usageError
	return errors.As(asUsage(err), &usage)
}
