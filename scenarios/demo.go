package scenarios

import _ "embed"

//go:embed orchard.toml
var orchard []byte

// Demo returns the embedded demonstration study: its name and its text, which is a
// tutorial in comments.
func Demo() (name string, src []byte) {
	return "orchard.toml", append([]byte(nil), orchard...)
}
