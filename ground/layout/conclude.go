package layout

import (
	"context"
	"math"
	"slices"
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

// moreCases is how often conclude adds cases.
const moreCases = 32

// conclude makes a design for all cases of the bars that matter in v: few bars, so that programs over them are small
// whatever the number of cases. A case that the areas do not carry joins those that the small program is solved for, and
// the bars that it wants join the bars. The design is then tidied as far as the gap allows.
func (st *study) conclude(ctx context.Context, v *solved) (conclusion, error) {
	out := conclusion{hopeless: -1, stuck: -1}
	gap := math.Max(st.opt.Gap, v.gap()) // a loose layout needs no exact design
	t := st.few(ctx, v, gap)
	seen := history{map[int]bool{}, map[int]bool{}}
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
		next, err := st.join(ctx, t, failed, gap, seen, &out)
		if err != nil || ctx.Err() != nil || out.hopeless >= 0 || out.stuck >= 0 {
			return out, err
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

// join returns a layout over few bars for some more cases. Each gets the bars that it wants. A case that wants next to
// nothing lacks a bar, not material: it gets the bars without area at first, and strengthening does the rest; if that has
// not helped (given), and otherwise, it joins the cases that the layout is solved for.
func (st *study) join(ctx context.Context, t trimmed, failed []int, gap float64, seen history, out *conclusion) (trimmed, error) {
	want := make([]wish, len(failed))
	err := onAllCores(len(failed), func(i int) (err error) {
		want[i], err = st.wanted(ctx, t, failed[i])
		return err
	})
	if err != nil || ctx.Err() != nil {
		return t, err
	}
	pairs, cases := t.pairs, st.working(t, seen)
	for i, k := range failed {
		if !want[i].able {
			out.hopeless = k
			return t, nil
		}
		pairs = union(pairs, want[i].bars)
		if seen.given[k] || want[i].cost > givenShare*gap*t.sol.Objective {
			cases = with(cases, k)
		}
		seen.given[k] = true
	}
	if !slices.ContainsFunc(cases, func(k int) bool { return !slices.Contains(t.cases, k) }) { // none joins
		if len(pairs) > len(t.pairs) {
			return st.extended(t, pairs), nil
		}
		for _, k := range failed {
			cases = with(cases, k)
		}
	}
	next, ok := st.over(ctx, pairs, nil, cases, t.bestBound, gap, 0)
	if !ok {
		out.stuck = failed[0]
	}
	return next, nil
}

// working returns the cases of t whose loads do work, and those that were let go once already: the areas carry the others
// anyway, or nearly, and each makes the program dearer.
func (st *study) working(t trimmed, seen history) []int {
	if len(t.cases) <= fewCases {
		return t.cases
	}
	var out []int
	for i, w := range t.work() {
		k := t.cases[i]
		if w > workingShare || seen.letGo[k] {
			out = append(out, k)
			continue
		}
		seen.letGo[k], seen.given[k] = true, true
	}
	return out
}

// history is what was tried for cases: bars were given without joining; the case was let go.
type history struct{ given, letGo map[int]bool }

// fewCases is how many cases a program over few bars may have before those without work are let go; workingShare is the
// share of the work of all loads that counts.
const (
	fewCases     = 5
	workingShare = 1e-3
)

// givenShare is the share of the gap that a case may cost which gets its bars without joining: a part of what strengthening
// may cost for all of them.
const givenShare = 0.05

// extended returns the layout t over more pairs, which have no area.
func (st *study) extended(t trimmed, pairs []pair) trimmed {
	sol := *t.sol
	sol.Area, sol.Force = onto(pairs, t.pairs, sol.Area), make([][]float64, len(t.sol.Force))
	for c, q := range t.sol.Force {
		sol.Force[c] = onto(pairs, t.pairs, q)
	}
	return trimmed{&solved{cases: t.cases, sol: &sol, problem: st.prog.problem(pairs, t.cases), bestBound: t.bestBound}, pairs}
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
