//go:build glpk && cgo

package glpk

import (
	"math"

	"boughwork/lp"
)

// answer turns columns x and row duals pi into a solution in the caller's units. An area is what the forces need; where
// bars weigh, it is no less than the program's, since a smaller one would change the load.
func (m *model) answer(x, pi []float64) *lp.Solution {
	b := &m.p.Bars
	s := blank(m.p)
	s.Objective = 0
	for i := range s.Area {
		need := 0.0
		for k := range m.p.Cases {
			q, a := m.forceOf(i, k, x)
			s.Force[k][i] = q
			if m.p.Cases[k].Gravity != 0 {
				need = math.Max(need, a)
			}
			switch {
			case b.Fixed[i]:
			case q > 0 && b.Tension[i] > 0:
				need = math.Max(need, q/b.Tension[i])
			case q < 0 && b.Compression[i] > 0:
				need = math.Max(need, -q/b.Compression[i])
			}
		}
		s.Area[i] = need
		if b.Fixed[i] {
			s.Area[i] = b.Upper[i]
		} else {
			s.Objective += b.Cost[i] * need
		}
	}
	s.Displacement = m.displacement(pi, m.cost/m.force)
	m.p.Settle(s.Displacement)
	s.Bound, _ = lp.Bound(m.p, s.Displacement)
	return s
}

// forceOf returns force and area of bar i in case k.
func (m *model) forceOf(i, k int, x []float64) (force, area float64) {
	b := &m.p.Bars
	t, c := m.tension[k][i], m.compress[k][i]
	if t != 0 {
		force += x[t] * m.force
		area += x[t] * m.force / b.Tension[i]
	}
	if c != 0 {
		force -= x[c] * m.force
		area += x[c] * m.force / b.Compression[i]
	}
	if a := m.area[i]; a != 0 {
		area = x[a] * m.force / m.strength[i]
	}
	return force, area
}

// clamp puts columns that passed a bound by rounding on it: a tie must not push, however little.
func (m *model) clamp(x []float64) {
	for j := 1; j < len(x); j++ {
		x[j] = math.Min(math.Max(x[j], m.colLow[j]), m.colHigh[j])
	}
}

// displacement returns u = -pi: pi is the objective's rate with the right-hand side, and that is -f.
func (m *model) displacement(pi []float64, scale float64) [][]float64 {
	u := make([][]float64, len(m.p.Cases))
	for k := range u {
		u[k] = make([]float64, m.p.Rows)
		for r := range u[k] {
			u[k][r] = -scale * pi[m.balance(k, int32(r))]
		}
	}
	return u
}

// ray returns the collapse motion, its largest component 1, from the duals of the elastic program, and nil if it proves
// nothing.
func (m *model) ray(pi []float64) [][]float64 {
	u := m.displacement(pi, 1)
	top := 0.0
	for _, k := range u {
		for _, v := range k {
			top = math.Max(top, math.Abs(v))
		}
	}
	if !(top > 0) {
		return nil
	}
	for _, k := range u {
		for r := range k {
			k[r] /= top
		}
	}
	m.p.Settle(u)
	work, worst := lp.CheckRay(m.p, u)
	if !(work > 0) || worst*m.cost > rayShare*work {
		return nil
	}
	return u
}

// A collapse motion proves that there is no equilibrium if any layout would need an objective of 1 / rayShare of the
// mean cost of the largest load.
const rayShare = 1e-6

// blank is a solution that says nothing yet.
func blank(p *lp.Problem) *lp.Solution {
	s := &lp.Solution{Area: make([]float64, p.Bars.Len()), Objective: math.NaN(), Bound: math.Inf(-1)}
	for range p.Cases {
		s.Force = append(s.Force, make([]float64, p.Bars.Len()))
		s.Displacement = append(s.Displacement, make([]float64, p.Rows))
	}
	for i, fixed := range p.Bars.Fixed {
		if fixed {
			s.Area[i] = p.Bars.Upper[i]
		}
	}
	return s
}
