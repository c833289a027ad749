package main

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"

	"github.com/spf13/cobra"

	"bendtest/cmd/bendtest/sweep"
	"bendtest/results"
	"bendtest/scenarios"
)

func gatherCommand() *cobra.Command {
	var out string
	var workers int
	var quiet bool
	cmd := &cobra.Command{
		Use:   "gather DIR...",
		Short: "Make the tables of a study that several processes or machines have worked",
		Long: `Bring together the parts that runs with --part have left in one directory or in several,
check that none is missing or broken, and write the tables: the same, byte for byte, as
those of a single process. What is missing is said.`,
		Example: `  bendtest gather night
  bendtest gather night-a night-b -o night`,
		Args: between(1, 1000),
		RunE: func(cmd *cobra.Command, args []string) error {
			if workers < 1 {
				return refuse("--workers %d; want at least 1", workers)
			}
			study, err := studyOf(args[0])
			if err != nil {
				return err
			}
			if out == "" {
				out = args[0]
			}
			c := sweep.Collection{Study: study, From: args, Dir: out, Workers: workers, Build: build()}
			if err := collect(&c); err != nil || quiet {
				return err
			}
			return printOutcome(cmd.OutOrStdout(), out)
		},
	}
	cmd.Flags().StringVarP(&out, "output", "o", "", "`DIR` for the tables (default the first one named)")
	cmd.Flags().IntVar(&workers, "workers", runtime.NumCPU(), "`N` cells worked at the same time")
	cmd.Flags().BoolVar(&quiet, "quiet", false, "no closing tables")
	return cmd
}

// collect gathers; what the directories lack is a wrong request.
func collect(c *sweep.Collection) error {
	err := c.Gather()
	var missing *sweep.MissingError
	var foreign *results.ForeignDirError
	var locked *results.LockedError
	if errors.As(err, &missing) || errors.As(err, &foreign) || errors.As(err, &locked) {
		return &requestError{err}
	}
	return err
}

// studyOf reads the study that was run in a directory, with the seed of that run.
func studyOf(path string) (*scenarios.Study, error) {
	dir, err := results.Open(path)
	if err != nil {
		return nil, &requestError{err}
	}
	name, text, err := dir.ReadStudy()
	if err != nil {
		return nil, refuse("%s has no study: %w", path, err)
	}
	manifest, err := anyManifest(dir)
	if err != nil {
		return nil, refuse("%s: %w", path, err)
	}
	words := vocabulary()
	words.Open = openBeside(path, filepath.Dir(manifest.StudyFile))
	study, faults := scenarios.Parse(name, text, words)
	if len(faults) > 0 {
		return nil, &requestError{faults}
	}
	return study.WithSeed(manifest.Seed), nil
}

// anyManifest returns the manifest of a run, or of the first of its tasks.
func anyManifest(dir *results.Dir) (*results.Manifest, error) {
	if m, err := dir.ReadManifest(); err == nil {
		return m, nil
	}
	tasks, err := dir.TaskManifests()
	if err == nil && len(tasks) == 0 {
		err = errors.New("it has no manifest")
	}
	if err != nil {
		return nil, err
	}
	return tasks[0], nil
}

// openBeside opens the files that a study names, which lie beside the file that it was
// read from and not beside its copy in the run directory.
func openBeside(copied, original string) func(path string) (io.ReadCloser, error) {
	return func(path string) (io.ReadCloser, error) {
		f, err := os.Open(path)
		if !errors.Is(err, fs.ErrNotExist) {
			return f, err
		}
		if relative, outside := filepath.Rel(copied, path); outside == nil && original != "." {
			if g, err := os.Open(filepath.Join(original, relative)); err == nil {
				return g, nil
			}
		}
		return nil, fmt.Errorf("%w; the run read it from beside its study in %s", err, original)
	}
}
