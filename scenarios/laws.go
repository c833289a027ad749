package scenarios

import (
	"strings"

	"bendtest/sim"
)

// designs reads all [design.NAME].
func (r *reader) designs(n *node) []designEntry {
	var list []designEntry
	kinds := sim.Designs()
	for _, k := range r.named("design", n) {
		d := designEntry{name: k.name, node: k.value}
		where := "in [design." + keyText(k.name) + "]"
		law, design := designLaw(), defaultDesign()
		if i := law.Law.chosen(k.value, "law"); i >= 0 {
			d.law = kinds[i].Name
			design.Law = kinds[i].New()
			if r.fill(k.value, where, nil, &law, design.Law, design) && r.checked(k.value, design.Law) {
				d.design = design
			}
		} else {
			r.fill(k.value, where, designOptions(), &law, design)
		}
		list = append(list, d)
	}
	return list
}

// noises reads all [noise.NAME].
func (r *reader) noises(n *node) []noiseEntry {
	var list []noiseEntry
	kinds := sim.Noises()
	for _, k := range r.named("noise", n) {
		e := noiseEntry{name: k.name, node: k.value}
		where := "in [noise." + keyText(k.name) + "]"
		law, noise := noiseLaw(), &sim.Noise{}
		ok := r.levelled(k.value, where)
		if i := law.Law.chosen(k.value, "law"); i >= 0 {
			e.law = kinds[i].Name
			noise.Law = kinds[i].New()
			if r.fill(k.value, where, nil, &law, noise.Law, noise) && r.checked(k.value, noise.Law) && ok {
				e.noise = noise
			}
		} else {
			r.fill(k.value, where, noiseOptions(), &law, noise)
		}
		list = append(list, e)
	}
	return list
}

// levelled reports whether exactly one key of a noise sets its level.
func (r *reader) levelled(t *node, where string) bool {
	levels := []string{"sd", "variance", "signal-to-noise", "r2"}
	one := "one of " + strings.Join(levels, ", ")
	first := ""
	for _, k := range t.keys {
		for _, level := range levels {
			switch {
			case k.name != level:
			case first == "":
				first = level
			default:
				return r.fault(keysClash(k.at, level, first, one))
			}
		}
	}
	if first == "" {
		return r.absent(t.at, "level of the noise", where, "want "+one)
	}
	return true
}

// checked reads the file of a law that takes its values from one, and asks the
// options for their own check.
func (r *reader) checked(t *node, options any) bool {
	if from, ok := options.(interface{ Source() *sim.Column }); ok && !r.load(t, from.Source()) {
		return false
	}
	if own, ok := options.(interface{ Check() error }); ok {
		if err := own.Check(); err != nil {
			r.refuse(t, "", err)
			return false
		}
	}
	return true
}

// designOptions are the options of all design laws.
func designOptions() []string {
	var all []any
	for _, k := range sim.Designs() {
		all = append(all, k.New())
	}
	return allNames(all...)
}

// noiseOptions are the options of all noise laws.
func noiseOptions() []string {
	var all []any
	for _, k := range sim.Noises() {
		all = append(all, k.New())
	}
	return allNames(all...)
}
