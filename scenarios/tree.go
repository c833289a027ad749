package scenarios

// A nodeKind is what a node of the syntax tree holds.
type nodeKind uint8

const (
	badNode nodeKind = iota // has been reported; no more is to be said of it
	textNode
	integerNode
	decimalNode // floating point, inf and nan included
	boolNode
	dateNode // dates and times, of no use in a study
	listNode
	tableNode
)

// An origin is how a table came about; TOML lets only some be added to.
type origin uint8

const (
	literal origin = iota // a value: { … } or [ … ]
	header                // [a.b]
	implied               // a, by [a.b] alone
	dotted                // a, by a.b = …
	headers               // a list, by [[a]]
)

// A node is a value of the file.
type node struct {
	kind  nodeKind
	made  origin
	at    int     // byte offset of the value, or of the name in a table's header
	end   int     // byte offset behind the value; of no meaning for headers
	text  string  // a text's content, other scalars as written
	plain bool    // text that stands in the file as it is, one byte behind at
	items []*node // of a list
	keys  []entry // of a table, in file order
	index map[string]int
}

// An entry is a key of a table with its value.
type entry struct {
	name  string
	at    int // byte offset of the key
	value *node
}

// get returns the value of a key, or nil.
func (n *node) get(name string) *node {
	if i, ok := n.index[name]; ok {
		return n.keys[i].value
	}
	return nil
}

// put adds a key that the table does not have yet.
func (n *node) put(name string, at int, value *node) {
	if n.index == nil {
		n.index = make(map[string]int)
	}
	n.index[name] = len(n.keys)
	n.keys = append(n.keys, entry{name, at, value})
}

// where returns the offset of a key's value, or of the table where it has no such key.
func (n *node) where(name string) int {
	if v := n.get(name); v != nil {
		return v.at
	}
	return n.at
}

// inside returns the offset of byte i of a text in the file, or that of the text
// where its bytes do not stand there one by one.
func (n *node) inside(i int) int {
	if n.plain {
		return n.at + 1 + i
	}
	return n.at
}
