package export

import (
	"fmt"
	"io"
	"math"

	"boughwork/ground/layout"
)

// Sheet writes sheet.svg: a drawing on A3 or A1 in landscape, in mm, with the plan over the site, two elevations and an
// axonometric view, each at a stated scale, and a column of words: legend, numbers, cases, feet, cautions and title.
//
// The plan is turned so that the long side of the roof lies along the sheet; an arrow shows north. Elevations look at the
// long and the short side. The width of a bar grows with the diameter of a solid bar of its area. Where no layout exists
// the sheet shows the motion that proves it in place of bars.
func Sheet(w io.Writer, rec *layout.Record) error {
	if err := check(rec); err != nil {
		return err
	}
	return draw(rec).c.finish(w)
}

// drawing is a sheet on its way.
type drawing struct {
	c       *canvas
	m       *model
	paper   paper
	place   arrangement
	style   barStyle
	plan    view
	long    view
	end     view
	axo     view
	unnamed int // marks of feet for which the plan has no room
}

func draw(rec *layout.Record) *drawing {
	m := newModel(rec)
	s := sizes{plan: m.planExtent(), axo: m.axonometricExtent()}
	s.long = m.elevationExtent(longElevation, s.plan.x0, s.plan.x1)
	around := m.core.grown(marginShare * m.size())
	s.end = m.elevationExtent(endElevation, around.y0, around.y1)
	p, a := arrange(s)
	d := &drawing{c: newCanvas(p.w, p.h, rec.Title), m: m, paper: p, place: a, style: newBarStyle(m, p, a.scale)}
	d.plan = placed(planView, s.plan, a.plan, a.scale)
	d.long = placed(longElevation, s.long, a.long, a.scale)
	d.end = placed(endElevation, s.end, a.end, a.scale)
	d.axo = placed(axonometric, s.axo, a.axo, a.axoScale)
	d.level()
	d.frame()
	d.drawPlan()
	long, short := "", ""
	if m.core.w() > squarish*m.core.h() {
		long, short = "long side, ", "short side, "
	}
	d.drawElevation(d.long, a.long, long+"from the "+d.side(0, -1))
	d.drawElevation(d.end, a.end, short+"from the "+d.side(1, 0))
	d.drawAxonometric()
	d.words()
	return d
}

// squarish is the ratio of two sides up to which none is called the long one.
const squarish = 1.05

// level brings the two elevations to one ground line where they stand side by side, and the long elevation under the plan.
func (d *drawing) level() {
	shift := d.plan.window.x0 - d.long.window.x0
	d.long = d.long.moved(shift, 0)
	if d.place.endOnLeft {
		d.end = d.end.moved(d.plan.window.x0-d.end.window.x0, 0)
	}
	if math.Abs(d.place.long.y0-d.place.end.y0) < 1 {
		d.end = d.end.moved(0, d.long.window.y1-d.end.window.y1)
	}
}

// moved shifts a view on the sheet.
func (v view) moved(dx, dy float64) view {
	v.origin.x, v.origin.y = v.origin.x+dx, v.origin.y+dy
	v.window = box{v.window.x0 + dx, v.window.y0 + dy, v.window.x1 + dx, v.window.y1 + dy}
	return v
}

// frame draws the edge of the drawing and of the column of words.
func (d *drawing) frame() {
	p := d.paper
	f := box{p.margin, p.margin, p.w - p.margin, p.h - p.margin}
	d.c.rect(f, stroke(inkColour, p.medium))
	x := f.x1 - p.column
	d.c.line(pt{x, f.y0}, pt{x, f.y1}, stroke(inkColour, p.fine))
}

// viewTitle writes the name and the scale of a view under it; below is the distance in sizes of text from the window.
// What has no room beside the name in the cell of the view goes on a line of its own.
func (d *drawing) viewTitle(v view, cell box, name, words string, below float64) {
	p := d.paper
	at := pt{v.window.x0, v.window.y1 + below*p.text}
	d.c.text(at, name, writing{size: p.text, bold: true, colour: inkColour})
	right := cell.x1 + (roomRight-0.5)*p.text
	width := textWidth(name, p.text, true) + p.text
	if at.x+width+textWidth(words, p.text, false) <= right {
		at.x += width
	} else {
		at.y += leading * p.text
	}
	d.c.text(at, trimmed(words, right-at.x, p.text, false), writing{size: p.text, colour: inkColour})
}

func ratio(denominator float64) string { return fmt.Sprintf("1:%s", short(denominator, 0)) }

// side names the side that the viewer stands on, given in u and v.
func (d *drawing) side(u, v float64) string { return compass(d.m.axes.bearing(u, v)) }

// compass is the name of the nearest of eight bearings.
func compass(bearing float64) string {
	names := []string{"north", "north-east", "east", "south-east", "south", "south-west", "west", "north-west"}
	i := int(math.Round(bearing/45)) % len(names)
	return names[(i+len(names))%len(names)]
}
