package expr

import "math"

// A graph holds an expression with each distinct part once and all that is constant
// worked out, arguments before the operations on them.
type graph struct {
	nodes []node
	index map[node]int
	root  int // place of the whole
}

// lower makes the graph of a tree.
func (t tree) lower() *graph {
	g := &graph{index: map[node]int{}}
	place := make([]int, len(t))
	for i, n := range t {
		n.name = ""
		if n.op >= 0 {
			for k := range operations[n.op].Args {
				n.args[k] = place[n.args[k]]
			}
			n = g.folded(n)
		}
		place[i] = g.intern(n)
	}
	g.root = place[len(t)-1]
	return g
}

// intern returns the place of a node, adding it if it is new.
func (g *graph) intern(n node) int {
	i, known := g.index[n]
	if !known {
		i = len(g.nodes)
		g.nodes = append(g.nodes, n)
		g.index[n] = i
	}
	return i
}

// folded works an operation out if its arguments are constants.
func (g *graph) folded(n node) node {
	var v [3][1]float64
	for k := range operations[n.op].Args {
		a := g.nodes[n.args[k]]
		if a.op != kindConstant {
			return n
		}
		v[k][0] = a.value()
	}
	var out [1]float64
	operations[n.op].apply(out[:], v[0][:], v[1][:], v[2][:])
	return node{op: kindConstant, bits: math.Float64bits(out[0])}
}

// uses finds the nodes that the root needs, and the last node that uses each.
func (g *graph) uses() (used []bool, last []int) {
	used, last = make([]bool, len(g.nodes)), make([]int, len(g.nodes))
	used[g.root] = true
	last[g.root] = len(g.nodes) // the result outlives all
	for i := len(g.nodes) - 1; i >= 0; i-- {
		n := g.nodes[i]
		if !used[i] || n.op < 0 {
			continue
		}
		for k := range operations[n.op].Args {
			a := n.args[k]
			used[a] = true
			last[a] = max(last[a], i)
		}
	}
	return used, last
}
