package export

import (
	"fmt"
	"math"

	"boughwork/geom"
)

// drawPlan draws the plan with dimensions, north, scale and the marks of the feet.
func (d *drawing) drawPlan() {
	d.planSite()
	d.style.drawBars(d.c, d.m, d.plan, d.paper.hair)
	d.planOutlines()
	d.collapseIn(d.plan)
	d.planFeet()
	d.planDimensions()
	d.viewTitle(d.plan, d.place.plan, "Plan", ratio(d.place.scale), planTitleLine)
	d.scaleBar()
	d.northArrow()
	around := d.around()
	d.footMarks(&around)
	around.window = d.plan.window
	d.siteLabels(around)
}

// planSite draws what stands on the site, the roof over it.
func (d *drawing) planSite() {
	p, v := d.paper, d.plan
	d.c.openClipped(v.window, `stroke-linejoin="round"`)
	for _, s := range d.m.footings {
		d.zone(v, s)
	}
	for _, k := range d.m.clears {
		rings := d.flatRings(v, k.rings, 0)
		d.c.path(hatch(clipRings(rings, v.window), p.hatchStep), false, stroke(lightColour, p.hair))
		d.c.path(rings, true, stroke(greyColour, p.fine)+dashed(4*p.medium, 3*p.medium))
	}
	for _, s := range d.m.walls {
		for _, ring := range s.rings {
			d.c.path([][]pt{v.all(ring)}, s.closed, stroke(greyColour, p.heavy*1.4))
		}
	}
	for _, r := range d.m.roofs {
		rings := make([][]pt, len(r.rings))
		for i, ring := range r.rings {
			rings[i] = v.all(ring)
		}
		d.c.path(rings, true, fmt.Sprintf(`fill="%s" fill-opacity="0.13" fill-rule="evenodd"`, roofColour))
	}
	d.c.close()
}

// planOutlines draws the edges of the roof.
func (d *drawing) planOutlines() {
	d.c.openClipped(d.plan.window, `stroke-linejoin="round"`)
	for _, r := range d.m.roofs {
		for _, ring := range r.rings {
			d.c.path([][]pt{d.plan.all(ring)}, true, stroke(inkColour, d.paper.medium))
		}
	}
	d.c.close()
}

// zone draws a footing zone: an area, a line or a point.
func (d *drawing) zone(v view, s shape) {
	p := d.paper
	switch {
	case s.closed:
		rings := make([][]pt, len(s.rings))
		for i, ring := range s.rings {
			rings[i] = v.all(ring)
		}
		d.c.path(rings, true, fmt.Sprintf(`fill="%s" fill-rule="evenodd" %s`, footingColour, stroke(footingLine, p.fine)))
	case len(s.rings[0]) > 1:
		d.c.path([][]pt{v.all(s.rings[0])}, false, stroke(footingColour, 3*p.heavy))
		d.c.path([][]pt{v.all(s.rings[0])}, false, stroke(footingLine, p.fine))
	default:
		at := v.at(s.rings[0][0])
		r := 1.1 * p.text
		d.c.rect(box{at.x - r, at.y - r, at.x + r, at.y + r}, fmt.Sprintf(`fill="%s" %s`, footingColour, stroke(footingLine, p.fine)))
	}
}

// flatRings brings the rings of a prism at a height to the sheet.
func (d *drawing) flatRings(v view, rings [][]geom.Vec, z float64) [][]pt {
	out := make([][]pt, len(rings))
	for i, ring := range rings {
		for _, p := range ring {
			p.Z = z
			out[i] = append(out[i], v.at(p))
		}
	}
	return out
}

// footSize is half the side of the mark of a foot.
func (d *drawing) footSize() float64 { return math.Max(0.4*d.paper.small, 0.35*d.style.widest) }

func (d *drawing) planFeet() {
	r := d.footSize()
	for _, f := range d.m.feet {
		at := d.plan.at(f.at)
		if f.mark == "" { // a place where a foot may stand
			d.c.circle(at, 0.35*r, `fill="`+footingLine+`"`)
			continue
		}
		d.c.rect(box{at.x - r, at.y - r, at.x + r, at.y + r}, fmt.Sprintf(`fill="%s" %s`, paperColour, stroke(inkColour, d.paper.medium)))
		d.c.circle(at, 0.45*r, `fill="`+inkColour+`"`)
	}
}

// around is what the words in the plan take heed of.
func (d *drawing) around() surroundings {
	r := d.footSize()
	s := surroundings{window: d.plan.window.grown(d.paper.text)}
	for _, f := range d.m.feet {
		if f.mark != "" {
			at := d.plan.at(f.at)
			s.obstacles = append(s.obstacles, box{at.x - r, at.y - r, at.x + r, at.y + r})
		}
	}
	for _, b := range d.m.bars {
		if !b.faint {
			s.lines = append(s.lines, [2]pt{d.plan.at(b.a), d.plan.at(b.b)})
		}
	}
	return s
}

// footMarks writes the mark of each foot with the larger of its largest reactions down and up.
func (d *drawing) footMarks(around *surroundings) {
	w := writing{size: d.paper.small, colour: inkColour, halo: true}
	for _, f := range d.m.feet {
		if f.mark == "" {
			continue
		}
		at := d.plan.at(f.at)
		if !d.c.label(at, f.mark+"  "+verticalReaction(f.support), w, around, d.paper.hair) && !d.c.label(at, f.mark, w, around, d.paper.hair) {
			d.unnamed++
		}
	}
}

// verticalReaction writes the largest vertical force on the ground, uplift with a minus.
func verticalReaction(s support) string {
	if s.uplift.KN > s.down.KN {
		return "−" + figures(s.uplift.KN, 3) + " kN"
	}
	return figures(s.down.KN, 3) + " kN"
}

// siteLabels names zones, keep-clears and walls where there is room.
func (d *drawing) siteLabels(around surroundings) {
	w := writing{size: d.paper.small, colour: greyColour, halo: true}
	for _, k := range d.m.clears {
		name := fmt.Sprintf("%s: clear %s to %s m", named(k.name, "Keep clear"), short(k.from, 2), short(k.to, 2))
		d.nameRing(d.flatRings(d.plan, k.rings[:1], 0)[0], name, w, around)
	}
	for _, s := range d.m.walls {
		if s.name != "" {
			d.nameRing(d.plan.all(s.rings[0]), s.name, w, around)
		}
	}
	w.colour = footingLine
	for _, s := range d.m.footings {
		if s.name != "" {
			d.nameRing(d.plan.all(s.rings[0]), s.name, w, around)
		}
	}
}

func named(name, other string) string {
	if name == "" {
		return other
	}
	return name
}

// strayed is what a name outside its ring costs, in lines that it would cover inside.
const strayed = 25

// inShape reports whether a place on the sheet lies in a ring.
func inShape(ring []pt, at pt) bool { return inRing(planVecs(ring), at.x, at.y) }

// nameRing writes a name in or at a ring: at its middle, its corners or the middles of its edges that show, wherever it
// covers the fewest lines.
func (d *drawing) nameRing(ring []pt, name string, w writing, around surroundings) {
	shown := ring
	if len(ring) >= 3 {
		if shown = clipRing(ring, around.window); shown == nil {
			return
		}
	}
	var middle pt
	for _, q := range shown {
		middle.x += q.x / float64(len(shown))
		middle.y += q.y / float64(len(shown))
	}
	places := []pt{middle}
	for i, q := range shown {
		r := shown[(i+1)%len(shown)]
		places = append(places, q, pt{(q.x + r.x) / 2, (q.y + r.y) / 2}, pt{(q.x + middle.x) / 2, (q.y + middle.y) / 2})
	}
	best, at, anchor := -1, pt{}, ""
	for _, q := range places {
		for _, w.anchor = range []string{"middle", "start", "end"} {
			for _, shift := range []float64{0.3, 1.2, -0.6} {
				q := pt{q.x, q.y + shift*w.size}
				b := textBox(q, name, w).grown(0.15 * w.size)
				if !around.allowed(d.c, b) {
					continue
				}
				n := around.covered(b)
				if len(shown) >= 3 && !inShape(shown, pt{(b.x0 + b.x1) / 2, (b.y0 + b.y1) / 2}) {
					n += strayed
				}
				if best < 0 || n < best {
					best, at, anchor = n, q, w.anchor
				}
			}
		}
	}
	if best >= 0 {
		w.anchor = anchor
		d.c.text(at, name, w)
	}
}

// planDimensions measures the roof (or what there is) over all, and the lines of the feet where they are few.
func (d *drawing) planDimensions() {
	p, v, e := d.paper, d.plan, d.m.core
	x := func(u float64) float64 { return v.origin.x + v.perM*u }
	y := func(w float64) float64 { return v.origin.y - v.perM*w }
	var us, vs []float64
	for _, f := range d.m.feet {
		if f.mark != "" {
			us, vs = append(us, f.at.X), append(vs, f.at.Y)
		}
	}
	line := v.window.y1 + 2*p.text
	if at := d.chain(us, [2]float64{e.x0, e.x1}, v.perM); at != nil {
		for i := 1; i < len(at); i++ {
			d.horizontalDimension(x(at[i-1]), x(at[i]), line, v.window.y1, at[i]-at[i-1])
		}
		line += 2.4 * p.text
	}
	d.horizontalDimension(x(e.x0), x(e.x1), line, v.window.y1, e.w())
	line = v.window.x0 - 2*p.text
	if at := d.chain(vs, [2]float64{e.y0, e.y1}, v.perM); at != nil {
		for i := 1; i < len(at); i++ {
			d.verticalDimension(y(at[i-1]), y(at[i]), line, v.window.x0, at[i]-at[i-1])
		}
		line -= 2.4 * p.text
	}
	d.verticalDimension(y(e.y0), y(e.y1), line, v.window.x0, e.h())
}
