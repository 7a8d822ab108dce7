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

// surroundings are what a label takes heed of: it must stay in the window and off the obstacles, and should cover few lines.
type surroundings struct {
	window    box
	obstacles []box
	lines     [][2]pt
	leaders   [][2]pt // of the labels that are there already
}

// covered is how many lines a box covers.
func (s surroundings) covered(b box) (n int) {
	for _, l := range s.lines {
		if crossesBox(l[0], l[1], b) {
			n++
		}
	}
	return n
}

// crossed is how many leaders a line crosses.
func (s surroundings) crossed(a, b pt) (n int) {
	for _, l := range s.leaders {
		if side(a, b, l[0])*side(a, b, l[1]) < 0 && side(l[0], l[1], a)*side(l[0], l[1], b) < 0 {
			n++
		}
	}
	return n
}

// side is positive, negative or zero as c lies on one side of the line from a to b, on the other, or on it.
func side(a, b, c pt) float64 { return (b.x-a.x)*(c.y-a.y) - (b.y-a.y)*(c.x-a.x) }

// allowed reports whether a text may have a box.
func (s surroundings) allowed(c *canvas, b box) bool {
	return s.window.contains(b) && c.free(b) && !meetsAny(b, s.obstacles)
}

// farther is what one step away from its place costs a label, in lines that it would cover otherwise.
const farther = 0.7

// tangled is what a leader that crosses another costs, in lines that it would cover otherwise.
const tangled = 12

// label writes a text beside a place where it meets no other text, no obstacle and no edge of the window: where it covers
// few lines and is near, above rather than below. It has a leader if it had to go far. It reports whether there was room.
func (c *canvas) label(p pt, s string, w writing, around *surroundings, hair float64) bool {
	const turns, rings = 12, 7
	best, bestAt, bestBox, bestAnchor, far := math.Inf(1), pt{}, box{}, "", false
	for ring := range rings {
		if float64(ring)*farther >= best {
			break
		}
		r := w.size * (0.9 + 0.95*float64(ring))
		for turn := range turns {
			// Upwards to the right first, then by turns to both sides.
			angle := math.Pi/3 + float64((turn+1)/2)*2*math.Pi/turns*float64(1-2*(turn%2))
			q := pt{p.x + r*math.Cos(angle), p.y - r*math.Sin(angle) + 0.3*w.size}
			w.anchor = "start"
			switch {
			case math.Abs(math.Cos(angle)) < 0.2:
				w.anchor = "middle"
			case math.Cos(angle) < 0:
				w.anchor = "end"
			}
			b := textBox(q, s, w).grown(0.18 * w.size)
			if !around.allowed(c, b) {
				continue
			}
			cost := float64(ring)*farther + float64(around.covered(b)) + tangled*float64(around.crossed(p, nearestOf(b, p)))
			if cost < best {
				best, bestAt, bestBox, bestAnchor, far = cost, q, b, w.anchor, ring > 1
			}
		}
	}
	if math.IsInf(best, 1) {
		return false
	}
	if far {
		end := nearestOf(bestBox, p)
		c.line(p, end, stroke(inkColour, hair))
		around.leaders = append(around.leaders, [2]pt{p, end})
	}
	w.anchor = bestAnchor
	c.text(bestAt, s, w)
	return true
}

// crossesBox reports whether a line has a part in a box (Liang and Barsky 1984).
func crossesBox(a, b pt, r box) bool {
	t0, t1 := 0.0, 1.0
	for _, side := range [4][2]float64{{a.x - b.x, a.x - r.x0}, {b.x - a.x, r.x1 - a.x}, {a.y - b.y, a.y - r.y0}, {b.y - a.y, r.y1 - a.y}} {
		p, q := side[0], side[1]
		switch {
		case p == 0 && q < 0:
			return false
		case p < 0:
			t0 = math.Max(t0, q/p)
		case p > 0:
			t1 = math.Min(t1, q/p)
		}
	}
	return t0 < t1
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
