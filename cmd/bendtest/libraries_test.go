package main

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"testing"
)

// A libraryFit is a fit of testdata/libraries/references.json: a general-purpose
// library's answer at a given tuning.
type libraryFit struct {
	Library, Data, Family string
	Options               map[string]any
	Tuning                float64
	Fitted, At, Predicted []float64
}

// A libraryChoice is the λ at which a library puts the least GCV of a smoothing spline.
type libraryChoice struct {
	Data   string
	Lambda float64
	Fitted []float64
}

// libraryTolerance is relative to the range of y. The libraries solve normal equations
// or invert matrices where a careful fit need not; what they lose differs.
var libraryTolerance = map[string]float64{
	"smoothing_spline": 1e-8, // rounds entries of size λ/h³, h the least distance of two x
	"lsq_spline":       1e-9,
	"natural_spline":   1e-10,
	"ols":              1e-10,
	"lowess":           1e-9,
	"kernel_reg":       1e-9,
	"polynomial":       1e-9,
}

func TestFitsAgreeWithGeneralLibraries(t *testing.T) {
	fits, _ := libraryReferences(t)
	worst := map[string]float64{}
	count := map[string]int{}
	for _, want := range fits {
		args := []string{
			"fit", filepath.Join("..", "..", "testdata", "fit", want.Data), "--format", "json",
			"--family", want.Family, "--tuning", strconv.FormatFloat(want.Tuning, 'g', -1, 64),
		}
		if len(want.At) > 0 {
			args = append(args, "--at", pointsFile(t, want.At))
		}
		for name, v := range want.Options {
			args = append(args, fmt.Sprintf("--%s=%v", name, v))
		}
		got := libraryAnswer(t, args)
		if got == nil {
			continue
		}
		slices.Sort(want.Fitted) // the command keeps the order of the file
		slices.Sort(got.Fitted)
		off := distance(got.Fitted, want.Fitted)
		if len(want.At) > 0 {
			off = max(off, distance(got.Predicted, want.Predicted))
		}
		worst[want.Library] = max(worst[want.Library], off)
		count[want.Library]++
		if !(off <= libraryTolerance[want.Library]) {
			t.Errorf("%s: %v is off by %.2g", want.Library, args[1:], off)
		}
	}
	for library := range libraryTolerance {
		t.Logf("%s: %d fits, worst relative difference %.2g", library, count[library], worst[library])
		if count[library] < 3 {
			t.Errorf("%s has only %d fits", library, count[library])
		}
	}
}

// An answer is what a comparison needs of `fit --format json`.
type answer struct {
	Status            string
	GCV               float64
	Fitted, Predicted []float64
}

// libraryAnswer runs the command for one rung.
func libraryAnswer(t *testing.T, args []string) *answer {
	t.Helper()
	code, stdout, stderr := command(t, args...)
	var found []answer
	err := json.Unmarshal([]byte(stdout), &found)
	if code != exitDone || err != nil || len(found) != 1 || found[0].Status != "ok" {
		t.Errorf("%v: exit %d, %v %s", args, code, err, stderr)
		return nil
	}
	return &found[0]
}

// distance is the largest difference of two curves, relative to the range of the second.
func distance(got, want []float64) float64 {
	if len(got) != len(want) {
		return math.Inf(1)
	}
	off := 0.0
	for i := range got {
		off = max(off, math.Abs(got[i]-want[i]))
	}
	return off / (slices.Max(want) - slices.Min(want))
}

// The criterion is flat at its minimum, and the library stops within about 1e-5 of the
// best log λ: its choice may score no better than neighbours a thousandth away from it
// on either side, and its own fit is ours at that λ.
func TestLeastGCVAgreesWithALibrary(t *testing.T) {
	_, choices := libraryReferences(t)
	if len(choices) < 3 {
		t.Fatalf("only %d choices", len(choices))
	}
	for _, c := range choices {
		data := filepath.Join("..", "..", "testdata", "fit", c.Data)
		at := func(lambda float64) *answer {
			return libraryAnswer(t, []string{
				"fit", data, "--format", "json", "--family", "smoothing-spline",
				"--tuning", strconv.FormatFloat(lambda, 'g', -1, 64),
			})
		}
		best, below, above := at(c.Lambda), at(c.Lambda*0.999), at(c.Lambda*1.001)
		if best == nil || below == nil || above == nil {
			continue
		}
		if !(best.GCV < below.GCV && best.GCV < above.GCV) {
			t.Errorf("%s: GCV %.12g at the library's λ, %.12g and %.12g beside it", c.Data, best.GCV, below.GCV, above.GCV)
		}
		slices.Sort(best.Fitted)
		slices.Sort(c.Fitted)
		if off := distance(best.Fitted, c.Fitted); off > 1e-8 { // λ is read back from the fit
			t.Errorf("%s: the fit is off by %.2g", c.Data, off)
		}
	}
}

// libraryReferences reads the reference file.
func libraryReferences(t *testing.T) ([]libraryFit, []libraryChoice) {
	t.Helper()
	text, err := os.ReadFile("../../testdata/libraries/references.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		Fits    []libraryFit
		Choices []libraryChoice
	}
	if err := json.Unmarshal(text, &file); err != nil {
		t.Fatal(err)
	}
	return file.Fits, file.Choices
}
