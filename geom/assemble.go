package geom

import (
	"fmt"
	"slices"
)

// assemble places the features in local metres, makes the parts of the site of them and judges the whole.
func (rd *siteReader) assemble() {
	rd.placeFrame()
	rd.project()
	rd.mixedUp()
	rd.reach()
	for _, f := range rd.features {
		if f.broken {
			continue
		}
		if rd.allowed(f); !f.broken {
			rd.mixedHeights(f)
			rd.part(f)
		}
	}
	rd.prisms()
	rd.surfaces()
	rd.judge()
}

// shapes calls visit with every list of positions of a feature.
func (f *feature) shapes(visit func(rawLine)) {
	for _, p := range f.polygons {
		for _, l := range p.rings {
			visit(l)
		}
	}
	for _, ls := range [][]rawLine{f.lines, f.points} {
		for _, l := range ls {
			visit(l)
		}
	}
}

// placeFrame puts the origin of a geographic frame in the middle of the bounding box of the roofs; of everything, if
// there is no roof.
func (rd *siteReader) placeFrame() {
	if rd.opt.Metric {
		return
	}
	var b span
	for _, wanted := range []string{roleRoof, ""} {
		for _, f := range rd.features {
			if !f.broken && (wanted == "" || f.role == wanted) {
				f.shapes(func(l rawLine) { b.addAll(l.pos) })
			}
		}
		if b.any {
			rd.site.Frame = NewFrame(b.middle())
			return
		}
	}
}

// span is a bounding box of longitudes and latitudes. Longitudes are taken within half a turn of the first, so that a
// site across the antimeridian stays in one piece.
type span struct {
	any                    bool
	first                  float64
	west, east, south, top float64
}

func (s *span) addAll(ps []position) {
	for _, p := range ps {
		if !s.any {
			*s = span{true, p.x, 0, 0, p.y, p.y}
		}
		d := wrapDegrees(p.x - s.first)
		s.west, s.east = min(s.west, d), max(s.east, d)
		s.south, s.top = min(s.south, p.y), max(s.top, p.y)
	}
}

func (s *span) middle() (lon, lat float64) {
	return s.first + (s.west+s.east)/2, s.south/2 + s.top/2
}

// project fills in the local metres of every position.
func (rd *siteReader) project() {
	for _, f := range rd.features {
		f.shapes(func(l rawLine) {
			for i := range l.pos {
				p := &l.pos[i]
				x, y := rd.site.Frame.ToLocal(p.x, p.y)
				p.at = Vec{x, y, p.z}
			}
		})
	}
}

// allowed reports geometry that a role cannot have.
func (rd *siteReader) allowed(f *feature) {
	path := f.at("geometry")
	switch f.role {
	case roleRoof, roleKeepClear, roleEnvelope:
		if len(f.lines)+len(f.points) > 0 {
			rd.fault(f, path, "a %s must be an area; draw it as Polygon or MultiPolygon", f.role)
		}
	case roleWall:
		if len(f.points) > 0 {
			rd.fault(f, path, "a wall must be a line; draw it as LineString or MultiLineString (or Polygon for its outline)")
		}
	case roleKept:
		if len(f.points)+len(f.polygons) > 0 {
			rd.fault(f, path, "a kept member must be a line; draw it as LineString or MultiLineString with heights")
		}
	}
}

// mixedHeights warns of a feature in which some positions have a height and others do not: most likely an oversight.
func (rd *siteReader) mixedHeights(f *feature) {
	if f.role == roleKeepClear || f.role == roleEnvelope || f.role == roleRoof && rd.opt.Surface != nil {
		return
	}
	high, all := 0, 0
	f.shapes(func(l rawLine) {
		for _, p := range l.pos {
			all++
			if p.high {
				high++
			}
		}
	})
	if high > 0 && high < all {
		rd.issues.Add(Warning, f.name, f.at("geometry.coordinates"), "%d of %d positions have no height and are taken at %g m; give each a third number", all-high, all, f.elevation)
	}
}

// part makes the part of the site that a feature stands for. Prisms wait until the ground is known.
func (rd *siteReader) part(f *feature) {
	switch f.role {
	case roleRoof:
		if r := rd.regions(f); !f.broken && len(r) > 0 {
			rd.site.Roofs = append(rd.site.Roofs, Roof{Name: f.name, Regions: r})
		}
	case roleFooting:
		rd.footing(f)
	case roleWall:
		rd.wall(f)
	case roleKept:
		area := rd.keptArea(f)
		for _, l := range f.lines {
			if pts := rd.polyline(f, l, false); !f.broken {
				rd.site.Kept = append(rd.site.Kept, Line{Name: f.name, Points: pts, Area: area})
			}
		}
	}
}

// footing makes a zone.
func (rd *siteReader) footing(f *feature) {
	z := Zone{Name: f.name, Regions: rd.regions(f), Limits: rd.footLimits(f)}
	for _, l := range f.lines {
		z.Lines = append(z.Lines, rd.polyline(f, l, true))
	}
	for _, p := range f.points {
		z.Points = append(z.Points, p.pos[0].at)
	}
	if !f.broken {
		rd.site.Footings = append(rd.site.Footings, z)
	}
}

// wall makes the lines of a wall; the outline of a polygon is one.
func (rd *siteReader) wall(f *feature) {
	lines := f.lines
	for _, p := range f.polygons {
		lines = append(lines, p.rings...)
	}
	top, given := rd.heightValue(f, "top_m")
	for _, l := range lines {
		pts := rd.polyline(f, l, true)
		if f.broken {
			return
		}
		foot := heights(pts)
		if !given {
			top = foot.hi
		}
		if top < foot.hi {
			rd.fault(f, f.at("properties.top_m"), "the top of the wall at %g m is below its foot at %g m; heights are above the datum of the site, as those of positions are", top, foot.hi)
			return
		}
		rd.site.Walls = append(rd.site.Walls, Line{Name: f.name, Points: pts, Top: top})
	}
	if !given && !f.broken {
		rd.issues.Add(Warning, f.name, f.at("properties.top_m"), "the wall has no top_m and gives support only along its foot; give the height of its top in m above the datum")
	}
}

// polyline returns the places of a line without repeated ones: repeated on the plan, or in space.
func (rd *siteReader) polyline(f *feature, l rawLine, plan bool) (out []Vec) {
	for _, p := range l.pos {
		if k := len(out); k > 0 && (plan && samePlan(out[k-1], p.at) || out[k-1].Sub(p.at).Norm() <= BoundaryTolerance) {
			continue
		}
		out = append(out, p.at)
	}
	if len(out) < 2 {
		rd.fault(f, l.path, "the line needs two different positions or more and has %d", len(out))
	}
	return out
}

// groundDepth is how far below the lowest foot a keep-clear without from_m reaches, m: a bar that lies on the ground is
// in the way too.
const groundDepth = 1.0

// prisms makes the keep-clear and envelope prisms.
func (rd *siteReader) prisms() {
	ground := rd.ground()
	for _, f := range rd.features {
		if f.broken || f.role != roleKeepClear && f.role != roleEnvelope {
			continue
		}
		p := Prism{Name: f.name, From: ground.lo - groundDepth, To: NoLimit}
		if f.role == roleEnvelope {
			p.From = -NoLimit
		}
		from, low := rd.heightValue(f, "from_m")
		to, high := rd.heightValue(f, "to_m")
		if low {
			p.From = from
		}
		if high {
			p.To = to
		}
		regions := rd.regions(f)
		if !f.broken && !(p.From < p.To) {
			why := "from_m must be less than to_m"
			if !low {
				why = fmt.Sprintf("the lowest foot is at %g m; heights are above the datum of the site, not above the ground", ground.lo)
			}
			rd.fault(f, f.at("properties"), "the prism reaches from %g m to %g m, which is nothing: %s", p.From, p.To, why)
		}
		if f.broken {
			continue
		}
		for _, r := range regions {
			p.Polygon = r.Polygon()
			if f.role == roleEnvelope {
				rd.site.Envelope = append(rd.site.Envelope, p)
			} else {
				rd.site.KeepClear = append(rd.site.KeepClear, p)
			}
		}
	}
}

// surfaces gives the roofs their surfaces.
func (rd *siteReader) surfaces() {
	var given Surface
	if rd.opt.Surface != nil && len(rd.site.Roofs) > 0 {
		given = rd.opt.Surface(rd.site.Frame)
	}
	for i := range rd.site.Roofs {
		roof := &rd.site.Roofs[i]
		if given == nil {
			roof.Surface = OutlineSurface(roof.Regions)
			continue
		}
		roof.Surface = given
		bad := false
		for _, r := range roof.Regions {
			for _, ring := range r.Rings {
				for j := range ring {
					ring[j].Z = given.Height(ring[j].X, ring[j].Y)
					bad = bad || !(ring[j].Z >= -maxHeight && ring[j].Z <= maxHeight)
				}
			}
		}
		if bad {
			rd.issues.Add(Error, roof.Name, "", "the roof surface of the brief is beyond %g m somewhere on the outline; check its origin and its slopes", maxHeight)
		}
	}
}

// count returns how many features of the given roles the file holds, broken or not.
func (rd *siteReader) count(roles ...string) (n int) {
	for _, f := range rd.features {
		if slices.Contains(roles, f.role) {
			n++
		}
	}
	return n
}
