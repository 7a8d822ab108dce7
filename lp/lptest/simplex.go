package lptest

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
	simplex "gonum.org/v1/gonum/optimize/convex/lp"

	"boughwork/lp"
)

// ErrInfeasible is the oracle's answer where there is no equilibrium.
var ErrInfeasible = errors.New("lptest: no equilibrium")

// simplexTolerance is gonum's, on reduced costs.
const simplexTolerance = 1e-11

// dualityGap is how far the oracle's two answers may be apart.
const dualityGap = 1e-9

// Simplex returns the least objective of a small problem by gonum's dense simplex method, from the primal and from the
// dual program in standard form. It returns ErrInfeasible only if both say so, and another error if they do not agree to
// 1e-9. Forces should be near 1. Meant for some 60 variables: the time grows with the fourth power.
//
// These programs are degenerate, and gonum's method has little against that: of 240 random problems it failed on 9 with
// an error, and on one it never ended. So the suite's problems are a fixed set on which it does end.
func Simplex(p *lp.Problem) (float64, error) {
	f := newStandard(p)
	dual, dualErr := f.dual()
	if dualErr != nil && !errors.Is(dualErr, ErrInfeasible) {
		return 0, fmt.Errorf("lptest: gonum, dual: %w", dualErr)
	}
	primal, err := f.primal()
	switch {
	case errors.Is(err, simplex.ErrInfeasible) && dualErr != nil:
		return 0, ErrInfeasible
	case err != nil:
		return 0, fmt.Errorf("lptest: gonum, primal: %w (dual: %.12g, %v)", err, dual, dualErr)
	case dualErr != nil:
		return 0, fmt.Errorf("lptest: gonum's dual has no end and its primal is %.12g", primal)
	case math.Abs(primal-dual) > dualityGap*math.Max(1, math.Abs(dual)):
		return 0, fmt.Errorf("lptest: gonum's primal is %.12g and its dual %.12g", primal, dual)
	}
	return dual, nil
}

// standard is a program in standard form: minimise c.x, a x = b, x >= 0.
type standard struct {
	rows []map[int]float64
	b, c []float64
}

func (f *standard) column(cost float64) int {
	f.c = append(f.c, cost)
	return len(f.c) - 1
}

func (f *standard) row(right float64) int {
	f.rows, f.b = append(f.rows, map[int]float64{}), append(f.b, right)
	return len(f.rows) - 1
}

// newStandard states p: areas, and for every bar and case the two slacks of strength, t = st a - q and s = sc a + q; so
// q = st a - t, and t + s = (st + sc) a. The force of a fixed bar is counted from its finite end.
func newStandard(p *lp.Problem) *standard {
	f := &standard{}
	for _, c := range p.Cases {
		for _, v := range c.Load {
			f.row(-v)
		}
	}
	for i := range p.Bars.Len() {
		if p.Bars.Fixed[i] {
			f.fixed(p, i)
		} else {
			f.bar(p, i)
		}
	}
	return f
}

func (f *standard) bar(p *lp.Problem, i int) {
	b := &p.Bars
	area := f.column(b.Cost[i])
	if !math.IsInf(b.Upper[i], 1) {
		r := f.row(b.Upper[i])
		f.rows[r][area], f.rows[r][f.column(0)] = 1, 1
	}
	for k, c := range p.Cases {
		t, s := f.column(0), f.column(0)
		r := f.row(0)
		f.rows[r][t], f.rows[r][s], f.rows[r][area] = 1, 1, -b.Tension[i]-b.Compression[i]
		for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
			row := f.rows[k*p.Rows+int(b.Row[j])]
			row[t] -= b.B[j]
			row[area] += b.Tension[i]*b.B[j] - c.Gravity*b.H[j]
		}
	}
}

// fixed adds q = st A - t or, if tension is unlimited, q = -sc A + t, with t >= 0 and, if both ends are finite,
// t <= (st + sc) A.
func (f *standard) fixed(p *lp.Problem, i int) {
	b := &p.Bars
	a := b.Upper[i]
	end, sign := b.Tension[i]*a, -1.0
	if math.IsInf(b.Tension[i], 1) {
		end, sign = -b.Compression[i]*a, 1
	}
	for k, c := range p.Cases {
		t := f.column(0)
		if width := (b.Tension[i] + b.Compression[i]) * a; !math.IsInf(width, 1) {
			r := f.row(width)
			f.rows[r][t], f.rows[r][f.column(0)] = 1, 1
		}
		for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
			r := k*p.Rows + int(b.Row[j])
			f.rows[r][t] += sign * b.B[j]
			f.b[r] -= end*b.B[j] - c.Gravity*b.H[j]*a
		}
	}
}

// dual solves maximise b.y, a'y <= c as minimise -b.(y+ - y-), a'(y+ - y-) + s = c. All c >= 0: the slacks are a basis to
// start from. Redundant rows of a do no harm here.
func (f *standard) dual() (float64, error) {
	n := len(f.c)
	var used []int // rows of a that are not empty
	for r, row := range f.rows {
		empty := true
		for _, v := range row {
			empty = empty && v == 0
		}
		if !empty {
			used = append(used, r)
		} else if f.b[r] != 0 {
			return 0, ErrInfeasible
		}
	}
	m := len(used)
	if n == 0 || m == 0 {
		return 0, nil
	}
	a := mat.NewDense(n, 2*m+n, nil)
	cost, basis := make([]float64, 2*m+n), make([]int, n)
	for x, r := range used {
		cost[2*x], cost[2*x+1] = -f.b[r], f.b[r]
		for j, v := range f.rows[r] {
			a.Set(j, 2*x, v)
			a.Set(j, 2*x+1, -v)
		}
	}
	for j := range n {
		basis[j] = 2*m + j
		a.Set(j, 2*m+j, 1)
	}
	v, _, err := simplex.Simplex(cost, a, f.c, simplexTolerance, basis)
	if errors.Is(err, simplex.ErrUnbounded) {
		return 0, ErrInfeasible
	}
	return -v, err
}

// primal solves the program itself, after dropping the rows that depend on others.
func (f *standard) primal() (float64, error) {
	rows, right, consistent := f.independent()
	if !consistent {
		return 0, simplex.ErrInfeasible
	}
	var used []int // columns that are not empty
	for j := range f.c {
		for _, row := range rows {
			if row[j] != 0 {
				used = append(used, j)
				break
			}
		}
	}
	if len(rows) == 0 {
		return 0, nil
	}
	a := mat.NewDense(len(rows), len(used), nil)
	cost := make([]float64, len(used))
	for x, j := range used {
		cost[x] = f.c[j]
		for r, row := range rows {
			a.Set(r, x, row[j])
		}
	}
	v, _, err := simplex.Simplex(cost, a, right, simplexTolerance, nil)
	return v, err
}

// dependentShare is a pivot or a right-hand side that counts as zero, of coefficients near 1.
const dependentShare = 1e-10

// independent returns the rows that Gaussian elimination with full pivoting finds to be independent, as they were, and
// whether the others ask for the same.
func (f *standard) independent() (rows [][]float64, right []float64, consistent bool) {
	n := len(f.c)
	work := make([][]float64, len(f.rows))
	for r := range f.rows {
		work[r] = append(f.full(r), f.b[r]) // the right-hand side is the last column
	}
	done := make([]bool, len(work))
	for {
		pr, pj, top := -1, -1, dependentShare
		for r := range work {
			for j, v := range work[r][:n] {
				if !done[r] && math.Abs(v) > top {
					pr, pj, top = r, j, math.Abs(v)
				}
			}
		}
		if pr < 0 {
			break
		}
		done[pr] = true
		for r := range work {
			if !done[r] && work[r][pj] != 0 {
				x := work[r][pj] / work[pr][pj]
				for j := range n + 1 {
					work[r][j] -= x * work[pr][j]
				}
				work[r][pj] = 0
			}
		}
	}
	consistent = true
	for r := range f.rows {
		if done[r] {
			rows, right = append(rows, f.full(r)), append(right, f.b[r])
		} else if math.Abs(work[r][n]) > dependentShare {
			consistent = false
		}
	}
	return rows, right, consistent
}

// full returns row r with its zeros.
func (f *standard) full(r int) []float64 {
	x := make([]float64, len(f.c))
	for j, v := range f.rows[r] {
		x[j] = v
	}
	return x
}
