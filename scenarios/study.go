package scenarios

import (
	"io"

	"bendtest/sim"
	"bendtest/smoothers"
)

// A Study is a study file read: complete, and not changed after.
type Study struct {
	Title      string
	Seed       uint64
	HeldOut    int        // size of the held-out set
	Replicates int        // per cell; with a Precision, at most
	Precision  *Precision // nil where replicates is a number
	Keep       string     // "fits", "picks" or "summary": the largest tables wanted
	Cells      []Cell     // truths × designs × noises × n, the last running fastest
	Smoothers  []Smoother
	Rules      []Rule
	Source     []byte // the text that the study was read from
	Hash       string // of all that the study says, files it names included: 16 hex digits

	factors factors
}

// A Cell is a combination of truth, design, noise and sample size, by name and as
// what draws its data.
type Cell struct {
	Key                  string // "truth/design/noise/n=30"
	Truth, Design, Noise string
	N                    int
	Sim                  *sim.Cell
}

// A Smoother is a family with its options and the grid of df to fit.
type Smoother struct {
	Name     string // the label in all tables
	Family   string
	Smoother smoothers.Smoother
	DF       []float64 // ascending
}

// A Rule is a kind of rule with its options.
type Rule struct {
	Name    string // the label in all tables
	Kind    string
	Options any // what the kind's New returned, filled in
}

// Precision is a target for the Monte Carlo error instead of a number of replicates.
type Precision struct {
	AtLeast      int     `option:"at-least" min:"2" max:"1e9" doc:"replicates before the target is looked at"`
	AtMost       int     `option:"at-most" required:"true" min:"2" max:"1e9" doc:"replicates after which a cell ends in any case"`
	RelativeMCSE float64 `option:"relative-mcse" required:"true" above:"0" below:"1" doc:"wanted MCSE of every method's mean regret, relative to it"`
}

// WithSeed returns the study with another seed, at most MaxSeed; it panics above.
func (s *Study) WithSeed(seed uint64) *Study {
	if seed > MaxSeed {
		panic("scenarios: a seed above MaxSeed")
	}
	other := *s
	other.Seed = seed
	other.Hash = other.hash()
	return &other
}

// MaxSeed is the largest seed, as TOML's whole numbers are signed.
const MaxSeed = 1<<63 - 1

// A Vocabulary is what a study file may name beyond the packages below this one.
type Vocabulary struct {
	Rules []Kind

	// Open opens a file that a study names, at its path relative to the study
	// file, which has been joined to that file's folder. Nil opens it on the disk.
	Open func(path string) (io.ReadCloser, error)
}

// A Kind is one kind of rule.
type Kind struct {
	Name string
	Doc  string
	New  func() any // a pointer to the options struct, at its defaults
}

// factors are the entries of the study that its cells combine.
type factors struct {
	lists   cellKeys
	truths  []truthEntry
	designs []designEntry
	noises  []noiseEntry
}
