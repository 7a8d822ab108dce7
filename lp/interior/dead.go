package interior

import (
	"boughwork/lp"
)

// withoutDead returns the problem without the bars that can have no area, and the index of every bar that is left; nil if
// there is no such bar. An interior point has room on both sides of every limit, and they have none.
func withoutDead(p *lp.Problem) (*lp.Problem, []int) {
	var index []int
	for i, a := range p.Bars.Upper {
		if a > 0 {
			index = append(index, i)
		}
	}
	if len(index) == p.Bars.Len() {
		return nil, nil
	}
	q := *p
	q.Bars = lp.Bars{Ptr: []int32{0}}
	for _, i := range index {
		b := &p.Bars
		lo, hi := b.Ptr[i], b.Ptr[i+1]
		q.Bars.Add(b.Row[lo:hi], b.B[lo:hi], b.H[lo:hi], b.Tension[i], b.Compression[i], b.Cost[i], b.Upper[i], b.Fixed[i])
	}
	return &q, index
}

// revive returns the solution over all bars of p.
func revive(p *lp.Problem, sol *lp.Solution, index []int) *lp.Solution {
	spread := func(x []float64) []float64 {
		out := make([]float64, p.Bars.Len())
		for j, i := range index {
			out[i] = x[j]
		}
		return out
	}
	sol.Area = spread(sol.Area)
	for k := range sol.Force {
		sol.Force[k] = spread(sol.Force[k])
	}
	sol.Warm = nil
	p.Settle(sol.Displacement)
	return sol
}
