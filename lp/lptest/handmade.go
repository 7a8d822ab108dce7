package lptest

import (
	"math"

	"boughwork/lp"
)

// handMade are problems small enough to be solved by hand.
func handMade() []check {
	inf := math.Inf(1)
	return checksOf([]answer{
		// 3-4-5: the strut takes 5/4 of the load over a length of 5, the tie 3/4 over 3: 25/4 + 9/4.
		{"two bars under one load", bracket(1, 1, 1), 8.5},
		{"two bars, strut twice as strong", bracket(1, 2, 1), 25./8 + 9./4},
		{"two bars, joint cost 1/2 at each end", withJoint(0.5), 5./4*6 + 3./4*4},
		{"a single strut", strut(), 7 * 3 / 0.5},
		{"a single strut with weight", heavyStrut(), 4. / (1 - 0.25) * 2},
		{"several bars in a line, all needed", chain(5), 5},
		{"kept bar used up, the rest by a new one", hanger(10, kept(4)), 6},
		{"kept bar more than enough", hanger(10, kept(20)), 0},
		{"kept bar just enough", hanger(10, kept(10)), 0},
		{"kept bar of no area", hanger(10, kept(0)), 10},
		// A bar of 2 with k = g l / 2 = 1/4 an area carries its own weight and no more than 2 x 3/4 of the load.
		{"kept bar with weight", keptWithWeight(), (10 - 1.5) / (1 - 0.25)},
		// The vertical costs 1 a unit of load, the pair at 45 degrees 2.
		{"limited bar, the rest by a pair", pair(10, limited(4)), 4 + 2*6},
		{"limit that does not bind", pair(10, limited(40)), 10},
		{"limit of nothing", pair(10, limited(0)), 20},
		{"limit just enough", pair(10, limited(10)), 10},
		{"two cases with a limit", pairTwo(), 4 + 2*6},
		// A post on a foot carries a load at height 1 for 1 a unit, two legs at 45 degrees for 2 a unit, either way.
		{"foot that may not lift, pushed", post(-3, stand(0, inf, 0, 1, true)), 3},
		{"foot that may not lift, pulled", post(3, stand(0, inf, 0, 1, true)), 6},
		{"foot that may not push, pulled", post(3, stand(inf, 0, 0, 1, true)), 3},
		{"foot that may not push, pushed", post(-3, stand(inf, 0, 0, 1, true)), 6},
		{"foot with a capacity, within it", post(-3, stand(1, 4, 0, 1, true)), 3},
		{"foot with a capacity, pushed beyond it", post(-3, stand(1, 2, 0, 1, true)), 2 + 2*1},
		{"foot with a capacity, pulled beyond it", post(3, stand(1, 2, 0, 1, true)), 1 + 2*2},
		{"foot with a capacity of 1000 to push and none to pull", post(-3, stand(0, 1000, 0, 1, true)), 3},
		{"foot with unlimited push and a little pull", post(3, stand(0.5, inf, 0, 1, true)), 0.5 + 2*2.5},
		{"foot with a cost worth paying", post(-3, stand(1, 1, 0.5, inf, false)), 3 * 1.5},
		{"foot with a cost too high", post(-3, stand(1, 1, 2, inf, false)), 6},
		{"foot with a cost and a limit", post(-3, stand(1, 1, 0.5, 2, false)), 2*1.5 + 2*1},
		{"feet that share a capacity", sharedFeet(5, 4), 4 + 2*1},
		{"feet that share a capacity and may not lift", sharedFeetNoLift(), 4},
		// The legs that 1 up needs carry 1 down as well; the post takes the other 2.
		{"cases up and down on a foot that may not lift", upAndDown(), 4},
		{"three cases, one of them nothing", threeCases(), 8.5},
		{"only a case of nothing", nothingAtAll(), 0},
		{"kept weight alone, carried by its foot", keptWeightAlone(), 0},
		{"no cases", &lp.Problem{Rows: 2, Block: []int32{0, 2}, At: [][3]float64{{}}, Bars: bracket(1, 1, 1).Bars}, 0},
		{"no bars and no load", bare(0), 0},
		{"no rows", noRows(), 0},
		{"planar problem in three dimensions, empty rows", flat(), 8.5},
		{"statically dependent rows", dependent(), 2},
		{"duplicate bars", duplicate(), 8.5},
		{"a bar between two supports", betweenSupports(), 8.5},
		{"newtons, pascals and metres", si(1e5, 235e6), 8.5 * 1e5 / 235e6},
		{"a load of a gram on steel", si(1e-3, 1e8), 8.5 * 1e-3 / 1e8},
		{"a load of a ship on cardboard", si(1e6, 1e2), 8.5 * 1e6 / 1e2},
		{"a large and a small load together", mixed(), 1e6*100/1e8 + 1e-3*1/1e8},
		{"a large and a small case together", mixedCases(), 1e6*100/1e8 + 1e-3*1/1e8},
	})
}

// bracket: a load of the given size down at (3, 0), a tie from (0, 0), a strut from (0, -4).
func bracket(st, sc, size float64) *lp.Problem { return bracketOf(newTruss(2, st, sc), size).p }

func bracketOf(t *truss, size float64) *truss {
	tip := t.node(3, 0)
	t.bar(t.foot(0, 0), tip)
	t.bar(t.foot(0, -4), tip)
	return t.with(0, on(tip, 0, -size))
}

func withJoint(s float64) *lp.Problem {
	t := newTruss(2, 1, 1)
	t.joint = s
	return bracketOf(t, 1).p
}

func strut() *lp.Problem {
	t := newTruss(3, 1, 0.5)
	top := t.nodeHeld([3]bool{true, true, false}, 0, 0, 3)
	t.bar(t.foot(0, 0, 0), top)
	return t.with(0, on(top, 0, 0, -7)).p
}

// heavyStrut: a = 4 + g l/2 a with g l/2 = 1/4, length 2.
func heavyStrut() *lp.Problem {
	t := newTruss(2, 1, 1)
	t.weight = 0.25
	top := t.nodeHeld([3]bool{true, false, false}, 0, 2)
	t.bar(t.foot(0, 0), top)
	return t.with(1, on(top, 0, -4)).p
}

func chain(n int) *lp.Problem {
	t := newTruss(2, 1, 1)
	last := t.foot(0, 0)
	for i := range n {
		next := t.nodeHeld([3]bool{true, false, false}, 0, -float64(i+1))
		t.bar(next, last)
		last = next
	}
	return t.with(0, on(last, 0, -1)).p
}

// What goes beside the new bars of a hanger, a pair or a post, on or under node n.
type beside func(t *truss, n int)

func kept(area float64) beside {
	return func(t *truss, n int) { t.kept(n, t.foot(0, 0), area) }
}

func limited(upper float64) beside {
	return func(t *truss, n int) { t.limited(n, t.foot(0, 0), upper) }
}

func stand(tension, compression, cost, upper float64, fixed bool) beside {
	return func(t *truss, n int) { t.stand(n, tension, compression, cost, upper, fixed) }
}

// hanger: a load hangs 1 below its support.
func hanger(size float64, b beside) *lp.Problem {
	t := newTruss(2, 1, 1)
	n := t.nodeHeld([3]bool{true, false, false}, 0, -1)
	t.bar(n, t.foot(0, 0))
	b(t, n)
	return t.with(0, on(n, 0, -size)).p
}

func keptWithWeight() *lp.Problem {
	t := newTruss(2, 1, 1)
	t.weight = 0.5
	n := t.nodeHeld([3]bool{true, false, false}, 0, -1)
	t.bar(n, t.foot(0, 0))
	t.kept(n, t.foot(0, 0), 2)
	return t.with(1, on(n, 0, -10)).p
}

// pair: a load that hangs from a bar straight up and from two at 45 degrees.
func pair(size float64, b beside) *lp.Problem {
	t := newTruss(2, 1, 1)
	n := t.node(0, -1)
	t.bar(n, t.foot(-1, 0))
	t.bar(n, t.foot(1, 0))
	b(t, n)
	return t.with(0, on(n, 0, -size)).p
}

func pairTwo() *lp.Problem {
	p := pair(10, limited(4))
	p.Cases = append(p.Cases, lp.Case{Load: []float64{0, 7}})
	return p
}

// post: a load at height 1 on a post whose foot stands on a reaction, and on two legs at 45 degrees.
func post(size float64, b beside) *lp.Problem { return postOf(newTruss(2, 1, 1), b, size).p }

func postOf(t *truss, b beside, sizes ...float64) *truss {
	top := t.node(0, 1)
	foot := t.nodeHeld([3]bool{true, false, false}, 0, 0)
	t.bar(foot, top)
	t.bar(t.foot(-1, 0), top)
	t.bar(t.foot(1, 0), top)
	b(t, foot)
	for _, s := range sizes {
		t.with(0, on(top, 0, s))
	}
	return t
}

func upAndDown() *lp.Problem {
	return postOf(newTruss(2, 1, 1), stand(0, math.Inf(1), 0, 1, true), 1, -3).p
}

// sharedFeet: two posts whose feet push on one row that a capacity holds; the first has two legs beside it.
func sharedFeet(size, capacity float64) *lp.Problem {
	t := newTruss(2, 1, 1)
	t = postOf(t, func(*truss, int) {})
	top2, foot2 := t.nodeHeld([3]bool{true, false, false}, 5, 1), t.nodeHeld([3]bool{true, false, false}, 5, 0)
	t.bar(foot2, top2)
	shared := t.nodeHeld([3]bool{true, false, false}, 0, -1)
	total := t.row[shared][1]
	for _, f := range []int{1, foot2} {
		t.p.Bars.Add([]int32{t.row[f][1], total}, []float64{-1, 1}, []float64{0, 0}, 0, math.Inf(1), 0, 1, true)
	}
	t.stand(shared, 0, capacity, 0, 1, true)
	return t.with(0, on(0, 0, -(size-2)), on(top2, 0, -2)).p
}

// sharedFeetNoLift: what one foot is pulled by cannot be taken from the other: 1 up by legs, 2 down by the post.
func sharedFeetNoLift() *lp.Problem {
	p := sharedFeet(5, 4)
	p.Cases[0].Load[1] = 1 // the first top, upwards
	return p
}

func threeCases() *lp.Problem {
	t := bracketOf(newTruss(2, 1, 1), 1)
	t.with(0)
	return t.with(0, on(0, 0, 0.5)).p
}

func nothingAtAll() *lp.Problem {
	t := newTruss(2, 1, 1)
	t.weight = 0.1
	return bracketOf(t, 0).with(1).p
}

// keptWeightAlone: a kept post of area 2 whose own weight is all that it carries.
func keptWeightAlone() *lp.Problem {
	t := newTruss(2, 1, 1)
	t.weight = 0.1
	top := t.nodeHeld([3]bool{true, false, false}, 0, 2)
	foot := t.foot(0, 0)
	t.bar(foot, top)
	t.kept(foot, top, 2)
	return t.with(1).p
}

func bare(size float64) *lp.Problem {
	t := newTruss(2, 1, 1)
	n := t.node(0, 0)
	return t.with(0, on(n, size, 0)).p
}

func noRows() *lp.Problem {
	t := newTruss(2, 1, 1)
	t.bar(t.foot(0, 0), t.foot(1, 0))
	return t.with(0).p
}

func flat() *lp.Problem {
	t := newTruss(3, 1, 1)
	tip := t.node(3, 0, 0)
	t.bar(t.foot(0, 0, 0), tip)
	t.bar(t.foot(0, -4, 0), tip)
	t.node(7, 7, 7) // a node that no bar touches
	return t.with(0, on(tip, 0, -1, 0)).p
}

// dependent: a bar that floats in mid-air, so that its balances of forces depend on one another, pulled at both ends.
func dependent() *lp.Problem {
	t := newTruss(3, 1, 1)
	a, b := t.node(0, 0, 0), t.node(1, 1, math.Sqrt2)
	t.bar(a, b)
	return t.with(0, on(a, -0.5, -0.5, -math.Sqrt2/2), on(b, 0.5, 0.5, math.Sqrt2/2)).p
}

func duplicate() *lp.Problem {
	p := bracket(1, 1, 1)
	for range 3 {
		addBar(p, p, 0)
		addBar(p, p, 1)
	}
	return p
}

func betweenSupports() *lp.Problem {
	t := bracketOf(newTruss(2, 1, 1), 1)
	t.bar(1, 2)
	return t.p
}

func si(size, strength float64) *lp.Problem { return bracket(strength, strength, size) }

// mixed: 1e6 on a hanger of 100 and 1e-3 on a hanger of 1, strength 1e8.
func mixed() *lp.Problem {
	t := newTruss(2, 1e8, 1e8)
	a, b := t.nodeHeld([3]bool{true}, 0, -100), t.nodeHeld([3]bool{true}, 5, -1)
	t.bar(a, t.foot(0, 0))
	t.bar(b, t.foot(5, 0))
	return t.with(0, on(a, 0, -1e6), on(b, 0, -1e-3)).p
}

func mixedCases() *lp.Problem {
	p := mixed()
	small := append([]float64(nil), p.Cases[0].Load...)
	small[0], p.Cases[0].Load[1] = 0, 0
	p.Cases = append(p.Cases, lp.Case{Load: small})
	return p
}
