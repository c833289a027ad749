package smoothers

// rank returns the rank of the rows of q, which must not yet be compressed: the largest
// number of columns that can each be given a row of its own in which it is not zero.
// That is so for B-splines, natural ones too, since their matrix is totally positive
// (Schoenberg & Whitney 1953, Trans. AMS 74:246; de Boor 2001, A Practical Guide to
// Splines, ch. XIII). Rounding has no part in it.
func (q *windowQR) rank() (matched int) {
	s, i, m := 0, 0, int(q.first[q.windows()])
	for j := range q.columns() {
		for ; i < m; i++ { // the lowest row that will do
			for i >= int(q.first[s+1]) {
				s++
			}
			lo, hi := q.support(s, i)
			if j < lo {
				break
			}
			if j <= hi {
				matched++
				i++
				break
			}
		}
	}
	return matched
}

// support returns the first and the last column in which row i of window s is not zero.
func (q *windowQR) support(s, i int) (lo, hi int) {
	row := q.rows[i*q.w : (i+1)*q.w]
	lo, hi = 0, q.w-1
	for lo < hi && row[lo] == 0 {
		lo++
	}
	for hi > lo && row[hi] == 0 {
		hi--
	}
	return s + lo, s + hi
}
