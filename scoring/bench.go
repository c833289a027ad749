package scoring

import (
	"slices"

	"bendtest/results"
	"bendtest/sim"
	"bendtest/smoothers"
)

// An Entrant is a smoother that takes part, with its label and its grid of df,
// ascending.
type Entrant struct {
	Name     string
	Smoother smoothers.Smoother
	DF       []float64
}

// A NamedRule is a rule that takes part, with its label.
type NamedRule struct {
	Name string
	Rule Rule
}

// A Contest is all that takes part in a study: every rule is applied to every
// entrant's ladder.
type Contest struct {
	Entrants []Entrant
	Rules    []NamedRule
}

// folds lists the numbers of folds that the rules ask for, in order of first use.
func (c *Contest) folds() []int {
	var ks []int
	for _, r := range c.Rules {
		if kf, ok := r.Rule.(*ByKFold); ok && !slices.Contains(ks, kf.K) {
			ks = append(ks, kf.K)
		}
	}
	return ks
}

// adjacent reports whether a rule tests rungs against each other.
func (c *Contest) adjacent() bool {
	return slices.ContainsFunc(c.Rules, func(r NamedRule) bool {
		_, ok := r.Rule.(*ByFTest)
		return ok
	})
}

// Oracle is the label of the oracle's row in picks.
const Oracle = "oracle"

// A Bench scores replicates of one cell. It owns all the memory that takes and
// belongs to one goroutine.
type Bench struct {
	key     string
	cell    *sim.Cell
	contest *Contest
	seed    uint64

	sample  sim.Sample
	arena   smoothers.Arena
	rungs   [][]smoothers.Rung // by entrant
	laid    bool               // rungs stand on this cell's fixed design
	fit     smoothers.Fit
	held    HeldOut
	trainer trainer
	folders []*folder
	tests   []ladderTests // by entrant
	more    []variant
	observer
	rows Rows
}

// Rows are the rows of the replicates that a bench has scored.
type Rows struct {
	Fits  []results.Fit
	Picks []results.Pick
}

// NewBench returns a bench for one cell. key is the cell's key in the tables.
func NewBench(key string, cell *sim.Cell, contest *Contest, seed uint64) *Bench {
	b := &Bench{key: key, cell: cell, contest: contest, seed: seed}
	b.rungs = make([][]smoothers.Rung, len(contest.Entrants))
	b.tests = make([]ladderTests, len(contest.Entrants))
	b.observer = newObserver(cell, contest)
	b.more = contest.variants()
	for _, k := range contest.folds() {
		b.folders = append(b.folders, &folder{k: k})
	}
	return b
}

// Rows returns the rows scored since the last call of Clear. They are valid until
// the next one.
func (b *Bench) Rows() *Rows { return &b.rows }

// Clear forgets the rows, keeping their memory.
func (b *Bench) Clear() {
	b.rows.Fits, b.rows.Picks = b.rows.Fits[:0], b.rows.Picks[:0]
	b.forest.Reset()
}

// Replicate draws one replicate of the cell and appends its rows.
func (b *Bench) Replicate(replicate int) {
	b.cell.Draw(b.seed, replicate, &b.sample)
	b.Score(replicate, &b.sample)
}

// Score appends the rows of a sample that is replicate of the cell.
func (b *Bench) Score(replicate int, sample *sim.Sample) {
	train := &sample.Train
	b.held.Set(&sample.Held, train.X)
	b.trainer.set(train.X, train.Y, b.cell.NoiseVariance)
	for _, f := range b.folders {
		f.deal(len(train.X), b.cell.Stream(b.seed, replicate, f.purpose()))
	}
	b.layLadders(train.X, replicate)
	b.observer.begin(b.cell, b.seed, replicate, sample)
	for i := range b.contest.Entrants {
		b.entrant(i, replicate, train)
	}
	b.forest.Add(b.leaf)
}

// layLadders works out every entrant's rungs on the design x; on a fixed design
// only once.
func (b *Bench) layLadders(x []float64, replicate int) {
	if b.laid {
		return
	}
	b.laid = b.cell.FixedDesign()
	b.arena.Lasting = b.laid
	b.arena.Reset()
	adjacent := b.contest.adjacent()
	general := generalTests(len(x), replicate, b.laid)
	for i, e := range b.contest.Entrants {
		b.rungs[i] = e.Smoother.On(x, &b.arena).AtDF(e.DF)
		b.tests[i].lay(b.rungs[i], x, general, adjacent)
	}
}

// entrant fits and scores one ladder, and appends its rows of both tables.
func (b *Bench) entrant(i, replicate int, train *sim.Set) {
	e := &b.contest.Entrants[i]
	path := b.trainer.path(len(e.DF), len(b.folders))
	first := len(b.rows.Fits)
	for j := range b.rungs[i] {
		r := &b.rungs[i][j]
		row := b.row(replicate, e, r)
		if r.Status == smoothers.OK {
			r.Fit(train.Y, &b.fit)
			b.score(&row, train)
		}
		b.trainer.step(&path.Steps[j], r, &b.fit)
		if path.Steps[j].Status == smoothers.OK {
			b.fitted(i, j, &row, r, &b.tests[i].rungs[j], path.Steps[j].RSS, &b.fit)
		}
		b.rows.Fits = append(b.rows.Fits, row)
	}
	for k, f := range b.folders {
		path.Folds[k].K = f.k
		f.validate(e.Smoother, e.DF, train.X, train.Y, path.Folds[k].Steps)
	}
	b.tests[i].judge(path)
	fits := b.rows.Fits[first:]
	for j := range fits {
		path.record(j, &fits[j], b.more)
		fits[j].LineP = b.tests[i].lineP(j, path)
		b.collect(i, j, &fits[j], b.tests[i].overLines(j, b.rungs[i]))
	}
	b.picks(e, path, fits)
}

// row returns the part of a row that the design alone decides.
func (b *Bench) row(replicate int, e *Entrant, r *smoothers.Rung) results.Fit {
	row := results.Fit{
		Cell: b.key, Replicate: replicate, Smoother: e.Name, DF: r.DF,
		Status: r.Status.String(), Note: r.Note, HeldoutNoise: results.Num(b.held.Noise()),
	}
	if r.Status == smoothers.OK {
		row.TrS, row.TrSTS = results.Num(r.TrS), results.Num(r.TrSTS)
		row.DFResidual, row.Tuning = results.Num(r.DFResidual), results.Num(r.Tuning)
	}
	return row
}

// score fills in what the held-out set and the truth say of the fit at hand.
func (b *Bench) score(row *results.Fit, train *sim.Set) {
	s, finite := b.held.Score(b.fit.Curve)
	if !finite {
		row.Status = smoothers.NotFinite.String()
		return
	}
	row.HeldoutMSE, row.ASEHeldout = results.Num(s.MSE), results.Num(s.ASE)
	if s.HasInside {
		row.ASEInside = results.Num(s.Inside)
	}
	if s.HasOutside {
		row.ASEOutside = results.Num(s.Outside)
	}
	ase := 0.0
	for i, f := range train.F {
		d := b.fit.Fitted[i] - f
		ase += d * d
	}
	row.ASETrain = results.Num(ase / float64(len(train.F)))
}
