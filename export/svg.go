package export

import (
	"fmt"
	"io"
	"math"
	"strings"
)

// pt is a place on the sheet: mm from its left and upper edge.
type pt struct{ x, y float64 }

// box is an upright rectangle on the sheet, mm.
type box struct{ x0, y0, x1, y1 float64 }

func (b box) w() float64 { return b.x1 - b.x0 }
func (b box) h() float64 { return b.y1 - b.y0 }

// grown returns the box with a margin all round.
func (b box) grown(d float64) box { return box{b.x0 - d, b.y0 - d, b.x1 + d, b.y1 + d} }

// meets reports whether two boxes share more than an edge.
func (b box) meets(c box) bool { return b.x0 < c.x1 && c.x0 < b.x1 && b.y0 < c.y1 && c.y0 < b.y1 }

func (b box) contains(c box) bool {
	return c.x0 >= b.x0 && c.y0 >= b.y0 && c.x1 <= b.x1 && c.y1 <= b.y1
}

// paperDecimals of a mm: a hundredth cannot be seen in print.
const paperDecimals = 2

// canvas writes an SVG drawing whose user unit is 1 mm. It keeps the box of every text, and the first thing that went
// wrong.
type canvas struct {
	b     strings.Builder
	texts []placedText
	clips int
	err   error
}

// placedText is a text with the box that it needs.
type placedText struct {
	text string
	box  box
}

// fontStack names common faces and ends in the generic one; none needs to be there.
const fontStack = "Helvetica, Arial, 'Liberation Sans', 'DejaVu Sans', sans-serif"

// newCanvas begins a drawing of w x h mm.
func newCanvas(w, h float64, title string) *canvas {
	c := &canvas{}
	fmt.Fprintf(&c.b, `<?xml version="1.0" encoding="UTF-8"?>`+"\n"+
		`<svg xmlns="http://www.w3.org/2000/svg" width="%smm" height="%smm" viewBox="0 0 %s %s" font-family="%s" fill="none">`+"\n",
		c.n(w), c.n(h), c.n(w), c.n(h), fontStack)
	fmt.Fprintf(&c.b, "<title>%s</title>\n", escape(title))
	fmt.Fprintf(&c.b, `<rect width="%s" height="%s" fill="#fff"/>`+"\n", c.n(w), c.n(h))
	return c
}

// n writes a number of mm.
func (c *canvas) n(v float64) string {
	if !finite(v) && c.err == nil {
		c.err = fmt.Errorf("export: sheet: a coordinate is %v", v)
	}
	return short(v, paperDecimals)
}

// open begins a group with attributes as they stand in the file.
func (c *canvas) open(attributes string) { fmt.Fprintf(&c.b, "<g %s>\n", attributes) }

// openClipped begins a group of which only what lies in the box shows.
func (c *canvas) openClipped(b box, attributes string) {
	c.clips++
	fmt.Fprintf(&c.b, `<clipPath id="clip%d"><rect x="%s" y="%s" width="%s" height="%s"/></clipPath>`+"\n",
		c.clips, c.n(b.x0), c.n(b.y0), c.n(b.w()), c.n(b.h()))
	c.open(fmt.Sprintf(`clip-path="url(#clip%d)" %s`, c.clips, attributes))
}

func (c *canvas) close() { c.b.WriteString("</g>\n") }

// stroke is the attributes of a line of that colour and width in mm.
func stroke(colour string, width float64) string {
	return fmt.Sprintf(`stroke="%s" stroke-width="%s"`, colour, short(width, 3))
}

// dashed adds dashes to a stroke.
func dashed(on, off float64) string {
	return fmt.Sprintf(` stroke-dasharray="%s %s"`, short(on, paperDecimals), short(off, paperDecimals))
}

func (c *canvas) line(a, b pt, attributes string) {
	fmt.Fprintf(&c.b, `<path d="M%s %sL%s %s" %s/>`+"\n", c.n(a.x), c.n(a.y), c.n(b.x), c.n(b.y), attributes)
}

// path draws lines or closed rings as one shape.
func (c *canvas) path(lines [][]pt, closed bool, attributes string) {
	if len(lines) == 0 {
		return
	}
	c.b.WriteString(`<path d="`)
	for _, line := range lines {
		for i, p := range line {
			c.b.WriteByte("ML"[min(i, 1)])
			c.b.WriteString(c.n(p.x) + " " + c.n(p.y))
		}
		if closed {
			c.b.WriteByte('Z')
		}
	}
	fmt.Fprintf(&c.b, `" %s/>`+"\n", attributes)
}

func (c *canvas) rect(b box, attributes string) {
	fmt.Fprintf(&c.b, `<rect x="%s" y="%s" width="%s" height="%s" %s/>`+"\n", c.n(b.x0), c.n(b.y0), c.n(b.w()), c.n(b.h()), attributes)
}

func (c *canvas) circle(p pt, r float64, attributes string) {
	fmt.Fprintf(&c.b, `<circle cx="%s" cy="%s" r="%s" %s/>`+"\n", c.n(p.x), c.n(p.y), c.n(r), attributes)
}

// arrow draws a line with a head at b; head is the length of the head in mm.
func (c *canvas) arrow(a, b pt, head float64, colour string, width float64) {
	d := math.Hypot(b.x-a.x, b.y-a.y)
	if d == 0 {
		return
	}
	ex, ey := (b.x-a.x)/d, (b.y-a.y)/d
	head = math.Min(head, d)
	foot := pt{b.x - ex*head, b.y - ey*head}
	half := head * 0.32
	c.line(a, foot, stroke(colour, width))
	c.path([][]pt{{b, {foot.x - ey*half, foot.y + ex*half}, {foot.x + ey*half, foot.y - ex*half}}}, true, `fill="`+colour+`"`)
}

// writing is how a text looks: size in mm of its em, anchor start, middle or end.
type writing struct {
	size   float64
	anchor string
	bold   bool
	colour string
	up     bool // reads upwards
	halo   bool // on a patch of paper, over a drawing
}

// textBox is the box that a text at p needs.
func textBox(p pt, s string, w writing) box {
	width := textWidth(s, w.size, w.bold)
	left := 0.0
	switch w.anchor {
	case "middle":
		left = -width / 2
	case "end":
		left = -width
	}
	const ascent, descent = 0.78, 0.24 // of an em: capitals and accents; tails
	b := box{left, -ascent * w.size, left + width, descent * w.size}
	if w.up {
		b = box{b.y0, -b.x1, b.y1, -b.x0}
	}
	return box{p.x + b.x0, p.y + b.y0, p.x + b.x1, p.y + b.y1}
}

// text writes real text and keeps its box.
func (c *canvas) text(p pt, s string, w writing) {
	if s == "" {
		return
	}
	b := textBox(p, s, w)
	c.texts = append(c.texts, placedText{s, b})
	if w.halo {
		c.rect(b, `fill="#fff" fill-opacity="0.85"`)
	}
	fmt.Fprintf(&c.b, `<text x="%s" y="%s" font-size="%s" fill="%s"`, c.n(p.x), c.n(p.y), c.n(w.size), w.colour)
	if w.anchor != "" && w.anchor != "start" {
		fmt.Fprintf(&c.b, ` text-anchor="%s"`, w.anchor)
	}
	if w.bold {
		c.b.WriteString(` font-weight="bold"`)
	}
	if w.up {
		fmt.Fprintf(&c.b, ` transform="rotate(-90 %s %s)"`, c.n(p.x), c.n(p.y))
	}
	fmt.Fprintf(&c.b, ">%s</text>\n", escape(s))
}

// finish ends the drawing and writes it.
func (c *canvas) finish(w io.Writer) error {
	c.b.WriteString("</svg>\n")
	if c.err != nil {
		return c.err
	}
	_, err := io.WriteString(w, c.b.String())
	return err
}

// escape makes a text safe between tags and in attributes. Characters that XML 1.0 does not allow become a space.
func escape(s string) string {
	var b strings.Builder
	for _, r := range s {
		switch {
		case r == '&':
			b.WriteString("&amp;")
		case r == '<':
			b.WriteString("&lt;")
		case r == '>':
			b.WriteString("&gt;")
		case r == '"':
			b.WriteString("&quot;")
		case r < ' ' || r == 0xFFFE || r == 0xFFFF || r == 0xFFFD:
			b.WriteByte(' ')
		default:
			b.WriteRune(r)
		}
	}
	return b.String()
}
