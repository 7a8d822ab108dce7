package bench

import (
	"fmt"
	"math"

	"boughwork/geom"
	"boughwork/ground"
)

// rounding is what coordinates in m may be off by: far more than rounding, far less than any spacing.
const rounding = 1e-9

// hall is a box of nodes: the lowest are on the ground, some of them are feet, and the highest carry a flat roof.
type hall struct {
	size  geom.Vec               // m
	step  float64                // spacing of the nodes in x, y and z, m
	foot  func(at geom.Vec) bool // whether there is a foot at this place on the ground
	cases []roofCase
}

// roofCase is a load on a roof: a force in N, spread over the whole roof by tributary area, of which only a part may act.
type roofCase struct {
	name  string
	force geom.Vec
	// halfX and halfY say where it acts: -1 only at and below the middle of the roof in x (or y), 1 only at and above it,
	// 0 everywhere. Nodes on the middle line belong half to either side.
	halfX, halfY int
}

// The canopy: measures in m.
const (
	canopySide   = 20
	canopyHeight = 8
	canopyFoot   = 5 // of a foot from the two nearest edges
	footReach    = 1 // a foot may stand so far from its middle in x and in y
)

// canopy is a square roof on four small patches of feet, with nodes every step metres.
func canopy(step, gap float64, cases []roofCase) Problem {
	near := func(c float64) bool {
		return math.Min(math.Abs(c-canopyFoot), math.Abs(c-(canopySide-canopyFoot))) <= footReach+rounding
	}
	h := hall{size: geom.Vec{X: canopySide, Y: canopySide, Z: canopyHeight}, step: step, cases: cases,
		foot: func(at geom.Vec) bool { return near(at.X) && near(at.Y) }}
	name := fmt.Sprintf("canopy-%.0fm-%d", step, len(cases))
	return Problem{Name: name, Gap: gap, Build: func() *ground.Structure { return h.build(name) }}
}

// The long roof: measures in m.
const (
	longLength  = 260
	longWidth   = 30
	longHeight  = 10
	longStep    = 2.5
	longBay     = 26  // between the middles of neighbouring feet; the first stands half a bay from the end
	longEdge    = 5   // of the feet from the nearer long edge
	longReach   = 2.5 // a foot may stand so far from its middle
	longLongest = 40  // of a bar
)

// longRoof is a roof on two rows of ten feet.
func longRoof(cases []roofCase) Problem {
	h := hall{size: geom.Vec{X: longLength, Y: longWidth, Z: longHeight}, step: longStep, cases: cases,
		foot: func(at geom.Vec) bool {
			bay := math.Min(math.Floor(at.X/longBay), longLength/longBay-1)
			dx := at.X - (bay+0.5)*longBay
			dy := math.Min(math.Abs(at.Y-longEdge), math.Abs(at.Y-(longWidth-longEdge)))
			return math.Hypot(dx, dy) <= longReach+rounding
		}}
	name := fmt.Sprintf("longroof-%d", len(cases))
	return Problem{Name: name, Gap: coarseGap, Build: func() *ground.Structure {
		s := h.build(name)
		s.Rules.MaxLength = longLongest
		return s
	}}
}

// build makes the ground structure.
func (h hall) build(name string) *ground.Structure {
	s := unit(name)
	steps := func(length float64) int { return int(math.Round(length / h.step)) }
	var roof []int
	for i := range steps(h.size.X) + 1 {
		for j := range steps(h.size.Y) + 1 {
			for k := range steps(h.size.Z) + 1 {
				n := ground.Node{At: geom.Vec{X: float64(i) * h.step, Y: float64(j) * h.step, Z: float64(k) * h.step}}
				if k == 0 && h.foot(n.At) {
					n.Fixed, n.Role = held, ground.Footing
				}
				if k == steps(h.size.Z) {
					n.Role = ground.RoofPt
					roof = append(roof, len(s.Nodes))
				}
				s.Nodes = append(s.Nodes, n)
			}
		}
	}
	for _, c := range h.cases {
		loads := ground.Case{Name: c.name}
		for _, n := range roof {
			at := s.Nodes[n].At
			share := h.tributary(at.X, h.size.X) * h.tributary(at.Y, h.size.Y) * side(at.X, h.size.X, c.halfX) * side(at.Y, h.size.Y, c.halfY)
			if share > 0 {
				loads.Loads = append(loads.Loads, ground.NodeLoad{Node: n, Force: c.force.Scale(share)})
			}
		}
		s.Cases = append(s.Cases, loads)
	}
	return s
}

// tributary returns the share of a length (m) that belongs to a node at the place c on it: half as much at either end.
func (h hall) tributary(c, length float64) float64 {
	if c < rounding || c > length-rounding {
		return h.step / length / 2
	}
	return h.step / length
}

// side returns how much of the load at the place c, in m along a length, is in the half that is asked for.
func side(c, length float64, half int) float64 {
	off := c - length/2
	switch {
	case half == 0:
		return 1
	case math.Abs(off) < rounding:
		return 0.5
	case (off > 0) == (half > 0):
		return 1
	}
	return 0
}
