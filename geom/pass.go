package geom

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// enters reports whether a point of the segment is inside the solid and deeper than EnterTolerance.
func (s *solid) enters(a, b Vec) bool {
	if lo, hi := spanOf(a, b); !s.inner.meets(lo, hi) {
		return false
	}
	a, b = ordered(a, b)
	p := orb.Point{a.X - s.middle[0], a.Y - s.middle[1]}
	d := orb.Point{b.X - a.X, b.Y - a.Y}
	t := interval{0, 1}.and(slab(a.Z, b.Z-a.Z, s.from+EnterTolerance, s.to-EnterTolerance))
	if t.empty() {
		return false
	}
	if s.convex {
		return !s.clip(p, d, t, -EnterTolerance).empty()
	}
	var room [stackIntervals]interval
	near := s.nearEdges(room[:0], p, d, t)
	for at := t.lo; ; {
		// The next stretch clear of all edges starts at or after at.
		next := math.Inf(1)
		if len(near) > 0 {
			next = near[0].lo
		}
		if at < next && at <= t.hi && s.inside(p, d, at/2+math.Min(next, t.hi)/2) {
			return true
		}
		if len(near) == 0 || near[0].hi > t.hi {
			return false
		}
		at = math.Max(at, math.Nextafter(near[0].hi, math.Inf(1)))
		near = near[1:]
	}
}

// clip returns the part of an interval in which the plan of the segment p + t d is on the left of every edge of a convex
// solid moved outwards by out (m), after Cyrus and Beck 1978.
func (s *solid) clip(p, d orb.Point, t interval, out float64) interval {
	for i := range s.edges {
		e := &s.edges[i]
		h := cross(e.unit, diff(p, e.from))
		rate := cross(e.unit, d)
		t = t.and(slab(h, rate, -out, math.Inf(1)))
		if t.empty() {
			return nothing
		}
	}
	return t
}

// nearEdges appends, in order of their start, the stretches within t in which the plan of the segment is within
// EnterTolerance of an edge.
func (s *solid) nearEdges(out []interval, p, d orb.Point, t interval) []interval {
	for i := range s.edges {
		if n := s.edges[i].near(p, d).and(t); !n.empty() {
			out = append(out, n)
		}
	}
	slices.SortFunc(out, func(a, b interval) int { return cmp.Compare(a.lo, b.lo) })
	return out
}

// near returns the stretch of the line p + t d within EnterTolerance of the edge: a capsule, whose rectangle and round
// ends are convex together, so that the stretch is the hull of the three.
func (e *edge) near(p, d orb.Point) interval {
	w := diff(p, e.from)
	strip := slab(cross(e.unit, w), cross(e.unit, d), -EnterTolerance, EnterTolerance)
	s, rate := dot(e.unit, w), dot(e.unit, d)
	if strip.and(slab(s, rate, -EnterTolerance, e.length+EnterTolerance)).empty() {
		return nothing
	}
	rect := strip.and(slab(s, rate, 0, e.length))
	return rect.hull(disc(w, d)).hull(disc(diff(p, e.to), d))
}

// disc returns the stretch of w + t d within EnterTolerance of the origin.
func disc(w, d orb.Point) interval {
	l := length(d)
	if l == 0 {
		return slab(length(w), 0, 0, EnterTolerance)
	}
	h := cross(d, w) / l
	if math.Abs(h) > EnterTolerance {
		return nothing
	}
	half := math.Sqrt((EnterTolerance-h)*(EnterTolerance+h)) / l
	mid := -dot(w, d) / (l * l)
	return interval{mid - half, mid + half}
}

// inside reports whether the plan of the segment at t, clear of all edges, is inside: the even-odd rule.
func (s *solid) inside(p, d orb.Point, t float64) bool {
	x, y := p[0]+t*d[0], p[1]+t*d[1]
	in := false
	for i := range s.edges {
		e := &s.edges[i]
		y0, y1 := e.from[1], e.to[1]
		if (y0 > y) != (y1 > y) && x < e.from[0]+(y-y0)/(y1-y0)*(e.to[0]-e.from[0]) {
			in = !in
		}
	}
	return in
}

// holds reports whether a place is in a convex solid or within EnterTolerance of it.
func (s *solid) holds(v Vec) bool {
	if !s.outer.meets(v, v) {
		return false
	}
	p := orb.Point{v.X - s.middle[0], v.Y - s.middle[1]}
	inside := true
	for i := range s.edges {
		e := &s.edges[i]
		w := diff(p, e.from)
		if !e.near(p, orb.Point{}).empty() {
			return true
		}
		inside = inside && cross(e.unit, w) >= 0
	}
	return inside
}

// cover appends the stretches of the segment that are in the solid or within EnterTolerance of it.
func (s *solid) cover(out []interval, a, b Vec) []interval {
	if lo, hi := spanOf(a, b); !s.outer.meets(lo, hi) {
		return out
	}
	a, b = ordered(a, b)
	p := orb.Point{a.X - s.middle[0], a.Y - s.middle[1]}
	d := orb.Point{b.X - a.X, b.Y - a.Y}
	t := interval{0, 1}.and(slab(a.Z, b.Z-a.Z, s.from-EnterTolerance, s.to+EnterTolerance))
	if t.empty() {
		return out
	}
	var room [stackIntervals]interval
	near := s.nearEdges(room[:0], p, d, t)
	at := t.lo
	for _, n := range append(near, interval{t.hi, t.hi}) {
		if at <= n.lo && s.inside(p, d, at/2+n.lo/2) {
			out = append(out, interval{at, n.lo})
		}
		at = math.Max(at, n.hi)
	}
	return append(out, near...)
}

// covers reports whether intervals in any order leave no gap between 0 and 1.
func covers(is []interval) bool {
	slices.SortFunc(is, func(a, b interval) int { return cmp.Compare(a.lo, b.lo) })
	at := 0.0
	for _, i := range is {
		if i.lo > at {
			return false
		}
		at = math.Max(at, i.hi)
	}
	return len(is) > 0 && is[0].lo <= 0 && at >= 1
}
