package sim

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"math"
)

// A Column is a list of numbers from a file. Whoever reads the study file fills in
// Values.
type Column struct {
	File   string `option:"file" required:"true" doc:"file of values, its path relative to the study file"`
	Column string `option:"column" doc:"name or number of the column; by default the first"`
	Values []float64
}

// Source returns the column itself, for whoever is to fill it.
func (c *Column) Source() *Column { return c }

// digest identifies the values by content.
func (c *Column) digest() string {
	h := sha256.New()
	var b [8]byte
	for _, v := range c.Values {
		binary.BigEndian.PutUint64(b[:], math.Float64bits(v))
		h.Write(b[:])
	}
	return hex.EncodeToString(h.Sum(nil)[:16])
}
