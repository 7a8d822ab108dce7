package geom

import (
	"fmt"
	"math"

	"github.com/paulmach/orb"
)

// Plane is the surface z = Z + SlopeX (x - X) + SlopeY (y - Y).
type Plane struct {
	X, Y, Z        float64 // a point of the plane, local metres
	SlopeX, SlopeY float64 // rise per metre to the east and to the north
}

// Height returns z at (x, y).
func (p Plane) Height(x, y float64) float64 { return p.Z + p.SlopeX*(x-p.X) + p.SlopeY*(y-p.Y) }

// Gradient returns the slopes, the same everywhere.
func (p Plane) Gradient(_, _ float64) (zx, zy float64) { return p.SlopeX, p.SlopeY }

// PlaneThrough returns the plane through three places, or an error if they lie in one vertical plane.
func PlaneThrough(a, b, c Vec) (Plane, error) {
	n := b.Sub(a).Cross(c.Sub(a))
	// The plan of the triangle must have an area that rounding cannot make: 1 part in 1e9 of the square of its size.
	if size := math.Max(b.Sub(a).Norm(), c.Sub(a).Norm()); !(math.Abs(n.Z) > 1e-9*size*size) {
		return Plane{}, fmt.Errorf("three places of a plane must not lie in one line on the plan; move one of them")
	}
	return Plane{X: a.X, Y: a.Y, Z: a.Z, SlopeX: -n.X / n.Z, SlopeY: -n.Y / n.Z}, nil
}

// planarTolerance is how far the heights of an outline may be from one plane for the roof to be that plane, m. Above it
// the surface follows the given heights; both agree within it.
const planarTolerance = 1e-6

// fitPlane returns the plane of least squares through places and the largest height difference from it. The places
// must not lie in one line on the plan.
func fitPlane(vs []Vec) (Plane, float64) {
	var c Vec
	for _, v := range vs {
		c = c.Add(v.Scale(1 / float64(len(vs))))
	}
	var xx, xy, yy, xz, yz float64
	level := true
	for _, v := range vs {
		d := v.Sub(c)
		xx, xy, yy, xz, yz = xx+d.X*d.X, xy+d.X*d.Y, yy+d.Y*d.Y, xz+d.X*d.Z, yz+d.Y*d.Z
		level = level && v.Z == vs[0].Z
	}
	if level {
		return Plane{X: c.X, Y: c.Y, Z: vs[0].Z}, 0
	}
	det := xx*yy - xy*xy
	p := Plane{X: c.X, Y: c.Y, Z: c.Z, SlopeX: (xz*yy - yz*xy) / det, SlopeY: (yz*xx - xz*xy) / det}
	off := 0.0
	for _, v := range vs {
		off = math.Max(off, math.Abs(v.Z-p.Height(v.X, v.Y)))
	}
	if math.IsNaN(off) {
		off = math.Inf(1)
	}
	return p, off
}

// OutlineSurface returns the surface that the heights of outlines imply. If all lie in one plane it is that plane. Else
// each region has its own: its plane, or the mean value interpolation of its outline and holes (meanValue). A place
// outside the plan gets the height of the nearest place of the nearest region. Regions must be as ReadSite returns
// them.
func OutlineSurface(regions []Region) Surface {
	var all []Vec
	for _, r := range regions {
		for _, ring := range r.Rings {
			all = append(all, ring...)
		}
	}
	if len(all) < 3 {
		return Plane{}
	}
	if p, off := fitPlane(all); off <= planarTolerance {
		return p
	}
	s := patchwork{}
	for _, r := range regions {
		s.plans = append(s.plans, r.Polygon())
		s.patches = append(s.patches, regionSurface(r))
	}
	if len(s.patches) == 1 {
		return s.patches[0]
	}
	return s
}

// regionSurface returns the surface of one region.
func regionSurface(r Region) Surface {
	var vs []Vec
	for _, ring := range r.Rings {
		vs = append(vs, ring...)
	}
	if p, off := fitPlane(vs); off <= planarTolerance {
		return p
	}
	return newMeanValue(r)
}

// patchwork is a surface made of one surface per region.
type patchwork struct {
	plans   []orb.Polygon
	patches []Surface
}

// Height returns the height of the region that is there or nearest.
func (s patchwork) Height(x, y float64) float64 {
	i, at := s.nearest(x, y)
	return s.patches[i].Height(at[0], at[1])
}

// Gradient returns the gradient of the region that is there or nearest.
func (s patchwork) Gradient(x, y float64) (zx, zy float64) {
	i, at := s.nearest(x, y)
	return s.patches[i].Gradient(at[0], at[1])
}

// nearest returns the first of the nearest regions and the nearest place in it.
func (s patchwork) nearest(x, y float64) (region int, at orb.Point) {
	best := math.Inf(1)
	for i, p := range s.plans {
		q := NearestInside(p, orb.Point{x, y})
		if d := length(diff(q, orb.Point{x, y})); d < best {
			best, region, at = d, i, q
		}
	}
	return region, at
}
