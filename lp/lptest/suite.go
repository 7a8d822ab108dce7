// Package lptest is the conformance suite that every solver of the layout program runs: published and hand-made problems
// with known answers, loads that nothing can carry, promises about errors, cancelling and repeatability, random problems
// with the laws that hold for them, and gonum's dense simplex as an oracle for small ones.
package lptest

import (
	"context"
	"fmt"
	"math"
	"testing"

	"boughwork/lp"
)

// The tolerances of the suite.
const (
	// AskedGap is the relative gap that the suite asks of a solver.
	AskedGap = 1e-8
	// Equilibrium is the largest unbalanced force, relative to the largest load, that the record promises.
	Equilibrium = 1e-8
	// Strength is the largest relative excess of a force or an area over its limit: rounding.
	Strength = 1e-9
	// Agreement is the largest relative difference of an objective from the known answer, or between two solvers: ten
	// times the gap asked.
	Agreement = 1e-7
	// Nothing is an objective that counts as 0, in units of the cost of carrying the largest load over a unit of cost.
	Nothing = 1e-7
	// Ray is the largest price that a collapse motion may leave at a bar, relative to the work of the loads per cost of
	// carrying the largest load: any layout would cost a million times what a sensible one does.
	Ray = 1e-6
)

// check is one test of a solver.
type check struct {
	name string
	run  func(lp.Solver) error
}

// Run tests that s keeps every promise that package lp makes for a solver.
func Run(t *testing.T, s lp.Solver) {
	for _, c := range checks() {
		t.Run(c.name, func(t *testing.T) {
			if err := c.run(s); err != nil {
				t.Error(err)
			}
		})
	}
}

func checks() []check {
	var all []check
	for _, group := range [][]check{published(), handMade(), hopeless(), promises(), random(), oracle()} {
		all = append(all, group...)
	}
	return all
}

// solve solves p with the gap that the suite asks for.
func solve(s lp.Solver, p *lp.Problem) (*lp.Solution, error) {
	if err := p.Validate(); err != nil {
		return nil, fmt.Errorf("the suite's own problem is malformed: %w", err)
	}
	return s.Solve(context.Background(), p, nil, lp.Settings{Gap: AskedGap})
}

// optimal solves p and judges the answer on the problem itself; it returns the objective.
func optimal(s lp.Solver, p *lp.Problem) (float64, error) {
	sol, err := solve(s, p)
	if err != nil {
		return 0, err
	}
	if sol.Status != lp.Optimal {
		return 0, fmt.Errorf("status %v, want %v (objective %g, bound %g)", sol.Status, lp.Optimal, sol.Objective, sol.Bound)
	}
	if sol.Raw {
		return 0, fmt.Errorf("optimal, but said to be raw")
	}
	r := lp.Check(p, sol)
	if r.Shape == nil && r.Objective <= Nothing*costUnit(p) {
		// No relative gap: judge it by the cost of carrying the load.
		unit := costUnit(p)
		r.Gap, r.ObjectiveSaid, r.BoundSaid = (r.Objective-r.Bound)/unit, 0, 0
	}
	return r.Objective, r.Err(Equilibrium, Strength, AskedGap)
}

// costUnit is the mean cost of carrying the largest load with one bar.
func costUnit(p *lp.Problem) float64 {
	b, sum, n := &p.Bars, 0.0, 0
	for i := range b.Len() {
		if !b.Fixed[i] {
			sum += b.Cost[i] / math.Max(b.Tension[i], b.Compression[i])
			n++
		}
	}
	top := 0.0
	for _, c := range p.Cases {
		for _, f := range c.Load {
			top = math.Max(top, math.Abs(f))
		}
	}
	if n == 0 || top == 0 {
		return 1
	}
	return sum / float64(n) * top
}

// near reports whether two objectives agree.
func near(a, b, unit float64) bool {
	return math.Abs(a-b) <= Agreement*math.Max(math.Abs(a), math.Abs(b)) || math.Max(math.Abs(a), math.Abs(b)) <= Nothing*unit
}

// answer is a problem whose least objective is known.
type answer struct {
	name string
	p    *lp.Problem
	want float64
}

func (a answer) check() check {
	return check{a.name, func(s lp.Solver) error {
		got, err := optimal(s, a.p)
		if err != nil {
			return err
		}
		if !near(got, a.want, costUnit(a.p)) {
			return fmt.Errorf("objective %.12g, want %.12g", got, a.want)
		}
		return nil
	}}
}

func checksOf(as []answer) []check {
	var out []check
	for _, a := range as {
		out = append(out, a.check())
	}
	return out
}
