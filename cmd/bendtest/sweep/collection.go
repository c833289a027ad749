package sweep

import (
	"cmp"
	"errors"
	"fmt"
	"slices"
	"time"

	"bendtest/results"
	"bendtest/scenarios"
)

// A Collection makes the tables of a study whose parts several tasks or machines have
// worked.
type Collection struct {
	Study   *scenarios.Study
	From    []string // run directories that hold parts
	Dir     string   // where the tables go; it may be one of them
	Workers int
	Build   string
}

// A MissingError says which units of a study nobody has worked yet.
type MissingError struct {
	Missing, Units int
	First          string // the first of them, in words
}

func (e *MissingError) Error() string {
	return fmt.Sprintf("%d of %d units are missing, first %s; run their tasks again, with the same build of the program, then gather", e.Missing, e.Units, e.First)
}

// Gather brings all parts together, checks that none is missing or broken, and writes the
// tables.
func (c *Collection) Gather() error {
	dir, err := results.Create(c.Dir)
	if err != nil {
		return err
	}
	defer dir.Close()
	var others []*results.Dir
	for _, path := range c.From {
		d, err := results.Open(path)
		if err != nil {
			return err
		}
		others = append(others, d)
	}
	plan := NewPlan(c.Study, c.Build)
	if err := c.fetch(plan, dir, others); err != nil {
		return err
	}
	if err := Gather(plan, dir, c.Workers); err != nil {
		return err
	}
	manifest, err := c.manifest(others)
	if err != nil {
		return err
	}
	manifest.Parts = plan.keys()
	return errors.Join(dir.WriteStudy(c.Study.Source), dir.WriteManifest(manifest))
}

// fetch copies the parts that dir lacks. A broken part counts as missing.
func (c *Collection) fetch(plan *Plan, dir *results.Dir, others []*results.Dir) error {
	missing := &MissingError{Units: len(plan.Units)}
	for _, u := range plan.Units {
		there, err := dir.CheckPart(u.Key)
		for i := 0; !there && i < len(others) && !isFault(err); i++ {
			there, err = dir.CopyPart(u.Key, others[i])
		}
		if isFault(err) {
			return err
		}
		if !there {
			if missing.Missing == 0 {
				missing.First = fmt.Sprintf("cell %s, replicates %d to %d", plan.Study.Cells[u.Cell].Key, u.From, u.To-1)
			}
			missing.Missing++
		}
	}
	if missing.Missing > 0 {
		return missing
	}
	return nil
}

// isFault reports whether an error is other than that of a broken part.
func isFault(err error) bool {
	var broken *results.BrokenPartError
	return err != nil && !errors.As(err, &broken)
}

// manifest is that of all tasks together, with this gathering.
func (c *Collection) manifest(others []*results.Dir) (*results.Manifest, error) {
	whole := newManifest(c.Study)
	for _, d := range others {
		tasks, err := d.TaskManifests()
		if err != nil {
			return nil, err
		}
		if m, err := d.ReadManifest(); err == nil {
			tasks = append(tasks, m)
		}
		for _, m := range tasks {
			whole.StudyFile = cmp.Or(whole.StudyFile, m.StudyFile)
			whole.Starts = append(whole.Starts, m.Starts...)
		}
	}
	start := newStart(c.Build, c.Workers)
	start.Ended, start.Outcome = time.Now().UTC().Format(time.RFC3339), "gathered"
	whole.Starts = append(whole.Starts, start)
	slices.SortStableFunc(whole.Starts, func(a, b results.Start) int { return cmp.Compare(a.Began, b.Began) })
	return whole, nil
}
