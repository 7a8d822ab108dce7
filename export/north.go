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

// scaleBar draws a bar of round length in the title line of the plan: under the right end of the plan, or where the title
// leaves room.
func (d *drawing) scaleBar() {
	const longest, parts = 22.0, 4 // sizes of text
	p, v := d.paper, d.plan
	w := writing{size: p.small, anchor: "middle", colour: inkColour}
	left := v.window.x0 + textWidth("Plan"+ratio(d.place.scale), p.text, true) + 3*p.text
	right := math.Max(v.window.x1, d.place.plan.x1+(roomRight-0.5)*p.text) - 2*p.text
	metres := roundDown(math.Min(longest*p.text, right-left) / v.perM)
	length := metres * v.perM
	label := short(metres, 2) + " m"
	x1 := math.Max(v.window.x1-textWidth(label, p.small, false)/2, left+length)
	x0 := x1 - length
	y := v.window.y1 + planTitleLine*p.text
	top := y - 0.45*p.text
	for i := range parts {
		b := box{x0 + length*float64(i)/parts, top, x0 + length*float64(i+1)/parts, y}
		fill := `fill="#fff" `
		if i%2 == 0 {
			fill = `fill="` + inkColour + `" `
		}
		d.c.rect(b, fill+stroke(inkColour, p.hair))
	}
	for _, t := range []struct {
		x    float64
		text string
	}{{x1, label}, {x0, "0"}, {(x0 + x1) / 2, short(metres/2, 3)}} {
		if at := (pt{t.x, top - 0.35*p.small}); d.c.free(textBox(at, t.text, w).grown(0.1 * p.small)) {
			d.c.text(at, t.text, w)
		}
	}
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
