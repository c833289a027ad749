package scenarios

import (
	"fmt"
	"math"
	"reflect"
	"strconv"
)

// A bound is one end of what a number may be.
type bound struct {
	at     float64
	given  bool
	closed bool // the number itself is allowed
}

// bounds are both ends.
type bounds struct{ low, high bound }

// boundsOf reads the tags min, above, max and below.
func boundsOf(tag reflect.StructTag) bounds {
	read := func(closed, open string) bound {
		for _, name := range []string{closed, open} {
			text, ok := tag.Lookup(name)
			if !ok {
				continue
			}
			at, err := strconv.ParseFloat(text, 64)
			if err != nil {
				panic(fmt.Sprintf("scenarios: tag %s:%q is no number", name, text))
			}
			return bound{at, true, name == closed}
		}
		return bound{}
	}
	return bounds{read("min", "above"), read("max", "below")}
}

// hold reports whether v lies within the bounds; NaN and infinities never do.
func (b bounds) hold(v float64) bool {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return false
	}
	low := !b.low.given || v > b.low.at || b.low.closed && v == b.low.at
	high := !b.high.given || v < b.high.at || b.high.closed && v == b.high.at
	return low && high
}

// text says what the bounds allow.
func (b bounds) text() string {
	low, high := "", ""
	if b.low.given {
		low = map[bool]string{true: "at least ", false: "above "}[b.low.closed] + number(b.low.at)
	}
	if b.high.given {
		high = map[bool]string{true: "at most ", false: "below "}[b.high.closed] + number(b.high.at)
	}
	switch {
	case b.low.given && b.high.given && b.low.closed && b.high.closed:
		return fmt.Sprintf("from %s to %s", number(b.low.at), number(b.high.at))
	case low != "" && high != "":
		return low + " and " + high
	}
	return low + high
}

// number writes a number for people and for study files: without an exponent where
// that is short.
func number(v float64) string {
	if size := math.Abs(v); size == 0 || size >= 1e-5 && size < 1e12 {
		return strconv.FormatFloat(v, 'f', -1, 64)
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}
