package smoothers

// A Family is a kind of smoother.
//
// The options of a family are the exported fields of the struct that New returns,
// set to their defaults and described by tags:
//
//	option:"degree"          the name in the study file and on the command line
//	doc:"…"                  one line for people
//	oneof:"a b c"            the allowed words of a string
//	min, max, above, below   bounds of a number, the last two exclusive
//
// The study-file parser, the describe command, the flags of fit and the tests all
// read these tags, so they cannot disagree.
type Family struct {
	Name     string          // the word for it in the study file
	Doc      string          // one line for people
	Tuning   string          // what Rung.Tuning means
	LowestDF float64         // smallest df the defaults attain on a good design
	WholeDF  bool            // only whole df can be attained
	New      func() Smoother // a pointer to the options struct, at its defaults
}

// Families returns all families in the order in which they are listed to people.
func Families() []Family {
	return []Family{
		{
			Name: "kernel", Doc: "Nadaraya–Watson: a weighted mean around each point",
			Tuning: "bandwidth in units of x", LowestDF: 1,
			New: func() Smoother { return NewKernel() },
		},
		{
			Name: "local", Doc: "local polynomial regression of degree 1 or 2",
			Tuning: "bandwidth in units of x, or fraction of the observations", LowestDF: 3,
			New: func() Smoother { return NewLocal() },
		},
		{
			Name: "smoothing-spline", Doc: "smoothing spline: all distinct x are knots, curvature is penalised",
			Tuning: "λ of Σ(y − g)² + λ∫g″² in units of x³", LowestDF: 2,
			New: func() Smoother { return NewSmoothingSpline() },
		},
		{
			Name: "regression-spline", Doc: "least squares on a B-spline or a natural cubic spline with few knots",
			Tuning: "number of interior knots", LowestDF: 1, WholeDF: true,
			New: func() Smoother { return NewRegressionSpline() },
		},
		{
			Name: "penalised-spline", Doc: "cubic spline on equal segments, differences of its coefficients are penalised",
			Tuning: "λ of Σ(y − g)² + λΣ(second differences)²", LowestDF: 2,
			New: func() Smoother { return NewPenalisedSpline() },
		},
		{
			Name: "polynomial", Doc: "least squares on a global polynomial of degree df − 1",
			Tuning: "degree", LowestDF: 1, WholeDF: true,
			New: func() Smoother { return NewPolynomial() },
		},
	}
}
