package scenarios

import (
	"bytes"
	"reflect"
	"slices"
	"strings"
	"testing"
)

// small is a study with one of everything; tests change it.
const small = `
[cells]
n = [30, 100]
[truth.wave]
f = "sin(2*pi*x)"
[truth.line]
f = "1 - 0.8*x"
[design.random]
law = "uniform"
[noise.sensor]
law = "normal"
sd = 0.4
[[smoother]]
family = "local"
df = "3..9"
[[rule]]
kind = "gcv"
`

// parse reads a study that has no faults.
func parse(t *testing.T, src string) *Study {
	t.Helper()
	s, faults := Parse("small.toml", []byte(src), vocabulary("testdata"))
	if len(faults) > 0 {
		t.Fatal(faults.Error())
	}
	return s
}

// TestDefaultsAreTheDocumentedOnes holds what describe says against what is read.
func TestDefaultsAreTheDocumentedOnes(t *testing.T) {
	s := parse(t, small)
	if s.Title != "" || s.Seed != 1 || s.HeldOut != 10000 || s.Replicates != 200 || s.Precision != nil || s.Keep != "fits" {
		t.Errorf("defaults %q %d %d %d %v %q", s.Title, s.Seed, s.HeldOut, s.Replicates, s.Precision, s.Keep)
	}
	documented := map[string]string{"seed": "1", "held-out": "10000", "replicates": "200", "keep": "fits"}
	for _, k := range Keys(vocabulary("").Rules) {
		if want, ok := documented[k.Name]; ok && k.Table == "" {
			if k.Default != want {
				t.Errorf("%s is described with default %q, want %q", k.Name, k.Default, want)
			}
			delete(documented, k.Name)
		}
	}
	if len(documented) > 0 {
		t.Errorf("not described: %v", documented)
	}
}

func TestFactorialRunsInFileOrder(t *testing.T) {
	var keys []string
	for _, c := range parse(t, small).Cells {
		keys = append(keys, c.Key)
		if c.Sim.N != c.N || c.Sim.HeldOut != 10000 {
			t.Errorf("%s draws %d and %d", c.Key, c.Sim.N, c.Sim.HeldOut)
		}
	}
	want := []string{"wave/random/sensor/n=30", "wave/random/sensor/n=100", "line/random/sensor/n=30", "line/random/sensor/n=100"}
	if !slices.Equal(keys, want) {
		t.Errorf("cells %v, want %v", keys, want)
	}
	chosen := parse(t, strings.Replace(small, "n = [30, 100]", "n = [30]\ntruth = [\"line\"]", 1))
	if len(chosen.Cells) != 1 || chosen.Cells[0].Key != "line/random/sensor/n=30" {
		t.Errorf("cells %+v, want the line alone", chosen.Cells)
	}
}

func TestAddingACellChangesNoOtherCell(t *testing.T) {
	before := parse(t, small)
	after := parse(t, strings.Replace(small, "[noise.sensor]", "[noise.gusts]\nlaw = \"laplace\"\nsd = 1\n[noise.sensor]", 1))
	hashes := map[string]string{}
	for _, c := range after.Cells {
		hashes[c.Key] = c.Sim.Hash()
	}
	if len(hashes) != 8 {
		t.Errorf("%d cells, want 8", len(hashes))
	}
	for _, c := range before.Cells {
		if hashes[c.Key] != c.Sim.Hash() {
			t.Errorf("%s has another hash", c.Key)
		}
	}
}

// TestHashFollowsContent changes the study in ways that count and ways that don't.
func TestHashFollowsContent(t *testing.T) {
	base := parse(t, small)
	same := []struct{ why, from, to string }{
		{"comments", "[cells]", "# a comment\n[cells]  # another"},
		{"spelt-out defaults", "[cells]", "seed = 1\nkeep = \"fits\"\n[cells]"},
		{"spelt-out lists", "[30, 100]", "[30, 100]\ntruth = [\"wave\", \"line\"]"},
		{"another spelling of the grid", `"3..9"`, "[3, 4, 5.0, 6, 7, 8, 9]"},
		{"another spelling of the curve", `"sin(2*pi*x)"`, `"sin( ((2 * pi) * x) )"`},
		{"inline tables", "[[rule]]\nkind = \"gcv\"", "[[rule]]\nkind = \"gcv\"\ngamma = 1"},
	}
	for _, c := range same {
		if s := parse(t, strings.Replace(small, c.from, c.to, 1)); s.Hash != base.Hash {
			t.Errorf("%s change the hash: %s", c.why, s.Canonical())
		}
	}
	others := []struct{ why, from, to string }{
		{"seed", "[cells]", "seed = 2\n[cells]"},
		{"held-out", "[cells]", "held-out = 5000\n[cells]"},
		{"n", "[30, 100]", "[30]"},
		{"level", "0.4", "0.41"},
		{"grid", "3..9", "3..10"},
		{"rule option", "kind = \"gcv\"", "kind = \"gcv\"\ngamma = 1.4"},
		{"label", "kind = \"gcv\"", "kind = \"gcv\"\nname = \"mine\""},
	}
	for _, c := range others {
		if s := parse(t, strings.Replace(small, c.from, c.to, 1)); s.Hash == base.Hash {
			t.Errorf("another %s leaves the hash as it was", c.why)
		}
	}
}

func TestWithSeedIsTheStudyOfThatSeed(t *testing.T) {
	base := parse(t, small)
	got, want := base.WithSeed(7), parse(t, "seed = 7\n"+small)
	if got.Seed != 7 || got.Hash != want.Hash || !bytes.Equal(got.Canonical(), want.Canonical()) {
		t.Errorf("seed %d, hash %s, want 7, %s", got.Seed, got.Hash, want.Hash)
	}
	if base.Seed != 1 || base.Hash == got.Hash {
		t.Error("WithSeed changed the study it was asked of")
	}
}

func TestPrecisionIsReplicatesAtMost(t *testing.T) {
	s := parse(t, "replicates = {at-most = 5000, relative-mcse = 0.02}\n"+small)
	if s.Replicates != 5000 || s.Precision == nil || *s.Precision != (Precision{100, 5000, 0.02}) {
		t.Errorf("replicates %d, precision %+v", s.Replicates, s.Precision)
	}
	sameAgain(t, s)
}

// sameAgain parses a study's canonical form and compares.
func sameAgain(t *testing.T, s *Study) {
	t.Helper()
	again, faults := Parse("small.toml", s.Canonical(), vocabulary("testdata"))
	if len(faults) > 0 {
		t.Fatalf("the canonical form has faults: %v\n%s", faults.Error(), s.Canonical())
	}
	if again.Hash != s.Hash || !bytes.Equal(again.Canonical(), s.Canonical()) {
		t.Errorf("canonical form changes:\n%s\nthen\n%s", s.Canonical(), again.Canonical())
	}
	if !reflect.DeepEqual(again.Smoothers, s.Smoothers) || !reflect.DeepEqual(again.Rules, s.Rules) {
		t.Errorf("smoothers or rules change: %+v %+v", again.Smoothers, again.Rules)
	}
}

// everything uses each kind of key and value at least once.
const everything = `title = "all \"kinds\" of things, \u00b0C"
seed = 0x10
held-out = 1_000
replicates = 3
keep = "picks"
cells.n = [30]
truth.knots = {knots = {x = [0, 1, 3, 4.5], y = [1, -1e-7, 2.5e13, 0]}, domain = [0.5, 4]}
truth."by name" = {f = "doppler"}
[design]
b = {law = "beta", a = 0.5, b = 2, redraw = false, resolution = 0.01}
g = {law = "gap", from = 0.6, to = 0.8, left = 0.25}
n = {law = "normal", mean = 0.7, sd = 0.2}
[noise.t]
law = "student-t"
nu = 4
r2 = 0.9
scale = "1 + x"
ar1 = -0.5
[noise.c]
law = "contaminated"
fraction = 0.1
ratio = 5
signal-to-noise = 3
[[smoother]]
family = "local"
degree = 2
width = "bandwidth"
beyond = "hold"
df = [3, 4.5]
[[smoother]]
family = "kernel"
name = "a kernel"
df = 3
[[rule]]
kind = "kfold"
one-se = true
k = 5
[[rule]]
kind = "cp"
variance = "rice"
[[rule]]
kind = "fixed"
df = 4.5
`

func TestCanonicalFormIsTheSameStudy(t *testing.T) {
	for name, src := range map[string]string{"small": small, "everything": everything} {
		t.Run(name, func(t *testing.T) { sameAgain(t, parse(t, src)) })
	}
}

func TestDefaultLabelsSayWhatIsUnusual(t *testing.T) {
	s := parse(t, everything)
	var labels []string
	for _, m := range s.Smoothers {
		labels = append(labels, m.Name)
	}
	for _, m := range s.Rules {
		labels = append(labels, m.Name)
	}
	want := []string{"local degree 2 bandwidth hold", "a kernel", "kfold k 5 one-se", "cp rice", "fixed 4.5"}
	if !slices.Equal(labels, want) {
		t.Errorf("labels %q, want %q", labels, want)
	}
}
