package layout

import (
	"cmp"
	"context"
	"math"
	"slices"

	"boughwork/lp"
)

// When a design is made of a layout, bars are left out that seem to be there only because the layout is in the midst of
// many: the first share for promising at which what is left carries the same cases at nearly the same objective, which
// may rise by trimExcess of the gap, or up to trimBudget of it above the bound.
var thinShares = []float64{10, 0.1}

const (
	trimExcess = 0.2
	trimBudget = 0.6
)

// overGap is the share of the gap to which programs over few bars are solved; spare is the share of the gap by which their
// loads are enlarged, so that cases that do not govern are carried with a little room.
const (
	overGap = 0.1
	spare   = 0.1
)

// smallIterations limits the programs over few bars: twice what those take that have an answer.
const smallIterations = 60

// few returns a layout for the cases of v over few of its bars.
func (st *study) few(ctx context.Context, v *solved, gap float64) trimmed {
	all := trimmed{v, st.active.pairs}
	allowed := math.Max(v.sol.Objective*(1+trimExcess*gap), v.bestBound/(1-trimBudget*gap))
	choose := func(from trimmed) (trimmed, bool) {
		for _, share := range thinShares {
			t, ok := st.over(ctx, st.braced(from, st.promising(from, share)), nil, v.cases, v.bestBound, gap, allowed)
			if ok && t.sol.Objective <= allowed {
				return t, true
			}
		}
		return trimmed{}, false
	}
	if t, ok := choose(all); ok {
		return t
	}
	t, ok := st.mended(ctx, all, gap, allowed)
	if !ok {
		return all
	}
	allowed = math.Max(allowed, t.sol.Objective)
	if fewer, ok := choose(t); ok {
		return fewer
	}
	return t
}

// mended returns a layout over the promising bars of one for which these do not do, and over those that its cases want
// beside them: bars that carry little but are needed.
func (st *study) mended(ctx context.Context, all trimmed, gap, allowed float64) (trimmed, bool) {
	pairs := st.braced(all, st.promising(all, thinShares[len(thinShares)-1]))
	some := trimmed{&solved{sol: &lp.Solution{Area: onto(pairs, all.pairs, all.sol.Area), Objective: all.sol.Objective}}, pairs}
	want := make([]wish, len(all.cases))
	err := onAllCores(len(want), func(i int) (err error) {
		want[i], err = st.wanted(ctx, some, all.cases[i])
		return err
	})
	if err != nil {
		return trimmed{}, false
	}
	for _, w := range want {
		pairs = union(pairs, w.bars)
	}
	t, ok := st.over(ctx, pairs, nil, all.cases, all.bestBound, gap, 0)
	return t, ok && t.sol.Objective <= (1+mendedExcess*gap)*allowed
}

// mendedExcess is the share of the gap by which a mended layout may be dearer than one of promising bars.
const mendedExcess = 0.2

// promising returns the numbers of the pairs that seem to be part of an optimal layout: near the optimum, either the area
// of a bar or the slack of its price goes to zero, and those belong to it whose area is the larger, each measured by a
// natural scale (the cost of a mean bar of as many as there are nodes, times share; its cost).
func (st *study) promising(t trimmed, share float64) []int {
	scale := share * t.sol.Objective / float64(len(st.s.Nodes))
	var kept []int
	for i, p := range t.pairs {
		slack := 1 - t.problem.Price(i, t.sol.Displacement)/p.cost
		if p.cost*t.sol.Area[i] > scale*math.Max(slack, 0) {
			kept = append(kept, i)
		}
	}
	return kept
}

// heavy returns the numbers of the pairs without the thinnest, which together cost at most a share of the objective.
func heavy(t trimmed, share float64) []int {
	area := t.sol.Area[:len(t.pairs)]
	order := make([]int, len(t.pairs))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(i, j int) int { return cmp.Compare(area[i], area[j]) })
	left, out := share*t.sol.Objective, make([]bool, len(t.pairs))
	for _, i := range order {
		if left -= t.pairs[i].cost * area[i]; left < 0 {
			break
		}
		out[i] = true
	}
	var kept []int
	for i := range t.pairs {
		if !out[i] {
			kept = append(kept, i)
		}
	}
	return kept
}

// onto carries values over pairs, and what follows them, over to other pairs: zero for a pair that is not among the first.
// Both lists are in order.
func onto(to, from []pair, x []float64) []float64 {
	out := make([]float64, len(to), len(to)+len(x)-len(from))
	j := 0
	for i, p := range to {
		for j < len(from) && from[j].key() < p.key() {
			j++
		}
		if j < len(from) && from[j].key() == p.key() {
			out[i] = x[j]
		}
	}
	return append(out, x[len(from):]...)
}

// union joins two lists of pairs that are in order.
func union(a, b []pair) []pair {
	u := active{in: map[int64]bool{}}
	for _, p := range append(slices.Clone(a), b...) {
		if !u.in[p.key()] {
			u.in[p.key()] = true
			u.pairs = append(u.pairs, p)
		}
	}
	u.sort()
	return u.pairs
}

// over solves for the given cases over few pairs; dearer, if not nil, multiplies their costs. The objective of the
// solution is at the true costs. gap is that of the design; the program is solved to overGap of it. A layout that costs more
// than the ceiling, if there is one, is of no use.
func (st *study) over(ctx context.Context, pairs []pair, dearer []float64, cases []int, bound, gap, ceiling float64) (trimmed, bool) {
	p := st.prog.problem(pairs, cases)
	more := 1 + spare*gap
	for c := range p.Cases {
		p.Cases[c].Gravity *= more
		for r := range p.Cases[c].Load {
			p.Cases[c].Load[r] *= more
		}
	}
	for i := range dearer {
		p.Bars.Cost[i] *= dearer[i]
	}
	sol, err := st.opt.Solver.Solve(ctx, p, nil, lp.Settings{Gap: math.Max(overGap*gap, 1e-8), Ceiling: more * ceiling, Iterations: smallIterations})
	if err != nil || sol.Raw || sol.Status != lp.Optimal {
		return trimmed{}, false
	}
	for c := range p.Cases { // back to the loads as they are: balance is linear in loads, weights and forces
		p.Cases[c].Gravity /= more
		for r := range p.Cases[c].Load {
			p.Cases[c].Load[r] /= more
		}
		for i := range sol.Force[c] {
			sol.Force[c][i] /= more
		}
	}
	sol.Objective = 0
	for i, a := range sol.Area {
		if i < len(pairs) {
			p.Bars.Cost[i] = pairs[i].cost
		}
		if !p.Bars.Fixed[i] {
			sol.Objective += p.Bars.Cost[i] * a
		}
	}
	return trimmed{&solved{cases: cases, sol: sol, problem: p, bestBound: bound}, pairs}, true
}
