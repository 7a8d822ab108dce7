package geom

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// contact says how two segments meet.
type contact uint8

const (
	apart   contact = iota
	touch           // in one place, an end of one of them
	crossed         // inside both
	overlap         // along a stretch
)

// meet returns how the segments a-b and c-d meet, within BoundaryTolerance, and where.
func meet(a, b, c, d orb.Point) (contact, orb.Point) {
	const tol = BoundaryTolerance
	how, where := apart, orb.Point{}
	for _, e := range [4]struct{ end, from, to orb.Point }{{a, c, d}, {b, c, d}, {c, a, b}, {d, a, b}} {
		if length(diff(nearestOnSegment(e.from, e.to, e.end), e.end)) > tol {
			continue
		}
		if how == apart {
			how, where = touch, e.end
		} else if length(diff(e.end, where)) > 2*tol {
			return overlap, where
		}
	}
	if how == touch {
		return how, where
	}
	ab, cd := diff(b, a), diff(d, c)
	h0, h1 := cross(ab, diff(c, a)), cross(ab, diff(d, a))
	g0, g1 := cross(cd, diff(a, c)), cross(cd, diff(b, c))
	if (h0 > 0) != (h1 > 0) && (g0 > 0) != (g1 > 0) && g0 != g1 {
		return crossed, along(a, b, g0/(g0-g1))
	}
	return apart, where
}

// ringEdge is an edge of one of several rings, from position i to the next.
type ringEdge struct {
	ring, i, n int // n positions in the ring
	a, b       orb.Point
}

// boxesMeet reports whether the bounding boxes of two edges come within BoundaryTolerance.
func boxesMeet(p, q *ringEdge) bool {
	const tol = BoundaryTolerance
	return math.Min(p.a[0], p.b[0]) <= math.Max(q.a[0], q.b[0])+tol && math.Min(q.a[0], q.b[0]) <= math.Max(p.a[0], p.b[0])+tol &&
		math.Min(p.a[1], p.b[1]) <= math.Max(q.a[1], q.b[1])+tol && math.Min(q.a[1], q.b[1]) <= math.Max(p.a[1], p.b[1])+tol
}

// next reports whether q begins where p ends.
func (p *ringEdge) next(q *ringEdge) bool { return p.ring == q.ring && (p.i+1)%p.n == q.i }

// clash is a place where rings meet as they must not.
type clash struct {
	first, second ringEdge // in the order of the file
	how           contact
	at            orb.Point
}

// clashes returns where open rings cross, run along each other or touch themselves: the first place of each pair of
// rings. Different rings may touch in single places.
func clashes(rings [][]orb.Point) (out []clash) {
	var edges []ringEdge
	for r, ring := range rings {
		for i, a := range ring {
			edges = append(edges, ringEdge{r, i, len(ring), a, ring[(i+1)%len(ring)]})
		}
	}
	slices.SortStableFunc(edges, func(p, q ringEdge) int { return cmp.Compare(math.Min(p.a[0], p.b[0]), math.Min(q.a[0], q.b[0])) })
	found := map[[2]int]clash{}
	for k := range edges {
		p := &edges[k]
		end := math.Max(p.a[0], p.b[0]) + BoundaryTolerance
		for l := k + 1; l < len(edges) && math.Min(edges[l].a[0], edges[l].b[0]) <= end; l++ {
			q := &edges[l]
			if !boxesMeet(p, q) {
				continue
			}
			how, at := meet(p.a, p.b, q.a, q.b)
			if how == apart || how == touch && (p.ring != q.ring || p.next(q) || q.next(p)) {
				continue
			}
			c := clash{*p, *q, how, at}
			if cmpEdge(q, p) < 0 {
				c.first, c.second = *q, *p
			}
			key := [2]int{c.first.ring, c.second.ring}
			if old, ok := found[key]; !ok || cmpEdge(&c.first, &old.first) < 0 {
				found[key] = c
			}
		}
	}
	for _, c := range found {
		out = append(out, c)
	}
	slices.SortFunc(out, func(a, b clash) int { return cmp.Or(cmpEdge(&a.first, &b.first), cmpEdge(&a.second, &b.second)) })
	return out
}

// cmpEdge orders edges by ring and position.
func cmpEdge(p, q *ringEdge) int { return cmp.Or(cmp.Compare(p.ring, q.ring), cmp.Compare(p.i, q.i)) }

// pieces cuts the edges of p where they meet edges of q and returns the middle of every piece. Each piece is wholly
// inside q, outside it or along its boundary.
func pieces(p, q orb.Polygon) (mids []orb.Point) {
	for _, ring := range p {
		for i := 0; i+1 < len(ring); i++ {
			a, b := ring[i], ring[i+1]
			ts := []float64{0, 1}
			for _, other := range q {
				for j := 0; j+1 < len(other); j++ {
					ts = cuts(ts, a, b, other[j], other[j+1])
				}
			}
			slices.Sort(ts)
			for k := 1; k < len(ts); k++ {
				if (ts[k]-ts[k-1])*length(diff(b, a)) > 2*BoundaryTolerance {
					mids = append(mids, along(a, b, (ts[k]+ts[k-1])/2))
				}
			}
		}
	}
	return mids
}

// cuts appends the places, from 0 to 1 along a-b, where the segment c-d meets it.
func cuts(ts []float64, a, b, c, d orb.Point) []float64 {
	if !boxesMeet(&ringEdge{a: a, b: b}, &ringEdge{a: c, b: d}) {
		return ts
	}
	how, at := meet(a, b, c, d)
	ab := diff(b, a)
	t := func(p orb.Point) float64 { return math.Min(1, math.Max(0, dot(diff(p, a), ab)/dot(ab, ab))) }
	switch how {
	case crossed, touch:
		return append(ts, t(at))
	case overlap:
		return append(ts, t(c), t(d))
	}
	return ts
}

// overlapping reports whether the insides of two polygons with closed rings share an area that is more than tol (m) deep.
func overlapping(p, q orb.Polygon, tol float64) bool {
	if len(p) == 0 || len(q) == 0 || !p.Bound().Intersects(q.Bound()) {
		return false
	}
	for range 2 {
		for _, m := range pieces(p, q) {
			if ContainsStrictly(q, m, tol) {
				return true
			}
		}
		if m, ok := InteriorPoint(p); ok && ContainsStrictly(q, m, tol) {
			return true
		}
		p, q = q, p
	}
	return false
}

// within reports whether all of p lies in q, boundary allowed.
func within(p, q orb.Polygon) bool {
	for _, m := range pieces(p, q) {
		if !ContainsPoint(q, m) {
			return false
		}
	}
	for _, hole := range q[1:] {
		if overlapping(p, orb.Polygon{hole}, BoundaryTolerance) {
			return false
		}
	}
	return true
}
