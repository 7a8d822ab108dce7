package ground

import (
	"math/rand/v2"
	"testing"

	"boughwork/geom"
)

// Counting goes by directions, the rest of the program walks along segments: both must find the same pairs blocked, on
// grids, on nodes at random, a hair apart and in one line.
func TestRowScanAgreesWithTheWalk(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	var sets [][]Node
	grid := func(n int, h float64) (out []Node) {
		for x := range n {
			for y := range n {
				for z := range 4 {
					out = append(out, Node{At: geom.Vec{X: h * float64(x), Y: h * float64(y), Z: 1.3 * float64(z)}})
				}
			}
		}
		return out
	}
	sets = append(sets, grid(6, 1), grid(5, 0.1), grid(5, 37))
	var line, cloud []Node
	for i := range 40 {
		line = append(line, Node{At: geom.Vec{X: 0.7 * float64(i), Y: 0.3 * float64(i), Z: 2e-4 * r.Float64()}})
	}
	for range 150 {
		p := geom.Vec{X: 10 * r.Float64(), Y: 10 * r.Float64(), Z: 5 * r.Float64()}
		cloud = append(cloud, Node{At: p}, Node{At: p.Add(geom.Vec{X: 0.004 * r.Float64(), Y: 0.004})})
	}
	for _, nodes := range append(sets, line, cloud) {
		g, scan, blocked := newNodeGrid(nodes), newRowScan(4), make([]bool, len(nodes))
		scan.to, scan.dist = make([]geom.Vec, len(nodes)), make([]float64, len(nodes))
		hidden := 0
		for i := range nodes {
			scan.blocked(i, g.at, blocked)
			for j := i + 1; j < len(nodes); j++ {
				if want := g.through(int32(i), int32(j), nodes[i].At, nodes[j].At); blocked[j] != want {
					t.Fatalf("%d nodes: the way from %v to %v is blocked: %v, want %v", len(nodes), nodes[i].At, nodes[j].At, blocked[j], want)
				} else if want {
					hidden++
				}
			}
		}
		if hidden == 0 && len(nodes) != len(cloud) {
			t.Errorf("%d nodes: nothing was in the way anywhere", len(nodes))
		}
	}
}
