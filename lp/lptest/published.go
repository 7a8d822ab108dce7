package lptest

import (
	"fmt"
	"math"

	"boughwork/lp"
)

// published are least volumes from the literature, or derived in a line from it. Strength 1 and volumes as sigma V unless
// a case says otherwise.
func published() []check {
	out := checksOf([]answer{
		// Michell 1904 for equal strengths; for others the bars stay orthogonal, tan^2 = st/sc, V = 2PL/sqrt(st sc) (derived).
		{"wall, load along it, equal strengths: 2PL", wall(1, 1, 1), 2},
		{"wall, load along it, strengths 1 and 1/4: 2PL/sqrt(st sc)", wall(1, 0.25, 0.5), 4},
		{"wall, load along it, strengths 1/4 and 1: 2PL/sqrt(st sc)", wall(0.25, 1, 0.5), 4},
		// Derived: one strut along the load if Q <= N, else two bars at 45 degrees.
		{"ground plane, N = 2, Q = 1: H(N + Q^2/N), 2D", plane(2, 2, 1), 2.5},
		{"ground plane, N = 1, Q = 2: 2QH, 2D", plane(2, 1, 2), 4},
		{"ground plane, N = 2, Q = 2: 2QH, 2D", plane(2, 2, 2), 4},
		{"ground plane, N = 2, Q = 1: H(N + Q^2/N), 3D", plane(3, 2, 1), 2.5},
		{"ground plane, N = 1, Q = 2: 2QH, 3D", plane(3, 1, 2), 4},
		// Derived: sum of leg force x length.
		{"3 legs on a ring: P(R^2 + H^2)/H", ring(3), 2.5},
		{"4 legs on a ring: P(R^2 + H^2)/H", ring(4), 2.5},
		{"7 legs on a ring: P(R^2 + H^2)/H", ring(7), 2.5},
		// Derived with the dual field u = 0, w = -(z + rho^2/z).
		{"column fan, one footing: sum P(H + r^2/H)", fan(1), fanVolume(1)},
		{"column fan, three footings: sum P(H + r^2/H)", fan(3), fanVolume(3)},
	})
	for _, n := range []int{1, 2, 3, 8} {
		out = append(out, hanging(n).check())
	}
	for seed := range uint64(3) {
		out = append(out, check{fmt.Sprintf("two cases as half sum and half difference, %d", seed), func(s lp.Solver) error {
			return superposition(s, seed)
		}})
	}
	for _, st := range []float64{1, 0.5, 3} {
		out = append(out, check{fmt.Sprintf("unequal strengths by Maxwell, st = %g", st), func(s lp.Solver) error {
			return maxwell(s, st, 1)
		}})
	}
	return out
}

// wall: x = 0 is fixed, load 1 down at (1, 0), grid of the given step.
func wall(st, sc, step float64) *lp.Problem {
	t := newTruss(2, st, sc)
	for y := -2.; y <= 2; y += step {
		t.foot(0, y)
	}
	for x := step; x < 1; x += step {
		for y := -1.; y <= 1; y += step {
			t.node(x, y)
		}
	}
	tip := t.node(1, 0)
	t.all(10)
	return t.with(0, on(tip, 0, -1)).p
}

// plane: load N down and Q sideways at height 1 over a grid of feet.
func plane(dim int, n, q float64) *lp.Problem {
	t := newTruss(dim, 1, 1)
	ys := []float64{0}
	if dim == 3 {
		ys = []float64{-1, -0.5, 0, 0.5, 1}
	}
	for x := -2.; x <= 2; x += 0.5 {
		for _, y := range ys {
			if dim == 2 {
				t.foot(x, 0)
				if x != 0 {
					t.node(x, 0.5)
				}
			} else {
				t.foot(x, y, 0)
			}
		}
	}
	if dim == 2 {
		top := t.node(0, 1)
		t.all(10)
		return t.with(0, on(top, q, -n)).p
	}
	top := t.node(0, 0, 1)
	t.node(0.25, 0, 0.5)
	t.all(10)
	return t.with(0, on(top, q, 0, -n)).p
}

// ring: n legs, R = 1, H = 2, P = 1.
func ring(n int) *lp.Problem {
	t := newTruss(3, 1, 1)
	for i := range n {
		a := 2 * math.Pi * float64(i) / float64(n)
		t.foot(math.Cos(a), math.Sin(a), 0)
	}
	top := t.node(0, 0, 2)
	t.all(10)
	return t.with(0, on(top, 0, 0, -1)).p
}

// Footings and loads of the column fan: load i of 1 + i/10 at fanX(i), fanY(i), height 3.
const fanHeight = 3.

func fanFeet(n int) [][2]float64 { return [][2]float64{{0, 0}, {4, 1}, {1, 3.5}}[:n] }

func fanLoads(visit func(x, y, p float64)) {
	for i := range 12 {
		visit(float64(i%4)*0.7-0.5, float64(i/4)*0.9-0.6, 1+float64(i)/10)
	}
}

// fan: the loaded nodes are held horizontally; the inner nodes are there to tempt.
func fan(feet int) *lp.Problem {
	t := newTruss(3, 1, 1)
	for _, f := range fanFeet(feet) {
		t.foot(f[0], f[1], 0)
	}
	var loads []load
	fanLoads(func(x, y, p float64) {
		loads = append(loads, on(t.nodeHeld([3]bool{true, true, false}, x, y, fanHeight), 0, 0, -p))
	})
	t.node(0.5, 0.5, 1.5)
	t.node(1, 1, 2)
	t.all(10)
	return t.with(0, loads...).p
}

func fanVolume(feet int) float64 {
	v := 0.0
	fanLoads(func(x, y, p float64) {
		r2 := math.Inf(1)
		for _, f := range fanFeet(feet) {
			r2 = math.Min(r2, (x-f[0])*(x-f[0])+(y-f[1])*(y-f[1]))
		}
		v += p * (fanHeight + r2/fanHeight)
	})
	return v
}

// hanging: a load P = 1 on a hanger of length 1 in n segments whose weight, 1/2 a unit of volume, is lumped at their
// ends: A_i = P/(1-k) ((1+k)/(1-k))^(i-1), k = g l/2 (derived). n = 1: 1.333333; n = 2: 1.306122.
func hanging(n int) answer {
	t := newTruss(2, 1, 1)
	t.weight = 0.5
	held := [3]bool{true, false, false}
	last := t.foot(0, 0)
	for i := range n {
		next := t.nodeHeld(held, 0, -float64(i+1)/float64(n))
		t.bar(last, next)
		last = next
	}
	l := 1 / float64(n)
	k, v := 0.5*l/2, 0.0
	for i := range n {
		v += l / (1 - k) * math.Pow((1+k)/(1-k), float64(i))
	}
	return answer{fmt.Sprintf("hanger with weight, %d segments", n), t.with(1, on(last, 0, -1)).p, v}
}

// superposition: V(P1, P2) = V((P1+P2)/2) + V((P1-P2)/2) for equal strengths. Sources: Spillers and Lev 1971, Hemp 1973 (from
// memory, derived again: with q1, q2 = s +- d, max(|q1|, |q2|) = |s| + |d|).
func superposition(s lp.Solver, seed uint64) error {
	r := newRand(seed)
	t := newTruss(2, 1, 1)
	t.foot(0, 0)
	t.foot(3, 0)
	var one, two, half, diff []load
	for range 6 {
		n := t.node(3*r.Float64(), 0.5+2*r.Float64())
		x1, y1, x2, y2 := r.NormFloat64(), r.NormFloat64(), r.NormFloat64(), r.NormFloat64()
		one, two = append(one, on(n, x1, y1)), append(two, on(n, x2, y2))
		half, diff = append(half, on(n, (x1+x2)/2, (y1+y2)/2)), append(diff, on(n, (x1-x2)/2, (y1-y2)/2))
	}
	t.all(10)
	both := clone(t.p)
	both.Cases = (&truss{dim: 2, row: t.row, p: both}).with(0, one...).with(0, two...).p.Cases
	v, err := optimal(s, both)
	if err != nil {
		return err
	}
	sum := 0.0
	for _, l := range [][]load{half, diff} {
		single := clone(t.p)
		w, err := optimal(s, (&truss{dim: 2, row: t.row, p: single}).with(0, l...).p)
		if err != nil {
			return err
		}
		sum += w
	}
	if !near(v, sum, costUnit(both)) {
		return fmt.Errorf("two cases together %.12g, half sum and half difference %.12g", v, sum)
	}
	return nil
}

// maxwell: with statically determinate reactions, V = W/2 (1/st + 1/sc) + M/2 (1/st - 1/sc), W = the volume for strengths
// of 1, M = sum P.r over loads and reactions. Source: Maxwell 1870.
func maxwell(s lp.Solver, st, sc float64) error {
	build := func(st, sc float64) *lp.Problem {
		t := newTruss(2, st, sc)
		t.foot(0, 0)
		t.nodeHeld([3]bool{false, true, false}, 4, 0) // roller
		a, b := t.node(1, 1), t.node(3, 0.5)
		t.node(2, 1.5)
		t.node(2, 0)
		t.node(1, 0)
		t.all(10)
		return t.with(0, on(a, 1, -2), on(b, 0.5, -1)).p
	}
	// Reactions: the roller's vertical V from moments about the pin (at the origin, which adds nothing to M); its M is V x 0.
	m := (1*1 - 2*1) + (0.5*3 - 1*0.5)
	w, err := optimal(s, build(1, 1))
	if err != nil {
		return err
	}
	p := build(st, sc)
	got, err := optimal(s, p)
	if err != nil {
		return err
	}
	want := w/2*(1/st+1/sc) + m/2*(1/st-1/sc)
	if !near(got, want, costUnit(p)) {
		return fmt.Errorf("objective %.12g, want %.12g from %.12g at equal strengths", got, want, w)
	}
	return nil
}
