package export

import (
	"math"

	"boughwork/geom"
)

// axes turn local metres into the axes of the drawing: u along the long side of the roof, v across it (to the left of u), z up.
type axes struct {
	centre   geom.Vec
	cos, sin float64 // of the angle from east to u
}

func (a axes) to(p geom.Vec) geom.Vec {
	d := p.Sub(a.centre)
	return geom.Vec{X: a.cos*d.X + a.sin*d.Y, Y: a.cos*d.Y - a.sin*d.X, Z: p.Z}
}

// along turns a direction, not a place.
func (a axes) along(d geom.Vec) geom.Vec {
	return geom.Vec{X: a.cos*d.X + a.sin*d.Y, Y: a.cos*d.Y - a.sin*d.X, Z: d.Z}
}

// bearing is the bearing (degrees clockwise from north) of a direction given in u and v.
func (a axes) bearing(u, v float64) float64 {
	return geom.Bearing(a.cos*u-a.sin*v, a.sin*u+a.cos*v)
}

// projection is a parallel projection of (u, v, z) on a drawing plane. right and up are what a place counts to the right
// and up, metre by metre, so that a length along an axis of the drawing is to scale; their vector product points to the
// viewer.
type projection struct{ right, up geom.Vec }

func (p projection) flat(v geom.Vec) (x, y float64) { return p.right.Dot(v), p.up.Dot(v) }

// near grows towards the viewer.
func (p projection) near(v geom.Vec) float64 { return p.right.Cross(p.up).Dot(v) }

// The views of the sheet. The axonometric view is the dimetric one of ISO 5456-3: the long axis rises at 7 degrees, the
// other one at 42 degrees and at half scale, heights are true (numbers from memory). It looks from low enough to see
// under the roof.
var (
	planView      = projection{geom.Vec{X: 1}, geom.Vec{Y: 1}}
	longElevation = projection{geom.Vec{X: 1}, geom.Vec{Z: 1}} // the viewer stands at v = minus infinity
	endElevation  = projection{geom.Vec{Y: 1}, geom.Vec{Z: 1}} // the viewer stands at u = infinity
	axonometric   = dimetric(7*math.Pi/180, 42*math.Pi/180, 0.5)
)

// dimetric is the view in which u rises to the right at one angle and v to the left at another with a share of its length.
func dimetric(rise, depth, share float64) projection {
	return projection{
		right: geom.Vec{X: math.Cos(rise), Y: -share * math.Cos(depth)},
		up:    geom.Vec{X: math.Sin(rise), Y: share * math.Sin(depth), Z: 1},
	}
}

// view puts a projection on the sheet.
type view struct {
	projection
	perM   float64 // mm on the sheet a metre
	origin pt      // where flat (0, 0) comes to lie
	window box     // what may be drawn on
}

func (v view) at(p geom.Vec) pt {
	x, y := v.flat(p)
	return pt{v.origin.x + v.perM*x, v.origin.y - v.perM*y}
}

func (v view) all(ps []geom.Vec) []pt {
	out := make([]pt, len(ps))
	for i, p := range ps {
		out[i] = v.at(p)
	}
	return out
}

// extent is a rectangle in a drawing plane, m.
type extent struct{ x0, y0, x1, y1 float64 }

func emptyExtent() extent {
	return extent{math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)}
}

func (e *extent) take(x, y float64) {
	e.x0, e.y0 = math.Min(e.x0, x), math.Min(e.y0, y)
	e.x1, e.y1 = math.Max(e.x1, x), math.Max(e.y1, y)
}

func (e extent) grown(d float64) extent { return extent{e.x0 - d, e.y0 - d, e.x1 + d, e.y1 + d} }
func (e extent) w() float64             { return e.x1 - e.x0 }
func (e extent) h() float64             { return e.y1 - e.y0 }

// placed returns the view that shows an extent in a box, at the scale 1:denominator, in the middle of the box.
func placed(p projection, e extent, b box, denominator float64) view {
	per := mmPerM / denominator
	w, h := e.w()*per, e.h()*per
	x, y := b.x0+(b.w()-w)/2, b.y0+(b.h()-h)/2
	return view{p, per, pt{x - e.x0*per, y + e.y1*per}, box{x, y, x + w, y + h}}
}
