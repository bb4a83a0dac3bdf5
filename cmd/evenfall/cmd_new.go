package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"evenfall/targets/builtin"
	"evenfall/targets/run"
)

func newCommand(w world) *cobra.Command {
	var siteName string
	c := &cobra.Command{
		Use:     "new DIR [--site NAME]",
		Short:   "make a run folder with a commented run.toml, an example list and example requests",
		Example: "  evenfall new my-run --site Paranal",
		Args:    exactly(1, "the name of the folder to make"),
		RunE: func(_ *cobra.Command, args []string) error {
			var place run.Place
			if siteName != "" {
				e, err := builtin.FindSite(siteName)
				if err != nil {
					return usagef("--site: %w", err)
				}
				place = placeOf(e)
			}
			err := run.New(args[0], place)
			if errors.Is(err, run.ErrExists) {
				return usageError{err}
			}
			if err != nil {
				return err
			}
			fmt.Fprintf(w.out, "made %s: edit run.toml, then: evenfall check --run %s\n", args[0], args[0])
			return nil
		},
	}
	c.Flags().StringVar(&siteName, "site", "", "take place and zone of the observatory `NAME`")
	c.RegisterFlagCompletionFunc("site", func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
		var names []string
		for _, e := range builtin.Sites() {
			names = append(names, e.Name)
		}
		return names, cobra.ShellCompDirectiveNoFileComp
	})
	return c
}

// placeOf turns a listed site into that of a new run.
func placeOf(e builtin.SiteEntry) run.Place {
	return run.Place{Name: e.Name, LatDeg: e.LatDeg, LonDeg: e.LonDeg, ElevM: e.ElevM, Zone: e.Zone}
}
