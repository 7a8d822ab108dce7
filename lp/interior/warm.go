package interior

import (
	"math"

	"boughwork/lp"
)

// A warm start scales displacements so that the dearest bar is at this share of its cost.
const warmSpare = 0.98

// fits reports whether a start has the shape of the problem and finite numbers.
func fits(start *lp.Start, p *lp.Problem) bool {
	if start == nil || len(start.Area) != p.Bars.Len() || len(start.Force) != len(p.Cases) || len(start.Displacement) != len(p.Cases) {
		return false
	}
	for k := range p.Cases {
		if len(start.Force[k]) != p.Bars.Len() || len(start.Displacement[k]) != p.Rows || !finite(start.Force[k]) || !finite(start.Displacement[k]) {
			return false
		}
	}
	return finite(start.Area)
}

// keep turns a point into a start in the caller's units.
func (sys *system) keep(x *iterate) *lp.Start {
	s := sys.s
	st := &lp.Start{Area: make([]float64, s.real), Force: zeros(s.cases, s.real), Displacement: sys.displacement(x.u, s.lambda)}
	for i := range s.real {
		st.Area[i] = x.a[i] * s.force / s.sigma[i]
		for c := range s.cases {
			st.Force[c][i] = x.q[i*s.cases+c] * s.force
		}
	}
	return st
}

// warm makes an inner point of a start: displacements scaled to feasibility, multipliers that split what is left of each
// cost, and areas lifted so that no product of slack and multiplier is below the mean that the gap asks for. Forces stay,
// and with them the balance at every node.
func (sys *system) warm(p *lp.Problem, start *lp.Start) *iterate {
	s := sys.s
	x := newIterate(s, sys.size)
	for c := range s.cases {
		for r, v := range start.Displacement[c] {
			x.u[sys.base[r]+int32(c)*sys.stride[r]] = v / s.lambda
		}
		for i := range s.bars {
			x.q[i*s.cases+c] = start.Force[c][i] / s.force
		}
	}
	worst, primal, work := 0.0, 0.0, 0.0
	for i := range s.bars {
		x.a[i] = start.Area[i] * s.sigma[i] / s.force
		if !s.fixed[i] {
			worst = math.Max(worst, sys.price(i, x.u)/s.cost[i])
			primal += s.cost[i] * x.a[i]
		}
	}
	scale := 1.0
	if worst > warmSpare {
		scale = warmSpare / worst
	}
	for j := range x.u {
		x.u[j] *= scale
	}
	for c := range s.cases {
		for row, f := range s.load[c] {
			work += f * x.u[sys.base[row]+int32(c)*sys.stride[row]]
		}
	}
	count := 2 * s.bars * s.cases
	mu := math.Max(primal-work, 1e-3*primal) / float64(count)
	for i := range s.bars {
		sys.warmBar(x, i, math.Max(mu, 1e-14))
	}
	return x
}

// warmBar sets the multipliers, area and slacks of bar i for products of about mu.
func (sys *system) warmBar(x *iterate, i int, mu float64) {
	s := sys.s
	k := float64(s.cases)
	var both float64
	if s.hasP[i] {
		both += s.st[i]
	}
	if s.hasM[i] {
		both += s.sc[i]
	}
	share := math.Max((s.cost[i]-sys.price(i, x.u))/(k*both), 1e-6*s.cost[i])
	if s.fixed[i] {
		x.a[i] = s.up[i]
		share = mu / math.Max(x.a[i]*both/2, 1e-9)
		if math.IsInf(x.a[i], 1) || !s.hasP[i] || !s.hasM[i] {
			share = math.Sqrt(mu)
		}
	}
	for c := range s.cases {
		j := i*s.cases + c
		e := -sys.dot(i, c, x.u)
		if s.hasP[i] {
			x.yp[j] = math.Max(e, 0) + share
			if !s.fixed[i] && s.st[i] > 0 {
				x.a[i] = math.Max(x.a[i], (x.q[j]+mu/x.yp[j])/s.st[i])
			}
		}
		if s.hasM[i] {
			x.ym[j] = math.Max(-e, 0) + share
			if !s.fixed[i] && s.sc[i] > 0 {
				x.a[i] = math.Max(x.a[i], (mu/x.ym[j]-x.q[j])/s.sc[i])
			}
		}
	}
	if s.hasZ[i] {
		x.a[i] = math.Min(x.a[i], 0.99*s.up[i])
		x.z[i] = s.up[i] - x.a[i]
		x.pi[i] = mu / x.z[i]
	}
	tiny := 1e-3 * math.Sqrt(mu) // a force at its limit gives way; the balance is mended on the way
	for c := range s.cases {
		j := i*s.cases + c
		if s.hasP[i] {
			x.q[j] = math.Min(x.q[j], s.st[i]*x.a[i]-tiny)
		}
		if s.hasM[i] {
			x.q[j] = math.Max(x.q[j], tiny-s.sc[i]*x.a[i])
		}
		x.p[j], x.m[j] = s.st[i]*x.a[i]-x.q[j], s.sc[i]*x.a[i]+x.q[j]
	}
}

// finite reports whether x holds no NaN, no infinity and nothing so large that its square overflows.
func finite(x []float64) bool {
	for _, v := range x {
		if !(math.Abs(v) < 1e150) {
			return false
		}
	}
	return true
}
