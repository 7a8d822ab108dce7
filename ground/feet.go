package ground

import (
	"math"

	"boughwork/geom"
)

// placeFeet puts foot positions into every footing zone.
func (b *builder) placeFeet() {
	feet := 0
	for i, z := range b.site.Footings {
		var places []geom.Vec
		for _, r := range z.Regions {
			places = append(places, b.feetInside(r)...)
		}
		for _, l := range z.Lines {
			places = append(places, alongLine(l, b.spec.FootSpacing)...)
		}
		places = append(places, z.Points...)
		left := 0
		for _, at := range places {
			lifted := at
			lifted.Z += footLift
			if b.allowed(at) && b.allowed(lifted) {
				b.foot(i, at)
				left++
			}
		}
		feet += left
		if n := len(places) - left; n > 0 {
			b.issues.Add(geom.Warning, z.Name, "", "%d of %d foot positions lie inside a keep-clear or outside the envelope and are left out",
				n, len(places))
		}
	}
	if feet == 0 && len(b.site.Walls) == 0 {
		b.issues.Add(geom.Error, "", "", "there is no place to stand: no foot position is left and there is no wall. "+
			"Add a footing zone outside the keep-clears, or make grid.foot_spacing_m smaller")
	}
}

// foot makes a foot of zone i. Where a roof touches the ground its node is held instead; where two zones overlap the
// first has the foot.
func (b *builder) foot(i int, at geom.Vec) {
	p := b.grid.in(at.X, at.Y)
	at = geom.Vec{X: tidied(at.X), Y: tidied(at.Y), Z: tidied(at.Z)}
	n := b.nearest(at, p, sameNode)
	if n < 0 {
		n = b.add(draft{Node: Node{At: at, Role: Footing}, grid: p})
	}
	d := &b.nodes[n]
	if len(d.zones) > 0 {
		return
	}
	d.zones = append(d.zones, i)
	sideways := !b.site.Footings[i].Limits.VerticalOnly
	b.hold(d, sideways)
}

// hold supports a node in height, and sideways too if it may. A roof node of a diaphragm is never held sideways by itself,
// as the deck moves as one body: hold the diaphragm by bars to nodes beside it.
func (b *builder) hold(d *draft, sideways bool) {
	d.Fixed[2] = true
	if sideways && !(d.Role == RoofPt && b.spec.Deck == DeckDiaphragm) {
		d.Fixed[0], d.Fixed[1] = true, true
	}
}

// feetInside returns foot positions in a region: the centres of the cells of a grid fitted to it, those that are inside.
// At least one: the centroid, or else a point well inside.
func (b *builder) feetInside(r geom.Region) []geom.Vec {
	plan, ground := r.Polygon(), geom.OutlineSurface([]geom.Region{r})
	lo, hi := b.grid.ring(r.Rings[0]).box()
	nu, nv := nearestParts(hi[0]-lo[0], b.spec.FootSpacing), nearestParts(hi[1]-lo[1], b.spec.FootSpacing)
	var out []geom.Vec
	put := func(x, y float64) { out = append(out, geom.Vec{X: x, Y: y, Z: ground.Height(x, y)}) }
	for j := range nv {
		for i := range nu {
			x, y := b.grid.out(pt{
				lo[0] + (hi[0]-lo[0])*(float64(i)+0.5)/float64(nu),
				lo[1] + (hi[1]-lo[1])*(float64(j)+0.5)/float64(nv),
			})
			if geom.ContainsStrictly(plan, [2]float64{x, y}, geom.BoundaryTolerance) {
				put(x, y)
			}
		}
	}
	if len(out) > 0 {
		return out
	}
	if c := geom.Centroid(plan); geom.ContainsStrictly(plan, c, geom.BoundaryTolerance) {
		put(c[0], c[1])
	} else if c, ok := geom.InteriorPoint(plan); ok {
		put(c[0], c[1])
	}
	return out
}

// alongLine returns places evenly along a polyline, ends included, at most spacing apart on each of its segments.
func alongLine(l []geom.Vec, spacing float64) []geom.Vec {
	if len(l) == 0 {
		return nil
	}
	out := []geom.Vec{l[0]}
	for i, p := range l[:len(l)-1] {
		d := l[i+1].Sub(p)
		n := panels(math.Hypot(d.X, d.Y), spacing)
		for j := 1; j <= n; j++ {
			out = append(out, p.Add(d.Scale(float64(j)/float64(n))))
		}
	}
	return out
}

// placeWalls puts nodes on every wall: along its line, and from its foot up to its top.
func (b *builder) placeWalls() {
	for _, w := range b.site.Walls {
		for _, foot := range alongLine(w.Points, b.spec.WallSpacing) {
			n := 0
			if w.Top > foot.Z {
				n = panels(w.Top-foot.Z, b.spec.WallSpacing)
			}
			for j := range n + 1 {
				at := foot
				if n > 0 {
					at.Z += (w.Top - foot.Z) * float64(j) / float64(n)
				}
				if b.allowed(at) {
					b.wallNode(at)
				}
			}
		}
	}
}

// wallNode makes a wall node. Where there is a node already, a roof edge on top of the wall or a foot, the wall holds it.
func (b *builder) wallNode(at geom.Vec) {
	p := b.grid.in(at.X, at.Y)
	at = geom.Vec{X: tidied(at.X), Y: tidied(at.Y), Z: tidied(at.Z)}
	if n := b.nearest(at, p, sameNode); n >= 0 {
		if d := &b.nodes[n]; d.Role == RoofPt {
			b.hold(d, true)
		}
		return
	}
	b.add(draft{Node: Node{At: at, Role: Wall, Fixed: [3]bool{true, true, true}}, grid: p})
}
