package ground

import (
	"cmp"
	"math"
	"slices"

	"boughwork/geom"
)

const (
	// skinApart is the share of the rise that an inner node keeps from the roof and from the ground.
	skinApart = 0.3
	// innerApart is the share of the smaller inner spacing below which an inner node is dropped for another node.
	innerApart = 0.25
)

// placeInner puts free joints between ground and roof, on a grid that shares the lines of the roof's grid.
func (b *builder) placeInner() {
	lo, hi := math.Inf(1), math.Inf(-1)
	var stands []draft
	for _, d := range b.nodes {
		switch d.Role {
		case RoofPt:
			hi = math.Max(hi, d.At.Z)
		case Footing, Wall:
			lo = math.Min(lo, d.At.Z)
			stands = append(stands, d)
		}
	}
	if hi <= lo || len(stands) == 0 {
		return
	}
	inside := b.innerDomain(stands)
	levels := evenly(lo, hi, nearestParts(hi-lo, b.spec.InnerRise))
	rise := levels[1] - levels[0]
	apart := innerApart * math.Min(b.spec.InnerSpacing, rise)
	for _, z := range levels[1 : len(levels)-1] {
		for _, v := range b.axes[1].inner {
			for _, u := range b.axes[0].inner {
				p := pt{u, v}
				if !inside(p) {
					continue
				}
				x, y := b.grid.out(p)
				at := geom.Vec{X: x, Y: y, Z: tidied(z)}
				if z > b.roofHeight(p)-skinApart*rise || z < groundHeight(stands, p)+skinApart*rise ||
					!b.allowed(at) || b.nearest(at, p, apart) >= 0 {
					continue
				}
				b.add(draft{Node: Node{At: at}, grid: p})
			}
		}
	}
}

// innerDomain returns the test whether an inner node may be at a place of the plan: under a roof, its holes included; if
// any foot or wall lies beside the roofs, anywhere in the convex hull of roofs and supports.
func (b *builder) innerDomain(stands []draft) func(pt) bool {
	under := func(p pt) bool {
		for _, r := range b.plans {
			for _, a := range r.areas {
				if a[0].contains(p) || a[0].edgeDistance(p) <= sameNode {
					return true
				}
			}
		}
		return false
	}
	beside := slices.ContainsFunc(stands, func(d draft) bool { return !under(d.grid) })
	if !beside {
		return under
	}
	h := b.hull()
	return func(p pt) bool { return h.contains(p) || h.edgeDistance(p) <= sameNode }
}

// roofHeight returns the height of the highest roof over a place; beside the roofs, that of the nearest outline.
func (b *builder) roofHeight(p pt) float64 {
	top, nearest := math.Inf(-1), math.Inf(1)
	over := false
	for i, r := range b.plans {
		for _, a := range r.areas {
			q, d := p, 0.0
			if !a[0].contains(p) {
				q, d = a[0].closest(p)
			}
			x, y := b.grid.out(q)
			z := b.site.Roofs[i].Surface.Height(x, y)
			if d <= sameNode {
				if !over || z > top {
					top = z
				}
				over = true
			} else if !over && d < nearest {
				top, nearest = z, d
			}
		}
	}
	return top
}

// closest returns the point of the ring nearest to p, and its distance.
func (r ring) closest(p pt) (pt, float64) {
	best, at := math.Inf(1), p
	for i, a := range r {
		c := r[(i+1)%len(r)]
		dx, dy := c[0]-a[0], c[1]-a[1]
		t := 0.0
		if l := dx*dx + dy*dy; l > 0 {
			t = math.Max(0, math.Min(1, ((p[0]-a[0])*dx+(p[1]-a[1])*dy)/l))
		}
		q := pt{a[0] + t*dx, a[1] + t*dy}
		if d := distance(p, q); d < best {
			best, at = d, q
		}
	}
	return at, best
}

// groundHeight estimates the ground at p from the supports: inverse distance squared (Shepard 1968).
func groundHeight(stands []draft, p pt) float64 {
	var sum, weight float64
	for _, d := range stands {
		if d.Role == Wall {
			continue
		}
		r := distance(d.grid, p)
		if r < sameNode {
			return d.At.Z
		}
		sum += d.At.Z / (r * r)
		weight += 1 / (r * r)
	}
	if weight == 0 {
		return math.Inf(-1)
	}
	return sum / weight
}

// hull returns the convex hull, anticlockwise (Andrew 1979).
func hull(ps ring) ring {
	ps = slices.Clone(ps)
	slices.SortFunc(ps, func(a, b pt) int { return cmp.Or(cmp.Compare(a[0], b[0]), cmp.Compare(a[1], b[1])) })
	half := func(ps ring) ring {
		var h ring
		for _, p := range ps {
			for len(h) >= 2 {
				a, c := h[len(h)-2], h[len(h)-1]
				if (c[0]-a[0])*(p[1]-a[1])-(c[1]-a[1])*(p[0]-a[0]) > 0 {
					break
				}
				h = h[:len(h)-1]
			}
			h = append(h, p)
		}
		return h[:len(h)-1]
	}
	lower := half(ps)
	slices.Reverse(ps)
	return append(lower, half(ps)...)
}
