package geom

import "fmt"

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
			rd.roofAt = append(rd.roofAt, f.at("geometry"))
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
		rd.footAt = append(rd.footAt, f.at("geometry"))
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
		rd.wallAt = append(rd.wallAt, f.at("geometry"))
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
			rd.issues.Add(Error, roof.Name, rd.roofAt[i], "the roof surface of the brief is beyond %g m somewhere on the outline; check its origin and its slopes", maxHeight)
		}
	}
}
