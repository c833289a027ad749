package expr

import (
	"slices"
	"strings"
)

// Nearest returns the known name closest to got by edit distance, or "" if none is
// within a third of its length or if two tie: a wrong guess is worse than none. A
// name that differs in capitals only is the closest.
func Nearest(got string, known []string) string {
	for _, k := range known {
		if strings.EqualFold(got, k) {
			return k
		}
	}
	best, least, tie := "", 1+len(got)/3, false
	for _, k := range known {
		switch d := editDistance(got, k); {
		case d < least:
			best, least, tie = k, d, false
		case d == least:
			tie = true
		}
	}
	if tie {
		return ""
	}
	return best
}

// editDistance is the least number of inserted, deleted and replaced bytes that
// turn a into b (Wagner & Fischer 1974, J. ACM 21:168).
func editDistance(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = slices.Min([]int{cost, row[j] + 1, row[j+1] + 1})
		}
	}
	return row[len(b)]
}
