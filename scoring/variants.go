package scoring

import (
	"fmt"
	"slices"

	"bendtest/results"
)

// A variant is a criterion that follows from no other column of the table fits: of k-fold
// cross-validation with another k than the study's first, and of cp with an estimated
// noise variance. Its column is named after its rule.
type variant struct {
	results.Variant
	rule estimator
}

// variants lists those of a contest, as many as there is room for.
func (c *Contest) variants() []variant {
	var list []variant
	var folds []int
	for _, r := range c.Rules {
		doc := ""
		switch rule := r.Rule.(type) {
		case *ByKFold:
			if len(folds) > 0 && !slices.Contains(folds, rule.K) {
				doc = fmt.Sprintf("cross-validation in %d folds, each refitted at the same df", rule.K)
			}
			folds = append(folds, rule.K)
		case *ByCP:
			if rule.Variance != "known" {
				doc = fmt.Sprintf("RSS/n + 2γσ̂²t/n, γ = %g, with the noise variance as the rule estimates it: %s", rule.Gamma, rule.Variance)
			}
		}
		if doc == "" || len(list) == results.MostVariants {
			continue
		}
		column := r.Name
		for results.Fits.HasColumn(column) {
			column += " (rule)"
		}
		list = append(list, variant{results.Variant{Column: column, Doc: doc}, r.Rule.(estimator)})
	}
	return list
}

// Variants returns the columns that a contest adds to the table fits.
func (c *Contest) Variants() []results.Variant {
	var columns []results.Variant
	for _, v := range c.variants() {
		columns = append(columns, v.Variant)
	}
	return columns
}
