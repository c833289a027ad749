package scoring

import (
	"math"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/floats"

	"bendtest/results"
	"bendtest/smoothers"
)

// Where S has no form, tests take work of order n³ per rung, in each replicate anew if
// the design is drawn anew. Then beyond everyReplicate observations they are made in some
// replicates only, so that they cost no more, and beyond mostGeneral in none.
const (
	everyReplicate = 100
	mostGeneral    = 1000
)

// generalTests reports whether the line is tested in a replicate at rungs whose S has no
// form. Tests of neighbouring rungs, which a rule may go by, are made in all replicates up
// to mostGeneral.
func generalTests(n, replicate int, fixed bool) bool {
	if n > mostGeneral {
		return false
	}
	if n <= everyReplicate || fixed {
		return true
	}
	ratio := float64(n) / everyReplicate
	return replicate%int(math.Ceil(ratio*ratio*ratio)) == 0
}

// A rungTests is what the tests on one rung take of the design.
type rungTests struct {
	spread                // for bands and the test of the line
	line       comparison // the straight line within this rung
	neighbours spread     // for tests of neighbouring rungs
	next       comparison // this rung within the next usable one
	at         int        // that one's index
}

// A ladderTests works out the tests on one ladder. It owns its memory.
type ladderTests struct {
	rungs    []rungTests
	n        int
	general  bool // whether the line is tested where S is general
	adjacent bool // whether neighbouring rungs are to be compared
	full     bool // whether S is worked out for that where it has to be
	line     [2][]float64
	matrix   []float64   // n × n
	unit     []float64   // n
	from, to []int       // of each row of the matrix, what has weight
	q        [][]float64 // per rung where it is needed, n × n, the upper triangle
	fit      smoothers.Fit
}

// lay works out the tests on the rungs of a ladder on x; general says whether those of
// rungs whose S has no form, too.
func (t *ladderTests) lay(rungs []smoothers.Rung, x []float64, general, adjacent bool) {
	t.rungs = regrow(t.rungs, len(rungs))
	t.n, t.general, t.adjacent = len(x), general, adjacent
	t.full = t.n <= mostGeneral
	straight := t.setLine(x)
	t.q = regrow(t.q, len(rungs))
	for j := range rungs {
		t.rungs[j] = rungTests{at: -1}
		if rungs[j].Status == smoothers.OK {
			t.rung(j, &rungs[j], straight)
		}
	}
	if !adjacent {
		return
	}
	before := -1
	for j := range rungs {
		if rungs[j].Status != smoothers.OK {
			continue
		}
		if before >= 0 {
			t.rungs[before].at = j
			t.rungs[before].next = t.neighbours(rungs, before, j)
		}
		before = j
	}
}

// setLine makes an orthonormal basis of straight lines; ok is false where there is none or
// nothing beyond it.
func (t *ladderTests) setLine(x []float64) (ok bool) {
	n := float64(len(x))
	for k := range t.line {
		t.line[k] = regrow(t.line[k], len(x))
	}
	mean := 0.0
	for _, v := range x {
		mean += (v - x[0]) / n
	}
	square := 0.0
	for i, v := range x {
		t.line[0][i] = 1 / math.Sqrt(n)
		t.line[1][i] = v - x[0] - mean
		square += t.line[1][i] * t.line[1][i]
	}
	if !(square > 0) || len(x) < 4 {
		return false
	}
	for i := range x {
		t.line[1][i] /= math.Sqrt(square)
	}
	return true
}

// rung works out one rung's spread and its comparison with the straight line.
func (t *ladderTests) rung(j int, r *smoothers.Rung, straight bool) {
	w := &t.rungs[j]
	w.delta1 = r.DFResidual
	w.delta2, w.known = r.ResidualQuartic()
	if r.Form == smoothers.General && t.general {
		w.delta2, w.known = t.square(r), true
	}
	w.neighbours = w.spread
	if t.adjacent && t.full && (r.Form == smoothers.General || r.Form == smoothers.Projection) {
		t.form(j, r)
		if r.Form == smoothers.General {
			w.neighbours = spread{w.delta1, t.inner(j, j), true}
		}
	}
	if !straight || !w.known {
		return
	}
	cross := w.delta1 // tr Q_N Q = tr Q − Σ|(I−S)h|² over the basis h of lines
	if !r.Lines {
		for _, h := range t.line {
			r.Fit(h, &t.fit)
			for i, v := range t.fit.Fitted {
				cross -= (h[i] - v) * (h[i] - v)
			}
		}
	}
	free := float64(t.n - 2)
	w.line = compare(spread{free, free, true}, w.spread, cross, float64(t.n))
}

// residual writes I − S of a rung.
func (t *ladderTests) residual(r *smoothers.Rung) {
	n := t.n
	t.matrix, t.unit = regrow(t.matrix, n*n), regrow(t.unit, n)
	r.Matrix(t.matrix, t.unit, &t.fit)
	for i, v := range t.matrix {
		t.matrix[i] = -v
	}
	for i := range n {
		t.matrix[i*n+i] = r.Remainder[i]
	}
}

// noWeight is what a gaussian kernel's far weights may be without counting: n of them change
// no digit of a row.
const noWeight = 1e-19

// square is tr Q², of R = I − S the squared norm of RRᵀ, by rows, of which only what has
// weight is looked at.
func (t *ladderTests) square(r *smoothers.Rung) float64 {
	t.residual(r)
	n := t.n
	t.from, t.to = regrow(t.from, n), regrow(t.to, n)
	for i := range n {
		row := t.matrix[i*n : (i+1)*n]
		from, to := 0, n
		for from < i && math.Abs(row[from]) < noWeight {
			from++
		}
		for to > i+1 && math.Abs(row[to-1]) < noWeight {
			to--
		}
		t.from[i], t.to[i] = from, to
	}
	sum := 0.0
	for i := range n {
		half := 0.0
		for j := range i + 1 {
			from, to := max(t.from[i], t.from[j]), min(t.to[i], t.to[j])
			if from >= to {
				continue
			}
			d := floats.Dot(t.matrix[i*n+from:i*n+to], t.matrix[j*n+from:j*n+to])
			half += d * d
			if i == j {
				half -= d * d / 2
			}
		}
		sum += 2 * half
	}
	return sum
}

// form works out Q of a rung.
func (t *ladderTests) form(j int, r *smoothers.Rung) {
	t.residual(r)
	n := t.n
	t.q[j] = regrow(t.q[j], n*n)
	rest := blas64.General{Rows: n, Cols: n, Stride: n, Data: t.matrix}
	blas64.Syrk(blas.Trans, 1, rest, 0, blas64.Symmetric{Uplo: blas.Upper, N: n, Stride: n, Data: t.q[j]})
}

// inner is tr Q_i Q_j.
func (t *ladderTests) inner(i, j int) float64 {
	sum := 0.0
	for k := range t.n {
		from, to := k*t.n+k, (k+1)*t.n
		a, b := t.q[i][from:to], t.q[j][from:to]
		row := -a[0] * b[0] / 2
		for l, v := range a {
			row += v * b[l]
		}
		sum += 2 * row
	}
	return sum
}

// neighbours compares usable rungs i and j, j the next after i.
func (t *ladderTests) neighbours(rungs []smoothers.Rung, i, j int) comparison {
	a, b := &rungs[i], &rungs[j]
	var cross float64
	switch {
	case a.Form == smoothers.Ridge && b.Form == smoothers.Ridge:
		cross = ridgeCross(a, b)
	case a.Form == smoothers.Nested && b.Form == smoothers.Nested:
		cross = t.rungs[j].delta1
	case t.full && a.Form != smoothers.Ridge && b.Form != smoothers.Ridge:
		cross = t.inner(i, j)
	default:
		return comparison{}
	}
	return compare(t.rungs[i].neighbours, t.rungs[j].neighbours, cross, float64(t.n))
}

// judge fills in the p-values of neighbouring rungs.
func (t *ladderTests) judge(p *Path) {
	if !t.adjacent {
		return
	}
	for j := range t.rungs {
		w := &t.rungs[j]
		if w.at < 0 || !w.next.known || p.Steps[j].Status != smoothers.OK || p.Steps[w.at].Status != smoothers.OK {
			continue
		}
		value := w.next.pValue(p.Steps[j].RSS, p.Steps[w.at].RSS, t.rungs[w.at].neighbours)
		p.Steps[j].Next = PValue{value, true}
	}
}

// lineP is the p-value of the straight line within rung j.
func (t *ladderTests) lineP(j int, p *Path) results.Number {
	w := &t.rungs[j]
	if p.Steps[j].Status != smoothers.OK || !w.line.known {
		return results.Number{}
	}
	return results.Num(w.line.pValue(p.LineRSS, p.Steps[j].RSS, w.spread))
}

// overLines reports whether rung j is a projection on a space that holds all straight lines.
func (t *ladderTests) overLines(j int, rungs []smoothers.Rung) bool {
	form := rungs[j].Form
	return rungs[j].Lines && (form == smoothers.Projection || form == smoothers.Nested)
}
