package scenarios

import (
	"fmt"
	"reflect"
)

// replicates is the key of that name: a number, or a precision target.
type replicates struct {
	Count     int
	Precision *Precision
}

// mostReplicates bounds the replicates of a cell.
const mostReplicates = 1_000_000_000

func (*replicates) describe() string {
	return "whole number, or a table {at-least, at-most, relative-mcse}"
}

func (v *replicates) read(r *reader, key string, n *node) bool {
	const want = "a whole number from 1 to 1000000000, or {at-least = …, at-most = …, relative-mcse = …}"
	switch n.kind {
	case integerNode:
		if x, ok := n.number(); !ok || x < 1 || x > mostReplicates {
			return r.fault(rangeExceeded(n, key, want))
		} else {
			*v = replicates{Count: int(x)}
			return true
		}
	case tableNode:
		p := defaultPrecision()
		if !r.fill(n, "in "+key, nil, p) {
			return false
		}
		if p.AtLeast > p.AtMost {
			at := n.get("at-least")
			if at == nil {
				at = n.get("at-most")
			}
			return r.fault(optionRefused(at.at, fmt.Sprintf("at-least = %d and at-most = %d", p.AtLeast, p.AtMost), "want at-most no smaller than at-least"))
		}
		*v = replicates{p.AtMost, p}
		return true
	}
	return r.fault(typeWrong(n, key, want))
}

func (v *replicates) text() string {
	if v.Precision == nil {
		return fmt.Sprint(v.Count)
	}
	return valueAsText(reflect.ValueOf(v.Precision).Elem())
}
