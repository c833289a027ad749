package scenarios

import (
	"errors"
	"fmt"
	"math/big"
	"reflect"
	"regexp"
	"slices"
	"strings"
)

// A grid is a list of df, ascending and unique.
type grid []float64

// Limits of a grid.
const (
	mostDF      = 1e6
	mostEntries = 1000
)

const (
	gridForms = `a list such as [2, 2.5, 4] or a range such as "2..16" or "3..19 by 2"`
	dfRange   = "df above 0 and at most 1000000"
)

func (*grid) describe() string {
	return `list of numbers, or a range "2..16", "2.5..16" or "3..19 by 2" (steps of 1 if not said)`
}

func (g *grid) text() string {
	if *g == nil {
		return ""
	}
	return "[" + gridText(*g) + "]"
}

// read takes a grid from a list, a range in quotes or a single number.
func (g *grid) read(r *reader, key string, n *node) bool {
	switch n.kind {
	case textNode:
		values, bad := parseRange(n.text)
		if bad != nil {
			return r.fault(gridFault(n.inside(bad.at), key+": "+bad.msg, bad.want))
		}
		*g = values
		return true
	case integerNode, decimalNode:
		return g.fromItems(r, key, n, []*node{n})
	case listNode:
		return g.fromItems(r, key, n, n.items)
	}
	return r.fault(typeWrong(n, key, gridForms))
}

// fromItems takes a grid from its entries.
func (g *grid) fromItems(r *reader, key string, n *node, items []*node) bool {
	if len(items) == 0 {
		return r.fault(gridFault(n.at, "an empty list of df", gridForms))
	}
	if len(items) > mostEntries {
		return r.fault(tooManyOf(n.at, "entries of "+key, len(items), mostEntries))
	}
	ok := true
	var values grid
	for i, item := range items {
		f := field{Option: Option{Type: "number"}}
		name := key
		if n.kind == listNode {
			name = fmt.Sprintf("entry %d of %s", i+1, key)
		}
		v, isNumber := item.number()
		switch {
		case item.kind == badNode:
			ok = false
		case item.kind != integerNode && item.kind != decimalNode:
			ok = r.fault(typeWrong(item, name, f.want()))
		case !isNumber || !(v > 0 && v <= mostDF):
			ok = r.fault(rangeExceeded(item, name, dfRange))
		case len(values) > 0 && v <= values[len(values)-1]:
			ok = r.fault(gridFault(item.at, fmt.Sprintf("%s = %s after %s", name, number(v), number(values[len(values)-1])), "df in ascending order"))
		default:
			values = append(values, v)
		}
	}
	if ok {
		*g = values
	}
	return ok
}

// rangeForm is "low..high", with "by step" or without.
var rangeForm = regexp.MustCompile(`^\s*(\d+(?:\.\d+)?)\s*\.\.\s*(\d+(?:\.\d+)?)(?:\s+by\s+(\d+(?:\.\d+)?))?\s*$`)

// A gridError is what is wrong with the text of a range, and where.
type gridError struct {
	at        int
	msg, want string
}

func (e *gridError) Error() string { return fmt.Sprintf("%s (want %s)", e.msg, e.want) }

// parseRange lists the values of a range. It steps in exact decimals, so that
// "2..3 by 0.1" holds the number that is written 2.3.
func parseRange(text string) ([]float64, *gridError) {
	const mostText = 60
	at := rangeForm.FindStringSubmatchIndex(text)
	if at == nil || len(text) > mostText {
		return nil, &gridError{0, fmt.Sprintf("%q is no range", shorten(text)), gridForms}
	}
	part := func(i int) *big.Rat {
		v, _ := new(big.Rat).SetString(text[at[2*i]:at[2*i+1]])
		return v
	}
	low, high, step := part(1), part(2), big.NewRat(1, 1)
	if at[6] >= 0 {
		step = part(3)
	}
	limit := new(big.Rat).SetInt64(mostDF)
	switch {
	case low.Sign() <= 0 || low.Cmp(limit) > 0:
		return nil, &gridError{at[2], "the range starts at " + text[at[2]:at[3]], dfRange}
	case high.Cmp(limit) > 0:
		return nil, &gridError{at[4], "the range ends at " + text[at[4]:at[5]], dfRange}
	case high.Cmp(low) < 0:
		return nil, &gridError{at[4], "the range ends below its start", "low..high"}
	case step.Sign() <= 0:
		return nil, &gridError{at[6], "a step of 0", "a step above 0"}
	}
	var values []float64
	for v := low; v.Cmp(high) <= 0; v = new(big.Rat).Add(v, step) {
		if len(values) == mostEntries {
			return nil, &gridError{at[2], "a longer range", fmt.Sprintf("at most %d entries", mostEntries)}
		}
		next, _ := v.Float64()
		if len(values) > 0 && next == values[len(values)-1] {
			return nil, &gridError{at[6], "a step too small to count", "a larger step"}
		}
		values = append(values, next)
	}
	return values, nil
}

// ParseGrid reads a grid of df from a command line: a range as in a study file, or
// numbers separated by commas.
func ParseGrid(text string) ([]float64, error) {
	if strings.Contains(text, "..") {
		values, bad := parseRange(text)
		if bad != nil {
			return nil, bad
		}
		return values, nil
	}
	if strings.TrimSpace(text) == "" {
		return nil, &gridError{0, "no df", gridForms}
	}
	r := &reader{src: newSource("", nil)}
	var g grid
	if !g.read(r, "df", flagNode(reflect.TypeFor[[]float64](), text)) {
		return nil, errors.New(r.faults[0].brief())
	}
	return g, nil
}

// gridText writes a grid, the middle of a long one left out.
func gridText(g []float64) string {
	words := make([]string, len(g))
	for i, v := range g {
		words[i] = number(v)
	}
	const most = 20
	if len(words) > most {
		words = slices.Concat(words[:most/2], []string{"…"}, words[len(words)-most/2:])
	}
	return strings.Join(words, ", ")
}
