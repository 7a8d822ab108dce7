package layout

import (
	"context"
	"math"
	"slices"

	"boughwork/lp"
)

// strengthen returns forces for case k that ask for the cheapest additions to the areas of d, exact to a small share of
// the budget: minimise sum c s subject to equilibrium and -sc (a + s) <= q <= st (a + s). Each bar is there twice, once with
// its area at no cost and once to be bought; so is each foot that costs. It returns nil if the bars of d cannot carry the
// case within the budget. What is bought does not weigh here: complete sees to that.
func (st *study) strengthen(ctx context.Context, d *design, k int, budget float64) ([]float64, error) {
	p := st.prog.problem(d.pairs, []int{k})
	twin := st.twins(p, d.pairs, d.area, d.feet)
	clear(p.Bars.H[:p.Bars.Ptr[len(d.pairs)]])
	sol, err := st.opt.Solver.Solve(ctx, p, nil, lp.Settings{Gap: strengthenGap, Absolute: strengthenFloor * budget, Ceiling: budget, Iterations: smallIterations})
	if err != nil || sol.Raw || sol.Status == lp.NoEquilibrium || sol.Objective > budget {
		return nil, err
	}
	base := p.Bars.Len() - len(twin)
	q := slices.Clone(sol.Force[0][:base])
	for j, i := range twin {
		q[i] += sol.Force[0][base+j]
	}
	return q, nil
}

// strengthenGap is how exactly the cost of strengthening is found, as a share of itself; strengthenFloor of the budget.
const (
	strengthenGap   = 1e-2
	strengthenFloor = 2e-3
)

// twins adds to p a bar of fixed area beside every bar of d and every costed foot, and returns which they belong to.
func (st *study) twins(p *lp.Problem, pairs []pair, area, feet []float64) []int {
	n, kept := p.Bars.Len()-len(st.s.Kept)-st.prog.feet.Len(), len(st.s.Kept)
	b := &p.Bars
	top := slices.Max(append([]float64{0}, area...))
	var twin []int
	add := func(i int, a float64) {
		lo, hi := b.Ptr[i], b.Ptr[i+1]
		b.Add(b.Row[lo:hi], b.B[lo:hi], b.H[lo:hi], b.Tension[i], b.Compression[i], 0, a, true)
		twin = append(twin, i)
	}
	for i := range pairs {
		if area[i] > freeArea*top {
			add(i, area[i])
		}
	}
	for i, a := range feet {
		if !st.prog.feet.Fixed[i] && a > 0 {
			add(n+kept+i, a)
		}
	}
	return twin
}

// Bars below this share of the largest area are not worth a twin.
const freeArea = 1e-7

// wanted returns the bars that case k would have, at the least cost, beside the areas of t: minimise sum c s subject to
// equilibrium and -sc (a + s) <= q <= st (a + s), over all active bars. Each bar of t is there twice, once with its area
// at no cost and once to be bought.
func (st *study) wanted(ctx context.Context, t trimmed, k int) (wish, error) {
	pairs := union(st.active.pairs, t.pairs)
	n, kept := len(t.pairs), len(st.s.Kept)
	p := st.prog.problem(pairs, []int{k})
	st.twins(p, pairs, onto(pairs, t.pairs, t.sol.Area[:n]), t.sol.Area[n+kept:])
	set := lp.Settings{Gap: wantedGap, Absolute: wantedShare * st.opt.Gap * math.Max(t.sol.Objective, 1e-300)}
	sol, err := st.opt.Solver.Solve(ctx, p, nil, set)
	if err != nil || sol.Raw || sol.Status == lp.NoEquilibrium {
		return wish{}, err
	}
	out := wish{able: true, cost: sol.Objective}
	v := trimmed{&solved{sol: sol, problem: p}, pairs}
	top := slices.Max(append([]float64{0}, t.sol.Area[:n]...))
	for _, i := range st.promising(v, wantedOfBought) {
		if sol.Area[i] > wantedOfAll*top {
			out.bars = append(out.bars, pairs[i])
		}
	}
	return out, nil
}

// wish is what a case would have beside a design. It is not able if the active bars cannot carry the case at any price.
type wish struct {
	able bool
	bars []pair
	cost float64
}

// wantedGap and wantedShare (of the gap of the study) say how exactly the bars that a case wants are found; wantedOfBought
// how promising they must be, and wantedOfAll from what share of the largest area on they count.
const (
	wantedGap      = 1e-2
	wantedShare    = 1e-2
	wantedOfBought = 1
	wantedOfAll    = 1e-7
)
