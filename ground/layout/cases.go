package layout

import (
	"cmp"
	"context"
	"math"
	"slices"

	"boughwork/lp"
	"boughwork/lp/interior"
)

// A full design: areas that carry every case, with the forces of every case.
type design struct {
	pairs     []pair
	area      []float64   // of pairs
	force     [][]float64 // [case][pair, kept, feet]
	objective float64
	volume    float64
	feet      []float64 // of the reactions of limited or costed feet
}

// How cases are added.
const (
	// firstCheck is the gap at which the other cases are looked at for the first time: early, since each case that turns
	// out to govern changes the layout.
	firstCheck = 3e-2
	// growShare is the share of the gap that the layout for the governing cases may use; the rest is for the others.
	growShare = 0.5
	// missingShare is the share of the gap that is for want of cases to which the next layout is solved.
	missingShare = 0.2
	// seedGap is how far the small layout for all cases may be from the bound to be a start for a program with more cases:
	// from farther away a cold start was seen to take fewer iterations.
	seedGap = 1e-2
	// slackShare is the share of the work of all loads below which a case does not govern.
	slackShare = 1e-6
)

// allCases finds the layout for all cases. It grows a layout for those that govern, makes of its bars a design for all
// cases (conclude), and lets the displacements of that design say which further case governs: a bound for some cases is a
// bound for all, so only the cases whose loads do work are needed for it.
func (st *study) allCases(ctx context.Context) (*solved, *design, error) {
	rank, err := st.rank(ctx)
	if err != nil || len(rank) == 0 {
		return nil, nil, err
	}
	governing := rank[:1:1]
	final := growShare * st.opt.Gap
	if len(rank) == 1 {
		final = 0.9 * st.opt.Gap
	}
	target := math.Max(final, firstCheck)
	var from *solved
	var best *design
	for {
		v, err := st.grow(ctx, governing, target, from)
		if err != nil || v.sol.Raw || v.sol.Status == lp.NoEquilibrium || v.sol.Status == lp.Cancelled {
			return v, best, err
		}
		from = v
		c, err := st.conclude(ctx, v)
		if err != nil {
			return v, best, err
		}
		if c.design != nil && (best == nil || c.design.objective < best.objective) {
			best = c.design
		}
		more := c.governs(governing, st.opt.Gap)
		if more == nil && c.stuck >= 0 && !slices.Contains(governing, c.stuck) {
			more = []int{c.stuck}
		}
		switch {
		case best != nil && (best.objective <= 0 || (best.objective-v.bestBound)/best.objective <= st.opt.Gap):
			return v, best, nil
		case c.hopeless >= 0 && !slices.Contains(governing, c.hopeless): // no bars carry it: let it prove that
			governing = []int{c.hopeless}
			from = nil
		case ctx.Err() != nil:
			v.sol.Status = lp.Cancelled
			return v, best, nil
		case v.sol.Status != lp.Optimal:
			return v, best, nil
		case st.rounds >= st.opt.MaxRounds || final < 1e-3*st.opt.Gap:
			v.sol.Status = lp.IterationLimit
			return v, best, nil
		case more != nil:
			governing = st.withoutSlack(v, governing)
			for _, k := range more {
				governing = with(governing, k)
			}
			missing := 1 - v.bestBound/c.layout.sol.Objective
			if missing < seedGap {
				st.warm.seed(st, c.layout, governing)
			}
			target = math.Max(final, math.Min(firstCheck, missingShare*missing))
		case target > final:
			target = final
		default:
			final /= 4
			target = final
		}
	}
}

// with returns the cases and one more, ascending; the same cases if it is among them.
func with(cases []int, k int) []int {
	if slices.Contains(cases, k) {
		return cases
	}
	out := append(slices.Clone(cases), k)
	slices.Sort(out)
	return out
}

// work returns the share that the loads of each case have in the work of all on the displacements of v.
func (v *solved) work() []float64 {
	work := make([]float64, len(v.cases))
	total := 0.0
	for i, c := range v.problem.Cases {
		for r, f := range c.Load {
			work[i] += f * v.sol.Displacement[i][r]
		}
		total += math.Abs(work[i])
	}
	for i := range work {
		work[i] = math.Abs(work[i]) / math.Max(total, 1e-300)
	}
	return work
}

// withoutSlack lets go of the cases whose loads do no work on the displacements: the layout carries them anyway. A case
// is let go once at most, so that none comes and goes for ever.
func (st *study) withoutSlack(v *solved, governing []int) []int {
	var out []int
	for i, w := range v.work() {
		k := governing[i]
		if w < slackShare && !st.letGo[k] {
			st.letGo[k] = true
			continue
		}
		out = append(out, k)
	}
	return out
}

// rank orders the cases by the volume that their elastic forces need, the largest first, and leaves out those without
// loads.
func (st *study) rank(ctx context.Context) ([]int, error) {
	var cases []int
	for k, c := range st.s.Cases {
		if len(c.Loads) > 0 || c.Gravity != 0 && st.weighs() {
			cases = append(cases, k)
		}
	}
	guess, err := st.elasticCost(ctx, cases)
	if err != nil {
		return nil, err
	}
	sortByCost(cases, guess)
	st.order = cases
	return cases, nil
}

// sortByCost sorts cases by falling cost, the first of equals first.
func sortByCost(cases []int, cost map[int]float64) {
	slices.SortStableFunc(cases, func(a, b int) int { return cmp.Compare(cost[b], cost[a]) })
}

// elasticCost guesses what each case costs: the volume under the forces of an elastic structure of the active bars.
func (st *study) elasticCost(ctx context.Context, cases []int) (map[int]float64, error) {
	p := st.prog.problem(st.active.pairs, cases)
	n := len(st.active.pairs)
	stiff := make([]float64, p.Bars.Len())
	for i := range stiff {
		stiff[i] = 1
		if i < n {
			stiff[i] = 1 / p.Bars.Cost[i]
		}
	}
	force, err := interior.Elastic(ctx, p, stiff)
	if err != nil {
		if ctx.Err() != nil {
			return map[int]float64{}, nil
		}
		return nil, err
	}
	m := st.s.Material
	out := make(map[int]float64, len(cases))
	for c, k := range cases {
		for i := range n {
			out[k] += p.Bars.Cost[i] * need(force[c][i], m.Tension, m.Compression)
		}
	}
	return out, nil
}
