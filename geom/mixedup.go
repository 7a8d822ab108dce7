package geom

import (
	"math"

	"github.com/paulmach/orb"
)

// Whether longitude and latitude are mixed up cannot always be told. It can where a latitude is out of range
// (rangeFault), where one feature is far from the roofs and near them when exchanged (reach), and by the corners of the
// roofs: a degree of longitude is shorter than one of latitude by the cosine of the latitude, so a building with right
// angles that is turned against north loses them when it is drawn in the wrong part of the world. A building whose
// sides run along north keeps them and passes unnoticed.

// Angles in degrees for the test by corners.
const (
	// squareCorner is how far a corner may be from a right angle to count as one: a side of 10 m drawn to 5 cm.
	squareCorner = 0.5
	// skewCorner is how far off all corners must be as read: well beyond what drawing to 10 cm makes of a right angle.
	skewCorner = 3.0
	// fewestCorners is how many corners are evidence.
	fewestCorners = 4
)

// mixedUp reports roofs whose corners are all right angles when longitude and latitude are exchanged, and none as read.
func (rd *siteReader) mixedUp() {
	if rd.opt.Metric {
		return
	}
	var first *feature
	var read, exchanged []float64
	for _, f := range rd.features {
		if f.broken || f.role != roleRoof {
			continue
		}
		for _, p := range f.polygons {
			if len(p.rings) == 0 || !exchangeable(p.rings[0]) {
				return
			}
			r, e := cornersBothWays(p.rings[0])
			read, exchanged = append(read, r...), append(exchanged, e...)
		}
		if first == nil {
			first = f
		}
	}
	if len(exchanged) < fewestCorners || len(read) < fewestCorners {
		return
	}
	for _, e := range exchanged {
		if !(e <= squareCorner) {
			return
		}
	}
	for _, r := range read {
		if !(r >= skewCorner) {
			return
		}
	}
	rd.fault(first, first.at("geometry.coordinates"), "longitude and latitude seem mixed up: the corners of the roof are right angles when they are exchanged, and %.0f degrees off as read; write longitude first", read[0])
}

// exchangeable reports whether positions are still on the globe with longitude and latitude exchanged.
func exchangeable(l rawLine) bool {
	for _, p := range l.pos {
		if !onGlobe(p.y, p.x) {
			return false
		}
	}
	return true
}

// cornersBothWays returns how far the corners of a ring are from right angles as read and exchanged, degrees.
func cornersBothWays(l rawLine) (read, exchanged []float64) {
	if len(l.pos) == 0 {
		return nil, nil
	}
	p0 := l.pos[0]
	asRead, other := NewFrame(p0.x, p0.y), NewFrame(p0.y, p0.x)
	var a, b []orb.Point
	for _, p := range l.pos {
		x, y := asRead.ToLocal(p.x, p.y)
		a = append(a, orb.Point{x, y})
		x, y = other.ToLocal(p.y, p.x)
		b = append(b, orb.Point{x, y})
	}
	return cornerErrors(a), cornerErrors(b)
}

// cornerErrors returns by how many degrees each corner of a ring misses a right angle; where it goes straight on there
// is no corner.
func cornerErrors(ring []orb.Point) (out []float64) {
	edges := straightEdges(ring)
	for i, e := range edges {
		next := edges[(i+1)%len(edges)]
		turn := math.Abs(math.Atan2(cross(e, next), dot(e, next))) / degree
		out = append(out, math.Abs(turn-90))
	}
	return out
}

// nearSwapped reports whether all positions of a feature are near the origin with longitude and latitude exchanged.
func (rd *siteReader) nearSwapped(f *feature) bool {
	near := true
	f.shapes(func(l rawLine) {
		for _, p := range l.pos {
			if !onGlobe(p.y, p.x) {
				near = false
				return
			}
			x, y := rd.site.Frame.ToLocal(p.y, p.x)
			near = near && math.Hypot(x, y) <= maxReach
		}
	})
	return near
}
