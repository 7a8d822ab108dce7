package export

import (
	"math"
	"strings"
)

// column writes words from the top of a box downwards and knows when it is full.
type column struct {
	d      *drawing
	x0, x1 float64
	y      float64 // where the next line begins
	bottom float64
}

// leading is the distance of lines in sizes of text.
const leading = 1.42

func (k *column) width() float64 { return k.x1 - k.x0 }

// room is how many more lines of a size fit.
func (k *column) room(size float64) int {
	return int(math.Floor((k.bottom - k.y) / (leading * size)))
}

// line writes the fields of one line, each at its own edge; false if the column is full.
func (k *column) line(size float64, fields ...field) bool {
	if k.room(size) < 1 {
		return false
	}
	base := k.y + size
	for _, f := range fields {
		f.size = size
		if f.colour == "" {
			f.colour = inkColour
		}
		k.d.c.text(pt{f.x, base}, f.text, f.writing)
	}
	k.y += leading * size
	return true
}

// field is a text at a place across the column.
type field struct {
	x    float64
	text string
	writing
}

func (k *column) gap(lines float64) { k.y += lines * k.d.paper.text }

// heading begins a part; false if there is no room for it and two lines more.
func (k *column) heading(s string) bool {
	p := k.d.paper
	if k.bottom-k.y < (1.2+leading*3)*p.text {
		return false
	}
	k.y += 0.9 * p.text
	k.d.c.line(pt{k.x0, k.y}, pt{k.x1, k.y}, stroke(lightColour, p.hair))
	k.y += 0.45 * p.text
	return k.line(p.text, field{x: k.x0, text: trimmed(s, k.width(), p.text, true), writing: writing{bold: true}})
}

// paragraph writes a text over the width; what has no room ends in an ellipsis.
func (k *column) paragraph(s string, size float64, w writing) {
	lines := wrapped(s, k.width(), size, w.bold)
	if n := max(k.room(size), 0); len(lines) > n {
		lines = lines[:n]
		if n > 0 {
			lines[n-1] = trimmed(lines[n-1]+" …", k.width(), size, w.bold)
			if !strings.HasSuffix(lines[n-1], "…") {
				lines[n-1] = "…"
			}
		}
	}
	for _, l := range lines {
		k.line(size, field{x: k.x0, text: l, writing: w})
	}
}

// pair writes a name on the left and its value on the right; a value that is too long goes on over lines of its own.
func (k *column) pair(name, value string) {
	size := k.d.paper.small
	left := textWidth(name, size, false)
	if left+size+textWidth(value, size, false) <= k.width() {
		k.line(size, field{x: k.x0, text: name, writing: writing{colour: greyColour}}, field{x: k.x1, text: value, writing: writing{anchor: "end"}})
		return
	}
	k.line(size, field{x: k.x0, text: trimmed(name, k.width(), size, false), writing: writing{colour: greyColour}})
	for _, l := range wrapped(value, k.width()-2*size, size, false) {
		k.line(size, field{x: k.x0 + 2*size, text: l})
	}
}

// figures writes a number with so many significant figures, with no exponent.
func figures(v float64, n int) string {
	if v == 0 || !finite(v) {
		return "0"
	}
	decimals := n - 1 - int(math.Floor(math.Log10(math.Abs(v))))
	return decimal(v, max(0, decimals))
}
