package scenarios

import (
	"bytes"
	"errors"
	"fmt"
	"regexp"
	"strings"
	"unicode"

	"github.com/pelletier/go-toml/v2/unstable"
)

// Limits on a file, so that one from somebody else cannot exhaust the machine.
const (
	mostBytes  = 1 << 20
	mostLevels = 20 // of lists and tables within each other
	mostSyntax = 20 // syntax faults after which reading stops
)

// A treeReader makes the syntax tree of a file. After a syntax fault it goes on at
// the next line that can begin something, so as to find the others.
type treeReader struct {
	src    *source
	parser unstable.Parser
	base   int // offset of the parser's text in the file
	passed int // offset up to which the file has been read
	root   *node
	here   *node // the table that keys go to: the last header's
	faults []Fault
	lossy  bool // a syntax fault may have hidden keys or tables
}

// readTree returns the tree and its faults: syntax, and what is defined twice. A lossy
// tree may lack keys and tables that the file has.
func readTree(src *source) (root *node, faults []Fault, lossy bool) {
	root = &node{kind: tableNode, made: header}
	r := &treeReader{src: src, root: root, here: root}
	from := 0
	if bytes.HasPrefix(src.text, []byte("\xef\xbb\xbf")) { // byte order mark
		from = 3
	}
	for syntaxFaults := 0; from >= 0 && syntaxFaults < mostSyntax; syntaxFaults++ {
		from = r.readFrom(from)
	}
	return root, r.faults, r.lossy
}

// readFrom reads from an offset on. It returns where to go on after a syntax fault,
// or -1 at the end.
func (r *treeReader) readFrom(from int) int {
	r.base, r.passed = from, from
	r.parser.Reset(r.src.text[from:len(r.src.text):len(r.src.text)])
	for r.parser.NextExpression() {
		r.expression(r.parser.Expression())
	}
	var err *unstable.ParserError
	if !errors.As(r.parser.Error(), &err) {
		return -1
	}
	at := r.base + int(r.parser.Range(err.Highlight).Offset)
	r.faults = append(r.faults, r.explain(at, err.Message))

	start := r.src.skipBlank(r.passed)
	further := r.src.lines[r.src.line(at)-1] > start // the fault is lines behind what it is in
	atEnd := at >= len(r.src.text)-1
	if key := keyForm.FindSubmatch(r.src.text[start:]); key != nil && !(atEnd && further) {
		if name := string(key[1]); r.here.get(name) == nil {
			r.here.put(name, start, &node{at: at})
		}
	} else {
		r.lossy = true
		if start < len(r.src.text) && r.src.text[start] == '[' {
			r.here = r.nowhere() // a header that cannot be read: nobody's keys follow
		}
	}
	switch {
	case atEnd:
		return -1
	case further:
		return r.src.lines[r.src.line(at)-1] // this line has a chance of its own
	}
	return r.src.nextLine(at)
}

// keyForm is a key whose value follows.
var keyForm = regexp.MustCompile(`^([A-Za-z0-9_-]+)[ \t]*=`)

// nowhere is a table for keys that belong to no table that is known.
func (r *treeReader) nowhere() *node { return &node{kind: tableNode, made: header} }

// explain turns the parser's message into a fault.
func (r *treeReader) explain(at int, msg string) Fault {
	atValue := strings.HasPrefix(msg, "expected keyword") || strings.HasSuffix(msg, "at start of value")
	if word := r.wordAt(at); atValue && word != "" {
		return syntaxFault(at, fmt.Sprintf("the word %s without quotes", shorten(word)), fmt.Sprintf("want %q", shorten(word)))
	}
	return syntaxFault(at, msg, "want TOML 1.0")
}

// wordAt returns the word that begins at an offset, or "".
func (r *treeReader) wordAt(at int) string {
	rest := r.src.text[min(at, len(r.src.text)):]
	n := bytes.IndexFunc(rest, func(c rune) bool { return !unicode.IsLetter(c) && c != '-' && c != '_' })
	if n < 0 {
		n = len(rest)
	}
	return strings.TrimLeft(string(rest[:n]), "-_")
}

// expression takes in one header or one key with its value.
func (r *treeReader) expression(n *unstable.Node) {
	path, end := r.path(n)
	if n.Kind == unstable.KeyValue {
		r.keyValue(r.here, n, mostLevels)
		r.passed = r.base + int(n.Raw.Offset+n.Raw.Length)
		return
	}
	r.here = r.header(path, n.Kind == unstable.ArrayTable)
	r.passed = r.src.nextLine(end) // nothing else may stand on a header's line
}

// path returns the dotted key of a header or of a key with a value, and its end.
func (r *treeReader) path(n *unstable.Node) (path []entry, end int) {
	for it := n.Key(); it.Next(); {
		raw := it.Node().Raw
		path = append(path, entry{name: string(it.Node().Data), at: r.base + int(raw.Offset)})
		end = r.base + int(raw.Offset+raw.Length)
	}
	return path, end
}

// header opens the table of a [header] or the next one of a [[header]].
func (r *treeReader) header(path []entry, list bool) *node {
	if len(path) > mostLevels {
		r.faults = append(r.faults, nestedTooDeep(path[0].at))
		return r.nowhere()
	}
	t := r.root
	for _, k := range path[:len(path)-1] {
		next := t.get(k.name)
		if next == nil {
			next = &node{kind: tableNode, made: implied, at: k.at}
			t.put(k.name, k.at, next)
		}
		if next.made == headers {
			next = next.items[len(next.items)-1]
		}
		if next.kind != tableNode || next.made == literal {
			return r.definedAgain(path, t, k)
		}
		t = next
	}
	last := path[len(path)-1]
	if list {
		return r.nextOf(path, t, last)
	}
	found := t.get(last.name)
	switch {
	case found == nil:
		found = &node{kind: tableNode, made: header, at: path[0].at}
		t.put(last.name, last.at, found)
	case found.made == implied:
		found.made, found.at = header, path[0].at
	default:
		return r.definedAgain(path, t, last)
	}
	return found
}

// nextOf adds a table to the list of tables at a key of t.
func (r *treeReader) nextOf(path []entry, t *node, k entry) *node {
	list := t.get(k.name)
	if list == nil {
		list = &node{kind: listNode, made: headers, at: k.at}
		t.put(k.name, k.at, list)
	}
	if list.made != headers {
		return r.definedAgain(path, t, k)
	}
	item := &node{kind: tableNode, made: header, at: path[0].at}
	list.items = append(list.items, item)
	return item
}

// definedAgain reports a header that collides with the key k of t.
func (r *treeReader) definedAgain(path []entry, t *node, k entry) *node {
	names := make([]string, len(path))
	for i, e := range path {
		names[i] = keyText(e.name)
	}
	first := t.keys[t.index[k.name]].at
	r.faults = append(r.faults, defined(path[0].at, "table "+shorten(strings.Join(names, ".")), r.src.line(first)))
	return r.nowhere()
}

// keyValue puts a key with its value into t.
func (r *treeReader) keyValue(t *node, n *unstable.Node, levels int) (ok bool) {
	path, end := r.path(n)
	levels -= len(path)
	if levels < 0 {
		r.faults = append(r.faults, nestedTooDeep(path[0].at))
		return false
	}
	for _, k := range path[:len(path)-1] {
		next := t.get(k.name)
		if next == nil {
			next = &node{kind: tableNode, made: dotted, at: k.at}
			t.put(k.name, k.at, next)
		}
		if next.made != dotted {
			return r.keyAgain(t, k)
		}
		t = next
	}
	last := path[len(path)-1]
	if t.get(last.name) != nil {
		return r.keyAgain(t, last)
	}
	equals := end + bytes.IndexByte(r.src.text[end:], '=')
	value, ok := r.value(n.Value(), equals+1, levels)
	t.put(last.name, last.at, value)
	return ok
}

// keyAgain reports a key that t has already.
func (r *treeReader) keyAgain(t *node, k entry) bool {
	first := t.keys[t.index[k.name]].at
	r.faults = append(r.faults, defined(k.at, "key "+shorten(keyText(k.name)), r.src.line(first)))
	return true
}

// scalarKind returns what the parser's scalar is here, or badNode if it is none.
func scalarKind(k unstable.Kind) nodeKind {
	switch k {
	case unstable.String:
		return textNode
	case unstable.Integer:
		return integerNode
	case unstable.Float:
		return decimalNode
	case unstable.Bool:
		return boolNode
	case unstable.LocalDate, unstable.LocalTime, unstable.LocalDateTime, unstable.DateTime:
		return dateNode
	}
	return badNode
}

// value returns the value that stands at or after from. The parser gives no place
// for lists, so they are walked. A value too deep is not ok, and no part of it is
// of use.
func (r *treeReader) value(n *unstable.Node, from, levels int) (v *node, ok bool) {
	if kind := scalarKind(n.Kind); kind != badNode {
		at := r.base + int(n.Raw.Offset)
		raw := r.parser.Raw(n.Raw)
		plain := len(raw) == len(n.Data)+2 && string(raw[1:len(raw)-1]) == string(n.Data)
		return &node{kind: kind, at: at, end: at + len(raw), text: string(n.Data), plain: plain}, true
	}
	at := r.src.skipBlank(from) // its bracket
	if levels == 0 {
		r.faults = append(r.faults, nestedTooDeep(at))
		return &node{at: at}, false
	}
	v = &node{kind: listNode, at: at, end: at + 1}
	if n.Kind == unstable.InlineTable {
		v.kind = tableNode
	}
	for it := n.Children(); it.Next(); {
		child := it.Node()
		if v.kind == tableNode {
			ok = r.keyValue(v, child, levels-1)
			v.end = r.base + int(child.Raw.Offset+child.Raw.Length)
		} else {
			var item *node
			item, ok = r.value(child, v.end, levels-1)
			v.items, v.end = append(v.items, item), item.end
		}
		if !ok {
			return &node{at: at}, false
		}
	}
	v.end = r.src.skipBlank(v.end) + 1
	return v, true
}
