package scenarios

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"reflect"
	"strconv"
	"strings"

	"bendtest/sim/expr"
)

// Canonical is one line that says all of a struct of options: the kind and each
// option with its value, defaults included.
func Canonical(kind string, options any) string {
	line := kind
	for _, f := range fieldsOf(options) {
		if text := valueAsText(f.value); text != "" {
			line += " " + f.Name + "=" + text
		}
	}
	return line
}

// valueAsText writes the value of an option as a study file would have it; "" stands
// for an option that is not set.
func valueAsText(v reflect.Value) string {
	switch v := v.Addr().Interface().(type) {
	case special:
		return v.text()
	case **node:
		return ""
	case **expr.Expression:
		if *v == nil {
			return ""
		}
		return quote((*v).String())
	}
	switch v.Kind() {
	case reflect.Pointer:
		if v.IsNil() {
			return ""
		}
		return valueAsText(v.Elem())
	case reflect.Bool:
		return strconv.FormatBool(v.Bool())
	case reflect.Int:
		return strconv.FormatInt(v.Int(), 10)
	case reflect.Uint64:
		return strconv.FormatUint(v.Uint(), 10)
	case reflect.Float64:
		return number(v.Float())
	case reflect.String:
		if v.Len() == 0 {
			return ""
		}
		return quote(v.String())
	case reflect.Slice:
		if v.IsNil() {
			return ""
		}
		items := make([]string, v.Len())
		for i := range items {
			items[i] = valueAsText(v.Index(i))
		}
		return "[" + strings.Join(items, ", ") + "]"
	}
	var items []string
	for _, f := range fieldsOf(v.Addr().Interface()) {
		if text := valueAsText(f.value); text != "" {
			items = append(items, f.Name+" = "+text)
		}
	}
	return "{" + strings.Join(items, ", ") + "}"
}

// quote writes text as a TOML basic string. JSON's strings are such strings, but for
// DEL, which TOML wants escaped.
func quote(text string) string {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	if err := e.Encode(text); err != nil {
		panic("scenarios: a string that JSON cannot hold: " + err.Error())
	}
	return strings.ReplaceAll(strings.TrimSuffix(b.String(), "\n"), "\x7f", `\u007f`)
}

// keyText writes a key, in quotes where it has to be.
func keyText(name string) string {
	bare := name != "" && strings.IndexFunc(name, func(c rune) bool {
		return !(c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || c >= '0' && c <= '9' || c == '-' || c == '_')
	}) < 0
	if bare {
		return name
	}
	return quote(name)
}

// Canonical writes the study in a form that says all that the study is: every option
// by value, defaults included, in one order, without entries that no cell uses and
// without comments. Parsing it gives the same study.
func (s *Study) Canonical() []byte {
	var b bytes.Buffer
	write := func(structs ...any) {
		for _, f := range fieldsOf(structs...) {
			if text := valueAsText(f.value); text != "" {
				fmt.Fprintf(&b, "%s = %s\n", f.Name, text)
			}
		}
	}
	write(&studyKeys{Title: s.Title, Seed: s.Seed, HeldOut: s.HeldOut, Replicates: replicates{s.Replicates, s.Precision}, Keep: s.Keep})
	b.WriteString("\n[cells]\n")
	write(&s.factors.lists)
	for _, t := range s.factors.truths {
		fmt.Fprintf(&b, "\n[truth.%s]\n", keyText(t.name))
		write(&t.keys)
	}
	for _, d := range s.factors.designs {
		fmt.Fprintf(&b, "\n[design.%s]\n", keyText(d.name))
		write(&lawKey{choice{word: d.law}}, d.design.Law, d.design)
	}
	for _, n := range s.factors.noises {
		fmt.Fprintf(&b, "\n[noise.%s]\n", keyText(n.name))
		write(&lawKey{choice{word: n.law}}, n.noise.Law, n.noise)
	}
	for _, m := range s.Smoothers {
		b.WriteString("\n[[smoother]]\n")
		write(&smootherKeys{Family: choice{word: m.Family}, Name: m.Name, DF: m.DF}, m.Smoother)
	}
	for _, m := range s.Rules {
		b.WriteString("\n[[rule]]\n")
		write(&ruleKeys{Kind: choice{word: m.Kind}, Name: m.Name}, m.Options)
	}
	return b.Bytes()
}

// hash identifies the study by its canonical form and, through the cells, by the
// content of the files that it names.
func (s *Study) hash() string {
	h := sha256.New()
	h.Write(s.Canonical())
	for _, c := range s.Cells {
		fmt.Fprintln(h, c.Sim.Hash())
	}
	return hex.EncodeToString(h.Sum(nil)[:8])
}
