package scoring

import (
	"math"

	"bendtest/results"
	"bendtest/sim"
	"bendtest/smoothers"
)

// A CellReport turns the moments of one cell into rows.
type CellReport struct {
	Key     string // of the cell in the tables
	Cell    *sim.Cell
	Contest *Contest
	Moments []Moment // of all replicates
}

// each calls f for every rung.
func (c *CellReport) each(f func(e *Entrant, df float64, figures, curve []Moment)) {
	l := newLayout(c.Contest)
	for i := range c.Contest.Entrants {
		e := &c.Contest.Entrants[i]
		for j, df := range e.DF {
			figures, curve := l.rung(c.Moments, i, j)
			f(e, df, figures, curve)
		}
	}
}

// Rungs returns the rows of the table rungs; figures that were never seen have none.
func (c *CellReport) Rungs() []results.Rung {
	var rows []results.Rung
	docs := FigureDocs()
	c.each(func(e *Entrant, df float64, figures, _ []Moment) {
		for q, doc := range docs {
			if m := figures[q]; m.Count > 0 {
				v := m.Estimate()
				rows = append(rows, results.Rung{
					Cell: c.Key, Smoother: e.Name, DF: df, Quantity: doc.Name,
					Mean: v.Value, MCSE: v.MCSE, Replicates: m.Count,
				})
			}
		}
	})
	return rows
}

// Curves returns the rows of the table curves; rungs that were never fitted have none.
func (c *CellReport) Curves() []results.Curve {
	x := grid(c.Cell.Truth.Lo, c.Cell.Truth.Hi)
	truth := c.Cell.TruthAt(x)
	var rows []results.Curve
	c.each(func(e *Entrant, df float64, _, curve []Moment) {
		for i, m := range curve {
			if m.Count == 0 {
				continue
			}
			v := m.Estimate()
			bias := m.Mean - truth[i]
			rows = append(rows, results.Curve{
				Cell: c.Key, Smoother: e.Name, DF: df, X: x[i], Truth: truth[i],
				Mean: v.Value, Bias2: finite(bias * bias), Variance: m.Variance(), MCSE: v.MCSE, Replicates: m.Count,
			})
		}
	})
	return rows
}

// Tests returns the rows of the table tests.
func (c *CellReport) Tests() []results.Test {
	lawful := c.Cell.NormalErrors() && c.Cell.WhiteErrors()
	var rows []results.Test
	c.each(func(e *Entrant, df float64, figures, _ []Moment) {
		for k, alpha := range testLevels() {
			m := figures[int(rejected)+k]
			count := int(math.Round(m.Mean * float64(m.Count)))
			s := shareOf(count, m.Count)
			rows = append(rows, results.Test{
				Cell: c.Key, Smoother: e.Name, DF: df, Alpha: alpha, Rejected: count, Replicates: m.Count,
				Rate: s.Rate, Lo: s.Lo, Hi: s.Hi,
				Exact: lawful && m.Count > 0 && figures[nested].Mean == 1,
			})
		}
	})
	return rows
}

// Audit works out the exact expectations of every rung and sets them beside what was
// simulated. There are none where the design is drawn anew or too large.
func (c *CellReport) Audit(seed uint64) []results.Audit {
	t, ok := NewTheory(c.Cell, seed)
	if !ok {
		return nil
	}
	var rows []results.Audit
	arena := smoothers.Arena{Lasting: true}
	var rungs []smoothers.Rung
	of, j := (*Entrant)(nil), 0
	c.each(func(e *Entrant, df float64, figures, _ []Moment) {
		if e != of {
			arena.Reset()
			rungs, of, j = e.Smoother.On(t.X(), &arena).AtDF(e.DF), e, 0
		}
		expected := t.Expect(&rungs[j])
		j++
		for _, q := range audited() {
			rows = c.appendAudit(rows, e.Name, df, q, q.of(&expected), figures[q.figure])
		}
	})
	return rows
}

// An auditedFigure is a figure that theory has an expectation for.
type auditedFigure struct {
	figure figure
	of     func(*Expectation) results.Number
}

// audited lists them.
func audited() []auditedFigure {
	return []auditedFigure{
		{trainMSE, func(e *Expectation) results.Number { return e.Train }},
		{aseTrain, func(e *Expectation) results.Number { return e.ASE }},
		{sameX, func(e *Expectation) results.Number { return e.SameX }},
		{heldoutMSE, func(e *Expectation) results.Number { return e.HeldOut }},
		{criterionLOOCV, func(e *Expectation) results.Number { return e.LOOCV }},
		{criterionCP, func(e *Expectation) results.Number { return e.CP }},
		{coveredKnown, func(e *Expectation) results.Number { return e.Coverage }},
	}
}

// appendAudit appends the row of one figure, if both theory and the simulation know it. What
// agrees to rounding agrees, whatever its standard error: a fit through all readings has
// residuals that are nothing else.
func (c *CellReport) appendAudit(rows []results.Audit, smoother string, df float64, q auditedFigure, expected results.Number, m Moment) []results.Audit {
	const rounding = 1e-12
	v := m.Estimate()
	if !expected.Known || !v.Value.Known {
		return rows
	}
	row := results.Audit{
		Cell: c.Key, Smoother: smoother, DF: df, Quantity: FigureDocs()[q.figure].Name,
		Expected: expected, Simulated: v.Value, MCSE: v.MCSE,
	}
	off := v.Value.Value - expected.Value
	switch {
	case math.Abs(off) <= rounding*max(math.Abs(expected.Value), c.Cell.NoiseVariance):
		row.Z = results.Num(0)
	case c.Cell.HeavyTails(): // the standard error means nothing
	case v.MCSE.Known && v.MCSE.Value > 0:
		row.Z = finite(off / v.MCSE.Value)
	case v.MCSE.Known: // it does not vary, and it is another
		row.Z = results.Num(math.Copysign(math.Inf(1), off))
	}
	return append(rows, row)
}

// Agreement counts the rows of an audit whose z is known, and those of them within
// 4 MCSE.
func Agreement(rows []results.Audit) (within, of int) {
	for _, r := range rows {
		if !r.Z.Known {
			continue
		}
		of++
		if math.Abs(r.Z.Value) <= 4 {
			within++
		}
	}
	return within, of
}

// Pack returns moments as the rows of a part.
func Pack(moments []Moment) []results.Moment {
	var rows []results.Moment
	for i, m := range moments {
		if m.Count > 0 {
			rows = append(rows, results.Moment{Slot: i, Count: m.Count, Mean: m.Mean, M2: m.M2})
		}
	}
	return rows
}

// MomentsOf returns the length of a cell's vector of moments.
func MomentsOf(c *Contest) int {
	l := newLayout(c)
	return l.size()
}
