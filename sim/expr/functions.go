package expr

import "math"

// A form is how a function stands in a text.
type form int

const (
	called    form = iota // name(arguments)
	published             // called, or its bare name as the whole text
	written               // an operator between or before its arguments
)

// A Function is one operation of the language.
type Function struct {
	Name string
	Args int
	Doc  string

	form  form
	level level // of an operator
	// apply works vectors of one length; those of arguments beyond Args are not read.
	// dst may be one of the arguments.
	apply func(dst, a, b, c []float64)
}

// Functions returns what an expression may call, in the order in which it is
// listed to people. Published test functions are on [0, 1].
func Functions() []Function {
	var list []Function
	for _, f := range operations {
		if f.form != written {
			list = append(list, f)
		}
	}
	return list
}

// operations is the table of all operations; an instruction names one by its index.
var operations = [...]Function{
	{"sin", 1, "sine of an angle in radians", called, single, sine},
	{"cos", 1, "cosine of an angle in radians", called, single, cosine},
	{"tan", 1, "tangent of an angle in radians", called, single, each(math.Tan)},
	{"exp", 1, "exponential", called, single, exponential},
	{"log", 1, "natural logarithm", called, single, each(math.Log)},
	{"sqrt", 1, "square root", called, single, squareRoot},
	{"abs", 1, "absolute value", called, single, absolute},
	{"sign", 1, "-1, 0 or 1", called, single, each(sign)},
	{"min", 2, "smaller of two", called, single, pairs(func(a, b float64) float64 { return min(a, b) })},
	{"max", 2, "larger of two", called, single, pairs(func(a, b float64) float64 { return max(a, b) })},
	{"pow", 2, "first to the power of the second", called, single, power},
	{"tanh", 1, "hyperbolic tangent", called, single, each(math.Tanh)},
	{"phi", 1, "standard normal density", called, single, density},
	{"Phi", 1, "standard normal distribution function", called, single, each(distribution)},
	{"blocks", 1, "eleven jumps (Donoho & Johnstone 1994)", published, single, each(blocks)},
	{"bumps", 1, "eleven sharp peaks (Donoho & Johnstone 1994)", published, single, each(bumps)},
	{"heavisine", 1, "a sine with two jumps (Donoho & Johnstone 1994)", published, single, heavisine},
	{"doppler", 1, "a wave of falling frequency (Donoho & Johnstone 1994)", published, single, doppler},
	{"+", 2, "", written, adding, add},
	{"-", 2, "", written, adding, subtract},
	{"*", 2, "", written, multiplying, multiply},
	{"/", 2, "", written, multiplying, divide},
	{"^", 2, "", written, raising, power},
	{"<", 2, "", written, comparing, pairs(func(a, b float64) float64 { return number(a < b) })},
	{"<=", 2, "", written, comparing, pairs(func(a, b float64) float64 { return number(a <= b) })},
	{">", 2, "", written, comparing, pairs(func(a, b float64) float64 { return number(a > b) })},
	{">=", 2, "", written, comparing, pairs(func(a, b float64) float64 { return number(a >= b) })},
	{"==", 2, "", written, comparing, pairs(func(a, b float64) float64 { return number(a == b) })},
	{"!=", 2, "", written, comparing, pairs(func(a, b float64) float64 { return number(a != b) })},
	{"?", 3, "", written, anything, choose},
	{"-", 1, "", written, signing, negate}, // last, see negation
}

// negation is the index of the sign, which shares its name with the difference.
const negation = len(operations) - 1

// operation returns the index of the first operation with a name, or −1.
func operation(name string) int {
	for i := range operations {
		if operations[i].Name == name {
			return i
		}
	}
	return -1
}
