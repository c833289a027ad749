package smoothers

import (
	"fmt"
	"math"
	"strings"
)

// A shape is a kernel K(u), up to a factor that no local fit notices:
//
//	gaussian      exp(−u²/2)
//	epanechnikov  1 − u²         |u| < 1
//	biweight      (1 − u²)²      |u| < 1
//	tricube       (1 − |u|³)³    |u| < 1
//
// All have K(0) = 1 (Wand & Jones 1995, Kernel Smoothing, table 2.1).
type shape uint8

const (
	gaussian shape = iota
	epanechnikov
	biweight
	tricube
)

var shapeWords = [...]string{
	gaussian:     "gaussian",
	epanechnikov: "epanechnikov",
	biweight:     "biweight",
	tricube:      "tricube",
}

// shapeOf returns the shape of that name; an unknown one is an *OptionError.
func shapeOf(word string) (shape, error) {
	for i, w := range shapeWords {
		if w == word {
			return shape(i), nil
		}
	}
	want := "one of " + strings.Join(shapeWords[:], ", ")
	return 0, &OptionError{Option: "kernel", Found: fmt.Sprintf("%q", word), Want: want}
}

// compact says whether the kernel is zero for |u| ≥ 1.
func (k shape) compact() bool { return k != gaussian }

// weigh writes K(u) into w for a kernel of compact support, with s = 1 − |u| > 0
// in place of u: near the rim of the window the factors of s keep the relative
// precision that 1 − u² would lose.
func (k shape) weigh(w, s []float64) {
	w = w[:len(s)]
	switch k {
	case epanechnikov:
		for i, s := range s {
			w[i] = s * (2 - s)
		}
	case biweight:
		for i, s := range s {
			v := s * (2 - s)
			w[i] = v * v
		}
	case tricube:
		for i, s := range s {
			v := s * (3 - s*(3-s))
			w[i] = v * v * v
		}
	default:
		panic("smoothers: weigh needs a kernel of compact support")
	}
}

// widen returns −u K′(u), the derivative of K(x/h) by log h, from u and w = K(u).
func (k shape) widen(u, w float64) float64 {
	u = math.Abs(u)
	switch k {
	case gaussian:
		return u * u * w
	case epanechnikov:
		return 2 * u * u
	case biweight:
		return 4 * u * u * (1 - u*u)
	default:
		v := 1 - u*u*u
		return 9 * u * u * u * v * v
	}
}
