package layout_test

import (
	"math"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
)

// onRollers makes the supports of s statically determinate and blind to lengths: a pin at the origin, a support on the x
// axis that slides along it, and supports on the plane z = 0 that slide in it (in the plane y = 0: along the x axis).
// Reactions then do no work on the position vectors.
func onRollers(s *ground.Structure) *ground.Structure {
	o := copied(s)
	foot := 0
	for i := range o.Nodes {
		n := &o.Nodes[i]
		if n.Role != ground.Footing {
			continue
		}
		n.At.Z = 0
		plane := s.Nodes[i].At.Y == 0
		switch foot {
		case 0:
			n.At, n.Fixed = geom.Vec{}, [3]bool{true, true, true}
		case 1:
			n.At.Y, n.Fixed = 0, [3]bool{false, true, true}
		default:
			n.Fixed = [3]bool{false, plane, true}
		}
		foot++
	}
	return o
}

// TestMaxwell breaks if bar forces do not belong to the loads: in any structure under one case without weight, tension
// times length less compression times length, summed, is the work of loads and reactions on the position vectors
// (Maxwell 1870, from memory). The supports are such that reactions contribute nothing.
func TestMaxwell(t *testing.T) {
	seeds(t, 24, func(t *testing.T, seed uint64) {
		s := onRollers(randomStructure(seed, features{unequal: true, jointCost: true, roofCost: true, cases: 3}))
		r := solved(t, s, 1e-6)
		for k, c := range s.Cases {
			work, bars, size := 0.0, 0.0, 0.0
			for _, l := range c.Loads {
				work += l.Force.Dot(s.Nodes[l.Node].At)
			}
			for _, b := range r.Bars {
				ql := b.Force[k] * s.Nodes[b.A].At.Sub(s.Nodes[b.B].At).Norm()
				bars += ql
				size += math.Abs(ql)
			}
			if math.Abs(bars-work) > 1e-8*size {
				t.Errorf("case %d: the bars add up to %.10g, the loads to %.10g", k, bars, work)
			}
		}
	})
}

// TestUnequalStrengths is case A8 of the ledger as a property: with statically determinate supports, one case and no
// weight, the layout for equal strengths is best for all strengths, at V = W/2 (1/st + 1/sc) + M/2 (1/st - 1/sc).
func TestUnequalStrengths(t *testing.T) {
	seeds(t, 24, func(t *testing.T, seed uint64) {
		s := onRollers(randomStructure(seed, features{}))
		s.Material.Tension, s.Material.Compression = 1, 1
		equal := solved(t, s, lawGap)
		m := 0.0
		for _, l := range s.Cases[0].Loads {
			m += l.Force.Dot(s.Nodes[l.Node].At)
		}
		o := copied(s)
		o.Material.Tension, o.Material.Compression = 1.5, 0.4
		r := solved(t, o, lawGap)
		want := maxwell(equal.Volume, m, 1.5, 0.4)
		if d := r.Volume/want - 1; math.Abs(d) > 10*lawGap { // M enters with the factor of unequal strengths
			t.Errorf("volume %.10g, want %.10g: off by %.3g", r.Volume, want, d)
		}
	})
}

// TestTwoCasesSplit is case A7 of the ledger as a property: with equal strengths and no weight, two cases need the
// volume of their half sum and of their half difference together (Hemp 1973; Spillers and Lev 1971, from memory).
func TestTwoCasesSplit(t *testing.T) {
	seeds(t, 24, func(t *testing.T, seed uint64) {
		s := randomStructure(seed, features{jointCost: true, deck: true, roofCost: true, lengths: true})
		other := randomStructure(seed+1000, features{})
		one := s.Cases[0]
		two := ground.Case{Name: "two"}
		for i, l := range other.Cases[0].Loads {
			if i < len(one.Loads) {
				l.Node = one.Loads[len(one.Loads)-1-i].Node
				if seed%2 == 1 {
					l.Force.Y = 0
				}
				two.Loads = append(two.Loads, l)
			}
		}
		both := copied(s)
		both.Cases = []ground.Case{one, two}
		part := func(sign float64) *layout.Result {
			o := copied(s)
			o.Cases = []ground.Case{{Name: "part"}}
			for _, l := range one.Loads {
				o.Cases[0].Loads = append(o.Cases[0].Loads, ground.NodeLoad{Node: l.Node, Force: l.Force.Scale(0.5)})
			}
			for _, l := range two.Loads {
				o.Cases[0].Loads = append(o.Cases[0].Loads, ground.NodeLoad{Node: l.Node, Force: l.Force.Scale(0.5 * sign)})
			}
			return solved(t, o, lawGap)
		}
		r := solved(t, both, lawGap)
		if sum := part(1).Objective + part(-1).Objective; math.Abs(r.Objective/sum-1) > 3*lawGap {
			t.Errorf("both cases need %.10g, their parts %.10g", r.Objective, sum)
		}
	})
}
