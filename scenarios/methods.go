package scenarios

import (
	"fmt"
	"math"
	"slices"

	"bendtest/smoothers"
)

// tables returns the tables of a list [[what]], or reports that it is none.
func (r *reader) tables(what string, n *node) []*node {
	if n == nil || n.kind == badNode {
		return nil
	}
	if n.kind != listNode {
		r.fault(typeWrong(n, what, "tables [["+what+"]]"))
		return nil
	}
	if len(n.items) > mostNamed {
		r.fault(tooManyOf(n.at, what+" tables", len(n.items), mostNamed))
		return nil
	}
	return slices.DeleteFunc(slices.Clone(n.items), func(item *node) bool {
		if item.kind != tableNode && item.kind != badNode {
			r.fault(typeWrong(item, "an entry of "+what, "a table [["+what+"]]"))
		}
		return item.kind != tableNode
	})
}

// smoothers reads all [[smoother]]. What it returns is complete if none has a fault.
func (r *reader) smoothers(n *node) (list []Smoother, complete bool) {
	labels := make(map[string]int)
	families := smoothers.Families()
	const where = "in [[smoother]]"
	tables := r.tables("smoother", n)
	for _, t := range tables {
		keys := newSmootherKeys()
		i := keys.Family.chosen(t, "family")
		if i < 0 {
			r.fill(t, where, familyOptions(), &keys)
			continue
		}
		m := Smoother{Family: families[i].Name, Smoother: families[i].New()}
		ok := r.fill(t, where, nil, &keys, m.Smoother) && r.checked(t, m.Smoother)
		ok = r.wholeDF(t, families[i], keys.DF) && ok
		if !ok {
			continue
		}
		m.DF = keys.DF
		m.Name = keys.Name
		if t.get("name") == nil {
			m.Name = Label(m.Family, families[i].New(), m.Smoother)
		}
		if r.labelled(t, "smoother", "family", m.Name, labels) {
			list = append(list, m)
		}
	}
	return list, len(list) == len(tables) && len(list) > 0
}

// wholeDF reports df that a family cannot have since its df are whole numbers: all
// that stand in a list, the first of a range.
func (r *reader) wholeDF(t *node, family smoothers.Family, dfs []float64) bool {
	if !family.WholeDF {
		return true
	}
	ok := true
	for i, df := range dfs {
		at := t.get("df")
		if at.kind == listNode {
			at = at.items[i]
		} else if !ok {
			break
		}
		if df != math.Trunc(df) {
			ok = r.fault(gridFault(at.at, fmt.Sprintf("df = %s for a %s", number(df), family.Name), "whole numbers, such as \"4..16\""))
		}
	}
	return ok
}

// labelled reports whether a label can be one and is not taken; labels holds the
// lines of those before.
func (r *reader) labelled(t *node, what, kind, name string, labels map[string]int) bool {
	at := t.where(kind)
	if n := t.get("name"); n != nil {
		at = n.at
	}
	if line, taken := labels[name]; taken {
		return r.fault(labelIsTaken(at, what, name, line))
	}
	labels[name] = r.src.line(at)
	if t.get("name") == nil {
		return true
	}
	if what == "rule" && name == oracle {
		return r.fault(nameFault(at, name, "another; every table has a row of that name for the best df that no rule can know"))
	}
	return r.nameable(at, name)
}

// oracle is the name that the tables give to the best rung.
const oracle = "oracle"

// rules reads all [[rule]].
func (r *reader) rules(n *node) (list []Rule, tables []*node) {
	labels := make(map[string]int)
	const where = "in [[rule]]"
	for _, t := range r.tables("rule", n) {
		keys := newRuleKeys(r.voc.Rules)
		i := keys.Kind.chosen(t, "kind")
		if i < 0 {
			r.fill(t, where, r.ruleOptions(), &keys)
			continue
		}
		kind := r.voc.Rules[i]
		m := Rule{Kind: kind.Name, Options: kind.New()}
		if !r.fill(t, where, nil, &keys, m.Options) || !r.checked(t, m.Options) {
			continue
		}
		m.Name = keys.Name
		if t.get("name") == nil {
			m.Name = Label(m.Kind, kind.New(), m.Options)
		}
		if r.labelled(t, "rule", "kind", m.Name, labels) {
			list, tables = append(list, m), append(tables, t)
		}
	}
	return list, tables
}

// onGrid reports fixed df that no smoother has.
func (r *reader) onGrid(rules []Rule, tables []*node, all []Smoother) {
	var union []float64
	for _, m := range all {
		union = append(union, m.DF...)
	}
	slices.Sort(union)
	union = slices.Compact(union)
	for i, rule := range rules {
		fields := fieldsOf(rule.Options)
		if k := indexOf(fields, "df"); k >= 0 && rule.Kind == "fixed" {
			if df := fields[k].value.Float(); !slices.Contains(union, df) {
				r.fault(dfOffGrid(tables[i].where("df"), df, union))
			}
		}
	}
}

// enoughToFold reports rules with more folds than the smallest sample, least, has
// observations; line is where it stands.
func (r *reader) enoughToFold(rules []Rule, tables []*node, least, line int) {
	for i, rule := range rules {
		fields := fieldsOf(rule.Options)
		if k := indexOf(fields, "k"); k >= 0 && rule.Kind == "kfold" {
			if folds := fields[k].value.Int(); folds > int64(least) {
				r.fault(optionRefused(tables[i].where("k"), fmt.Sprintf("k = %d", folds), fmt.Sprintf("want at most %d, the smallest n on line %d", least, line)))
			}
		}
	}
}

// familyOptions are the options of all families.
func familyOptions() []string {
	var all []any
	for _, f := range smoothers.Families() {
		all = append(all, f.New())
	}
	return allNames(all...)
}

// ruleOptions are the options of all kinds of rule.
func (r *reader) ruleOptions() []string {
	var all []any
	for _, k := range r.voc.Rules {
		all = append(all, k.New())
	}
	return allNames(all...)
}
