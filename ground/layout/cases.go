package layout

import (
	"cmp"
	"context"
	"math"
	"slices"

	"boughwork/lp"
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

// The share of the target gap that each check of a case against given areas may be off.
const checkShare = 0.05

// firstCheck is the gap at which the other cases are looked at for the first time: early, since each case that turns
// out to govern changes the layout.
const firstCheck = 3e-2

// allCases finds the layout for all cases: it solves for those that govern and checks the rest, adding the case that
// would cost most as long as what it costs does not fit into the gap. The bound for some cases is a bound for all.
func (st *study) allCases(ctx context.Context, rank []int) (*solved, *design, error) {
	governing := rank[:1:1]
	var from *solved
	var best *design
	target := math.Max(firstCheck, st.opt.Gap)
	if len(rank) == 1 {
		target = st.opt.Gap
	}
	for {
		v, err := st.grow(ctx, governing, target*goalFor(len(rank) > len(governing)), from)
		if err != nil || v.sol.Raw || v.sol.Status == lp.NoEquilibrium {
			return v, best, err
		}
		from = v
		d, cost, err := st.complete(ctx, v, rank)
		if err != nil {
			return v, best, err
		}
		if d == nil && v.sol.Status == lp.Optimal && len(cost) > 0 { // a case has no equilibrium: make it govern, and see
			governing = with(governing, worst(cost))
			continue
		}
		if d != nil && (best == nil || d.objective < best.objective) {
			best = d
		}
		if v.sol.Status != lp.Optimal || best == nil {
			return v, best, nil
		}
		gap := (best.objective - v.bestBound) / best.objective
		st.report(v)
		switch {
		case best.objective <= 0 || gap <= st.opt.Gap:
			return v, best, nil
		case st.rounds >= st.opt.MaxRounds:
			v.sol.Status = lp.IterationLimit
			return v, best, nil
		}
		if k := worst(cost); k >= 0 && cost[k] > 0.3*gap*best.objective {
			governing = with(governing, k)
			target = math.Max(st.opt.Gap, math.Min(target, firstCheck))
			continue
		}
		target = math.Max(math.Min(target/4, gap/4), st.opt.Gap/16)
	}
}

// goalFor leaves room in the gap for what the cases that do not govern add.
func goalFor(others bool) float64 {
	if others {
		return 0.7
	}
	return 1
}

// worst returns the key with the largest value, the smallest of equals, or -1.
func worst(cost map[int]float64) int {
	k := -1
	for c, v := range cost {
		if k < 0 || v > cost[k] || v == cost[k] && c < k {
			k = c
		}
	}
	return k
}

func with(cases []int, k int) []int {
	out := append(slices.Clone(cases), k)
	slices.Sort(out)
	return out
}

// rank orders the cases by the volume that each alone needs on the base bars, the largest first, and leaves out those
// without loads.
func (st *study) rank(ctx context.Context) ([]int, error) {
	type one struct {
		k      int
		volume float64
	}
	var all []one
	for k, c := range st.s.Cases {
		if len(c.Loads) == 0 && c.Gravity == 0 {
			continue
		}
		st.say("cases", float64(k)/float64(len(st.s.Cases)), nil)
		sol, err := st.opt.Solver.Solve(ctx, st.prog.problem(st.active.pairs, []int{k}), nil, lp.Settings{Gap: 0.1})
		if err != nil {
			return nil, err
		}
		v := sol.Objective
		if sol.Status == lp.NoEquilibrium {
			v = math.Inf(1)
		}
		all = append(all, one{k, v})
		if ctx.Err() != nil {
			break
		}
	}
	slices.SortStableFunc(all, func(a, b one) int { return cmp.Compare(b.volume, a.volume) })
	var out []int
	for _, o := range all {
		out = append(out, o.k)
	}
	return out, nil
}

func (st *study) length(p pair) float64 {
	return st.s.Nodes[p.j].At.Sub(st.s.Nodes[p.i].At).Norm()
}
