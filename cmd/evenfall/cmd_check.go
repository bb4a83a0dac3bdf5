package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"evenfall/targets/builtin"
	"evenfall/targets/logbook"
	"evenfall/targets/run"
	"evenfall/targets/store"
)

func checkCommand(w world, o *options) *cobra.Command {
	return &cobra.Command{
		Use:   "check",
		Short: "read everything in the run folder and report every problem",
		Long: "Reads everything in the run folder and prints every problem as\n" +
			"file:line:column: what is wrong; what to do. Exits 1 if any is an error; warnings are none.",
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
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
			return errors.Join(runCheck(w, fsys, dir), checkStore(cmd.Context(), w, dir))
		},
	}
}

// networkKind names the network file system that holds a folder; a test puts
// another one in its place.
var networkKind = store.NetworkKind

// checkStore looks at run.db: whether it is sound, where it lies, and which
// takes nobody has ended.
func checkStore(ctx context.Context, w world, dir string) error {
	if kind := networkKind(dir); kind != "" {
		fmt.Fprintf(w.out, "%s: warning: the run folder lies on %s; %s\n", dir, kind, store.Advice)
	}
	path := filepath.Join(dir, "run.db")
	if _, err := os.Stat(path); err != nil {
		return nil
	}
	db, err := store.Open(path)
	if err != nil {
		return err
	}
	defer db.Close()
	if db.ReadOnly() {
		fmt.Fprintf(w.out, "%s: warning: it cannot be written; nothing would be saved; check permissions and whether the disk is mounted read-only\n", path)
	}
	if err := db.Check(ctx); err != nil {
		fmt.Fprintf(w.out, "%s: %v\n", path, err)
		return errRefused
	}
	b := logbook.Open(db, w.clock.Now, "")
	takes, err := b.UnderWay(ctx)
	if err != nil {
		return err
	}
	for _, t := range takes {
		fmt.Fprintf(w.out, "%s: warning: %s of %s by %s, begun %s, was never ended; open the screen and press t, or x\n",
			path, t.Phase, t.Target, first(t.Observer, "somebody"), t.Began.Format("2006-01-02 15:04 UTC"))
	}
	list, err := b.History(ctx)
	if err != nil {
		return err
	}
	fmt.Fprintf(w.out, "%s: sound, %s\n", path, count(len(list), "row")+" of the log")
	return nil
}

func runCheck(w world, fsys fs.FS, dir string) error {
	r, problems := run.Open(fsys, dir)
	if _, wrong := run.Field(fsys, dir); len(wrong) > 0 {
		problems = append(problems, wrong...)
	}
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
