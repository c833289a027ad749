package main

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"
)

// A likelihoodCase is a family on a data set of testdata/likelihood/references.json: the
// criteria from the determinant and residual of the mixed-model form, and their minima.
type likelihoodCase struct {
	Data, Family string
	Values       []struct{ Tuning, DF, REML, ML float64 }
	Least        []struct {
		Criterion                 string
		Theta, DF, Value, Library float64 // Library is θ by a general library's optimiser
	}
}

// The references are in extended precision; 1e-8 is relative.
func TestLikelihoodCriteriaAgreeWithTheMixedModel(t *testing.T) {
	text, err := os.ReadFile("../../testdata/likelihood/references.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Cases []likelihoodCase }
	if err := json.Unmarshal(text, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Cases) != 10 {
		t.Fatalf("%d cases, want 10", len(file.Cases))
	}
	worst := 0.0
	same := func(c likelihoodCase, what string, got, want float64) {
		off := math.Abs(got-want) / max(1, math.Abs(want))
		worst = max(worst, off)
		if !(off <= 1e-8) {
			t.Errorf("%s, %s: %s is %.12g, want %.12g", c.Data, c.Family, what, got, want)
		}
	}
	for _, c := range file.Cases {
		for _, want := range c.Values {
			df, reml, ml := likelihoodAt(t, c, want.Tuning)
			same(c, "df", df, want.DF)
			same(c, "reml", reml, want.REML)
			same(c, "ml", ml, want.ML)
		}
		for _, least := range c.Least {
			at := func(theta float64) (df, value float64) {
				df, reml, ml := likelihoodAt(t, c, math.Exp(theta))
				if least.Criterion == "ml" {
					return df, ml
				}
				return df, reml
			}
			df, value := at(least.Theta)
			same(c, "df of least "+least.Criterion, df, least.DF)
			same(c, "least "+least.Criterion, value, least.Value)
			if off := math.Abs(least.Library - least.Theta); !(off < 1e-5) {
				t.Errorf("%s, %s: a library has its least %s %.2g away in log λ", c.Data, c.Family, least.Criterion, off)
			}
			_, theirs := at(least.Library)
			same(c, "least "+least.Criterion+" of a library", theirs, least.Value)
			// By the references the second derivative is between 2 and 4.1 here, the
			// third at most 1.6: neighbours a hundredth away are larger by 1e-4 or more.
			_, below := at(least.Theta - 0.01)
			_, above := at(least.Theta + 0.01)
			if !(value < below && value < above) {
				t.Errorf("%s, %s: %s %.12g at its minimum, %.12g and %.12g beside it",
					c.Data, c.Family, least.Criterion, value, below, above)
			}
			// The vertex of the parabola through the three is off by the third
			// derivative times 0.01²/(6 × the second): at most 8.5e-6.
			if off := 0.005 * (below - above) / (below - 2*value + above); !(math.Abs(off) < 1e-5) {
				t.Errorf("%s, %s: the minimum of %s is off by %.2g in log λ", c.Data, c.Family, least.Criterion, off)
			}
		}
	}
	t.Logf("worst relative difference %.2g", worst)
}

// likelihoodAt runs the command at one λ.
func likelihoodAt(t *testing.T, c likelihoodCase, lambda float64) (df, reml, ml float64) {
	t.Helper()
	code, stdout, stderr := command(t, "fit", filepath.Join("..", "..", "testdata", "fit", c.Data),
		"--format", "json", "--family", c.Family, "--tuning", strconv.FormatFloat(lambda, 'g', -1, 64))
	var found []struct {
		Status string
		TrS    float64 `json:"tr_s"`
		REML   *float64
		ML     *float64
	}
	err := json.Unmarshal([]byte(stdout), &found)
	if code != exitDone || err != nil || len(found) != 1 || found[0].Status != "ok" || found[0].REML == nil || found[0].ML == nil {
		t.Fatalf("%s, %s, λ %g: exit %d, %v %s", c.Data, c.Family, lambda, code, err, stderr)
	}
	return found[0].TrS, *found[0].REML, *found[0].ML
}
