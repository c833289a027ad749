package expr

import (
	"math"
	"strconv"
)

// Kinds of node that are not operations.
const (
	kindConstant = -1
	kindX        = -2
)

// constants are the numbers that have names.
var constants = [...]struct {
	name  string
	value float64
}{{"pi", math.Pi}, {"e", math.E}}

// A node is a constant, x, or an operation on earlier nodes.
type node struct {
	op   int    // index of the operation, or a kind
	args [3]int // places of the arguments
	bits uint64 // of a constant's value; as bits, so that 0 and −0 differ
	name string // of a constant that has one
}

// value is the value of a constant.
func (n node) value() float64 { return math.Float64frombits(n.bits) }

// A tree is an expression as it was written, arguments before the operations on
// them, the whole last.
type tree []node

// add appends a node and returns its place.
func (t *tree) add(n node) int {
	*t = append(*t, n)
	return len(*t) - 1
}

// A level is how tightly an operator binds, from the loosest on.
type level int

const (
	anything    level = iota // cond ? a : b
	comparing                // a < b; does not chain
	adding                   // a + b − c
	multiplying              // a * b / c
	signing                  // −a
	raising                  // a ^ b, to the right
	single                   // numbers, names, calls, parentheses
)

// text writes node i in its canonical form, in parentheses if it binds less tightly
// than least: as few parentheses as will do, one spelling of each number. Nothing is
// worked out in it, so it is the same on every machine.
func (t tree) text(i int, least level) string {
	n := t[i]
	switch {
	case n.op == kindX:
		return "x"
	case n.name != "":
		return n.name
	case n.op == kindConstant:
		return strconv.FormatFloat(n.value(), 'g', -1, 64)
	}
	f := operations[n.op]
	if f.form == written {
		s := t.written(n, f)
		if f.level < least {
			return "(" + s + ")"
		}
		return s
	}
	s := f.Name + "("
	for k := range f.Args {
		if k > 0 {
			s += ", "
		}
		s += t.text(n.args[k], anything)
	}
	return s + ")"
}

// written writes an operator between its arguments.
func (t tree) written(n node, f Function) string {
	left, right := f.level, f.level+1
	switch f.level {
	case anything:
		return t.text(n.args[0], comparing) + " ? " + t.text(n.args[1], anything) + " : " + t.text(n.args[2], anything)
	case signing:
		return "-" + t.text(n.args[0], signing)
	case comparing:
		left = adding
	case raising:
		left, right = single, signing
	}
	name := f.Name
	if f.level < multiplying {
		name = " " + name + " "
	}
	return t.text(n.args[0], left) + name + t.text(n.args[1], right)
}
