package ground

import (
	"math"
	"slices"
)

// insideHull is the distance, relative to the largest case, up to which a case counts as lying between others.
const insideHull = 1e-9

// distinct drops combinations that come twice.
func (b *builder) distinct(combos []combo) []combo {
	var out []combo
	for _, c := range combos {
		same := func(o combo) bool { return o.permanent == c.permanent && slices.Equal(o.factor, c.factor) }
		if !slices.ContainsFunc(out, same) {
			out = append(out, c)
		}
	}
	return out
}

// essential drops the combinations that cannot govern. The loads that bars of given areas can carry form a convex set
// that holds the unloaded state: equilibrium and strength are linear. So a combination that is a weighted mean of others
// and of no load at all, in all nodal loads and in the factor of self-weight, is carried by whatever carries the others.
// Combinations without any nodal load go too.
func (b *builder) essential(combos []combo, effects []effect) []combo {
	points := b.caseCoordinates(combos, effects)
	keep := make([]bool, len(combos))
	for i, p := range points {
		loaded := false
		for _, v := range p[:len(p)-1] {
			loaded = loaded || math.Abs(v) > insideHull
		}
		keep[i] = loaded
	}
	for i := len(combos) - 1; i >= 0; i-- {
		if !keep[i] {
			continue
		}
		var others [][]float64
		for j, p := range points {
			if keep[j] && j != i {
				others = append(others, p)
			}
		}
		if meanOf(others, points[i]) {
			keep[i] = false
			b.omitted = append(b.omitted, b.comboName(combos[i], effects))
		}
	}
	slices.Reverse(b.omitted)
	var out []combo
	for i, c := range combos {
		if keep[i] {
			out = append(out, c)
		}
	}
	return out
}

// caseCoordinates returns the combinations as points: coordinates of their nodal loads in an orthonormal basis of what the
// actions span, then the factor of self-weight, all scaled to at most about 1.
func (b *builder) caseCoordinates(combos []combo, effects []effect) [][]float64 {
	nodes := len(b.nodes)
	vector := func(weight func(i int) float64) []float64 {
		v := make([]float64, 3*nodes)
		for i, e := range effects {
			if w := weight(i); w != 0 {
				for n, f := range e.force {
					v[3*n] += w * f.X
					v[3*n+1] += w * f.Y
					v[3*n+2] += w * f.Z
				}
			}
		}
		return v
	}
	basis := [][]float64{vector(func(i int) float64 {
		if b.spec.Actions[i].Kind == Permanent {
			return 1
		}
		return 0
	})}
	for i, a := range b.spec.Actions {
		if a.Kind != Permanent {
			basis = append(basis, vector(func(j int) float64 {
				if i == j {
					return 1
				}
				return 0
			}))
		}
	}
	r := triangular(basis)
	out := make([][]float64, len(combos))
	largest := 0.0
	for k, c := range combos {
		factors := []float64{c.permanent}
		for i, a := range b.spec.Actions {
			if a.Kind != Permanent {
				factors = append(factors, c.factor[i])
			}
		}
		p := make([]float64, len(r)+1)
		for j := range r {
			for i, f := range factors {
				p[j] += r[j][i] * f
			}
		}
		largest = math.Max(largest, norm(p))
		out[k] = p
	}
	for k, c := range combos {
		for j := range out[k] {
			out[k][j] /= math.Max(largest, math.SmallestNonzeroFloat64)
		}
		if b.spec.SelfWeight {
			out[k][len(r)] = c.permanent
		}
	}
	return out
}

// triangular returns the rows of R of the QR factorisation of columns by modified Gram-Schmidt, one row for every column
// that is not a combination of those before. The columns are used up.
func triangular(columns [][]float64) [][]float64 {
	var rows [][]float64
	full := mapped(columns, norm)
	for i, q := range columns {
		l := norm(q)
		if l <= insideHull*full[i] || l == 0 {
			continue
		}
		row := make([]float64, len(columns))
		for k := range q {
			q[k] /= l
		}
		row[i] = l
		for j := i + 1; j < len(columns); j++ {
			row[j] = dot(q, columns[j])
			for k := range q {
				columns[j][k] -= row[j] * q[k]
			}
		}
		rows = append(rows, row)
	}
	return rows
}

// meanOf reports whether c is a weighted mean of points and the origin: weights w >= 0 with sum at most 1.
func meanOf(points [][]float64, c []float64) bool {
	columns := make([][]float64, 0, len(points)+1)
	for _, p := range points {
		columns = append(columns, append(slices.Clone(p), 1))
	}
	columns = append(columns, append(make([]float64, len(c)), 1))
	return leastResidual(columns, append(slices.Clone(c), 1)) <= insideHull
}

func dot(a, b []float64) float64 {
	var s float64
	for i := range a {
		s += a[i] * b[i]
	}
	return s
}

func norm(a []float64) float64 { return math.Sqrt(dot(a, a)) }
