package geom

import "github.com/paulmach/orb"

// Site is a site plan in local metres, read from GeoJSON by ReadSite.
type Site struct {
	Name      string
	Frame     Frame
	Roofs     []Roof
	Footings  []Zone
	KeepClear []Prism
	Envelope  []Prism // a bar must lie inside one of these, if there are any
	Walls     []Line
	Kept      []Line
}

// Region is one polygon with heights. Rings[0] is the outer ring, anticlockwise seen from above; the others are
// holes, clockwise. The first position is not repeated at the end.
type Region struct {
	Rings [][]Vec
}

// Polygon returns the plan of the region with closed rings, as orb wants them.
func (r Region) Polygon() orb.Polygon {
	p := make(orb.Polygon, len(r.Rings))
	for i, ring := range r.Rings {
		for _, v := range ring {
			p[i] = append(p[i], orb.Point{v.X, v.Y})
		}
		if len(ring) > 0 {
			p[i] = append(p[i], p[i][0])
		}
	}
	return p
}

// Roof is a roof outline with its holes and its surface.
type Roof struct {
	Name    string
	Regions []Region
	// Surface gives the height above the datum of the site at every place of the roof.
	Surface Surface
}

// Zone is a place where feet may stand. A point or a line is a zone too.
type Zone struct {
	Name    string
	Regions []Region
	Lines   [][]Vec
	Points  []Vec
	Limits  FootLimits
}

// FootLimits is what a footing zone can take. The numbers are totals of the zone in every case, except NoUplift and
// VerticalOnly, which hold at every foot. Forces in N. A nil pointer means no limit.
type FootLimits struct {
	NoUplift     bool
	VerticalOnly bool     // feet slide freely sideways
	Vertical     *float64 // largest force pressing down on the ground, N
	Uplift       *float64 // largest force pulling up, N
	Sideways     *float64 // largest horizontal force, N
	Cost         float64  // m3 of material charged per N of the largest vertical force, up or down, over the cases
}

// Line is a wall that may give support, or a kept member.
type Line struct {
	Name   string
	Points []Vec
	Area   float64 // area of a kept member, m2; 0 for a wall
	// Top is, for a wall, the height up to which it may give support, m; the wall's points give the foot of it.
	Top float64
}

// Prism is a vertical prism: the plan Polygon between the heights From and To (m). Rings are closed.
type Prism struct {
	Name     string
	Polygon  orb.Polygon
	From, To float64
}

// Surface is a height field z(x, y), in local metres.
type Surface interface {
	Height(x, y float64) float64
	// Gradient returns dz/dx and dz/dy.
	Gradient(x, y float64) (zx, zy float64)
}

// Frame says how local metres relate to the earth.
type Frame struct {
	// Geographic is true if the site came in longitude and latitude; then the local metres are a transverse Mercator
	// projection with scale 1 on the central meridian through the origin, on the WGS 84 ellipsoid.
	Geographic bool
	Lon, Lat   float64 // origin in degrees; (0, 0) in local metres
	CRS        string  // label: "EPSG:4326" or the code given for a site already in metres; may be empty
}
