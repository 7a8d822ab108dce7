package ground

import (
	"cmp"
	"math"
	"slices"

	"boughwork/geom"
)

const (
	// pointNear is the number of nodes among which the triangle round a point load is sought.
	pointNear = 12
	// thinTriangle is the least area of such a triangle, in units of the deck spacing squared.
	thinTriangle = 1e-3
	// onTriangle is how far outside a triangle, in its barycentric coordinates, a point still counts as on its edge.
	onTriangle = 1e-9
)

// covers reports whether the plan of the deck contains a place of the site, its edge included.
func (d *deck) covers(at [2]float64) bool {
	p := pt{at[0] - d.origin.X, at[1] - d.origin.Y}
	for _, a := range d.areas {
		if a.contains(p) || a.edgeDistance(p) <= sameNode {
			return true
		}
	}
	return false
}

// loadPoint puts a force at a place of the roof on the corners of the smallest triangle of nodes around it, by its
// barycentric coordinates; what the height of the roof above the triangle adds to the moment they take up as well.
func (d *deck) loadPoint(l PointLoad, out []geom.Vec) {
	p := pt{l.At[0] - d.origin.X, l.At[1] - d.origin.Y}
	at := geom.Vec{X: p[0], Y: p[1], Z: d.surface.Height(l.At[0], l.At[1]) - d.origin.Z}
	c := d.newCarry()
	nodes, share := d.triangle(p)
	c.put(part{at, l.Force, 1}, nodes[:], share[:])
	for _, n := range nodes {
		c.weight[n] = 1
	}
	if !c.settled(d) {
		c.correct(d)
	}
	c.addTo(out)
}

// triangle returns the three nodes around a place of the plan and their shares. Beyond the outermost nodes it is the
// triangle that the place is least outside of.
func (d *deck) triangle(p pt) (nodes [3]int, share [3]float64) {
	near := d.nearestFew(p, pointNear)
	far := func(i int) float64 { return distance(p, pt{d.at[i].X, d.at[i].Y}) }
	bestOut, bestSize := math.Inf(1), math.Inf(1)
	for a := range near {
		for b := a + 1; b < len(near); b++ {
			for c := b + 1; c < len(near); c++ {
				t := [3]int{near[a], near[b], near[c]}
				s, twice := d.barycentric(t, p)
				if math.Abs(twice) < 2*thinTriangle*d.reach*d.reach {
					continue
				}
				out := math.Max(0, -min(s[0], s[1], s[2])-onTriangle)
				size := far(t[0]) + far(t[1]) + far(t[2])
				if out < bestOut || (out == bestOut && size < bestSize) {
					bestOut, bestSize, nodes, share = out, size, t, s
				}
			}
		}
	}
	if math.IsInf(bestOut, 1) {
		return [3]int{near[0], near[0], near[0]}, [3]float64{1, 0, 0}
	}
	return nodes, share
}

// nearestFew returns the n nodes nearest in plan, or all if there are fewer, the nearest first.
func (d *deck) nearestFew(p pt, n int) []int {
	far := func(i int) float64 { return distance(p, pt{d.at[i].X, d.at[i].Y}) }
	var near []int
	for k := 0; ; k++ {
		near = append(near, d.index.around(p, k)...)
		// All nodes within k cells are known by now. If the n nearest of them are that near, they are the ones.
		if len(near) < min(n, len(d.at)) {
			continue
		}
		slices.SortStableFunc(near, func(i, j int) int { return cmp.Or(cmp.Compare(far(i), far(j)), cmp.Compare(i, j)) })
		if len(near) == len(d.at) || far(near[n-1]) <= float64(k)*d.index.size {
			return near[:min(n, len(near))]
		}
	}
}

// barycentric returns the barycentric coordinates of p in a triangle of nodes, and twice its signed area.
func (d *deck) barycentric(t [3]int, p pt) ([3]float64, float64) {
	a, b, c := d.at[t[0]], d.at[t[1]], d.at[t[2]]
	twice := (b.X-a.X)*(c.Y-a.Y) - (b.Y-a.Y)*(c.X-a.X)
	u := ((b.X-p[0])*(c.Y-p[1]) - (b.Y-p[1])*(c.X-p[0])) / twice
	v := ((c.X-p[0])*(a.Y-p[1]) - (c.Y-p[1])*(a.X-p[0])) / twice
	return [3]float64{u, v, 1 - u - v}, twice
}
