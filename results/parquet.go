package results

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/apache/arrow/go/v17/arrow"
	"github.com/apache/arrow/go/v17/arrow/array"
	"github.com/apache/arrow/go/v17/arrow/memory"
	"github.com/apache/arrow/go/v17/parquet"
	"github.com/apache/arrow/go/v17/parquet/compress"
	"github.com/apache/arrow/go/v17/parquet/file"
	"github.com/apache/arrow/go/v17/parquet/pqarrow"
)

// rowGroup is the number of rows per row group. It is fixed, so that the bytes of a
// table do not depend on how its rows arrive.
const rowGroup = 1 << 16

// A Writer appends rows to a Parquet file, a row group at a time.
type Writer[R any] struct {
	table   *Table[R]
	file    *pqarrow.FileWriter
	builder *array.RecordBuilder
	rows    int // in the builder
	total   int
}

// NewWriter starts a Parquet file of the table on w.
func (t *Table[R]) NewWriter(w io.Writer) (*Writer[R], error) {
	schema := t.arrowSchema()
	props := parquet.NewWriterProperties(
		parquet.WithCompression(compress.Codecs.Zstd),
		parquet.WithVersion(parquet.V2_LATEST),
		parquet.WithCreatedBy("bendtest"),
		parquet.WithMaxRowGroupLength(rowGroup),
	)
	f, err := pqarrow.NewFileWriter(schema, w, props, pqarrow.NewArrowWriterProperties(pqarrow.WithStoreSchema()))
	if err != nil {
		return nil, fmt.Errorf("table %s: %w", t.Name, err)
	}
	return &Writer[R]{table: t, file: f, builder: array.NewRecordBuilder(memory.DefaultAllocator, schema)}, nil
}

// Append adds a row. NaN is refused: a figure that is missing is null.
func (w *Writer[R]) Append(row *R) error {
	if err := w.table.appendRow(w.builder, row); err != nil {
		return fmt.Errorf("table %s, row %d, %w", w.table.Name, w.total, err)
	}
	w.rows++
	w.total++
	if w.rows == rowGroup {
		return w.flush()
	}
	return nil
}

// flush writes the buffered rows as a row group.
func (w *Writer[R]) flush() error {
	record := w.builder.NewRecord()
	defer record.Release()
	w.rows = 0
	return w.file.Write(record)
}

// Close writes what is buffered and the file's foot. It does not close the
// underlying writer.
func (w *Writer[R]) Close() error {
	defer w.builder.Release()
	if w.rows > 0 || w.total == 0 {
		if err := w.flush(); err != nil {
			return err
		}
	}
	return w.file.Close()
}

// Read calls yield with each row of a Parquet file of the table, in order. The row
// is overwritten by the next one. It stops at the first error.
func (t *Table[R]) Read(r parquet.ReaderAtSeeker, yield func(*R) error) error {
	return eachRecord(r, func(record arrow.Record) error { return t.rows(record, yield) })
}

// eachRecord calls yield with the records of a Parquet file in order.
func eachRecord(r parquet.ReaderAtSeeker, yield func(arrow.Record) error) error {
	f, err := file.NewParquetReader(r)
	if err != nil {
		return fmt.Errorf("not a Parquet file: %w", err)
	}
	defer f.Close()
	reader, err := pqarrow.NewFileReader(f, pqarrow.ArrowReadProperties{BatchSize: 1 << 13}, memory.DefaultAllocator)
	if err != nil {
		return err
	}
	records, err := reader.GetRecordReader(context.Background(), nil, nil)
	if err != nil {
		return err
	}
	defer records.Release()
	for records.Next() {
		if err := yield(records.Record()); err != nil {
			return err
		}
	}
	if err := records.Err(); err != nil && !errors.Is(err, io.EOF) {
		return err
	}
	return nil
}
