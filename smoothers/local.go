package smoothers

import (
	"fmt"
	"math"
)

// Kernel is the Nadaraya–Watson smoother: at t the mean of y under the weights
// K((x_i − t)/h), h the bandwidth in units of x (Nadaraya 1964, Theory Probab.
// Appl. 9:141; Watson 1964, Sankhyā A 26:359).
type Kernel struct {
	Kernel string `option:"kernel" doc:"kernel K(u); for gaussian the bandwidth is its standard deviation" oneof:"gaussian epanechnikov biweight tricube"`
	Beyond string `option:"beyond" doc:"beyond the data: extend, or hold the value at the end" oneof:"extend hold"`
}

// Local is local polynomial regression: at t the value of the polynomial fitted by
// weighted least squares with weights K((x_i − t)/h(t)). The width h is a fixed
// bandwidth in units of x, or the distance from t to its q-th nearest observation,
// q = fraction·n, linear between whole q (Cleveland 1979, JASA 74:829; Fan &
// Gijbels 1996, Local Polynomial Modelling, §2.3 and §3.1).
type Local struct {
	Degree int    `option:"degree" doc:"degree of the local polynomial" min:"1" max:"2"`
	Width  string `option:"width" doc:"width of the window: a fraction of nearest neighbours, or a fixed bandwidth" oneof:"neighbours bandwidth"`
	Kernel string `option:"kernel" doc:"kernel K(u); for gaussian the width is its standard deviation" oneof:"gaussian epanechnikov biweight tricube"`
	Beyond string `option:"beyond" doc:"beyond the data: extend, or hold the value at the end" oneof:"extend hold"`
}

// NewKernel returns the defaults of Kernel.
func NewKernel() *Kernel { return &Kernel{Kernel: "gaussian", Beyond: "extend"} }

// NewLocal returns the defaults of Local.
func NewLocal() *Local {
	return &Local{Degree: 1, Width: "neighbours", Kernel: "tricube", Beyond: "extend"}
}

// Check implements Smoother.
func (k *Kernel) Check() error {
	if _, err := shapeOf(k.Kernel); err != nil {
		return err
	}
	return oneOf("beyond", k.Beyond, "extend", "hold")
}

// Check implements Smoother.
func (s *Local) Check() error {
	if s.Degree != 1 && s.Degree != 2 {
		return &OptionError{Option: "degree", Found: fmt.Sprint(s.Degree), Want: "1 or 2"}
	}
	if err := oneOf("width", s.Width, "neighbours", "bandwidth"); err != nil {
		return err
	}
	if _, err := shapeOf(s.Kernel); err != nil {
		return err
	}
	return oneOf("beyond", s.Beyond, "extend", "hold")
}

// oneOf returns an *OptionError unless found is one of two words.
func oneOf(option, found, a, b string) error {
	if found == a || found == b {
		return nil
	}
	return &OptionError{Option: option, Found: fmt.Sprintf("%q", found), Want: fmt.Sprintf("%q or %q", a, b)}
}

// On implements Smoother. It panics on options that Check refuses.
func (k *Kernel) On(x []float64, mem *Arena) Ladder {
	if err := k.Check(); err != nil {
		panic("smoothers: " + err.Error())
	}
	kernel, _ := shapeOf(k.Kernel)
	return layLocal(x, mem, localLadder{shape: kernel, hold: k.Beyond == "hold"})
}

// On implements Smoother. It panics on options that Check refuses.
func (s *Local) On(x []float64, mem *Arena) Ladder {
	if err := s.Check(); err != nil {
		panic("smoothers: " + err.Error())
	}
	kernel, _ := shapeOf(s.Kernel)
	return layLocal(x, mem, localLadder{
		degree: s.Degree, shape: kernel,
		neighbours: s.Width == "neighbours", hold: s.Beyond == "hold",
	})
}

// A localLadder is a local polynomial smoother on a design; degree 0 is Kernel.
type localLadder struct {
	tied
	degree     int
	shape      shape
	neighbours bool
	hold       bool

	mem   *Arena
	fit   localFit // works for the ladder while it is laid
	floor float64  // the width must exceed this: a bandwidth, or a number of neighbours
	grid  traceGrid
	store []float64  // where a rung's rows grow before they are kept
	maker panelMaker // lays out panels to be kept
}

// layLocal completes l, which holds the options, on a design.
func layLocal(x []float64, mem *Arena, l localLadder) *localLadder {
	l.tied = gather(x, mem)
	l.mem = mem
	l.floor = l.leastWidth()
	laid := &l
	laid.fit = laid.fitOn(mem.floats(laid.scratch()))
	return laid
}

// extent returns the range of the data.
func (l *localLadder) extent() float64 { return l.z[len(l.z)-1] - l.z[0] }

// leastWidth returns the largest width at which some point of the data range sees
// fewer than degree + 1 distinct x: all rungs need more than that.
//
// With a bandwidth, the open window of half-width h about t is emptiest midway
// between z_i and z_(i+degree+1), or at the ends. With neighbours it is emptiest
// midway too, where both of those are excluded: then q must exceed the number of
// observations from the one to the other. The gaussian kernel sees everything, and
// with neighbours needs only that no width is zero.
func (l *localLadder) leastWidth() float64 {
	z, p := l.z, l.degree
	m := len(z)
	if !l.shape.compact() {
		var most float64
		if l.neighbours {
			for _, c := range l.count {
				most = max(most, c)
			}
		}
		return most
	}
	if m <= p || l.neighbours && m <= p+1 {
		return math.Inf(1)
	}
	least := max(z[p]-z[0], z[m-1]-z[m-1-p])
	if l.neighbours {
		least = 0
	}
	for i := range m - p - 1 {
		if !l.neighbours {
			least = max(least, (z[i+p+1]-z[i])/2)
			continue
		}
		var seen float64
		for _, c := range l.count[i : i+p+2] {
			seen += c
		}
		least = max(least, seen)
	}
	return least
}

// The notes of rungs that do not exist.
const (
	noteWide   = "the fraction of neighbours is above 1"
	noteNarrow = "somewhere in the data range the window holds too few distinct x"
	noteFew    = "fewer distinct x than a local fit needs"
	noteEqual  = "all x are equal"
	noteTooFew = "df below what the widest window gives"
	noteStep   = "tr S steps over this df between adjacent widths"
	noteTooBig = "df above what any window gives"
)

// admit says whether a rung exists at a tuning.
func (l *localLadder) admit(tuning float64) (Status, string) {
	width := tuning
	if l.neighbours {
		width *= float64(len(l.x))
	}
	switch {
	case math.IsNaN(tuning) || math.IsInf(tuning, 0):
		return NotFinite, ""
	case len(l.z) <= l.degree && !l.shape.compact():
		return RankDeficient, noteFew
	case len(l.z) <= l.degree:
		return EmptyWindow, noteFew
	case l.neighbours && tuning > 1:
		return DFUnattainable, noteWide
	case !(width > l.floor) || l.extent()/width > 1e100:
		return EmptyWindow, noteNarrow
	}
	return OK, ""
}
