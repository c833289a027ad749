package sweep

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io/fs"
	"os"
	"runtime"
	"time"

	"bendtest/results"
	"bendtest/scenarios"
)

// A Job is a study to run into a directory.
type Job struct {
	Study   *scenarios.Study
	Dir     string
	Workers int
	Build   string // identifies the build of the program
}

// Run works what is missing, gathers the tables and keeps the manifest. It refuses a
// directory as results.Create does.
func (j *Job) Run(ctx context.Context, watch Observer) (Report, error) {
	dir, err := results.Create(j.Dir)
	if err != nil {
		return Report{}, err
	}
	defer dir.Close()
	manifest, err := j.begin(dir)
	if err != nil {
		return Report{}, err
	}
	plan := NewPlan(j.Study, j.Build)
	report, err := Run(ctx, plan, dir, j.Workers, watch)
	if err == nil && !report.Stopped {
		err = j.gather(plan, dir, manifest, &report)
	}
	start := &manifest.Starts[len(manifest.Starts)-1]
	start.Ended, start.Outcome = time.Now().UTC().Format(time.RFC3339), outcome(report, err)
	return report, errors.Join(err, dir.WriteManifest(manifest))
}

// outcome is a word for the manifest.
func outcome(report Report, err error) string {
	switch {
	case err != nil:
		return "failed: " + err.Error()
	case report.Stopped:
		return "stopped"
	}
	return "done"
}

// begin notes this start in the manifest, which it makes if there is none.
func (j *Job) begin(dir *results.Dir) (*results.Manifest, error) {
	manifest, err := dir.ReadManifest()
	if errors.Is(err, fs.ErrNotExist) {
		manifest, err = &results.Manifest{}, nil
	}
	if err != nil {
		return nil, err
	}
	sum := sha256.Sum256(j.Study.Source)
	manifest.SchemaVersion = results.SchemaVersion
	manifest.Study, manifest.StudyHash = j.Study.Title, hex.EncodeToString(sum[:])
	manifest.Seed = j.Study.Seed
	host, err := os.Hostname()
	if err != nil {
		host = "unknown"
	}
	manifest.Starts = append(manifest.Starts, results.Start{
		Version: j.Build, Go: runtime.Version(), Host: host, System: runtime.GOOS + "/" + runtime.GOARCH,
		Workers: j.Workers, Began: time.Now().UTC().Format(time.RFC3339),
	})
	if err := dir.WriteManifest(manifest); err != nil {
		return nil, err
	}
	return manifest, dir.WriteStudy(j.Study.Source)
}

// gather writes the tables and names their parts in the manifest.
func (j *Job) gather(plan *Plan, dir *results.Dir, manifest *results.Manifest, report *Report) error {
	if err := Gather(plan, dir, j.Workers); err != nil {
		return err
	}
	if report.Worked > 0 {
		if err := results.WriteRows(dir, results.Timings, report.Timings); err != nil {
			return err
		}
	}
	manifest.Parts = manifest.Parts[:0]
	for _, u := range plan.Units {
		manifest.Parts = append(manifest.Parts, u.Key)
	}
	return nil
}
