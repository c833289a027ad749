package main

import (
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"bendtest/results"
)

func arrayCommand() *cobra.Command {
	var out string
	var tasks, workers int
	cmd := &cobra.Command{
		Use:   "array STUDY.toml -o DIR",
		Short: "Write a batch script that works a study as an array job of a cluster",
		Long: `Write DIR.sh, a batch script for Slurm that works the study in tasks which share DIR,
and check the study first. Submit it with sbatch; a task that is preempted keeps what it
has and goes on where it was when it is requeued. When all tasks have ended, bendtest
gather makes the tables; the script's head says how to have that done too.`,
		Example: `  bendtest array night.toml -o night --tasks 16
  sbatch night.sh`,
		Args: between(1, 1),
		RunE: func(cmd *cobra.Command, args []string) error {
			if out == "" {
				return refuse("-o DIR is missing: the directory that the tasks are to share")
			}
			if tasks < 1 || workers < 1 {
				return refuse("--tasks %d, --workers %d; want at least 1 of each", tasks, workers)
			}
			if _, err := loadStudy(args[0], nil); err != nil {
				return err
			}
			program, err := os.Executable()
			if err != nil {
				return err
			}
			script := batchScript{program, absolute(args[0]), absolute(out), tasks, workers}
			path := filepath.Clean(out) + ".sh"
			if err := results.WriteFile(path, script.write); err != nil {
				return err
			}
			fmt.Fprintf(cmd.OutOrStdout(), "Wrote %s for %s. Submit it with\n  sbatch %s\n", path, counted(tasks, "task"), path)
			return nil
		},
	}
	cmd.Flags().StringVarP(&out, "output", "o", "", "`DIR` that the tasks share; the script is DIR.sh")
	cmd.Flags().IntVar(&tasks, "tasks", 8, "`N` tasks")
	cmd.Flags().IntVar(&workers, "workers", 1, "`N` processors per task")
	return cmd
}

// A batchScript is an array job.
type batchScript struct {
	program, study, dir string
	tasks, workers      int
}

// write writes the script. Its lines that begin with #SBATCH are the batch system's own.
func (b batchScript) write(w io.Writer) error {
	_, err := fmt.Fprintf(w, `#!/bin/sh
# Works the study %[1]s
# in %[4]d tasks that share %[2]s.
#
#   job=$(sbatch --parsable THIS)        # all tasks; scancel, requeue and resubmit as you like
#   sbatch --dependency=afterok:$job --wrap="%[3]s gather %[2]s"
#
#SBATCH --job-name=bendtest
#SBATCH --array=1-%[4]d
#SBATCH --cpus-per-task=%[5]d
#SBATCH --requeue
#SBATCH --open-mode=append
#SBATCH --output=%[6]s
exec %[3]s run %[1]s -o %[2]s --workers %[5]d --part "${SLURM_ARRAY_TASK_ID:?no task of an array}/%[4]d"
`, quoted(b.study), quoted(b.dir), quoted(b.program), b.tasks, b.workers,
		quoted(strings.ReplaceAll(b.dir, "%", "%%")+"-%a.log"))
	return err
}

// quoted is a word for the shell.
func quoted(s string) string { return "'" + strings.ReplaceAll(s, "'", `'\''`) + "'" }
