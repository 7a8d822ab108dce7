package layout

import (
	"fmt"
	"math"
	"slices"

	"boughwork/geom"
	"boughwork/ground"
)

// dual judges the displacements: they must vanish at supports, move decks and limited zones as one, and price no
// candidate above its cost; then the work of the loads on them, less what limited feet and kept members are worth, is a
// lower bound on the objective of any layout (weak duality).
func (j *judge) dual() {
	c := j.rec.Certificate
	if len(c.Displacement) == 0 {
		j.rep.add("bound claimed without displacements, m3", c.BoundM3, 0, "no displacements in the record")
		if c.ObjectiveM3 > 0 {
			j.rep.Gap = 1
			j.rep.add("gap claimed without displacements (by which it is too small)", 1-c.Gap, 0, "record %.6g", c.Gap)
		}
		return
	}
	j.u = make([][]geom.Vec, len(c.Displacement))
	for k, uk := range c.Displacement {
		for _, v := range uk {
			j.u[k] = append(j.u[k], geom.FromArray(v).Scale(1/kilo))
		}
	}
	j.rigid()
	worst := j.priceAll()
	j.rep.add("displacements (largest price of a candidate / its cost, less 1)", math.Max(0, worst-1), priceShare, "%d candidates in the record", j.rec.Candidates.Count)
	bound := j.bound()
	j.rep.Bound = bound
	if c.ObjectiveM3 > 0 {
		j.rep.Gap = (c.ObjectiveM3 - bound) / c.ObjectiveM3
	}
	j.rep.add("bound (share of the objective by which the record claims too much)", math.Max(0, c.BoundM3-math.Max(bound, 0))/math.Max(math.Max(c.ObjectiveM3, c.BoundM3), 1e-300), volumeShare,
		"recomputed %.9g m3, record %.9g m3", bound, c.BoundM3)
	j.rep.add("gap (by which the record claims too little)", math.Max(0, j.rep.Gap-c.Gap), volumeShare, "recomputed %.6g, record %.6g", j.rep.Gap, c.Gap)
}

// priceAll returns the largest price over cost of all candidates.
func (j *judge) priceAll() float64 {
	p := pricer{j.s, ground.NewCandidates(j.s)}
	gravity := make([]float64, len(j.s.Cases))
	for k, c := range j.s.Cases {
		gravity[k] = c.Gravity
	}
	return p.price(j.u, gravity, math.Inf(1)).worst
}

// rigid checks that nothing moves that is held, and that decks move as rigid bodies in plan.
func (j *judge) rigid() {
	limited := map[int]ground.Zone{}
	for _, z := range j.s.Zones {
		for _, n := range z.Nodes {
			limited[n] = z
		}
	}
	worst, where := 0.0, "supports and decks"
	for k := range j.u {
		top := 1e-300
		for _, v := range j.u[k] {
			top = math.Max(top, v.Norm())
		}
		note := func(v float64, format string, args ...any) {
			if v = math.Abs(v) / top; v > worst {
				worst, where = v, fmt.Sprintf(format, args...)
			}
		}
		for i, n := range j.s.Nodes {
			for x, v := range j.u[k][i].Array() {
				if n.Fixed[x] && !yields(limited[i], x) {
					note(v, "node %d is held in %c but moves in case %q", i, 'x'+x, j.s.Cases[k].Name)
				}
			}
		}
		for _, d := range j.s.Diaphragms {
			j.rigidDeck(k, d, note)
		}
	}
	j.rep.add("displacements of supports and decks (share of the largest)", worst, rigidShare, "%s", where)
}

// yields reports whether the reaction of a zone's nodes in direction x is limited or charged, so that the node may move.
func yields(z ground.Zone, x int) bool {
	l := z.Limits
	if x < 2 {
		return l.Sideways != nil
	}
	return l.NoUplift || l.Vertical != nil || l.Uplift != nil || l.Cost > 0
}

// rigidDeck compares the plan motion of a deck with the rigid motion that fits it best.
func (j *judge) rigidDeck(k int, d []int, note func(v float64, format string, args ...any)) {
	centre := j.centre(d)
	var mean geom.Vec
	turn, inertia := 0.0, 0.0
	for _, n := range d {
		mean = mean.Add(j.u[k][n].Scale(1 / float64(len(d))))
	}
	for _, n := range d {
		r, v := j.s.Nodes[n].At.Sub(centre), j.u[k][n].Sub(mean)
		turn += r.X*v.Y - r.Y*v.X
		inertia += r.X*r.X + r.Y*r.Y
	}
	if inertia > 0 {
		turn /= inertia
	}
	for _, n := range d {
		r, v := j.s.Nodes[n].At.Sub(centre), j.u[k][n].Sub(mean)
		note(math.Hypot(v.X+turn*r.Y, v.Y-turn*r.X), "node %d leaves its deck in case %q", n, j.s.Cases[k].Name)
	}
}

// bound returns the dual value of the displacements, m3, or -Inf if a foot moves in a way that no reaction limits.
func (j *judge) bound() float64 {
	value := 0.0
	for k, c := range j.s.Cases {
		for _, l := range c.Loads {
			value += l.Force.Dot(j.u[k][l.Node])
		}
	}
	for _, kept := range j.s.Kept {
		value -= kept.Area * j.price(kept.A, kept.B)
	}
	for _, z := range j.s.Zones {
		value -= j.footWorth(z)
	}
	return value
}

// price returns the price of a bar of unit area between two nodes, over all cases.
func (j *judge) price(a, b int) float64 {
	d := j.s.Nodes[b].At.Sub(j.s.Nodes[a].At)
	l := d.Norm()
	price := 0.0
	for k, c := range j.s.Cases {
		e := d.Dot(j.u[k][b].Sub(j.u[k][a])) / l
		price += math.Max(j.s.Material.Tension*e, -j.s.Material.Compression*e)
		price += c.Gravity * j.s.Material.Density * ground.Gravity * l * (j.u[k][a].Z + j.u[k][b].Z) / 2
	}
	return price
}

// A collapse is proven when any layout would need at least this many times the volume of one bar across the whole
// structure under all loads.
const beyondReason = 1e2

// collapse judges the motion that is to prove that no layout exists.
func (j *judge) collapse() {
	c := j.rec.Collapse
	all := append([]RecordMotion{{c.Case, c.Motion}}, c.Others...)
	one := *j.s
	one.Cases = nil
	j.u = nil
	for _, m := range all {
		at := slices.IndexFunc(j.rec.Cases, func(rc RecordCase) bool { return rc.Name == m.Case })
		if at < 0 || len(m.Motion) != len(j.s.Nodes) {
			j.rep.add("collapse (motion of a case that is not there)", 1, 0, "case %q", m.Case)
			return
		}
		one.Cases = append(one.Cases, j.s.Cases[at])
		var u []geom.Vec
		for _, v := range m.Motion {
			u = append(u, geom.FromArray(v))
		}
		j.u = append(j.u, u)
	}
	j.s = &one
	j.rigid()
	work, worst := j.bound(), j.priceAll()
	st := study{s: j.s}
	least := math.Inf(1)
	if worst > 0 {
		least = work / worst
	}
	j.rep.add("collapse (reasonable volume / least volume of any layout)", st.naturalVolume()*beyondReason/math.Max(least, 1e-300), 1,
		"the loads of case %q work %.6g kJ; any layout needs %.3g m3 at least", c.Case, work/kilo, least)
	if !(work > 0) {
		j.rep.add("collapse (the loads do no work)", 1, 0, "work %.6g kJ", work/kilo)
	}
}
