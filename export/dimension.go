package export

import (
	"math"
	"sort"
)

// tick is the half length of the stroke that ends a dimension, in sizes of text.
const tick = 0.35

// horizontalDimension measures from x0 to x1 on a line at y; the length reads in m. from is where the measured things end: fine
// lines lead there.
func (d *drawing) horizontalDimension(x0, x1, y, from, metres float64) {
	p := d.paper
	for _, x := range []float64{x0, x1} {
		d.c.line(pt{x, from + p.small*0.4}, pt{x, y + p.small*0.5}, stroke(lightColour, p.hair))
		d.c.line(pt{x - tick*p.small, y + tick*p.small}, pt{x + tick*p.small, y - tick*p.small}, stroke(inkColour, p.fine))
	}
	d.c.line(pt{x0, y}, pt{x1, y}, stroke(inkColour, p.hair))
	d.dimensionText(pt{(x0 + x1) / 2, y - 0.35*p.small}, metres, x1-x0, false)
}

// verticalDimension is the same on a line at x.
func (d *drawing) verticalDimension(y0, y1, x, from, metres float64) {
	p := d.paper
	for _, y := range []float64{y0, y1} {
		d.c.line(pt{from - p.small*0.4, y}, pt{x - p.small*0.5, y}, stroke(lightColour, p.hair))
		d.c.line(pt{x - tick*p.small, y + tick*p.small}, pt{x + tick*p.small, y - tick*p.small}, stroke(inkColour, p.fine))
	}
	d.c.line(pt{x, y0}, pt{x, y1}, stroke(inkColour, p.hair))
	d.dimensionText(pt{x - 0.35*p.small, (y0 + y1) / 2}, metres, math.Abs(y1-y0), true)
}

func (d *drawing) dimensionText(at pt, metres, room float64, up bool) {
	s := decimal(metres, 2)
	w := writing{size: d.paper.small, anchor: "middle", colour: inkColour, up: up}
	if textWidth(s, w.size, false) <= room && d.c.free(textBox(at, s, w)) {
		d.c.text(at, s, w)
	}
}

// chain is where along an axis (m) the feet stand, between the ends of the roof: nil if that are too many to read, or
// nothing but the ends.
func (d *drawing) chain(positions []float64, ends [2]float64, per float64) []float64 {
	const most = 9
	at := append([]float64{ends[0], ends[1]}, positions...)
	sort.Float64s(at)
	var out []float64
	for _, x := range at {
		if len(out) == 0 || x-out[len(out)-1] > sameAxis {
			out = append(out, x)
		}
	}
	if len(out) < 3 || len(out) > most {
		return nil
	}
	for i := 1; i < len(out); i++ {
		if gap := out[i] - out[i-1]; textWidth(decimal(gap, 2), d.paper.small, false)*1.1 > gap*per {
			return nil
		}
	}
	return out
}

// sameAxis is how far apart two feet may be and still stand on one line of the drawing, m.
const sameAxis = 0.02

// levels writes the heights worth naming on the left of an elevation, moved apart where they would meet.
func (d *drawing) levels(v view) {
	p := d.paper
	type mark struct{ z, y float64 }
	var marks []mark
	seen := map[string]bool{}
	for _, z := range d.m.levels {
		if s := level(z); !seen[s] {
			seen[s] = true
			marks = append(marks, mark{z, v.origin.y - v.perM*z})
		}
	}
	// From the ground up: a mark that finds no room within a few lines of its height is left out.
	x := v.window.x0
	last := math.Inf(1)
	for _, m := range marks {
		y := math.Min(m.y, last-1.25*p.small)
		if m.y-y > 2*p.small {
			continue
		}
		last = y
		d.c.path([][]pt{{{x, m.y}, {x - 0.8*p.small, m.y}, {x - 1.3*p.small, y}}}, false, stroke(inkColour, p.hair))
		d.c.text(pt{x - 1.5*p.small, y + 0.3*p.small}, level(m.z), writing{size: p.small, anchor: "end", colour: inkColour})
	}
}

// level writes a height with its sign.
func level(z float64) string {
	s := decimal(z, 2)
	if s[0] != '-' {
		s = "+" + s
	}
	return s
}
