package geom

import (
	"fmt"
	"slices"

	"github.com/paulmach/orb"
)

// maxPositions bounds the positions of one polygon: enough for any outline, and few enough to compare them in pairs.
const maxPositions = 5000

// planRing is a ring in local metres without its closing position and without repeated ones.
type planRing struct {
	path string
	at   []Vec
	from []int // index of each position in the file
}

// place returns the path of position i.
func (r planRing) place(i int) string { return fmt.Sprintf("%s[%d]", r.path, r.from[i]) }

// points returns the plan of the ring.
func (r planRing) points() []orb.Point {
	out := make([]orb.Point, len(r.at))
	for i, v := range r.at {
		out[i] = orb.Point{v.X, v.Y}
	}
	return out
}

// regions returns the polygons of a feature as regions, or reports what is wrong with them.
func (rd *siteReader) regions(f *feature) (out []Region) {
	for _, p := range f.polygons {
		if r, ok := rd.region(f, p); ok {
			out = append(out, r)
		}
	}
	return out
}

// region checks one polygon and orients its rings.
func (rd *siteReader) region(f *feature, p rawPolygon) (Region, bool) {
	count := 0
	for _, raw := range p.rings {
		count += len(raw.pos)
	}
	if count > maxPositions {
		rd.fault(f, p.rings[0].path, "the polygon has %d positions, more than %d; simplify it", count, maxPositions)
		return Region{}, false
	}
	var rings []planRing
	for _, raw := range p.rings {
		if r, ok := rd.ring(f, raw); ok {
			rings = append(rings, r)
		}
	}
	if len(rings) < len(p.rings) || len(rings) == 0 || !rd.simple(f, rings) || !rd.nested(f, rings) {
		return Region{}, false
	}
	var out Region
	for i, r := range rings {
		if a, _, _ := Moments(r.points()); (a > 0) != (i == 0) {
			slices.Reverse(r.at)
		}
		out.Rings = append(out.Rings, r.at)
	}
	return out, true
}

// ring checks that a ring is closed and has three places or more.
func (rd *siteReader) ring(f *feature, raw rawLine) (planRing, bool) {
	n := len(raw.pos)
	if n < 4 {
		rd.fault(f, raw.path, "a ring needs four positions or more, the last equal to the first, and has %d", n)
		return planRing{}, false
	}
	last := fmt.Sprintf("%s[%d]", raw.path, n-1)
	first, end := raw.pos[0], raw.pos[n-1]
	if first.y != end.y || first.x != end.x && (rd.opt.Metric || wrapDegrees(first.x-end.x) != 0) {
		rd.fault(f, last, "the ring is not closed: it ends at (%g, %g) and begins at (%g, %g); repeat the first position at the end", end.x, end.y, first.x, first.y)
		return planRing{}, false
	}
	if first.z != end.z {
		rd.issues.Add(Warning, f.name, last, "the ring ends at a height of %g m and begins at %g m; the first height is used", end.z, first.z)
	}
	r := planRing{path: raw.path}
	for i, p := range raw.pos[:n-1] {
		if k := len(r.at); k > 0 && samePlan(r.at[k-1], p.at) {
			continue
		}
		r.at, r.from = append(r.at, p.at), append(r.from, i)
	}
	for k := len(r.at); k > 1 && samePlan(r.at[0], r.at[k-1]); k-- {
		r.at, r.from = r.at[:k-1], r.from[:k-1]
	}
	if len(r.at) < 3 {
		rd.fault(f, raw.path, "the ring has only %d different places on the plan and encloses nothing; draw it with three corners or more", len(r.at))
		return planRing{}, false
	}
	return r, true
}

// samePlan reports whether two positions are one place on the plan.
func samePlan(a, b Vec) bool {
	return length(orb.Point{a.X - b.X, a.Y - b.Y}) <= BoundaryTolerance
}

// simple reports rings that cross or touch themselves or cross each other.
func (rd *siteReader) simple(f *feature, rings []planRing) bool {
	plan := make([][]orb.Point, len(rings))
	for i, r := range rings {
		plan[i] = r.points()
	}
	found := clashes(plan)
	for _, c := range found {
		p, q := rings[c.first.ring], rings[c.second.ring]
		where := rd.inWords(c.at)
		path, other := p.place(c.first.i), q.place(c.second.i)
		switch {
		case c.first.ring != c.second.ring:
			rd.fault(f, other, "the edge from here meets the edge from %s at %s; keep holes inside the outer ring and apart from each other", path, where)
		case c.how == overlap:
			rd.fault(f, path, "the ring runs back along itself: the edges from here and from %s share a stretch at %s; remove the spike", other, where)
		case c.how == touch:
			rd.fault(f, path, "the ring touches itself: the edges from here and from %s meet at %s; split it into separate polygons or a hole", other, where)
		default:
			rd.fault(f, path, "the ring crosses itself: the edges from here and from %s cross at %s; put its positions in order around the outline", other, where)
		}
	}
	return len(found) == 0
}

// nested reports holes outside the outer ring or inside each other.
func (rd *siteReader) nested(f *feature, rings []planRing) bool {
	closed := make([]orb.Polygon, len(rings))
	for i, r := range rings {
		pts := r.points()
		closed[i] = orb.Polygon{append(pts, pts[0])}
	}
	for i := 1; i < len(closed); i++ {
		if !within(closed[i], closed[0]) {
			rd.fault(f, rings[i].path, "the hole is not inside the outer ring; move it, or make it a polygon of its own")
			return false
		}
		for j := 1; j < i; j++ {
			if overlapping(closed[i], closed[j], BoundaryTolerance) {
				rd.fault(f, rings[i].path, "the hole overlaps the hole at %s; join them into one", rings[j].path)
				return false
			}
		}
	}
	return true
}

// inWords writes a place in local metres in the coordinates of the file.
func (rd *siteReader) inWords(at orb.Point) string {
	x, y := rd.site.Frame.ToLonLat(at[0], at[1])
	if rd.opt.Metric {
		return fmt.Sprintf("(%.3f, %.3f)", x, y)
	}
	return fmt.Sprintf("(%.8f, %.8f)", x, y)
}
