// Package expr compiles expressions in x, such as "3*exp(-2*x) + sin(2*pi*x)", to
// programs over vectors.
//
// In comes text; out comes an Expression, or one SyntaxError with the place of the
// fault. The text becomes a tree, the tree a graph in which equal parts are worked
// once and constants in advance, the graph a list of instructions on short vectors
// that stay in the cache, so that a point costs little more than the arithmetic of
// its exp and sin. A value depends on its own x alone, never on where in the vector
// it stands.
package expr
