package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"runtime"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"bendtest/cmd/bendtest/sweep"
	"bendtest/results"
	"bendtest/scoring"
)

func runCommand() *cobra.Command {
	var (
		out     string
		workers int
		seed    uint64
		part    string
		quiet   bool
	)
	cmd := &cobra.Command{
		Use:   "run [STUDY.toml]",
		Short: "Run a study, or the embedded demonstration, and write its tables",
		Long: `Run a study: draw its data, fit every smoother at every df, apply the rules, and
write the tables DIR/tables/*.parquet. Without a file it runs the embedded
demonstration study. Running the same command again resumes: what is there and
intact is kept. The tables do not depend on the number of workers.

With --part K/N only every N-th unit of work is done, for several processes or machines
that share DIR, or have one each; bendtest gather then makes the tables.

The first interrupt finishes the units in hand and stops (exit code 3); the second
stops at once.`,
		Example: `  bendtest run
  bendtest run night.toml -o night --workers 4
  bendtest run night.toml -o night --part 2/8`,
		Args: between(0, 1),
		RunE: func(cmd *cobra.Command, args []string) error {
			if workers < 1 {
				return refuse("--workers %d; want at least 1", workers)
			}
			path := ""
			if len(args) == 1 {
				path = args[0]
			}
			var override *uint64
			if cmd.Flags().Changed("seed") {
				override = &seed
			}
			study, err := loadStudy(path, override)
			if err != nil {
				return err
			}
			if out == "" {
				out = defaultDir(path)
			}
			share, err := parseShare(part)
			if err != nil {
				return err
			}
			job := sweep.Job{Study: study, File: absolute(path), Dir: out, Workers: workers, Build: build(), Share: share}
			return runJob(cmd.Context(), job, quiet, cmd.OutOrStdout(), cmd.ErrOrStderr())
		},
	}
	cmd.Flags().StringVarP(&out, "output", "o", "", "`DIR` for tables and parts (default bendtest-NAME after the study)")
	cmd.Flags().IntVar(&workers, "workers", runtime.NumCPU(), "`N` units worked at the same time")
	cmd.Flags().Uint64Var(&seed, "seed", 0, "`S` in place of the study's seed")
	cmd.Flags().StringVar(&part, "part", "", "`K/N`: work only the K-th of N shares of the units")
	cmd.Flags().BoolVar(&quiet, "quiet", false, "no progress and no closing tables")
	return cmd
}

// parseShare reads K/N.
func parseShare(text string) (sweep.Share, error) {
	if text == "" {
		return sweep.Share{}, nil
	}
	k, n, found := strings.Cut(text, "/")
	part, errK := strconv.Atoi(k)
	of, errN := strconv.Atoi(n)
	if !found || errK != nil || errN != nil || part < 1 || part > of {
		return sweep.Share{}, refuse("--part %q; want K/N with K from 1 to N, such as 2/8", text)
	}
	return sweep.Share{Part: part, Of: of}, nil
}

// absolute is a path that another working directory understands too; the embedded study
// has none.
func absolute(path string) string {
	if path == "" {
		return ""
	}
	if full, err := filepath.Abs(path); err == nil {
		return full
	}
	return path
}

// defaultDir names the run directory after the study file.
func defaultDir(path string) string {
	if path == "" {
		return "bendtest-orchard"
	}
	base := filepath.Base(path)
	return "bendtest-" + strings.TrimSuffix(base, filepath.Ext(base))
}

// runJob runs a sweep, shows its progress, and prints what it found.
func runJob(ctx context.Context, job sweep.Job, quiet bool, stdout, stderr io.Writer) error {
	var watch sweep.Observer = silent{}
	if !quiet {
		p := newProgress(stderr)
		defer p.End()
		watch = p
	}
	if job.Study.Precision != nil {
		fmt.Fprintln(stderr, precisionWords)
	}
	outcome, err := job.Run(ctx, watch)
	var foreign *results.ForeignDirError
	var locked *results.LockedError
	switch {
	case errors.As(err, &foreign), errors.As(err, &locked):
		return &requestError{err}
	case err != nil:
		return err
	case outcome.Stopped:
		return fmt.Errorf("%w with everything so far kept in %s; run the same command again to go on", errStopped, job.Dir)
	}
	if quiet {
		return nil
	}
	if s := job.Share; s.Of > 0 {
		fmt.Fprintf(stdout, "Part %d of %d is done: %s. When all are, bendtest gather %s makes the tables.\n",
			s.Part, s.Of, counted(outcome.Kept+outcome.Worked, "unit"), job.Dir)
		return nil
	}
	return printOutcome(stdout, job.Dir)
}

// precisionWords says how a precision target is met.
const precisionWords = "every cell runs its at-most replicates; the summary's mcse says what precision that reached"

// silent observes nothing.
type silent struct{}

func (silent) Begin(int, int, int) {}
func (silent) Done(int, int)       {}

// printOutcome prints the closing tables of a run and where its files lie.
func printOutcome(w io.Writer, path string) error {
	dir, err := results.Open(path)
	if err != nil {
		return err
	}
	cells, err := results.ReadRows(dir, results.Cells)
	if err != nil {
		return err
	}
	summary, err := results.ReadRows(dir, results.Summaries)
	if err != nil {
		return err
	}
	from := 0
	for _, c := range cells {
		to := from
		for to < len(summary) && summary[to].Cell == c.Cell {
			to++
		}
		printCell(w, c, summary[from:to])
		from = to
	}
	fmt.Fprint(w, closingWords)
	names, err := dir.TableNames()
	if err != nil {
		return err
	}
	fmt.Fprintf(w, "\nTables in %s:\n", filepath.Dir(dir.TablePath("")))
	for _, name := range names {
		fmt.Fprintf(w, "  %s.parquet\n", name)
	}
	return printAudit(w, dir, cells)
}

// printAudit says in one line how many exact expectations the simulation met.
func printAudit(w io.Writer, dir *results.Dir, cells []results.Cell) error {
	rows, err := results.ReadRows(dir, results.Audits)
	if err != nil {
		return err
	}
	audited := map[string]bool{}
	for _, r := range rows {
		audited[r.Cell] = true
	}
	within, of := scoring.Agreement(rows)
	fmt.Fprintf(w, "\naudit: %s of %s within 4 MCSE", thousands(within), thousands(of))
	if left := len(cells) - len(audited); left > 0 {
		fmt.Fprintf(w, " (exact expectations in %d of %d cells; a design drawn anew or over 500 observations has none)", len(audited), len(cells))
	}
	fmt.Fprintln(w)
	return nil
}
