package main

import (
	"io"
	"strings"

	"github.com/spf13/cobra"
)

// newRoot returns the command tree. Data go to stdout, progress and trouble to
// stderr.
func newRoot(stdout, stderr io.Writer) *cobra.Command {
	root := &cobra.Command{
		Use:   "bendtest",
		Short: "Put scatterplot smoothers to the test on data whose true curve is known",
		Long: `bendtest runs simulation studies of scatterplot smoothers: it draws training and
held-out sets from true curves, fits every smoother over a grid of equivalent
degrees of freedom, applies the selection rules, and compares what they pick with
the noise floor that no method can beat.

Exit codes: 0 done, 1 a fault while working, 2 the request was wrong and nothing
was done, 3 stopped by a signal with everything so far kept.`,
		Example: `  bendtest run                       the embedded demonstration study
  bendtest run night.toml -o night   a study of your own, tables in night/tables
  bendtest describe study            what a study file may say`,
		SilenceErrors:     true,
		SilenceUsage:      true,
		CompletionOptions: cobra.CompletionOptions{HiddenDefaultCmd: true},
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) == 0 {
				return nil
			}
			return unknownCommand(cmd, args[0])
		},
		RunE: func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
	}
	root.SuggestionsMinimumDistance = 2
	root.SetOut(stdout)
	root.SetErr(stderr)
	root.SetFlagErrorFunc(func(cmd *cobra.Command, err error) error {
		return refuse("%w (see %q)", err, cmd.CommandPath()+" --help")
	})
	root.AddCommand(runCommand(), planCommand(), gatherCommand(), arrayCommand(), fitCommand(), verdictCommand(), exportCommand(), describeCommand(), versionCommand())
	return root
}

// unknownCommand refuses a command word, with the nearest ones.
func unknownCommand(cmd *cobra.Command, word string) error {
	if near := cmd.SuggestionsFor(word); len(near) > 0 {
		return refuse("unknown command %q (did you mean %q?)", word, near[0])
	}
	var known []string
	for _, c := range cmd.Commands() {
		if c.IsAvailableCommand() {
			known = append(known, c.Name())
		}
	}
	return refuse("unknown command %q (known: %s)", word, strings.Join(known, ", "))
}

// between makes a cobra argument check whose failure is a wrong request.
func between(least, most int) cobra.PositionalArgs {
	check := cobra.RangeArgs(least, most)
	if least == most {
		check = cobra.ExactArgs(least)
	}
	return func(cmd *cobra.Command, args []string) error {
		if err := check(cmd, args); err != nil {
			return refuse("%w (usage: %s)", err, cmd.UseLine())
		}
		return nil
	}
}
