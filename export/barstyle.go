package export

import (
	"fmt"
	"math"
	"sort"
)

// Colours. Tension and compression are bluish green and vermilion, bars that work both ways blue, of the set of Okabe and
// Ito 2008; each has its own line as well: a light core, none, a broken core.
const (
	tensionColour     = "#009E73"
	compressionColour = "#D55E00"
	bothColour        = "#0072B2"
	inkColour         = "#222222"
	greyColour        = "#666666"
	lightColour       = "#A9A9A9"
	paperColour       = "#ffffff"
	roofColour        = "#8FA3AD"
	footingColour     = "#E4DCCB"
	footingLine       = "#8A7B5C"
)

const (
	coreShare   = 0.4  // width of the light core as a share of the bar
	inkShare    = 0.22 // share of the plan that bars may cover before their widths are reduced
	leastWidest = 0.5  // of the range of widths: the thickest bar is never reduced below that share of the paper's
	haloWidth   = 0.5  // mm of paper on both sides together of a bar that passes in front of another
	keptCasing  = 0.5  // mm that the dark edges of a kept member add
)

// manyBars and crowdedBars are the counts above which the thinnest line gets thinner, mm.
const (
	manyBars, crowdedBars                 = 400, 1000
	thinnest, thinnestMany, thinnestCrowd = 0.36, 0.28, 0.22
)

// barStyle turns areas into widths on the sheet: width grows with the diameter of a solid bar of the area.
type barStyle struct {
	widest, least float64 // mm
	thickest      float64 // m2
	opacity       float64
}

// newBarStyle chooses the widths so that a plan at 1:scale is not covered in ink.
func newBarStyle(m *model, p paper, scale float64) barStyle {
	s := barStyle{widest: p.widest, least: thinnest, thickest: m.thickest, opacity: 1}
	switch n := len(m.bars) - m.faint; {
	case n > crowdedBars:
		s.least, s.opacity = thinnestCrowd, 0.85
	case n > manyBars:
		s.least, s.opacity = thinnestMany, 0.9
	}
	per := mmPerM / scale
	sheet := m.core.w() * m.core.h() * per * per
	for s.widest > leastWidest*p.widest {
		ink := 0.0
		for _, b := range m.bars {
			if b.faint {
				continue
			}
			ink += math.Hypot(b.a.X-b.b.X, b.a.Y-b.b.Y) * per * s.width(b.area)
		}
		if ink <= inkShare*sheet {
			break
		}
		s.widest *= 0.95
	}
	return s
}

func (s barStyle) width(area float64) float64 {
	if s.thickest <= 0 {
		return s.least
	}
	return math.Max(s.least, s.widest*math.Sqrt(area/s.thickest))
}

// clampedArea is the area under which all bars have the least width, m2.
func (s barStyle) clampedArea() float64 {
	return s.thickest * (s.least / s.widest) * (s.least / s.widest)
}

// bar draws one bar on the sheet.
func (s barStyle) bar(c *canvas, a, b pt, area float64, state State, kept bool) {
	w := s.width(area)
	if kept {
		c.line(a, b, stroke(inkColour, w+keptCasing))
	}
	core := stroke(paperColour, coreShare*w) + ` stroke-linecap="butt"`
	switch state {
	case Tension:
		c.line(a, b, stroke(tensionColour, w))
		c.line(a, b, core)
	case Compression:
		c.line(a, b, stroke(compressionColour, w))
	case Both:
		dash := math.Max(1.2, 1.5*w)
		c.line(a, b, stroke(bothColour, w))
		c.line(a, b, core+dashed(dash, dash))
	default:
		c.line(a, b, stroke(greyColour, math.Min(w, s.least)))
	}
}

// faintLine is how the faint bars are drawn.
func faintLine(state State, width float64) string {
	colour := map[State]string{Tension: tensionColour, Compression: compressionColour, Both: bothColour}[state]
	return stroke(named(colour, greyColour), width) + ` stroke-opacity="0.35"`
}

// mostFaint is the count of faint bars up to which they are drawn; more would be a veil over the drawing, and are left
// out. The legend says which.
const mostFaint = 600

// drawBars draws the bars of a view: under all others the faint ones as hairlines, then the far ones first; where there are few
// enough, each passes visibly in front of those behind it.
func (s barStyle) drawBars(c *canvas, m *model, v view, hair float64) {
	var order []int
	depth := make([]float64, len(m.bars))
	c.openClipped(v.window.grown(s.widest), fmt.Sprintf(`stroke-linecap="round" opacity="%s"`, short(s.opacity, 2)))
	for i, b := range m.bars {
		if b.faint {
			if m.faint <= mostFaint {
				c.line(v.at(b.a), v.at(b.b), faintLine(b.state, hair))
			}
			continue
		}
		order = append(order, i)
		depth[i] = v.near(b.a.Add(b.b).Scale(0.5))
	}
	sort.SliceStable(order, func(i, j int) bool { return depth[order[i]] < depth[order[j]] })
	for _, i := range order {
		b := m.bars[i]
		from, to := v.at(b.a), v.at(b.b)
		if len(order) <= manyBars {
			c.line(from, to, stroke(paperColour, s.width(b.area)+haloWidth)+` stroke-linecap="butt"`)
		}
		s.bar(c, from, to, b.area, b.state, b.kept)
	}
	c.close()
}
