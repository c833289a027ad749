package main

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// A fitReference is one case of testdata/fit/references.json, made by make.py beside
// it.
type fitReference struct {
	Data     string
	Family   string
	Options  map[string]any
	DF       float64
	Tuning   float64
	TrS      float64 `json:"tr_s"`
	TrSTS    float64 `json:"tr_sts"`
	Residual float64 `json:"df_residual"`
	RSS      float64
	GCV      float64
	LOOCV    *float64 // null where an observation determines its own fit
	AICc     float64
	Fitted   []float64
	Leverage []float64

	At        []float64
	Predicted []*float64 // null where the window of a local fit holds too few x
}

// fitTolerance is relative, for fitted values to the range of y: independent double
// precision computations of the near-tied and crowded sets agree to about 1e-10.
const fitTolerance = 1e-9

func TestFitAgreesWithIndependentComputations(t *testing.T) {
	text, err := os.ReadFile("../../testdata/fit/references.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Cases []fitReference }
	if err := json.Unmarshal(text, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Cases) < 350 {
		t.Fatalf("only %d cases", len(file.Cases))
	}
	worst := map[string]float64{}
	for _, c := range file.Cases {
		off := compareFit(t, &c)
		worst[c.Family] = max(worst[c.Family], off)
	}
	for family, off := range worst {
		t.Logf("%s: worst relative difference %.2g", family, off)
	}
}

// compareFit runs one case through the command and returns its worst difference.
func compareFit(t *testing.T, c *fitReference) float64 {
	t.Helper()
	args := []string{
		"fit", filepath.Join("..", "..", "testdata", "fit", c.Data), "--format", "json",
		"--family", c.Family, "--df", strconv.FormatFloat(c.DF, 'g', -1, 64), "--at", pointsFile(t, c.At),
	}
	for name, v := range c.Options {
		args = append(args, fmt.Sprintf("--%s=%v", name, v))
	}
	label := strings.Join(args[1:], " ")
	code, stdout, stderr := command(t, args...)
	if code != exitDone {
		t.Errorf("%s: exit %d: %s", label, code, stderr)
		return math.Inf(1)
	}
	var found []struct {
		Status                      string
		TrS                         float64 `json:"tr_s"`
		TrSTS                       float64 `json:"tr_sts"`
		Residual                    float64 `json:"df_residual"`
		Tuning                      float64
		RSS                         float64
		GCV                         float64
		LOOCV                       any // a number, or "inf"
		AICc                        float64
		Fitted, Leverage, Predicted []float64
	}
	if err := json.Unmarshal([]byte(stdout), &found); err != nil || len(found) != 1 || found[0].Status != "ok" {
		t.Errorf("%s: %v\n%.300s", label, err, stdout)
		return math.Inf(1)
	}
	f := found[0]
	if math.Abs(f.TrS-c.DF) > 1e-8*c.DF {
		t.Errorf("%s: tr S = %v", label, f.TrS)
	}
	worst := 0.0
	check := func(what string, got, want, scale float64) {
		off := math.Abs(got-want) / max(scale, 1e-300)
		worst = max(worst, off)
		if !(off <= fitTolerance) {
			t.Errorf("%s: %s = %.15g, want %.15g", label, what, got, want)
		}
	}
	check("tr SᵀS", f.TrSTS, c.TrSTS, c.TrSTS)
	check("df residual", f.Residual, c.Residual, c.Residual)
	check("rss", f.RSS, c.RSS, c.RSS)
	check("gcv", f.GCV, c.GCV, c.GCV)
	if loocv, finite := f.LOOCV.(float64); finite != (c.LOOCV != nil) {
		t.Errorf("%s: loocv is %v", label, f.LOOCV)
	} else if finite {
		check("loocv", loocv, *c.LOOCV, *c.LOOCV)
	}
	check("aicc", f.AICc, c.AICc, max(1, math.Abs(c.AICc)))
	spread := slices.Max(c.Fitted) - slices.Min(c.Fitted)
	for i := range c.Fitted {
		check(fmt.Sprint("fitted ", i), f.Fitted[i], c.Fitted[i], spread)
		check(fmt.Sprint("leverage ", i), f.Leverage[i], c.Leverage[i], 1)
	}
	for i, want := range c.Predicted {
		if want != nil {
			check(fmt.Sprint("predicted ", i), f.Predicted[i], *want, max(spread, math.Abs(*want)))
		}
	}
	return worst
}

// pointsFile writes a file of x to predict at.
func pointsFile(t *testing.T, at []float64) string {
	t.Helper()
	text := "x\n"
	for _, v := range at {
		text += strconv.FormatFloat(v, 'g', -1, 64) + "\n"
	}
	path := filepath.Join(t.TempDir(), "at.csv")
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

func TestFitPrintsEveryForm(t *testing.T) {
	data := filepath.Join("..", "..", "testdata", "fit", "ties.csv")
	code, stdout, _ := command(t, "fit", data, "--family", "local,regression-spline", "--df", "3,5,80")
	if code != exitDone || strings.Count(stdout, "df-unattainable") != 2 || !strings.Contains(stdout, "◂ least gcv") {
		t.Errorf("exit %d\n%s", code, stdout)
	}
	code, stdout, _ = command(t, "fit", data, "--df", "4", "--at", "11", "--format", "csv")
	if lines := strings.Count(stdout, "\n"); code != exitDone || lines != 1+70+11 {
		t.Errorf("exit %d, %d lines", code, lines)
	}
	at := filepath.Join(t.TempDir(), "at.csv")
	if err := os.WriteFile(at, []byte("x\n0.9\n0.1\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	code, stdout, _ = command(t, "fit", data, "--family", "polynomial", "--tuning", "1", "--at", at, "--format", "json")
	var found []struct {
		DF        float64
		Options   map[string]any
		At        []float64
		Predicted []float64
		CP        *float64
	}
	if err := json.Unmarshal([]byte(stdout), &found); code != exitDone || err != nil {
		t.Fatalf("exit %d, %v", code, err)
	}
	f := found[0]
	if f.DF != 2 || f.At[0] != 0.9 || len(f.Predicted) != 2 || f.CP != nil || f.Options["beyond"] != "extend" {
		t.Errorf("%+v", f)
	}
	code, stdout, _ = command(t, "fit", data, "--df", "4", "--noise-variance", "0.09", "--format", "json")
	if code != exitDone || strings.Contains(stdout, `"cp": null`) {
		t.Errorf("exit %d, cp missing though the variance is known", code)
	}
}

// Rows in another order give the same fits at the same observations.
func TestFitTakesRowsInAnyOrder(t *testing.T) {
	text, err := os.ReadFile("../../testdata/fit/random.csv")
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimSpace(string(text)), "\n")
	slices.Reverse(lines[1:])
	turned := filepath.Join(t.TempDir(), "turned.csv")
	if err := os.WriteFile(turned, []byte(strings.Join(lines, "\n")+"\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	fitted := func(path string) []float64 {
		_, stdout, _ := command(t, "fit", path, "--df", "6", "--format", "json")
		var found []struct{ Fitted []float64 }
		if err := json.Unmarshal([]byte(stdout), &found); err != nil {
			t.Fatal(err)
		}
		return found[0].Fitted
	}
	a, b := fitted("../../testdata/fit/random.csv"), fitted(turned)
	slices.Reverse(b)
	if !slices.Equal(a, b) {
		t.Error("the order of the rows changes the fit")
	}
}
