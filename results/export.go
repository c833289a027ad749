package results

import (
	"bufio"
	"encoding/csv"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"

	"github.com/apache/arrow/go/v17/arrow"
	"github.com/apache/arrow/go/v17/arrow/array"
	"github.com/apache/arrow/go/v17/arrow/ipc"
)

// A Format is a form in which a table can be exported.
type Format struct {
	Name  string
	Doc   string
	write func(f *os.File, w io.Writer) error
}

// Formats returns all export formats.
func Formats() []Format {
	return []Format{
		{"csv", "comma-separated with a head; null is empty, infinities are inf and -inf", exportCSV},
		{"arrow", "an Arrow IPC file", exportArrow},
		{"parquet", "the Parquet file as it stands", exportParquet},
		{"json", `one JSON object per line; infinities are the strings "inf" and "-inf"`, exportJSON},
	}
}

// A NoTableError says that a run has no table of a name.
type NoTableError struct {
	Name  string
	There []string // the tables that are there
}

func (e *NoTableError) Error() string {
	return fmt.Sprintf("no table %q in this run; there are: %s", e.Name, strings.Join(e.There, ", "))
}

// Export writes a table in a format to w.
func (d *Dir) Export(table string, format Format, w io.Writer) error {
	there, err := d.TableNames()
	if err != nil {
		return err
	}
	if !slices.Contains(there, table) {
		return &NoTableError{table, there}
	}
	f, err := os.Open(d.TablePath(table))
	if err != nil {
		return err
	}
	defer f.Close()
	return format.write(f, w)
}

func exportParquet(f *os.File, w io.Writer) error {
	_, err := io.Copy(w, f)
	return err
}

// exportArrow writes an IPC file, whose foot lists the record batches.
func exportArrow(f *os.File, w io.Writer) error {
	var out *ipc.FileWriter
	err := eachRecord(f, func(r arrow.Record) (err error) {
		if out == nil {
			if out, err = ipc.NewFileWriter(&tail{w: w}, ipc.WithSchema(r.Schema())); err != nil {
				return err
			}
		}
		return out.Write(r)
	})
	if err == nil && out != nil {
		err = out.Close()
	}
	return err
}

// A tail is a writer that knows its position, all that an IPC file asks of Seek, so
// that it can be written to a pipe.
type tail struct {
	w  io.Writer
	at int64
}

func (t *tail) Write(p []byte) (int, error) {
	n, err := t.w.Write(p)
	t.at += int64(n)
	return n, err
}

func (t *tail) Seek(offset int64, whence int) (int64, error) {
	if offset != 0 || whence != io.SeekCurrent {
		return 0, errors.New("results: a tail cannot seek")
	}
	return t.at, nil
}

func exportCSV(f *os.File, w io.Writer) error {
	out := csv.NewWriter(w)
	head := false
	var line []string
	err := eachRecord(f, func(r arrow.Record) error {
		if !head {
			head = true
			for _, field := range r.Schema().Fields() {
				line = append(line, field.Name)
			}
			if err := out.Write(line); err != nil {
				return err
			}
		}
		for i := range int(r.NumRows()) {
			for k := range line {
				line[k] = plainText(r.Column(k), i)
			}
			if err := out.Write(line); err != nil {
				return err
			}
		}
		return nil
	})
	out.Flush()
	if err == nil {
		err = out.Error()
	}
	return err
}

// plainText writes entry i of a column for CSV.
func plainText(column arrow.Array, i int) string {
	if column.IsNull(i) {
		return ""
	}
	switch c := column.(type) {
	case *array.String:
		return c.Value(i)
	case *array.Int64:
		return strconv.FormatInt(c.Value(i), 10)
	case *array.Boolean:
		return strconv.FormatBool(c.Value(i))
	case *array.Float64:
		return realText(c.Value(i))
	}
	panic("results: a column of type " + column.DataType().String())
}

// realText writes a real to the last bit, shortest first.
func realText(v float64) string {
	switch {
	case math.IsInf(v, 1):
		return "inf"
	case math.IsInf(v, -1):
		return "-inf"
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

func exportJSON(f *os.File, w io.Writer) error {
	out := bufio.NewWriter(w)
	err := eachRecord(f, func(r arrow.Record) error {
		fields := r.Schema().Fields()
		for i := range int(r.NumRows()) {
			out.WriteByte('{')
			for k := range fields {
				if k > 0 {
					out.WriteByte(',')
				}
				out.WriteString(jsonText(fields[k].Name))
				out.WriteByte(':')
				out.WriteString(jsonValue(r.Column(k), i))
			}
			if _, err := out.WriteString("}\n"); err != nil {
				return err
			}
		}
		return nil
	})
	if err == nil {
		err = out.Flush()
	}
	return err
}

// jsonValue writes entry i of a column for JSON.
func jsonValue(column arrow.Array, i int) string {
	if column.IsNull(i) {
		return "null"
	}
	text := plainText(column, i)
	switch c := column.(type) {
	case *array.String:
		return jsonText(text)
	case *array.Float64:
		if math.IsInf(c.Value(i), 0) {
			return jsonText(text)
		}
	}
	return text
}

// jsonText writes a JSON string.
func jsonText(s string) string {
	b, err := json.Marshal(s)
	if err != nil {
		panic(err) // strings always marshal
	}
	return string(b)
}
