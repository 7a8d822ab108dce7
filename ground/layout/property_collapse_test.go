package layout_test

import (
	"math"
	"slices"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
	"boughwork/lp"
)

// tripod is a structure that carries anything: three feet, a free node and three roof nodes, one case of loads.
func tripod() *builder {
	b := newBuilder()
	ring(3, 2, func(x, y float64) { b.node(x, y, 0, "xyz") })
	b.node(0, 0, 2, "")
	ring(3, 1, func(x, y float64) {
		n := b.node(x, y, 4, "")
		b.Nodes[n].Role = ground.RoofPt
		b.load(n, 0.1, 0.05, -1)
	})
	return b
}

// feet puts the three feet of a tripod into a zone with limits.
func feet(b *builder, l geom.FootLimits) {
	b.Zones = []ground.Zone{{Name: "zone", Nodes: []int{0, 1, 2}, Limits: l}}
}

func newton(v float64) *float64 { return &v }

// hopeless are structures that carry their loads until one thing is changed.
var hopeless = []struct {
	name  string
	spoil func(b *builder)
	// The case that fails, and whether the loads on the node named must be part of the evidence (-1: any).
	fails int
	node  int
}{
	{"a load on a node that no bar reaches", func(b *builder) {
		b.Rules.MaxLength = 4
		b.load(b.node(20, 0, 4, ""), 0, 0, -1)
	}, 0, 7},
	{"a load across two bars in a line", func(b *builder) {
		b.node(10, 0, 0, "xyz")
		b.node(12, 0, 0, "xyz")
		b.load(b.node(11, 0, 0, ""), 0, 0, -1)
		b.Rules.MaxLength = 4.7
	}, 0, 9},
	{"feet that may not lift, under uplift", func(b *builder) {
		feet(b, geom.FootLimits{NoUplift: true})
		b.newCase()
		b.load(4, 0, 0, 1)
	}, 1, 4},
	{"feet that slide, under a push", func(b *builder) {
		for i := range 3 {
			b.Nodes[i].Fixed = [3]bool{false, false, true}
		}
		feet(b, geom.FootLimits{VerticalOnly: true})
	}, 0, -1},
	{"feet that cannot take the load", func(b *builder) {
		feet(b, geom.FootLimits{Vertical: newton(2.9)})
	}, 0, -1},
	{"feet that cannot take the load and may not lift, at a cost", func(b *builder) {
		feet(b, geom.FootLimits{Vertical: newton(2.9), NoUplift: true, Cost: 0.1})
	}, 0, -1},
	{"feet that cannot take the pull", func(b *builder) {
		feet(b, geom.FootLimits{Uplift: newton(0.5)})
		b.newCase()
		b.load(5, 0, 0, 0.6)
	}, 1, 5},
	{"feet that cannot take the push", func(b *builder) { // 0.3 and 0.15 in x and y, a circle of 0.33
		feet(b, geom.FootLimits{Sideways: newton(0.33)})
	}, 0, -1},
	{"the second of three cases", func(b *builder) {
		n := b.node(0, 0, 6, "xy") // bars from below hold it, unless it is pulled sideways by nothing
		b.load(n, 0, 0, -1)
		b.newCase()
		b.load(b.node(30, 30, 4, ""), 1, 0, 0)
		b.newCase()
		b.load(4, 0, 0, -1)
		b.Rules.MaxLength = 7
	}, 1, 8},
	{"a deck that nothing keeps from turning", func(b *builder) {
		for i := range 3 { // all feet slide, the middle is held in plan: a couple turns the whole
			b.Nodes[i].Fixed = [3]bool{false, false, true}
		}
		b.node(0, 0, 2, "xy")
		b.Deck, b.Diaphragms = ground.DeckDiaphragm, [][]int{{4, 5, 6}}
		b.newCase()
		b.load(5, 1, 0, 0)
		b.load(6, -1, 0, 0)
	}, 1, -1},
}

// TestHopeless breaks if the engine claims a layout where none can be, gives up without evidence, or gives evidence that
// does not hold.
func TestHopeless(t *testing.T) {
	if r := solve(t, &tripod().Structure, 1e-6); r.Status != lp.Optimal {
		t.Fatalf("the tripod itself: %v", r.Status)
	}
	for _, c := range hopeless {
		t.Run(c.name, func(t *testing.T) {
			b := tripod()
			c.spoil(b)
			r := solve(t, &b.Structure, 1e-3)
			if r.Status != lp.NoEquilibrium {
				t.Fatalf("status %v, objective %.6g", r.Status, r.Objective)
			}
			if r.Collapse == nil {
				t.Fatal("no evidence")
			}
			if r.Collapse.Case != c.fails {
				t.Errorf("case %d is said to fail, it is case %d", r.Collapse.Case, c.fails)
			}
			checkMotion(t, &b.Structure, r.Collapse)
			rec := passThroughFile(t, &b.Structure, r)
			if rec.Status != "no equilibrium" || rec.Collapse == nil || rec.Collapse.Text == "" {
				t.Errorf("the record says %q, evidence %v", rec.Status, rec.Collapse)
			}
			if c.node >= 0 && !slices.Contains(rec.Collapse.Nodes, c.node) {
				t.Errorf("the evidence names nodes %v, not %d", rec.Collapse.Nodes, c.node)
			}
			verified(t, &b.Structure, r)
			wrongMotions(t, rec)
		})
	}
}

// stretchShare is how much a collapse motion may stretch a bar of a metre, as a share of its largest displacement.
const stretchShare = 1e-6

// checkMotion judges a collapse motion by hand: the loads drive it, no support moves that takes everything, and no
// candidate bar is stretched.
func checkMotion(t *testing.T, s *ground.Structure, c *layout.Collapse) {
	t.Helper()
	work, top := 0.0, 0.0
	for _, l := range s.Cases[c.Case].Loads {
		work += l.Force.Dot(c.Motion[l.Node])
	}
	for _, v := range c.Motion {
		top = math.Max(top, math.Max(math.Abs(v.X), math.Max(math.Abs(v.Y), math.Abs(v.Z))))
	}
	if !(work > 0) || math.Abs(top-1) > 1e-12 {
		t.Errorf("the loads work %g on a motion of at most %g", work, top)
	}
	limited := map[int]bool{}
	for _, z := range s.Zones {
		for _, n := range z.Nodes {
			limited[n] = true
		}
	}
	can := ground.NewCandidates(s)
	for i := range s.Nodes {
		for x, v := range c.Motion[i].Array() {
			if s.Nodes[i].Fixed[x] && !limited[i] && v != 0 {
				t.Errorf("node %d is held in direction %d and moves %g", i, x, v)
			}
		}
		for j := range i {
			if !can.Allowed(i, j) {
				continue
			}
			d := s.Nodes[j].At.Sub(s.Nodes[i].At)
			if e := d.Dot(c.Motion[j].Sub(c.Motion[i])) / d.Dot(d); math.Abs(e) > stretchShare {
				t.Errorf("the bar between nodes %d and %d is stretched by %g a metre", i, j, e)
			}
		}
	}
}

// wrongMotions fails if motions that prove nothing pass as well.
func wrongMotions(t *testing.T, rec *layout.Record) {
	t.Helper()
	good := rec.Collapse.Motion
	defer func() { rec.Collapse.Motion = good }()
	for _, c := range []struct {
		what string
		of   func(i int, v [3]float64) [3]float64
	}{
		{"the motion backwards", func(_ int, v [3]float64) [3]float64 { return [3]float64{-v[0], -v[1], -v[2]} }},
		{"no motion", func(int, [3]float64) [3]float64 { return [3]float64{} }},
		{"a motion with a jolt", func(i int, v [3]float64) [3]float64 {
			if i == 3 {
				v[2] += 0.1
			}
			return v
		}},
		{"a motion with the ground", func(_ int, v [3]float64) [3]float64 { return [3]float64{v[0], v[1], v[2] - 0.1} }},
	} {
		if c.what == "a motion with the ground" && len(rec.Footings) > 0 {
			continue // feet of limited zones do move
		}
		rec.Collapse.Motion = nil
		for i, v := range good {
			rec.Collapse.Motion = append(rec.Collapse.Motion, c.of(i, v))
		}
		if rep, err := layout.Verify(rec); err == nil && rep.OK() {
			t.Errorf("%s passes as evidence", c.what)
		}
	}
}
