// Package smoothertest is the conformance suite of smoothers: what every family must
// do, a user's own too, whatever its formula.
//
//	func TestMyFamily(t *testing.T) {
//		smoothertest.Run(t, NewMyFamily(), smoothertest.Claims{
//			DF: []float64{2.5, 4, 8}, Lines: true, LeaveOneOut: smoothertest.Everywhere,
//		})
//	}
//
// A smoother goes in with Claims, which say what it promises beyond the contract of
// package smoothers. Each named check lays it out on a set of designs, ordinary and
// hostile ones, and looks at one promise; a failing check says why it matters. The idea
// worth knowing: S is built column by column by fitting unit vectors, and all figures
// that a rung states are held against that S.
package smoothertest
