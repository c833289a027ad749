package sweep

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
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
	File    string // where the study was read from, absolute, or empty
	Dir     string
	Workers int
	Build   string // identifies the build of the program
	Share   Share
}

// A Share is one of several tasks that a study is split into: every Of-th unit, starting
// with the Part-th. The zero value is the whole study.
type Share struct{ Part, Of int }

// whole reports whether the share is everything.
func (s Share) whole() bool { return s.Of == 0 }

// of returns the units of the share.
func (s Share) of(units []Unit) []Unit {
	if s.whole() {
		return units
	}
	var mine []Unit
	for i := s.Part - 1; i < len(units); i += s.Of {
		mine = append(mine, units[i])
	}
	return mine
}

// open opens the job's directory: for itself, or together with other tasks.
func (j *Job) open() (*results.Dir, error) {
	if j.Share.whole() {
		return results.Create(j.Dir)
	}
	return results.Join(j.Dir, fmt.Sprintf("%d-of-%d", j.Share.Part, j.Share.Of))
}

// Run works what is missing of its share and keeps the manifest. The whole study has its
// tables gathered at once, a share leaves that to a Collection. Run refuses a directory
// as results.Create does.
func (j *Job) Run(ctx context.Context, watch Observer) (Report, error) {
	dir, err := j.open()
	if err != nil {
		return Report{}, err
	}
	defer dir.Close()
	manifest, err := j.begin(dir)
	if err != nil {
		return Report{}, err
	}
	plan := NewPlan(j.Study, j.Build)
	report, err := Run(ctx, plan, dir, j.Share.of(plan.Units), j.Workers, watch)
	if err == nil && !report.Stopped && j.Share.whole() {
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
	starts, parts := manifest.Starts, manifest.Parts
	*manifest = *newManifest(j.Study)
	manifest.StudyFile, manifest.Parts = j.File, parts
	manifest.Starts = append(starts, newStart(j.Build, j.Workers))
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
	manifest.Parts = plan.keys()
	return nil
}

// newManifest describes a study.
func newManifest(study *scenarios.Study) *results.Manifest {
	sum := sha256.Sum256(study.Source)
	return &results.Manifest{
		SchemaVersion: results.SchemaVersion, Study: study.Title, StudyHash: hex.EncodeToString(sum[:]), Seed: study.Seed,
	}
}

// newStart describes this process.
func newStart(build string, workers int) results.Start {
	host, err := os.Hostname()
	if err != nil {
		host = "unknown"
	}
	return results.Start{
		Version: build, Go: runtime.Version(), Host: host, System: runtime.GOOS + "/" + runtime.GOARCH,
		Workers: workers, Began: time.Now().UTC().Format(time.RFC3339),
	}
}
