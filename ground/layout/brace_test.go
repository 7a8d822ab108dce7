package layout

import (
	"context"
	"math"
	"testing"

	"boughwork/geom"
	"boughwork/lp"
)

// A set of bars that leaves a node loose would let the small programs fail where bars weigh: every node that the braced
// bars reach must be held in all three directions by them, its supports and the deck, or by all bars that there are; and
// none of the bars that were given may be lost.
func TestBracedHoldsEveryNode(t *testing.T) {
	s := canopy(3)
	st := begun(s, 1e-3)
	v, err := st.grow(context.Background(), []int{0}, 1e-2, nil)
	if err != nil || v.sol.Status != lp.Optimal {
		t.Fatalf("status %v, %v", v.sol.Status, err)
	}
	all := trimmed{v, st.active.pairs}
	given := st.promising(all, 10)
	pairs := st.braced(all, given)
	if len(pairs) < len(given) || len(pairs) >= len(all.pairs) {
		t.Errorf("%d bars of %d given, %d in all", len(pairs), len(given), len(all.pairs))
	}
	in := map[int64]bool{}
	for _, p := range pairs {
		in[p.key()] = true
	}
	for _, i := range given {
		if !in[all.pairs[i].key()] {
			t.Errorf("bar %d was given and is lost", i)
		}
	}
	b := &bracing{st: st, all: all}
	b.hold()
	span := func(v int32, of []pair) (dirs []geom.Vec, bars int) {
		dirs = append(dirs, b.fast[v]...)
		var out []geom.Vec
		for _, d := range dirs {
			out = widen(out, d)
		}
		for _, p := range of {
			if p.i == v || p.j == v {
				bars++
				out = widen(out, s.Nodes[p.j].At.Sub(s.Nodes[p.i].At))
			}
		}
		return out, bars
	}
	for v := range int32(len(s.Nodes)) {
		got, bars := span(v, pairs)
		want, _ := span(v, all.pairs)
		if bars > 0 && len(got) < len(want) {
			t.Errorf("node %d is held in %d directions by %d bars; all bars hold it in %d", v, len(got), bars, len(want))
		}
	}
}

// Bars without area must not change what a layout carries.
func TestExtendedKeepsTheLayout(t *testing.T) {
	s := canopy(2)
	st := begun(s, 1e-3)
	v, err := st.grow(context.Background(), []int{0, 1}, 1e-2, nil)
	if err != nil || v.sol.Status != lp.Optimal {
		t.Fatalf("status %v, %v", v.sol.Status, err)
	}
	all := trimmed{v, st.active.pairs}
	few, ok := st.over(context.Background(), st.braced(all, st.promising(all, 0.1)), nil, v.cases, v.bestBound, 1e-2, 0)
	if !ok {
		t.Fatal("no layout over the promising bars")
	}
	more := st.extended(few, all.pairs)
	r := lp.Check(more.problem, more.sol)
	if r.Shape != nil {
		t.Fatal(r.Shape)
	}
	if len(more.pairs) != len(all.pairs) || len(more.pairs) <= len(few.pairs) || math.Abs(r.Objective/few.sol.Objective-1) > 1e-12 {
		t.Errorf("%d bars of %d, objective %v instead of %v", len(more.pairs), len(all.pairs), r.Objective, few.sol.Objective)
	}
	for k, u := range r.Unbalanced {
		if !(u <= balanceShare) || !(r.Strength <= strengthShare) {
			t.Errorf("case %d: %.3g of the load is unbalanced, %.3g overloaded", k, u, r.Strength)
		}
	}
}

// A start for more cases must be balanced in all of them and no bar overloaded: a bar out of place would make it a worse
// start than none, and nothing else would show it.
func TestSeedIsALayout(t *testing.T) {
	s := canopy(4)
	st := begun(s, 1e-3)
	ctx := context.Background()
	if _, err := st.rank(ctx); err != nil {
		t.Fatal(err)
	}
	v, err := st.grow(ctx, []int{0}, 1e-2, nil)
	if err != nil || v.sol.Status != lp.Optimal {
		t.Fatalf("status %v, %v", v.sol.Status, err)
	}
	all := trimmed{v, st.active.pairs}
	few, ok := st.over(ctx, all.pairs[:len(all.pairs)*3/4], nil, []int{0, 1, 2}, v.bestBound, 1e-2, 0)
	if !ok {
		t.Fatal("no layout over three quarters of the bars")
	}
	st.warm.seed(st, few, []int{0, 2})
	start := st.warm.start(st, []int{0, 2})
	if start == nil {
		t.Fatal("no start")
	}
	p := st.prog.problem(st.active.pairs, []int{0, 2})
	r := lp.Check(p, &lp.Solution{Area: start.Area, Force: start.Force, Displacement: start.Displacement, Objective: 1})
	if r.Shape != nil {
		t.Fatal(r.Shape)
	}
	for k, u := range r.Unbalanced {
		if !(u <= balanceShare) || !(r.Strength <= strengthShare) {
			t.Errorf("case %d: %.3g of the load is unbalanced, %.3g overloaded", k, u, r.Strength)
		}
	}
}
