package layout

import (
	"context"
	"fmt"
	"math"
	"slices"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
	"boughwork/lp/interior"
)

// canopy is a small roof of 5 x 5 nodes over four feet, with n cases: loads down that differ from one side to the other,
// each with a push.
func canopy(n int) *ground.Structure {
	s := &ground.Structure{Title: "canopy", Material: ground.Material{Name: "unit", Tension: 2, Compression: 1}, JointCost: 0.2}
	s.Rules.MaxLength = 5
	for _, c := range [][2]float64{{2, 2}, {2, 6}, {6, 2}, {6, 6}} {
		s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: c[0], Y: c[1]}, Fixed: [3]bool{true, true, true}, Role: ground.Footing})
	}
	var roof []int
	for i := range 5 {
		for j := range 5 {
			roof = append(roof, len(s.Nodes))
			s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: 2 * float64(i), Y: 2 * float64(j), Z: 4 + 0.1*float64(i*j%3)}, Role: ground.RoofPt})
		}
	}
	for i := range 4 {
		for j := range 4 {
			s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: 1 + 2*float64(i), Y: 1 + 2*float64(j), Z: 2.3}})
		}
	}
	for k := range n {
		c := ground.Case{Name: fmt.Sprintf("case %d", k)}
		a := 2 * math.Pi * float64(k) / float64(max(n, 1))
		for _, r := range roof {
			at := s.Nodes[r].At
			side := (at.X-4)*math.Cos(a) + (at.Y-4)*math.Sin(a)
			f := geom.Vec{X: 0.1 * math.Cos(a), Y: 0.1 * math.Sin(a), Z: -1 - 0.1*side}
			c.Loads = append(c.Loads, ground.NodeLoad{Node: r, Force: f})
		}
		s.Cases = append(s.Cases, c)
	}
	return s
}

// begun is a study of s as Solve begins it.
func begun(s *ground.Structure, gap float64) *study {
	can := ground.NewCandidates(s)
	st := &study{s: s, prog: newProgram(s), can: can, pricer: pricer{s, can}, letGo: map[int]bool{},
		opt: Options{Gap: gap, Solver: interior.Solver{}, MaxRounds: 200}, result: &Result{}}
	st.active = newActive(s, can)
	return st
}

// Tidying that dropped a bar that is needed would leave a case unbalanced or a bar overloaded; one that dropped none would
// be of no use; one that paid too much would break the gap.
func TestTidyKeepsWhatIsNeeded(t *testing.T) {
	s := canopy(2)
	const gap = 1e-3
	st := begun(s, gap)
	ctx := context.Background()
	v, err := st.grow(ctx, []int{0, 1}, 0.3*gap, nil)
	if err != nil || v.sol.Status != lp.Optimal {
		t.Fatalf("status %v, %v", v.sol.Status, err)
	}
	layouts := st.tidy(ctx, trimmed{v, st.active.pairs})
	first, last := layouts[0], layouts[len(layouts)-1]
	if len(layouts) < 2 || 2*len(first.pairs) > len(above(last, 1e-6)) {
		t.Errorf("%d layouts, the tidiest with %d bars of %d that carry", len(layouts), len(first.pairs), len(above(last, 1e-6)))
	}
	for i, l := range layouts {
		r := lp.Check(l.problem, l.sol)
		if r.Shape != nil {
			t.Fatal(r.Shape)
		}
		for k, u := range r.Unbalanced {
			if !(u <= balanceShare) {
				t.Errorf("layout %d of %d bars: %.3g of the load is unbalanced in case %d", i, len(l.pairs), u, k)
			}
		}
		if !(r.Strength <= strengthShare) {
			t.Errorf("layout %d of %d bars: overloaded by %.3g", i, len(l.pairs), r.Strength)
		}
		if g := 1 - v.bestBound/l.sol.Objective; g > gap || math.Abs(r.Objective/l.sol.Objective-1) > volumeShare {
			t.Errorf("layout %d of %d bars: gap %.3g, objective %.9g of areas %.9g", i, len(l.pairs), g, l.sol.Objective, r.Objective)
		}
		if i > 0 && len(layouts[i-1].pairs) >= len(l.pairs) {
			t.Errorf("layout %d has %d bars, the one before it %d", i, len(l.pairs), len(layouts[i-1].pairs))
		}
	}
}

// The bars of a whole study are few and carry every case.
func TestStudyIsTidy(t *testing.T) {
	s := canopy(6)
	st := begun(s, 1e-3)
	v, err := st.grow(context.Background(), []int{0}, 1e-3, nil)
	if err != nil {
		t.Fatal(err)
	}
	untidy := len(above(trimmed{v, st.active.pairs}, 1e-6))
	r, err := Solve(context.Background(), s, Options{Gap: 1e-3})
	if err != nil {
		t.Fatal(err)
	}
	if r.Status != lp.Optimal || r.Gap > 1e-3 {
		t.Errorf("status %v, gap %g", r.Status, r.Gap)
	}
	verified(t, s, r)
	if len(r.Bars) >= untidy {
		t.Errorf("%d bars for six cases; one case has %d before it is tidied", len(r.Bars), untidy)
	}
}

// above returns the pairs whose area is above a share of the largest.
func above(t trimmed, share float64) []pair {
	area := t.sol.Area[:len(t.pairs)]
	var out []pair
	for i, p := range t.pairs {
		if area[i] > share*slices.Max(area) {
			out = append(out, p)
		}
	}
	return out
}
