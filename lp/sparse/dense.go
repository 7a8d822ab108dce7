package sparse

import (
	"math"

	"boughwork/lp/sparse/internal/kernel"
)

// Columns that the unblocked Cholesky takes at once.
const denseBlock = kernel.Width

// A pivot that has fallen below this share of the diagonal entry it came from is rounding noise: the row depends on the
// rows before it. Its unknown is held at zero by a pivot of droppedPivot.
const (
	pivotNoise   = 1e-17
	droppedPivot = 1e100
)

// panel is the part of a front that is eliminated: rows x cols, row-major, Cholesky factor in place. The first cols
// rows are square.
type panel struct {
	a          []float64
	rows, cols int
	scale      []float64 // diagonal entries of the matrix before elimination
	dropped    int       // pivots replaced
	workers    int
}

// factor replaces the panel by its columns of L, by halves: the left half, its effect on the right half, the right half.
func (p *panel) factor(c0, n int) {
	if n <= denseBlock {
		p.base(c0, n)
		return
	}
	h := (n/2 + denseBlock - 1) / denseBlock * denseBlock
	p.factor(c0, h)
	c1, ld := c0+h, p.cols
	left := p.a[c1*ld+c0:]
	kernel.SubMulT(p.a[c1*ld+c1:], ld, left, ld, left, ld, p.rows-c1, n-h, h, true, p.workers)
	p.factor(c1, n-h)
}

// base factorises n columns from c0 on, and solves the rows below for them.
func (p *panel) base(c0, n int) {
	ld := p.cols
	for j := c0; j < c0+n; j++ {
		row := p.a[j*ld+c0 : j*ld+j+1]
		for i := c0; i < j; i++ {
			row[i-c0] = (row[i-c0] - dot(row[:i-c0], p.a[i*ld+c0:])) / p.a[i*ld+i]
		}
		d := row[j-c0] - dot(row[:j-c0], row)
		if !(d > pivotNoise*p.scale[j]) || p.scale[j] == 0 {
			d = droppedPivot
			p.dropped++
		}
		row[j-c0] = math.Sqrt(d)
	}
	if r := c0 + n; r < p.rows {
		kernel.NewTriangle(p.a[c0*ld+c0:], ld, n).SolveT(p.a[r*ld+c0:], ld, p.rows-r, p.workers)
	}
}

// dot returns the scalar product of x with the first len(x) entries of y.
func dot(x, y []float64) float64 {
	y = y[:len(x)]
	var s0, s1, s2, s3 float64
	i := 0
	for ; i+4 <= len(x); i += 4 {
		s0 += x[i] * y[i]
		s1 += x[i+1] * y[i+1]
		s2 += x[i+2] * y[i+2]
		s3 += x[i+3] * y[i+3]
	}
	for ; i < len(x); i++ {
		s0 += x[i] * y[i]
	}
	return (s0 + s1) + (s2 + s3)
}
