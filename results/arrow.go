package results

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"

	"github.com/apache/arrow/go/v17/arrow"
	"github.com/apache/arrow/go/v17/arrow/array"
)

// Keys of the metadata of a table file.
const (
	metaVersion = "bendtest.schema_version"
	metaTable   = "bendtest.table"
	metaColumns = "bendtest.columns" // JSON: column → {unit, description}
)

// arrowSchema returns the Arrow schema of a table, documentation included.
func (t *Table[R]) arrowSchema() *arrow.Schema {
	type doc struct {
		Unit        string `json:"unit"`
		Description string `json:"description"`
	}
	var row R
	fields := make([]arrow.Field, len(t.columns))
	docs := make(map[string]doc, len(t.columns))
	for i, c := range t.columns {
		f := arrow.Field{Name: c.name}
		switch c.field(&row).(type) {
		case *string:
			f.Type = arrow.BinaryTypes.String
		case *int:
			f.Type = arrow.PrimitiveTypes.Int64
		case *float64:
			f.Type = arrow.PrimitiveTypes.Float64
		case *Number:
			f.Type, f.Nullable = arrow.PrimitiveTypes.Float64, true
		case *bool:
			f.Type = arrow.FixedWidthTypes.Boolean
		}
		f.Metadata = arrow.NewMetadata([]string{"unit", "description"}, []string{c.unit, c.doc})
		fields[i] = f
		docs[c.name] = doc{c.unit, c.doc}
	}
	text, err := json.Marshal(docs)
	if err != nil {
		panic(err) // strings alone
	}
	meta := arrow.NewMetadata([]string{metaVersion, metaTable, metaColumns}, []string{SchemaVersion, t.Name, string(text)})
	return arrow.NewSchema(fields, &meta)
}

// appendRow appends a row to a record in the making. NaN is refused: a figure that is
// missing is null.
func (t *Table[R]) appendRow(b *array.RecordBuilder, row *R) error {
	for i := range t.columns {
		c := &t.columns[i]
		if err := appendField(b.Field(i), c.field(row)); err != nil {
			return fmt.Errorf("column %s: %w", c.name, err)
		}
	}
	return nil
}

var errNaN = errors.New("the figure is not a number")

// appendField appends one field's value to its column.
func appendField(b array.Builder, field any) error {
	switch v := field.(type) {
	case *string:
		b.(*array.StringBuilder).Append(*v)
	case *int:
		b.(*array.Int64Builder).Append(int64(*v))
	case *bool:
		b.(*array.BooleanBuilder).Append(*v)
	case *float64:
		if math.IsNaN(*v) {
			return errNaN
		}
		b.(*array.Float64Builder).Append(*v)
	case *Number:
		if !v.Known {
			b.AppendNull()
			return nil
		}
		if math.IsNaN(v.Value) {
			return errNaN
		}
		b.(*array.Float64Builder).Append(v.Value)
	}
	return nil
}

// rows calls yield with each row of a record, in order.
func (t *Table[R]) rows(record arrow.Record, yield func(*R) error) error {
	fields, err := t.place(record.Schema())
	if err != nil {
		return err
	}
	var row R
	for i := range int(record.NumRows()) {
		for k := range t.columns {
			if err := setField(t.columns[k].field(&row), record.Column(fields[k]), i); err != nil {
				return fmt.Errorf("table %s, column %s: %w", t.Name, t.columns[k].name, err)
			}
		}
		if err := yield(&row); err != nil {
			return err
		}
	}
	return nil
}

// place finds the table's columns in a file's schema.
func (t *Table[R]) place(schema *arrow.Schema) ([]int, error) {
	at := make([]int, len(t.columns))
	for k, c := range t.columns {
		found := schema.FieldIndices(c.name)
		if len(found) != 1 {
			return nil, fmt.Errorf("not a table %s of this version: no column %s", t.Name, c.name)
		}
		at[k] = found[0]
	}
	return at, nil
}

// setField reads entry i of a column into a field.
func setField(field any, column arrow.Array, i int) error {
	ok := false
	switch v := field.(type) {
	case *string:
		var c *array.String
		if c, ok = column.(*array.String); ok {
			*v = c.Value(i)
		}
	case *int:
		var c *array.Int64
		if c, ok = column.(*array.Int64); ok {
			*v = int(c.Value(i))
		}
	case *bool:
		var c *array.Boolean
		if c, ok = column.(*array.Boolean); ok {
			*v = c.Value(i)
		}
	case *float64:
		var c *array.Float64
		if c, ok = column.(*array.Float64); ok {
			*v = c.Value(i)
		}
	case *Number:
		var c *array.Float64
		if c, ok = column.(*array.Float64); ok {
			*v = Number{}
			if c.IsValid(i) {
				*v = Num(c.Value(i))
			}
		}
	}
	if !ok {
		return fmt.Errorf("unexpected type %s", column.DataType())
	}
	return nil
}
