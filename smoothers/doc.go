// Package smoothers fits curves: kernel and local regression, smoothing, regression and
// penalised splines, and polynomials, all linear in y: ŷ = S y. It is numerics alone.
//
// In go the x of a sample (ascending, ties allowed), degrees of freedom, and then as many
// y as there are; out come fitted values, a curve on the whole line, and what can be
// said of S: its trace, tr SᵀS, the leverages. The words: a family is a kind of smoother;
// a ladder is all flexibilities of one family on one design; a rung is one of them; df
// means tr S, and tuning is the family's own parameter for it, such as λ.
//
// The idea worth knowing: what depends on x alone belongs to the ladder and its rungs,
// and y comes last. A df that can't be had gives a rung with a status, never a
// silently different fit. Families lists what there is; package smoothertest checks it.
package smoothers
