package expr

// block is the number of points worked at a time: a few registers of this length
// fit into the first-level cache.
const block = 256

// An Expression is a compiled expression. It is immutable and may be used by many
// goroutines, each with a Scratch of its own.
type Expression struct {
	source    string // canonical text
	code      []instruction
	constants []float64 // one register each, filled once per Scratch
	registers int       // registers for results, after x and the constants
	result    int       // register of the value
}

// An instruction works one operation on registers.
type instruction struct {
	op   int
	dst  int
	args [3]int
}

// Registers are numbered: 0 is x, then the constants, then results.
const registerX = 0

// program lays the graph out as instructions, reusing a register once its value
// has been used for the last time.
func (g *graph) program(root int) *Expression {
	e := &Expression{source: g.text(root)}
	used, lastUse := g.uses(root)
	place := make([]int, len(g.nodes))
	for i, n := range g.nodes {
		if used[i] && n.op == kindConstant {
			e.constants = append(e.constants, n.value)
			place[i] = len(e.constants)
		}
	}
	first := 1 + len(e.constants)
	var free []int
	for i, n := range g.nodes {
		if !used[i] || n.op < 0 {
			continue
		}
		in := instruction{op: n.op}
		for k := range operations[n.op].Args {
			in.args[k] = place[n.args[k]]
		}
		in.dst = first + e.registers
		if len(free) > 0 {
			in.dst, free = free[len(free)-1], free[:len(free)-1]
		} else {
			e.registers++
		}
		place[i] = in.dst
		e.code = append(e.code, in)
		for k := range operations[n.op].Args {
			a := n.args[k]
			if g.nodes[a].op >= 0 && lastUse[a] == i {
				free = append(free, place[a])
				lastUse[a] = -1 // free it once, though it be used twice here
			}
		}
	}
	e.result = place[root]
	return e
}

// uses finds the nodes that the root needs, and the last node that uses each.
func (g *graph) uses(root int) (used []bool, last []int) {
	used, last = make([]bool, len(g.nodes)), make([]int, len(g.nodes))
	used[root] = true
	last[root] = len(g.nodes) // the result outlives all
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

// A Scratch is the memory an evaluation needs. The zero value is ready; it belongs
// to one goroutine and may serve many expressions.
type Scratch struct {
	memory    []float64
	registers [][]float64
	holds     *Expression // whose constants are in the registers
}

// prepare lays out registers for e, 0 excepted.
func (s *Scratch) prepare(e *Expression) {
	if s.holds == e {
		return
	}
	s.holds = e
	n := len(e.constants) + e.registers
	if len(s.memory) < n*block {
		s.memory = make([]float64, n*block)
	}
	s.registers = append(s.registers[:0], nil)
	for r := range n {
		s.registers = append(s.registers, s.memory[r*block:(r+1)*block])
	}
	for k, v := range e.constants {
		r := s.registers[k+1]
		for i := range r {
			r[i] = v
		}
	}
}

// Eval writes the expression at x into dst, which must have x's length. It
// allocates nothing once s has served e.
func (e *Expression) Eval(dst, x []float64, s *Scratch) {
	if len(dst) != len(x) {
		panic("expr: dst and x differ in length")
	}
	s.prepare(e)
	for from := 0; from < len(x); from += block {
		n := min(block, len(x)-from)
		s.registers[registerX] = x[from : from+n]
		for i := range e.code {
			in := &e.code[i]
			operations[in.op].apply(
				s.registers[in.dst][:n], s.registers[in.args[0]][:n],
				s.registers[in.args[1]][:n], s.registers[in.args[2]][:n])
		}
		copy(dst[from:from+n], s.registers[e.result][:n])
	}
	s.registers[registerX] = nil
}

// At evaluates the expression at one point.
func (e *Expression) At(x float64) float64 {
	var s Scratch
	out := []float64{0}
	e.Eval(out, []float64{x}, &s)
	return out[0]
}

// String is a canonical text: Compile makes the same program of it, and texts that
// differ only in spacing, parentheses or the order of constants share it.
func (e *Expression) String() string { return e.source }
