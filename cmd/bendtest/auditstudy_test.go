package main

import (
	"math"
	"path/filepath"
	"strings"
	"testing"

	"bendtest/results"
	"bendtest/scoring"
)

// auditStudy has independent and correlated errors on a fixed design.
const auditStudy = `seed = 6
held-out = 1000
replicates = 400
keep = "summary"
[cells]
n = [100]
[truth.wave]
f = "sin(2*pi*x)"
[truth.line]
f = "1 - x"
[design.even]
law = "even"
[noise.white]
law = "normal"
sd = 0.3
[noise.drifting]
law = "normal"
sd = 0.3
ar1 = 0.6
[noise.fanning]
law = "skewed"
shape = 4
variance = 0.09
scale = "0.4 + 1.2*x"
[[smoother]]
family = "smoothing-spline"
df = "2..24 by 2"
[[smoother]]
family = "local"
df = [3, 5, 9]
[[rule]]
kind = "gcv"
[[rule]]
kind = "loocv"
[[rule]]
kind = "bic"
[[rule]]
kind = "ftest"
`

// Correlated errors look like a curve to GCV and LOOCV, which follow them; the theory of
// correlated errors must still hold to the simulation. 6 cells × 15 rungs × 6 or 7
// figures, strongly dependent within a cell: at 4 MCSE a false alarm has a probability of
// about 2 %, the seed is fixed.
func TestTheAuditHoldsUnderCorrelatedAndUnequalErrors(t *testing.T) {
	dir := runStudy(t, auditStudy)
	rows := tableRows(t, dir, results.Audits)
	within, of := scoring.Agreement(rows)
	if of != 4*15*7+2*15*6 || within != of { // coverage is audited under normal errors alone
		t.Errorf("audit: %d of %d within 4 MCSE", within, of)
		for _, r := range rows {
			if math.Abs(r.Z.Value) > 4 {
				t.Logf("%s, %s at df %g, %s: expected %.5g, simulated %.5g ± %.2g", r.Cell, r.Smoother, r.DF, r.Quantity, r.Expected.Value, r.Simulated.Value, r.MCSE.Value)
			}
		}
	}
	df := map[string]float64{} // mean df by cell and rule
	for _, s := range tableRows(t, dir, results.Summaries) {
		if s.Smoother == "smoothing-spline" && s.Measure == "mean_df" {
			df[s.Cell+" "+s.Rule] = s.Value.Value
		}
	}
	for _, rule := range []string{"gcv", "loocv"} {
		white, drifting := df["wave/even/white/n=100 "+rule], df["wave/even/drifting/n=100 "+rule]
		oracle := df["wave/even/drifting/n=100 oracle"]
		t.Logf("%s: mean df %.1f with white errors, %.1f with correlated ones, where the oracle has %.1f", rule, white, drifting, oracle)
		if !(drifting > 2*oracle && drifting > 1.5*white) {
			t.Errorf("%s does not under-smooth: %.1f df, the oracle %.1f, white errors %.1f", rule, drifting, oracle, white)
		}
	}
	smallest(t, dir)
}

// smallest reports how often each rule finds the straight line, and wants what its theory
// says: BIC nearly always; the F test at least as often as its level promises; GCV and
// LOOCV most of the time.
func smallest(t *testing.T, dir *results.Dir) {
	t.Helper()
	for _, c := range tableRows(t, dir, results.Choices) {
		if c.Cell != "line/even/white/n=100" || c.Smoother != "smoothing-spline" || c.DF != 2 {
			continue
		}
		t.Logf("%s picks the line in %.3f (%.3f to %.3f) of the replicates", c.Rule, c.Rate.Value, c.Lo.Value, c.Hi.Value)
		least := map[string]float64{"bic": 0.9, "ftest": 0.85, "gcv": 0.5, "loocv": 0.5, "oracle": 0.9}[c.Rule]
		if c.Rate.Value < least {
			t.Errorf("%s finds the line in %.2f of the replicates only", c.Rule, c.Rate.Value)
		}
	}
}

func TestRunEndsWithTheAudit(t *testing.T) {
	code, stdout, stderr := command(t, "run", studyIn(t, smallStudy), "-o", filepath.Join(t.TempDir(), "out"))
	if code != exitDone {
		t.Fatalf("exit %d: %s", code, stderr)
	}
	if !strings.Contains(stdout, "\naudit: 84 of 84 within 4 MCSE (exact expectations in 2 of 4 cells") {
		t.Errorf("no audit in\n%s", stdout[max(0, len(stdout)-700):])
	}
}
