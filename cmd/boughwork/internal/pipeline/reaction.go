package pipeline

import (
	"fmt"
	"math"
	"slices"

	"boughwork/geom"
	"boughwork/ground"
)

// largestReaction describes the largest force on any support over all cases.
func (g *growth) largestReaction() (string, bool) {
	rec := g.out.Record
	best, node, name := geom.Vec{}, -1, ""
	for k, c := range rec.Cases {
		left := make([]geom.Vec, len(rec.Nodes))
		for _, l := range c.Loads {
			left[int(l[0])] = left[int(l[0])].Add(geom.Vec{X: l[1], Y: l[2], Z: l[3]})
		}
		for _, b := range rec.Bars {
			p, q := geom.FromArray(rec.Nodes[b.Nodes[0]].XYZ), geom.FromArray(rec.Nodes[b.Nodes[1]].XYZ)
			l := q.Sub(p).Norm()
			pull := q.Sub(p).Scale(b.ForceKN[k] / l)
			weight := geom.Vec{Z: -c.Gravity * rec.Material.DensityKgM3 * ground.Gravity * b.AreaM2 * l / 2e3}
			left[b.Nodes[0]] = left[b.Nodes[0]].Add(pull).Add(weight)
			left[b.Nodes[1]] = left[b.Nodes[1]].Sub(pull).Add(weight)
		}
		for i, n := range rec.Nodes {
			if n.Fixed == [3]bool{} || n.Role == ground.RoofPt.String() {
				continue
			}
			if left[i].Norm() > best.Norm() {
				best, node, name = left[i], i, c.Name
			}
		}
	}
	if node < 0 {
		return "", false
	}
	way := "down on the ground"
	if best.Z > 0 {
		way = "up, pulling on the ground"
	}
	return fmt.Sprintf("%.4g kN %s and %.4g kN sideways, at %s %s in case %q", math.Abs(best.Z), way, math.Hypot(best.X, best.Y),
		g.supportName(node), g.placeText(rec.Nodes[node].XYZ), name), true
}

// supportName says which zone a support belongs to.
func (g *growth) supportName(node int) string {
	for _, z := range g.out.Structure.Zones {
		if slices.Contains(z.Nodes, node) {
			return fmt.Sprintf("foot %d of %q", node, z.Name)
		}
	}
	return fmt.Sprintf("node %d (%s)", node, g.out.Record.Nodes[node].Role)
}
