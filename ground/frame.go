package ground

import (
	"math"
	"slices"

	"boughwork/geom"
)

// tidy is the step to which coordinates that we make are rounded, m: a billionth of a metre is far below anything that
// can be built and keeps 4.000000000000001 out of the record.
const tidy = 1e-9

// gridFrame is the frame in which the grid runs along the axes: origin in local metres, and the direction (c, s) of its
// first axis. The direction lies within 45 degrees of east, so that a roof and its mirror image have the same rows.
type gridFrame struct{ ox, oy, c, s float64 }

// in returns the grid coordinates of a place.
func (g gridFrame) in(x, y float64) pt {
	x, y = x-g.ox, y-g.oy
	return pt{g.c*x + g.s*y, g.c*y - g.s*x}
}

// out returns the place of grid coordinates in local metres, rounded to tidy.
func (g gridFrame) out(p pt) (x, y float64) {
	return tidied(g.ox + g.c*p[0] - g.s*p[1]), tidied(g.oy + g.s*p[0] + g.c*p[1])
}

// ring returns the plan of a ring of positions in grid coordinates.
func (g gridFrame) ring(vs []geom.Vec) ring {
	r := make(ring, len(vs))
	for i, v := range vs {
		r[i] = g.in(v.X, v.Y)
	}
	return r
}

// area returns the plan of a region in grid coordinates: the outline anticlockwise, the holes clockwise, whatever way they
// were given.
func (g gridFrame) area(r geom.Region) area {
	a := make(area, len(r.Rings))
	for i, vs := range r.Rings {
		a[i] = g.ring(vs)
		if len(vs) > 0 && (a[i].about(a[i][0]).area < 0) != (i > 0) {
			slices.Reverse(a[i])
		}
	}
	return a
}

// tidied rounds to the step tidy.
func tidied(x float64) float64 {
	if math.Abs(x) > 1e6 {
		return x // a float64 has no finer steps there
	}
	return math.Round(x/tidy) / (1 / tidy)
}

// newGridFrame returns the frame along the bearing (degrees clockwise from north), or along the longest edge of the
// roofs if the bearing is nil.
func newGridFrame(roofs []geom.Roof, bearing *float64) gridFrame {
	var g gridFrame
	first := true
	for _, r := range roofs {
		for _, reg := range r.Regions {
			for _, v := range reg.Rings[0] {
				if x, y := math.Floor(v.X), math.Floor(v.Y); first {
					g.ox, g.oy, first = x, y, false
				} else {
					g.ox, g.oy = math.Min(g.ox, x), math.Min(g.oy, y)
				}
			}
		}
	}
	if bearing == nil {
		var all []geom.Region
		for _, r := range roofs {
			all = append(all, r.Regions...)
		}
		edge := geom.LongestEdgeBearing(mapped(all, geom.Region.Polygon)...)
		bearing = &edge
	}
	var d pt
	d[0], d[1] = geom.Towards(*bearing)
	for d[0] < math.Abs(d[1]) || d[0] == -d[1] {
		d = pt{-d[1], d[0]} // a quarter turn keeps the grid
	}
	g.c, g.s = d[0], d[1]
	return g
}

// mapped returns f of every element.
func mapped[A, B any](in []A, f func(A) B) []B {
	out := make([]B, len(in))
	for i, a := range in {
		out[i] = f(a)
	}
	return out
}

// straightAngle is the turn below which a vertex lies on a straight edge, radians (half a degree).
const straightAngle = math.Pi / 360

// turn returns the angle by which a path a, b, c turns at b, radians, positive to the left.
func turn(a, b, c pt) float64 {
	ux, uy, vx, vy := b[0]-a[0], b[1]-a[1], c[0]-b[0], c[1]-b[1]
	return math.Atan2(ux*vy-uy*vx, ux*vx+uy*vy)
}
