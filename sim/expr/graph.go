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

// A node is a constant, x, or an operation on earlier nodes.
type node struct {
	op    int // index of the operation, or a kind
	args  [3]int
	value float64 // of a constant
}

// A graph holds an expression with each distinct subexpression once, arguments
// before the operations on them.
type graph struct {
	nodes []node
	index map[node]int
}

func newGraph() graph { return graph{index: map[node]int{}} }

// intern returns the place of a node, adding it if it is new.
func (g *graph) intern(n node) int {
	if i, ok := g.index[n]; ok {
		return i
	}
	g.nodes = append(g.nodes, n)
	g.index[n] = len(g.nodes) - 1
	return len(g.nodes) - 1
}

func (g *graph) constant(v float64) int { return g.intern(node{op: kindConstant, value: v}) }
func (g *graph) x() int                 { return g.intern(node{op: kindX}) }

// apply adds an operation on nodes; on constants alone it is worked at once.
func (g *graph) apply(op int, args ...int) int {
	n := node{op: op}
	constant := true
	var v [3]float64
	for i, a := range args {
		n.args[i] = a
		v[i] = g.nodes[a].value
		constant = constant && g.nodes[a].op == kindConstant
	}
	if constant {
		out := make([]float64, 1)
		operations[op].apply(out, v[0:1], v[1:2], v[2:3])
		if !math.IsNaN(out[0]) && !math.IsInf(out[0], 0) { // those have no literal
			return g.constant(out[0])
		}
	}
	return g.intern(n)
}

// text writes node i so that Compile makes the same graph of it.
func (g *graph) text(i int) string {
	n := g.nodes[i]
	switch n.op {
	case kindX:
		return "x"
	case kindConstant:
		if n.value < 0 {
			return "(-" + strconv.FormatFloat(-n.value, 'g', -1, 64) + ")"
		}
		return strconv.FormatFloat(n.value, 'g', -1, 64)
	}
	f := operations[n.op]
	arg := func(k int) string { return g.text(n.args[k]) }
	switch {
	case f.Name == "neg":
		return "(-" + arg(0) + ")"
	case f.Name == "?:":
		return "(" + arg(0) + " ? " + arg(1) + " : " + arg(2) + ")"
	case f.infix:
		return "(" + arg(0) + " " + f.Name + " " + arg(1) + ")"
	case f.Args == 1:
		return f.Name + "(" + arg(0) + ")"
	}
	return f.Name + "(" + arg(0) + ", " + arg(1) + ")"
}
