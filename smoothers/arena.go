package smoothers

// An Arena is a stretch of memory from which ladders take their slices. Reset
// gives all of it back at once, so a worker that lays out ladder after ladder
// allocates only until the arena has grown to the largest set it has seen. The
// zero value is ready. An Arena belongs to one goroutine while ladders are laid.
type Arena struct {
	// Lasting says that rungs laid out here will fit many y each, as on a fixed design.
	// Families then work out more in advance: it moves costs, and no result by more
	// than rounding.
	Lasting bool

	slab []float64
	used int
	need int // total asked for since the last Reset
}

// Reset makes all memory of the arena available again. Ladders and rungs laid
// out on it must no longer be used.
func (a *Arena) Reset() {
	if a.need > len(a.slab) {
		a.slab = make([]float64, a.need)
	}
	a.used, a.need = 0, 0
}

// floats returns n zeros from the arena, or from the heap if a is nil or full.
func (a *Arena) floats(n int) []float64 {
	if a == nil {
		return make([]float64, n)
	}
	a.need += n
	if a.used+n > len(a.slab) {
		return make([]float64, n)
	}
	s := a.slab[a.used : a.used+n : a.used+n]
	a.used += n
	clear(s)
	return s
}
