package ground

import "boughwork/geom"

// placeRoofNodes puts nodes where the deck is picked up: on the outline and the holes, and on the grid between.
func (b *builder) placeRoofNodes() {
	for i, r := range b.site.Roofs {
		p := &b.plans[i]
		feature := r.Name
		var dropped int
		for _, a := range p.areas {
			var rings [][]ringStop
			for j, rg := range a {
				var stops []ringStop
				for _, s := range outlineStops(rg, b.spec.DeckSpacing, j > 0, b.axes) {
					if n := b.roofNode(i, s.at); n >= 0 {
						stops = append(stops, ringStop{s.along, n})
					} else {
						dropped++
					}
				}
				rings = append(rings, stops)
			}
			p.rings = append(p.rings, rings)
		}
		outline := len(b.nodes)
		for _, a := range p.areas {
			for _, v := range b.axes[1].roof {
				for _, u := range b.axes[0].roof {
					if q := (pt{u, v}); b.roofInside(a, q, outline) && b.roofNode(i, q) < 0 {
						dropped++
					}
				}
			}
		}
		if dropped > 0 {
			b.issues.Add(geom.Warning, feature, "", "%d roof nodes lie inside a keep-clear or outside the envelope and are left out; "+
				"the deck spans past them. Cut a hole in the roof there if it is not meant to cover the place", dropped)
		}
		if len(p.nodes) < 3 {
			b.issues.Add(geom.Error, feature, "", "only %d roof nodes are left; move the keep-clear or envelope that swallows the roof, "+
				"or make the deck spacing smaller", len(p.nodes))
		}
	}
}

// roofInside reports whether a grid point of the roof deserves a node: inside, and clear of the edges and of the nodes
// on them, which are those before outline.
func (b *builder) roofInside(a area, p pt, outline int) bool {
	s := b.spec.DeckSpacing
	if !a.contains(p) || a.edgeDistance(p) < edgeApart*s {
		return false
	}
	for _, d := range b.nodes[:outline] {
		if distance(d.grid, p) < keepApart*s && b.onRoofOf(d, a) {
			return false
		}
	}
	return true
}

// onRoofOf reports whether a node belongs to the roof that a is part of.
func (b *builder) onRoofOf(d draft, a area) bool {
	for _, i := range d.roofs {
		for _, o := range b.plans[i].areas {
			if &o[0] == &a[0] {
				return true
			}
		}
	}
	return false
}

// roofNode makes, or finds, the node of roof i at a place of the plan. It returns -1 if no node may be there.
func (b *builder) roofNode(i int, p pt) int {
	x, y := b.grid.out(p)
	at := geom.Vec{X: x, Y: y, Z: tidied(b.site.Roofs[i].Surface.Height(x, y))}
	n := b.nearest(at, p, sameNode)
	if n < 0 {
		if !b.allowed(at) {
			return -1
		}
		held := b.spec.Deck == DeckHeld
		n = b.add(draft{Node: Node{At: at, Role: RoofPt, Fixed: [3]bool{held, held, false}}, grid: p})
	}
	if d := &b.nodes[n]; len(d.roofs) == 0 || d.roofs[len(d.roofs)-1] != i {
		d.roofs = append(d.roofs, i)
		b.plans[i].nodes = append(b.plans[i].nodes, n)
	}
	return n
}

// diaphragms returns the sets of roof nodes that move as one body in plan: one set for each roof. Roofs that share a node
// share a diaphragm.
func (b *builder) diaphragms() [][]int {
	root := make([]int, len(b.plans))
	for i := range root {
		root[i] = i
	}
	find := func(i int) int {
		for root[i] != i {
			i = root[i]
		}
		return i
	}
	for _, d := range b.nodes {
		for _, r := range d.roofs {
			lo, hi := find(d.roofs[0]), find(r)
			root[max(lo, hi)] = min(lo, hi)
		}
	}
	sets := make([][]int, len(b.plans))
	for n, d := range b.nodes {
		if len(d.roofs) > 0 {
			r := find(d.roofs[0])
			sets[r] = append(sets[r], n)
		}
	}
	var out [][]int
	for _, s := range sets {
		if len(s) > 0 {
			out = append(out, s)
		}
	}
	return out
}
