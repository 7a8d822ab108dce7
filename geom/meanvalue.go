package geom

import "github.com/paulmach/orb"

// meanValue is the surface through the heights of an outline and its holes by mean value coordinates: Floater 2003,
// Mean value coordinates, CAGD 20:19-27; for any set of rings Hormann and Floater 2006, Mean value coordinates for
// arbitrary planar polygons, ACM TOG 25:1424-1441, section 4. It takes the given heights at the vertices, is linear
// along the edges, smooth inside, and reproduces planes.
type meanValue struct {
	plan  orb.Polygon
	rings [][]Vec
}

// Distances in m at which the weights are replaced by what they tend to.
const (
	// onEdge is where the height of the edge is taken: far below what can be built, far above rounding.
	onEdge = 1e-9
	// slopeStep is how far from the edges a slope is evaluated. Nearer, weights of the order 1/distance cancel; here
	// they still leave ten digits, and the slope changes little over a tenth of a millimetre.
	slopeStep = 1e-4
)

func newMeanValue(r Region) meanValue { return meanValue{r.Polygon(), r.Rings} }

// Height returns z at (x, y); outside the outline and in holes that of the nearest place of the boundary.
func (m meanValue) Height(x, y float64) float64 {
	at := NearestInside(m.plan, orb.Point{x, y})
	if z, ok := m.edgeHeight(at); ok {
		return z
	}
	z, _, _ := m.evaluate(at)
	return z
}

// Gradient returns dz/dx and dz/dy; on the boundary and outside, the slope just inside the nearest place.
func (m meanValue) Gradient(x, y float64) (zx, zy float64) {
	_, zx, zy = m.evaluate(m.offEdges(NearestInside(m.plan, orb.Point{x, y})))
	return zx, zy
}

// edgeHeight returns the height of the edge on which the place lies, if it does.
func (m meanValue) edgeHeight(at orb.Point) (float64, bool) {
	for _, ring := range m.rings {
		for i, a := range ring {
			b := ring[(i+1)%len(ring)]
			pa, pb := orb.Point{a.X, a.Y}, orb.Point{b.X, b.Y}
			q := nearestOnSegment(pa, pb, at)
			if length(diff(q, at)) <= onEdge {
				return a.Z + (b.Z-a.Z)*length(diff(q, pa))/length(diff(pb, pa)), true
			}
		}
	}
	return 0, false
}

// offEdges moves a place that is nearer than slopeStep to edges away from them, to the left of each: inwards.
func (m meanValue) offEdges(at orb.Point) orb.Point {
	var push orb.Point
	for _, ring := range m.rings {
		for i, a := range ring {
			b := ring[(i+1)%len(ring)]
			pa, pb := orb.Point{a.X, a.Y}, orb.Point{b.X, b.Y}
			if length(diff(nearestOnSegment(pa, pb, at), at)) < slopeStep {
				d := diff(pb, pa)
				l := length(d)
				push = orb.Point{push[0] - d[1]/l, push[1] + d[0]/l}
			}
		}
	}
	if l := length(push); l > 0 {
		at = orb.Point{at[0] + 2*slopeStep*push[0]/l, at[1] + 2*slopeStep*push[1]/l}
	}
	return at
}

// evaluate returns the height and its gradient at a place off the edges.
//
// With d_i from the place to vertex i, r_i its length and a_i the signed angle between d_i and d_(i+1), the weight of
// vertex i is w_i = (t_(i-1) + t_i) / r_i, t_i = tan(a_i/2). From grad a_i = g_(i+1) - g_i, g_i = (d_y, -d_x) / r_i^2,
// grad t_i = (1 + t_i^2)/2 grad a_i and grad 1/r_i = d_i / r_i^3 follows the gradient of z = sum w_i z_i / sum w_i.
func (m meanValue) evaluate(at orb.Point) (z, zx, zy float64) {
	var sum, sumZ, sumX, sumY, sumZX, sumZY float64
	base := m.rings[0][0].Z // heights relative to one of them, so that a large common height costs no digits
	for _, ring := range m.rings {
		n := len(ring)
		prev := halfAngle(ring[n-1], ring[0], at)
		for i, v := range ring {
			next := halfAngle(v, ring[(i+1)%n], at)
			d := orb.Point{v.X - at[0], v.Y - at[1]}
			r := length(d)
			t := prev.t + next.t
			w := t / r
			wx := (prev.tx+next.tx)/r + t*d[0]/(r*r*r)
			wy := (prev.ty+next.ty)/r + t*d[1]/(r*r*r)
			f := v.Z - base
			sum, sumX, sumY = sum+w, sumX+wx, sumY+wy
			sumZ, sumZX, sumZY = sumZ+w*f, sumZX+wx*f, sumZY+wy*f
			prev = next
		}
	}
	f := sumZ / sum
	return base + f, (sumZX - f*sumX) / sum, (sumZY - f*sumY) / sum
}

// tangent is the tangent of half the angle under which an edge is seen, with its gradient.
type tangent struct{ t, tx, ty float64 }

func halfAngle(a, b Vec, at orb.Point) tangent {
	p, q := orb.Point{a.X - at[0], a.Y - at[1]}, orb.Point{b.X - at[0], b.Y - at[1]}
	rp, rq := length(p), length(q)
	c, s := dot(p, q), cross(p, q)
	var t float64
	if c > 0 {
		t = s / (rp*rq + c)
	} else {
		t = (rp*rq - c) / s
	}
	g := (1 + t*t) / 2
	return tangent{t, g * (q[1]/(rq*rq) - p[1]/(rp*rp)), g * (p[0]/(rp*rp) - q[0]/(rq*rq))}
}
