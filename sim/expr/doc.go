// Package expr compiles expressions in x, such as "3*exp(-2*x) + sin(2*pi*x)", to
// programs over vectors.
//
// In comes text; out comes an Expression, or one SyntaxError with the place of the
// fault. Equal subexpressions are worked once, constants are folded, and Eval walks
// the points in short blocks that stay in the cache, so that an expression costs
// little more than its calls of exp and sin. A value depends on its own x alone,
// never on where in the vector it stands.
package expr
