package main

import (
	"fmt"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"evenfall/astro/timescale"
	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/table"
)

// from reads the time from which something holds; none given: now.
func (x *writing) from(flag, value string) (time.Time, error) {
	if value == "" {
		return x.now.UTC().Truncate(time.Second), nil
	}
	t, err := time.Parse(time.RFC3339Nano, value)
	if err != nil {
		return t, usagef("--%s %s: not a time; write e.g. 2026-12-02T04:10:00Z", flag, quote(value))
	}
	return t.UTC(), nil
}

func logNoteCommand(w world, o *options) *cobra.Command {
	var start string
	c := &cobra.Command{
		Use:   "note TEXT",
		Short: "write a note",
		Args:  exactly(1, "one text, in quotes"),
		RunE: func(cmd *cobra.Command, args []string) error {
			return within(w, o, func(x *writing) error {
				at, err := x.from("start", start)
				if err != nil {
					return err
				}
				text := table.Clean(args[0])
				if strings.TrimSpace(text) == "" {
					return usagef("a note without words")
				}
				id, err := x.book.Add(cmd.Context(), logbook.Entry{Type: "note", Start: at, Note: text})
				return x.acknowledge(id, err)
			})
		},
	}
	c.Flags().StringVar(&start, "start", "", "`TIME` it is about (default now)")
	return c
}

func logClosedCommand(w world, o *options) *cobra.Command {
	var start, end, reason, note string
	c := &cobra.Command{
		Use:   "closed",
		Short: "the dome is closed, with the reason; log open ends it",
		Args:  noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return within(w, o, func(x *writing) error {
				at, err := x.from("start", start)
				if err != nil {
					return err
				}
				until, err := x.from("end", end)
				if err != nil {
					return err
				}
				if end != "" && until.Before(at) {
					return usagef("--end comes before --start")
				}
				id, err := x.book.Conditions(cmd.Context(), logbook.Conditions{From: at, Dome: "closed", Reason: reason, Note: table.Clean(note)})
				if err != nil {
					return asUsage(err)
				}
				if end != "" {
					if _, err := x.book.Conditions(cmd.Context(), logbook.Conditions{From: until, Dome: "open"}); err != nil {
						return asUsage(err)
					}
				}
				_, err = fmt.Fprintln(w.out, id)
				return err
			})
		},
	}
	f := c.Flags()
	f.StringVar(&start, "start", "", "`TIME` of closing (default now)")
	f.StringVar(&end, "end", "", "`TIME` of opening, if it is past")
	f.StringVar(&reason, "reason", "weather", "weather, fault or other")
	f.StringVar(&note, "note", "", "`TEXT`")
	return c
}

func logOpenCommand(w world, o *options) *cobra.Command {
	var start, note string
	c := &cobra.Command{
		Use:   "open",
		Short: "the dome is open again",
		Args:  noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return within(w, o, func(x *writing) error {
				at, err := x.from("start", start)
				if err != nil {
					return err
				}
				id, err := x.book.Conditions(cmd.Context(), logbook.Conditions{From: at, Dome: "open", Note: table.Clean(note)})
				return x.acknowledge(id, err)
			})
		},
	}
	c.Flags().StringVar(&start, "start", "", "`TIME` of opening (default now)")
	c.Flags().StringVar(&note, "note", "", "`TEXT`")
	return c
}

func logConditionsCommand(w world, o *options) *cobra.Command {
	var start, photometric, instrument, note string
	var seeing, extinction, cloudFrom, cloudTo, windFrom, wind, humidity, dew float64
	c := &cobra.Command{
		Use:     "conditions",
		Short:   "what the sky is like from now on; what is not given still holds",
		Example: "  evenfall log conditions --seeing 1.2 --extinction 0.3 --wind 8 --wind-from 320 --humidity 0.45",
		Args:    noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return within(w, o, func(x *writing) error {
				at, err := x.from("start", start)
				if err != nil {
					return err
				}
				k := logbook.Conditions{From: at, Photometric: photometric, Instrument: table.Clean(instrument), Note: table.Clean(note)}
				for _, n := range []struct {
					flag  string
					value float64
					into  *targets.Measure
				}{{"seeing", seeing, &k.Seeing}, {"extinction", extinction, &k.Extinction}, {"cloud-from", cloudFrom, &k.CloudFrom}, {"cloud-to", cloudTo, &k.CloudTo},
					{"wind-from", windFrom, &k.WindFrom}, {"wind", wind, &k.WindMS}, {"humidity", humidity, &k.Humidity}, {"dew-margin", dew, &k.DewMarginC}} {
					if cmd.Flags().Changed(n.flag) {
						*n.into = targets.Known(n.value)
					}
				}
				id, err := x.book.Conditions(cmd.Context(), k)
				if err != nil {
					return asUsage(err)
				}
				now, err := x.book.At(cmd.Context(), at)
				if err != nil {
					return err
				}
				for _, warning := range now.Warnings(&x.limits) {
					fmt.Fprintln(w.err, "evenfall: warning:", warning)
				}
				_, err = fmt.Fprintln(w.out, id)
				return err
			})
		},
	}
	f := c.Flags()
	f.StringVar(&start, "start", "", "`TIME` from which it holds (default now)")
	f.Float64Var(&seeing, "seeing", 0, "`ARCSEC`")
	f.Float64Var(&extinction, "extinction", 0, "`MAG` of thin cloud")
	f.Float64Var(&cloudFrom, "cloud-from", 0, "azimuth `DEG` at which a sector of cloud begins, eastward to")
	f.Float64Var(&cloudTo, "cloud-to", 0, "azimuth `DEG`")
	f.Float64Var(&windFrom, "wind-from", 0, "azimuth `DEG` that the wind comes from")
	f.Float64Var(&wind, "wind", 0, "`M/S`")
	f.Float64Var(&humidity, "humidity", 0, "0 to 1")
	f.Float64Var(&dew, "dew-margin", 0, "degrees `C` above the dew point")
	f.StringVar(&photometric, "photometric", "", "yes or no")
	f.StringVar(&instrument, "instrument", "", "in use: `I`")
	f.StringVar(&note, "note", "", "`TEXT`")
	return c
}

func logMagnitudeCommand(w world, o *options) *cobra.Command {
	var name, at, source string
	var mag, err1, jd float64
	var faint bool
	c := &cobra.Command{
		Use:     "magnitude",
		Short:   "a measured magnitude; forecasts use it",
		Example: "  evenfall log magnitude --target 'R Lep' --band V --mag 8.1 --err 0.05 --utc 2026-12-02T04:00:00Z",
		Args:    noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return within(w, o, func(x *writing) error {
				i, err := x.find(name)
				if err != nil {
					return err
				}
				if o.band == "" || !cmd.Flags().Changed("mag") {
					return usagef("a magnitude needs --band and --mag")
				}
				if cmd.Flags().Changed("jd") && at != "" {
					return usagef("give --jd or --utc, not both")
				}
				m := targets.Magnitude{Target: x.targets[i].Name, JD: jd, TimeScale: "JD_UTC", Band: targets.Band(o.band), Mag: mag, Err: err1, Limit: faint, Source: table.Clean(source)}
				if !cmd.Flags().Changed("jd") {
					t, err := x.from("utc", at)
					if err != nil {
						return err
					}
					instant, err := timescale.At(t)
					if err != nil {
						return usagef("%w", err)
					}
					m.JD = instant.JDUTC()
				}
				if err := table.CheckMagnitude(&m, x.now); err != nil {
					return usagef("%w", err)
				}
				id, err := x.book.AddMagnitude(cmd.Context(), m)
				return x.acknowledge(id, err)
			})
		},
	}
	f := c.Flags()
	f.StringVar(&name, "target", "", "target `T`: its name or id")
	f.Float64Var(&mag, "mag", 0, "`MAG`")
	f.Float64Var(&err1, "err", 0, "its error `MAG`, one sigma")
	f.Float64Var(&jd, "jd", 0, "Julian date `JD`, UTC")
	f.StringVar(&at, "utc", "", "or `TIME` (default now)")
	f.BoolVar(&faint, "fainter", false, "not seen: fainter than this")
	f.StringVar(&source, "source", "", "who measured: `TEXT`")
	return c
}
