package sim

import (
	"fmt"
	"math"
	"reflect"
	"strconv"
	"strings"
)

// An OptionError reports an option that makes no sense.
type OptionError struct {
	Option string // the option's name in the study file
	Found  string
	Want   string
}

func (e *OptionError) Error() string {
	return fmt.Sprintf("%s = %s; want %s", e.Option, e.Found, e.Want)
}

// checkBounds returns an *OptionError for the first number of an options struct that
// is not finite or outside the bounds of its tags min, max, above and below.
func checkBounds(options any) error {
	v := reflect.ValueOf(options).Elem()
	for i := range v.NumField() {
		field, tag := v.Field(i), v.Type().Field(i).Tag
		if field.Kind() == reflect.Pointer {
			field = field.Elem()
		}
		if name, ok := tag.Lookup("option"); ok && field.Kind() == reflect.Float64 {
			if want := boundBroken(field.Float(), tag); want != "" {
				return &OptionError{name, fmt.Sprint(field.Float()), want}
			}
		}
	}
	return nil
}

// boundBroken returns what a number should be, or "" if it is.
func boundBroken(v float64, tag reflect.StructTag) string {
	holds := !math.IsNaN(v) && !math.IsInf(v, 0)
	var want []string
	for _, b := range []struct {
		tag, text string
		keeps     func(v, limit float64) bool
	}{
		{"min", "at least", func(v, limit float64) bool { return v >= limit }},
		{"above", "above", func(v, limit float64) bool { return v > limit }},
		{"max", "at most", func(v, limit float64) bool { return v <= limit }},
		{"below", "below", func(v, limit float64) bool { return v < limit }},
	} {
		text, ok := tag.Lookup(b.tag)
		if !ok {
			continue
		}
		limit, err := strconv.ParseFloat(text, 64)
		if err != nil {
			panic("sim: a bound is no number: " + text)
		}
		holds = holds && b.keeps(v, limit)
		want = append(want, b.text+" "+text)
	}
	if holds {
		return ""
	}
	return strings.TrimSpace("a number " + strings.Join(want, " and "))
}
