package layout

import (
	"context"
	"math"
	"slices"
)

// An interior-point layout lies in the midst of all layouts of its volume, and so has many thin bars. tidy looks for
// layouts with few: it takes the bars that matter and solves over them alone, with costs that rise for thin bars
// (reweighting: Candes, Wakin and Boyd 2008), as long as the objective stays within a budget. What it finds are layouts
// as good as any other: the bound over all candidates stays.
//
// tidyKeep are the shares of the largest area below which bars are left out, the boldest first; tidyThin is the share of
// the largest area that counts as thin, and tidyLift how much dearer the thinnest bars become; tidyPasses limits the work.
var tidyKeep = []float64{1e-2, 1e-3, 1e-4}

const (
	tidyThin   = 2e-2
	tidyLift   = 0.5
	tidyPasses = 8
	tidyReturn = 0.95 // a pass that leaves more than this share of the bars is not worth another
	tidyBudget = 0.9  // share of the gap that a tidy layout may use before the last cases are checked
)

// tidy returns layouts over ever fewer bars of t, those with the fewest first, and t itself last.
func (st *study) tidy(ctx context.Context, t trimmed) []trimmed {
	out := []trimmed{t}
	if t.sol.Objective <= 0 || len(t.pairs) == 0 {
		return out
	}
	budget := t.bestBound / (1 - tidyBudget*st.opt.Gap)
	keep := 0
	for pass := 0; pass < tidyPasses && keep < len(tidyKeep) && ctx.Err() == nil; pass++ {
		st.say("tidying", float64(pass)/tidyPasses, t.solved)
		last := out[0]
		next, ok := st.thin(ctx, last, tidyKeep[keep])
		if !ok || next.sol.Objective > budget || float64(len(next.pairs)) > tidyReturn*float64(len(last.pairs)) {
			keep++
			continue
		}
		out = append([]trimmed{next}, out...)
	}
	return out
}

// thin solves over the bars of a layout that are above a share of its largest area, thin bars being dearer.
func (st *study) thin(ctx context.Context, last trimmed, share float64) (trimmed, bool) {
	area := last.sol.Area[:len(last.pairs)]
	top := slices.Max(area)
	var pairs []pair
	var dearer []float64
	for i, p := range last.pairs {
		if area[i] > share*top {
			pairs = append(pairs, p)
			dearer = append(dearer, 1+tidyLift*tidyThin/(tidyThin+area[i]/top))
		}
	}
	return st.over(ctx, pairs, dearer, last.cases, last.bestBound, st.opt.Gap)
}

// Bars below this share of the largest area carry nothing that matters to 1e-8 of the load; compact lets them go.
const compactShare = 1e-12

// compact takes out the pairs that have no area to speak of.
func (st *study) compact(d *design) *design {
	top := 0.0
	for _, a := range d.area {
		top = math.Max(top, a)
	}
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
