package geom

import (
	"math"

	"github.com/paulmach/orb"
)

// BoundaryTolerance is the distance in m within which a place counts as on the boundary of a polygon. A micrometre is
// far above the rounding of local metres (1e-9 m for a national grid of 1e7 m) and far below anything that is built.
const BoundaryTolerance = 1e-6

// Moments returns the signed area of a ring (positive if anticlockwise) and its first moments, the integrals of x and
// y over it. The ring may be closed or open. Exact but for rounding: Green's theorem about the first position.
func Moments(ring []orb.Point) (area, mx, my float64) {
	if len(ring) < 3 {
		return 0, 0, 0
	}
	o := ring[0]
	for i := 1; i+1 < len(ring); i++ {
		a, b := diff(ring[i], o), diff(ring[i+1], o)
		twice := cross(a, b)
		area += twice / 2
		mx += twice * (a[0] + b[0]) / 6
		my += twice * (a[1] + b[1]) / 6
	}
	return area, mx + area*o[0], my + area*o[1]
}

// PolygonMoments returns the area of a polygon without its holes, and its first moments, whatever way the rings run.
func PolygonMoments(p orb.Polygon) (area, mx, my float64) {
	for i, ring := range p {
		a, x, y := Moments(ring)
		s := 1.0
		if (a < 0) != (i > 0) {
			s = -1
		}
		area, mx, my = area+s*a, mx+s*x, my+s*y
	}
	return area, mx, my
}

// Area returns the area of a polygon without its holes, never negative.
func Area(p orb.Polygon) float64 {
	a, _, _ := PolygonMoments(p)
	return max(a, 0)
}

// Centroid returns the centre of area of a polygon with holes; for a polygon of no area the middle of its bounding
// box, and for an empty one (0, 0).
func Centroid(p orb.Polygon) orb.Point {
	if len(p) == 0 || len(p[0]) == 0 {
		return orb.Point{}
	}
	a, x, y := PolygonMoments(p)
	if !(a > 0) {
		return p.Bound().Center()
	}
	return orb.Point{x / a, y / a}
}

// ContainsPoint reports whether a place is inside a polygon or within BoundaryTolerance of its boundary, holes
// included. An empty polygon contains nothing.
func ContainsPoint(p orb.Polygon, at orb.Point) bool {
	return side(p, at, BoundaryTolerance) >= 0
}

// ContainsStrictly reports whether a place is inside a polygon and further than tol (m) from its boundary.
func ContainsStrictly(p orb.Polygon, at orb.Point, tol float64) bool {
	return side(p, at, tol) > 0
}

// side returns 1 inside, -1 outside and 0 within tol of the boundary.
func side(p orb.Polygon, at orb.Point, tol float64) int {
	if len(p) == 0 || len(p[0]) < 3 || !p[0].Bound().Pad(tol).Contains(at) {
		return -1
	}
	if DistanceToBoundary(p, at) <= tol {
		return 0
	}
	if insideRings(p, at) {
		return 1
	}
	return -1
}

// insideRings reports whether a place off the boundary is inside by the even-odd rule over all rings.
func insideRings(p orb.Polygon, at orb.Point) bool {
	in := false
	for _, ring := range p {
		j := len(ring) - 1
		for i, b := range ring {
			a := ring[j]
			j = i
			// Half-open in y, so that a ray through a vertex counts once.
			if (a[1] > at[1]) != (b[1] > at[1]) && at[0] < a[0]+(at[1]-a[1])/(b[1]-a[1])*(b[0]-a[0]) {
				in = !in
			}
		}
	}
	return in
}

// DistanceToBoundary returns the distance from a place to the nearest point of any ring of a polygon, inside or
// outside; +Inf for an empty polygon.
func DistanceToBoundary(p orb.Polygon, at orb.Point) float64 {
	_, d := nearestOnBoundary(p, at)
	return d
}

// DistanceToPolygon returns 0 for a place inside a polygon or on its boundary, else the distance to the boundary.
func DistanceToPolygon(p orb.Polygon, at orb.Point) float64 {
	if ContainsPoint(p, at) {
		return 0
	}
	return DistanceToBoundary(p, at)
}

// NearestInside returns the place itself if the polygon contains it, else the nearest point of the boundary.
func NearestInside(p orb.Polygon, at orb.Point) orb.Point {
	if ContainsPoint(p, at) {
		return at
	}
	q, _ := nearestOnBoundary(p, at)
	return q
}

// nearestOnBoundary returns the nearest point of any ring and its distance.
func nearestOnBoundary(p orb.Polygon, at orb.Point) (orb.Point, float64) {
	best, near := math.Inf(1), at
	for _, ring := range p {
		for i := range ring {
			q := nearestOnSegment(ring[i], ring[(i+1)%len(ring)], at)
			if d := length(diff(at, q)); d < best {
				best, near = d, q
			}
		}
	}
	return near, best
}

// nearestOnSegment returns the point of the segment a-b nearest to a place.
func nearestOnSegment(a, b, at orb.Point) orb.Point {
	d := diff(b, a)
	dd := dot(d, d)
	if dd == 0 {
		return a
	}
	t := dot(diff(at, a), d) / dd
	if t <= 0 {
		return a
	}
	if t >= 1 {
		return b
	}
	return orb.Point{a[0] + t*d[0], a[1] + t*d[1]}
}

func diff(a, b orb.Point) orb.Point { return orb.Point{a[0] - b[0], a[1] - b[1]} }
func dot(a, b orb.Point) float64    { return a[0]*b[0] + a[1]*b[1] }
func cross(a, b orb.Point) float64  { return a[0]*b[1] - a[1]*b[0] }
func length(a orb.Point) float64    { return math.Hypot(a[0], a[1]) }

// along returns a + t (b - a).
func along(a, b orb.Point, t float64) orb.Point {
	return orb.Point{a[0] + t*(b[0]-a[0]), a[1] + t*(b[1]-a[1])}
}
