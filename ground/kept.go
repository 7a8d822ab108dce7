package ground

import (
	"fmt"
	"math"
	"slices"

	"boughwork/geom"
)

const (
	// keptSnap is how far an end of a kept member may be from a node that it then belongs to, m: about the size of a
	// joint between two members.
	keptSnap = 0.15
	// atGround is the height above or below the ground of a footing zone up to which an end stands in the zone, m.
	atGround = 0.15
)

// placeKept makes kept members of the site's lines, one for every segment.
func (b *builder) placeKept() {
	for _, k := range b.site.Kept {
		var ends []int
		for _, p := range k.Points {
			ends = append(ends, b.keptEnd(k.Name, p))
		}
		for i := 0; i+1 < len(ends); i++ {
			m := Kept{A: ends[i], B: ends[i+1], Area: k.Area}
			same := func(o Kept) bool { return (o.A == m.A && o.B == m.B) || (o.A == m.B && o.B == m.A) }
			switch {
			case m.A == m.B:
				b.issues.Add(geom.Warning, k.Name, fmt.Sprintf("points[%d]", i), "the kept member is shorter than a joint and is left out")
			case slices.ContainsFunc(b.kept, same):
				b.issues.Add(geom.Warning, k.Name, fmt.Sprintf("points[%d]", i), "another kept member joins the same nodes; this one is left out")
			default:
				b.kept = append(b.kept, m)
			}
		}
	}
}

// keptEnd returns the node of an end of a kept member: the nearest one within keptSnap, or a new one. A new one in a footing
// zone at its ground is a foot.
func (b *builder) keptEnd(name string, at geom.Vec) int {
	p := b.grid.in(at.X, at.Y)
	if n := b.nearest(at, p, keptSnap); n >= 0 {
		return n
	}
	if z := b.zoneAt(at); z >= 0 {
		b.foot(z, at)
		return len(b.nodes) - 1
	}
	if h := b.roofHeight(p); at.Z > h+keptSnap {
		b.issues.Add(geom.Warning, name, "", "the kept member has an end %.2f m above the roof at (%.2f, %.2f)", at.Z-h, at.X, at.Y)
	}
	if !b.hull().contains(p) {
		b.issues.Add(geom.Warning, name, "", "the kept member has an end outside roofs and supports at (%.2f, %.2f)", at.X, at.Y)
	}
	return b.add(draft{Node: Node{At: geom.Vec{X: tidied(at.X), Y: tidied(at.Y), Z: tidied(at.Z)}}, grid: p})
}

// hull returns the convex hull in plan of roofs and supports.
func (b *builder) hull() ring {
	var all ring
	for _, a := range b.extent {
		all = append(all, a[0]...)
	}
	for _, d := range b.nodes {
		if d.Role == Footing || d.Role == Wall {
			all = append(all, d.grid)
		}
	}
	return hull(all)
}

// zoneAt returns the footing zone whose ground carries a place, or -1.
func (b *builder) zoneAt(at geom.Vec) int {
	for i, z := range b.site.Footings {
		for _, r := range z.Regions {
			if geom.ContainsPoint(r.Polygon(), [2]float64{at.X, at.Y}) {
				if g := geom.OutlineSurface([]geom.Region{r}).Height(at.X, at.Y); math.Abs(at.Z-g) <= atGround {
					return i
				}
			}
		}
		for _, p := range z.Points {
			if p.Sub(at).Norm() <= keptSnap {
				return i
			}
		}
	}
	return -1
}
