package sim

import (
	"fmt"
	"testing"
)

// The first draws of each law, of one stream, and of one whole sample. They are part
// of the output format: this table is never edited. Whoever must change a draw changes
// streamVersion and says so in the change log.
var frozen = map[string]string{
	"bits":                     "fd23aaedce69b216 5ce9ec44ba3cd9c3",
	"noise normal":             "[0.705242491497 -0.393384155597 1.72092150835]",
	"noise student-t 9":        "[0.699641722997 -0.382268396504 1.41652660428]",
	"noise laplace":            "[0.328793752717 -0.239987939879 2.17468947003]",
	"noise uniform":            "[1.69334118944 -0.474774592702 -0.480274769809]",
	"noise skewed 2":           "[-0.878490289467 -1.32548851921 -0.500470734743]",
	"noise skewed 0.5":         "[-0.698573300963 -0.628157486244 -0.134775583028]",
	"noise skewed 0.1":         "[-0.316227766017 -0.316227766017 -0.316193611079]",
	"noise contaminated 0.1 4": "[0.446034515173 -0.248797985422 4.35362531261]",
	"noise from-file 672ed2199015719285b685db076caa26": "[-1.36412050137 -0.287183263447 -0.287183263447]",
	"design uniform":            "[-0.554733030471 -0.229730800867 2.71532938347]",
	"design even":               "[-0.554733030471 -0.229730800867 2.71532938347]",
	"design beta 0.3 0.4":       "[-0.999917134598 -0.961095745881 0.017168885166]",
	"design beta 2.5 1":         "[-0.387750261967 2.43105857416 2.9546478033]",
	"design beta 0.7 3":         "[-0.985418508568 -0.967415975832 0.17178747308]",
	"design normal 0.5 0.7":     "[-0.303305082335 -0.0754888512401 1.53206718707]",
	"design normal -1 3":        "[-0.657061952852 -0.404144944007 2.52040898184]",
	"design normal -4 1":        "[-0.964235091916 -0.935439888768 -0.270864941137]",
	"design normal 6 1":         "[2.38515942699 2.52970779534 2.97758414709]",
	"design gap 0 1.5":          "[-0.721708144045 -0.518581750542 2.82208086467]",
	"design gap 0 1.5 left 0.8": "[-0.860854072022 -0.759290875271 2.466242594]",
	"design from-file a2d427ba60e7026e07c67f0022d39c64 resample true": "[0 0 2.25]",
	"hash":       "89ab27694bac05a7",
	"training x": "[0.15 0.23 0.37 0.37 0.41]",
	"training y": "[3.04213266772 3.12948350234 2.29066249539 2.20780876056 2.40857935797]",
	"held-out x": "[0 0 0]",
	"held-out y": "[3.49308392316 2.79793009394 2.73728104389]",
	"other use":  "b273ded6afa1ed04",
}

func TestFirstDrawsAreFrozen(t *testing.T) {
	var s Stream
	seen := 0
	check := func(name, got string) {
		t.Helper()
		seen++
		if got != frozen[name] {
			t.Errorf("%q: %q,", name, got)
		}
	}
	start := func() { s.set(20261201, "0123456789abcdef", 7, "frozen") }

	start()
	check("bits", fmt.Sprintf("%016x %016x", s.Uint64(), s.Uint64()))
	for _, law := range noiseLaws() {
		start()
		e := make([]float64, 3)
		law.errors()(e, &s)
		check("noise "+law.describe(), fmt.Sprintf("%.12g", e))
	}
	for _, law := range laws() {
		start()
		x := make([]float64, 3)
		placed(t, &Design{Law: law}).draw(x, &s)
		check("design "+law.describe(), fmt.Sprintf("%.12g", x))
	}

	noise := normalNoise(0.3)
	noise.AR1, noise.Scale = 0.5, expression(t, "1 + x")
	design := &Design{Law: &UniformDesign{}, Redraw: true, Resolution: 0.01}
	cell, err := NewCell(curve(t, "3*exp(-2*x) + sin(2*pi*x)", 0, 1), design, noise, 5, 1000)
	if err != nil {
		t.Fatal(err)
	}
	var sample Sample
	cell.Draw(20261201, 7, &sample)
	check("hash", cell.Hash())
	check("training x", fmt.Sprintf("%.12g", sample.Train.X))
	check("training y", fmt.Sprintf("%.12g", sample.Train.Y))
	check("held-out x", fmt.Sprintf("%.12g", sample.Held.X[:3]))
	check("held-out y", fmt.Sprintf("%.12g", sample.Held.Y[:3]))
	check("other use", fmt.Sprintf("%016x", cell.Stream(20261201, 7, "folds").Uint64()))
	if seen != len(frozen) {
		t.Errorf("%d draws are frozen, %d checked", len(frozen), seen)
	}
}
