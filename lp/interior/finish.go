package interior

import (
	"context"
	"math"

	"boughwork/lp"
)

// Steps of the final repair of equilibrium, and the share of the largest load below which it has done its work.
const (
	repairSteps = 8
	repairFloor = 1e-13
)

// repair returns x with forces that are in equilibrium to set.Residual or better and areas that carry them: Newton steps
// on the balance of forces alone, with the weights of the point, so that bars near their limit move least.
func (sys *system) repair(ctx context.Context, x *iterate, set lp.Settings) *iterate {
	s := sys.s
	y := newIterate(s, sys.size)
	copy(y.a, x.a)
	copy(y.q, x.q)
	copy(y.u, x.u)
	s.fit(y)
	if largest(sys.unbalanced(y.q, y.a)) <= repairFloor {
		return y
	}
	w := &weights{invD: make([]float64, s.bars*s.cases), t: make([]float64, s.bars*s.cases), invS: make([]float64, s.bars)}
	s.weigh(x, w)
	if err := sys.assemble(ctx, w); err != nil {
		return y
	}
	d := newIterate(s, sys.size)
	zero, none := make([]float64, s.bars*s.cases), make([]float64, s.bars)
	best, bestLeft := y, largest(sys.unbalanced(y.q, y.a))
	for range repairSteps {
		r := sys.unbalanced(y.q, y.a)
		for j := range r {
			d.u[j] = -r[j]
		}
		sys.factor.Solve(d.u)
		sys.follow(w, zero, none, d)
		sys.refine(w, r, zero, none, repairFloor, d)
		next := newIterate(s, sys.size)
		copy(next.u, y.u)
		for j := range y.q {
			next.q[j] = y.q[j] + d.q[j]
		}
		for i := range y.a {
			next.a[i] = y.a[i] + d.a[i]
		}
		s.fit(next)
		left := largest(sys.unbalanced(next.q, next.a))
		y = next
		if left < bestLeft {
			best, bestLeft = y, left
		}
		if left <= repairFloor {
			break
		}
	}
	return best
}

// fit sets every area to what the forces need, or leaves a larger one where bars weigh, since a smaller area would
// change the load.
func (s *scaled) fit(x *iterate) {
	for i := range s.bars {
		if s.fixed[i] {
			continue
		}
		need := 0.0
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			need = math.Max(need, s.need(i, x.q[j]))
		}
		if s.weighs {
			need = math.Max(need, x.a[i])
		}
		x.a[i] = need
	}
}

// withoutArtificial returns the part of x that belongs to the caller's bars.
func (sys *system) withoutArtificial(x *iterate) *iterate {
	n, nk := sys.s.real, sys.s.real*sys.s.cases
	return &iterate{a: x.a[:n], z: x.z[:n], pi: x.pi[:n], q: x.q[:nk], p: x.p[:nk], m: x.m[:nk], yp: x.yp[:nk], ym: x.ym[:nk], u: x.u}
}

// Forces that leave more than this share of the largest load unbalanced are no equilibrium: half of what the record
// promises.
const balanceShare = 5e-9

// A bar that is stressed beyond this share of its strength, or a limit passed by it, makes an answer raw.
const strengthShare = 1e-9

// answer turns a point into a solution in the caller's units, with the bound from its displacements.
func (sys *system) answer(p *lp.Problem, x *iterate) *lp.Solution {
	s := sys.s
	sol := &lp.Solution{Area: make([]float64, s.real), Force: make([][]float64, s.cases), Displacement: sys.displacement(x.u, s.lambda)}
	for i := range s.real {
		sol.Area[i] = x.a[i] * s.force / s.sigma[i]
		if s.fixed[i] {
			sol.Area[i] = p.Bars.Upper[i]
		} else {
			sol.Objective += p.Bars.Cost[i] * sol.Area[i]
		}
	}
	for c := range s.cases {
		sol.Force[c] = make([]float64, s.real)
		for i := range s.real {
			sol.Force[c][i] = x.q[i*s.cases+c] * s.force
		}
	}
	p.Settle(sol.Displacement)
	sol.Bound, _ = lp.Bound(p, sol.Displacement)
	sol.Raw = s.broken(x) || largest(sys.unbalanced(x.q, x.a)) > balanceShare
	return sol
}

// broken reports whether a force is beyond what its bar's area carries, or no number.
func (s *scaled) broken(x *iterate) bool {
	for i := range s.real {
		slack := strengthShare * math.Max(x.a[i], 1e-9)
		if s.hasZ[i] && x.a[i] > s.up[i]+strengthShare*s.up[i] {
			return true
		}
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			q := x.q[j]
			if math.IsNaN(q) || s.hasP[i] && q > s.st[i]*x.a[i]+slack || s.hasM[i] && -q > s.sc[i]*x.a[i]+slack {
				return true
			}
		}
	}
	return false
}

// displacement returns u by case and row, in the caller's units.
func (sys *system) displacement(u []float64, scale float64) [][]float64 {
	out := make([][]float64, sys.s.cases)
	for c := range out {
		out[c] = make([]float64, sys.s.rows)
		for r := range out[c] {
			out[c][r] = scale * u[sys.base[r]+int32(c)*sys.stride[r]]
		}
	}
	return out
}

// The motion of a mechanism must leave every price below this share of the work of the loads over the mean cost.
const rayShare = 1e-6

// collapse returns a solution with the motion d as evidence, if it proves that there is no equilibrium.
func collapse(p *lp.Problem, sys *system, d []float64) *lp.Solution {
	u := sys.displacement(d, 1)
	normalise(u)
	work := 0.0
	for c, k := range p.Cases {
		for r, f := range k.Load {
			work += f * u[c][r]
		}
	}
	if !(work > 0) {
		return nil
	}
	for i := range sys.s.real {
		limit := rayShare * work / sys.s.force * sys.s.sigma[i] * sys.s.cost[i]
		if v := p.Price(i, u); !p.Bars.Fixed[i] && v > limit || p.Bars.Fixed[i] && v*p.Bars.Upper[i] > rayShare*work {
			return nil
		}
	}
	return &lp.Solution{Status: lp.NoEquilibrium, Area: make([]float64, p.Bars.Len()), Force: zeros(len(p.Cases), p.Bars.Len()),
		Displacement: u, Raw: true, Bound: math.Inf(1), Objective: math.NaN()}
}

// normalise scales a motion so that its largest component is 1.
func normalise(u [][]float64) {
	top := 0.0
	for _, k := range u {
		top = math.Max(top, largest(k))
	}
	if top == 0 {
		return
	}
	for _, k := range u {
		for r := range k {
			k[r] /= top
		}
	}
}

func zeros(n, m int) [][]float64 {
	z := make([][]float64, n)
	for i := range z {
		z[i] = make([]float64, m)
	}
	return z
}

// nothing is the solution of a problem without loads.
func nothing(p *lp.Problem) *lp.Solution {
	sol := &lp.Solution{Status: lp.Optimal, Area: make([]float64, p.Bars.Len()), Force: zeros(len(p.Cases), p.Bars.Len()),
		Displacement: zeros(len(p.Cases), p.Rows)}
	for i, fixed := range p.Bars.Fixed {
		if fixed {
			sol.Area[i] = p.Bars.Upper[i]
		}
	}
	return sol
}

// cancelled is the solution of a solve that ended before anything was found.
func cancelled(p *lp.Problem) *lp.Solution {
	sol := nothing(p)
	sol.Status, sol.Raw = lp.Cancelled, true
	sol.Objective = math.NaN()
	return sol
}
