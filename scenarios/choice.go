package scenarios

import "slices"

// A choice is a word that decides which further options its table has: the law of a
// design or a noise, the family of a smoother, the kind of a rule.
type choice struct {
	word  string
	what  string // "design law"
	known []string
}

func (*choice) describe() string { return "word" }

func (c *choice) text() string {
	if c.word == "" {
		return ""
	}
	return quote(c.word)
}

func (c *choice) read(r *reader, key string, n *node) bool {
	switch {
	case n.kind != textNode:
		return r.fault(typeWrong(n, key, "a word in quotes, one of "+alphabetical(c.known)))
	case !slices.Contains(c.known, n.text):
		return r.fault(wordUnknown(n.at, c.what, n.text, c.known))
	}
	c.word = n.text
	return true
}

// chosen returns the index of the word that t has for the choice, or -1 if it has
// none that is known.
func (c *choice) chosen(t *node, key string) int {
	if n := t.get(key); n != nil && n.kind == textNode {
		return slices.Index(c.known, n.text)
	}
	return -1
}
