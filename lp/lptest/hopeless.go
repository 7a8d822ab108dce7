package lptest

import (
	"fmt"
	"math"

	"boughwork/lp"
)

// hopeless are loads that nothing can carry.
func hopeless() []check {
	var out []check
	for _, h := range []struct {
		name string
		p    *lp.Problem
	}{
		{"no bars, a load", bare(1)},
		{"a load on a row that no bar touches", looseLoad()},
		{"a hinge loaded across the bar", hinge()},
		{"a square without a diagonal, sheared", square()},
		{"a load out of the plane of the bars", outOfPlane()},
		{"a mechanism of two rigid halves", halves()},
		{"a kept bar too weak", hangerOnly(kept(4), 10)},
		{"a limited bar too weak", hangerOnly(limited(4), 10)},
		{"a limited and a kept bar too weak together", hangerOnly(func(t *truss, n int) { limited(4)(t, n); kept(5)(t, n) }, 10)},
		{"a foot that may not lift, pulled", footOnly(0, math.Inf(1), 1)},
		{"a foot pushed beyond its capacity", footOnly(1, 2, -3)},
		{"a strut where only ties are", cable()},
		{"weight that grows without end", endless(2.4)},
		{"one case of two cannot be carried", secondCase()},
		{"in newtons and pascals, a kept bar too weak", weakSteel()},
	} {
		out = append(out, check{h.name, func(s lp.Solver) error { return noEquilibrium(s, h.p) }})
	}
	return out
}

// noEquilibrium solves p and judges the collapse motion on the problem itself.
func noEquilibrium(s lp.Solver, p *lp.Problem) error {
	sol, err := solve(s, p)
	if err != nil {
		return err
	}
	if sol.Status != lp.NoEquilibrium {
		return fmt.Errorf("status %v, want %v (objective %g, bound %g)", sol.Status, lp.NoEquilibrium, sol.Objective, sol.Bound)
	}
	if r := lp.Check(p, sol); r.Shape != nil {
		return r.Shape
	}
	if !sol.Raw {
		return fmt.Errorf("no equilibrium, but not said to be raw")
	}
	top := 0.0
	for _, u := range sol.Displacement {
		for _, v := range u {
			top = math.Max(top, math.Abs(v))
		}
	}
	work, worst := lp.CheckRay(p, sol.Displacement)
	if !(work > 0) || !(worst*costUnit(p) <= Ray*work) {
		return fmt.Errorf("the motion proves nothing: work %g, worst price over cost %g, largest component %g", work, worst, top)
	}
	return nil
}

func looseLoad() *lp.Problem {
	t := bracketOf(newTruss(2, 1, 1), 1)
	n := t.node(9, 9)
	t.p.Cases = nil
	return t.with(0, on(0, 0, -1), on(n, 0.1, 0)).p
}

func hinge() *lp.Problem {
	t := newTruss(2, 1, 1)
	n := t.node(0, 1)
	t.bar(t.foot(0, 0), n)
	return t.with(0, on(n, 0.01, -1)).p
}

func square() *lp.Problem {
	t := newTruss(2, 1, 1)
	a, b := t.foot(0, 0), t.foot(1, 0)
	c, d := t.node(0, 1), t.node(1, 1)
	t.bar(a, c)
	t.bar(b, d)
	t.bar(c, d)
	return t.with(0, on(c, 1, -1), on(d, 0, -1)).p
}

func outOfPlane() *lp.Problem {
	t := newTruss(3, 1, 1)
	a, b, c := t.foot(0, 0, 0), t.foot(1, 0.3, 0), t.foot(2, 0.6, 0)
	n := t.node(1, 0.3, 2)
	for _, f := range []int{a, b, c} {
		t.bar(f, n)
	}
	return t.with(0, on(n, 0, 0.001, -1)).p
}

// halves: two triangles on feet of their own, joined at the top in a line: the joint between them has no stiffness down.
func halves() *lp.Problem {
	t := newTruss(2, 1, 1)
	a, b, c, d := t.foot(0, 0), t.foot(1, 0), t.foot(5, 0), t.foot(6, 0)
	e, m, f := t.node(0.7, 2), t.node(3.1, 2), t.node(5.2, 2)
	for _, pair := range [][2]int{{a, e}, {b, e}, {e, m}, {m, f}, {c, f}, {d, f}} {
		t.bar(pair[0], pair[1])
	}
	return t.with(0, on(e, 3, -1), on(m, 1, -0.5), on(f, 0, -2)).p
}

func hangerOnly(b beside, size float64) *lp.Problem {
	t := newTruss(2, 1, 1)
	n := t.nodeHeld([3]bool{true, false, false}, 0, -1)
	b(t, n)
	return t.with(0, on(n, 0, -size)).p
}

func footOnly(tension, compression, size float64) *lp.Problem {
	t := newTruss(2, 1, 1)
	top, foot := t.nodeHeld([3]bool{true, false, false}, 0, 1), t.nodeHeld([3]bool{true, false, false}, 0, 0)
	t.bar(foot, top)
	t.stand(foot, tension, compression, 0, 1, true)
	return t.with(0, on(top, 0, size)).p
}

func cable() *lp.Problem {
	t := newTruss(2, 1, 0)
	n := t.node(0, 1)
	t.bar(t.foot(-1, 0), n)
	t.bar(t.foot(1, 0), n)
	return t.with(0, on(n, 0, -1)).p
}

// endless: a hanger of length 1 whose own weight, half of it at the lower end, is weight/2 of its strength.
func endless(weight float64) *lp.Problem {
	t := newTruss(2, 1, 1)
	t.weight = weight
	n := t.nodeHeld([3]bool{true, false, false}, 0, -1)
	t.bar(t.foot(0, 0), n)
	return t.with(1, on(n, 0, -1)).p
}

func secondCase() *lp.Problem {
	t := newTruss(2, 1, 1)
	n := t.node(0, 1)
	t.bar(t.foot(0, 0), n)
	return t.with(0, on(n, 0, -1)).with(0, on(n, 0.1, -1)).with(0, on(n, 0, 1)).p
}

// weakSteel: 10 kN on a kept rod of 10 mm2 at 235 MPa.
func weakSteel() *lp.Problem {
	t := newTruss(3, 235e6, 235e6)
	n := t.nodeHeld([3]bool{true, true, false}, 0, 0, -3)
	t.kept(n, t.foot(0, 0, 0), 10e-6)
	return t.with(0, on(n, 0, 0, -10e3)).p
}
