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

	"boughwork/lp"
)

// Solver is the interior-point method. The zero value is ready for use, from several goroutines.
type Solver struct{}

// Name returns "interior".
func (Solver) Name() string { return "interior" }

// Penalty of an artificial force, in units of the mean cost of a unit of force: the first, the factor at each further
// try, and how many tries. A problem that still leans on artificial forces at the last has no equilibrium: any layout
// would need more than that price.
const (
	firstPenalty  = 1e3
	penaltyFactor = 1e3
	penalties     = 3
)

// An artificial force above this share of the largest load, when the gap is closed, is in use.
const artificialInUse = 1e-5

// An elastic start that leaves this share of the largest load unbalanced is a mechanism.
const mechanismShare = 1e-7

// Solve implements lp.Solver.
func (Solver) Solve(ctx context.Context, p *lp.Problem, start *lp.Start, set lp.Settings) (*lp.Solution, error) {
	set, err := set.WithDefaults()
	if err != nil {
		return nil, err
	}
	if err := p.Validate(); err != nil {
		return nil, err
	}
	s := newScaled(p)
	if len(p.Cases) == 0 || noLoad(s) && !s.weighs {
		return nothing(p), nil
	}
	sys, err := newSystem(s, p)
	if err != nil {
		return nil, err
	}
	if fits(start, p) {
		if sol, err := solveFrom(ctx, p, sys, nil, sys.warm(p, start), set, 0); err != nil || sol.Status == lp.Optimal || sol.Status == lp.Cancelled {
			return sol, err
		}
	}
	d, unbalanced, err := sys.elastic(ctx)
	if err != nil {
		return cancelled(p), nil
	}
	if unbalanced > mechanismShare {
		if sol := collapse(p, sys, d, s.lambda); sol != nil {
			return sol, nil
		}
	}
	if unbalanced <= mechanismShare && !s.limited() {
		return solveFrom(ctx, p, sys, nil, sys.start(d), set, 0)
	}
	return solveWithPenalty(ctx, p, s, set)
}

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

// solveWithPenalty solves with artificial forces, at rising prices as long as they are in use.
func solveWithPenalty(ctx context.Context, p *lp.Problem, s *scaled, set lp.Settings) (*lp.Solution, error) {
	plain, err := newSystem(s, p)
	if err != nil {
		return nil, err
	}
	penalty := firstPenalty
	iterations := 0
	for try := 1; ; try++ {
		t := s.withArtificial(penalty)
		sys, err := newSystem(t, p)
		if err != nil {
			return nil, err
		}
		d, _, err := sys.elastic(ctx)
		if err != nil {
			return cancelled(p), nil
		}
		sol, err := solveFrom(ctx, p, sys, plain, sys.start(d), set, iterations)
		if err != nil || sol.Status != lp.NoEquilibrium {
			return sol, err
		}
		if try == penalties {
			return sol, nil
		}
		iterations = sol.Iterations
		penalty *= penaltyFactor
	}
}

// solveFrom runs the method from x and finishes the answer. plain is the system without artificial forces, or nil if
// sys has none. Status NoEquilibrium means that artificial forces are in use.
func solveFrom(ctx context.Context, p *lp.Problem, sys, plain *system, x *iterate, set lp.Settings, done int) (*lp.Solution, error) {
	var warm *lp.Start
	gap := set.Gap / 2 // half for the path, half for scaling the displacements and repairing the forces
	for {
		out, err := sys.run(ctx, x, gap, set, done)
		if err != nil {
			sol := sys.answer(p, x)
			sol.Status, sol.Iterations = lp.Cancelled, out.iterations
			return sol, nil
		}
		done = out.iterations
		if sys.leans(x) {
			if out.status == lp.Optimal || out.status == lp.Trouble {
				sol := sys.answer(p, x)
				sol.Status, sol.Raw, sol.Iterations = lp.NoEquilibrium, true, done
				normalise(p, sol.Displacement)
				return sol, nil
			}
		}
		final := sys
		if plain != nil {
			final = plain
			x = sys.withoutArtificial(x)
		}
		y := final.repair(ctx, x, set)
		sol := final.answer(p, y)
		sol.Status, sol.Iterations = out.status, done
		if out.warm != nil {
			warm = sys.keep(out.warm)
		}
		sol.Warm = warm
		closed := set.Closed(sol.Objective, sol.Bound)
		if closed || out.status != lp.Optimal || gap < 1e-3*set.Gap {
			if sol.Status == lp.Trouble && closed && !sol.Raw {
				sol.Status = lp.Optimal
			}
			if sol.Status == lp.Optimal && (!closed || sol.Raw) {
				sol.Status = lp.Trouble
			}
			return sol, nil
		}
		if plain != nil { // go on in the system that has the artificial forces
			x = sys.withArtificialFrom(x)
		}
		gap /= 4
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

func noLoad(s *scaled) bool {
	for _, f := range s.load {
		if largest(f) > 0 {
			return false
		}
	}
	return true
}
