package ground

import (
	"math"

	"boughwork/geom"
)

// loadArea puts an area load on the nodes of the deck: every piece of the roof gives its force to the node whose cell it
// lies in, then carry.settle restores the moment. Loads downwards and sideways count per square metre of plan; loads onto
// the surface act along the normal, n dA = (-zx, -zy, 1) dA of plan, pressure against it. It reports whether the pattern
// covers any of the roof.
func (d *deck) loadArea(l AreaLoad, out []geom.Vec) bool {
	ps := d.pieces(l.Pattern)
	c := d.newCarry()
	tx, ty := geom.Towards(l.Bearing)
	for _, p := range ps {
		var f geom.Vec
		switch l.Direction {
		case Down:
			f = geom.Vec{Z: -l.Pressure * p.area}
		case Normal:
			f = geom.Vec{X: p.zx, Y: p.zy, Z: -1}.Scale(l.Pressure * p.area)
		case Towards:
			f = geom.Vec{X: tx, Y: ty}.Scale(l.Pressure * p.area)
		}
		c.put(part{p.at, f, p.area}, []int{p.node}, []float64{1})
	}
	c.settle(d)
	c.addTo(out)
	return len(ps) > 0
}

// addTo adds the forces to those of other loads.
func (c *carry) addTo(out []geom.Vec) {
	for i, f := range c.force {
		out[i] = out[i].Add(f)
	}
}

// loadEdges puts a line load on the edges of outline and holes, or on those parts of them that the pattern keeps. Each
// part goes to the two nodes beside it along the edge by the lever rule, which conserves force and moment on a straight
// edge. It reports whether there is any such edge.
func (d *deck) loadEdges(l EdgeLoad, out []geom.Vec) bool {
	c := d.newCarry()
	found := false
	for i, a := range d.areas {
		for j, r := range a {
			d.loadRing(l, r, d.rings[i][j], func(p edgePart) {
				found = true
				c.put(p.part, p.node[:], p.share[:])
			})
		}
	}
	c.settle(d)
	c.addTo(out)
	return found
}

// edgePart is a short straight part of an edge with its load and the two nodes (indices into deck.nodes) that share it.
type edgePart struct {
	part
	node  [2]int
	share [2]float64
}

// loadRing cuts a ring at its vertices, its nodes and the limits of the pattern and calls yield for every part that
// carries load.
func (d *deck) loadRing(l EdgeLoad, r ring, stops []ringStop, yield func(edgePart)) {
	tx, ty := geom.Towards(l.Bearing)
	at := 0.0
	for i, a := range r {
		b := r[(i+1)%len(r)]
		length := distance(a, b)
		if length == 0 {
			continue
		}
		q := geom.Vec{X: tx, Y: ty}.Scale(l.Force)
		if l.Direction == Down {
			q = geom.Vec{Z: -l.Force}
		} else if l.Windward {
			// The material lies on the left of an edge, so the outward normal is on its right.
			facing := -(tx*(b[1]-a[1]) - ty*(b[0]-a[0])) / length
			q = q.Scale(math.Max(0, facing))
		}
		if q == (geom.Vec{}) {
			at += length
			continue
		}
		for _, s := range d.stretches(l.Pattern, a, b) {
			for _, s := range d.split(s, at, length, stops) {
				yield(d.edgePart(s, a, b, at, length, q, stops, r))
			}
		}
		at += length
	}
}

// split cuts a stretch of an edge at the nodes on it, and into short parts where the roof is not plane along it.
func (d *deck) split(s stretch, start, length float64, stops []ringStop) []stretch {
	cuts := []float64{s.from}
	for _, n := range stops {
		if t := (n.along - start) / length; t > s.from && t < s.to {
			cuts = append(cuts, t)
		}
	}
	cuts = append(cuts, s.to)
	var out []stretch
	for i := 0; i+1 < len(cuts); i++ {
		for k := range edgeParts {
			w := (cuts[i+1] - cuts[i]) / edgeParts
			out = append(out, stretch{cuts[i] + w*float64(k), cuts[i] + w*float64(k+1)})
		}
	}
	return out
}

// edgeParts is the number of parts into which the edge between two nodes is cut, so that a line load follows a roof that
// is not plane.
const edgeParts = 4

// edgePart returns the loaded part s of the edge a b with the two nodes beside it.
func (d *deck) edgePart(s stretch, a, b pt, start, length float64, q geom.Vec, stops []ringStop, r ring) edgePart {
	m := (s.from + s.to) / 2
	p := edgePart{part: part{weight: (s.to - s.from) * length}}
	p.at = geom.Vec{X: a[0] + m*(b[0]-a[0]), Y: a[1] + m*(b[1]-a[1])}
	p.at.Z = d.surface.Height(p.at.X+d.origin.X, p.at.Y+d.origin.Y) - d.origin.Z
	p.force = q.Scale(p.weight)
	if len(stops) < 2 {
		n := d.nearest(pt{p.at.X, p.at.Y})
		p.node, p.share = [2]int{n, n}, [2]float64{1, 0}
		return p
	}
	along := start + m*length
	next := 0
	for next < len(stops) && stops[next].along <= along {
		next++
	}
	before := stops[(next+len(stops)-1)%len(stops)].node
	after := stops[next%len(stops)].node
	p.node = [2]int{before, after}
	u, v := d.at[before], d.at[after]
	dx, dy := v.X-u.X, v.Y-u.Y
	t := math.Max(0, math.Min(1, ((p.at.X-u.X)*dx+(p.at.Y-u.Y)*dy)/(dx*dx+dy*dy)))
	p.share = [2]float64{1 - t, t}
	return p
}

// nearest returns the node nearest in plan.
func (d *deck) nearest(p pt) int {
	best, found := math.Inf(1), 0
	for i, v := range d.at {
		if r := distance(p, pt{v.X, v.Y}); r < best {
			best, found = r, i
		}
	}
	return found
}
