package interior

import (
	"math"
	"slices"
)

// iterate is a primal-dual point. Arrays over bars and cases are laid out [bar * cases + case].
type iterate struct {
	a, z, pi []float64 // area, room to its limit, multiplier of the limit
	q        []float64 // force
	p, m     []float64 // room in tension st a - q, in compression sc a + q; both > 0
	yp, ym   []float64 // their multipliers, both > 0
	u        []float64 // displacements, in the layout of the system
}

func newIterate(s *scaled, size int) *iterate {
	n, nk := s.bars, s.bars*s.cases
	return &iterate{a: make([]float64, n), z: make([]float64, n), pi: make([]float64, n), q: make([]float64, nk), p: make([]float64, nk),
		m: make([]float64, nk), yp: make([]float64, nk), ym: make([]float64, nk), u: make([]float64, size)}
}

func (x *iterate) clone() *iterate {
	c := slices.Clone[[]float64]
	return &iterate{a: c(x.a), z: c(x.z), pi: c(x.pi), q: c(x.q), p: c(x.p), m: c(x.m), yp: c(x.yp), ym: c(x.ym), u: c(x.u)}
}

// residuals of the optimality conditions at a point.
type residuals struct {
	compat []float64 // re_ik = e_ik - (y+ - y-), e = -b'u
	price  []float64 // rc_i = c + pi - sum_k [st y+ + sc y- + g h'u]
	force  []float64 // rf = -(B q - g H a + f), in the layout of the system
}

func (sys *system) residuals(x *iterate) residuals {
	s, k := sys.s, sys.s.cases
	r := residuals{compat: make([]float64, s.bars*k), price: make([]float64, s.bars), force: sys.unbalanced(x.q, x.a)}
	for i := range s.bars {
		price := s.cost[i] + x.pi[i]
		for c := range k {
			j := i*k + c
			r.compat[j] = -sys.dot(i, c, x.u) - (x.yp[j] - x.ym[j])
			if s.hasP[i] {
				price -= s.st[i] * x.yp[j]
			}
			if s.hasM[i] {
				price -= s.sc[i] * x.ym[j]
			}
			if s.weighs && s.gravity[c] != 0 {
				price -= s.gravity[c] * sys.lift(i, c, x.u)
			}
		}
		r.price[i] = price
	}
	return r
}

// unbalanced returns -(B q - g H a + f).
func (sys *system) unbalanced(q, a []float64) []float64 {
	s, k := sys.s, sys.s.cases
	r := make([]float64, sys.size)
	for c := range k {
		for row, f := range s.load[c] {
			r[sys.base[row]+int32(c)*sys.stride[row]] = -f
		}
	}
	for i := range s.bars {
		for c := range k {
			sys.add(i, c, -q[i*k+c], s.gravity[c]*a[i], r)
		}
	}
	return r
}

// complementarity returns the sum of the products and how many there are.
func (s *scaled) complementarity(x *iterate) (sum float64, count int) {
	for i := range s.bars {
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			if s.hasP[i] {
				sum += x.p[j] * x.yp[j]
				count++
			}
			if s.hasM[i] {
				sum += x.m[j] * x.ym[j]
				count++
			}
		}
		if s.hasZ[i] {
			sum += x.z[i] * x.pi[i]
			count++
		}
	}
	return sum, count
}

// values returns the primal and the dual objective.
func (sys *system) values(x *iterate) (primal, dual float64) {
	s := sys.s
	for i := range s.bars {
		if !s.fixed[i] {
			primal += s.cost[i] * x.a[i]
			if s.hasZ[i] {
				dual -= s.up[i] * x.pi[i]
			}
			continue
		}
		if math.IsInf(s.up[i], 1) {
			continue
		}
		v := 0.0
		for c := range s.cases {
			j := i*s.cases + c
			if s.hasP[i] {
				v += s.st[i] * x.yp[j]
			}
			if s.hasM[i] {
				v += s.sc[i] * x.ym[j]
			}
			v += s.gravity[c] * sys.lift(i, c, x.u)
		}
		dual -= s.up[i] * v
	}
	for c := range s.cases {
		for row, f := range s.load[c] {
			dual += f * x.u[sys.base[row]+int32(c)*sys.stride[row]]
		}
	}
	return primal, dual
}
