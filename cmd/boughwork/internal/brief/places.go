package brief

import (
	"fmt"
	"slices"

	"boughwork/geom"
	"boughwork/ground"
)

// Spec returns the study in the local metres of the site's frame: every place that the brief gives in the site's
// coordinates is projected. Issues name places that cannot be on the earth.
func (s *Study) Spec(frame geom.Frame) (ground.Spec, geom.Issues) {
	c := converter{frame: frame}
	spec := s.spec
	spec.Actions = slices.Clone(s.spec.Actions)
	for i := range spec.Actions {
		a := &spec.Actions[i]
		path := fmt.Sprintf("loads.actions[%d]", i)
		a.Area, a.Edge, a.Point = slices.Clone(a.Area), slices.Clone(a.Edge), slices.Clone(a.Point)
		for j := range a.Area {
			a.Area[j].Pattern = c.pattern(a.Area[j].Pattern, fmt.Sprintf("%s.area[%d].where", path, j))
		}
		for j := range a.Edge {
			a.Edge[j].Pattern = c.pattern(a.Edge[j].Pattern, fmt.Sprintf("%s.edge[%d].where", path, j))
		}
		for j := range a.Point {
			a.Point[j].At = c.place(a.Point[j].At, fmt.Sprintf("%s.point[%d].at", path, j))
		}
	}
	return spec, c.issues
}

// converter projects places and collects those that are out of range.
type converter struct {
	frame  geom.Frame
	issues geom.Issues
}

// farM is how far from the origin of the site a place of the brief may be, m: further off it is a slip (a swapped
// pair, a wrong sign), and the projection is no longer true to length.
const farM = 20e3

func (c *converter) place(p [2]float64, path string) [2]float64 {
	if !c.frame.Geographic {
		return p
	}
	if p[0] < -180 || p[0] > 180 || p[1] < -90 || p[1] > 90 {
		c.issues.Add(geom.Error, "brief", path, "[%s, %s] is no longitude and latitude; the site is in degrees", plain(p[0]), plain(p[1]))
		return [2]float64{}
	}
	x, y := c.frame.ToLocal(p[0], p[1])
	if !(x*x+y*y < farM*farM) {
		c.issues.Add(geom.Error, "brief", path,
			"[%s, %s] is more than %g km from the site; longitude comes first, then latitude", plain(p[0]), plain(p[1]), farM/1e3)
		return [2]float64{}
	}
	return [2]float64{x, y}
}

func (c *converter) pattern(p ground.Pattern, path string) ground.Pattern {
	if p.Half != nil && p.Half.Through != nil {
		at := c.place(*p.Half.Through, path+".through")
		p.Half = &ground.HalfPlane{Through: &at, Bearing: p.Half.Bearing}
	}
	if len(p.Polygon) > 0 {
		p.Polygon = slices.Clone(p.Polygon)
		for i := range p.Polygon {
			p.Polygon[i] = c.place(p.Polygon[i], fmt.Sprintf("%s.polygon[%d]", path, i))
		}
	}
	return p
}
