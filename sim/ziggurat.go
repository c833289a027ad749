package sim

import "math"

// layers is the number of layers of a ziggurat.
const layers = 256

// A ziggurat draws from a decreasing density on x ≥ 0 by covering it with layers of
// equal area: rectangles, and a base that holds the tail (Marsaglia & Tsang 2000,
// Journal of Statistical Software 5(8)). Layer, side and place come from different
// bits of one random number, so they are independent; 53 bits make the place.
type ziggurat struct {
	inside  [layers]int64   // places below this are under the next layer, in steps of width
	width   [layers]float64 // of a layer ÷ 2⁵³
	height  [layers]float64 // of the density at the layer's end
	density func(x float64) float64
	tail    func(start float64, q generator) (float64, generator)
}

// The places where the tails start. They decide the area of a layer, and are such
// that the topmost layer ends at the density's top (Marsaglia & Tsang 2000).
const (
	normalTail      = 3.6541528853610088
	exponentialTail = 7.69711747013104972
)

// normalLayers is e^(−x²/2).
var normalLayers = newZiggurat(normalTail, math.Sqrt(math.Pi/2)*math.Erfc(normalTail/math.Sqrt2),
	func(x float64) float64 { return math.Exp(-x * x / 2) },
	func(y float64) float64 { return math.Sqrt(-2 * math.Log(y)) },
	beyondNormal)

// exponentialLayers is e^(−x).
var exponentialLayers = newZiggurat(exponentialTail, math.Exp(-exponentialTail),
	func(x float64) float64 { return math.Exp(-x) },
	func(y float64) float64 { return -math.Log(y) },
	beyondExponential)

// newZiggurat lays out the layers of a density, given where its tail starts, the
// tail's area, and where the density has a height.
func newZiggurat(start, area float64, density, at func(float64) float64, tail func(float64, generator) (float64, generator)) *ziggurat {
	const steps = 1 << 53
	z := &ziggurat{density: density, tail: tail}
	area += start * density(start) // of every layer
	base := area / density(start)  // width of a rectangle of the base's area
	z.inside[0], z.width[0], z.height[0] = int64(start/base*steps), base/steps, density(0)
	x := start
	for i := layers - 1; i > 0; i-- {
		z.width[i], z.height[i] = x/steps, density(x)
		inner := 0.0
		if i > 1 {
			inner = at(area/x + z.height[i])
		}
		z.inside[i] = int64(inner / x * steps)
		x = inner
	}
	return z
}

// Sides on which a ziggurat draws: the random bits that may become the sign.
const (
	oneSide   = 0
	bothSides = 1 << 63
)

// draw fills e with independent draws and returns the generator behind them. The
// generator is passed by value so that it stays in registers.
func (z *ziggurat) draw(e []float64, q generator, sides uint64) generator {
	for i := range e {
		u := q.Uint64()
		layer, place := u%layers, int64(u>>11)
		x := float64(place) * z.width[layer]
		if place >= z.inside[layer] {
			x, q = z.edge(layer, x, q)
		}
		e[i] = math.Float64frombits(math.Float64bits(x) | u<<55&sides)
	}
	return q
}

// edge decides about an x outside the next layer: under the density it is kept, in
// the base it makes way for one from the tail, else all is drawn anew.
func (z *ziggurat) edge(layer uint64, x float64, q generator) (float64, generator) {
	for {
		if layer == 0 {
			return z.tail(z.width[layers-1]*(1<<53), q)
		}
		low, high := z.height[layer], z.height[layer-1]
		if low+open01(q.Uint64())*(high-low) < z.density(x) {
			return x, q
		}
		u := q.Uint64()
		place := int64(u >> 11)
		layer = u % layers
		if x = float64(place) * z.width[layer]; place < z.inside[layer] {
			return x, q
		}
	}
}

// beyondNormal draws from the normal tail (Marsaglia 1964, Technometrics 6:101).
func beyondNormal(start float64, q generator) (float64, generator) {
	for {
		x := -math.Log(open01(q.Uint64())) / start
		if y := -math.Log(open01(q.Uint64())); 2*y > x*x {
			return start + x, q
		}
	}
}

// beyondExponential draws from the exponential tail, which is exponential again.
func beyondExponential(start float64, q generator) (float64, generator) {
	return start - math.Log(open01(q.Uint64())), q
}
