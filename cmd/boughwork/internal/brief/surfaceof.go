package brief

import (
	"math"

	"boughwork/geom"
)

// Of returns what makes the surface of the roof once the frame of the site is known, or nil if the heights come from
// the site plan. What is wrong with a place is added to issues when the function is called.
func (s Surface) Of(issues *geom.Issues) func(geom.Frame) geom.Surface {
	switch {
	case s.Plane != nil:
		return func(f geom.Frame) geom.Surface { return s.Plane.in(f, issues) }
	case s.Grid != nil:
		return func(f geom.Frame) geom.Surface { return s.Grid.in(f, issues) }
	}
	return nil
}

func (p *Plane) in(f geom.Frame, issues *geom.Issues) geom.Surface {
	c := converter{frame: f}
	var at [2]float64
	if p.placed {
		at = c.place(p.Through, "roof.plane.through")
	}
	*issues = append(*issues, c.issues...)
	sin, cos := math.Sincos(p.Bearing * math.Pi / 180)
	return geom.Plane{X: at[0], Y: at[1], Z: p.HeightM, SlopeX: p.Slope * sin, SlopeY: p.Slope * cos}
}

// level is the surface that stands in for one that cannot be made; the issue stops the work.
var level = geom.Plane{}

func (g *Grid) in(f geom.Frame, issues *geom.Issues) geom.Surface {
	c := converter{frame: f}
	at := c.place(g.Origin, "roof.heights.origin")
	*issues = append(*issues, c.issues...)
	// The frame's north and the earth's north agree at the origin of the frame, so a bearing is one in local metres.
	surface, err := geom.NewHeightGrid(at[0], at[1], g.AlongM, g.AcrossM, g.Bearing-90, g.Rows)
	if err != nil {
		issues.Add(geom.Error, "brief", "roof.heights", "%v", err)
		return level
	}
	return surface
}
