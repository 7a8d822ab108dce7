package layout_test

import (
	"bytes"
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
	"boughwork/lp"
)

// features are what a random structure may have. The zero value is a bare one: equal strengths, one case of loads, no
// weight, feet that take everything.
type features struct {
	unequal, jointCost, weight, zones, sideways, kept, deck, roofCost, lengths bool
	cases                                                                      int
}

// everything a random structure can have.
var everything = features{true, true, true, true, true, true, true, true, true, 4}

// randomStructure makes a small solvable-looking structure of the seed: three to five feet on the ground, loaded roof
// nodes 4 m up, free nodes between them. An odd seed makes it in the plane y = 0. Of the features each is there half of
// the time.
func randomStructure(seed uint64, f features) *ground.Structure {
	rng := rand.New(rand.NewPCG(seed, 0x626f756768))
	toss := func(allowed bool) bool { return rng.IntN(2) == 0 && allowed }
	plane := seed%2 == 1
	s := &ground.Structure{Title: fmt.Sprintf("random %d", seed), Material: ground.Material{Name: "m", Tension: 2, Compression: 2}}
	if toss(f.unequal) {
		s.Material.Tension, s.Material.Compression = 1+3*rng.Float64(), 1+3*rng.Float64()
	}
	place := func(z float64) geom.Vec {
		v := geom.Vec{X: 6 * rng.Float64(), Y: 6 * rng.Float64(), Z: z}
		if plane {
			v.Y = 0
		}
		return v
	}
	var feet, roof []int
	for range 3 + rng.IntN(3) {
		feet = append(feet, len(s.Nodes))
		s.Nodes = append(s.Nodes, ground.Node{At: place(0.2 * rng.Float64()), Fixed: [3]bool{true, true, true}, Role: ground.Footing})
	}
	for range 3 + rng.IntN(3) {
		roof = append(roof, len(s.Nodes))
		s.Nodes = append(s.Nodes, ground.Node{At: place(4 + 0.5*rng.Float64()), Fixed: [3]bool{false, plane, false}, Role: ground.RoofPt})
	}
	for range 5 + rng.IntN(5) {
		s.Nodes = append(s.Nodes, ground.Node{At: place(1 + 4*rng.Float64()), Fixed: [3]bool{false, plane, false}})
	}
	for k := range 1 + rng.IntN(max(1, f.cases)) {
		s.Cases = append(s.Cases, randomCase(rng, fmt.Sprintf("case %d", k), roof, plane))
	}
	if toss(f.jointCost) {
		s.JointCost = 0.5 * rng.Float64()
	}
	if toss(f.weight) { // some per cent of what is carried
		s.Material.Density = 0.05 * rng.Float64() / ground.Gravity
		for k := range s.Cases {
			s.Cases[k].Gravity = []float64{0, 1, 1, 1.35}[rng.IntN(4)]
		}
	}
	if toss(f.deck) {
		if !plane && rng.IntN(2) == 0 {
			s.Deck, s.Diaphragms = ground.DeckDiaphragm, [][]int{roof}
		} else {
			s.Deck = ground.DeckHeld
			for _, n := range roof {
				s.Nodes[n].Fixed = [3]bool{true, true, false}
			}
		}
	}
	if toss(f.kept) {
		s.Kept = []ground.Kept{{A: feet[0], B: roof[0], Area: 0.2 * rng.Float64()}, {A: roof[0], B: roof[1], Area: 0.1}}
	}
	if toss(f.roofCost) {
		s.Rules.RoofBars, s.Rules.RoofFactor = ground.RoofBarsCosted, 1+2*rng.Float64()
	}
	if toss(f.lengths) {
		s.Rules.MinLength, s.Rules.MaxLength = 0.5, 6
	}
	if toss(f.zones) {
		s.Zones = randomZones(rng, feet, f.sideways && !plane)
	}
	return s
}

// randomCase loads the roof: mostly downwards, with some push sideways.
func randomCase(rng *rand.Rand, name string, roof []int, plane bool) ground.Case {
	c := ground.Case{Name: name}
	for _, n := range roof {
		f := geom.Vec{X: 0.4 * (rng.Float64() - 0.5), Y: 0.4 * (rng.Float64() - 0.5), Z: -rng.Float64()}
		if plane {
			f.Y = 0
		}
		if rng.IntN(5) > 0 {
			c.Loads = append(c.Loads, ground.NodeLoad{Node: n, Force: f})
		}
	}
	return c
}

// randomZones puts the feet into two zones with limits that mostly leave a layout.
func randomZones(rng *rand.Rand, feet []int, sideways bool) []ground.Zone {
	limit := func(least float64) *float64 {
		if rng.IntN(2) == 0 {
			return nil
		}
		v := least + 3*rng.Float64()
		return &v
	}
	var out []ground.Zone
	for i, nodes := range [][]int{feet[:2], feet[2:]} {
		z := ground.Zone{Name: fmt.Sprintf("zone %d", i), Nodes: nodes}
		z.Limits = geom.FootLimits{NoUplift: rng.IntN(4) == 0, Vertical: limit(2.5), Uplift: limit(1)}
		if sideways {
			z.Limits.Sideways = limit(1)
		}
		if rng.IntN(2) == 0 {
			z.Limits.Cost = 0.2 * rng.Float64()
		}
		out = append(out, z)
	}
	return out
}

// seeds calls f as a subtest for n seeds. It fails if more than a quarter of them were skipped: the rest would say too
// little.
func seeds(t *testing.T, n int, f func(t *testing.T, seed uint64)) {
	t.Helper()
	skipped := 0
	for seed := range uint64(n) {
		t.Run(fmt.Sprint(seed), func(t *testing.T) {
			defer func() {
				if t.Skipped() {
					skipped++
				}
			}()
			f(t, seed)
		})
	}
	if 4*skipped > n {
		t.Errorf("%d of %d random structures have no layout", skipped, n)
	}
}

// solve returns the layout of s within gap.
func solve(t *testing.T, s *ground.Structure, gap float64) *layout.Result {
	t.Helper()
	r, err := layout.Solve(context.Background(), s, layout.Options{Gap: gap})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// solved is solve for a structure that is to have a layout; a random one that has none, and whose record proves it, skips
// the test.
func solved(t *testing.T, s *ground.Structure, gap float64) *layout.Result {
	t.Helper()
	r := solve(t, s, gap)
	if r.Status == lp.NoEquilibrium {
		verified(t, s, r)
		t.Skip("no layout exists")
	}
	if r.Status != lp.Optimal || r.Gap > gap {
		t.Fatalf("status %v, gap %.3g, wanted %.3g", r.Status, r.Gap, gap)
	}
	return r
}

// agree fails unless two objectives are the same within what their gaps allow.
func agree(t *testing.T, what string, a, b *layout.Result, factor float64) {
	t.Helper()
	tolerance := a.Gap + b.Gap + rounding
	if d := a.Objective*factor/b.Objective - 1; !(math.Abs(d) <= tolerance) {
		t.Errorf("%s: objective %.10g x %g against %.10g: off by %.3g, the gaps allow %.3g", what, a.Objective, factor, b.Objective, d, tolerance)
	}
}

// rounding is the share by which sums of a few hundred terms may be off, with the rounding of coordinates that are
// turned and moved.
const rounding = 1e-9

// passThroughFile writes a record and reads it again.
func passThroughFile(t *testing.T, s *ground.Structure, r *layout.Result) *layout.Record {
	t.Helper()
	var b bytes.Buffer
	if err := layout.Write(&b, layout.NewRecord(s, r, layout.Meta{MadeBy: "test"})); err != nil {
		t.Fatal(err)
	}
	rec, err := layout.Read(&b)
	if err != nil {
		t.Fatal(err)
	}
	return rec
}

// verified fails unless the record of r, read back from its file, passes.
func verified(t *testing.T, s *ground.Structure, r *layout.Result) {
	t.Helper()
	rep, err := layout.Verify(passThroughFile(t, s, r))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range rep.Checks {
		if !c.OK {
			t.Errorf("verify: %s: %.3g, limit %.3g: %s", c.Name, c.Value, c.Limit, c.Text)
		}
	}
}
