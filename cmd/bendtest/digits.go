package main

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"bendtest/results"
	"bendtest/scoring"
)

// withError writes an estimate with its Monte Carlo standard error, as many digits
// as two significant ones of the error support: "0.1723 ± 0.0021".
func withError(e scoring.Estimate) string {
	if !e.Value.Known {
		return "–"
	}
	if !e.MCSE.Known {
		return short(e.Value)
	}
	v, m := e.Value.Value, e.MCSE.Value
	if !(m > 0) || math.IsInf(m, 0) || math.IsInf(v, 0) {
		return short(e.Value)
	}
	places := 1 - int(math.Floor(math.Log10(m)))
	if math.Abs(v) >= 1e6 || places > 9 {
		return fmt.Sprintf("%.3g ± %.1g", v, m)
	}
	places = max(places, 0)
	return fmt.Sprintf("%.*f ± %.*f", places, v, places, m)
}

// short writes a figure without an error, to four significant digits.
func short(n results.Number) string {
	if !n.Known {
		return "–"
	}
	return trim(strconv.FormatFloat(n.Value, 'g', 4, 64))
}

// trim takes a needless exponent off: "1e+06" stays, "4.0000" becomes "4".
func trim(s string) string {
	if strings.ContainsAny(s, "eE") || !strings.Contains(s, ".") {
		return s
	}
	return strings.TrimRight(strings.TrimRight(s, "0"), ".")
}

// thousands writes a count with thin groups: 1 234 567.
func thousands(n int) string {
	s := strconv.Itoa(n)
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + " " + s[i:]
	}
	return s
}
