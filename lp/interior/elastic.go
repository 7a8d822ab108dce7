package interior

import (
	"context"

	"boughwork/lp"
)

// Elastic returns the forces of every case of p in a linear elastic structure whose bars have the given stiffnesses (force
// over lengthening): B W B' d = f, q = -W B' d. Strengths, limits and weights play no part. One factorisation serves all
// cases, so that it is a cheap first guess of how cases compare. Where the bars are a mechanism, forces are unbalanced.
func Elastic(ctx context.Context, p *lp.Problem, stiffness []float64) ([][]float64, error) {
	if err := p.Validate(); err != nil {
		return nil, err
	}
	one := *p
	one.Cases = []lp.Case{{Load: make([]float64, p.Rows)}}
	b := &p.Bars
	s := &scaled{rows: p.Rows, bars: b.Len(), real: b.Len(), cases: 1, ptr: b.Ptr, row: b.Row, b: b.B, h: b.H, gravity: []float64{0}}
	sys, err := newSystem(s, &one)
	if err != nil {
		return nil, err
	}
	w := &weights{invD: stiffness, t: make([]float64, s.bars), invS: make([]float64, s.bars)}
	if err := sys.assemble(ctx, w); err != nil {
		return nil, err
	}
	out := make([][]float64, len(p.Cases))
	d := make([]float64, sys.size)
	for k, c := range p.Cases {
		for r, f := range c.Load {
			d[sys.base[r]] = f
		}
		sys.factor.Solve(d)
		out[k] = make([]float64, s.bars)
		for i := range out[k] {
			out[k][i] = -stiffness[i] * sys.dot(i, 0, d)
		}
	}
	return out, nil
}
