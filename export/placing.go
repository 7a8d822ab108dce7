package export

import (
	"math"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// vec returns a place in local metres in the coordinates of the file, height with it.
func (p placer) vec(v geom.Vec) geom.Vec {
	x, y := p.plan(v.X, v.Y)
	return geom.Vec{X: x, Y: y, Z: v.Z}
}

// flatRing returns a ring of a prism in the coordinates of the file.
func (p placer) flatRing(ring [][2]float64) []geom.Vec {
	out := make([]geom.Vec, len(ring))
	for i, v := range ring {
		out[i] = p.vec(geom.Vec{X: v[0], Y: v[1]})
	}
	return out
}

// region returns a region of the context as a polygon, a line or a point; false for one that is empty.
func (p placer) region(r layout.RecordRegion) (geometry, bool) {
	if len(r.Rings) == 0 || len(r.Rings[0]) == 0 {
		return geometry{}, false
	}
	switch {
	case r.Closed:
		rings := make([][]geom.Vec, len(r.Rings))
		for i, ring := range r.Rings {
			for _, v := range ring {
				rings[i] = append(rings[i], p.vec(geom.FromArray(v)))
			}
		}
		return p.polygon(rings, false)
	case len(r.Rings[0]) == 1:
		return p.point(geom.FromArray(r.Rings[0][0])), true
	}
	var line []geom.Vec
	for _, v := range r.Rings[0] {
		line = append(line, geom.FromArray(v))
	}
	return p.line(line), true
}

// point is a place in local metres as a GeoJSON point.
func (p placer) point(v geom.Vec) geometry {
	return geometry{"Point", p.position(p.wrap(p.vec(v)), false)}
}

// line is a line in local metres, in two parts where it crosses the antimeridian.
func (p placer) line(vs []geom.Vec) geometry {
	var parts [][]position
	var part []position
	for i, v := range vs {
		v = p.vec(v)
		if i > 0 {
			if u := p.vec(vs[i-1]); p.geographic && p.beyond(u) != p.beyond(v) {
				c := cutPoint(u, v, p.antimeridian())
				part = append(part, p.position(p.side(c, p.beyond(u)), false))
				parts = append(parts, part)
				part = []position{p.position(p.side(c, p.beyond(v)), false)}
			}
		}
		part = append(part, p.position(p.wrap(v), false))
	}
	parts = append(parts, part)
	if len(parts) == 1 {
		return geometry{"LineString", parts[0]}
	}
	return geometry{"MultiLineString", parts}
}

// polygon is a polygon (the first ring is the outside) in the coordinates of the file, in parts where it crosses the
// antimeridian; false if no ring has three corners.
func (p placer) polygon(rings [][]geom.Vec, flat bool) (geometry, bool) {
	var clean [][]geom.Vec
	for i, ring := range rings {
		ring = open(ring)
		if len(ring) < 3 {
			if i == 0 {
				return geometry{}, false
			}
			continue
		}
		clean = append(clean, directed(ring, i > 0))
	}
	if len(clean) == 0 {
		return geometry{}, false
	}
	parts := [][][]geom.Vec{clean}
	if p.geographic && p.crosses(clean[0]) {
		parts = append(cutPolygon(clean, p.antimeridian(), 1), cutPolygon(clean, p.antimeridian(), -1)...)
	}
	var out [][][]position
	for _, part := range parts {
		var polygon [][]position
		beyond := p.mostlyBeyond(part[0])
		for _, ring := range part {
			var line []position
			for _, v := range append(ring[:len(ring):len(ring)], ring[0]) {
				line = append(line, p.position(p.side(v, beyond), flat))
			}
			polygon = append(polygon, line)
		}
		out = append(out, polygon)
	}
	if len(out) == 1 {
		return geometry{"Polygon", out[0]}, true
	}
	return geometry{"MultiPolygon", out}, true
}

// open takes away the repeated last corner of a ring.
func open(ring []geom.Vec) []geom.Vec {
	for len(ring) > 1 && ring[0] == ring[len(ring)-1] {
		ring = ring[:len(ring)-1]
	}
	return ring
}

// directed returns a ring anticlockwise, or clockwise for a hole.
func directed(ring []geom.Vec, hole bool) []geom.Vec {
	if (ringArea(ring) < 0) == hole {
		return ring
	}
	out := make([]geom.Vec, len(ring))
	for i, v := range ring {
		out[len(ring)-1-i] = v
	}
	return out
}

// ringArea is the signed area of an open ring in plan, positive if anticlockwise.
func ringArea(ring []geom.Vec) (area float64) {
	o := ring[0]
	for i, a := range ring {
		b := ring[(i+1)%len(ring)]
		area += ((a.X-o.X)*(b.Y-o.Y) - (a.Y-o.Y)*(b.X-o.X)) / 2
	}
	return area
}

// antimeridian is the one of 180 and -180 degrees that is nearer to the origin.
func (p placer) antimeridian() float64 { return math.Copysign(180, p.frame.Lon) }

// beyond reports whether a longitude that continues that of the origin lies across the antimeridian.
func (p placer) beyond(v geom.Vec) bool { return math.Abs(v.X) > 180 }

func (p placer) crosses(ring []geom.Vec) bool {
	n := 0
	for _, v := range ring {
		if p.beyond(v) {
			n++
		}
	}
	return n > 0 && n < len(ring)
}

// mostlyBeyond tells on which side of the antimeridian a part lies that does not cross it.
func (p placer) mostlyBeyond(ring []geom.Vec) bool {
	if !p.geographic {
		return false
	}
	for _, v := range ring {
		if d := math.Abs(v.X) - 180; d != 0 {
			return d > 0
		}
	}
	return false
}

// side brings a longitude into -180 to 180, knowing on which side of the antimeridian its part lies.
func (p placer) side(v geom.Vec, beyond bool) geom.Vec {
	if p.geographic && beyond {
		v.X -= 2 * p.antimeridian()
	}
	return v
}

func (p placer) wrap(v geom.Vec) geom.Vec { return p.side(v, p.geographic && p.beyond(v)) }
