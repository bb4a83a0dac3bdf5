package main

import (
	"strings"

	"github.com/spf13/cobra"
)

const job = `evenfall is for people who observe stars late in their lives: red giants, Miras,
planetary nebulae, white dwarfs and the binaries they make. It says where each
target is, when it is best and until when, what it is and how bright it should be.`

const caution = `Caution: the program moves no telescope. Pointing limits, the Sun, the weather and
the safety of people and instruments are the observatory's; its rules come first.`

// rootCommand builds the whole command line.
func rootCommand(w world, args []string) *cobra.Command {
	o := &options{}
	root := &cobra.Command{
		Use:                        "evenfall",
		Short:                      "what to observe next among stars late in their lives",
		Long:                       job + "\n\n" + caution,
		SilenceErrors:              true,
		SuggestionsMinimumDistance: 2,
		SilenceUsage:               true,
		Args:                       noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			if w.terminal {
				return openScreen(w, o)
			}
			return runList(w, o)
		},
	}
	root.SetArgs(args)
	root.SetIn(w.in)
	root.SetOut(w.out)
	root.SetErr(w.err)
	root.SetFlagErrorFunc(func(_ *cobra.Command, err error) error {
		return usagef("%w; see evenfall --help", err)
	})
	o.bind(root)
	f := root.Flags()
	f.StringVar(&o.theme, "theme", "", "screen: `dark|red|plain` (default dark, or $EVENFALL_THEME); v goes through them")
	f.StringVar(&o.glyphs, "glyphs", "", "screen: `auto|ascii|unicode|braille` for drawings (default auto, or $EVENFALL_GLYPHS)")
	f.StringVar(&o.observer, "observer", "", "screen: `NAME` of who observes (default $EVENFALL_OBSERVER, else asked once)")
	f.StringVar(&o.tick, "tick", "1s", "screen: the clock goes on every `1s|10s|60s|off`; slower is kinder to a slow link")
	root.AddCommand(listCommand(w, o), almanacCommand(w, o), showCommand(w, o), eventsCommand(w, o),
		checkCommand(w, o), newCommand(w), readCommand(w, o), logCommand(w, o), exportCommand(w, o), importCommand(w, o), versionCommand(w))
	root.InitDefaultHelpCmd()
	root.InitDefaultCompletionCmd()
	wrapUnknown(root)
	return root
}

// wrapUnknown makes an unknown command a usage error.
func wrapUnknown(root *cobra.Command) {
	root.Args = func(cmd *cobra.Command, args []string) error {
		if len(args) == 0 {
			return nil
		}
		msg := "no command " + quote(args[0])
		if s := cmd.SuggestionsFor(args[0]); len(s) > 0 {
			msg += "; did you mean " + strings.Join(s, " or ")
		}
		return usagef("%s; see evenfall --help", msg)
	}
}

// noArgs refuses stray words.
func noArgs(cmd *cobra.Command, args []string) error {
	if len(args) > 0 {
		return usagef("%s takes no %s; see evenfall %s --help", cmd.Name(), quote(args[0]), cmd.Name())
	}
	return nil
}

// exactly demands a number of words.
func exactly(n int, what string) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		if len(args) != n {
			return usagef("%s wants %s; see evenfall %s --help", cmd.Name(), what, cmd.Name())
		}
		return nil
	}
}

func quote(s string) string { return `"` + s + `"` }
