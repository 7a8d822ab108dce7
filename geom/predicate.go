package geom

import (
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// The test of a segment against a prism. A cheap filter by bounding boxes goes first. What is left is decided on the
// parameter t of the segment, 0 to 1: every face, thickened by the tolerance on both sides, takes an interval of t.
// Between those intervals the segment is clear of every face, so one point of it tells inside from outside, with a
// margin of the tolerance.
//
// The margin is what makes the test safe in floating point. Coordinates are taken relative to the prism, so with
// extents of L metres every computed distance is wrong by less than about 8 L eps: 2e-11 m for L = 10 km. The rounding
// of the input in a national grid of 1e7 m is 2e-9 m. EnterTolerance is 1e-3 m.

// stackIntervals is how many intervals a question holds without asking for memory.
const stackIntervals = 48

// interval is a stretch lo <= t <= hi of a segment.
type interval struct{ lo, hi float64 }

// empty reports whether nothing is left of the interval.
func (i interval) empty() bool { return !(i.lo <= i.hi) }

// and returns what is in both.
func (i interval) and(j interval) interval {
	return interval{math.Max(i.lo, j.lo), math.Min(i.hi, j.hi)}
}

// hull returns the smallest interval with both.
func (i interval) hull(j interval) interval {
	switch {
	case i.empty():
		return j
	case j.empty():
		return i
	}
	return interval{math.Min(i.lo, j.lo), math.Max(i.hi, j.hi)}
}

var nothing = interval{1, 0}

// slab returns the t with lo <= p + t d <= hi. Infinite limits are allowed.
func slab(p, d, lo, hi float64) interval {
	if d == 0 {
		if p >= lo && p <= hi {
			return interval{math.Inf(-1), math.Inf(1)}
		}
		return nothing
	}
	t0, t1 := (lo-p)/d, (hi-p)/d
	if t0 > t1 {
		t0, t1 = t1, t0
	}
	return interval{t0, t1}
}

// box is an axis-parallel box.
type box struct{ lo, hi Vec }

// meets reports whether the box has a point in common with another.
func (b *box) meets(lo, hi Vec) bool {
	return lo.X <= b.hi.X && hi.X >= b.lo.X && lo.Y <= b.hi.Y && hi.Y >= b.lo.Y && lo.Z <= b.hi.Z && hi.Z >= b.lo.Z
}

// ordered returns the ends of a segment in a fixed order, so that answers do not depend on its direction, to the last bit.
func ordered(a, b Vec) (Vec, Vec) {
	if a.X > b.X || a.X == b.X && (a.Y > b.Y || a.Y == b.Y && a.Z > b.Z) {
		return b, a
	}
	return a, b
}

// spanOf returns the corners of the bounding box of a segment.
func spanOf(a, b Vec) (lo, hi Vec) {
	if a.X > b.X {
		a.X, b.X = b.X, a.X
	}
	if a.Y > b.Y {
		a.Y, b.Y = b.Y, a.Y
	}
	if a.Z > b.Z {
		a.Z, b.Z = b.Z, a.Z
	}
	return a, b
}

// edge is one edge of the plan of a solid.
type edge struct {
	from, to orb.Point // relative to the middle of the solid
	unit     orb.Point // direction
	length   float64
}

// solid is a prism prepared for questions.
type solid struct {
	middle   orb.Point
	from, to float64
	inner    box // what is deeper than EnterTolerance lies in this box
	outer    box // what is nearer than EnterTolerance lies in this box
	edges    []edge
	convex   bool // one ring, anticlockwise and convex
}

// prepare returns a prism ready for questions, and whether it can be entered at all.
func prepare(p Prism) (solid, bool) {
	if len(p.Polygon) == 0 || len(p.Polygon[0]) < 3 {
		return solid{inner: box{lo: Vec{1, 1, 1}}, outer: box{lo: Vec{1, 1, 1}}, from: 1}, false
	}
	b := p.Polygon[0].Bound()
	s := solid{middle: b.Center(), from: p.From, to: p.To}
	lo, hi := Vec{b.Min[0], b.Min[1], p.From}, Vec{b.Max[0], b.Max[1], p.To}
	pad := Vec{EnterTolerance, EnterTolerance, EnterTolerance}
	s.inner, s.outer = box{lo.Add(pad), hi.Sub(pad)}, box{lo.Sub(pad), hi.Add(pad)}
	for i, ring := range p.Polygon {
		s.edges = append(s.edges, edgesOf(ring, s.middle, i == 0)...)
	}
	s.convex = len(p.Polygon) == 1 && convexEdges(s.edges)
	return s, s.inner.lo.X < s.inner.hi.X && s.inner.lo.Y < s.inner.hi.Y && s.inner.lo.Z < s.inner.hi.Z
}

// edgesOf returns the edges of a ring, the outer one anticlockwise and a hole clockwise, without edges of no length.
func edgesOf(ring orb.Ring, middle orb.Point, outer bool) (out []edge) {
	pts := make([]orb.Point, len(ring))
	for i, v := range ring {
		pts[i] = diff(v, middle)
	}
	if a, _, _ := Moments(pts); (a > 0) != outer {
		slices.Reverse(pts)
	}
	for i, a := range pts {
		b := pts[(i+1)%len(pts)]
		d := diff(b, a)
		if l := length(d); l > 0 {
			out = append(out, edge{a, b, orb.Point{d[0] / l, d[1] / l}, l})
		}
	}
	return out
}

// convexEdges reports whether every corner is on the left of every edge, within rounding.
func convexEdges(edges []edge) bool {
	const rounding = 1e-9 // m
	for i := range edges {
		for j := range edges {
			if cross(edges[i].unit, diff(edges[j].from, edges[i].from)) < -rounding {
				return false
			}
		}
	}
	return len(edges) >= 3
}
