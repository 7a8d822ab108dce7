package interior

import (
	"context"
	"math"
)

// The start: areas are areaSpare times what the elastic forces need plus areaFloor of the mean need, so that no bar
// starts at the border; displacements are scaled to dualSpare of the largest that keeps every price below its cost.
const (
	areaSpare = 1.2
	areaFloor = 0.1
	dualSpare = 0.9
)

// elastic solves for the forces in an elastic structure of bars with stiffness 1/cost. It returns the displacements and
// the largest force that they leave unbalanced, as a share of the largest load: above rounding, the bars are a mechanism
// under these loads and the displacements are its motion, since nothing but rounding resists it.
func (sys *system) elastic(ctx context.Context) (d []float64, unbalanced float64, err error) {
	s := sys.s
	w := &weights{invD: make([]float64, s.bars*s.cases), t: make([]float64, s.bars*s.cases), invS: make([]float64, s.bars)}
	for i := range s.bars {
		for c := range s.cases {
			w.invD[i*s.cases+c] = s.stiffness(i)
		}
	}
	if err := sys.assemble(ctx, w); err != nil {
		return nil, 0, err
	}
	d = make([]float64, sys.size)
	for c := range s.cases {
		for row, f := range s.load[c] {
			d[sys.base[row]+int32(c)*sys.stride[row]] = f
		}
	}
	f := append([]float64(nil), d...)
	sys.factor.Solve(d)
	for step := 0; ; step++ {
		left := sys.multiply(w, d)
		for j := range left {
			left[j] = f[j] - left[j]
		}
		unbalanced = largest(left)
		if unbalanced < refineFloor || step == 2 {
			return d, unbalanced, nil
		}
		sys.factor.Solve(left)
		for j := range d {
			d[j] += left[j]
		}
	}
}

// stiffness of bar i in the elastic start. A fixed bar has no cost to go by; it counts like an average one.
func (s *scaled) stiffness(i int) float64 {
	if s.fixed[i] {
		return 1
	}
	return 1 / s.cost[i]
}

// start returns a point inside all bounds: forces from the elastic displacements d, clipped to what limited bars can
// carry, areas above them, and d scaled to a dual point below all costs. Forces on artificial bars take what is left
// unbalanced, so that with them the point is feasible.
func (sys *system) start(d []float64) *iterate {
	s := sys.s
	x := newIterate(s, sys.size)
	sum, count := 0.0, 0
	need := make([]float64, s.bars)
	for i := range s.real {
		for c := range s.cases {
			q := -s.stiffness(i) * sys.dot(i, c, d)
			x.q[i*s.cases+c] = q
			need[i] = math.Max(need[i], s.need(i, q))
		}
		sum += need[i]
		count++
	}
	floor := math.Max(areaFloor*sum/float64(max(count, 1)), 1e-6)
	for i := range s.real {
		s.startBar(x, i, need[i], floor)
	}
	if s.bars > s.real {
		left := sys.unbalanced(x.q, x.a)
		for r := range s.rows {
			i := s.real + r
			for c := range s.cases {
				q := left[sys.base[r]+int32(c)*sys.stride[r]]
				x.q[i*s.cases+c] = q
				need[i] = math.Max(need[i], math.Abs(q))
			}
			s.startBar(x, i, need[i], floor)
		}
	}
	sys.startDual(x, d)
	return x
}

// need is the area that force q asks of bar i; a side without strength asks for nothing: startBar clips it.
func (s *scaled) need(i int, q float64) float64 {
	if q > 0 && s.st[i] > 0 {
		return q / s.st[i]
	}
	if q < 0 && s.sc[i] > 0 {
		return -q / s.sc[i]
	}
	return 0
}

// startBar sets the area of bar i, and clips its forces into the inside of what that area carries.
func (s *scaled) startBar(x *iterate, i int, need, floor float64) {
	x.a[i] = areaSpare*need + floor
	if s.fixed[i] {
		x.a[i] = s.up[i]
	} else if s.hasZ[i] {
		x.a[i] = math.Min(x.a[i], dualSpare*s.up[i])
		x.z[i] = s.up[i] - x.a[i]
		x.pi[i] = s.cost[i]
	}
	for j := i * s.cases; j < (i+1)*s.cases; j++ {
		hi, lo := floor+math.Abs(x.q[j]), -floor-math.Abs(x.q[j])
		if s.hasP[i] {
			hi = s.st[i] * x.a[i]
		}
		if s.hasM[i] {
			lo = -s.sc[i] * x.a[i]
		}
		gap := 0.05 * (hi - lo)
		x.q[j] = math.Min(math.Max(x.q[j], lo+gap), hi-gap)
		x.p[j], x.m[j] = s.st[i]*x.a[i]-x.q[j], s.sc[i]*x.a[i]+x.q[j]
	}
}

// startDual scales the displacements to feasibility and splits what is left of each cost over the multipliers.
func (sys *system) startDual(x *iterate, d []float64) {
	s := sys.s
	worst := 0.0
	for i := range s.bars {
		if !s.fixed[i] {
			worst = math.Max(worst, sys.price(i, d)/s.cost[i])
		}
	}
	scale := 1.0
	if worst > 0 {
		scale = dualSpare / worst
	}
	for j := range d {
		x.u[j] = scale * d[j]
	}
	for i := range s.bars {
		rest := s.cost[i] + x.pi[i] - sys.price(i, x.u)
		if s.fixed[i] {
			rest = 1
		}
		var both float64
		if s.hasP[i] {
			both += s.st[i]
		}
		if s.hasM[i] {
			both += s.sc[i]
		}
		share := math.Max(rest/(float64(s.cases)*math.Max(both, 1)), 1e-3*s.cost[i])
		for c := range s.cases {
			e := -sys.dot(i, c, x.u)
			if s.hasP[i] {
				x.yp[i*s.cases+c] = math.Max(e, 0) + share
			}
			if s.hasM[i] {
				x.ym[i*s.cases+c] = math.Max(-e, 0) + share
			}
		}
	}
}

// price returns v_i of the displacements u; sides without limit of strength do not count.
func (sys *system) price(i int, u []float64) float64 {
	s := sys.s
	v := 0.0
	for c := range s.cases {
		e := -sys.dot(i, c, u)
		if e > 0 && s.hasP[i] {
			v += s.st[i] * e
		} else if e < 0 && s.hasM[i] {
			v -= s.sc[i] * e
		}
		if s.weighs && s.gravity[c] != 0 {
			v += s.gravity[c] * sys.lift(i, c, u)
		}
	}
	return v
}
