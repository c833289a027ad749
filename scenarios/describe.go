package scenarios

import "bendtest/sim"

// A Key describes a key or a table of a study file.
type Key struct {
	Table string // "" at the top of the file, or as it is written: "[truth.NAME]"
	Option
}

// Keys describes all that a study file may hold, but for the options of laws,
// families and rules; those come from OptionsOf on what their lists make.
func Keys(rules []Kind) []Key {
	var keys []Key
	add := func(table string, structs ...any) {
		for _, f := range fieldsOf(structs...) {
			keys = append(keys, Key{table, f.Option})
		}
	}
	top := defaultKeys()
	design, noise := designLaw(), noiseLaw()
	smoother, rule := newSmootherKeys(), newRuleKeys(rules)
	add("", &top)
	add("replicates = {…}", defaultPrecision())
	add("[cells]", &cellKeys{})
	add("[truth.NAME]", &truthKeys{})
	add("knots = {…}", &knots{})
	add("[design.NAME]", &design, defaultDesign())
	add("[noise.NAME]", &noise, &sim.Noise{})
	add("[[smoother]]", &smoother)
	add("[[rule]]", &rule)
	return keys
}
