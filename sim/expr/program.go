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
	registers int       // registers for results, after those of the constants
	result    int       // register of the value
}

// An instruction works one operation on registers.
type instruction struct {
	op   int
	dst  int
	args [3]int
}

// Registers are numbered: x, the vector that the caller wants filled, the
// constants, then results on the way.
const (
	registerX = iota
	registerValue
	registerFirst
)

// program lays the graph out as instructions, reusing a register once its value
// has been used for the last time. The last instruction writes to the caller.
func (g *graph) program(source string) *Expression {
	e := &Expression{source: source}
	used, lastUse := g.uses()
	place := make([]int, len(g.nodes))
	for i, n := range g.nodes {
		if used[i] && n.op == kindConstant {
			place[i] = registerFirst + len(e.constants)
			e.constants = append(e.constants, n.value())
		}
	}
	first := registerFirst + len(e.constants)
	var free []int
	for i, n := range g.nodes {
		if !used[i] || n.op < 0 {
			continue
		}
		in := instruction{op: n.op}
		for k := range operations[n.op].Args {
			in.args[k] = place[n.args[k]]
		}
		for k := range operations[n.op].Args {
			if a := n.args[k]; g.nodes[a].op >= 0 && lastUse[a] == i {
				free = append(free, place[a])
				lastUse[a] = -1 // free it once, though it be used twice here
			}
		}
		switch {
		case i == g.root:
			in.dst = registerValue
		case len(free) > 0:
			in.dst, free = free[len(free)-1], free[:len(free)-1]
		default:
			in.dst = first + e.registers
			e.registers++
		}
		place[i] = in.dst
		e.code = append(e.code, in)
	}
	e.result = place[g.root]
	return e
}

// A Scratch is the memory an evaluation needs. The zero value is ready; it belongs
// to one goroutine and may serve many expressions.
type Scratch struct {
	memory    []float64
	registers [][]float64
	holds     *Expression // whose constants are in the registers
}

// prepare lays out registers for e but for the first two, which are the caller's.
func (s *Scratch) prepare(e *Expression) {
	if s.holds == e {
		return
	}
	s.holds = e
	n := len(e.constants) + e.registers
	if len(s.memory) < n*block {
		s.memory = make([]float64, n*block)
	}
	s.registers = append(s.registers[:0], nil, nil)
	for r := range n {
		s.registers = append(s.registers, s.memory[r*block:(r+1)*block])
	}
	for k, v := range e.constants {
		r := s.registers[registerFirst+k]
		for i := range r {
			r[i] = v
		}
	}
}

// Eval writes the expression at x into dst, which must have x's length and may be x
// itself. It allocates nothing as long as s serves e.
func (e *Expression) Eval(dst, x []float64, s *Scratch) {
	if len(dst) != len(x) {
		panic("expr: dst and x differ in length")
	}
	s.prepare(e)
	r := s.registers
	for from := 0; from < len(x); from += block {
		n := min(block, len(x)-from)
		r[registerX], r[registerValue] = x[from:from+n], dst[from:from+n]
		for i := range e.code {
			in := &e.code[i]
			operations[in.op].apply(r[in.dst][:n], r[in.args[0]][:n], r[in.args[1]][:n], r[in.args[2]][:n])
		}
		if len(e.code) == 0 { // the expression is x or a constant
			copy(dst[from:from+n], r[e.result])
		}
	}
	r[registerX], r[registerValue] = nil, nil // the caller's memory is not ours to keep
}

// At evaluates the expression at one point.
func (e *Expression) At(x float64) float64 {
	var s Scratch
	out := []float64{x}
	e.Eval(out, out, &s)
	return out[0]
}

// String is a canonical text: Compile makes the same program of it, and texts that
// differ only in spacing, needless parentheses or the spelling of numbers share it.
func (e *Expression) String() string { return e.source }
