package interior

import "math"

// Proximal weight on the areas, relative to the bar's cost: without it 1/S of the bars that carry the layout grows
// without end and rounding in b'du is magnified by it.
const proximal = 1e-5

// weigh computes the weights of every bar from the iterate: with D+ = y+/p and D- = y-/m,
//
//	D = D+ + D-,  t = (st D+ - sc D-)/D,  S = sum_k D+ D- (st + sc)^2/D + pi/z + proximal c,
//
// which has no difference of nearly equal numbers.
func (s *scaled) weigh(x *iterate, w *weights) {
	k := s.cases
	for i := range s.bars {
		sum := proximal * s.cost[i]
		if s.hasZ[i] {
			sum += x.pi[i] / x.z[i]
		}
		for j := i * k; j < (i+1)*k; j++ {
			var dp, dm float64
			if s.hasP[i] {
				dp = x.yp[j] / x.p[j]
			}
			if s.hasM[i] {
				dm = x.ym[j] / x.m[j]
			}
			d := dp + dm
			w.invD[j] = 1 / d
			if s.fixed[i] {
				w.t[j] = 0
				continue
			}
			w.t[j] = s.st[i]*(dp/d) - s.sc[i]*(dm/d)
			st := s.st[i] + s.sc[i]
			sum += dp * (dm / d) * st * st
		}
		if s.fixed[i] {
			w.invS[i] = 0
		} else {
			w.invS[i] = 1 / sum
		}
	}
}

// target is the right-hand side of the complementarity conditions: y+ dp + p dy+ = cp, and so on.
type target struct{ cp, cm, cz []float64 }

// Refinement of a direction on the true balance of forces: at most so many steps of conjugate gradients, until the
// balance is this much better than the residual that the direction is to remove, or below the floor in units of the
// largest load.
const (
	refineSteps = 6
	refineShare = 1e-3
	refineFloor = 1e-11
)

// direction solves the Newton system for the given residuals and target, refined on the true balance of forces if that
// is wanted: a predictor does without. The result is in d, with d.p and the other
// fields as changes of the iterate's.
func (sys *system) direction(x *iterate, w *weights, r residuals, g target, refined bool, d *iterate) {
	s, k := sys.s, sys.s.cases
	rhs := make([]float64, sys.size)
	y := make([]float64, s.bars*k) // re - (cp/p - cm/m)
	pull := make([]float64, s.bars)
	for i := range s.bars {
		sum := -r.price[i]
		if s.hasZ[i] {
			sum -= g.cz[i] / x.z[i]
		}
		for j := i * k; j < (i+1)*k; j++ {
			y[j] = r.compat[j]
			if s.hasP[i] {
				y[j] -= g.cp[j] / x.p[j]
				sum += s.st[i] * g.cp[j] / x.p[j]
			}
			if s.hasM[i] {
				y[j] += g.cm[j] / x.m[j]
				sum += s.sc[i] * g.cm[j] / x.m[j]
			}
			sum += w.t[j] * y[j]
		}
		pull[i] = sum
		scaled := sum * w.invS[i]
		for c := range k {
			j := i*k + c
			sys.add(i, c, y[j]*w.invD[j]+w.t[j]*scaled, -s.gravity[c]*scaled, rhs)
		}
	}
	worst := 0.0
	for j, f := range r.force {
		rhs[j] -= f
		worst = math.Max(worst, math.Abs(f))
	}
	clear(d.u)
	copy(d.u, rhs)
	sys.factor.Solve(d.u)
	sys.follow(w, y, pull, d)
	if refined {
		sys.refine(w, r.force, y, pull, math.Max(refineFloor, refineShare*worst), d)
	}
	s.slacks(x, g, d)
}

// follow computes the changes of areas and forces from those of the displacements.
func (sys *system) follow(w *weights, y, pull []float64, d *iterate) {
	s, k := sys.s, sys.s.cases
	for i := range s.bars {
		sum := pull[i]
		for c := range k {
			j := i*k + c
			bu := sys.dot(i, c, d.u)
			sum -= w.t[j] * bu
			if s.weighs && s.gravity[c] != 0 {
				sum += s.gravity[c] * sys.lift(i, c, d.u)
			}
			d.q[j] = (y[j] - bu) * w.invD[j]
		}
		d.a[i] = sum * w.invS[i]
		for j := i * k; j < (i+1)*k; j++ {
			d.q[j] += w.t[j] * d.a[i]
		}
	}
}

// refine improves d.u until the changes of forces and areas remove the unbalanced forces, by conjugate gradients on the
// reduced system with the factor as preconditioner. The residual is the true one: what the new forces leave unbalanced.
func (sys *system) refine(w *weights, force, y, pull []float64, want float64, d *iterate) {
	left := func() []float64 { // B dq - g H da - rf: what M acts on to correct
		r := sys.change(d)
		for j := range r {
			r[j] -= force[j]
		}
		return r
	}
	r := left()
	before := largest(r)
	if before <= want {
		return
	}
	best := append([]float64(nil), d.u...)
	bestNorm := before
	var dir []float64
	rho := 0.0
	for range refineSteps {
		z := append([]float64(nil), r...)
		sys.factor.Solve(z)
		rhoNew := dotp(r, z)
		if !(rhoNew > 0) {
			break
		}
		if dir == nil {
			dir = z
		} else {
			beta := rhoNew / rho
			for j := range dir {
				dir[j] = z[j] + beta*dir[j]
			}
		}
		rho = rhoNew
		curve := dotp(dir, sys.multiply(w, dir))
		if !(curve > 0) {
			break
		}
		alpha := rho / curve
		for j := range dir {
			d.u[j] += alpha * dir[j]
		}
		sys.follow(w, y, pull, d)
		r = left()
		if now := largest(r); now < bestNorm {
			bestNorm = now
			copy(best, d.u)
			if now <= want {
				return
			}
		}
	}
	copy(d.u, best)
	sys.follow(w, y, pull, d)
}

// change returns B dq - g H da.
func (sys *system) change(d *iterate) []float64 {
	s, k := sys.s, sys.s.cases
	r := make([]float64, sys.size)
	for i := range s.bars {
		for c := range k {
			sys.add(i, c, d.q[i*k+c], -s.gravity[c]*d.a[i], r)
		}
	}
	return r
}

// slacks fills the changes of slacks and multipliers.
func (s *scaled) slacks(x *iterate, g target, d *iterate) {
	for i := range s.bars {
		if s.hasZ[i] {
			d.z[i] = -d.a[i]
			d.pi[i] = (g.cz[i] - x.pi[i]*d.z[i]) / x.z[i]
		}
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			if s.hasP[i] {
				d.p[j] = s.st[i]*d.a[i] - d.q[j]
				d.yp[j] = (g.cp[j] - x.yp[j]*d.p[j]) / x.p[j]
			}
			if s.hasM[i] {
				d.m[j] = s.sc[i]*d.a[i] + d.q[j]
				d.ym[j] = (g.cm[j] - x.ym[j]*d.m[j]) / x.m[j]
			}
		}
	}
}

func largest(x []float64) float64 {
	m := 0.0
	for _, v := range x {
		m = math.Max(m, math.Abs(v))
	}
	return m
}

func dotp(x, y []float64) float64 {
	s := 0.0
	for i, v := range x {
		s += v * y[i]
	}
	return s
}
