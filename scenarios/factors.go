package scenarios

import (
	"errors"
	"reflect"
	"strings"
	"unicode"

	"bendtest/sim"
)

// mostNamed bounds how many truths, designs, noises, smoothers or rules a file has.
const mostNamed = 1000

// A truthEntry is a [truth.NAME].
type truthEntry struct {
	name  string
	node  *node
	keys  truthKeys
	truth *sim.Truth // nil if faulty
}

// A designEntry is a [design.NAME].
type designEntry struct {
	name, law string
	node      *node
	design    *sim.Design // nil if faulty
}

// A noiseEntry is a [noise.NAME].
type noiseEntry struct {
	name, law string
	node      *node
	noise     *sim.Noise // nil if faulty
}

// named returns the tables declared under a key such as "truth", in file order,
// and reports names that will not do.
func (r *reader) named(what string, n *node) []entry {
	if n == nil || n.kind == badNode {
		return nil
	}
	if n.kind != tableNode {
		r.fault(typeWrong(n, what, "tables ["+what+".NAME]"))
		return nil
	}
	if len(n.keys) > mostNamed {
		r.fault(tooManyOf(n.at, what+" tables", len(n.keys), mostNamed))
		return nil
	}
	var tables []entry
	for _, k := range n.keys {
		switch {
		case k.value.kind == badNode:
		case k.value.kind != tableNode:
			r.fault(typeWrong(k.value, what+"."+keyText(k.name), "a table ["+what+".NAME]"))
		case r.nameable(k.at, k.name):
			tables = append(tables, k)
		}
	}
	return tables
}

// nameable reports whether a name can be part of a cell's key or be a label.
func (r *reader) nameable(at int, name string) bool {
	const most = 64
	bad := func(c rune) bool { return c == '/' || notPrintable(c) }
	if name == "" || len(name) > most || name != strings.TrimSpace(name) || strings.IndexFunc(name, bad) >= 0 {
		return r.fault(nameFault(at, name, "1 to 64 bytes of printable text, without / and without blanks at the ends"))
	}
	return true
}

// notPrintable is about a character that a table should not have in a name.
func notPrintable(c rune) bool { return c == unicode.ReplacementChar || !unicode.IsPrint(c) }

// truths reads all [truth.NAME].
func (r *reader) truths(n *node) []truthEntry {
	var list []truthEntry
	for _, k := range r.named("truth", n) {
		t := truthEntry{name: k.name, node: k.value}
		if r.fill(k.value, "in [truth."+keyText(k.name)+"]", nil, &t.keys) {
			t.truth = r.truth(&t)
		}
		list = append(list, t)
	}
	return list
}

// truth makes the curve of an entry, or reports why it cannot be.
func (r *reader) truth(t *truthEntry) *sim.Truth {
	n, where := t.node, "in [truth."+keyText(t.name)+"]"
	f, points := t.keys.F, t.keys.Knots
	switch {
	case f == nil && points == nil:
		r.absent(n.at, "f", where, `want f = "…", or knots = {x = […], y = […]}`)
		return nil
	case f != nil && points != nil:
		r.fault(keysClash(n.where("knots"), "knots", "f", "one of f and knots"))
		return nil
	}
	if t.keys.Domain == nil {
		t.keys.Domain = []float64{0, 1}
		if points != nil && len(points.X) > 0 {
			t.keys.Domain = []float64{points.X[0], points.X[len(points.X)-1]}
		}
	}
	if len(t.keys.Domain) != 2 {
		r.fault(optionRefused(n.where("domain"), "domain has not two entries", "want the two ends, such as [0, 1]"))
		return nil
	}
	lo, hi := t.keys.Domain[0], t.keys.Domain[1]
	if !(lo < hi) {
		r.fault(optionRefused(n.where("domain"), "domain is empty", "want the lower end, then the upper end"))
		return nil
	}
	var truth *sim.Truth
	var err error
	at := "f"
	if f != nil {
		truth, err = sim.NewTruth(f, lo, hi)
	} else {
		at = "knots"
		truth, err = sim.NewSplineTruth(points.X, points.Y, lo, hi)
	}
	if err != nil {
		r.refuse(n, at, err)
		return nil
	}
	return truth
}

// refuse reports an error that a package below makes of a table: at the option that
// it names, or else at the key that is given.
func (r *reader) refuse(n *node, key string, err error) {
	if option := optionOf(err); option != "" {
		key = option
	}
	msg, want, _ := strings.Cut(err.Error(), "; want ")
	if want != "" {
		want = "want " + want
	}
	r.fault(optionRefused(n.where(key), msg, want))
}

// optionOf returns the option that an error is about: what its field Option says, in
// any error of the chain.
func optionOf(err error) string {
	for ; err != nil; err = errors.Unwrap(err) {
		v := reflect.Indirect(reflect.ValueOf(err))
		if v.Kind() != reflect.Struct {
			continue
		}
		if f := v.FieldByName("Option"); f.IsValid() && f.Kind() == reflect.String {
			return f.String()
		}
	}
	return ""
}

// allNames returns the names of the options of all structs, for tables whose law is
// not known.
func allNames(structs ...any) []string {
	var all []string
	for _, s := range structs {
		all = append(all, namesOf(fieldsOf(s))...)
	}
	return all
}
