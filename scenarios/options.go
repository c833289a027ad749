package scenarios

import (
	"errors"
	"fmt"
	"reflect"
	"strconv"
	"strings"

	"bendtest/sim/expr"
)

// An Option describes one option of a struct of options.
//
// The options of a struct are its exported fields, those of embedded structs
// included, that carry the tag option:"name". Further tags: doc (one line for
// people), unit, oneof (the allowed words, separated by blanks), min, max, above,
// below (bounds of a number, the last two exclusive), required, and type where it is
// to be called something else than the field's type says. The value that a new struct
// holds is the default.
type Option struct {
	Name     string
	Doc      string
	Unit     string
	Type     string   // "number", "whole number", "true or false", "list of numbers", …
	Allowed  []string // the words of a word
	Range    string   // "above 0 and at most 100"; "" if any number will do
	Default  string   // without quotes; "" if there is none
	Required bool
}

// OptionsOf describes the options of the struct that ptr points to. It panics if ptr
// points to no struct or if a tag makes no sense.
func OptionsOf(ptr any) []Option {
	fields := fieldsOf(ptr)
	options := make([]Option, len(fields))
	for i, f := range fields {
		options[i] = f.Option
	}
	return options
}

// Set sets an option of the struct that ptr points to from text as it would stand on
// a command line; lists are separated by commas. The error says what is allowed.
func Set(ptr any, option, text string) error {
	r := &reader{src: newSource("", nil)}
	fields := fieldsOf(ptr)
	i := indexOf(fields, option)
	if i < 0 {
		f := wordUnknown(0, "option", option, namesOf(fields))
		return errors.New(f.brief())
	}
	value := fields[i].value
	before := reflect.ValueOf(value.Interface())
	if !r.read(&fields[i], option, flagNode(value.Type(), text)) {
		value.Set(before)
		return errors.New(r.faults[0].brief())
	}
	return nil
}

// flagNode returns the node that stands for text on the command line, as far as the
// field's type tells what is meant.
func flagNode(t reflect.Type, text string) *node {
	if t.Kind() == reflect.Pointer {
		t = t.Elem()
	}
	text = strings.TrimSpace(text)
	switch t.Kind() {
	case reflect.Bool:
		if text == "true" || text == "false" {
			return &node{kind: boolNode, text: text}
		}
	case reflect.Int, reflect.Uint64, reflect.Float64:
		if _, err := strconv.ParseInt(text, 10, 64); err == nil {
			return &node{kind: integerNode, text: text}
		}
		if _, err := strconv.ParseFloat(text, 64); err == nil {
			return &node{kind: decimalNode, text: text}
		}
	case reflect.Slice:
		list := &node{kind: listNode}
		for item := range strings.SplitSeq(text, ",") {
			list.items = append(list.items, flagNode(t.Elem(), item))
		}
		return list
	}
	return &node{kind: textNode, text: text}
}

// A field is an option with the place of its value.
type field struct {
	Option
	value  reflect.Value
	bounds bounds
}

// fieldsOf returns the options of the structs that ptrs point to, in their order.
func fieldsOf(ptrs ...any) []field {
	var fields []field
	for _, ptr := range ptrs {
		v := reflect.ValueOf(ptr)
		if v.Kind() != reflect.Pointer || v.Elem().Kind() != reflect.Struct {
			panic(fmt.Sprintf("scenarios: options want a pointer to a struct, not %T", ptr))
		}
		fields = appendFields(fields, v.Elem())
	}
	return fields
}

func appendFields(fields []field, v reflect.Value) []field {
	for i := range v.NumField() {
		tag, value := v.Type().Field(i).Tag, v.Field(i)
		name, isOption := tag.Lookup("option")
		switch {
		case isOption:
			f := field{value: value, bounds: boundsOf(tag)}
			f.Option = Option{
				Name: name, Doc: tag.Get("doc"), Unit: tag.Get("unit"), Type: typeText(value.Type()),
				Allowed: strings.Fields(tag.Get("oneof")), Range: f.bounds.text(),
				Required: tag.Get("required") == "true",
			}
			if !f.Required {
				f.Default = plainText(value)
			}
			if c, ok := value.Addr().Interface().(*choice); ok {
				f.Allowed = c.known
			}
			if len(f.Allowed) > 0 {
				f.Type = "word"
			}
			if said := tag.Get("type"); said != "" {
				f.Type = said
			}
			fields = append(fields, f)
		case v.Type().Field(i).Anonymous && value.Kind() == reflect.Struct:
			fields = appendFields(fields, value)
		}
	}
	return fields
}

// typeText is what to call a field's type before people.
func typeText(t reflect.Type) string {
	if special, ok := reflect.New(t).Interface().(special); ok {
		return special.describe()
	}
	switch t {
	case reflect.TypeFor[*expr.Expression]():
		return "expression in x"
	case reflect.TypeFor[*node]():
		return "table"
	}
	switch t.Kind() {
	case reflect.Pointer:
		return typeText(t.Elem())
	case reflect.Bool:
		return "true or false"
	case reflect.Int, reflect.Uint64:
		return "whole number"
	case reflect.Float64:
		return "number"
	case reflect.String:
		return "text"
	case reflect.Struct:
		return "table"
	case reflect.Slice:
		return "list of " + typeText(t.Elem()) + "s"
	}
	panic(fmt.Sprintf("scenarios: an option of type %v", t))
}

// indexOf returns the index of an option, or -1.
func indexOf(fields []field, name string) int {
	for i := range fields {
		if fields[i].Name == name {
			return i
		}
	}
	return -1
}

// namesOf returns the names of the options.
func namesOf(fields []field) []string {
	names := make([]string, len(fields))
	for i := range fields {
		names[i] = fields[i].Name
	}
	return names
}
