package bench

import (
	"fmt"

	"boughwork/geom"
	"boughwork/ground"
)

// A cantilever is 1 high. It is drawn 100 m high: on a small one a long bar passes nodes within the tolerance of
// ground.ThroughNode that it does not pass through, and would be no candidate. The load is as many times smaller, so that
// the volume is that of the problem with lengths and load of one.
const (
	depth = 100.0     // m
	load  = 1 / depth // N
)

// cantilever is a plane problem: a lattice of nx times ny nodes that is reach times as long as it is high, held along its
// left edge, with a load down in the middle of its right edge. ny is odd, so that there is a node.
func cantilever(nx, ny int, reach float64) Problem {
	name := fmt.Sprintf("cantilever-%dx%d", nx, ny)
	return Problem{Name: name, Gap: fineGap, Build: func() *ground.Structure {
		s := unit(name)
		for i := range nx {
			for k := range ny {
				n := ground.Node{
					At: geom.Vec{X: reach * depth * float64(i) / float64(nx-1), Z: depth * float64(k) / float64(ny-1)},
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
		s.Cases = []ground.Case{{Name: "load", Loads: []ground.NodeLoad{{Node: loaded, Force: geom.Vec{Z: -load}}}}}
		return s
	}}
}
