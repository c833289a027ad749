package smoothers

// A naturalEnds takes the two conditions f″ = 0 at the boundary knots out of a cubic
// B-spline basis. With e₁ and e₂ the distances from a boundary knot to the next and the
// next but one, f″ there is a multiple of (c₂ − c₁)/e₂ − (c₁ − c₀)/e₁, so
//
//	c₁ = outer·c₀ + inner·c₂,  outer = e₂/(e₁ + e₂),  inner = e₁/(e₁ + e₂).
//
// Function 1 is shared out between its neighbours in these parts, and likewise at the
// upper end. What is left is non-negative, adds up to 1 and still meets each
// interval with at most four neighbouring functions. It needs an interior knot.
type naturalEnds struct {
	columns int // of the basis that is left
	lower   endShare
	upper   endShare
}

type endShare struct{ outer, inner float64 }

// newNaturalEnds reads the shares off the knots of a cubic basis.
func newNaturalEnds(b *bspline) naturalEnds {
	t, p := b.knots, b.size()
	share := func(e1, e2 float64) endShare { return endShare{e2 / (e1 + e2), e1 / (e1 + e2)} }
	return naturalEnds{
		columns: p - 2,
		lower:   share(t[4]-t[3], t[5]-t[3]),
		upper:   share(t[p]-t[p-1], t[p]-t[p-2]),
	}
}

// fold turns the four functions v of interval k into a row of the basis that is left. It
// returns the row's first column.
func (e *naturalEnds) fold(row, v []float64, k int) int {
	first := max(0, min(k-4, e.columns-len(row)))
	last := e.columns + 1 // of the functions
	clear(row)
	for i, u := range v {
		switch f := k - 3 + i; f {
		case 0:
			row[0-first] += u
		case 1:
			row[0-first] += u * e.lower.outer
			row[1-first] += u * e.lower.inner
		case last - 1:
			row[e.columns-1-first] += u * e.upper.outer
			row[e.columns-2-first] += u * e.upper.inner
		case last:
			row[e.columns-1-first] += u
		default:
			row[f-1-first] += u
		}
	}
	return first
}

// unfold turns the coefficients in c[:columns] into those of the B-splines, which fill c.
func (e *naturalEnds) unfold(c []float64) {
	p := e.columns
	c[p+1] = c[p-1]
	c[p] = e.upper.outer*c[p-1] + e.upper.inner*c[p-2]
	copy(c[2:p], c[1:p-1])
	c[1] = e.lower.outer*c[0] + e.lower.inner*c[2]
}
