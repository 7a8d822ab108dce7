package export

import "math"

// free reports whether a box meets no text of the drawing.
func (c *canvas) free(b box) bool {
	for _, t := range c.texts {
		if t.box.meets(b) {
			return false
		}
	}
	return true
}

// label writes a text beside a place where it meets no other text, no obstacle and no edge of the window, with a leader if it had
// to go far. It tries near places first, above before below. It reports whether there was room.
func (c *canvas) label(p pt, s string, w writing, window box, obstacles []box, hair float64) bool {
	const turns, rings = 12, 7
	clear := w.size * 0.18
	for ring := range rings {
		r := w.size * (0.9 + 0.95*float64(ring))
		for turn := range turns {
			// Upwards to the right first, then by turns to both sides.
			angle := math.Pi/3 + float64((turn+1)/2)*2*math.Pi/turns*float64(1-2*(turn%2))
			q := pt{p.x + r*math.Cos(angle), p.y - r*math.Sin(angle)}
			w.anchor = "start"
			switch {
			case math.Abs(math.Cos(angle)) < 0.2:
				w.anchor = "middle"
			case math.Cos(angle) < 0:
				w.anchor = "end"
			}
			q.y += w.size * 0.3
			b := textBox(q, s, w).grown(clear)
			if !window.contains(b) || !c.free(b) || meetsAny(b, obstacles) {
				continue
			}
			if ring > 1 {
				c.line(p, nearestOf(b, p), stroke(inkColour, hair))
			}
			c.text(q, s, w)
			return true
		}
	}
	return false
}

func meetsAny(b box, list []box) bool {
	for _, o := range list {
		if o.meets(b) {
			return true
		}
	}
	return false
}

// nearestOf is the place of a box that is nearest to p.
func nearestOf(b box, p pt) pt {
	return pt{math.Max(b.x0, math.Min(b.x1, p.x)), math.Max(b.y0, math.Min(b.y1, p.y))}
}
