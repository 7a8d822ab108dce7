package bench

import (
	"fmt"

	"boughwork/geom"
	"boughwork/ground"
)

// depth is the height of a cantilever in m.
const depth = 1

// cantilever is a plane problem: a lattice of nx times ny nodes over reach (m) times depth, held along its left edge, with
// 1 N down in the middle of its right edge. ny is odd, so that there is a node.
func cantilever(nx, ny int, reach float64) Problem {
	name := fmt.Sprintf("cantilever-%dx%d", nx, ny)
	return Problem{Name: name, Gap: fineGap, Build: func() *ground.Structure {
		s := unit(name)
		for i := range nx {
			for k := range ny {
				n := ground.Node{
					At: geom.Vec{X: reach * float64(i) / float64(nx-1), Z: depth * float64(k) / float64(ny-1)},
					// The plane is x and z, as gravity acts in z.
					Fixed: [3]bool{false, true, false},
				}
				if i == 0 {
					n.Fixed = held
				}
				s.Nodes = append(s.Nodes, n)
			}
		}
		loaded := (nx-1)*ny + (ny-1)/2
		s.Cases = []ground.Case{{Name: "load", Loads: []ground.NodeLoad{{Node: loaded, Force: geom.Vec{Z: -1}}}}}
		return s
	}}
}
