package scoring

// maxOrder is the largest order of piece (degree + 1) that blocks keep moments for.
const maxOrder = 4

// A block is a run of held-out points with its moments about centre c on the
// scale w: u = (x − c)/w lies in [−1, 1]. y and f enter as deviations from their
// means over the block, so that no digits cancel.
type block struct {
	from, to     int // the points [from, to)
	c, w         float64
	meanY, meanF float64
	yy, ff       float64                 // Σ(y−ȳ)², Σ(f−f̄)²
	u            [2*maxOrder - 1]float64 // Σ u^k
	yu, fu       [maxOrder]float64       // Σ (y−ȳ)u^k, Σ (f−f̄)u^k
}

// frame sets the points [from, to), which must not be empty, and their scale.
func (b *block) frame(x []float64, from, to int) {
	*b = block{from: from, to: to}
	b.c = x[from] + (x[to-1]-x[from])/2
	b.w = (x[to-1] - x[from]) / 2
	if !(b.w > 0) {
		b.w = 1 // one x: u = 0 throughout
	}
}

// set computes the moments of the points [from, to).
func (b *block) set(x, y, f []float64, from, to int) {
	b.frame(x, from, to)
	n := float64(to - from)
	for i := from; i < to; i++ {
		b.meanY += y[i]
		b.meanF += f[i]
	}
	b.meanY /= n
	b.meanF /= n
	scale := 1 / b.w
	for i := from; i < to; i++ {
		u := (x[i] - b.c) * scale
		dy, df := y[i]-b.meanY, f[i]-b.meanF
		b.yy += dy * dy
		b.ff += df * df
		u2 := u * u
		u3 := u2 * u
		b.u[1] += u
		b.u[2] += u2
		b.u[3] += u3
		b.u[4] += u2 * u2
		b.u[5] += u2 * u3
		b.u[6] += u3 * u3
		b.yu[0] += dy
		b.yu[1] += dy * u
		b.yu[2] += dy * u2
		b.yu[3] += dy * u3
		b.fu[0] += df
		b.fu[1] += df * u
		b.fu[2] += df * u2
		b.fu[3] += df * u3
	}
	b.u[0] = n
}

// join computes the moments of neighbouring blocks together.
func (b *block) join(x []float64, parts []block) {
	b.frame(x, parts[0].from, parts[len(parts)-1].to)
	n := float64(b.to - b.from)
	for i := range parts {
		share := float64(parts[i].to-parts[i].from) / n
		b.meanY += share * parts[i].meanY
		b.meanF += share * parts[i].meanF
	}
	for i := range parts {
		b.add(&parts[i])
	}
}

// add adds the moments of a part, moved to b's centre, scale and means.
func (b *block) add(p *block) {
	shift, scale := (p.c-b.c)/b.w, p.w/b.w
	u := p.u
	moveMoments(u[:], shift, scale)
	dy, df := p.meanY-b.meanY, p.meanF-b.meanF
	yu, fu := p.yu, p.fu
	b.yy += p.yy + dy*(2*yu[0]+dy*p.u[0])
	b.ff += p.ff + df*(2*fu[0]+df*p.u[0])
	moveMoments(yu[:], shift, scale)
	moveMoments(fu[:], shift, scale)
	for k, v := range u {
		b.u[k] += v
	}
	for k := range yu {
		b.yu[k] += yu[k] + dy*u[k]
		b.fu[k] += fu[k] + df*u[k]
	}
}

// moveMoments turns Σ a u^k into Σ a (shift + scale·u)^k, by the binomial theorem.
func moveMoments(m []float64, shift, scale float64) {
	s := 1.0
	for k := range m {
		m[k] *= s
		s *= scale
	}
	// Each pass multiplies one factor (shift + v) out of every power above.
	for k := 1; k < len(m); k++ {
		for j := len(m) - 1; j >= k; j-- {
			m[j] += shift * m[j-1]
		}
	}
}

// sum adds up the squared deviations of y and f from the cubic with coefficients g
// in u.
func (b *block) sum(g *[maxOrder]float64) sums {
	m := &b.u
	linear := g[1]*m[1] + g[2]*m[2] + g[3]*m[3]
	square := g[1]*g[1]*m[2] + 2*g[1]*g[2]*m[3] + (2*g[1]*g[3]+g[2]*g[2])*m[4] + 2*g[2]*g[3]*m[5] + g[3]*g[3]*m[6]
	y0, f0 := g[0]-b.meanY, g[0]-b.meanF
	return sums{
		y: b.yy - 2*(y0*b.yu[0]+g[1]*b.yu[1]+g[2]*b.yu[2]+g[3]*b.yu[3]) + y0*(y0*m[0]+2*linear) + square,
		f: b.ff - 2*(f0*b.fu[0]+g[1]*b.fu[1]+g[2]*b.fu[2]+g[3]*b.fu[3]) + f0*(f0*m[0]+2*linear) + square,
		n: b.to - b.from,
	}
}
