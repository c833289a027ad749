package expr

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Limits on one expression, so that a study file from somebody else cannot exhaust
// the machine. The canonical text of what is within them is within them too: it has
// no more parts, and nests no deeper.
const (
	maxText  = 32 << 10 // bytes
	maxNodes = 1000     // numbers, names and operations
	maxDepth = 100      // nested calls, parentheses, powers and choices
)

// A parser reads one expression into a tree, operators by how tightly they bind
// (Pratt 1973, Proc. 1st ACM Symposium on Principles of Programming Languages, 41).
type parser struct {
	text  string
	tok   token
	depth int
	tree  tree
}

// Compile reads an expression. The error is a *SyntaxError.
func Compile(text string) (*Expression, error) {
	if len(text) > maxText {
		return nil, &SyntaxError{At: maxText, Found: fmt.Sprintf("a text of %d bytes", len(text)), Want: fmt.Sprintf("want at most %d", maxText)}
	}
	p := &parser{text: text}
	p.tok = next(text, 0)
	if err := p.wholeText(); err != nil {
		return nil, err
	}
	return p.tree.lower().program(p.tree.text(len(p.tree)-1, anything)), nil
}

// wholeText reads the expression and requires the end. The bare name of a published
// function stands for its call at x.
func (p *parser) wholeText() error {
	if op := operation(strings.TrimSpace(p.text)); op >= 0 && operations[op].form == published {
		x := p.tree.add(node{op: kindX})
		p.tree.add(node{op: op, args: [3]int{x}})
		return nil
	}
	if _, err := p.expression(anything); err != nil {
		return err
	}
	if p.tok.kind != 0 {
		return p.unexpected("want an operator or the end")
	}
	return nil
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

// node adds a node to the tree, within the limit.
func (p *parser) node(n node) (int, error) {
	if len(p.tree) == maxNodes {
		return 0, &SyntaxError{At: p.tok.at, Found: "too long an expression", Want: fmt.Sprintf("want at most %d numbers, names and operations", maxNodes)}
	}
	return p.tree.add(n), nil
}

// expression reads as far as operators bind at least as tightly as least.
func (p *parser) expression(least level) (int, error) {
	left, err := p.operand()
	for tightest := single; err == nil; {
		op := p.operator()
		if op < 0 {
			return left, nil
		}
		l := operations[op].level
		if l < least || l > tightest {
			return left, nil
		}
		p.advance()
		n := node{op: op, args: [3]int{left}}
		switch l {
		case anything:
			err = p.choices(&n)
		case raising:
			n.args[1], err = p.nested(raising)
		default:
			n.args[1], err = p.expression(l + 1)
		}
		if err != nil {
			return 0, err
		}
		if l == comparing {
			tightest = anything // 1 < x < 2 would not mean what it seems to
		}
		left, err = p.node(n)
	}
	return 0, err
}

// operator is the operation that the current token writes after its first argument,
// or −1.
func (p *parser) operator() int {
	if p.tok.kind != 'o' {
		return -1
	}
	return slices.IndexFunc(operations[:], func(f Function) bool {
		return f.form == written && f.Args > 1 && f.Name == p.tok.text
	})
}

// nested reads an expression one level further in, within the limit.
func (p *parser) nested(least level) (int, error) {
	if p.depth == maxDepth {
		return 0, p.unexpected(fmt.Sprintf("want at most %d levels of nesting", maxDepth))
	}
	p.depth++
	i, err := p.expression(least)
	p.depth--
	return i, err
}

// choices reads a : b after a question mark.
func (p *parser) choices(n *node) (err error) {
	if n.args[1], err = p.nested(anything); err != nil {
		return err
	}
	if err = p.expect(":"); err != nil {
		return err
	}
	n.args[2], err = p.nested(anything)
	return err
}

// operand reads signs and what they stand before. A sign binds less tightly than ^.
func (p *parser) operand() (int, error) {
	if !p.is("-") && !p.is("+") {
		return p.atom()
	}
	minus := 0
	for ; p.is("-") || p.is("+"); p.advance() {
		if p.is("-") {
			minus++
		}
	}
	i, err := p.expression(raising)
	for ; err == nil && minus > 0; minus-- {
		i, err = p.node(node{op: negation, args: [3]int{i}})
	}
	return i, err
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
		return p.node(node{op: kindConstant, bits: math.Float64bits(v)})
	case t.kind == 'a':
		p.advance()
		return p.named(t)
	case p.is("("):
		p.advance()
		inner, err := p.nested(anything)
		if err != nil {
			return 0, err
		}
		return inner, p.expect(")")
	}
	return 0, p.unexpected("want a number, x, a function or a parenthesis")
}

// named reads what follows a name: nothing for x and constants, arguments for a
// function.
func (p *parser) named(t token) (int, error) {
	if t.text == "x" {
		return p.node(node{op: kindX})
	}
	for _, c := range constants {
		if t.text == c.name {
			return p.node(node{op: kindConstant, bits: math.Float64bits(c.value), name: c.name})
		}
	}
	op := operation(t.text)
	if op < 0 || operations[op].form == written {
		return 0, unknownName(t)
	}
	n := node{op: op}
	separator := "("
	for k := range operations[op].Args {
		if err := p.expect(separator); err != nil {
			return 0, err
		}
		separator = ","
		var err error
		if n.args[k], err = p.nested(anything); err != nil {
			return 0, err
		}
	}
	if err := p.expect(")"); err != nil {
		return 0, err
	}
	return p.node(n)
}
