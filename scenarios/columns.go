package scenarios

import (
	"bufio"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"unicode"

	"bendtest/sim"
)

// Limits on a file of values.
const (
	mostCSVBytes  = 256 << 20
	mostCSVFaults = 10
)

// ReadColumns reads columns of numbers from comma-separated text. A column is asked
// for by its name in the header or by its 1-based number; "" stands for the column
// whose number is the request's place in the list. The first line is a header if a
// column asked for has a word there instead of a number. Lines that begin with #
// and empty lines are passed over. All columns returned have one length.
func ReadColumns(name string, r io.Reader, columns ...string) ([][]float64, Faults) {
	c, bad := openColumns(name, r)
	if bad != nil {
		return nil, Faults{*bad}
	}
	at := make([]int, len(columns))
	var faults Faults
	for i, column := range columns {
		if column == "" {
			column = strconv.Itoa(i + 1)
		}
		k, ok := c.find(column)
		if !ok {
			f := wordUnknown(0, "column", column, c.known())
			f.File, f.Line, f.Col, f.Src = name, c.line, 1, ""
			faults = append(faults, f)
		}
		at[i] = k
	}
	if len(faults) > 0 {
		return nil, faults
	}
	values, more := c.values(at)
	if len(more) > 0 {
		return nil, more
	}
	return values, nil
}

// load fills a column with the values of its file, as the table t of the study has it.
func (r *reader) load(t *node, column *sim.Column) bool {
	fileNode := t.get("file")
	path := column.File
	if !filepath.IsAbs(path) {
		path = filepath.Join(filepath.Dir(r.src.name), path)
	}
	open := r.voc.Open
	if open == nil {
		open = func(path string) (io.ReadCloser, error) { return os.Open(path) }
	}
	file, err := open(path)
	if err != nil {
		return r.fault(fileUnreadable(fileNode.at, column.File, reason(err)))
	}
	defer file.Close()

	c, bad := openColumns(path, file)
	if bad != nil {
		bad.at = fileNode.at
		return r.fault(*bad)
	}
	wanted := column.Column
	if wanted == "" {
		wanted = "1"
	}
	at, ok := c.find(wanted)
	if !ok {
		return r.fault(wordUnknown(t.where("column"), "column", wanted, c.known()))
	}
	values, faults := c.values([]int{at})
	for _, f := range faults {
		f.at = fileNode.at
		r.fault(f)
	}
	if len(faults) > 0 {
		return false
	}
	column.Values = values[0]
	return true
}

// reason is why a file cannot be opened; its path is said anyway.
func reason(err error) string {
	if errors.Is(err, fs.ErrNotExist) {
		return "there is no such file"
	}
	if inner := errors.Unwrap(err); inner != nil {
		err = inner
	}
	return err.Error()
}

// A columnReader reads numbers from comma-separated text.
type columnReader struct {
	name   string
	bytes  *io.LimitedReader
	csv    *csv.Reader
	first  []string // the first record
	line   int      // its line
	faults []Fault
}

// openColumns reads the first record.
func openColumns(name string, r io.Reader) (*columnReader, *Fault) {
	limited := &io.LimitedReader{R: r, N: mostCSVBytes}
	text := bufio.NewReader(limited)
	if mark, _ := text.Peek(3); string(mark) == "\xef\xbb\xbf" { // byte order mark
		text.Discard(3)
	}
	c := &columnReader{name: name, bytes: limited, csv: csv.NewReader(text)}
	c.csv.Comment = '#'
	c.csv.TrimLeadingSpace = true
	first, err := c.csv.Read()
	if err != nil {
		c.csvFault(err)
		return nil, &c.faults[0]
	}
	c.first = first
	c.line, _ = c.csv.FieldPos(0)
	return c, nil
}

// csvFault notes what the CSV reader complains of, and reports whether reading can
// go on.
func (c *columnReader) csvFault(err error) bool {
	var bad *csv.ParseError
	switch {
	case errors.Is(err, io.EOF):
		c.faults = append(c.faults, columnFault(c.name, 1, 1, "no line of values", "at least one"))
	case !errors.As(err, &bad):
		c.faults = append(c.faults, columnFault(c.name, 1, 1, err.Error(), "a file that can be read"))
	case errors.Is(err, csv.ErrFieldCount):
		c.faults = append(c.faults, columnFault(c.name, bad.Line, 1, "another number of fields", fmt.Sprintf("%d, as on line %d", len(c.first), c.line)))
		return true
	default:
		c.faults = append(c.faults, columnFault(c.name, bad.Line, max(1, bad.Column), bad.Err.Error(), "comma-separated values"))
	}
	return false
}

// find returns the index of a column by its name in the first record or its number.
func (c *columnReader) find(column string) (int, bool) {
	for i, name := range c.first {
		if strings.TrimSpace(name) == column {
			return i, true
		}
	}
	k, err := strconv.Atoi(column)
	return k - 1, err == nil && k >= 1 && k <= len(c.first)
}

// known lists what columns may be asked for.
func (c *columnReader) known() []string {
	var known []string
	for i, name := range c.first {
		known = append(known, strconv.Itoa(i+1))
		if isHeader(name) {
			known = append(known, strings.TrimSpace(name))
		}
	}
	return known
}

// isHeader reports whether a field of the first line is the name of a column: a word,
// though not one that stands for a missing number.
func isHeader(s string) bool {
	s = strings.TrimSpace(s)
	if _, err := strconv.ParseFloat(s, 64); err == nil || strings.IndexFunc(s, unicode.IsLetter) < 0 {
		return false
	}
	return !strings.EqualFold(s, "na") && !strings.EqualFold(s, "n/a") && !strings.EqualFold(s, "null")
}

// values reads the columns at the given indices to the end.
func (c *columnReader) values(at []int) ([][]float64, []Fault) {
	values := make([][]float64, len(at))
	record := c.first
	for _, k := range at {
		if isHeader(c.first[k]) {
			record = nil
		}
	}
	if record != nil {
		c.take(values, record, at)
	}
	c.csv.ReuseRecord = true
	for len(c.faults) < mostCSVFaults {
		record, err := c.csv.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err == nil {
			c.take(values, record, at)
		} else if !c.csvFault(err) {
			break
		}
	}
	if c.bytes.N <= 0 {
		c.faults = append(c.faults, columnFault(c.name, 1, 1, "a larger file", fmt.Sprintf("at most %d bytes", mostCSVBytes)))
	}
	if len(c.faults) == 0 && len(at) > 0 && len(values[0]) == 0 {
		c.faults = append(c.faults, columnFault(c.name, c.line, 1, "no line of values under the header", "at least one"))
	}
	return values, c.faults
}

// take adds the numbers of one record.
func (c *columnReader) take(values [][]float64, record []string, at []int) {
	for i, k := range at {
		v, err := strconv.ParseFloat(strings.TrimSpace(record[k]), 64)
		if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
			line, col := c.csv.FieldPos(k)
			c.faults = append(c.faults, columnFault(c.name, line, col, fmt.Sprintf("%q is not a finite number", shorten(record[k])), "one"))
			continue
		}
		values[i] = append(values[i], v)
	}
}
