package geom

import "slices"

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

// count returns how many features of the given roles the file holds, broken or not.
func (rd *siteReader) count(roles ...string) (n int) {
	for _, f := range rd.features {
		if slices.Contains(roles, f.role) {
			n++
		}
	}
	return n
}
