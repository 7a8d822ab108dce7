package ground

import "math"

// pt is a point of the plan, in metres.
type pt = [2]float64

// ring is a closed polygon in plan; the first point is not repeated. Positive area is anticlockwise.
type ring []pt

// integrals are the area of a ring and its first moments about a point.
type integrals struct{ area, mx, my float64 }

// add returns the sum, s times o added.
func (i integrals) add(s float64, o integrals) integrals {
	return integrals{i.area + s*o.area, i.mx + s*o.mx, i.my + s*o.my}
}

// about returns the signed area of r and its first moments about o. Working about a near point keeps sites whose
// metres are counted in millions from losing digits.
func (r ring) about(o pt) integrals {
	var s integrals
	for i, p := range r {
		q := r[(i+1)%len(r)]
		ax, ay, bx, by := p[0]-o[0], p[1]-o[1], q[0]-o[0], q[1]-o[1]
		c := (ax*by - bx*ay) / 2
		s.area += c
		s.mx += c * (ax + bx) / 3
		s.my += c * (ay + by) / 3
	}
	return s
}

// clip returns the part of r in a half-plane (Sutherland and Hodgman 1974). A ring that is not convex may come back
// with edges that run along the line to and fro: its area and moments are right all the same.
func (r ring) clip(h half) ring {
	out := make(ring, 0, len(r)+2)
	for i, p := range r {
		q := r[(i+1)%len(r)]
		a, b := h.n[0]*p[0]+h.n[1]*p[1]-h.d, h.n[0]*q[0]+h.n[1]*q[1]-h.d
		if a <= 0 {
			out = append(out, p)
		}
		if (a < 0 && b > 0) || (a > 0 && b < 0) {
			t := a / (a - b)
			out = append(out, pt{p[0] + t*(q[0]-p[0]), p[1] + t*(q[1]-p[1])})
		}
	}
	if len(out) < 3 {
		return nil
	}
	return out
}

// half is the half-plane n . p <= d.
type half struct {
	n pt
	d float64
}

// clipAll returns the part of r inside all half-planes.
func (r ring) clipAll(hs []half) ring {
	for _, h := range hs {
		if r = r.clip(h); r == nil {
			return nil
		}
	}
	return r
}

// halves returns the half-planes to the left of the edges of a convex anticlockwise ring.
func (r ring) halves() []half {
	var out []half
	for i, p := range r {
		q := r[(i+1)%len(r)]
		n := pt{q[1] - p[1], p[0] - q[0]}
		out = append(out, half{n, n[0]*p[0] + n[1]*p[1]})
	}
	return out
}

// cell is a convex part of the plan: its ring, and the half-planes that it is the intersection of. Rings are clipped by
// these and never by the edges of the cell, some of which may be so short that rounding has turned them.
type cell struct {
	ring  ring
	inner []half
}

// cut returns the part of the cell in a half-plane.
func (c cell) cut(hs ...half) cell {
	for _, h := range hs {
		crossed := false
		for _, p := range c.ring {
			crossed = crossed || h.n[0]*p[0]+h.n[1]*p[1] > h.d
		}
		if crossed {
			c.ring = c.ring.clip(h)
			c.inner = append(c.inner[:len(c.inner):len(c.inner)], h)
		}
	}
	return c
}

// contains reports whether p is inside r (even-odd rule); on the outline either answer is possible.
func (r ring) contains(p pt) bool {
	in := false
	for i, a := range r {
		b := r[(i+1)%len(r)]
		if (a[1] > p[1]) != (b[1] > p[1]) && p[0] < a[0]+(p[1]-a[1])/(b[1]-a[1])*(b[0]-a[0]) {
			in = !in
		}
	}
	return in
}

// box returns the bounding box of the ring.
func (r ring) box() (lo, hi pt) {
	lo, hi = pt{math.Inf(1), math.Inf(1)}, pt{math.Inf(-1), math.Inf(-1)}
	for _, p := range r {
		for k := range 2 {
			lo[k], hi[k] = math.Min(lo[k], p[k]), math.Max(hi[k], p[k])
		}
	}
	return lo, hi
}

// length returns the perimeter of the ring.
func (r ring) length() float64 {
	var l float64
	for i, p := range r {
		l += distance(p, r[(i+1)%len(r)])
	}
	return l
}

// edgeDistance returns the distance of p from the nearest edge of the ring.
func (r ring) edgeDistance(p pt) float64 {
	d := math.Inf(1)
	for i, a := range r {
		d = math.Min(d, segmentDistance(p, a, r[(i+1)%len(r)]))
	}
	return d
}

// area is a polygon with holes: the first ring is the outline, anticlockwise; the others are holes, clockwise.
type area []ring

// contains reports whether p is inside the outline and in no hole.
func (a area) contains(p pt) bool {
	in := false
	for _, r := range a {
		if r.contains(p) {
			in = !in
		}
	}
	return in
}

// edgeDistance returns the distance of p from the nearest edge of outline and holes.
func (a area) edgeDistance(p pt) float64 {
	d := math.Inf(1)
	for _, r := range a {
		d = math.Min(d, r.edgeDistance(p))
	}
	return d
}

func distance(p, q pt) float64 { return math.Hypot(p[0]-q[0], p[1]-q[1]) }

// segmentDistance returns the distance of p from the segment a b.
func segmentDistance(p, a, b pt) float64 {
	dx, dy := b[0]-a[0], b[1]-a[1]
	t := 0.0
	if l := dx*dx + dy*dy; l > 0 {
		t = math.Max(0, math.Min(1, ((p[0]-a[0])*dx+(p[1]-a[1])*dy)/l))
	}
	return distance(p, pt{a[0] + t*dx, a[1] + t*dy})
}
