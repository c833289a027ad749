package sim

import (
	"crypto/sha256"
	"encoding/binary"
	"math/bits"

	//lint:ignore SA1019 math/rand/v2 has the same generator, but not in a form that a loop keeps in registers; and the numbers drawn are part of the output format
	"golang.org/x/exp/rand"
)

// A generator makes random bits: the PCG XSL RR 128/64 (O'Neill 2014, Harvey Mudd
// College technical report HMC-CS-2014-0905), one sequence of 2¹²⁸ numbers.
type generator = rand.PCGSource

// A Stream is a source of random numbers for one purpose in one replicate of one
// cell. It also serves wherever a math/rand/v2 Source is wanted.
//
// Streams are stretches of the generator's one sequence: that any two of a million
// streams of a billion numbers each overlap has probability 2⁻⁵⁸.
type Stream struct{ source generator }

// streamVersion is part of every stream's hash. The mapping from (seed, cell,
// replicate, purpose) to numbers, and from numbers to draws of a law, is part of the
// output format: whoever changes it changes every result, and must change this word.
const streamVersion = "bendtest stream 1"

// set places the stream at the start of its sequence: all 128 bits of the
// generator's state come from the SHA-256 hash of what the stream is for.
func (s *Stream) set(seed uint64, cell string, replicate int, purpose string) {
	var buf [192]byte
	b := append(buf[:0], streamVersion...)
	b = binary.BigEndian.AppendUint64(b, seed)
	b = binary.BigEndian.AppendUint64(b, uint64(replicate))
	b = append(b, byte(len(cell))) // so that cell and purpose cannot run together
	b = append(b, cell...)
	b = append(b, purpose...)
	sum := sha256.Sum256(b)
	if err := s.source.UnmarshalBinary(sum[:16]); err != nil {
		panic("sim: the generator refuses 16 bytes of state: " + err.Error())
	}
}

// Uint64 returns 64 random bits.
func (s *Stream) Uint64() uint64 { return s.source.Uint64() }

// open01 makes 64 random bits a number uniform on the open interval (0, 1), on a grid
// of 2⁻⁵³ shifted by half a step, so that neither end is ever drawn.
func open01(bits uint64) float64 { return (float64(int64(bits>>11)) + 0.5) / (1 << 53) }

// uniforms fills u with independent uniforms on (0, 1).
func (s *Stream) uniforms(u []float64) {
	q := s.source // a copy stays in registers
	for i := range u {
		u[i] = open01(q.Uint64())
	}
	s.source = q
}

// normals fills e with independent standard normals.
func (s *Stream) normals(e []float64) { s.source = normalLayers.draw(e, s.source, bothSides) }

// laplaces fills e with independent double exponentials of mean size 1.
func (s *Stream) laplaces(e []float64) { s.source = exponentialLayers.draw(e, s.source, bothSides) }

// ascending fills x with the order statistics of uniforms on (lo, hi): the running
// sums of len(x) + 1 exponential spacings over their total (Devroye 1986, Non-Uniform
// Random Variate Generation, §V.3.1).
func (s *Stream) ascending(x []float64, lo, hi float64) {
	s.source = exponentialLayers.draw(x, s.source, oneSide)
	var last [1]float64
	s.source = exponentialLayers.draw(last[:], s.source, oneSide)
	sum := 0.0
	for i, gap := range x {
		sum += gap
		x[i] = sum
	}
	scale := (hi - lo) / (sum + last[0])
	for i, v := range x {
		x[i] = min(lo+v*scale, hi) // which rounding could pass
	}
}

// below is uniform on 0 … n−1, without bias (Lemire 2019, ACM TOMACS 29(1):3).
func (s *Stream) below(n int) int {
	m := uint64(n)
	high, low := bits.Mul64(s.source.Uint64(), m)
	if low < m {
		for uneven := -m % m; low < uneven; {
			high, low = bits.Mul64(s.source.Uint64(), m)
		}
	}
	return int(high)
}
