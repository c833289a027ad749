package sweep

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"strings"

	"bendtest/scenarios"
	"bendtest/scoring"
)

// fitsPerUnit is about how many fits make a unit: enough that writing a part costs
// nothing beside working it, few enough that little is lost when a sweep is killed. The
// number of replicates is a power of 2, so that how they are cut changes no sum over them.
const fitsPerUnit = 5000

// A Unit is a block of replicates [From, To) of one cell.
type Unit struct {
	Cell     int // index in the study's cells
	From, To int
	Key      string // names the unit's part: a hash of all its rows depend on
}

// A Plan is a study cut into units, in the order in which tables list them.
type Plan struct {
	Study   *scenarios.Study
	Contest *scoring.Contest
	Units   []Unit
	block   int // replicates of a whole unit, a power of 2
}

// NewPlan cuts a study into units. version names the build: parts of another build
// are not reused, since equality to the byte is promised within one build only.
func NewPlan(study *scenarios.Study, version string) *Plan {
	p := &Plan{Study: study, Contest: contest(study)}
	p.block = 1
	for 2*p.block*p.FitsPerReplicate() <= fitsPerUnit {
		p.block *= 2
	}
	for c := range study.Cells {
		stem := p.stem(c, version)
		for from := 0; from < study.Replicates; from += p.block {
			to := min(from+p.block, study.Replicates)
			key := hash(fmt.Sprintf("%s\nreplicates %d to %d", stem, from, to))
			p.Units = append(p.Units, Unit{Cell: c, From: from, To: to, Key: key})
		}
	}
	return p
}

// keys names the parts of the plan, in order.
func (p *Plan) keys() []string {
	keys := make([]string, len(p.Units))
	for i, u := range p.Units {
		keys[i] = u.Key
	}
	return keys
}

// The levels of keep in a study: the largest tables that are wanted.
const (
	keepFits    = "fits"
	keepSummary = "summary"
)

// KeepsFits reports whether the study wants the table fits.
func (p *Plan) KeepsFits() bool { return p.Study.Keep == keepFits }

// FitsPerReplicate is the number of rungs that one replicate scores.
func (p *Plan) FitsPerReplicate() int {
	fits := 0
	for _, e := range p.Contest.Entrants {
		fits += len(e.DF)
	}
	return fits
}

// Fits is the number of rungs that the whole study scores.
func (p *Plan) Fits() int {
	return p.FitsPerReplicate() * p.Study.Replicates * len(p.Study.Cells)
}

// contest gathers what takes part in every replicate.
func contest(study *scenarios.Study) *scoring.Contest {
	c := &scoring.Contest{}
	for _, s := range study.Smoothers {
		c.Entrants = append(c.Entrants, scoring.Entrant{Name: s.Name, Smoother: s.Smoother, DF: s.DF})
	}
	for _, r := range study.Rules {
		c.Rules = append(c.Rules, scoring.NamedRule{Name: r.Name, Rule: r.Options.(scoring.Rule)})
	}
	return c
}

// stem is all that the rows of a cell depend on, as text.
func (p *Plan) stem(c int, version string) string {
	cell := &p.Study.Cells[c]
	var b strings.Builder
	fmt.Fprintf(&b, "bendtest %s\ncell %s %s\nseed %d\nheld-out %d\nfits kept %v\n",
		version, cell.Key, cell.Sim.Hash(), p.Study.Seed, cell.Sim.HeldOut, p.KeepsFits())
	for _, s := range p.Study.Smoothers {
		fmt.Fprintf(&b, "smoother %q %s df %v\n", s.Name, scenarios.Canonical(s.Family, s.Smoother), s.DF)
	}
	for _, r := range p.Study.Rules {
		fmt.Fprintf(&b, "rule %q %s\n", r.Name, scenarios.Canonical(r.Kind, r.Options))
	}
	return b.String()
}

// hash shortens text to a file name.
func hash(text string) string {
	sum := sha256.Sum256([]byte(text))
	return hex.EncodeToString(sum[:12])
}
