package sim

import (
	"math"
	"slices"
	"testing"

	"bendtest/sim/expr"
)

func number(v float64) *float64 { return &v }

func expression(t testing.TB, text string) *expr.Expression {
	t.Helper()
	e, err := expr.Compile(text)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

func curve(t testing.TB, text string, lo, hi float64) *Truth {
	t.Helper()
	truth, err := NewTruth(expression(t, text), lo, hi)
	if err != nil {
		t.Fatal(err)
	}
	return truth
}

func cellOf(t testing.TB, truth *Truth, law DesignLaw, noise *Noise, n, heldOut int) *Cell {
	t.Helper()
	c, err := NewCell(truth, &Design{Law: law, Redraw: true}, noise, n, heldOut)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func normalNoise(sd float64) *Noise { return &Noise{Law: &NormalNoise{}, SD: number(sd)} }

func TestHashIsOfContent(t *testing.T) {
	base := func() (*Truth, *Design, *Noise, int) {
		return curve(t, "1 + x", 0, 1), &Design{Law: &UniformDesign{}, Redraw: true}, normalNoise(1), 20
	}
	hash := func(change func(truth **Truth, d *Design, noise *Noise, n *int)) string {
		truth, d, noise, n := base()
		change(&truth, d, noise, &n)
		c, err := NewCell(truth, d, noise, n, 100)
		if err != nil {
			t.Fatal(err)
		}
		return c.Hash()
	}
	seen := map[string]string{}
	for name, change := range map[string]func(truth **Truth, d *Design, noise *Noise, n *int){
		"none":       func(**Truth, *Design, *Noise, *int) {},
		"curve":      func(f **Truth, _ *Design, _ *Noise, _ *int) { *f = curve(t, "1 - x", 0, 1) },
		"domain":     func(f **Truth, _ *Design, _ *Noise, _ *int) { *f = curve(t, "1 + x", 0, 2) },
		"law":        func(_ **Truth, d *Design, _ *Noise, _ *int) { d.Law = &EvenDesign{} },
		"redraw":     func(_ **Truth, d *Design, _ *Noise, _ *int) { d.Redraw = false },
		"resolution": func(_ **Truth, d *Design, _ *Noise, _ *int) { d.Resolution = 0.1 },
		"sd":         func(_ **Truth, _ *Design, e *Noise, _ *int) { e.SD = number(2) },
		"noise law":  func(_ **Truth, _ *Design, e *Noise, _ *int) { e.Law = &LaplaceNoise{} },
		"ar1":        func(_ **Truth, _ *Design, e *Noise, _ *int) { e.AR1 = 0.1 },
		"scale":      func(_ **Truth, _ *Design, e *Noise, _ *int) { e.Scale = expression(t, "2 + x") },
		"n":          func(_ **Truth, _ *Design, _ *Noise, n *int) { *n = 21 },
		"spline": func(f **Truth, _ *Design, _ *Noise, _ *int) {
			*f, _ = NewSplineTruth([]float64{0, 0.5, 1}, []float64{1, 1.5, 2}, 0, 1)
		},
	} {
		h := hash(change)
		if before, ok := seen[h]; ok {
			t.Errorf("%q and %q share a hash", name, before)
		}
		seen[h] = name
	}
	even := func(redraw bool) string {
		return hash(func(_ **Truth, d *Design, _ *Noise, _ *int) { d.Law, d.Redraw = &EvenDesign{}, redraw })
	}
	if even(true) != even(false) {
		t.Error("redraw, which means nothing to an even design, changes its hash")
	}
	if spaced := hash(func(f **Truth, _ *Design, _ *Noise, _ *int) { *f = curve(t, " (1+x) ", 0, 1) }); seen[spaced] != "none" {
		t.Error("spacing changes the hash")
	}
}

func TestFixedDesigns(t *testing.T) {
	truth := curve(t, "x", 2, 4)
	file := Column{Values: []float64{3.5, 2, 2.5}}
	for _, c := range []struct {
		name   string
		design *Design
		want   []float64
	}{
		{"even", &Design{Law: &EvenDesign{}, Redraw: true}, []float64{2 + 1.0/3, 3, 4 - 1.0/3}},
		{"even, rounded", &Design{Law: &EvenDesign{}, Redraw: true, Resolution: 0.5}, []float64{2.5, 3, 3.5}},
		{"file as it stands", &Design{Law: &FileDesign{Column: file}, Redraw: true}, []float64{2, 2.5, 3.5}},
		{"kept first draw", &Design{Law: &UniformDesign{}}, nil},
	} {
		cell, err := NewCell(truth, c.design, normalNoise(1), 3, 50)
		if err != nil {
			t.Fatal(err)
		}
		var a, b Sample
		cell.Draw(1, 0, &a)
		cell.Draw(1, 7, &b)
		if !cell.FixedDesign() || !slices.Equal(a.Train.X, b.Train.X) {
			t.Errorf("%s: not fixed", c.name)
		}
		if a.Train.Y[0] == b.Train.Y[0] || a.Held.X[0] == b.Held.X[0] && c.name != "even, rounded" && c.name != "file as it stands" {
			t.Errorf("%s: replicates are alike", c.name)
		}
		for i, want := range c.want {
			if math.Abs(a.Train.X[i]-want) > 1e-15*4 {
				t.Errorf("%s: x = %v, want %v", c.name, a.Train.X, c.want)
				break
			}
		}
	}
}
