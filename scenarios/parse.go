package scenarios

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"bendtest/sim"
)

// mostCells bounds the factorial.
const mostCells = 100_000

// Parse reads a study file; name is its path, which faults carry and to which the
// paths in it are relative. It returns the study, or else all faults of the file.
func Parse(name string, src []byte, voc Vocabulary) (*Study, Faults) {
	r := &reader{src: newSource(name, src), voc: voc}
	if len(src) > mostBytes {
		r.fault(fileTooLarge(len(src)))
		return nil, settle(r.faults, r.src)
	}
	root, faults, lossy := readTree(r.src)
	r.faults, r.lossy = faults, lossy
	study := r.study(root)
	if len(r.faults) > 0 {
		return nil, settle(r.faults, r.src)
	}
	study.Source = src
	study.Hash = study.hash()
	return study, nil
}

// study reads the tree from top to bottom, as far as there is sense in it.
func (r *reader) study(root *node) *Study {
	keys := defaultKeys()
	if r.fill(root, "in this file", nil, &keys) && strings.IndexFunc(keys.Title, notPrintable) >= 0 {
		r.fault(nameFault(root.where("title"), keys.Title, "a title of one line of printable text"))
	}
	s := &Study{
		Title: keys.Title, Seed: keys.Seed, HeldOut: keys.HeldOut, Keep: keys.Keep,
		Replicates: keys.Replicates.Count, Precision: keys.Replicates.Precision,
	}
	truths, designs, noises := r.truths(keys.Truth), r.designs(keys.Design), r.noises(keys.Noise)
	lists := r.cellLists(keys.Cells)
	smoothers, complete := r.smoothers(keys.Smoother)
	rules, tables := r.rules(keys.Rule)
	s.Smoothers, s.Rules = smoothers, rules
	if complete {
		r.onGrid(rules, tables, smoothers)
	}
	if len(lists.N) > 0 && !slices.Contains(lists.N, 0) { // 0 is a faulty one
		r.enoughToFold(rules, tables, slices.Min(lists.N), r.src.line(keys.Cells.where("n")))
	}

	f := &s.factors
	f.lists = lists
	f.lists.Truth, f.truths = pick(r, keys.Cells, "truth", lists.Truth, truths, func(t *truthEntry) string { return t.name })
	f.lists.Design, f.designs = pick(r, keys.Cells, "design", lists.Design, designs, func(d *designEntry) string { return d.name })
	f.lists.Noise, f.noises = pick(r, keys.Cells, "noise", lists.Noise, noises, func(n *noiseEntry) string { return n.name })
	s.Cells = r.cells(f, s.HeldOut, keys.Cells)
	return s
}

// cellLists reads [cells].
func (r *reader) cellLists(n *node) cellKeys {
	var lists cellKeys
	if n == nil || n.kind == badNode {
		return lists
	}
	if n.kind != tableNode {
		r.fault(typeWrong(n, "cells", "a table [cells]"))
		return lists
	}
	ok := r.fill(n, "in [cells]", nil, &lists)
	for _, k := range n.keys {
		if ok && len(k.value.items) == 0 {
			r.fault(optionRefused(k.value.at, k.name+" is an empty list", "want at least one entry"))
		}
	}
	seen := make(map[int]bool)
	for i, v := range lists.N {
		if v > 0 && seen[v] {
			r.fault(repeated(n.get("n").items[i].at, "n", fmt.Sprint(v)))
		}
		seen[v] = true
	}
	return lists
}

// pick returns the entries that a list of [cells] names, in its order, with their
// names; without a list, all. Names that are not declared are reported.
func pick[E any](r *reader, cells *node, key string, list []string, entries []E, name func(*E) string) ([]string, []E) {
	var known []string
	place := make(map[string]int)
	for i := range entries {
		place[name(&entries[i])] = i
		known = append(known, name(&entries[i]))
	}
	if list == nil {
		return known, entries
	}
	var chosen []E
	seen := make(map[string]bool)
	items := cells.get(key).items
	for i, want := range list {
		k, declared := place[want]
		switch {
		case items[i].kind != textNode: // has been reported
		case !declared && !r.lossy:
			r.fault(nameUndeclared(items[i].at, key, want, known))
		case seen[want]:
			r.fault(repeated(items[i].at, key, fmt.Sprintf("%q", shorten(want))))
		case declared:
			chosen = append(chosen, entries[k])
		}
		seen[want] = true
	}
	return list, chosen
}

// cells lays out the factorial of what has no faults of its own, and reports
// combinations that cannot be.
func (r *reader) cells(f *factors, heldOut int, at *node) []Cell {
	count := float64(len(f.truths)) * float64(len(f.designs)) * float64(len(f.noises)) * float64(len(f.lists.N))
	if count > mostCells {
		r.fault(tooManyOf(at.at, "cells", int(count), mostCells))
		return nil
	}
	var cells []Cell
	for _, t := range f.truths {
		for _, d := range f.designs {
			for _, e := range f.noises {
				if t.truth == nil || d.design == nil || e.noise == nil {
					continue
				}
				for _, n := range f.lists.N {
					c := Cell{
						Key:   fmt.Sprintf("%s/%s/%s/n=%d", t.name, d.name, e.name, n),
						Truth: t.name, Design: d.name, Noise: e.name, N: n,
					}
					if c.Sim = r.cell(&t, &d, &e, n, heldOut); c.Sim != nil {
						cells = append(cells, c)
					}
				}
			}
		}
	}
	return cells
}

// cell makes what draws the data of a cell, or reports why it cannot be.
func (r *reader) cell(t *truthEntry, d *designEntry, e *noiseEntry, n, heldOut int) *sim.Cell {
	if n < 1 || heldOut < 1 { // has been reported
		return nil
	}
	cell, err := sim.NewCell(t.truth, d.design, e.noise, n, heldOut)
	if err == nil {
		return cell
	}
	at := e.node
	var bad *sim.CellError
	if errors.As(err, &bad) {
		err = bad.Err
		switch bad.Part {
		case sim.TruthPart:
			at = t.node
		case sim.DesignPart:
			at = d.node
		}
	}
	r.refuse(at, "", err)
	return nil
}
