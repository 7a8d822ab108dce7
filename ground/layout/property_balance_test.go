package layout_test

import (
	"math"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
	"boughwork/lp"
)

// balanceShare is the largest unbalanced force that a layout may have, as a share of the largest load.
const balanceShare = 1e-8

// forces sums bar forces, loads and weights at every node in case k: what is left there is taken by the ground.
func forces(s *ground.Structure, r *layout.Result, k int) []geom.Vec {
	sum := make([]geom.Vec, len(s.Nodes))
	for _, l := range s.Cases[k].Loads {
		sum[l.Node] = sum[l.Node].Add(l.Force)
	}
	for _, b := range r.Bars {
		along := s.Nodes[b.B].At.Sub(s.Nodes[b.A].At)
		l := along.Norm()
		pull := along.Scale(b.Force[k] / l)
		half := geom.Vec{Z: -s.Cases[k].Gravity * s.Material.Density * ground.Gravity * b.Area * l / 2}
		sum[b.A] = sum[b.A].Add(pull).Add(half)
		sum[b.B] = sum[b.B].Sub(pull).Add(half)
	}
	return sum
}

// unbalanced returns the largest force in case k that nothing takes, N.
func unbalanced(s *ground.Structure, r *layout.Result, k int) float64 {
	sum := forces(s, r, k)
	worst := 0.0
	note := func(v float64) { worst = math.Max(worst, math.Abs(v)) }
	deck := map[int]bool{}
	for _, d := range s.Diaphragms {
		var x, y, turn float64
		for _, n := range d {
			deck[n] = true
			x, y = x+sum[n].X, y+sum[n].Y
			turn += s.Nodes[n].At.X*sum[n].Y - s.Nodes[n].At.Y*sum[n].X
		}
		note(x)
		note(y)
		note(turn)
	}
	for i, n := range s.Nodes {
		if !n.Fixed[0] && !deck[i] {
			note(sum[i].X)
		}
		if !n.Fixed[1] && !deck[i] {
			note(sum[i].Y)
		}
		if !n.Fixed[2] {
			note(sum[i].Z)
		}
	}
	for _, z := range s.Zones {
		var total geom.Vec // pressing on the ground
		for _, n := range z.Nodes {
			total = total.Add(sum[n])
			if z.Limits.NoUplift {
				note(math.Max(0, sum[n].Z))
			}
		}
		over := func(v float64, limit *float64) {
			if limit != nil {
				note(math.Max(0, v-*limit))
			}
		}
		over(-total.Z, z.Limits.Vertical)
		over(total.Z, z.Limits.Uplift)
		over(math.Hypot(total.X, total.Y), z.Limits.Sideways)
	}
	return worst
}

// largest returns the largest load of a structure, N.
func largest(s *ground.Structure) float64 {
	top := 0.0
	for _, c := range s.Cases {
		for _, l := range c.Loads {
			top = math.Max(top, l.Force.Norm())
		}
	}
	return top
}

// judged re-sums a layout: forces at every node in every case, strength of every bar, volume, and the gap.
func judged(t *testing.T, s *ground.Structure, r *layout.Result, gap float64) {
	t.Helper()
	top := largest(s)
	for k := range s.Cases {
		if v := unbalanced(s, r, k); !(v <= balanceShare*top) {
			t.Errorf("case %d: a force of %.3g is not taken, the largest load is %.3g", k, v, top)
		}
	}
	volume := 0.0
	for _, b := range r.Bars {
		for k, q := range b.Force {
			if most, least := s.Material.Tension*b.Area, -s.Material.Compression*b.Area; q > most+balanceShare*top || q < least-balanceShare*top {
				t.Errorf("bar %d-%d, case %d: force %.9g, strength %.9g to %.9g", b.A, b.B, k, q, least, most)
			}
		}
		if !b.Kept {
			volume += b.Area * s.Nodes[b.A].At.Sub(s.Nodes[b.B].At).Norm()
		}
	}
	if math.Abs(volume-r.Volume) > rounding*volume {
		t.Errorf("volume %.10g, the bars add up to %.10g", r.Volume, volume)
	}
	if r.Bound > r.Objective*(1+rounding) || r.Objective-r.Bound > gap*r.Objective*(1+rounding) {
		t.Errorf("objective %.10g, bound %.10g: not within the gap %.3g", r.Objective, r.Bound, gap)
	}
}

// TestEveryLayoutHolds breaks if a layout of any mixture of features is out of balance, too weak, heavier or lighter
// than said, or further from its bound than asked; or if there is neither a layout nor a proof that there is none.
func TestEveryLayoutHolds(t *testing.T) {
	const gap, number = 1e-6, 200
	seeds(t, number, func(t *testing.T, seed uint64) {
		s := randomStructure(seed, everything)
		r := solve(t, s, gap)
		switch r.Status {
		case lp.Optimal:
			judged(t, s, r, gap)
		case lp.NoEquilibrium:
			if r.Collapse == nil {
				t.Error("no equilibrium, but no motion that shows it")
			}
			defer t.Skip("no layout exists")
		default:
			t.Errorf("status %v, gap %.3g", r.Status, r.Gap)
		}
		verified(t, s, r)
	})
}
