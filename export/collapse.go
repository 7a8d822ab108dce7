package export

import (
	"math"
	"sort"

	"boughwork/geom"
)

const (
	// arrowShare is the length of the longest arrow of a motion as a share of the size of the drawing.
	arrowShare = 0.1
	// mostArrows bounds the arrows of a view; the largest motions are drawn.
	mostArrows = 500
)

// drawnMotion is the motion of a node, drawn from one place to another.
type drawnMotion struct {
	from, to geom.Vec
	loaded   bool
}

// takeMotion takes the motion that no bar resists: the nodes that move, the farthest first, at a scale at which it can be seen.
func (m *model) takeMotion() {
	c := m.rec.Collapse
	if c == nil {
		return
	}
	loaded := map[int]bool{}
	for _, i := range c.Nodes {
		loaded[i] = true
	}
	most := 0.0
	for i, v := range c.Motion {
		move := m.axes.along(geom.FromArray(v))
		if n := move.Norm(); n >= leastMotion {
			from := m.axes.to(at(m.rec, i))
			m.motion = append(m.motion, drawnMotion{from, move, loaded[i]})
			most = math.Max(most, n)
		}
	}
	sort.SliceStable(m.motion, func(i, j int) bool { return m.motion[i].to.Norm() > m.motion[j].to.Norm() })
	m.motion = m.motion[:min(len(m.motion), mostArrows)]
	for i, v := range m.motion {
		m.motion[i].to = v.from.Add(v.to.Scale(arrowShare * m.size() / most))
	}
}

// collapseIn draws the motion in a view: an arrow from each node, a dot on the loaded ones.
func (d *drawing) collapseIn(v view) {
	p := d.paper
	for _, a := range d.m.motion {
		from := v.at(a.from)
		d.c.arrow(from, v.at(a.to), p.text, inkColour, p.fine)
		if a.loaded {
			d.c.circle(from, 0.3*p.text, `fill="`+inkColour+`"`)
		}
	}
}
