package geom

import (
	"math"

	"github.com/paulmach/orb"
)

// straightTurn is the turn in degrees below which two successive edges count as one straight edge: a traced or rounded
// outline often has a vertex in the middle of a straight side.
const straightTurn = 0.5

// Bearing returns the bearing of the direction (dx, dy) in degrees clockwise from north, 0 <= bearing < 360.
func Bearing(dx, dy float64) float64 {
	b := math.Atan2(dx, dy) / degree
	if b < 0 {
		b += 360
	}
	if b >= 360 {
		b = 0
	}
	return b
}

// Towards returns the unit vector (east, north) of a bearing in degrees clockwise from north, exact for multiples of 90.
func Towards(bearing float64) (dx, dy float64) {
	r := math.Mod(bearing, 360)
	if r < 0 {
		r += 360
	}
	switch r {
	case 0:
		return 0, 1
	case 90:
		return 1, 0
	case 180:
		return 0, -1
	case 270:
		return -1, 0
	}
	return math.Sincos(r * degree)
}

// LongestEdgeBearing returns the bearing of the longest straight edge of the outer rings, as a line without direction:
// degrees clockwise from north, 0 <= bearing < 180. Successive edges that turn by less than half a degree count as one.
// It is 0 if there is no edge. Of edges that are equally long to 1 part in 1e9 the first counts.
func LongestEdgeBearing(ps ...orb.Polygon) float64 {
	const clearly = 1 + 1e-9
	longest, bearing := 0.0, 0.0
	for _, p := range ps {
		if len(p) == 0 {
			continue
		}
		for _, d := range straightEdges(p[0]) {
			if l := length(d); l > longest*clearly {
				longest, bearing = l, math.Mod(Bearing(d[0], d[1]), 180)
			}
		}
	}
	return bearing
}

// straightEdges returns the edges of a ring as vectors, those that go straight on joined.
func straightEdges(ring []orb.Point) (out []orb.Point) {
	var edges []orb.Point
	for i, a := range ring {
		if d := diff(ring[(i+1)%len(ring)], a); d != (orb.Point{}) {
			edges = append(edges, d)
		}
	}
	// Start at a corner, so that no straight edge is cut by the start of the ring.
	start := 0
	for i := range edges {
		if !straightOn(edges[(i+len(edges)-1)%len(edges)], edges[i]) {
			start = i
			break
		}
	}
	for i := range edges {
		e := edges[(start+i)%len(edges)]
		if n := len(out); n > 0 && i > 0 && straightOn(out[n-1], e) {
			out[n-1] = orb.Point{out[n-1][0] + e[0], out[n-1][1] + e[1]}
			continue
		}
		out = append(out, e)
	}
	return out
}

// straightOn reports whether b goes on in the direction of a.
func straightOn(a, b orb.Point) bool {
	return math.Abs(math.Atan2(cross(a, b), dot(a, b))) < straightTurn*degree
}
