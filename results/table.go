package results

import "fmt"

// SchemaVersion is the version of all tables together. It changes whenever a column
// changes its name, type or meaning, or is taken away.
const SchemaVersion = "1"

// A Table is the definition of one table over rows of type R.
type Table[R any] struct {
	Name    string
	Doc     string
	columns []column[R]
}

// A column is one column of a table. field returns a pointer to the row's field:
// *string, *int, *float64, *bool, or *Number for figures that may be missing.
type column[R any] struct {
	name  string
	unit  string
	doc   string
	field func(*R) any
}

// typeOf returns the type of a column as people and the table columns see it.
func (c *column[R]) typeOf() string {
	var row R
	switch c.field(&row).(type) {
	case *string:
		return "text"
	case *int:
		return "integer"
	case *float64:
		return "real"
	case *Number:
		return "real or null"
	case *bool:
		return "true or false"
	}
	panic(fmt.Sprintf("results: column %s has no table type", c.name))
}

// Columns returns the documentation of the table's columns, in order.
func (t *Table[R]) Columns() []ColumnDoc {
	docs := make([]ColumnDoc, len(t.columns))
	for i := range t.columns {
		c := &t.columns[i]
		docs[i] = ColumnDoc{Table: t.Name, Column: c.name, Type: c.typeOf(), Unit: c.unit, Description: c.doc}
	}
	return docs
}

// A TableDoc documents one table.
type TableDoc struct {
	Name    string
	Doc     string
	Columns []ColumnDoc
}

// Tables returns the documentation of all tables, in the order in which they are
// listed to people.
func Tables() []TableDoc {
	return []TableDoc{
		docOf(Cells), docOf(Fits), docOf(Picks), docOf(Summaries), docOf(Choices), docOf(Differences),
		docOf(Rungs), docOf(Curves), docOf(Tests), docOf(Audits), docOf(Verdicts), docOf(Timings), docOf(ColumnDocs),
	}
}

func docOf[R any](t *Table[R]) TableDoc { return TableDoc{t.Name, t.Doc, t.Columns()} }

// ColumnRows returns the rows of the table columns for a study with its own columns of
// fits.
func ColumnRows(variants []Variant) []ColumnDoc {
	var rows []ColumnDoc
	for _, t := range Tables() {
		if t.Name == Fits.Name {
			t = docOf(FitsWith(variants))
		}
		rows = append(rows, t.Columns...)
	}
	return rows
}
