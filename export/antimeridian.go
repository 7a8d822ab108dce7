package export

import (
	"sort"

	"boughwork/geom"
)

// cutPoint is the place on the line from u to v with that x.
func cutPoint(u, v geom.Vec, x float64) geom.Vec {
	t := (x - u.X) / (v.X - u.X)
	c := u.Add(v.Sub(u).Scale(t))
	c.X = x
	return c
}

// cutPolygon returns the parts of a polygon (open rings, the first anticlockwise, the others clockwise) where side x (x -
// at) <= 0, side being 1 or -1. The rings are walked; the stretches on the wanted side are chains that begin and end on
// the cut. Along the cut, inside and outside take turns, so sorted ends belong together in pairs, which joins the chains
// to rings again.
func cutPolygon(rings [][]geom.Vec, at, side float64) [][][]geom.Vec {
	var chains [][]geom.Vec
	var whole [][]geom.Vec
	var holes [][]geom.Vec
	for i, ring := range rings {
		cs, all := chainsOf(ring, at, side)
		switch {
		case !all:
			chains = append(chains, cs...)
		case i == 0:
			whole = append(whole, ring)
		default:
			holes = append(holes, ring)
		}
	}
	var parts [][][]geom.Vec
	for _, ring := range append(whole, joinChains(chains)...) {
		if len(ring) >= 3 && ringArea(ring) > 0 {
			parts = append(parts, [][]geom.Vec{ring})
		}
	}
	for _, h := range holes {
		for i := range parts {
			if inRing(parts[i][0], h[0].X, h[0].Y) {
				parts[i] = append(parts[i], h)
				break
			}
		}
	}
	return parts
}

// chainsOf returns the stretches of a ring on the wanted side with the cut points at both ends; all is true if the
// ring lies there as a whole.
func chainsOf(ring []geom.Vec, at, side float64) (chains [][]geom.Vec, all bool) {
	inside := func(v geom.Vec) bool { return side*(v.X-at) <= 0 }
	start := -1
	for i, v := range ring {
		if !inside(v) {
			start = i
			break
		}
	}
	if start < 0 {
		return nil, true
	}
	var chain []geom.Vec
	for k := 1; k <= len(ring); k++ {
		u, v := ring[(start+k-1)%len(ring)], ring[(start+k)%len(ring)]
		if inside(u) != inside(v) {
			chain = append(chain, cutPoint(u, v, at))
		}
		if inside(v) {
			chain = append(chain, v)
		} else if len(chain) > 0 {
			chains = append(chains, chain)
			chain = nil
		}
	}
	return chains, false
}

// joinChains joins chains whose ends lie on the cut to rings.
func joinChains(chains [][]geom.Vec) [][]geom.Vec {
	type end struct {
		y     float64
		chain int
		last  bool
	}
	var ends []end
	for i, c := range chains {
		ends = append(ends, end{c[0].Y, i, false}, end{c[len(c)-1].Y, i, true})
	}
	sort.SliceStable(ends, func(i, j int) bool { return ends[i].y < ends[j].y })
	next := make([]int, len(chains)) // chain that follows the last point of a chain
	for i := 0; i+1 < len(ends); i += 2 {
		a, b := ends[i], ends[i+1]
		if a.last == b.last {
			return nil // rings that cross themselves; nothing sensible can be said
		}
		if !a.last {
			a, b = b, a
		}
		next[a.chain] = b.chain
	}
	done := make([]bool, len(chains))
	var rings [][]geom.Vec
	for i := range chains {
		var ring []geom.Vec
		for j := i; !done[j]; j = next[j] {
			done[j] = true
			ring = append(ring, chains[j]...)
		}
		if len(ring) > 0 {
			rings = append(rings, open(ring))
		}
	}
	return rings
}

// inRing reports whether a place in plan lies inside an open ring (even-odd rule).
func inRing(ring []geom.Vec, x, y float64) bool {
	in := false
	for i, a := range ring {
		b := ring[(i+1)%len(ring)]
		if (a.Y > y) != (b.Y > y) && x < a.X+(y-a.Y)/(b.Y-a.Y)*(b.X-a.X) {
			in = !in
		}
	}
	return in
}
