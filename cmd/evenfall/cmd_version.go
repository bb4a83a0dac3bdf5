package main

import (
	"fmt"
	"runtime"
	"runtime/debug"

	"github.com/spf13/cobra"

	"evenfall/targets/builtin"
	"evenfall/targets/stage"
)

func versionCommand(w world) *cobra.Command {
	return &cobra.Command{
		Use:   "version",
		Short: "version, commit, Go version, editions of the built-in data",
		Args:  noArgs,
		RunE: func(*cobra.Command, []string) error {
			version, commit := "unreleased", "unknown"
			if info, ok := debug.ReadBuildInfo(); ok {
				if v := info.Main.Version; v != "" && v != "(devel)" {
					version = v
				}
				for _, s := range info.Settings {
					if s.Key == "vcs.revision" {
						commit = s.Value
					}
				}
			}
			fmt.Fprintf(w.out, "evenfall %s\ncommit %s\n%s %s/%s\n", version, commit, runtime.Version(), runtime.GOOS, runtime.GOARCH)
			for _, e := range builtin.Editions() {
				fmt.Fprintln(w.out, e)
			}
			fmt.Fprintln(w.out, stage.Edition)
			return nil
		},
	}
}
