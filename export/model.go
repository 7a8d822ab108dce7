package export

import (
	"math"
	"sort"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// model is a record in the axes of the drawing, with all that the views share. Places are (u, v, z) in m.
type model struct {
	rec       *layout.Record
	marks     marks
	sum       Summary
	axes      axes
	bars      []drawnBar
	feet      []drawnFoot
	roofs     []drawnRoof
	footings  []shape
	walls     []shape
	clears    []drawnPrism
	motion    []drawnMotion
	thickest  float64   // area of the thickest bar, m2
	faint     int       // count of faint bars
	core      extent    // plan of roof, bars and feet
	low, high float64   // heights of what stands and what it carries
	levels    []float64 // heights worth naming
}

type drawnBar struct {
	a, b  geom.Vec
	area  float64
	state State
	kept  bool
	faint bool // one of the many that together hardly weigh anything
}

type drawnFoot struct {
	at      geom.Vec
	mark    string
	role    string
	support support
}

// shape is a polygon (closed), a line or a point.
type shape struct {
	name   string
	rings  [][]geom.Vec
	closed bool
}

type drawnRoof struct {
	shape
	places    []geom.Vec
	triangles []triangle
	border    [][2]int // between places; empty if there is no mesh
}

type drawnPrism struct {
	name     string
	rings    [][]geom.Vec // z is 0
	from, to float64
}

func newModel(rec *layout.Record) *model {
	m := &model{rec: rec, marks: newMarks(rec), sum: Summarise(rec)}
	m.axes = principalAxes(m.orienting())
	m.shapes()
	m.takeBars()
	m.takeFeet()
	m.measure()
	m.takeMotion()
	return m
}

// orienting returns the places that turn the drawing: the corners of the roof, or else the nodes in use, or all.
func (m *model) orienting() (ps []geom.Vec) {
	for _, r := range m.rec.Context.Roof {
		if len(r.Rings) > 0 {
			ps = append(ps, vectors(r.Rings[0])...)
		}
	}
	if len(ps) == 0 {
		for _, i := range m.marks.used {
			ps = append(ps, at(m.rec, i))
		}
	}
	if len(ps) == 0 {
		for i := range m.rec.Nodes {
			ps = append(ps, at(m.rec, i))
		}
	}
	return ps
}

func vectors(ring [][3]float64) []geom.Vec {
	out := make([]geom.Vec, len(ring))
	for i, p := range ring {
		out[i] = geom.FromArray(p)
	}
	return out
}

func (m *model) shapeOf(r layout.RecordRegion) (shape, bool) {
	s := shape{name: r.Name, closed: r.Closed}
	for _, ring := range r.Rings {
		var vs []geom.Vec
		for _, p := range vectors(ring) {
			vs = append(vs, m.axes.to(p))
		}
		if r.Closed {
			vs = open(vs)
		}
		if len(vs) == 0 || r.Closed && len(vs) < 3 {
			if len(s.rings) == 0 {
				return shape{}, false
			}
			continue
		}
		s.rings = append(s.rings, vs)
	}
	return s, len(s.rings) > 0
}

func (m *model) shapes() {
	c := m.rec.Context
	for _, r := range c.Footings {
		if s, ok := m.shapeOf(r); ok {
			m.footings = append(m.footings, s)
		}
	}
	for _, r := range c.Walls {
		if s, ok := m.shapeOf(r); ok {
			m.walls = append(m.walls, s)
		}
	}
	taken := make([]bool, len(m.rec.Nodes))
	for _, r := range c.Roof {
		if s, ok := m.shapeOf(r); ok && s.closed {
			m.roofs = append(m.roofs, m.roofOf(s, taken))
		}
	}
	for _, p := range m.rec.Candidates.KeepClear {
		d := drawnPrism{name: p.Name, from: p.FromM, to: p.ToM}
		for _, ring := range append([][][2]float64{p.Ring}, p.Holes...) {
			var vs []geom.Vec
			for _, v := range ring {
				q := m.axes.to(geom.Vec{X: v[0], Y: v[1]})
				vs = append(vs, geom.Vec{X: q.X, Y: q.Y})
			}
			if vs = open(vs); len(vs) >= 3 {
				d.rings = append(d.rings, vs)
			}
		}
		if len(d.rings) > 0 {
			m.clears = append(m.clears, d)
		}
	}
}

// onRoof is how far outside of the outline a roof node may lie in plan and still belong to it, m: nodes on the outline are
// inside or outside by rounding.
const onRoof = 1e-3

// roofOf gives a roof its surface from the roof nodes that lie on it and that no roof before took.
func (m *model) roofOf(s shape, taken []bool) drawnRoof {
	r := drawnRoof{shape: s}
	for i, n := range m.rec.Nodes {
		if n.Role != "roof" || taken[i] {
			continue
		}
		p := m.axes.to(geom.FromArray(n.XYZ))
		if inside(s.rings, p.X, p.Y) || toRings(s.rings, p) < onRoof {
			taken[i] = true
			r.places = append(r.places, p)
		}
	}
	for _, ring := range s.rings {
		for _, c := range ring {
			if !hasPlace(r.places, c) {
				r.places = append(r.places, c)
			}
		}
	}
	r.triangles, r.border = roofMesh(r.places, s.rings)
	return r
}

func hasPlace(places []geom.Vec, p geom.Vec) bool {
	for _, q := range places {
		if math.Hypot(p.X-q.X, p.Y-q.Y) < onRoof {
			return true
		}
	}
	return false
}

// toRings is the distance in plan from a place to the nearest edge of some rings.
func toRings(rings [][]geom.Vec, p geom.Vec) float64 {
	best := math.Inf(1)
	for _, ring := range rings {
		for i, a := range ring {
			b := ring[(i+1)%len(ring)]
			dx, dy := b.X-a.X, b.Y-a.Y
			t := 0.0
			if l := dx*dx + dy*dy; l > 0 {
				t = math.Max(0, math.Min(1, ((p.X-a.X)*dx+(p.Y-a.Y)*dy)/l))
			}
			best = math.Min(best, math.Hypot(p.X-a.X-t*dx, p.Y-a.Y-t*dy))
		}
	}
	return best
}

func (m *model) takeBars() {
	for _, b := range m.rec.Bars {
		m.bars = append(m.bars, drawnBar{a: m.axes.to(at(m.rec, b.Nodes[0])), b: m.axes.to(at(m.rec, b.Nodes[1])), area: b.AreaM2,
			state: extremesOf(b).state(), kept: b.Kept})
		m.thickest = math.Max(m.thickest, b.AreaM2)
	}
	m.findFaint()
}

const (
	// faintVolume is the share of the volume that the faint bars have together at most.
	faintVolume = 0.02
	// faintArea is the share of the area of the thickest bar that a faint bar has at most: a tenth of its diameter.
	faintArea = 0.01
)

// findFaint marks the thinnest bars. A layout found by an interior method can have thousands of bars that carry next to
// nothing; drawn like the others they would hide what carries the roof.
func (m *model) findFaint() {
	order := make([]int, len(m.bars))
	volume := 0.0
	for i, b := range m.bars {
		order[i] = i
		volume += b.area * b.a.Sub(b.b).Norm()
	}
	sort.SliceStable(order, func(i, j int) bool { return m.bars[order[i]].area < m.bars[order[j]].area })
	sum := 0.0
	for _, i := range order {
		b := &m.bars[i]
		sum += b.area * b.a.Sub(b.b).Norm()
		if sum > faintVolume*volume || b.area > faintArea*m.thickest {
			return
		}
		if !b.kept {
			b.faint = true
			m.faint++
		}
	}
}

// takeFeet takes the feet and wall supports of the layout; without one, all places where a foot may stand.
func (m *model) takeFeet() {
	if len(m.rec.Bars) == 0 {
		for i, n := range m.rec.Nodes {
			if n.Role == "footing" || n.Role == "wall" {
				m.feet = append(m.feet, drawnFoot{at: m.axes.to(at(m.rec, i)), role: n.Role})
			}
		}
		return
	}
	reactions := Reactions(m.rec)
	for _, i := range m.marks.used {
		if n := m.rec.Nodes[i]; held(n) && n.Role != "roof" {
			m.feet = append(m.feet, drawnFoot{m.axes.to(at(m.rec, i)), m.marks.node[i], n.Role, supportOf(m.rec, reactions, i, m.marks.node[i])})
		}
	}
}
