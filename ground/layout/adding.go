package layout

import (
	"context"
	"math"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
)

// study is the state of a layout study: the program, the bars in it and what is known so far.
type study struct {
	s      *ground.Structure
	prog   *program
	can    *ground.Candidates
	pricer pricer
	active *active
	opt    Options
	result *Result
	warm   warm
	order  []int        // cases with loads, by falling cost of the elastic guess
	plane  bool         // all nodes in one plane
	letGo  map[int]bool // cases that governed once and were let go
	rounds int
	// Interior-point iterations of all rounds of member adding.
	iterations int
}

// Each round of member adding solves to this share of the gap that pricing last saw, but no tighter than a third of the
// target and no looser than looseGap: loose displacements give valid bounds too, and cost fewer iterations.
const (
	looseGap   = 3e-2
	roundShare = 0.1
	goalShare  = 0.3
)

// With one case in space a start from the last round pays only from this gap down: until then too many bars are new. In a
// plane, and with more cases, it pays from the beginning.
const warmBelow = 0.05

// A candidate is worth adding from this price over its cost on.
const worthAdding = 1 + 1e-7

// solved is a layout for some of the cases, with its bound over all candidates.
type solved struct {
	cases     []int
	sol       *lp.Solution
	problem   *lp.Problem
	bound     float64
	worst     float64      // largest price over cost, all candidates
	u         [][]geom.Vec // [case of cases][node], not scaled
	scale     float64      // what u is to be scaled by
	best      [][]geom.Vec // [case of all] displacements of the best bound so far, scaled; nil for a case that it does not need
	bestBound float64
	bestWorst float64
}

func (v *solved) gap() float64 {
	if v.sol.Objective <= 0 {
		return 0
	}
	return (v.sol.Objective - v.bestBound) / v.sol.Objective
}

// grow adds members until the layout for the given cases is within target of its bound (Gilbert and Tyas 2003).
func (st *study) grow(ctx context.Context, cases []int, target float64, from *solved) (*solved, error) {
	gap := looseGap
	v := &solved{cases: cases, bestBound: math.Inf(-1)}
	if from != nil { // a bound for some cases is a bound for all
		v.bestBound, v.bestWorst = from.bestBound, from.bestWorst
		v.best = from.best
		gap = math.Max(math.Min(gap, from.gap()), goalShare*target)
	}
	gravity := st.gravity(cases)
	for {
		v.problem = st.prog.problem(st.active.pairs, cases)
		start := st.warm.start(st, cases)
		if v.sol != nil && v.gap() > warmBelow && !st.plane && len(cases) == 1 {
			start = nil
		}
		sol, err := st.opt.Solver.Solve(ctx, v.problem, start, lp.Settings{Gap: gap})
		if err != nil {
			return nil, err
		}
		st.rounds++
		st.iterations += sol.Iterations
		v.sol = sol
		st.warm.keep(st, cases, sol)
		if sol.Status == lp.Cancelled {
			return v, nil
		}
		if sol.Raw && sol.Status != lp.NoEquilibrium || math.IsNaN(sol.Objective) && sol.Status != lp.NoEquilibrium { // nothing feasible was found
			return v, nil
		}
		v.problem.Settle(sol.Displacement)
		v.u = st.expand(sol.Displacement)
		if sol.Status == lp.NoEquilibrium {
			if st.collapseAdds(v, gravity) {
				continue
			}
			return v, nil
		}
		f := st.pricer.price(v.u, gravity, worthAdding)
		st.judge(v, f.worst)
		st.report(v)
		if v.gap() <= target || sol.Status != lp.Optimal && gap <= goalShare*target {
			return v, nil
		}
		if st.rounds >= st.opt.MaxRounds {
			v.sol.Status = lp.IterationLimit
			return v, nil
		}
		before := gap
		gap = math.Min(looseGap, math.Max(goalShare*target, roundShare*v.gap()))
		st.active.drop(sol.Area, func(i int) float64 {
			return v.problem.Price(i, sol.Displacement) / v.problem.Bars.Cost[i]
		})
		added := st.active.add(st.s, f.pairs, max(len(st.s.Nodes), 64))
		if added == 0 && gap >= before {
			gap = before / 4 // nothing to add: the program itself is what is not solved well enough
			if gap < 1e-10 {
				return v, nil
			}
		}
	}
}

// judge computes the bound of the present displacements over all candidates and keeps the best.
func (st *study) judge(v *solved, worst float64) {
	v.worst = math.Max(worst, 1e-300)
	// Costed feet count as candidates too.
	n := len(st.active.pairs) + len(st.s.Kept)
	for i := n; i < v.problem.Bars.Len(); i++ {
		if !v.problem.Bars.Fixed[i] {
			v.worst = math.Max(v.worst, v.problem.Price(i, v.sol.Displacement)/v.problem.Bars.Cost[i])
		}
	}
	v.scale = 1
	if v.worst > 1 {
		v.scale = 1 / v.worst
	}
	bound := st.dual(v.problem, v.sol.Displacement, v.scale)
	if bound > v.bestBound {
		v.bestBound, v.bestWorst = bound, v.worst-1
		v.best = make([][]geom.Vec, len(st.s.Cases))
		for c, k := range v.cases {
			v.best[k] = make([]geom.Vec, len(v.u[c]))
			for i, w := range v.u[c] {
				v.best[k][i] = w.Scale(v.scale)
			}
		}
	}
	v.bound = bound
}

// dual returns the dual value of scale x u: the work of the loads less what the fixed bars and feet are worth.
func (st *study) dual(p *lp.Problem, u [][]float64, scale float64) float64 {
	work := 0.0
	for k, c := range p.Cases {
		for r, f := range c.Load {
			work += f * u[k][r]
		}
	}
	for i, fixed := range p.Bars.Fixed {
		if fixed && p.Bars.Upper[i] > 0 {
			work -= p.Bars.Upper[i] * p.Price(i, u)
		}
	}
	return scale * work
}

// collapseAdds looks for candidates that resist a collapse motion, and adds them. It reports whether there are any.
func (st *study) collapseAdds(v *solved, gravity []float64) bool {
	f := st.pricer.price(v.u, gravity, st.resists(v))
	return st.active.add(st.s, f.pairs, len(st.s.Nodes)) > 0
}

// A candidate resists a motion if its price is this share of what a mean layout would pay for the work of the loads.
const resistShare = 1e-5

// resists returns the ratio of price to cost from which a candidate resists the motion of v: the work of the loads over
// a volume beyond all reason.
func (st *study) resists(v *solved) float64 {
	work := st.dual(v.problem, v.sol.Displacement, 1)
	return resistShare * work / st.naturalVolume()
}

// naturalVolume is the volume of one bar across the structure under the whole load of the largest case, m3.
func (st *study) naturalVolume() float64 {
	low, high := st.s.Nodes[0].At, st.s.Nodes[0].At
	for _, n := range st.s.Nodes {
		low = geom.Vec{X: math.Min(low.X, n.At.X), Y: math.Min(low.Y, n.At.Y), Z: math.Min(low.Z, n.At.Z)}
		high = geom.Vec{X: math.Max(high.X, n.At.X), Y: math.Max(high.Y, n.At.Y), Z: math.Max(high.Z, n.At.Z)}
	}
	top := 0.0
	for _, c := range st.s.Cases {
		sum := 0.0
		for _, l := range c.Loads {
			sum += l.Force.Norm()
		}
		top = math.Max(top, sum)
	}
	m := st.s.Material
	return math.Max(top, 1) * high.Sub(low).Norm() / math.Min(math.Max(m.Tension, 1), math.Max(m.Compression, 1))
}

func (st *study) gravity(cases []int) []float64 {
	g := make([]float64, len(cases))
	for i, k := range cases {
		g[i] = st.s.Cases[k].Gravity
	}
	return g
}

func (st *study) expand(u [][]float64) [][]geom.Vec {
	out := make([][]geom.Vec, len(u))
	for k := range u {
		out[k] = st.prog.expand(u[k])
	}
	return out
}
