package export

import (
	"fmt"

	"boughwork/geom"
)

// vecNorth points north in local metres.
var vecNorth = geom.Vec{Y: 1}

// drawAxonometric draws the view from above one corner: the ground with the shadow of the roof, bars from far to near, the
// roof as a veil over them.
func (d *drawing) drawAxonometric() {
	v := d.axo
	d.axonometricGround(v)
	thin := d.style
	thin.widest *= axonometricWidth(d.place)
	thin.drawBars(d.c, d.m, v, d.paper.hair)
	d.skins(v, 0.2)
	d.collapseIn(v)
	d.viewTitle(v, d.place.axo, "Axonometric view", fmt.Sprintf("from the %s, %s along the front and up, %s in depth",
		d.side(-0.5, -1), ratio(d.place.axoScale), ratio(2*d.place.axoScale)), titleLine)
}

// axonometricWidth reduces the widths of bars where the view is smaller than the plan, though less than in proportion.
func axonometricWidth(a arrangement) float64 {
	if a.axoScale <= a.scale {
		return 1
	}
	return 0.3 + 0.7*a.scale/a.axoScale
}

// axonometricGround draws zones, keep-clears and walls on the ground, and the outline of the roof straight below it.
func (d *drawing) axonometricGround(v view) {
	p := d.paper
	d.c.openClipped(v.window.grown(p.heavy), `stroke-linejoin="round"`)
	e := d.m.core.grown(marginShare * d.m.size())
	ground := box{e.x0, e.y0, e.x1, e.y1} // in u and v
	for _, r := range d.m.roofs {
		d.c.path(d.flatRings(v, r.rings, d.m.low), true, fmt.Sprintf(`fill="#000" fill-opacity="0.05" fill-rule="evenodd" %s`, stroke(lightColour, p.fine)))
	}
	for _, k := range d.m.clears {
		var base [][]geom.Vec
		for _, ring := range k.rings {
			if clipped := clipRing(planPts(ring), ground); clipped != nil {
				base = append(base, planVecs(clipped))
			}
		}
		z := max(k.from, d.m.low)
		rings := d.flatRings(v, base, z)
		d.c.path(hatch(rings, 1.5*p.hatchStep), false, stroke(lightColour, p.hair))
		d.c.path(rings, true, stroke(greyColour, p.hair)+dashed(4*p.medium, 3*p.medium))
		if k.to <= d.m.high {
			d.c.path(d.flatRings(v, base, k.to), true, stroke(greyColour, p.hair)+dashed(4*p.medium, 3*p.medium))
		}
	}
	for _, s := range d.m.footings {
		d.zone(v, s)
	}
	for _, s := range d.m.walls {
		for _, ring := range s.rings {
			d.c.path([][]pt{v.all(ring)}, s.closed, stroke(greyColour, p.heavy))
		}
	}
	d.c.close()
}

func planPts(ring []geom.Vec) []pt {
	out := make([]pt, len(ring))
	for i, q := range ring {
		out[i] = pt{q.X, q.Y}
	}
	return out
}

func planVecs(ring []pt) []geom.Vec {
	out := make([]geom.Vec, len(ring))
	for i, q := range ring {
		out[i] = geom.Vec{X: q.x, Y: q.y}
	}
	return out
}
