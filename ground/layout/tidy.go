package layout

import (
	"context"
	"math"
	"slices"
)

// An interior-point layout lies in the midst of all layouts of its volume, and so has many thin bars. tidy looks for
// layouts with few, as long as the objective stays within a budget, in two ways by turns: it makes thin bars dearer and
// solves again (reweighting: Candes, Wakin and Boyd 2008), and it leaves the thinnest out altogether. What it finds are
// layouts as good as any other: the bound over all candidates stays.
//
// tidyCut are the shares of the gap that the bars left out may cost together, the boldest first. tidyThin is the share of
// the largest area that counts as thin, tidyLift how much dearer the thinnest bars become at most: less if that might
// cost more than tidySpend of what is left of the budget. tidyPasses limits the work.
var tidyCut = []float64{3, 1, 0.3, 0.1, 0.01}

const (
	tidyThin   = 2e-2
	tidyLift   = 0.5
	tidySpend  = 0.5
	tidyPasses = 4
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
	cuts := tidyCut
	for pass := 0; pass < tidyPasses && ctx.Err() == nil; pass++ {
		st.say("tidying", float64(pass)/tidyPasses, t.solved)
		last := out[0]
		from := last
		if next, ok := st.over(ctx, last.pairs, dearer(last, budget), last.cases, last.bestBound, st.opt.Gap, 0); ok && next.sol.Objective <= budget {
			from = next
		}
		cuts = st.cut(ctx, &from, cuts, budget)
		if float64(len(from.pairs)) > tidyReturn*float64(len(last.pairs)) {
			break
		}
		out = append([]trimmed{from}, out...)
	}
	return out
}

// cut leaves out the thinnest bars of t, the most that the budget allows, and returns the cuts that may do next time: those
// bolder than the one that did are not tried again.
func (st *study) cut(ctx context.Context, t *trimmed, cuts []float64, budget float64) []float64 {
	for i, share := range cuts {
		pairs := st.braced(*t, heavy(*t, share*st.opt.Gap))
		if len(pairs) == len(t.pairs) {
			break
		}
		if next, ok := st.over(ctx, pairs, nil, t.cases, t.bestBound, st.opt.Gap, budget); ok && next.sol.Objective <= budget {
			*t = next
			return cuts[i:]
		}
	}
	return cuts
}

// dearer returns factors for the costs of the bars of t, larger for thin ones.
func dearer(t trimmed, budget float64) []float64 {
	area := t.sol.Area[:len(t.pairs)]
	top := slices.Max(area)
	more, spent := make([]float64, len(area)), 0.0
	for i, a := range area {
		more[i] = tidyThin / (tidyThin + a/top)
		spent += more[i] * t.pairs[i].cost * a
	}
	lift := math.Min(tidyLift, tidySpend*math.Max(0, budget-t.sol.Objective)/spent)
	for i := range more {
		more[i] = 1 + lift*more[i]
	}
	return more
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
