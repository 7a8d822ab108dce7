package export

import (
	"math"
	"sort"

	"boughwork/geom"
)

const (
	// arrowLength is the length of the longest arrow of a motion, in sizes of text.
	arrowLength = 6.0
	// mostArrows bounds the arrows of a view; the largest motions are drawn.
	mostArrows = 500
)

// collapseIn draws the motion that no bar resists: an arrow from each node that moves, a dot on the loaded ones.
func (d *drawing) collapseIn(v view) {
	c, p := d.m.rec.Collapse, d.paper
	loaded := map[int]bool{}
	for _, i := range c.Nodes {
		loaded[i] = true
	}
	type arrow struct {
		node int
		from geom.Vec
		move geom.Vec
	}
	var arrows []arrow
	most := 0.0
	for i, m := range c.Motion {
		move := d.m.axes.along(geom.FromArray(m))
		if n := move.Norm(); n >= leastMotion {
			arrows = append(arrows, arrow{i, d.m.axes.to(at(d.m.rec, i)), move})
			most = math.Max(most, n)
		}
	}
	sort.SliceStable(arrows, func(i, j int) bool { return arrows[i].move.Norm() > arrows[j].move.Norm() })
	arrows = arrows[:min(len(arrows), mostArrows)]
	for _, a := range arrows {
		from := v.at(a.from)
		to := v.at(a.from.Add(a.move.Scale(arrowLength * p.text / (v.perM * most))))
		d.c.arrow(from, to, p.text, inkColour, p.fine)
		if loaded[a.node] {
			d.c.circle(from, 0.3*p.text, `fill="`+inkColour+`"`)
		}
	}
}
