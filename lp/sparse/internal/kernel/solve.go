package kernel

// Width is the number of columns that SolveT takes at most, and the number of rows that it takes at once.
const Width = 16

// Triangle is a lower triangular matrix of at most Width columns as SolveT wants it: by columns, with the inverses of
// the diagonal entries, padded with the unit matrix.
type Triangle struct {
	l [Width * Width]float64
	n int
}

// NewTriangle takes the n x n lower triangle of a row-major matrix with row stride ld.
func NewTriangle(a []float64, ld, n int) *Triangle {
	t := &Triangle{n: n}
	for j := range Width {
		t.l[j*Width+j] = 1
	}
	for i := range n {
		for j, v := range a[i*ld : i*ld+i] {
			t.l[j*Width+i] = v
		}
		t.l[i*Width+i] = 1 / a[i*ld+i]
	}
	return t
}

// solveShare is how many rows are worth a goroutine of their own.
const solveShare = 128

// SolveT replaces the m x n matrix X with row stride ld by X L'^-1, by substitution. The result does not depend on
// workers, the number of goroutines.
func (t *Triangle) SolveT(x []float64, ld, m, workers int) {
	InChunks(m, solveShare, workers, func(lo, hi int) { t.rows(x[lo*ld:], ld, hi-lo) })
}

func (t *Triangle) rows(x []float64, ld, m int) {
	var w [Width * Width]float64
	for r := 0; r < m; r += Width {
		k := min(Width, m-r)
		for i := range k {
			for j, v := range x[(r+i)*ld:][:t.n] {
				w[j*Width+i] = v
			}
		}
		solve16(&t.l, &w)
		for i := range k {
			row := x[(r+i)*ld:][:t.n]
			for j := range row {
				row[j] = w[j*Width+i]
			}
		}
	}
}

// solve16Go replaces x, sixteen rows by columns, by X L'^-1: column by column, each taken out of those after it.
func solve16Go(l, x *[Width * Width]float64) {
	for j := range Width {
		xj := x[j*Width:][:Width:Width]
		for r := range xj {
			xj[r] *= l[j*Width+j]
		}
		for i := j + 1; i < Width; i++ {
			v := l[j*Width+i]
			if v == 0 {
				continue
			}
			xi := x[i*Width:][:Width:Width]
			for r, w := range xj {
				xi[r] -= v * w
			}
		}
	}
}
