package pipeline

import (
	"boughwork/geom"
	"boughwork/ground/layout"
)

// sketchSite keeps of the site what the drawings show beside the layout: roofs, footing zones and walls. Keep-clears and
// envelopes stand in the record already, as they are part of the problem.
func sketchSite(site *geom.Site) layout.RecordContext {
	var c layout.RecordContext
	for _, r := range site.Roofs {
		c.Roof = append(c.Roof, regions(r.Name, r.Regions)...)
	}
	for _, z := range site.Footings {
		c.Footings = append(c.Footings, regions(z.Name, z.Regions)...)
		for _, l := range z.Lines {
			c.Footings = append(c.Footings, layout.RecordRegion{Name: z.Name, Rings: [][][3]float64{positions(l)}})
		}
		for _, p := range z.Points {
			c.Footings = append(c.Footings, layout.RecordRegion{Name: z.Name, Rings: [][][3]float64{{p.Array()}}})
		}
	}
	for _, w := range site.Walls {
		c.Walls = append(c.Walls, layout.RecordRegion{Name: w.Name, Rings: [][][3]float64{positions(w.Points)}})
	}
	return c
}

// regions turns polygons into open rings.
func regions(name string, list []geom.Region) []layout.RecordRegion {
	var out []layout.RecordRegion
	for _, r := range list {
		region := layout.RecordRegion{Name: name, Closed: true}
		for _, ring := range r.Rings {
			region.Rings = append(region.Rings, positions(ring))
		}
		out = append(out, region)
	}
	return out
}

func positions(vs []geom.Vec) [][3]float64 {
	out := make([][3]float64, len(vs))
	for i, v := range vs {
		out[i] = v.Array()
	}
	return out
}
