package interior

import (
	"context"
	"math"

	"boughwork/lp"
)

// A step goes at most this share of the way to the nearest bound, more when the point is nearly there.
const (
	stepShare   = 0.9
	stepTightly = 0.9995
)

// The point for a warm start is kept when the gap is below this many times the wanted one: nearer to the solution, a
// point is too near the border for a changed problem (found by trial).
const warmGap = 5

// outcome of the loop.
type outcome struct {
	status     lp.Status
	iterations int
	warm       *iterate // kept on the way, or nil
}

// run follows the central path from x until the gap and the residuals are below the settings (Mehrotra 1992:
// predictor, centring parameter from it, corrector; primal and dual steps of their own).
func (sys *system) run(ctx context.Context, x *iterate, gap float64, set lp.Settings, done int) (outcome, error) {
	s := sys.s
	w := &weights{invD: make([]float64, s.bars*s.cases), t: make([]float64, s.bars*s.cases), invS: make([]float64, s.bars)}
	d := newIterate(s, sys.size)
	g := target{cp: make([]float64, s.bars*s.cases), cm: make([]float64, s.bars*s.cases), cz: make([]float64, s.bars)}
	stuck := 0
	var warm *iterate
	for it := done; ; it++ {
		r := sys.residuals(x)
		sum, count := s.complementarity(x)
		mu := sum / float64(count)
		primal, dual := sys.values(x)
		if set.Progress != nil {
			set.Progress(lp.Iteration{Number: it, Objective: primal * s.force * s.lambda, Bound: dual * s.force * s.lambda, Residual: largest(r.force)})
		}
		if warm == nil && math.Abs(primal-dual) <= warmGap*gap*math.Abs(primal) {
			warm = x.clone()
		}
		switch {
		case sys.converged(r, primal, dual, gap, set):
			return outcome{lp.Optimal, it, warm}, nil
		case s.free() && sys.proves(x):
			return outcome{lp.NoEquilibrium, it, warm}, nil
		// The dual objective stands for the bound here: a point is nearly dual feasible from the start on.
		case it >= set.Iterations, set.Ceiling > 0 && dual*s.force*s.lambda > set.Ceiling && it > done:
			return outcome{lp.IterationLimit, it, warm}, nil
		case stuck >= 4 || math.IsNaN(primal+dual) || sys.hopeless(it-done, r, primal, dual):
			return outcome{lp.Trouble, it, warm}, nil
		}
		s.weigh(x, w)
		if err := sys.assemble(ctx, w); err != nil {
			return outcome{lp.Cancelled, it, warm}, err
		}
		s.aim(x, nil, 0, g)
		sys.direction(x, w, r, g, false, d)
		ap, ad := s.longest(x, d)
		after := s.complementarityAfter(x, d, ap, ad) / float64(count)
		centre := math.Pow(after/mu, 3)
		floor := 0.1 * math.Max(gap*math.Abs(primal), nothingShare/2) / float64(count)
		s.aim(x, d, math.Max(centre*mu, floor), g)
		sys.direction(x, w, r, g, true, d)
		ap, ad = s.longest(x, d)
		share := math.Max(stepShare, 1-math.Min(1, mu/math.Max(math.Abs(primal), 1e-300)*float64(count)))
		share = math.Min(share, stepTightly)
		ap, ad = math.Min(1, share*ap), math.Min(1, share*ad)
		x.step(s, d, ap, ad)
		if math.Max(ap, ad) < 1e-3 {
			stuck++
		} else {
			stuck = 0
		}
	}
}

// proves reports whether the displacements show that fixed bars cannot carry the loads: these do more work than the bars
// can absorb, by more than rounding (Farkas's lemma).
func (sys *system) proves(x *iterate) bool {
	s := sys.s
	work, absorbed := 0.0, 0.0
	for c := range s.cases {
		for row, f := range s.load[c] {
			work += f * x.u[sys.base[row]+int32(c)*sys.stride[row]]
		}
	}
	for i := range s.bars {
		if v := sys.price(i, x.u); v != 0 {
			if math.IsInf(s.up[i], 1) {
				return false
			}
			absorbed += s.up[i] * v
		}
	}
	return work > (1+provenWork)*math.Max(absorbed, 0) && work > 0
}

// provenWork is the share by which work must exceed what bars absorb: well above the rounding of the sums.
const provenWork = 1e-6

// hopeless reports whether a start out of balance shows no sign of coming into it after so many iterations.
func (sys *system) hopeless(iterations int, r residuals, primal, dual float64) bool {
	if sys.patience == 0 || largest(r.force) <= unbalancedShare {
		return false
	}
	return iterations >= sys.patience || math.Abs(dual) > runaway*(1+primal)
}

// unbalancedShare is the share of the largest load that counts as out of balance. A bound of more than runaway times the
// objective is no bound but a motion that grows without end.
const (
	unbalancedShare = 1e-6
	runaway         = 1e12
)

// converged reports whether the point is good enough: gap, balance of forces, and prices within a share of the gap. Where
// nothing costs anything, forces in balance are all that is wanted.
func (sys *system) converged(r residuals, primal, dual, gap float64, set lp.Settings) bool {
	s := sys.s
	if s.free() {
		return largest(r.force) <= set.Residual
	}
	absolute := math.Max(gap/set.Gap*set.Absolute/(s.force*s.lambda), nothingShare/2)
	if !(math.Abs(primal-dual) <= math.Max(gap*math.Abs(primal), absolute)) || largest(r.force) > 1e2*set.Residual {
		return false
	}
	for i, rc := range r.price {
		if !s.fixed[i] && math.Abs(rc) > gap*s.cost[i] {
			return false
		}
	}
	for i := range s.bars {
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			if math.Abs(r.compat[j]) > gap*s.cost[i] && !s.fixed[i] {
				return false
			}
		}
	}
	return true
}

// aim sets the target of the complementarity conditions: mu, less the present products, less the products of the
// predictor's changes (nil for the predictor itself).
func (s *scaled) aim(x, d *iterate, mu float64, g target) {
	for i := range s.bars {
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			g.cp[j], g.cm[j] = mu-x.p[j]*x.yp[j], mu-x.m[j]*x.ym[j]
			if d != nil {
				g.cp[j] -= d.p[j] * d.yp[j]
				g.cm[j] -= d.m[j] * d.ym[j]
			}
		}
		g.cz[i] = mu - x.z[i]*x.pi[i]
		if d != nil {
			g.cz[i] -= d.z[i] * d.pi[i]
		}
	}
}

// longest returns the largest primal and dual steps that keep everything positive.
func (s *scaled) longest(x, d *iterate) (primal, dual float64) {
	primal, dual = 1e30, 1e30
	cut := func(v, dv float64, limit *float64) {
		if dv < 0 && -v/dv < *limit {
			*limit = -v / dv
		}
	}
	for i := range s.bars {
		if s.hasZ[i] {
			cut(x.z[i], d.z[i], &primal)
			cut(x.pi[i], d.pi[i], &dual)
		}
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			if s.hasP[i] {
				cut(x.p[j], d.p[j], &primal)
				cut(x.yp[j], d.yp[j], &dual)
			}
			if s.hasM[i] {
				cut(x.m[j], d.m[j], &primal)
				cut(x.ym[j], d.ym[j], &dual)
			}
		}
	}
	return primal, dual
}

// complementarityAfter returns the sum of products after steps of at most 1.
func (s *scaled) complementarityAfter(x, d *iterate, ap, ad float64) float64 {
	ap, ad = math.Min(1, ap), math.Min(1, ad)
	sum := 0.0
	for i := range s.bars {
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			if s.hasP[i] {
				sum += (x.p[j] + ap*d.p[j]) * (x.yp[j] + ad*d.yp[j])
			}
			if s.hasM[i] {
				sum += (x.m[j] + ap*d.m[j]) * (x.ym[j] + ad*d.ym[j])
			}
		}
		if s.hasZ[i] {
			sum += (x.z[i] + ap*d.z[i]) * (x.pi[i] + ad*d.pi[i])
		}
	}
	return math.Max(sum, 0)
}

// step moves the point.
func (x *iterate) step(s *scaled, d *iterate, ap, ad float64) {
	for i := range s.bars {
		x.a[i] += ap * d.a[i]
		if s.hasZ[i] {
			x.z[i] += ap * d.z[i]
			x.pi[i] += ad * d.pi[i]
		}
		for j := i * s.cases; j < (i+1)*s.cases; j++ {
			x.q[j] += ap * d.q[j]
			if s.hasP[i] {
				x.p[j] += ap * d.p[j]
				x.yp[j] += ad * d.yp[j]
			}
			if s.hasM[i] {
				x.m[j] += ap * d.m[j]
				x.ym[j] += ad * d.ym[j]
			}
		}
	}
	for j := range x.u {
		x.u[j] += ad * d.u[j]
	}
}
