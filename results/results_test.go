package results

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// someFits returns n rows with missing and infinite figures among them.
func someFits(n int) []Fit {
	rows := make([]Fit, n)
	for i := range rows {
		rows[i] = Fit{
			Cell: fmt.Sprintf("a/b/c/n=%d", i/1000), Replicate: i / 10, Smoother: "local \"x\", y", DF: 2 + float64(i%10),
			TrS: Num(2 + float64(i%10) + 1e-9), Status: "ok", GCV: Num(math.Inf(1)), AIC: Num(math.Inf(-1)),
			HeldoutMSE: Num(math.Sqrt(float64(i))), HeldoutNoise: Num(0.1),
		}
		if i%7 == 0 {
			rows[i].Status, rows[i].TrS, rows[i].Note = "df-unattainable", Number{}, "é\n"
		}
	}
	return rows
}

func somePicks(n int) []Pick {
	rows := make([]Pick, n)
	for i := range rows {
		rows[i] = Pick{Cell: "a/b/c/n=0", Replicate: i, Smoother: "s", Rule: "gcv, inflated", DF: Num(5), Regret: Num(1 + 1/float64(i+1)), AtEdge: i%3 == 0, Status: "ok"}
	}
	return rows
}

func newDir(t *testing.T) *Dir {
	t.Helper()
	d, err := Create(filepath.Join(t.TempDir(), "run"))
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { d.Close() })
	return d
}

func TestRowsSurviveATable(t *testing.T) {
	d := newDir(t)
	want := someFits(3000)
	if err := WriteRows(d, Fits, want); err != nil {
		t.Fatal(err)
	}
	got, err := ReadRows(d, Fits)
	if err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(got, want) {
		t.Error("rows differ after reading")
	}
	if err := WriteRows(d, Picks, []Pick{}); err != nil {
		t.Fatal(err)
	}
	if empty, err := ReadRows(d, Picks); err != nil || len(empty) != 0 {
		t.Errorf("an empty table reads as %d rows, %v", len(empty), err)
	}
}

// Rows in two row groups, written at once and in other pieces.
func TestSameRowsGiveTheSameBytes(t *testing.T) {
	rows := someFits(rowGroup + 500)
	var first []byte
	for _, piece := range []int{len(rows), 777} {
		d := newDir(t)
		err := WriteTable(d, Fits, func(add func(*Fit) error) error {
			for part := range slices.Chunk(rows, piece) {
				for i := range part {
					if err := add(&part[i]); err != nil {
						return err
					}
				}
			}
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
		data, err := os.ReadFile(d.TablePath("fits"))
		if err != nil {
			t.Fatal(err)
		}
		if first != nil && !bytes.Equal(first, data) {
			t.Error("bytes differ")
		}
		first = data
	}
}

func TestNotANumberIsRefusedWithItsPlace(t *testing.T) {
	d := newDir(t)
	rows := someFits(5)
	rows[3].ASEInside = Num(math.NaN())
	err := WriteRows(d, Fits, rows)
	if err == nil || !strings.Contains(err.Error(), "row 3, column ase_inside") {
		t.Errorf("error = %v", err)
	}
	if _, err := os.Stat(d.TablePath("fits")); !errors.Is(err, fs.ErrNotExist) {
		t.Error("a half-written table is there")
	}
}

func TestEveryColumnIsDocumented(t *testing.T) {
	for _, table := range Tables() {
		seen := map[string]bool{}
		for _, c := range table.Columns {
			if c.Description == "" || c.Type == "" || seen[c.Column] || c.Column != strings.ToLower(c.Column) {
				t.Errorf("%s.%s: %+v", table.Name, c.Column, c)
			}
			seen[c.Column] = true
		}
	}
	if n := len(ColumnRows(nil)); n < 60 {
		t.Errorf("%d columns documented", n)
	}
}

func TestPartsSurviveAndBreakingThemIsFound(t *testing.T) {
	d := newDir(t)
	part := &Part{Fits: someFits(40), Picks: somePicks(9), Moments: []Moment{{Slot: 3, Count: 2, Mean: 0.5, M2: 7}}}
	if ok, err := d.CheckPart("k"); ok || err != nil {
		t.Fatalf("a part that is not there: %v, %v", ok, err)
	}
	if err := d.WritePart("k", part); err != nil {
		t.Fatal(err)
	}
	var got Part
	err := d.ReadPart("k", PartReader{
		Fit:    func(f *Fit) error { got.Fits = append(got.Fits, *f); return nil },
		Pick:   func(p *Pick) error { got.Picks = append(got.Picks, *p); return nil },
		Moment: func(m *Moment) error { got.Moments = append(got.Moments, *m); return nil },
	})
	if err != nil || !slices.Equal(got.Fits, part.Fits) || !slices.Equal(got.Picks, part.Picks) || !slices.Equal(got.Moments, part.Moments) {
		t.Errorf("part differs after reading (%v)", err)
	}
	whole, err := os.ReadFile(d.partPath("k"))
	if err != nil {
		t.Fatal(err)
	}
	breakAt := func(name string, data []byte) {
		t.Helper()
		if err := os.WriteFile(d.partPath("k"), data, 0o644); err != nil {
			t.Fatal(err)
		}
		var broken *BrokenPartError
		if ok, err := d.CheckPart("k"); ok || !errors.As(err, &broken) {
			t.Errorf("%s: %v, %v", name, ok, err)
		}
	}
	for at := 0; at < len(whole); at += 1 + len(whole)/300 {
		flipped := slices.Clone(whole)
		flipped[at] ^= 1 << (at % 8)
		breakAt(fmt.Sprintf("bit flipped at %d", at), flipped)
		breakAt(fmt.Sprintf("cut at %d", at), whole[:at])
	}
	breakAt("a byte more", append(slices.Clone(whole), 0))
}

var errDisk = errors.New("the disk fails")

// A failingDisk fails at its k-th operation and works otherwise.
type failingDisk struct {
	osDisk
	left int
}

func (d *failingDisk) step() error {
	d.left--
	if d.left == 0 {
		return errDisk
	}
	return nil
}

func (d *failingDisk) CreateTemp(dir, pattern string) (tempFile, error) {
	if err := d.step(); err != nil {
		return nil, err
	}
	f, err := d.osDisk.CreateTemp(dir, pattern)
	return &failingFile{f, d}, err
}

func (d *failingDisk) Rename(from, to string) error {
	if err := d.step(); err != nil {
		return err
	}
	return d.osDisk.Rename(from, to)
}

func (d *failingDisk) SyncDir(dir string) error {
	if err := d.step(); err != nil {
		return err
	}
	return d.osDisk.SyncDir(dir)
}

type failingFile struct {
	tempFile
	disk *failingDisk
}

// Write fails half-way, as a full disk does.
func (f *failingFile) Write(p []byte) (int, error) {
	if err := f.disk.step(); err != nil {
		n, _ := f.tempFile.Write(p[:len(p)/2])
		return n, err
	}
	return f.tempFile.Write(p)
}

func (f *failingFile) Sync() error {
	if err := f.disk.step(); err != nil {
		return err
	}
	return f.tempFile.Sync()
}

// Whatever operation fails, the table holds all of the old or all of the new rows,
// the error is reported, and nothing half-made is left.
func TestAFailingDiskLeavesNothingHalfWritten(t *testing.T) {
	old, fresh := someFits(10), someFits(5000)
	failures := 0
	for k := 1; ; k++ {
		root := filepath.Join(t.TempDir(), "run")
		disk := &failingDisk{}
		d, err := create(root, disk)
		if err != nil {
			t.Fatal(err)
		}
		if err := WriteRows(d, Fits, old); err != nil {
			t.Fatal(err)
		}
		disk.left = k
		err = WriteRows(d, Fits, fresh)
		if err != nil && !errors.Is(err, errDisk) {
			t.Fatalf("operation %d: %v", k, err)
		}
		got, readErr := ReadRows(d, Fits)
		if readErr != nil || !slices.Equal(got, old) && !slices.Equal(got, fresh) {
			t.Errorf("operation %d: table is neither old nor new (%v)", k, readErr)
		}
		if left, _ := filepath.Glob(filepath.Join(root, "*", "*"+temporary+"*")); len(left) > 0 {
			t.Errorf("operation %d: left behind %v", k, left)
		}
		d.Close()
		if err == nil {
			break
		}
		failures++
	}
	if failures < 5 {
		t.Errorf("only %d operations could fail", failures)
	}
}

func TestForeignDirectoriesAreRefused(t *testing.T) {
	root := t.TempDir()
	if err := os.WriteFile(filepath.Join(root, "thesis.txt"), nil, 0o644); err != nil {
		t.Fatal(err)
	}
	var foreign *ForeignDirError
	if _, err := Create(root); !errors.As(err, &foreign) {
		t.Errorf("error = %v", err)
	}
	if entries, _ := os.ReadDir(root); len(entries) != 1 {
		t.Errorf("the directory was touched: %v", entries)
	}
}

func TestOneWriterPerDirectory(t *testing.T) {
	root := filepath.Join(t.TempDir(), "run")
	d, err := Create(root)
	if err != nil {
		t.Fatal(err)
	}
	var locked *LockedError
	if _, err := Create(root); !errors.As(err, &locked) {
		t.Errorf("a second writer: %v", err)
	}
	d.Close()
	again, err := Create(root)
	if err != nil {
		t.Fatalf("after the first let go: %v", err)
	}
	again.Close()
}

func TestWhatACrashLeftIsSweptAway(t *testing.T) {
	root := filepath.Join(t.TempDir(), "run")
	d, err := Create(root)
	if err != nil {
		t.Fatal(err)
	}
	if err := d.WriteManifest(&Manifest{Study: "x"}); err != nil {
		t.Fatal(err)
	}
	d.Close()
	stray := filepath.Join(root, partsFolder, "k.part"+temporary+"123")
	if err := os.WriteFile(stray, []byte("half"), 0o644); err != nil {
		t.Fatal(err)
	}
	d, err = Create(root)
	if err != nil {
		t.Fatal(err)
	}
	defer d.Close()
	if _, err := os.Stat(stray); !errors.Is(err, fs.ErrNotExist) {
		t.Error("a half-made file is still there")
	}
	if m, err := d.ReadManifest(); err != nil || m.Study != "x" {
		t.Errorf("manifest %+v, %v", m, err)
	}
}

func TestExportsAgree(t *testing.T) {
	d := newDir(t)
	rows := someFits(20)
	if err := WriteRows(d, Fits, rows); err != nil {
		t.Fatal(err)
	}
	out := map[string]*bytes.Buffer{}
	for _, f := range Formats() {
		out[f.Name] = &bytes.Buffer{}
		if err := d.Export("fits", f, out[f.Name]); err != nil {
			t.Fatalf("%s: %v", f.Name, err)
		}
	}
	lines, err := csv.NewReader(out["csv"]).ReadAll()
	if err != nil || len(lines) != 21 {
		t.Fatalf("csv: %d lines, %v", len(lines), err)
	}
	at := func(name string) int { return slices.Index(lines[0], name) }
	objects := json.NewDecoder(out["json"])
	for i, r := range rows {
		line := lines[i+1]
		var object map[string]any
		if err := objects.Decode(&object); err != nil {
			t.Fatal(err)
		}
		if line[at("gcv")] != "inf" || object["gcv"] != "inf" || line[at("aic")] != "-inf" || object["aic"] != "-inf" {
			t.Errorf("row %d: infinities are %q, %v", i, line[at("gcv")], object["gcv"])
		}
		if line[at("smoother")] != r.Smoother || object["note"] != r.Note {
			t.Errorf("row %d: text is %q, %v", i, line[at("smoother")], object["note"])
		}
		if r.TrS.Known != (line[at("tr_s")] != "") || r.TrS.Known != (object["tr_s"] != nil) {
			t.Errorf("row %d: tr_s is %q, %v", i, line[at("tr_s")], object["tr_s"])
		}
		if got := object["heldout_mse"].(float64); got != r.HeldoutMSE.Value || line[at("heldout_mse")] != realText(got) {
			t.Errorf("row %d: heldout_mse is %v", i, got)
		}
	}
	if !bytes.HasPrefix(out["arrow"].Bytes(), []byte("ARROW1")) || !bytes.HasPrefix(out["parquet"].Bytes(), []byte("PAR1")) {
		t.Error("a binary export has the wrong head")
	}
	var none *NoTableError
	if err := d.Export("fit", Formats()[0], &bytes.Buffer{}); !errors.As(err, &none) || !slices.Contains(none.There, "fits") {
		t.Errorf("a table that is not there: %v", err)
	}
}

func BenchmarkPartEncoding(b *testing.B) {
	part := &Part{Fits: someFits(7000), Picks: somePicks(700)}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := part.encode(); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/7000, "ns/fit")
}
