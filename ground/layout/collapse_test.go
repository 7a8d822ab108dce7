package layout

import (
	"context"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
)

// A deck on one pin tips to the side that carries more. Bars that weigh could hold it down for one case, so that no case
// alone proves anything; two cases that tip it both ways do, and the record must carry both motions to be verified.
func TestTippingBothWaysIsProvenByBothCases(t *testing.T) {
	s := &ground.Structure{Material: ground.Material{Tension: 1, Compression: 1, Density: 0.01 / ground.Gravity}, Deck: ground.DeckDiaphragm}
	s.Nodes = []ground.Node{{Role: ground.Footing, Fixed: [3]bool{true, true, true}}}
	var roof []int
	for _, x := range []float64{-2, 0, 2} {
		for _, y := range []float64{-2, 0, 2} {
			roof = append(roof, len(s.Nodes))
			s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: x, Y: y, Z: 3}, Role: ground.RoofPt})
		}
	}
	s.Diaphragms = [][]int{roof}
	for _, side := range []float64{-1, 1} {
		c := ground.Case{Name: map[float64]string{-1: "west", 1: "east"}[side], Gravity: 1}
		for _, r := range roof {
			c.Loads = append(c.Loads, ground.NodeLoad{Node: r, Force: geom.Vec{Z: -1 - 0.2*side*s.Nodes[r].At.X}})
		}
		s.Cases = append(s.Cases, c)
	}
	r, err := Solve(context.Background(), s, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if r.Status != lp.NoEquilibrium || r.Collapse == nil || len(r.Collapse.Others) != 1 {
		t.Fatalf("status %v, evidence %+v", r.Status, r.Collapse)
	}
	verified(t, s, r)
}
