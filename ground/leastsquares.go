package ground

import "slices"

// leastResidual returns the least |A w - c| over weights w >= 0, A given by its columns: the active set method of Lawson
// and Hanson 1974, chapter 23 (NNLS).
func leastResidual(columns [][]float64, c []float64) float64 {
	w := make([]float64, len(columns))
	var set []int // columns with positive weight
	residual := slices.Clone(c)
	// Each round adds a column and lowers the residual; the limit only guards against rounding.
	for range 3 * (len(columns) + len(c)) {
		enter, best := -1, insideHull*insideHull
		for j, a := range columns {
			if g := dot(a, residual); g > best && !slices.Contains(set, j) {
				enter, best = j, g
			}
		}
		if enter < 0 || norm(residual) <= insideHull {
			break
		}
		set = append(set, enter)
		for {
			z := solveColumns(columns, set, c)
			step, out := 1.0, -1
			for k, j := range set {
				if z[k] <= 0 {
					if t := w[j] / (w[j] - z[k]); t < step || out < 0 {
						step, out = t, k
					}
				}
			}
			if out < 0 {
				for k, j := range set {
					w[j] = z[k]
				}
				break
			}
			for k, j := range set {
				w[j] += step * (z[k] - w[j])
			}
			w[set[out]] = 0
			set = slices.Delete(set, out, out+1)
			if len(set) == 0 {
				break
			}
		}
		residual = slices.Clone(c)
		for _, j := range set {
			for i, a := range columns[j] {
				residual[i] -= w[j] * a
			}
		}
	}
	return norm(residual)
}

// solveColumns returns the least-squares weights of a few columns, by modified Gram-Schmidt. Columns that depend on
// earlier ones get weight 0.
func solveColumns(columns [][]float64, set []int, c []float64) []float64 {
	n := len(set)
	q := make([][]float64, n)
	r := make([][]float64, n)
	for k, j := range set {
		q[k] = slices.Clone(columns[j])
		r[k] = make([]float64, n)
		full := norm(q[k])
		for range 2 { // the second pass keeps q orthogonal to rounding
			for i := range k {
				s := dot(q[i], q[k])
				r[i][k] += s
				for m := range q[k] {
					q[k][m] -= s * q[i][m]
				}
			}
		}
		l := norm(q[k])
		if l <= insideHull*full {
			clear(q[k])
			continue
		}
		r[k][k] = l
		for m := range q[k] {
			q[k][m] /= l
		}
	}
	z := make([]float64, n)
	for k := n - 1; k >= 0; k-- {
		if r[k][k] == 0 {
			continue
		}
		s := dot(q[k], c)
		for i := k + 1; i < n; i++ {
			s -= r[k][i] * z[i]
		}
		z[k] = s / r[k][k]
	}
	return z
}
