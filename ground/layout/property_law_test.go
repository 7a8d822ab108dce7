package layout_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
)

// lawGap is the gap to which layouts are solved whose volumes are compared.
const lawGap = 1e-7

// scaled returns s with all lengths, forces and strengths multiplied; everything else that has a unit follows.
func scaled(s *ground.Structure, length, force, strength float64) *ground.Structure {
	o := copied(s)
	for i := range o.Nodes {
		o.Nodes[i].At = o.Nodes[i].At.Scale(length)
	}
	for k := range o.Cases {
		for i := range o.Cases[k].Loads {
			o.Cases[k].Loads[i].Force = o.Cases[k].Loads[i].Force.Scale(force)
		}
	}
	o.Material.Tension *= strength
	o.Material.Compression *= strength
	o.Material.Density *= strength / length
	o.JointCost *= length
	o.Rules.MinLength *= length
	o.Rules.MaxLength *= length
	for i := range o.Kept {
		o.Kept[i].Area *= force / strength
	}
	for i := range o.Zones {
		l := &o.Zones[i].Limits
		for _, limit := range []*(*float64){&l.Vertical, &l.Uplift, &l.Sideways} {
			if *limit != nil {
				v := **limit * force
				*limit = &v
			}
		}
		l.Cost *= length / strength
	}
	return o
}

// copied returns a copy whose nodes, cases, kept members and zones may be changed.
func copied(s *ground.Structure) *ground.Structure {
	o := *s
	o.Nodes = append([]ground.Node{}, s.Nodes...)
	o.Cases = append([]ground.Case{}, s.Cases...)
	for k := range o.Cases {
		o.Cases[k].Loads = append([]ground.NodeLoad{}, s.Cases[k].Loads...)
	}
	o.Kept = append([]ground.Kept{}, s.Kept...)
	o.Zones = append([]ground.Zone{}, s.Zones...)
	return &o
}

// turned returns s turned by an angle about z, seen in a mirror y = 0 if wanted, and moved.
func turned(s *ground.Structure, angle float64, mirror bool, by geom.Vec) *ground.Structure {
	o := copied(s)
	c, sn := math.Cos(angle), math.Sin(angle)
	turn := func(v geom.Vec) geom.Vec {
		if mirror {
			v.Y = -v.Y
		}
		return geom.Vec{X: c*v.X - sn*v.Y, Y: sn*v.X + c*v.Y, Z: v.Z}
	}
	for i := range o.Nodes {
		o.Nodes[i].At = turn(o.Nodes[i].At).Add(by)
	}
	for k := range o.Cases {
		for i := range o.Cases[k].Loads {
			o.Cases[k].Loads[i].Force = turn(o.Cases[k].Loads[i].Force)
		}
	}
	return o
}

// TestVolumeScales breaks if V does not go with P L / sigma, or if very small or very large numbers upset the solver.
func TestVolumeScales(t *testing.T) {
	seeds(t, 24, func(t *testing.T, seed uint64) {
		s := randomStructure(seed, everything)
		r := solved(t, s, lawGap)
		for _, c := range []struct {
			what                    string
			length, force, strength float64
		}{
			{"loads x 1e-3", 1, 1e-3, 1},
			{"loads x 1e4", 1, 1e4, 1},
			{"lengths x 7", 7, 1, 1},
			{"strengths of steel, loads in kN", 1, 1e3, 355e6},
			{"all", 3, 2e4, 1e7},
		} {
			o := scaled(s, c.length, c.force, c.strength)
			agree(t, c.what, r, solved(t, o, lawGap), c.length*c.force/c.strength)
		}
	})
}

// TestVolumeKnowsNoDirection breaks if the engine prefers a direction of the plan: turned, moved and mirrored structures
// need the same volume.
func TestVolumeKnowsNoDirection(t *testing.T) {
	f := everything
	f.sideways = false // the polygon of the sideways limit has corners
	rng := rand.New(rand.NewPCG(7, 7))
	seeds(t, 24, func(t *testing.T, seed uint64) {
		s := randomStructure(2*seed, f) // in space: a plane structure may not leave its plane
		r := solved(t, s, lawGap)
		by := geom.Vec{X: 100 * (rng.Float64() - 0.5), Y: 100 * rng.Float64(), Z: 20 * rng.Float64()}
		agree(t, "turned and moved", r, solved(t, turned(s, 2*math.Pi*rng.Float64(), false, by), lawGap), 1)
		agree(t, "mirrored", r, solved(t, turned(s, 0, true, geom.Vec{}), lawGap), 1)
	})
	f.sideways = true
	seeds(t, 12, func(t *testing.T, seed uint64) { // but they repeat every 30 degrees
		s := randomStructure(2*seed+100, f)
		agree(t, "turned by 30 degrees", solved(t, s, lawGap), solved(t, turned(s, math.Pi/6, false, geom.Vec{}), lawGap), 1)
	})
}

// TestReversedLoads breaks if tension and compression are not treated alike: with equal strengths and feet that push and
// pull, the opposite loads need the same volume.
func TestReversedLoads(t *testing.T) {
	seeds(t, 16, func(t *testing.T, seed uint64) {
		s := randomStructure(seed, features{jointCost: true, kept: true, deck: true, cases: 3})
		o := copied(s)
		for k := range o.Cases {
			for i := range o.Cases[k].Loads {
				o.Cases[k].Loads[i].Force = o.Cases[k].Loads[i].Force.Scale(-1)
			}
		}
		agree(t, "reversed", solved(t, s, lawGap), solved(t, o, lawGap), 1)
	})
}

// TestMoreChoiceIsNotDearer breaks if a layout gets heavier when a node or longer bars are added, or if a load case
// taken away makes it heavier.
func TestMoreChoiceIsNotDearer(t *testing.T) {
	f := everything
	f.jointCost = false // a bar that passes through the new node is cut in two there, which costs joints
	rng := rand.New(rand.NewPCG(5, 5))
	notAbove := func(t *testing.T, what string, less, more *layout.Result) {
		t.Helper()
		if less.Bound > more.Objective*(1+rounding) {
			t.Errorf("%s: at least %.10g is needed, %.10g did before", what, less.Bound, more.Objective)
		}
	}
	seeds(t, 32, func(t *testing.T, seed uint64) {
		s := randomStructure(seed, f)
		r := solved(t, s, lawGap)
		more := copied(s)
		at := geom.Vec{X: 6 * rng.Float64(), Y: 6 * rng.Float64(), Z: 1 + 3*rng.Float64()}
		if seed%2 == 1 {
			at.Y = 0
		}
		more.Nodes = append(more.Nodes, ground.Node{At: at, Fixed: [3]bool{false, seed%2 == 1, false}})
		notAbove(t, "a node more", solved(t, more, lawGap), r)
		longer := copied(s)
		longer.Rules.MinLength, longer.Rules.MaxLength = 0, 0
		notAbove(t, "bars of any length", solved(t, longer, lawGap), r)
		for k := range s.Cases {
			if len(s.Cases) > 1 {
				fewer := copied(s)
				fewer.Cases = append(append([]ground.Case{}, s.Cases[:k]...), s.Cases[k+1:]...)
				notAbove(t, "a case less", solved(t, fewer, lawGap), r)
			}
		}
	})
}
