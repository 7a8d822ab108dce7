package geom

import (
	"fmt"
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// Limits of what is taken for a site.
const (
	// maxReach is the largest distance in m of anything from the middle of the roofs. The projection is true to 0.3 mm
	// per km within it, and a plan that is larger is most likely in the wrong unit.
	maxReach = 5000.0
	// minRoofArea is the smallest area of a roof, m2: less than a hand is a mistake in the unit.
	minRoofArea = 0.01
	// overlapDepth is how deep two roofs must overlap to be worth a warning, m: more than positions are rounded by.
	overlapDepth = 0.01
)

// heightSpan is the lowest and the highest of some heights.
type heightSpan struct{ lo, hi float64 }

// heights returns the span of the heights of places; of none, +Inf to -Inf.
func heights(vs ...[]Vec) heightSpan {
	h := heightSpan{math.Inf(1), math.Inf(-1)}
	for _, v := range vs {
		for _, p := range v {
			h.lo, h.hi = math.Min(h.lo, p.Z), math.Max(h.hi, p.Z)
		}
	}
	return h
}

// ground returns the span of the heights of all places where something may stand; 0 if there is none.
func (rd *siteReader) ground() heightSpan {
	var all [][]Vec
	for _, z := range rd.site.Footings {
		all = append(all, z.places())
	}
	for _, w := range rd.site.Walls {
		all = append(all, w.Points)
	}
	if len(all) == 0 {
		return heightSpan{}
	}
	return heights(all...)
}

// places returns every position of a zone.
func (z Zone) places() (out []Vec) {
	for _, r := range z.Regions {
		for _, ring := range r.Rings {
			out = append(out, ring...)
		}
	}
	for _, l := range z.Lines {
		out = append(out, l...)
	}
	return append(out, z.Points...)
}

// judge checks what concerns several features.
func (rd *siteReader) judge() {
	if rd.count(roleRoof) == 0 {
		rd.issues.Add(Error, "", "features", "the site has no roof; give one Polygon or MultiPolygon the property \"role\": \"roof\"")
	}
	if rd.count(roleFooting, roleWall) == 0 {
		rd.issues.Add(Error, "", "features", "the site has no place to stand; give an area, a line or a point the property \"role\": \"footing\", or a line \"role\": \"wall\"")
	}
	rd.roofAreas()
	rd.roofOverlaps()
	rd.footingNames()
	if rd.issues.HasError() {
		return // what follows would repeat it in other words
	}
	rd.roofAboveGround()
	rd.footings()
}

// reach reports what lies too far from the roofs to belong to one site, and marks it as broken. Without a usable roof
// the middle of everything stands in for theirs.
func (rd *siteReader) reach() {
	middle, of := rd.middle(roleRoof), "the roofs"
	if middle == nil {
		middle, of = rd.middle(roles...), "the plan"
	}
	if middle == nil {
		return // nothing is left to judge
	}
	for _, f := range rd.features {
		worst := 0.0
		f.shapes(func(l rawLine) {
			for _, p := range l.pos {
				d := length(orb.Point{p.at.X - middle[0], p.at.Y - middle[1]})
				if math.IsNaN(d) { // a quarter of the globe away, where the projection ends
					d = math.Inf(1)
				}
				worst = math.Max(worst, d)
			}
		})
		if f.broken || worst <= maxReach {
			continue
		}
		remedy := "check its positions, or leave the feature out"
		switch {
		case rd.opt.Metric && f.role == roleRoof:
			remedy = "check that positions are in metres"
		case f.role == roleRoof:
			remedy = "if positions are metres, set `coordinates: metres` in the brief's site"
		case !rd.opt.Metric && rd.nearSwapped(f):
			remedy = "longitude and latitude seem mixed up in this feature, which would be near if they were exchanged; write longitude first"
		}
		rd.fault(f, f.at("geometry.coordinates"), "part of it is %s the middle of %s, and a site reaches at most %g km; %s", farAway(worst), of, maxReach/1000, remedy)
	}
}

// farAway writes a distance in m in words.
func farAway(d float64) string {
	if d > 1e7 { // half of a meridian: beyond it the projection's distances mean nothing
		return "a quarter of the globe or more from"
	}
	return fmt.Sprintf("%.1f km from", d/1000)
}

// middle returns the middle of the bounding box of the features of some roles in local metres, nil if there are none.
func (rd *siteReader) middle(roles ...string) *orb.Point {
	var b orb.MultiPoint
	for _, f := range rd.features {
		if slices.Contains(roles, f.role) && !f.broken {
			f.shapes(func(l rawLine) {
				for _, p := range l.pos {
					b = append(b, orb.Point{p.at.X, p.at.Y})
				}
			})
		}
	}
	if len(b) == 0 {
		return nil
	}
	c := b.Bound().Center()
	if !rd.opt.Metric {
		c = orb.Point{} // the frame is there already, also where the projection is not finite
	}
	return &c
}

// roofAreas reports roofs of no area.
func (rd *siteReader) roofAreas() {
	for i, r := range rd.site.Roofs {
		area := 0.0
		for _, g := range r.Regions {
			area += Area(g.Polygon())
		}
		if area >= minRoofArea {
			continue
		}
		remedy := "draw its outline in true size"
		if rd.opt.Metric {
			remedy = "if positions are longitude and latitude, set `coordinates: lonlat` in the brief's site"
		}
		rd.issues.Add(Error, r.Name, rd.roofAt[i], "the roof has an area of %.2g m2, which is nothing to carry; %s", area, remedy)
	}
}

// roofOverlaps warns of roof polygons that cover the same place: its load would count twice.
func (rd *siteReader) roofOverlaps() {
	type patch struct {
		name, path string
		plan       orb.Polygon
	}
	var all []patch
	for i, r := range rd.site.Roofs {
		for _, g := range r.Regions {
			all = append(all, patch{r.Name, rd.roofAt[i], g.Polygon()})
		}
	}
	for i, p := range all {
		for _, q := range all[:i] {
			if overlapping(p.plan, q.plan, overlapDepth) {
				rd.issues.Add(Warning, p.name, p.path, "the roof overlaps %s, and loads count twice there; trim one of them", q.name)
			}
		}
	}
}

// footingNames warns of zones that cannot be told apart.
func (rd *siteReader) footingNames() {
	seen := map[string]bool{}
	for i, z := range rd.site.Footings {
		if seen[z.Name] {
			rd.issues.Add(Warning, z.Name, rd.footAt[i], "another footing has the same name; limits given by name in the brief hold for both, each for itself")
		}
		seen[z.Name] = true
	}
}
