package geom

import (
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// ClipHalfPlane returns the part of a ring where normal . p <= limit, by Sutherland and Hodgman 1974 (Reentrant polygon
// clipping). The ring may be closed or open and may be concave; a result in several parts comes as one ring joined
// along the cutting line, which leaves areas and moments right. The result is open, keeps the direction of the ring,
// and is nil if nothing is left.
func ClipHalfPlane(ring []orb.Point, normal orb.Point, limit float64) []orb.Point {
	if n := len(ring); n > 1 && ring[0] == ring[n-1] {
		ring = ring[:n-1]
	}
	out := make([]orb.Point, 0, len(ring)+2)
	for i, b := range ring {
		a := ring[(i+len(ring)-1)%len(ring)]
		da, db := dot(normal, a)-limit, dot(normal, b)-limit
		if (da > 0) != (db > 0) {
			// In a fixed order, so that rings that share an edge, and both sides of a cut, get the very same point.
			p, q, dp, dq := a, b, da, db
			if p[0] > q[0] || p[0] == q[0] && p[1] > q[1] {
				p, q, dp, dq = q, p, dq, dp
			}
			out = append(out, along(p, q, dp/(dp-dq)))
		}
		if db <= 0 {
			out = append(out, b)
		}
	}
	if len(out) < 3 {
		return nil
	}
	return out
}

// InteriorPoint returns a place inside a polygon, away from its boundary where there is room, or false if the polygon
// has no inside. It is the middle of the widest stretch on a level line half way between two neighbouring corners.
func InteriorPoint(p orb.Polygon) (orb.Point, bool) {
	var ys []float64
	for _, ring := range p {
		for _, v := range ring {
			ys = append(ys, v[1])
		}
	}
	slices.Sort(ys)
	best, at := 0.0, orb.Point{}
	for i := 1; i < len(ys); i++ {
		gap := ys[i] - ys[i-1]
		if gap <= 0 {
			continue
		}
		y := ys[i-1] + gap/2
		xs := levelCrossings(p, y)
		for j := 0; j+1 < len(xs); j += 2 {
			if room := math.Min(gap, xs[j+1]-xs[j]); room > best {
				best, at = room, orb.Point{xs[j] + (xs[j+1]-xs[j])/2, y}
			}
		}
	}
	return at, best > 0
}

// levelCrossings returns the sorted x at which the rings cross the line of constant y.
func levelCrossings(p orb.Polygon, y float64) (xs []float64) {
	for _, ring := range p {
		for i, a := range ring {
			b := ring[(i+1)%len(ring)]
			if (a[1] > y) != (b[1] > y) {
				xs = append(xs, a[0]+(y-a[1])/(b[1]-a[1])*(b[0]-a[0]))
			}
		}
	}
	slices.Sort(xs)
	return xs
}
