package main

import (
	"fmt"
	"io"
	"runtime"
	"time"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/spf13/cobra"

	"bendtest/cmd/bendtest/sweep"
)

func planCommand() *cobra.Command {
	var workers int
	cmd := &cobra.Command{
		Use:   "plan [STUDY.toml]",
		Short: "Say what a study will take: cells, fits, time and disk",
		Long: `Read a study as run would, refuse what run would refuse, try a few replicates of
every cell, and say what the whole will take. Nothing is written.`,
		Example: `  bendtest plan night.toml`,
		Args:    between(0, 1),
		RunE: func(cmd *cobra.Command, args []string) error {
			path := ""
			if len(args) == 1 {
				path = args[0]
			}
			if workers < 1 {
				return refuse("--workers %d; want at least 1", workers)
			}
			study, err := loadStudy(path, nil)
			if err != nil {
				return err
			}
			plan := sweep.NewPlan(study, build())
			estimate, err := sweep.Predict(plan)
			if err != nil {
				return err
			}
			printPlan(cmd.OutOrStdout(), plan, estimate, workers)
			return nil
		},
	}
	cmd.Flags().IntVar(&workers, "workers", runtime.NumCPU(), "`N` workers to reckon with")
	return cmd
}

// printPlan prints what a study will take.
func printPlan(w io.Writer, plan *sweep.Plan, e sweep.Estimate, workers int) {
	s := plan.Study
	fmt.Fprintf(w, "%s\n\n", s.Title)
	t := table.NewWriter()
	t.SetStyle(plainStyle())
	t.SetColumnConfigs(rightFrom(2, 5))
	t.AppendHeader(table.Row{"cell", "n", "noise floor", "time on one worker", "without a fit"})
	for i, c := range e.Cells {
		t.AppendRow(table.Row{
			c.Cell, thousands(c.N), fmt.Sprintf("%.4g", s.Cells[i].Sim.NoiseVariance),
			duration(c.Seconds), fmt.Sprintf("%.0f %%", 100*c.FailShare),
		})
	}
	fmt.Fprintln(w, render(t))
	fmt.Fprintf(w, "\n%s cells × %s replicates × %s rungs = %s fits, in %s units, picked from by %d rules\n",
		thousands(len(s.Cells)), thousands(s.Replicates), thousands(plan.FitsPerReplicate()), thousands(e.Fits),
		thousands(len(plan.Units)), len(s.Rules))
	if s.Precision != nil {
		fmt.Fprintln(w, precisionWords)
	}
	fmt.Fprintf(w, "about %s on %d workers, about %s of disk\n",
		duration(e.Seconds/float64(workers)), workers, size(e.Bytes))
}

// duration writes seconds for people.
func duration(seconds float64) string {
	d := time.Duration(seconds * float64(time.Second))
	switch {
	case d < time.Second:
		return d.Round(10 * time.Millisecond).String()
	case d < time.Minute:
		return d.Round(100 * time.Millisecond).String()
	}
	return d.Round(time.Second).String()
}

// size writes bytes for people.
func size(bytes int) string {
	units := []string{"bytes", "kB", "MB", "GB", "TB"}
	v, u := float64(bytes), 0
	for v >= 1000 && u < len(units)-1 {
		v /= 1000
		u++
	}
	return fmt.Sprintf("%.3g %s", v, units[u])
}
