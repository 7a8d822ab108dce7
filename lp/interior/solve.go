// Package interior solves the layout program by a primal-dual interior-point method on reduced normal equations
// (Mehrotra 1992; Wright 1997), with the sparse Cholesky factorisation of lp/sparse. It starts from the forces of an
// elastic structure, keeps every bar's two strength conditions as slacks of their own, and never forms a difference of
// nearly equal weights. Where forces are limited, or bars weigh, it starts with artificial forces at a high price, so
// that a feasible point is known; what they still carry at the end proves that the loads cannot be carried.
//
// It does not find vertices: of several layouts of the same volume it returns one in their midst.
package interior

import (
	"context"
	"math"
	"slices"

	"boughwork/lp"
)

// Solver is the interior-point method. The zero value is ready for use, from several goroutines.
type Solver struct{}

// Name returns "interior".
func (Solver) Name() string { return "interior" }

// Penalties of an artificial force, in units of the mean cost of a unit of force, in turn. A problem that still leans on
// artificial forces at the last has no equilibrium, if its displacements prove that any layout would cost provenCost at
// least, in units of the cost of carrying all loads of the largest case by one mean bar each: a wide roof on a narrow foot
// costs tens of them.
var penalties = []float64{1e3, 1e5, 1e8}

const provenCost = 300

// An artificial force above this share of the largest load is in use, if the gap is so small that it is not for want of
// iterations: leanGap, and leanPatience times smaller at each further look.
const (
	artificialInUse = 1e-6
	leanGap         = 1e-2
	leanPatience    = 1e-2
	leanLooks       = 3
)

// An elastic start that leaves this share of the largest load unbalanced is a mechanism.
const mechanismShare = 1e-7

// An objective of this much, in units of the cost of carrying the largest load by one mean bar, counts as nothing: loads
// that kept bars carry alone. The gap is then measured against it.
const nothingShare = 1e-10

// Solve implements lp.Solver.
func (s Solver) Solve(ctx context.Context, p *lp.Problem, start *lp.Start, set lp.Settings) (*lp.Solution, error) {
	set, err := set.WithDefaults()
	if err != nil {
		return nil, err
	}
	if err := p.Validate(); err != nil {
		return nil, err
	}
	if live, index := withoutDead(p); live != nil {
		sol, err := s.Solve(ctx, live, nil, set)
		if err != nil {
			return nil, err
		}
		return revive(p, sol, index), nil
	}
	sc := newScaled(p)
	if len(p.Cases) == 0 || sc == nil {
		return nothing(p), nil
	}
	sys, err := newSystem(sc, p)
	if err != nil {
		return nil, err
	}
	if fits(start, p) {
		sol, err := solveFrom(ctx, p, sys, nil, sys.warm(p, start), set, 0)
		if err != nil || sol.Status == lp.Optimal || sol.Status == lp.Cancelled {
			return sol, err
		}
	}
	d, unbalanced, err := sys.elastic(ctx)
	if err != nil {
		return cancelled(p), nil
	}
	if unbalanced > mechanismShare {
		if sol := collapse(p, sys, d); sol != nil {
			return sol, nil
		}
	}
	if unbalanced <= mechanismShare && !sc.limited() {
		return solveFrom(ctx, p, sys, nil, sys.start(d), set, 0)
	}
	sys.patience = patience
	x := sys.start(d)
	sol, err := solveFrom(ctx, p, sys, nil, x, set, 0)
	if err != nil || sol.Status == lp.Optimal || sol.Status == lp.Cancelled || sol.Status == lp.IterationLimit {
		return sol, err
	}
	if sol.Status == lp.NoEquilibrium {
		ray := sys.noEquilibrium(p, x, outcome{iterations: sol.Iterations})
		if work, worst := lp.CheckRay(p, ray.Displacement); work > 0 && worst == 0 {
			return ray, nil
		}
	}
	return solveWithPenalty(ctx, p, sys, set, sol.Iterations)
}

// A start whose forces are out of balance must be in balance after this many iterations; if it is not, there may be no
// equilibrium, and artificial forces will tell. Solves that get there do so in ten to twenty.
const patience = 40

// limited reports whether the elastic start may be out of bounds.
func (s *scaled) limited() bool {
	if s.weighs {
		return true
	}
	for i := range s.bars {
		if s.fixed[i] || s.hasZ[i] || s.st[i] == 0 || s.sc[i] == 0 {
			return true
		}
	}
	return false
}

// free reports whether nothing is to be bought: all bars are fixed.
func (s *scaled) free() bool {
	return !slices.Contains(s.fixed, false)
}

// solveWithPenalty solves with artificial forces, at rising prices as long as they are in use. done is how many iterations
// there were before.
func solveWithPenalty(ctx context.Context, p *lp.Problem, plain *system, set lp.Settings, done int) (*lp.Solution, error) {
	var last *lp.Solution
	for _, penalty := range penalties {
		if done >= set.Iterations && last != nil {
			break
		}
		sys, err := newSystem(plain.s.withArtificial(penalty), p)
		if err != nil {
			return nil, err
		}
		d, _, err := sys.elastic(ctx)
		if err != nil {
			return cancelled(p), nil
		}
		x := sys.start(d)
		out, err := sys.settleArtificial(ctx, x, set, done)
		if err != nil {
			sol := plain.answer(p, sys.withoutArtificial(x))
			sol.Status, sol.Iterations = lp.Cancelled, out.iterations
			return sol, nil
		}
		done = out.iterations
		if out.status == lp.IterationLimit && set.Ceiling > 0 {
			sol := plain.answer(p, sys.withoutArtificial(x))
			sol.Status, sol.Iterations = lp.IterationLimit, done
			return sol, nil
		}
		if !sys.leans(x) {
			sol, err := solveFrom(ctx, p, sys, plain, x, set, done)
			if err != nil || sol.Status != lp.Trouble {
				return sol, err
			}
			last, done = sol, sol.Iterations
			continue
		}
		sol := sys.noEquilibrium(p, x, out)
		work, worst := lp.CheckRay(p, sol.Displacement)
		if unit := sys.s.total() * sys.s.force * sys.s.lambda; work > 0 && work >= provenCost*unit*worst {
			if work >= 1e4*provenCost*unit*worst || penalty == penalties[len(penalties)-1] {
				return sol, nil
			}
			last = sol
		} else if last == nil || last.Status != lp.NoEquilibrium {
			sol.Status = lp.Trouble
			last = sol
		}
	}
	return last, nil
}

// settleArtificial runs the method until artificial forces are out of use, or the gap is so small that they are not
// needed for want of iterations.
func (sys *system) settleArtificial(ctx context.Context, x *iterate, set lp.Settings, done int) (outcome, error) {
	gap := leanGap
	for look := 1; ; look++ {
		out, err := sys.run(ctx, x, gap, set, done)
		if err != nil || out.status != lp.Optimal || look == leanLooks || !sys.leans(x) {
			return out, err
		}
		done = out.iterations
		gap *= leanPatience
	}
}

// solveFrom runs the method from x and finishes the answer. plain is the system without artificial forces, or nil if
// sys has none. Status NoEquilibrium means that artificial forces are in use.
func solveFrom(ctx context.Context, p *lp.Problem, sys, plain *system, x *iterate, set lp.Settings, done int) (*lp.Solution, error) {
	var warm *lp.Start
	gap := set.Gap / 2 // half for the path, half for scaling the displacements and repairing the forces
	final := sys
	strip := func(x *iterate) *iterate { return x }
	if plain != nil {
		final, strip = plain, sys.withoutArtificial
	}
	for {
		out, err := sys.run(ctx, x, gap, set, done)
		if err != nil {
			sol := final.answer(p, strip(x))
			sol.Status, sol.Iterations = lp.Cancelled, out.iterations
			return sol, nil
		}
		done = out.iterations
		point := final.repair(ctx, strip(x), set)
		if final.s.free() {
			clear(point.u) // any forces do, and these displacements prove it
		}
		sol := final.answer(p, point)
		sol.Status, sol.Iterations = out.status, done
		if out.warm != nil {
			warm = sys.keep(out.warm)
		}
		sol.Warm = warm
		closed := set.Closed(sol.Objective, sol.Bound) || sol.Objective-sol.Bound <= nothingShare*final.s.force*final.s.lambda
		if !closed && out.status == lp.Optimal && gap >= 1e-3*set.Gap {
			gap /= 4
			continue
		}
		good := closed && !sol.Raw
		if good && sol.Status == lp.Trouble {
			sol.Status = lp.Optimal
		} else if !good && sol.Status == lp.Optimal {
			sol.Status = lp.Trouble
		}
		return sol, nil
	}
}

// leans reports whether artificial forces still carry load.
func (sys *system) leans(x *iterate) bool {
	for j := sys.s.real * sys.s.cases; j < sys.s.bars*sys.s.cases; j++ {
		if x.q[j] > artificialInUse || x.q[j] < -artificialInUse {
			return true
		}
	}
	return false
}

// noEquilibrium is the answer whose artificial forces are in use: the displacements are the motion that proves it.
func (sys *system) noEquilibrium(p *lp.Problem, x *iterate, out outcome) *lp.Solution {
	sol := sys.answer(p, x)
	sol.Status, sol.Raw, sol.Iterations = lp.NoEquilibrium, true, out.iterations
	normalise(sol.Displacement)
	p.Settle(sol.Displacement)
	return sol
}

// total returns the sum of all loads of the largest case, in units of the largest load.
func (s *scaled) total() float64 {
	top := 1.0
	for _, f := range s.load {
		sum := 0.0
		for _, v := range f {
			sum += math.Abs(v)
		}
		top = math.Max(top, sum)
	}
	return top
}
