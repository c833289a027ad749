package smoothers

import "math"

// A panelBasis interpolates on [−1, 1] from values at the Chebyshev points of the
// first kind. The ends are not among them: the leading error term is T_order, which
// has its full size at both ends, so comparing there with the function itself
// measures the error of the whole panel.
type panelBasis struct {
	order int
	node  []float64 // ascending
	left  []float64 // weights of the values in the interpolant at −1
	right []float64 // the same at 1
	cheb  []float64 // order × order: coefficient of T_k from value j at [k·order+j]
	power []float64 // order × order: coefficient of u^i in T_k at [k·order+i], an integer
}

// newPanelBasis returns the basis with that many points.
func newPanelBasis(order int) *panelBasis {
	b := &panelBasis{
		order: order,
		node:  make([]float64, order),
		left:  make([]float64, order),
		right: make([]float64, order),
		cheb:  make([]float64, order*order),
		power: make([]float64, order*order),
	}
	for j := range order {
		angle := math.Pi * (float64(order-1-j) + 0.5) / float64(order)
		b.node[j] = math.Cos(angle)
		for k := range order {
			c := 2 * math.Cos(float64(k)*angle) / float64(order)
			if k == 0 {
				c /= 2
			}
			b.cheb[k*order+j] = c
			b.right[j] += c
			if k%2 == 1 {
				c = -c
			}
			b.left[j] += c
		}
	}
	for k := range order { // T_k = 2u T_{k−1} − T_{k−2}
		if k < 2 {
			b.power[k*order+k] = 1
			continue
		}
		for i := range k + 1 {
			b.power[k*order+i] = -b.power[(k-2)*order+i]
			if i > 0 {
				b.power[k*order+i] += 2 * b.power[(k-1)*order+i-1]
			}
		}
	}
	return b
}

// coefficients writes the coefficients of powers of u in the interpolant of v into
// dst. It goes by way of Chebyshev coefficients: those fall off, so that the large
// integers of their powers multiply next to nothing, and rounding stays at the level
// of v's variation. The middle value is taken out first, for a large common level.
func (b *panelBasis) coefficients(dst, v []float64) {
	n := b.order
	mid := v[n/2]
	dst = dst[:n]
	clear(dst)
	for k := range n {
		row := b.cheb[k*n : (k+1)*n]
		var c float64
		for j, v := range v[:n] {
			c += row[j] * (v - mid)
		}
		power := b.power[k*n : k*n+k+1]
		for i := k & 1; i <= k; i += 2 {
			dst[i] += power[i] * c
		}
	}
	dst[0] += mid
}
