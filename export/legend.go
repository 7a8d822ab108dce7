package export

import (
	"fmt"
	"math"
)

// legend explains lines and marks: what is not on the sheet has no line in it.
func (d *drawing) legend(k *column) {
	m := d.m
	if len(m.bars)+len(m.feet)+len(m.roofs)+len(m.footings)+len(m.clears)+len(m.walls) == 0 || !k.heading("Legend") {
		return
	}
	count := map[State]int{}
	kept := false
	for _, b := range d.m.bars {
		if !b.faint {
			count[b.state]++
		}
		kept = kept || b.kept
	}
	sample := d.m.thickest * 0.45
	for _, s := range []struct {
		state State
		words string
	}{
		{Compression, "compression"}, {Tension, "tension"}, {Both, "tension in one case, compression in another"}, {Idle, "no force in any case"},
	} {
		if n := count[s.state]; n > 0 {
			d.legendLine(k, fmt.Sprintf("%s (%s)", s.words, counted(n, "bar")), func(a, b pt) { d.style.bar(d.c, a, b, sample, s.state, false) })
		}
	}
	if kept {
		d.legendLine(k, "kept member (dark edges)", func(a, b pt) { d.style.bar(d.c, a, b, sample, Compression, true) })
	}
	d.faintLegend(k)
	d.widthKey(k)
	d.legendSigns(k)
}

// legendLine writes one line with a sample in front.
func (d *drawing) legendLine(k *column, words string, sample func(a, b pt)) {
	p := d.paper
	length := 6 * p.text
	y := k.y + 0.62*p.small
	x := k.x0 + length + p.text
	if k.line(p.small, field{x: x, text: trimmed(words, k.x1-x, p.small, false)}) && sample != nil {
		sample(pt{k.x0, y}, pt{k.x0 + length, y})
	}
}

// widthKey shows three widths with their areas and the diameters of solid bars.
func (d *drawing) widthKey(k *column) {
	if d.m.thickest <= 0 {
		return
	}
	k.gap(0.3)
	last := ""
	for _, share := range []float64{1, 0.3, 0.08} {
		area := d.m.thickest
		if share < 1 {
			area = roundFigures(area*share, 1)
		}
		words := fmt.Sprintf("%s cm², solid round %s mm", short(roundFigures(area*cm2PerM2, 3), 6), short(roundFigures(solidDiameter(area), 3), 3))
		if words == last || area < d.style.clampedArea() {
			continue
		}
		last = words
		w := d.style.width(area)
		d.legendLine(k, words, func(a, b pt) { d.c.line(a, b, stroke(inkColour, w)) })
	}
	if area := d.style.clampedArea(); d.thinnest() < area {
		d.legendLine(k, fmt.Sprintf("all thinner than %s cm² look the same", figures(area*cm2PerM2, 2)), func(a, b pt) {
			d.c.line(a, b, stroke(inkColour, d.style.least))
		})
	}
	k.gap(0.3)
}

// thinnest is the least area of a bar that is not faint, m2.
func (d *drawing) thinnest() float64 {
	least := math.Inf(1)
	for _, b := range d.m.bars {
		if !b.faint {
			least = math.Min(least, b.area)
		}
	}
	return least
}

// faintLegend says how many bars are drawn as hairlines or left out, and how little they are.
func (d *drawing) faintLegend(k *column) {
	share := figures(100*d.faintShare(), 2)
	switch n := d.m.faint; {
	case n > mostFaint:
		d.legendLine(k, fmt.Sprintf("not drawn: the %d thinnest bars, %s %% of the volume", n, share), nil)
	case n > 0:
		d.legendLine(k, fmt.Sprintf("the %s, %s %% of the volume", counted(n, "thinnest bar"), share), func(a, b pt) {
			d.c.line(a, b, faintLine(Idle, d.paper.hair))
		})
	}
}

// faintShare is the share of the faint bars in the volume.
func (d *drawing) faintShare() float64 {
	faint, all := 0.0, 0.0
	for _, b := range d.m.bars {
		v := b.area * b.a.Sub(b.b).Norm()
		all += v
		if b.faint {
			faint += v
		}
	}
	if all == 0 {
		return 0
	}
	return faint / all
}

// legendSigns explains the signs of the site.
func (d *drawing) legendSigns(k *column) {
	p := d.paper
	middle := func(a, b pt) pt { return pt{(a.x + b.x) / 2, a.y} }
	half := 0.42 * p.small
	boxed := func(a, b pt) box { return box{a.x, a.y - half, b.x, a.y + half} }
	if len(d.m.rec.Bars) > 0 && len(d.m.feet) > 0 {
		words := "foot with its largest vertical reaction"
		d.legendLine(k, words, func(a, b pt) {
			q, r := middle(a, b), 0.4*p.small
			d.c.rect(box{q.x - r, q.y - r, q.x + r, q.y + r}, `fill="#fff" `+stroke(inkColour, p.medium))
			d.c.circle(q, 0.45*r, `fill="`+inkColour+`"`)
		})
		if d.unnamed > 0 {
			d.legendLine(k, fmt.Sprintf("%s without room for the mark: see joints.csv", footCount(d.unnamed)), nil)
		}
	} else if len(d.m.feet) > 0 {
		d.legendLine(k, "place where a foot may stand", func(a, b pt) { d.c.circle(middle(a, b), 0.2*p.small, `fill="`+footingLine+`"`) })
	}
	if d.m.rec.Collapse != nil {
		d.legendLine(k, "motion that nothing resists (not to scale)", func(a, b pt) { d.c.arrow(a, b, p.text, inkColour, p.fine) })
		d.legendLine(k, "loaded node on which it does work", func(a, b pt) { d.c.circle(middle(a, b), 0.3*p.text, `fill="`+inkColour+`"`) })
	}
	if len(d.m.roofs) > 0 {
		d.legendLine(k, "roof", func(a, b pt) {
			d.c.rect(boxed(a, b), fmt.Sprintf(`fill="%s" fill-opacity="0.13" %s`, roofColour, stroke(inkColour, p.medium)))
		})
	}
	if len(d.m.footings) > 0 {
		d.legendLine(k, "footing zone", func(a, b pt) {
			d.c.rect(boxed(a, b), fmt.Sprintf(`fill="%s" %s`, footingColour, stroke(footingLine, p.fine)))
		})
	}
	if len(d.m.clears) > 0 {
		d.legendLine(k, "keep clear: no bar between the heights given", func(a, b pt) {
			r := boxed(a, b)
			ring := []pt{{r.x0, r.y0}, {r.x1, r.y0}, {r.x1, r.y1}, {r.x0, r.y1}}
			d.c.path(hatch([][]pt{ring}, p.hatchStep), false, stroke(lightColour, p.hair))
			d.c.path([][]pt{ring}, true, stroke(greyColour, p.fine)+dashed(4*p.medium, 3*p.medium))
		})
	}
	if len(d.m.walls) > 0 {
		d.legendLine(k, "wall", func(a, b pt) { d.c.line(a, b, stroke(greyColour, p.heavy*1.4)) })
	}
}

// footCount writes a number of feet.
func footCount(n int) string {
	if n == 1 {
		return "1 foot"
	}
	return fmt.Sprintf("%d feet", n)
}

// counted writes a number with its noun.
func counted(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

// roundFigures rounds to so many significant figures.
func roundFigures(v float64, n int) float64 {
	if v == 0 {
		return 0
	}
	p := math.Pow(10, float64(n-1)-math.Floor(math.Log10(math.Abs(v))))
	return math.Round(v*p) / p
}
