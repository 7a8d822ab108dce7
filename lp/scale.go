package lp

import "math"

// Scale is how a problem was made dimensionless: every bar's larger finite strength is 1, the largest load is 1 and the mean
// cost of a unit of force is 1.
type Scale struct {
	Force  float64   // the largest load F
	Cost   float64   // Lambda, the mean of c_i / sigma_i
	Sigma  []float64 // per bar, the larger finite strength
	source *Problem
}

// Scaled returns p without dimensions, for solvers that want numbers near 1:
//
//	a' = a sigma/F,  q' = q/F,  c' = c/(sigma Lambda),  u' = u/Lambda,  h' = h/sigma,  f' = f/F.
//
// Rows, blocks and the columns b are shared with p.
func (p *Problem) Scaled() (*Problem, *Scale) {
	b := &p.Bars
	n := b.Len()
	s := &Scale{Sigma: make([]float64, n), source: p}
	counted := 0
	for i := range n {
		for _, v := range []float64{b.Tension[i], b.Compression[i]} {
			if !math.IsInf(v, 1) {
				s.Sigma[i] = math.Max(s.Sigma[i], v)
			}
		}
		if s.Sigma[i] == 0 {
			s.Sigma[i] = 1
		}
		if !b.Fixed[i] {
			s.Cost += b.Cost[i] / s.Sigma[i]
			counted++
		}
	}
	if s.Cost /= math.Max(float64(counted), 1); s.Cost == 0 {
		s.Cost = 1
	}
	for _, c := range p.Cases {
		for _, f := range c.Load {
			s.Force = math.Max(s.Force, math.Abs(f))
		}
	}
	if s.Force == 0 {
		s.Force = 1
	}
	q := &Problem{Rows: p.Rows, Block: p.Block, At: p.At}
	for i := range n {
		lo, hi := b.Ptr[i], b.Ptr[i+1]
		h := make([]float64, hi-lo)
		for j := range h {
			h[j] = b.H[lo+int32(j)] / s.Sigma[i]
		}
		q.Bars.Add(b.Row[lo:hi], b.B[lo:hi], h, b.Tension[i]/s.Sigma[i], b.Compression[i]/s.Sigma[i], b.Cost[i]/(s.Sigma[i]*s.Cost),
			b.Upper[i]*s.Sigma[i]/s.Force, b.Fixed[i])
	}
	for _, c := range p.Cases {
		load := make([]float64, len(c.Load))
		for r, f := range c.Load {
			load[r] = f / s.Force
		}
		q.Cases = append(q.Cases, Case{Name: c.Name, Gravity: c.Gravity, Load: load})
	}
	return q, s
}

// Restore turns a solution of the scaled problem into one of the problem itself. A collapse motion keeps its size.
func (s *Scale) Restore(sol *Solution) {
	p := s.source
	for i := range sol.Area {
		if sol.Area[i] *= s.Force / s.Sigma[i]; p.Bars.Fixed[i] {
			sol.Area[i] = p.Bars.Upper[i]
		}
	}
	for k := range sol.Force {
		for i := range sol.Force[k] {
			sol.Force[k][i] *= s.Force
		}
	}
	if sol.Status != NoEquilibrium {
		for k := range sol.Displacement {
			for r := range sol.Displacement[k] {
				sol.Displacement[k][r] *= s.Cost
			}
		}
	}
	sol.Objective *= s.Force * s.Cost
	sol.Bound *= s.Force * s.Cost
}
