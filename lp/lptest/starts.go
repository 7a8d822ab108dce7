package lptest

import (
	"context"
	"fmt"
	"math"

	"boughwork/lp"
)

// started solves problems from starts of every kind, good and useless; the answer must not depend on them.
func started(s lp.Solver) error {
	for seed := range uint64(6) {
		p := randomProblem(seed+300, 6, seed%2 == 0)
		first, err := solve(s, p)
		if err != nil {
			return err
		}
		for _, c := range starts(p, first) {
			again, err := s.Solve(context.Background(), p, c.start, lp.Settings{Gap: AskedGap})
			if err != nil {
				return fmt.Errorf("problem %d, %s: %w", seed, c.name, err)
			}
			if again.Status != lp.Optimal || !near(again.Objective, first.Objective, costUnit(p)) {
				return fmt.Errorf("problem %d, %s: status %v, objective %.12g; without a start %.12g", seed, c.name,
					again.Status, again.Objective, first.Objective)
			}
			if err := lp.Check(p, again).Err(Equilibrium, Strength, AskedGap); err != nil {
				return fmt.Errorf("problem %d, %s: %w", seed, c.name, err)
			}
		}
	}
	return nil
}

type namedStart struct {
	name  string
	start *lp.Start
}

func starts(p *lp.Problem, sol *lp.Solution) []namedStart {
	at := func(area, force, displacement float64) *lp.Start {
		return &lp.Start{Area: times(sol.Area, area), Force: timesAll(sol.Force, force), Displacement: timesAll(sol.Displacement, displacement)}
	}
	out := []namedStart{
		{"the solution", at(1, 1, 1)},
		{"the solution, areas too large", at(3, 1, 1)},
		{"the solution, areas too small", at(0.3, 1, 1)},
		{"the solution, displacements too large", at(1, 1, 5)},
		{"displacements of the wrong sign", at(1, 1, -1)},
		{"forces of the wrong sign", at(1, -1, 1)},
		{"nothing", at(0, 0, 0)},
		{"far too large", at(1e6, 1e6, 1e6)},
		{"not a number", at(math.NaN(), math.NaN(), math.NaN())},
		{"no end", at(1, math.Inf(1), 1)},
		{"empty", &lp.Start{}},
		{"of another problem", &lp.Start{Area: make([]float64, 1), Force: sol.Force, Displacement: sol.Displacement}},
		{"with a case missing", &lp.Start{Area: sol.Area, Force: sol.Force[1:], Displacement: sol.Displacement}},
	}
	if sol.Warm != nil {
		out = append(out, namedStart{"the solver's own", sol.Warm})
	}
	return out
}

func times(x []float64, s float64) []float64 {
	y := make([]float64, len(x))
	for i, v := range x {
		y[i] = s * v
	}
	return y
}

func timesAll(x [][]float64, s float64) [][]float64 {
	y := make([][]float64, len(x))
	for k := range x {
		y[k] = times(x[k], s)
	}
	return y
}

// startedFromLess solves a problem from the solution of the same with fewer bars, as member adding does.
func startedFromLess(s lp.Solver) error {
	for seed := range uint64(8) {
		p := randomProblem(seed+400, 8, seed%2 == 0)
		less := &lp.Problem{Rows: p.Rows, Block: p.Block, At: p.At, Cases: p.Cases}
		var in []int
		for i := range p.Bars.Len() {
			if i%3 > 0 || p.Bars.Fixed[i] || !math.IsInf(p.Bars.Upper[i], 1) {
				addBar(less, p, i)
				in = append(in, i)
			}
		}
		first, err := solve(s, less)
		if err != nil {
			return err
		}
		want, err := optimal(s, p)
		if err != nil {
			return err
		}
		if first.Status == lp.NoEquilibrium {
			continue
		}
		from := &lp.Start{Area: first.Area, Force: first.Force, Displacement: first.Displacement}
		if first.Warm != nil {
			from = first.Warm
		}
		got, err := s.Solve(context.Background(), p, spread(from, in, p.Bars.Len()), lp.Settings{Gap: AskedGap})
		if err != nil {
			return err
		}
		if got.Status != lp.Optimal || !near(got.Objective, want, costUnit(p)) {
			return fmt.Errorf("problem %d: status %v, objective %.12g; without a start %.12g", seed, got.Status, got.Objective, want)
		}
		if err := lp.Check(p, got).Err(Equilibrium, Strength, AskedGap); err != nil {
			return fmt.Errorf("problem %d: %w", seed, err)
		}
	}
	return nil
}

// spread puts the entries of a start at the places of their bars among n; the others get nothing.
func spread(s *lp.Start, in []int, n int) *lp.Start {
	out := &lp.Start{Area: make([]float64, n), Displacement: s.Displacement}
	for x, i := range in {
		out.Area[i] = s.Area[x]
	}
	for _, q := range s.Force {
		full := make([]float64, n)
		for x, i := range in {
			full[i] = q[x]
		}
		out.Force = append(out.Force, full)
	}
	return out
}
