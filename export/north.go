package export

import "math"

// northArrow draws an arrow to the north beside the plan: a needle, one half dark, in a thin circle.
func (d *drawing) northArrow() {
	p := d.paper
	r := 1.5 * p.text
	at := pt{d.plan.window.x1 + 0.9*p.text + r, d.plan.window.y0 + r + 0.6*p.text}
	north := d.m.axes.along(vecNorth)
	ex, ey := north.X, -north.Y // on the sheet
	tip := pt{at.x + r*ex, at.y + r*ey}
	left := pt{at.x - 0.75*r*ex + 0.42*r*ey, at.y - 0.75*r*ey - 0.42*r*ex}
	right := pt{at.x - 0.75*r*ex - 0.42*r*ey, at.y - 0.75*r*ey + 0.42*r*ex}
	tail := pt{at.x - 0.45*r*ex, at.y - 0.45*r*ey}
	d.c.circle(at, r, stroke(inkColour, p.hair))
	d.c.path([][]pt{{tip, left, tail}}, true, `fill="`+inkColour+`"`)
	d.c.path([][]pt{{tip, tail, right}}, true, `fill="#fff" `+stroke(inkColour, p.hair))
	letter := pt{at.x + (r+0.75*p.small)*ex, at.y + (r+0.75*p.small)*ey + 0.36*p.small}
	d.c.text(letter, "N", writing{size: p.small, anchor: "middle", bold: true, colour: inkColour})
}

// scaleBar draws a bar of round length at the right end of the title line of a view, if there is room.
func (d *drawing) scaleBar(v view, below float64) {
	const longest, parts = 22.0, 4 // sizes of text
	p := d.paper
	metres := roundDown(longest * p.text / v.perM)
	length := metres * v.perM
	label := short(metres, 2) + " m"
	x1 := v.window.x1 - textWidth(label, p.small, false)/2
	x0 := x1 - length
	y := v.window.y1 + below*p.text
	w := writing{size: p.small, anchor: "middle", colour: inkColour}
	top := y - 0.45*p.text
	mid := short(metres/2, 2)
	for _, t := range []box{textBox(pt{x0, top - 0.35*p.small}, "0", w), textBox(pt{x1, top - 0.35*p.small}, label, w)} {
		if !d.c.free(t) {
			return
		}
	}
	for i := range parts {
		b := box{x0 + length*float64(i)/parts, top, x0 + length*float64(i+1)/parts, y}
		fill := `fill="#fff" `
		if i%2 == 0 {
			fill = `fill="` + inkColour + `" `
		}
		d.c.rect(b, fill+stroke(inkColour, p.hair))
	}
	d.c.text(pt{x0, top - 0.35*p.small}, "0", w)
	d.c.text(pt{(x0 + x1) / 2, top - 0.35*p.small}, mid, w)
	d.c.text(pt{x1, top - 0.35*p.small}, label, w)
}

// roundDown is the largest of 1, 2, 5, 10, 20 ... that is not above v.
func roundDown(v float64) float64 {
	ten := math.Pow(10, math.Floor(math.Log10(v)))
	for _, f := range []float64{5, 2, 1} {
		if f*ten <= v*(1+equalShare) {
			return f * ten
		}
	}
	return ten
}
