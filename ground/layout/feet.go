package layout

import (
	"math"

	"boughwork/ground"
)

// A limit of a zone's horizontal reaction is the regular polygon with sideSectors two-sided forces, inscribed in the
// circle: 3.4 % on the safe side at worst.
const sideSectors = 6

// zone makes the rows and the reaction bars of a footing zone that limits or charges its reactions; nothing for a zone
// that does not. A reaction is the force of a bar that stands under the node, so that compression pushes the node up.
func (p *program) zone(z ground.Zone) {
	l := z.Limits
	capped := l.Vertical != nil || l.Uplift != nil || l.Cost > 0
	switch {
	case capped && l.NoUplift:
		total := p.row()
		p.close(nowhere)
		for _, n := range z.Nodes {
			r := p.ownRow(n)
			p.foot([]int32{r, total}, []float64{-1, 1}, 0, math.Inf(1))
		}
		p.capZone(z, total)
	case capped:
		total := p.row()
		p.close(nowhere)
		for _, n := range z.Nodes {
			p.term[n][2] = []term{{total, 1}}
		}
		p.capZone(z, total)
	case l.NoUplift:
		for _, n := range z.Nodes {
			p.foot([]int32{p.ownRow(n)}, []float64{-1}, 0, math.Inf(1))
		}
	}
	if l.Sideways != nil && !l.VerticalOnly {
		p.sideways(z)
	}
}

// ownRow gives node n a vertical row.
func (p *program) ownRow(n int) int32 {
	r := p.row()
	p.close(p.s.Nodes[n].At.Array())
	p.term[n][2] = []term{{r, 1}}
	return r
}

// foot adds a reaction with fixed limits in N.
func (p *program) foot(row []int32, b []float64, tension, compression float64) {
	p.feet.Add(row, b, make([]float64, len(row)), tension, compression, 0, 1, true)
}

// capZone limits and charges the total vertical reaction, row total.
func (p *program) capZone(z ground.Zone, total int32) {
	l := z.Limits
	up, down := math.Inf(1), math.Inf(1)
	if l.Uplift != nil {
		up = *l.Uplift
	}
	if l.NoUplift {
		up = 0
	}
	if l.Vertical != nil {
		down = *l.Vertical
	}
	limited := !math.IsInf(up, 1) || !math.IsInf(down, 1)
	if l.Cost > 0 {
		row, b := []int32{total}, []float64{-1}
		if limited { // the charged reaction stands on a row of its own, that the limits hold
			total = p.row()
			p.close(nowhere)
			row, b = append(row, total), append(b, 1)
		}
		p.feet.Add(row, b, make([]float64, len(row)), 1, 1, l.Cost, math.Inf(1), false)
	}
	if limited && up+down > 0 {
		p.foot([]int32{total}, []float64{-1}, up, down)
	}
}

// sideways limits the total horizontal reaction. A sum of two-sided forces of equal size in evenly spread directions
// fills a regular polygon.
func (p *program) sideways(z ground.Zone) {
	x, y := p.row(), p.row()
	p.close(nowhere)
	for _, n := range z.Nodes {
		p.term[n][0], p.term[n][1] = []term{{x, 1}}, []term{{y, 1}}
	}
	side := *z.Limits.Sideways * math.Sin(math.Pi/(2*sideSectors))
	if side == 0 {
		return
	}
	for j := range sideSectors {
		a := math.Pi * float64(j) / sideSectors
		p.foot([]int32{x, y}, []float64{-math.Cos(a), -math.Sin(a)}, side, side)
	}
}
