package scenarios

import (
	"bendtest/sim"
	"bendtest/sim/expr"
	"bendtest/smoothers"
)

// studyKeys are the keys and tables at the top of a file.
type studyKeys struct {
	Title      string     `option:"title" doc:"one line for people"`
	Seed       uint64     `option:"seed" min:"0" doc:"where all random streams start; another seed is another study of the same cells"`
	HeldOut    int        `option:"held-out" min:"100" max:"1e7" doc:"size of the held-out set of each replicate"`
	Replicates replicates `option:"replicates" doc:"training and held-out sets drawn in each cell, or a target for the Monte Carlo error"`
	Keep       string     `option:"keep" oneof:"fits picks summary" doc:"the largest tables wanted: every rung, every pick, or the summaries alone"`
	Cells      *node      `option:"cells" type:"table [cells]" required:"true" doc:"the factorial: sample sizes, and what is combined"`
	Truth      *node      `option:"truth" type:"table [truth.NAME]" required:"true" doc:"true mean curves"`
	Design     *node      `option:"design" type:"table [design.NAME]" required:"true" doc:"designs: how x arises"`
	Noise      *node      `option:"noise" type:"table [noise.NAME]" required:"true" doc:"noises: laws of y − f(x)"`
	Smoother   *node      `option:"smoother" type:"table [[smoother]]" required:"true" doc:"families to fit and their df"`
	Rule       *node      `option:"rule" type:"table [[rule]]" doc:"rules that pick a df; the oracle is always there"`
}

// cellKeys are the keys of [cells].
type cellKeys struct {
	N      []int    `option:"n" required:"true" min:"3" max:"1e7" doc:"training sample sizes"`
	Truth  []string `option:"truth" type:"list of names" doc:"names of truths; if left out, all, in file order"`
	Design []string `option:"design" type:"list of names" doc:"names of designs; if left out, all, in file order"`
	Noise  []string `option:"noise" type:"list of names" doc:"names of noises; if left out, all, in file order"`
}

// truthKeys are the keys of [truth.NAME]: f or knots.
type truthKeys struct {
	F      *expr.Expression `option:"f" doc:"the curve, in quotes: an expression in x, or the name of a published function"`
	Knots  *knots           `option:"knots" doc:"points of a natural cubic spline, instead of f"`
	Domain []float64        `option:"domain" doc:"the two ends of the curve's interval; if left out, [0, 1], or the range of the knots"`
}

// knots are the points that a truth goes through.
type knots struct {
	X []float64 `option:"x" required:"true" doc:"x of the points, ascending" unit:"x"`
	Y []float64 `option:"y" required:"true" doc:"y of the points" unit:"y"`
}

// lawKey is the key that says which law a design or a noise follows.
type lawKey struct {
	Law choice `option:"law" required:"true" doc:"the law; its own options stand beside it"`
}

// smootherKeys are the keys of [[smoother]] that all families share.
type smootherKeys struct {
	Family choice `option:"family" required:"true" doc:"the family; its own options stand beside it"`
	Name   string `option:"name" doc:"label in all tables; if left out, made from the family and its options"`
	DF     grid   `option:"df" required:"true" doc:"df to fit"`
}

// ruleKeys are the keys of [[rule]] that all kinds share.
type ruleKeys struct {
	Kind choice `option:"kind" required:"true" doc:"the kind; its own options stand beside it"`
	Name string `option:"name" doc:"label in all tables; if left out, made from the kind and its options"`
}

func designLaw() lawKey { return lawKey{choice{what: "design law", known: designNames()}} }

func noiseLaw() lawKey { return lawKey{choice{what: "noise law", known: noiseNames()}} }

func newSmootherKeys() smootherKeys {
	return smootherKeys{Family: choice{what: "smoother family", known: familyNames()}}
}

func newRuleKeys(kinds []Kind) ruleKeys {
	return ruleKeys{Kind: choice{what: "rule kind", known: ruleNames(kinds)}}
}

// defaultKeys are the keys at the top at their defaults.
func defaultKeys() studyKeys {
	return studyKeys{Seed: 1, HeldOut: 10_000, Replicates: replicates{Count: 200}, Keep: "fits"}
}

// defaultPrecision is a precision target at its defaults.
func defaultPrecision() *Precision { return &Precision{AtLeast: 100} }

// defaultDesign is a design at the defaults of what all laws share.
func defaultDesign() *sim.Design { return &sim.Design{Redraw: true} }

func designNames() []string {
	return names(sim.Designs(), func(k sim.DesignKind) string { return k.Name })
}
func noiseNames() []string {
	return names(sim.Noises(), func(k sim.NoiseKind) string { return k.Name })
}
func familyNames() []string {
	return names(smoothers.Families(), func(f smoothers.Family) string { return f.Name })
}
func ruleNames(kinds []Kind) []string { return names(kinds, func(k Kind) string { return k.Name }) }

// names maps kinds to their names.
func names[K any](kinds []K, name func(K) string) []string {
	list := make([]string, len(kinds))
	for i, k := range kinds {
		list[i] = name(k)
	}
	return list
}
