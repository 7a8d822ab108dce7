package layout

import (
	"context"
	"math"
	"slices"

	"boughwork/lp"
)

// An interior-point layout lies in the midst of all layouts of its volume, and so has many thin bars. tidy looks for one
// with few: it takes the bars that matter and solves over them alone, with costs that rise for thin bars (reweighting:
// Candes, Wakin and Boyd 2008), as long as the design stays within the gap of the bound. What it finds is a design for
// all cases as good as any other: the bound over all candidates stays.
//
// tidyKeep are the shares of the largest area below which bars are left out, the boldest first; tidyThin is the share of
// the largest area that counts as thin, and tidyLift how much dearer the thinnest bars become; tidyPasses limits the work.
var tidyKeep = []float64{1e-2, 1e-3, 1e-4, 1e-5}

const (
	tidyThin   = 2e-2
	tidyLift   = 0.5
	tidyPasses = 8
	tidyGap    = 0.1 // share of the gap to which each trial is solved
	tidyReturn = 0.95
)

func (st *study) tidy(ctx context.Context, v *solved, d *design, rank []int) *design {
	if d == nil || d.objective <= 0 || v.bestBound <= 0 {
		return d
	}
	budget := v.bestBound / (1 - st.opt.Gap)
	all := st.active
	defer func() { st.active = all }()
	best := d
	keep := 0
	for range tidyPasses {
		if ctx.Err() != nil || keep == len(tidyKeep) {
			break
		}
		st.say("tidying", float64(keep)/float64(len(tidyKeep)), v)
		t := st.trim(ctx, v, best, rank, tidyKeep[keep])
		if t == nil || t.objective > budget || count(t) > int(tidyReturn*float64(count(best))) {
			keep++
			continue
		}
		best = t
	}
	return best
}

// count returns how many bars of a design have an area.
func count(d *design) int {
	n := 0
	for _, a := range d.area {
		if a > 0 {
			n++
		}
	}
	return n
}

// trim solves over the bars of d that are above a share of its largest area, or returns nil if they do not do.
func (st *study) trim(ctx context.Context, v *solved, d *design, rank []int, share float64) *design {
	top := slices.Max(d.area)
	st.active = &active{}
	var cost []float64
	for i, p := range d.pairs {
		if d.area[i] > share*top {
			st.active.pairs = append(st.active.pairs, p)
			cost = append(cost, p.cost*(1+tidyLift*tidyThin/(tidyThin+d.area[i]/top)))
		}
	}
	p := st.prog.problem(st.active.pairs, v.cases)
	copy(p.Bars.Cost, cost)
	set := lp.Settings{Gap: math.Max(tidyGap*st.opt.Gap, 1e-8)}
	sol, err := st.opt.Solver.Solve(ctx, p, nil, set)
	if err != nil || sol.Raw || sol.Status != lp.Optimal {
		return nil
	}
	w := &solved{cases: v.cases, sol: sol, problem: p, bestBound: v.bestBound}
	t, _, err := st.complete(ctx, w, rank)
	if err != nil || t == nil {
		return nil
	}
	return st.compact(t)
}

// Bars below this share of the largest area carry nothing that matters to 1e-8 of the load; compact lets them go.
const compactShare = 1e-12

// compact takes out the pairs that have no area to speak of.
func (st *study) compact(d *design) *design {
	top := slices.Max(d.area)
	out := &design{feet: d.feet, force: make([][]float64, len(d.force))}
	n := len(d.pairs)
	for k, q := range d.force {
		if q != nil {
			out.force[k] = make([]float64, 0, len(q))
		}
	}
	for i, a := range d.area {
		if a <= compactShare*top {
			continue
		}
		out.pairs, out.area = append(out.pairs, d.pairs[i]), append(out.area, a)
		for k, q := range d.force {
			if q != nil {
				out.force[k] = append(out.force[k], q[i])
			}
		}
	}
	for k, q := range d.force {
		if q != nil {
			out.force[k] = append(out.force[k], q[n:]...)
		}
	}
	st.value(out)
	return out
}
