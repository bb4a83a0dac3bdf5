package main

import (
	"fmt"
	"io/fs"
	"os"

	"github.com/spf13/cobra"

	"evenfall/targets/builtin"
	"evenfall/targets/run"
)

func checkCommand(w world, o *options) *cobra.Command {
	return &cobra.Command{
		Use:   "check",
		Short: "read everything in the run folder and report every problem",
		Long: "Reads everything in the run folder and prints every problem as\n" +
			"file:line:column: what is wrong; what to do. Exits 1 if any is an error; warnings are none.",
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error {
			if o.latSet {
				return usagef("check looks at a run folder; --lat has none")
			}
			var fsys fs.FS
			dir := o.run
			if dir == "" {
				dir = "."
			}
			if _, err := os.Stat(dir + "/run.toml"); err != nil {
				if o.run != "" {
					return usagef("%s has no run.toml; make a run with 'evenfall new DIR'", quote(o.run))
				}
				fmt.Fprintln(w.err, demoNotice)
				fsys = builtin.Demo()
			} else {
				fsys = os.DirFS(dir)
			}
			return runCheck(w, fsys, dir)
		},
	}
}

func runCheck(w world, fsys fs.FS, dir string) error {
	r, problems := run.Open(fsys, dir)
	refused, warned := 0, 0
	for _, p := range problems {
		fmt.Fprintln(w.out, p)
		if p.Warning {
			warned++
		} else {
			refused++
		}
	}
	if r != nil {
		fmt.Fprintf(w.out, "%s, %s, %s\n", count(len(r.Targets), "target"), count(len(r.Requests), "request"),
			count(len(r.Magnitudes), "magnitude"))
	}
	fmt.Fprintf(w.out, "%s, %s\n", count(refused, "error"), count(warned, "warning"))
	if refused > 0 {
		return errRefused
	}
	return nil
}

func count(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}
