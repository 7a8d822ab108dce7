package export

import (
	"fmt"
)

// words writes the column on the right: from the top the legend and the numbers, from the bottom the title block and the
// cautions.
func (d *drawing) words() {
	p := d.paper
	inset := 1.2 * p.text
	x1 := p.w - p.margin
	k := &column{d: d, x0: x1 - p.column + inset, x1: x1 - inset, y: p.margin + 0.2*p.text, bottom: p.h - p.margin - inset}
	top := d.titleBlock(k)
	top = d.cautions(k, top)
	k.bottom = top - 0.5*p.text
	d.evidence(k)
	d.legend(k)
	d.numbers(k)
	// Cases leave the feet a third of the room.
	d.cases(k, max(3, 2*k.room(p.small)/3))
	d.feetTable(k)
}

// titleBlock writes the title block at the bottom of the column and returns where it begins.
func (d *drawing) titleBlock(k *column) (top float64) {
	p, rec := d.paper, d.m.rec
	title := wrapped(named(rec.Title, "Untitled"), k.width(), p.title, true)
	if most := 4; len(title) > most {
		title = title[:most]
		title[most-1] = trimmed(title[most-1]+" …", k.width(), p.title, true)
	}
	status := rec.Status
	pairs := [][2]string{
		{"Status", status},
		{"Scale", fmt.Sprintf("%s on %s, unless noted", ratio(d.place.scale), p.name)},
		{"Lengths and heights", "m, heights as in the site plan"},
		{"Made by", rec.MadeBy},
	}
	if o := rec.Frame.OriginLonLat; o != nil {
		pairs = append(pairs, [2]string{"Local origin (lon, lat)", fmt.Sprintf("%s, %s", short(o[0], 7), short(o[1], 7))})
	} else if rec.Frame.CRS != "" {
		pairs = append(pairs, [2]string{"Coordinates", rec.Frame.CRS})
	}
	if len(rec.BriefSHA256) >= 12 {
		pairs = append(pairs, [2]string{"Brief", "sha256 " + rec.BriefSHA256[:12] + "…"})
	}
	height := float64(len(title))*leading*p.title + 0.6*p.text
	for _, q := range pairs {
		height += leading * p.small * float64(d.linesOf(k, q))
	}
	top = k.bottom - height
	d.c.line(pt{k.x0 - 1.2*p.text, top - 0.6*p.text}, pt{k.x1 + 1.2*p.text, top - 0.6*p.text}, stroke(inkColour, p.fine))
	block := *k
	block.y = top
	for _, l := range title {
		block.line(p.title, field{x: k.x0, text: l, writing: writing{bold: true}})
	}
	block.gap(0.6)
	for _, q := range pairs {
		block.pair(q[0], q[1])
	}
	return top - 0.6*p.text
}

// linesOf is how many lines a pair takes.
func (d *drawing) linesOf(k *column, q [2]string) int {
	size := d.paper.small
	if textWidth(q[0], size, false)+size+textWidth(q[1], size, false) <= k.width() {
		return 1
	}
	return 1 + len(wrapped(q[1], k.width()-2*size, size, false))
}

// cautions writes the cautions of the record above a height and returns where they begin.
func (d *drawing) cautions(k *column, bottom float64) (top float64) {
	p := d.paper
	list := d.m.rec.Cautions
	if len(list) == 0 {
		list = []string{"Preliminary. Local codes and a licensed engineer decide."}
	}
	var lines []string
	for _, s := range list {
		lines = append(lines, wrapped(s, k.width(), p.small, false)...)
	}
	height := leading*p.text + leading*p.small*float64(len(lines)) + 0.8*p.text
	block := *k
	block.bottom = bottom
	block.y = bottom - height
	top = block.y
	d.c.line(pt{k.x0, top}, pt{k.x1, top}, stroke(lightColour, p.hair))
	block.y += 0.4 * p.text
	block.line(p.text, field{x: k.x0, text: "Preliminary, not for construction", writing: writing{bold: true}})
	for _, l := range lines {
		block.line(p.small, field{x: k.x0, text: l})
	}
	return top
}
