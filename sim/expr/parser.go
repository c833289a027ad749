package expr

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Limits on one expression, so that a study file from somebody else cannot exhaust
// the machine.
const (
	maxText  = 4096 // bytes
	maxDepth = 100  // nested calls, parentheses, signs and powers
	maxNodes = 1000 // operations and constants
)

// A parser reads one expression into a graph.
type parser struct {
	text  string
	tok   token
	depth int
	graph graph
}

// Compile reads an expression. The error is a *SyntaxError.
func Compile(text string) (*Expression, error) {
	if len(text) > maxText {
		return nil, &SyntaxError{At: maxText, Found: fmt.Sprintf("%d bytes", len(text)), Want: fmt.Sprintf("want at most %d", maxText)}
	}
	p := &parser{text: text, graph: newGraph()}
	p.tok = next(text, 0)
	root, err := p.wholeText()
	if err != nil {
		return nil, err
	}
	return p.graph.program(root), nil
}

// wholeText reads the expression and requires the end; a bare name of a published
// function stands for its call at x.
func (p *parser) wholeText() (int, error) {
	name := strings.TrimSpace(p.text)
	if i := operation(name); i >= 0 && operations[i].Args == 1 && !operations[i].infix {
		return p.node(i, p.graph.x())
	}
	root, err := p.ternary()
	if err != nil {
		return 0, err
	}
	if p.tok.kind != 0 {
		return 0, p.unexpected("want an operator or the end")
	}
	return root, nil
}

// unexpected makes the error for the current token.
func (p *parser) unexpected(want string) error {
	return &SyntaxError{At: p.tok.at, Found: p.tok.String(), Want: want}
}

// advance moves to the next token.
func (p *parser) advance() { p.tok = next(p.text, p.tok.at+len(p.tok.text)) }

// is reports whether the current token is the operator s.
func (p *parser) is(s string) bool { return p.tok.kind == 'o' && p.tok.text == s }

// expect passes over the operator s.
func (p *parser) expect(s string) error {
	if !p.is(s) {
		return p.unexpected(fmt.Sprintf("want %q", s))
	}
	p.advance()
	return nil
}

// node adds an operation to the graph, within the limit.
func (p *parser) node(op int, args ...int) (int, error) {
	if len(p.graph.nodes) >= maxNodes {
		return 0, &SyntaxError{At: p.tok.at, Found: "too long an expression", Want: fmt.Sprintf("want at most %d operations", maxNodes)}
	}
	return p.graph.apply(op, args...), nil
}

// deeper guards recursion.
func (p *parser) deeper(read func() (int, error)) (int, error) {
	if p.depth == maxDepth {
		return 0, p.unexpected(fmt.Sprintf("want at most %d levels of nesting", maxDepth))
	}
	p.depth++
	defer func() { p.depth-- }()
	return read()
}

// ternary reads cond ? a : b, or less.
func (p *parser) ternary() (int, error) {
	cond, err := p.comparison()
	if err != nil || !p.is("?") {
		return cond, err
	}
	p.advance()
	yes, err := p.deeper(p.ternary)
	if err != nil {
		return 0, err
	}
	if err := p.expect(":"); err != nil {
		return 0, err
	}
	no, err := p.deeper(p.ternary)
	if err != nil {
		return 0, err
	}
	return p.node(operation("?:"), cond, yes, no)
}

// comparison reads a < b and its like, or less; comparisons do not chain.
func (p *parser) comparison() (int, error) {
	return p.binary([]string{"<", "<=", ">", ">=", "==", "!="}, p.sum, false)
}

// sum reads a + b − …, or less.
func (p *parser) sum() (int, error) { return p.binary([]string{"+", "-"}, p.product, true) }

// product reads a * b / …, or less.
func (p *parser) product() (int, error) { return p.binary([]string{"*", "/"}, p.signed, true) }

// binary reads operands joined by left-associative operators of one rank.
func (p *parser) binary(ops []string, operand func() (int, error), chains bool) (int, error) {
	left, err := operand()
	for err == nil {
		op := ""
		for _, o := range ops {
			if p.is(o) {
				op = o
			}
		}
		if op == "" {
			return left, nil
		}
		p.advance()
		var right int
		if right, err = operand(); err != nil {
			return 0, err
		}
		if left, err = p.node(operation(op), left, right); err != nil || !chains {
			return left, err
		}
	}
	return 0, err
}

// signed reads −a, which binds looser than ^.
func (p *parser) signed() (int, error) {
	switch {
	case p.is("-"):
		p.advance()
		a, err := p.deeper(p.signed)
		if err != nil {
			return 0, err
		}
		return p.node(operation("neg"), a)
	case p.is("+"):
		p.advance()
		return p.deeper(p.signed)
	}
	return p.power()
}

// power reads a ^ b, right-associative; the exponent may have a sign.
func (p *parser) power() (int, error) {
	base, err := p.atom()
	if err != nil || !p.is("^") {
		return base, err
	}
	p.advance()
	exponent, err := p.deeper(p.signed)
	if err != nil {
		return 0, err
	}
	return p.node(operation("^"), base, exponent)
}

// atom reads a number, a name, a call or a parenthesis.
func (p *parser) atom() (int, error) {
	t := p.tok
	switch {
	case t.kind == 'n':
		v, err := strconv.ParseFloat(t.text, 64)
		if err != nil {
			return 0, p.unexpected("want a number within the range of double precision")
		}
		p.advance()
		return p.graph.constant(v), nil
	case t.kind == 'a':
		p.advance()
		return p.name(t)
	case p.is("("):
		p.advance()
		inner, err := p.deeper(p.ternary)
		if err != nil {
			return 0, err
		}
		return inner, p.expect(")")
	}
	return 0, p.unexpected("want a number, x, a function or a parenthesis")
}

// name reads what follows a name: nothing for x and constants, arguments for a
// function.
func (p *parser) name(t token) (int, error) {
	switch t.text {
	case "x":
		return p.graph.x(), nil
	case "pi":
		return p.graph.constant(math.Pi), nil
	case "e":
		return p.graph.constant(math.E), nil
	}
	op := operation(t.text)
	if op < 0 || operations[op].infix {
		return 0, unknownName(t)
	}
	if err := p.expect("("); err != nil {
		return 0, err
	}
	var args []int
	for i := range operations[op].Args {
		if i > 0 {
			if err := p.expect(","); err != nil {
				return 0, err
			}
		}
		a, err := p.deeper(p.ternary)
		if err != nil {
			return 0, err
		}
		args = append(args, a)
	}
	if err := p.expect(")"); err != nil {
		return 0, err
	}
	return p.node(op, args...)
}

// unknownName makes the error for a name that means nothing.
func unknownName(t token) error {
	known := []string{"x", "pi", "e"}
	for _, f := range Functions() {
		known = append(known, f.Name)
	}
	return &SyntaxError{At: t.at, Found: t.String(), Want: "known: " + strings.Join(known, ", "), Near: Nearest(t.text, known)}
}
