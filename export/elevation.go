package export

import (
	"fmt"
	"math"

	"boughwork/geom"
)

// drawElevation draws what is seen from one side.
func (d *drawing) drawElevation(v view, cell box, words string) {
	d.elevationSite(v)
	d.style.drawBars(d.c, d.m, v, d.paper.hair)
	d.skins(v, 0.2)
	d.collapseIn(v)
	d.standing(v)
	d.levels(v)
	d.viewTitle(v, cell, "Elevation", words+", "+ratio(d.place.scale), titleLine)
}

// elevationSite draws ground, zones, keep-clears and walls.
func (d *drawing) elevationSite(v view) {
	p := d.paper
	d.c.openClipped(v.window, `stroke-linejoin="round"`)
	for _, k := range d.m.clears {
		d.clearBand(v, k)
	}
	ground := v.origin.y - v.perM*d.m.low
	d.c.line(pt{v.window.x0, ground}, pt{v.window.x1, ground}, stroke(inkColour, p.medium))
	for _, s := range d.m.footings {
		e := d.across(v, s.rings)
		d.c.line(pt{e.x0, e.y1}, pt{e.x1, e.y1}, stroke(footingLine, 2*p.heavy)+` stroke-linecap="square"`)
	}
	for _, s := range d.m.walls {
		for _, ring := range s.rings {
			d.c.path([][]pt{v.all(ring)}, s.closed, stroke(greyColour, p.medium))
		}
	}
	d.c.close()
}

// skins draws the roofs as a veil over what is behind and under them.
func (d *drawing) skins(v view, opacity float64) {
	d.c.openClipped(v.window.grown(d.paper.heavy), `stroke-linejoin="round"`)
	for _, r := range d.m.roofs {
		d.skin(v, r, opacity)
	}
	d.c.close()
}

// across is the box of some rings on the sheet.
func (d *drawing) across(v view, rings [][]geom.Vec) box {
	e := emptyExtent()
	for _, ring := range rings {
		for _, q := range ring {
			at := v.at(q)
			e.take(at.x, at.y)
		}
	}
	return box{e.x0, e.y0, e.x1, e.y1}
}

// clearBand draws a keep-clear from the side, between its two heights.
func (d *drawing) clearBand(v view, k drawnPrism) {
	p := d.paper
	b := d.across(v, k.rings)
	b.y0, b.y1 = v.origin.y-v.perM*k.to, v.origin.y-v.perM*k.from
	ground := v.origin.y - v.perM*d.m.low
	b.y1 = math.Min(b.y1, ground)
	if b.y1 <= b.y0 {
		return
	}
	ring := []pt{{b.x0, b.y0}, {b.x1, b.y0}, {b.x1, b.y1}, {b.x0, b.y1}}
	d.c.path(hatch(clipRings([][]pt{ring}, v.window), 2*p.hatchStep), false, stroke(lightColour, p.hair))
	d.c.path([][]pt{ring}, true, stroke(greyColour, p.hair)+dashed(4*p.medium, 3*p.medium))
}

// skin draws the surface of a roof as a thin veil with its border; without a surface, its outline.
func (d *drawing) skin(v view, r drawnRoof, opacity float64) {
	p := d.paper
	fill := fmt.Sprintf(`fill="%s" fill-opacity="%s"`, roofColour, short(opacity, 2))
	edge := stroke(inkColour, p.fine)
	if len(r.triangles) == 0 {
		rings := make([][]pt, len(r.rings))
		for i, ring := range r.rings {
			rings[i] = v.all(ring)
		}
		d.c.path(rings, true, fill+` fill-rule="evenodd" `+edge)
		return
	}
	// All triangles run the same way on the sheet, so that where they cover each other the veil is no thicker.
	var rings [][]pt
	for _, t := range r.triangles {
		a, b, c := v.at(r.places[t[0]]), v.at(r.places[t[1]]), v.at(r.places[t[2]])
		if (b.x-a.x)*(c.y-a.y) < (b.y-a.y)*(c.x-a.x) {
			b, c = c, b
		}
		rings = append(rings, []pt{a, b, c})
	}
	d.c.path(rings, true, fill)
	var lines [][]pt
	for _, e := range r.border {
		lines = append(lines, []pt{v.at(r.places[e[0]]), v.at(r.places[e[1]])})
	}
	d.c.path(lines, false, edge+` stroke-linecap="round"`)
}

// standing draws the supports from the side: a small triangle under each foot.
func (d *drawing) standing(v view) {
	r := d.footSize()
	for _, f := range d.m.feet {
		at := v.at(f.at)
		if f.mark == "" {
			d.c.circle(at, 0.35*r, `fill="`+footingLine+`"`)
			continue
		}
		d.c.path([][]pt{{at, {at.x - r, at.y + 1.5*r}, {at.x + r, at.y + 1.5*r}}}, true, `fill="#fff" `+stroke(inkColour, d.paper.fine))
	}
}
