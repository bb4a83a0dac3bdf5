package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strconv"
	"time"

	"github.com/spf13/cobra"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/store"
	"evenfall/targets/table"
)

func logCommand(w world, o *options) *cobra.Command {
	var history bool
	c := &cobra.Command{
		Use:   "log",
		Short: "print the log of the run; its subcommands write it",
		Long: "Prints the log: each entry as it stands now, by its start. --night and --until choose nights,\n" +
			"--history prints every entry ever written, those replaced too. Nothing is ever deleted:\n" +
			"amend and void write a new entry in place of an old one.",
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runLog(cmd.Context(), w, o, history) },
	}
	c.Flags().BoolVar(&history, "history", false, "every entry ever written, by number")
	c.PersistentFlags().StringVar(&o.observer, "observer", "", "`NAME` of who observes (default $EVENFALL_OBSERVER)")
	c.AddCommand(logAddCommand(w, o), logAmendCommand(w, o), logVoidCommand(w, o), logNoteCommand(w, o),
		logClosedCommand(w, o), logOpenCommand(w, o), logConditionsCommand(w, o), logMagnitudeCommand(w, o))
	return c
}

// writing is a run folder with its book open.
type writing struct {
	*session
	o    *options
	w    world
	book *logbook.Book
	db   *store.DB
	now  time.Time
}

// openBook opens the run folder and its run.db. The demonstration and places
// without a run folder have no log.
func openBook(w world, o *options) (*writing, error) {
	if o.latSet {
		return nil, usagef("the log belongs to a run folder; --lat has none")
	}
	dir := first(o.run, ".")
	if _, err := os.Stat(filepath.Join(dir, "run.toml")); err != nil {
		return nil, usagef("%s has no run.toml, so there is no log; make a run with 'evenfall new DIR' (the demonstration keeps none)", quote(dir))
	}
	s, err := openSession(w, o)
	if err != nil {
		return nil, err
	}
	now, given, err := o.instant()
	if err != nil {
		return nil, err
	}
	if !given {
		now = w.clock.Now()
	}
	db, err := store.Open(filepath.Join(dir, "run.db"))
	if err != nil {
		return nil, err
	}
	x := &writing{session: s, o: o, w: w, db: db, now: now}
	x.book = logbook.Open(db, func() time.Time { return now }, first(o.observer, os.Getenv("EVENFALL_OBSERVER")))
	return x, nil
}

// within opens the book, does one thing and closes it.
func within(w world, o *options, do func(x *writing) error) error {
	x, err := openBook(w, o)
	if err != nil {
		return err
	}
	err = do(x)
	if closed := x.db.Close(); err == nil {
		err = closed
	}
	return err
}

func runLog(ctx context.Context, w world, o *options, history bool) error {
	if err := o.oneOf("text", "json", "csv"); err != nil {
		return err
	}
	return within(w, o, func(x *writing) error {
		var from, until time.Time
		firstNight, last, given, err := o.dates()
		if err != nil {
			return err
		}
		if given {
			if from, until, err = x.span(firstNight, last); err != nil {
				return err
			}
		}
		list, err := x.book.Entries(ctx, from, until)
		if history {
			list, err = x.book.History(ctx)
		}
		if err != nil {
			return err
		}
		switch o.format {
		case "json":
			return printJSON(w.out, logShape(list))
		case "csv":
			return logCSV(w.out, list)
		}
		all, err := x.book.Entries(ctx, time.Time{}, time.Time{})
		if err != nil {
			return err
		}
		return x.logText(w.out, list, all)
	})
}

// span is the time from the noon before one night to the noon after another.
func (x *writing) span(firstNight, last astro.Date) (from, until time.Time, err error) {
	a, err := x.nightOf(firstNight)
	if err != nil {
		return from, until, usagef("%w", err)
	}
	b, err := x.nightOf(last)
	if err != nil {
		return from, until, usagef("%w", err)
	}
	return a.Span.From.UTC(), b.Span.Until.UTC(), nil
}

func logAddCommand(w world, o *options) *cobra.Command {
	g := &given{}
	c := &cobra.Command{
		Use:   "add",
		Short: "write an entry; prints its number once it is on the disk",
		Example: "  evenfall log add --target 'R Lep' --start 2026-12-02T04:10:00Z --end 2026-12-02T04:16:00Z --frames 3 --each 90 --files obs0042..obs0044\n" +
			"  evenfall log add --type flat --start 2026-12-01T23:40:00Z --end 2026-12-01T23:50:00Z --frames 11",
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return within(w, o, func(x *writing) error {
				var e logbook.Entry
				if err := g.put(cmd, x, &e); err != nil {
					return err
				}
				if err := x.complete(g, &e, ""); err != nil {
					return err
				}
				id, err := x.book.Add(cmd.Context(), e)
				return x.acknowledge(id, err)
			})
		},
	}
	g.bind(c, "science")
	return c
}

// number reads the number of an entry.
func number(s string) (int64, error) {
	id, err := strconv.ParseInt(s, 10, 64)
	if err != nil || id < 1 {
		return 0, usagef("%s: not the number of an entry; evenfall log prints them", quote(s))
	}
	return id, nil
}

func logAmendCommand(w world, o *options) *cobra.Command {
	g := &given{}
	c := &cobra.Command{
		Use:   "amend NUMBER",
		Short: "write an entry in place of another; the old one is kept",
		Args:  exactly(1, "the number of one entry"),
		RunE: func(cmd *cobra.Command, args []string) error {
			id, err := number(args[0])
			if err != nil {
				return err
			}
			return within(w, o, func(x *writing) error {
				made, err := x.book.Amend(cmd.Context(), id, func(e *logbook.Entry) error {
					was := e.Target
					if err := g.put(cmd, x, e); err != nil {
						return err
					}
					return x.complete(g, e, was)
				})
				return x.acknowledge(made, err)
			})
		},
	}
	g.bind(c, "science")
	return c
}

func logVoidCommand(w world, o *options) *cobra.Command {
	var note string
	c := &cobra.Command{
		Use:   "void NUMBER",
		Short: "declare an entry void; it stays in the log",
		Args:  exactly(1, "the number of one entry"),
		RunE: func(cmd *cobra.Command, args []string) error {
			id, err := number(args[0])
			if err != nil {
				return err
			}
			return within(w, o, func(x *writing) error {
				made, err := x.book.Void(cmd.Context(), id, table.Clean(note))
				return x.acknowledge(made, err)
			})
		},
	}
	c.Flags().StringVar(&note, "note", "", "why: `TEXT`")
	return c
}

// acknowledge prints an entry's number once it is on the disk.
func (x *writing) acknowledge(id int64, err error) error {
	if err != nil {
		return asUsage(err)
	}
	_, err = fmt.Fprintln(x.w.out, id)
	return err
}

// asUsage makes an entry that is not there a mistake of the call; failures of
// the disk stay failures.
func asUsage(err error) error {
	for _, disk := range []error{store.ErrFull, store.ErrReadOnly, store.ErrBusy, store.ErrCorrupt, store.ErrDisk, store.ErrNewer} {
		if errors.Is(err, disk) {
			return err
		}
	}
	return usagef("%w", err)
}

// bookOf is what run.db of a run folder holds for every command: targets typed
// in, magnitudes entered, the conditions of a time.
func bookOf(dir string, at time.Time) (list []targets.Target, mags []targets.Magnitude, c targets.Conditions, err error) {
	path := filepath.Join(dir, "run.db")
	if _, err := os.Stat(path); err != nil {
		return nil, nil, c, nil
	}
	db, err := store.Open(path)
	if err != nil {
		return nil, nil, c, err
	}
	defer db.Close()
	b := logbook.Open(db, nil, "")
	ctx := context.Background()
	if list, err = b.Added(ctx); err != nil {
		return nil, nil, c, err
	}
	if mags, err = b.Magnitudes(ctx); err != nil {
		return nil, nil, c, err
	}
	now, err := b.At(ctx, at)
	return list, mags, now.Of(), err
}
