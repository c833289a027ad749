package sim

import (
	"crypto/sha256"
	"encoding/binary"

	//lint:ignore SA1019 its PCG source is the one whose 128 bits of state can be set whole
	"golang.org/x/exp/rand"
)

// A Stream is a source of random numbers for one purpose in one replicate of one
// cell. It also serves wherever a math/rand/v2 Source is wanted.
type Stream struct {
	source rand.PCGSource
	rand   *rand.Rand // reads source
}

// newStream returns a stream that set has yet to place.
func newStream() *Stream {
	s := &Stream{}
	s.rand = rand.New(&s.source)
	return s
}

// streamVersion is part of every stream's hash. The mapping from (seed, cell,
// replicate, purpose) to numbers is part of the output format: whoever changes it
// changes every result, and must change this word.
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

// float64 is uniform on the open interval (0, 1), on a grid of 2⁻⁵³ shifted by half
// a step, so that neither end is ever drawn.
func (s *Stream) float64() float64 {
	return (float64(s.source.Uint64()>>11) + 0.5) / (1 << 53)
}

// normal is standard normal.
func (s *Stream) normal() float64 { return s.rand.NormFloat64() }

// exponential has mean 1.
func (s *Stream) exponential() float64 { return s.rand.ExpFloat64() }

// intn is uniform on 0 … n−1.
func (s *Stream) intn(n int) int { return s.rand.Intn(n) }

// ascending fills u with the order statistics of uniforms on (0, 1), in one pass:
// the running sums of len(u) + 1 exponential spacings over their total (Devroye
// 1986, Non-Uniform Random Variate Generation, §V.3.1).
func (s *Stream) ascending(u []float64) {
	sum := 0.0
	for i := range u {
		sum += s.exponential()
		u[i] = sum
	}
	total := sum + s.exponential()
	for i := range u {
		u[i] /= total
	}
}
