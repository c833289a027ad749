package scenarios

import (
	"fmt"
	"reflect"
	"slices"
	"strconv"
	"strings"

	"bendtest/sim/expr"
)

// A reader takes values out of the syntax tree and collects the faults it finds.
type reader struct {
	src    *source
	voc    Vocabulary
	faults []Fault
	lossy  bool // the tree may lack keys that the file has
}

// fault adds a fault and returns false, the "no value" of most methods here.
func (r *reader) fault(f Fault) bool {
	r.faults = append(r.faults, f)
	return false
}

// A special is an option with a syntax of its own.
type special interface {
	// describe says what a study file may hold, for people.
	describe() string
	// read takes the value from a node, reporting faults to r.
	read(r *reader, key string, n *node) bool
	// text is the value as a study file would have it, or "".
	text() string
}

// fill reads a table into the options of structs. where says where the table is, as
// in "in [cells]". Keys among also are passed over. It reports whether all went well.
func (r *reader) fill(t *node, where string, also []string, structs ...any) bool {
	fields := fieldsOf(structs...)
	ok := true
	meant := make(map[string]bool) // keys that unknown ones look like
	for _, k := range t.keys {
		switch i := indexOf(fields, k.name); {
		case i >= 0:
			ok = r.read(&fields[i], k.name, k.value) && ok
		case !slices.Contains(also, k.name):
			known := slices.Sorted(slices.Values(append(namesOf(fields), also...)))
			f := keyUnknown(k.at, k.name, where, slices.Compact(known))
			meant[f.Near] = true
			ok = r.fault(f)
		}
	}
	for _, f := range fields {
		switch {
		case !f.Required || t.get(f.Name) != nil:
		case meant[f.Name]:
			ok = false
		case f.value.Type() == reflect.TypeFor[*node]():
			ok = r.absent(t.at, f.Type, where, "want "+f.Doc)
		default:
			ok = r.absent(t.at, f.Name, where, "want "+f.want())
		}
	}
	return ok
}

// absent reports a key that has to be there. In a lossy tree nothing is
// said, since the file may well have it.
func (r *reader) absent(at int, key, where, want string) bool {
	if r.lossy {
		return false
	}
	return r.fault(keyMissing(at, key, where, want))
}

// want says what the option may be.
func (f *field) want() string {
	switch {
	case len(f.Allowed) > 0:
		return "one of " + strings.Join(f.Allowed, ", ")
	case strings.HasPrefix(f.Range, "at "):
		return article(f.Type) + ", " + f.Range
	case f.Range != "":
		return article(f.Type) + " " + f.Range
	}
	return article(f.Type)
}

// article puts "a" or "an" before what needs it.
func article(what string) string {
	switch {
	case what == "true or false":
		return what
	case strings.ContainsRune("aeiou", rune(what[0])):
		return "an " + what
	}
	return "a " + what
}

// read takes the value of an option from a node; key names it in faults.
func (r *reader) read(f *field, key string, n *node) bool {
	if n.kind == badNode {
		return false
	}
	switch v := f.value.Addr().Interface().(type) {
	case special:
		return v.read(r, key, n)
	case **node:
		*v = n
		return true
	case **expr.Expression:
		return r.readExpression(v, key, n)
	}
	switch v := f.value; v.Kind() {
	case reflect.Pointer:
		to := *f
		to.value = reflect.New(v.Type().Elem()).Elem()
		if !r.read(&to, key, n) {
			return false
		}
		v.Set(to.value.Addr())
		return true
	case reflect.Slice:
		return r.readList(f, key, n)
	case reflect.Struct:
		if n.kind != tableNode {
			return r.fault(typeWrong(n, key, f.want()))
		}
		return r.fill(n, "in "+key, nil, v.Addr().Interface())
	}
	return r.readScalar(f, key, n)
}

// readScalar takes a truth value, a text, a word or a number.
func (r *reader) readScalar(f *field, key string, n *node) bool {
	v := f.value
	switch {
	case v.Kind() == reflect.Bool && n.kind == boolNode:
		v.SetBool(n.text == "true")
	case v.Kind() == reflect.String && n.kind == textNode:
		if len(f.Allowed) > 0 && !slices.Contains(f.Allowed, n.text) {
			return r.fault(wordUnknown(n.at, key, n.text, f.Allowed))
		}
		v.SetString(n.text)
	case n.kind == integerNode && (v.CanInt() || v.CanUint()):
		i, err := strconv.ParseInt(n.text, 0, 64)
		if err != nil || !f.bounds.hold(float64(i)) || v.CanUint() && i < 0 {
			return r.fault(rangeExceeded(n, key, f.want()))
		}
		if v.CanInt() {
			v.SetInt(i)
		} else {
			v.SetUint(uint64(i))
		}
	case v.Kind() == reflect.Float64 && (n.kind == integerNode || n.kind == decimalNode):
		x, ok := n.number()
		if !ok || !f.bounds.hold(x) {
			return r.fault(rangeExceeded(n, key, f.want()))
		}
		v.SetFloat(x)
	default:
		return r.fault(typeWrong(n, key, f.want()))
	}
	return true
}

// readList takes the entries of a list, each by the element's type.
func (r *reader) readList(f *field, key string, n *node) bool {
	if n.kind != listNode || n.made == headers {
		return r.fault(typeWrong(n, key, f.want()))
	}
	ok := true
	list := reflect.MakeSlice(f.value.Type(), len(n.items), len(n.items))
	for i, item := range n.items {
		entry := *f
		entry.value = list.Index(i)
		entry.Type = typeText(entry.value.Type())
		ok = r.read(&entry, fmt.Sprintf("entry %d of %s", i+1, key), item) && ok
	}
	f.value.Set(list)
	return ok
}

// readExpression compiles an expression; a number will do for a constant.
func (r *reader) readExpression(to **expr.Expression, key string, n *node) bool {
	if n.kind != textNode {
		return r.fault(typeWrong(n, key, `an expression in quotes, such as "1 - 0.8*x"`))
	}
	e, err := expr.Compile(n.text)
	if err != nil {
		bad := err.(*expr.SyntaxError)
		return r.fault(expressionFault(n.inside(bad.At), key, bad))
	}
	*to = e
	return true
}

// number returns the value of a number; one that float64 cannot hold is not ok.
func (n *node) number() (float64, bool) {
	plain := strings.ReplaceAll(n.text, "_", "")
	if n.kind == integerNode {
		if i, err := strconv.ParseInt(plain, 0, 64); err == nil {
			return float64(i), true
		}
		return 0, false
	}
	x, err := strconv.ParseFloat(plain, 64)
	return x, err == nil
}
