package layout

import (
	"cmp"
	"context"
	"math"
	"slices"

	"boughwork/lp"
)

// trimmed is a layout over few bars.
type trimmed struct {
	*solved
	pairs []pair
}

// conclusion is a design for all cases, made of the bars of a layout for some.
type conclusion struct {
	design   *design // nil if there is none
	layout   trimmed // what it was made of: solved for the cases that govern over these bars
	rise     float64 // the most by which joining cases made the layout dearer, m3
	hopeless int     // a case that none of the active bars carry, or -1
	stuck    int     // a case for which no layout over few bars was found, or -1
}

// When a design is made of a layout, its thinnest bars are left out: those that together cost these shares of the gap, the
// first share at which what is left carries the same cases at nearly the same objective, which may rise by trimExcess of
// the gap.
var thinShares = []float64{1, 0.3, 0.1, 0.03, 0.01}

const trimExcess = 0.2

// moreCases is how often conclude adds cases; overGap is the share of the gap to which the small
// programs are solved; spare is the share of the gap by which their loads are enlarged, so that cases that do not govern
// are carried with a little room.
const (
	moreCases = 32
	overGap   = 0.1
	spare     = 0.1
)

// smallIterations limits the programs over few bars: twice what those take that have an answer.
const smallIterations = 60

// conclude makes a design for all cases of the bars that matter in v: few bars, so that programs over them are small
// whatever the number of cases. A case that the areas do not carry joins those that the small program is solved for, and
// the bars that it wants join the bars. The design is then tidied as far as the gap allows.
func (st *study) conclude(ctx context.Context, v *solved) (conclusion, error) {
	out := conclusion{hopeless: -1, stuck: -1}
	gap := math.Max(st.opt.Gap, v.gap()) // a loose layout needs no exact design
	t := st.few(ctx, v, gap)
	for range moreCases {
		out.layout = t
		d, failed, err := st.complete(ctx, t, gap)
		if err != nil || ctx.Err() != nil {
			return out, err
		}
		if d != nil {
			out.design = st.compact(d)
			break
		}
		if failed == nil { // the weights did not settle: one case less to complete
			if failed = st.outside(t.cases); failed == nil {
				return out, nil
			}
		}
		pairs, cases := t.pairs, t.cases
		more, able := make([][]pair, len(failed)), make([]bool, len(failed))
		err = onAllCores(len(failed), func(i int) (err error) {
			more[i], able[i], err = st.wanted(ctx, t, failed[i])
			return err
		})
		if err != nil || ctx.Err() != nil {
			return out, err
		}
		for i, k := range failed {
			if !able[i] {
				out.hopeless = k
				return out, nil
			}
			pairs, cases = union(pairs, more[i]), with(cases, k)
		}
		next, ok := st.over(ctx, pairs, nil, cases, v.bestBound, gap)
		if !ok {
			out.stuck = failed[0]
			return out, nil
		}
		out.rise = math.Max(out.rise, next.sol.Objective-t.sol.Objective)
		t = next
	}
	budget := v.bestBound / (1 - st.opt.Gap)
	if out.design == nil || out.design.objective > budget {
		return out, nil
	}
	for _, t := range st.tidy(ctx, t) {
		d, _, err := st.complete(ctx, t, st.opt.Gap)
		if err != nil || ctx.Err() != nil {
			return out, err
		}
		if d != nil && d.objective <= budget {
			out.design = st.compact(d)
			break
		}
	}
	return out, nil
}

// outside returns the first case of the order that is not among those given, or none.
func (st *study) outside(cases []int) []int {
	for _, k := range st.order {
		if !slices.Contains(cases, k) {
			return []int{k}
		}
	}
	return nil
}

// few returns a layout for the cases of v over few of its bars.
func (st *study) few(ctx context.Context, v *solved, gap float64) trimmed {
	all := trimmed{v, st.active.pairs}
	allowed := v.sol.Objective * (1 + trimExcess*gap)
	for _, share := range thinShares {
		t, ok := st.over(ctx, heavy(all, share*gap), nil, v.cases, v.bestBound, gap)
		if ok && t.sol.Objective <= allowed {
			return t
		}
	}
	return all
}

// governs returns the cases that the bound seems to need beside those that govern already: all whose loads do a share of
// the work in the layout over few bars, or at least the one that does most. There are none if joining cases made that
// layout dearer by no more than a small share of the gap.
func (c conclusion) governs(already []int, gap float64) []int {
	if c.rise < riseShare*gap*c.layout.sol.Objective {
		return nil
	}
	var out []int
	most, top := -1, 0.0
	for i, w := range c.layout.work() {
		k := c.layout.cases[i]
		if slices.Contains(already, k) {
			continue
		}
		if w > governShare {
			out = append(out, k)
		}
		if w > top {
			most, top = k, w
		}
	}
	if out == nil && most >= 0 {
		out = []int{most}
	}
	return out
}

// riseShare is the share of the gap by which cases must make the layout dearer to govern. governShare is the share of the
// work of all loads from which a case joins those that govern at once: over few bars more cases seem to govern than do
// over all candidates, and each makes the program dearer.
const (
	riseShare   = 0.02
	governShare = 0.02
)

// heavy returns the pairs without the thinnest, which together cost at most a share of the objective.
func heavy(t trimmed, share float64) []pair {
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
	var kept []pair
	for i, p := range t.pairs {
		if !out[i] {
			kept = append(kept, p)
		}
	}
	return kept
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
// solution is at the true costs. gap is that of the design; the program is solved to overGap of it.
func (st *study) over(ctx context.Context, pairs []pair, dearer []float64, cases []int, bound, gap float64) (trimmed, bool) {
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
	sol, err := st.opt.Solver.Solve(ctx, p, nil, lp.Settings{Gap: math.Max(overGap*gap, 1e-8), Iterations: smallIterations})
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
