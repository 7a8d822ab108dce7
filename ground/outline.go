package ground

import (
	"cmp"
	"math"
	"slices"
)

const (
	// cornerAngle is the turn from which a vertex of the outline is a corner with a node of its own, radians
	// (20 degrees). A polygon of 18 sides or more is thus a circle, with nodes evenly along it.
	cornerAngle = math.Pi / 9
	// kinkLength is the share of the spacing from which the two edges beside a gentler turn make it a corner all the same.
	kinkLength = 0.75
	// cornersApart is the share of the spacing below which the sharper of two corners stands for both.
	cornersApart = 0.2
	// smallHole is the perimeter, as a share of the spacing, up to which a hole has no nodes: the deck spans past it.
	smallHole = 1.0
	// roundNodes is the least number of nodes on a ring without corners.
	roundNodes = 4
)

// stop is a node on a ring: its place and how far along the ring it lies, metres from the first vertex.
type stop struct {
	along float64
	at    pt
}

// outlineStops returns the places of the nodes along a ring, in order: corners, and points between them at most spacing
// apart. On an edge along the grid the points are where the grid lines cross it.
func outlineStops(r ring, spacing float64, hole bool, grid [2]axis) []stop {
	if hole && r.length() <= smallHole*spacing {
		return nil
	}
	along := make([]float64, len(r)+1)
	for i, p := range r {
		along[i+1] = along[i] + distance(p, r[(i+1)%len(r)])
	}
	cs := corners(r, along, spacing)
	if len(cs) == 0 {
		start := 0
		for i, p := range r {
			if p[0] > r[start][0] {
				start = i
			}
		}
		n := max(roundNodes, panels(along[len(r)], spacing))
		return walk(r, along, along[start], evenly(0, along[len(r)], n)[:n])
	}
	var out []stop
	for j, c := range cs {
		d := cs[(j+1)%len(cs)]
		l := along[d] - along[c]
		if l <= 0 {
			l += along[len(r)]
		}
		n := panels(l, spacing)
		if len(cs) < 3 {
			n = max(n, roundNodes/len(cs))
		}
		offsets := evenly(0, l, n)[:n]
		if chord := distance(r[c], r[d]); len(cs) >= 3 && l-chord <= straightSag*l {
			if g := gridOffsets(r[c], r[d], spacing, grid); g != nil {
				offsets = g
			}
		}
		out = append(out, walk(r, along, along[c], offsets)...)
	}
	slices.SortFunc(out, func(a, b stop) int { return cmp.Compare(a.along, b.along) })
	return out
}

// straightSag is the relative difference of arc and chord below which a chain of edges is one straight edge.
const straightSag = 1e-6

// corners returns the vertices that are corners, ascending: the sharpest first come, others too close to them drop out.
func corners(r ring, along []float64, spacing float64) []int {
	n := len(r)
	total := along[n]
	type corner struct {
		i    int
		turn float64
	}
	var cs []corner
	for i, p := range r {
		a, c := r[(i+n-1)%n], r[(i+1)%n]
		t := math.Abs(turn(a, p, c))
		long := math.Min(distance(a, p), distance(p, c)) >= kinkLength*spacing
		if t >= cornerAngle || (t > straightAngle && long) {
			cs = append(cs, corner{i, t})
		}
	}
	slices.SortStableFunc(cs, func(a, b corner) int { return cmp.Compare(b.turn, a.turn) })
	var out []int
	for _, c := range cs {
		near := func(o int) bool {
			d := math.Abs(along[o] - along[c.i])
			return math.Min(d, total-d) < cornersApart*spacing
		}
		if !slices.ContainsFunc(out, near) {
			out = append(out, c.i)
		}
	}
	slices.Sort(out)
	return out
}

// gridOffsets returns how far from a the grid lines cross the edge a b, beginning with 0 for a itself; nil if the edge
// does not run along the grid or the lines lie too far apart on it.
func gridOffsets(a, b pt, spacing float64, grid [2]axis) []float64 {
	for k := range 2 {
		l := math.Abs(b[k] - a[k])
		if math.Abs(b[1-k]-a[1-k]) > alongGrid*l {
			continue
		}
		out := []float64{0}
		for _, v := range grid[k].roof {
			t := (v - a[k]) / (b[k] - a[k])
			if t*l >= keepApart*spacing && (1-t)*l >= keepApart*spacing {
				out = append(out, t*distance(a, b))
			}
		}
		slices.Sort(out)
		for i, o := range out {
			next := distance(a, b)
			if i+1 < len(out) {
				next = out[i+1]
			}
			if next-o > spacing*(1+fitSlack) {
				return nil
			}
		}
		return out
	}
	return nil
}

// walk returns the places on the ring at the offsets from a start, both measured along it. An offset that falls on a
// vertex, or next to it, gives exactly that vertex.
func walk(r ring, along []float64, start float64, offsets []float64) []stop {
	total := along[len(r)]
	out := make([]stop, 0, len(offsets))
	for _, o := range offsets {
		s := math.Mod(start+o, total)
		i := 0
		for i+1 < len(r) && along[i+1] <= s {
			i++
		}
		p, q := r[i], r[(i+1)%len(r)]
		switch l := along[i+1] - along[i]; {
		case s-along[i] < sameNode:
			out = append(out, stop{along[i], p})
		case along[i+1]-s < sameNode:
			out = append(out, stop{math.Mod(along[i+1], total), q})
		default:
			t := (s - along[i]) / l
			out = append(out, stop{s, pt{p[0] + t*(q[0]-p[0]), p[1] + t*(q[1]-p[1])}})
		}
	}
	return out
}
