package smoothers

// A Form says what is known of a rung's S beyond its being linear.
type Form uint8

// The forms of S. Where it has one, what tests need of S follows from a few traces;
// a General S must be worked out in full.
const (
	General    Form = iota
	Projection      // S is an orthogonal projection
	Nested          // likewise, and the spaces of a ladder's rungs contain one another
	Ridge           // S = (I + λK)⁻¹ with λ = Tuning, 0 and +∞ included, and one K for the whole ladder, which may hold some fits at 0
)

// A quartic knows tr Q² of a ridge rung.
type quartic interface {
	// residualQuartic returns tr (I−S)⁴.
	residualQuartic(r *Rung) float64
}

// ResidualQuartic returns tr Q² for Q = (I−S)ᵀ(I−S), of which DFResidual is the trace,
// where the form of S gives it in O(n); known is false for a General S.
func (r *Rung) ResidualQuartic() (trQ2 float64, known bool) {
	switch r.Form {
	case Projection, Nested:
		return r.DFResidual, r.Status == OK
	case Ridge:
		if q, ok := r.solver.(quartic); ok {
			return q.residualQuartic(r), true
		}
	}
	return 0, false
}

// A rower knows S without fitting.
type rower interface {
	// matrix writes S (n × n, by rows) and reports whether it could.
	matrix(dst []float64) bool
}

// Matrix writes S, n × n by rows, into dst: as the family keeps it or by fitting n unit
// readings, for which f and y (length n) serve as memory.
func (r *Rung) Matrix(dst, y []float64, f *Fit) {
	n := len(r.Leverage)
	if len(dst) != n*n || len(y) != n {
		panic("smoothers: the matrix and the design differ in size")
	}
	if k, ok := r.solver.(rower); ok && k.matrix(dst) {
		return
	}
	clear(y)
	for j := range n {
		y[j] = 1
		r.Fit(y, f)
		y[j] = 0
		for i, v := range f.Fitted {
			dst[i*n+j] = v
		}
	}
}
