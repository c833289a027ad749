package main

import (
	"errors"
	"fmt"
	"io/fs"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"bendtest/results"
	"bendtest/scoring"
)

func verdictCommand() *cobra.Command {
	var margin, floor float64
	cmd := &cobra.Command{
		Use:   "verdict DIR",
		Short: "Say which method a finished study supports as a default, and how surely",
		Long: `Weigh every method of a finished study over all its cells: which comes closest to the
best method of each cell on average, which does least badly in its worst cell, which
are as good within the margin, and where no method is good enough.`,
		Example: `  bendtest verdict night
  bendtest verdict night --margin 0.1 --floor 0.5`,
		Args: between(1, 1),
		RunE: func(cmd *cobra.Command, args []string) error {
			for _, flag := range []struct {
				name  string
				value float64
			}{{"margin", margin}, {"floor", floor}} {
				if !(flag.value >= 0 && flag.value < 1e6) {
					return refuse("--%s %g; want a share of at least 0, such as 0.05", flag.name, flag.value)
				}
			}
			v, err := readVerdict(args[0], margin, floor)
			if err != nil {
				return err
			}
			printVerdict(cmd.OutOrStdout(), v)
			return nil
		},
	}
	cmd.Flags().Float64Var(&margin, "margin", scoring.Margin, "indifference margin: `SHARE` by which a method may be behind and count as tied")
	cmd.Flags().Float64Var(&floor, "floor", 0.25, "`SHARE` by which the held-out error of a good method may lie above the noise floor")
	return cmd
}

// A verdict is what the command says.
type verdict struct {
	margin, floor float64
	methods       []results.Verdict // the least mean relative excess first
	cells         []results.Cell
	short         []scoring.Shortfall
	silent        []silentMethod
	within, of    int // of the audit
}

// A silentMethod is one that never had a pick.
type silentMethod struct{ smoother, rule, why string }

// readVerdict reads what the tables of a run say.
func readVerdict(path string, margin, floor float64) (*verdict, error) {
	dir, err := results.Open(path)
	if err != nil {
		return nil, &requestError{err}
	}
	v := &verdict{margin: margin, floor: floor}
	var summary []results.Summary
	var audit []results.Audit
	for _, read := range []func() error{
		func() (err error) { v.methods, err = results.ReadRows(dir, results.Verdicts); return err },
		func() (err error) { v.cells, err = results.ReadRows(dir, results.Cells); return err },
		func() (err error) { summary, err = results.ReadRows(dir, results.Summaries); return err },
		func() (err error) { audit, err = results.ReadRows(dir, results.Audits); return err },
	} {
		if err := read(); errors.Is(err, fs.ErrNotExist) {
			return nil, refuse("%s has no verdict yet: the run has not ended, or is from an older version; run it again to finish it", path)
		} else if err != nil {
			return nil, err
		}
	}
	scoring.Tie(v.methods, margin)
	v.short = scoring.Shortfalls(v.cells, summary, floor)
	v.silent = silentMethods(summary, v.methods)
	v.within, v.of = scoring.Agreement(audit)
	return v, nil
}

// silentMethods lists the methods of the summary that are not judged.
func silentMethods(summary []results.Summary, judged []results.Verdict) []silentMethod {
	known := map[[2]string]bool{}
	for _, m := range judged {
		known[[2]string{m.Smoother, m.Rule}] = true
	}
	var silent []silentMethod
	for _, s := range summary {
		key := [2]string{s.Smoother, s.Rule}
		if !known[key] && s.Rule != scoring.Oracle {
			known[key] = true
			silent = append(silent, silentMethod{s.Smoother, s.Rule, s.Failure})
		}
	}
	return silent
}

// method names a method as people read it; a label of several words stands in quotes.
func method(smoother, rule string) string {
	quoted := func(label string) string {
		if strings.ContainsAny(label, " ,") {
			return strconv.Quote(label)
		}
		return label
	}
	return fmt.Sprintf("%s with %s", quoted(smoother), quoted(rule))
}
