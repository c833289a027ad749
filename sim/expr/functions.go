package expr

import (
	"math"
	"math/bits"
)

// A Function is one operation of the language. Its vector form works n-vectors of
// one length; unused arguments are nil.
type Function struct {
	Name  string
	Args  int
	Doc   string
	infix bool // written between or before its arguments, not called
	apply func(dst, a, b, c []float64)
}

// Functions returns what an expression may call, in the order in which it is
// listed to people. Published test functions are on [0, 1].
func Functions() []Function {
	var called []Function
	for _, f := range operations {
		if !f.infix {
			called = append(called, f)
		}
	}
	return called
}

// operations is the table of all operations; an instruction names one by its index.
var operations = [...]Function{
	{"sin", 1, "sine of an angle in radians", false, each(math.Sin)},
	{"cos", 1, "cosine of an angle in radians", false, each(math.Cos)},
	{"tan", 1, "tangent of an angle in radians", false, each(math.Tan)},
	{"exp", 1, "exponential", false, each(math.Exp)},
	{"log", 1, "natural logarithm", false, each(math.Log)},
	{"sqrt", 1, "square root", false, each(math.Sqrt)},
	{"abs", 1, "absolute value", false, each(math.Abs)},
	{"sign", 1, "-1, 0 or 1", false, each(sign)},
	{"min", 2, "smaller of two", false, pairs(func(a, b float64) float64 { return min(a, b) })},
	{"max", 2, "larger of two", false, pairs(func(a, b float64) float64 { return max(a, b) })},
	{"pow", 2, "first to the power of the second", false, pairs(power)},
	{"tanh", 1, "hyperbolic tangent", false, each(math.Tanh)},
	{"phi", 1, "standard normal density", false, each(density)},
	{"Phi", 1, "standard normal distribution function", false, each(distribution)},
	{"blocks", 1, "eleven jumps (Donoho & Johnstone 1994)", false, each(blocks)},
	{"bumps", 1, "eleven sharp peaks (Donoho & Johnstone 1994)", false, each(bumps)},
	{"heavisine", 1, "a sine with two jumps (Donoho & Johnstone 1994)", false, each(heavisine)},
	{"doppler", 1, "a wave of falling frequency (Donoho & Johnstone 1994)", false, each(doppler)},
	{"+", 2, "", true, add},
	{"-", 2, "", true, subtract},
	{"*", 2, "", true, multiply},
	{"/", 2, "", true, divide},
	{"^", 2, "", true, pairs(power)},
	{"neg", 1, "", true, negate},
	{"<", 2, "", true, pairs(func(a, b float64) float64 { return truth(a < b) })},
	{"<=", 2, "", true, pairs(func(a, b float64) float64 { return truth(a <= b) })},
	{">", 2, "", true, pairs(func(a, b float64) float64 { return truth(a > b) })},
	{">=", 2, "", true, pairs(func(a, b float64) float64 { return truth(a >= b) })},
	{"==", 2, "", true, pairs(func(a, b float64) float64 { return truth(a == b) })},
	{"!=", 2, "", true, pairs(func(a, b float64) float64 { return truth(a != b) })},
	{"?:", 3, "", true, choose},
}

// operation returns the index of the operation with a name, or −1.
func operation(name string) int {
	for i := range operations {
		if operations[i].Name == name {
			return i
		}
	}
	return -1
}

func each(f func(float64) float64) func(dst, a, b, c []float64) {
	return func(dst, a, _, _ []float64) {
		for i, v := range a {
			dst[i] = f(v)
		}
	}
}

func pairs(f func(a, b float64) float64) func(dst, a, b, c []float64) {
	return func(dst, a, b, _ []float64) {
		for i, v := range a {
			dst[i] = f(v, b[i])
		}
	}
}

func add(dst, a, b, _ []float64) {
	for i, v := range a {
		dst[i] = v + b[i]
	}
}

func subtract(dst, a, b, _ []float64) {
	for i, v := range a {
		dst[i] = v - b[i]
	}
}

func multiply(dst, a, b, _ []float64) {
	for i, v := range a {
		dst[i] = v * b[i]
	}
}

func divide(dst, a, b, _ []float64) {
	for i, v := range a {
		dst[i] = v / b[i]
	}
}

func negate(dst, a, _, _ []float64) {
	for i, v := range a {
		dst[i] = -v
	}
}

// choose takes b where a is not 0, else c.
func choose(dst, a, b, c []float64) {
	for i, v := range a {
		if v != 0 {
			dst[i] = b[i]
		} else {
			dst[i] = c[i]
		}
	}
}

func truth(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

func sign(v float64) float64 {
	switch {
	case v > 0:
		return 1
	case v < 0:
		return -1
	}
	return 0
}

// power is a^b; small whole powers are multiplied out, which is ten times faster
// and no less exact.
func power(a, b float64) float64 {
	n := int(b)
	if float64(n) != b || n < 1 || n > 16 {
		return math.Pow(a, b)
	}
	product := a
	for bit := bits.Len(uint(n)) - 2; bit >= 0; bit-- {
		product *= product
		if n>>bit&1 == 1 {
			product *= a
		}
	}
	return product
}

func density(v float64) float64 { return math.Exp(-v*v/2) / math.Sqrt(2*math.Pi) }

func distribution(v float64) float64 { return math.Erfc(-v/math.Sqrt2) / 2 }
