package layout

import (
	"cmp"
	"math"
	"slices"

	"boughwork/geom"
	"boughwork/ground"
)

// reactions compares the reactions of case k with the limits of their zones. left is what the nodes pass on.
func (j *judge) reactions(k int, left []geom.Vec, note func(v float64, format string, args ...any)) {
	name := j.s.Cases[k].Name
	for _, z := range j.s.Zones {
		l := z.Limits
		var total geom.Vec
		for _, n := range z.Nodes {
			r := left[n].Scale(-1)
			total = total.Add(r)
			if l.NoUplift {
				note(math.Max(0, -r.Z), "foot at node %d of %q is pulled up in case %q", n, z.Name, name)
			}
		}
		if l.Vertical != nil {
			note(math.Max(0, total.Z-*l.Vertical), "zone %q presses down %.6g kN in case %q", z.Name, total.Z/kilo, name)
		}
		if l.Uplift != nil {
			note(math.Max(0, -total.Z-*l.Uplift), "zone %q is pulled up %.6g kN in case %q", z.Name, -total.Z/kilo, name)
		}
		if l.Sideways != nil && !l.VerticalOnly {
			note(math.Max(0, beyondPolygon(total, *l.Sideways)), "zone %q is pushed sideways %.6g kN in case %q", z.Name, math.Hypot(total.X, total.Y)/kilo, name)
		}
	}
}

// beyondPolygon returns how far a force lies outside the regular polygon with 2 sideSectors corners inscribed in the
// circle of the given radius, with sides facing 0, 30, 60 degrees and so on from x.
func beyondPolygon(f geom.Vec, radius float64) float64 {
	apothem := radius * math.Cos(math.Pi/(2*sideSectors))
	worst := math.Inf(-1)
	for s := range 2 * sideSectors {
		a := math.Pi * float64(s) / sideSectors
		worst = math.Max(worst, f.X*math.Cos(a)+f.Y*math.Sin(a)-apothem)
	}
	return worst
}

// footCost returns what the reactions of costed zones are charged, m3.
func (j *judge) footCost() float64 {
	cost := 0.0
	for _, z := range j.s.Zones {
		if z.Limits.Cost == 0 {
			continue
		}
		top := 0.0
		for k := range j.s.Cases {
			left := j.left(k)
			sum := 0.0
			for _, n := range z.Nodes {
				sum += left[n].Z
			}
			top = math.Max(top, math.Abs(sum))
		}
		cost += z.Limits.Cost * top
	}
	return cost
}

// footWorth returns what the reactions of a zone can do against the loads at most, when its nodes move as u says:
// the sum over cases of the largest -R . u over all reactions R that the limits allow. It is +Inf if nothing limits it.
func (j *judge) footWorth(z ground.Zone) float64 {
	l := z.Limits
	if len(z.Nodes) == 0 {
		return 0
	}
	worth := 0.0
	if yields(z, 2) {
		worth += j.verticalWorth(z)
	}
	if l.Sideways != nil && !l.VerticalOnly {
		for k := range j.u {
			v := j.u[k][z.Nodes[0]]
			for _, n := range z.Nodes {
				if w := j.u[k][n].Sub(v); math.Hypot(w.X, w.Y) > rigidShare*v.Norm() {
					return math.Inf(1)
				}
			}
			side := *l.Sideways * math.Sin(math.Pi/(2*sideSectors))
			for s := range sideSectors {
				a := math.Pi * float64(s) / sideSectors
				worth += side * math.Abs(v.X*math.Cos(a)+v.Y*math.Sin(a))
			}
		}
	}
	return worth
}

// verticalWorth is the vertical part of footWorth. With w_k the displacement of the zone, pressing down up to V is worth
// V max(0, -w), pulling up to U is worth U max(0, w). A charged reaction takes |w - t| off w, in all cases together no
// more than its cost: it is spent where it saves most.
func (j *judge) verticalWorth(z ground.Zone) float64 {
	l := z.Limits
	down, up := math.Inf(1), math.Inf(1)
	if l.Vertical != nil {
		down = *l.Vertical
	}
	if l.Uplift != nil {
		up = *l.Uplift
	}
	if l.NoUplift {
		up = 0
	}
	type move struct{ w, slope float64 }
	var moves []move
	for k := range j.u {
		w := j.u[k][z.Nodes[0]].Z
		for _, n := range z.Nodes {
			v := j.u[k][n].Z
			if l.NoUplift {
				w = math.Min(w, v)
			} else if math.Abs(v-w) > rigidShare*math.Abs(w) {
				return math.Inf(1)
			}
		}
		if w < 0 {
			moves = append(moves, move{-w, down})
		} else if w > 0 && !l.NoUplift {
			moves = append(moves, move{w, up})
		}
	}
	slices.SortStableFunc(moves, func(a, b move) int { return cmp.Compare(b.slope, a.slope) })
	budget := l.Cost * (1 + priceShare)
	worth := 0.0
	for _, m := range moves {
		saved := math.Min(budget, m.w)
		budget -= saved
		if m.w > saved {
			worth += m.slope * (m.w - saved)
		}
	}
	return worth
}
