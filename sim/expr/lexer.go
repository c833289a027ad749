package expr

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// A token is a number, a name, an operator, or the end (kind 0).
type token struct {
	kind byte // 'n' number, 'a' name, 'o' operator, 0 end
	text string
	at   int
}

// String shows the token to a person.
func (t token) String() string {
	if t.kind == 0 {
		return "the end"
	}
	return fmt.Sprintf("%q", t.text)
}

const operatorsOfTwo = "<= >= == !="

// next returns the token at or after offset at.
func next(text string, at int) token {
	for at < len(text) && strings.IndexByte(" \t\r\n", text[at]) >= 0 {
		at++
	}
	if at == len(text) {
		return token{at: at}
	}
	rest := text[at:]
	switch c := rest[0]; {
	case isDigit(c) || c == '.':
		return token{'n', rest[:numberLength(rest)], at}
	case isLetter(c):
		n := 1
		for n < len(rest) && (isLetter(rest[n]) || isDigit(rest[n])) {
			n++
		}
		return token{'a', rest[:n], at}
	}
	if len(rest) > 1 && strings.Contains(operatorsOfTwo, rest[:2]) && rest[1] == '=' {
		return token{'o', rest[:2], at}
	}
	_, size := utf8.DecodeRuneInString(rest)
	return token{'o', rest[:size], at}
}

// numberLength is the length of the decimal number at the start of s; at least 1.
func numberLength(s string) int {
	n := 0
	digits := func() {
		for n < len(s) && isDigit(s[n]) {
			n++
		}
	}
	digits()
	if n < len(s) && s[n] == '.' {
		n++
		digits()
	}
	if n < len(s) && (s[n] == 'e' || s[n] == 'E') {
		mark := n
		n++
		if n < len(s) && (s[n] == '+' || s[n] == '-') {
			n++
		}
		if n == len(s) || !isDigit(s[n]) {
			return mark // "2e" is the number 2 before the name e
		}
		digits()
	}
	return n
}

func isDigit(c byte) bool { return '0' <= c && c <= '9' }

func isLetter(c byte) bool { return 'a' <= c|0x20 && c|0x20 <= 'z' || c == '_' }
