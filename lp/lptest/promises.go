package lptest

import (
	"context"
	"errors"
	"fmt"
	"math"
	"reflect"

	"boughwork/lp"
)

// promises are what a solver owes its caller beside the right answer.
func promises() []check {
	return []check{
		{"has a name", func(s lp.Solver) error {
			if s.Name() == "" {
				return errors.New("the name is empty")
			}
			return nil
		}},
		{"malformed problems are errors", malformed},
		{"settings out of range are errors", badSettings},
		{"a context that has ended", ended},
		{"a context that ends on the way", endsOnTheWay},
		{"the problem is left as it was", untouched},
		{"the same answer twice, and at once", repeatable},
		{"a start does no harm", started},
		{"a start from fewer bars does no harm", startedFromLess},
		{"an iteration limit is no error", limitedIterations},
		{"a gap that is asked for loosely is kept", loose},
	}
}

func malformed(s lp.Solver) error {
	for _, c := range []struct {
		name  string
		spoil func(*lp.Problem)
	}{
		{"a load that is not a number", func(p *lp.Problem) { p.Cases[0].Load[0] = math.NaN() }},
		{"a load that is missing", func(p *lp.Problem) { p.Cases[0].Load = nil }},
		{"a row out of range", func(p *lp.Problem) { p.Bars.Row[0] = 99 }},
		{"a negative strength", func(p *lp.Problem) { p.Bars.Tension[0] = -1 }},
		{"a cost of zero", func(p *lp.Problem) { p.Bars.Cost[0] = 0 }},
		{"a fixed bar without an area", func(p *lp.Problem) { p.Bars.Fixed[0] = true }},
		{"blocks that do not cover the rows", func(p *lp.Problem) { p.Block = []int32{0, 1} }},
	} {
		p := bracket(1, 1, 1)
		c.spoil(p)
		if sol, err := s.Solve(context.Background(), p, nil, lp.Settings{}); err == nil {
			return fmt.Errorf("%s: status %v and no error", c.name, sol.Status)
		}
	}
	return nil
}

func badSettings(s lp.Solver) error {
	for _, set := range []lp.Settings{{Gap: -1}, {Gap: math.NaN()}, {Residual: 2}, {Iterations: -1}, {Absolute: -1}} {
		if _, err := s.Solve(context.Background(), bracket(1, 1, 1), nil, set); err == nil {
			return fmt.Errorf("%+v: no error", set)
		}
	}
	return nil
}

func ended(s lp.Solver) error {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	p := fan(3)
	sol, err := s.Solve(ctx, p, nil, lp.Settings{})
	if err != nil {
		return fmt.Errorf("error %v, want a status", err)
	}
	if sol.Status != lp.Cancelled {
		return fmt.Errorf("status %v, want %v", sol.Status, lp.Cancelled)
	}
	if r := lp.Check(p, sol); r.Shape != nil {
		return r.Shape
	}
	return nil
}

// endsOnTheWay cancels at the first report of progress. A solver that was as good as done may finish.
func endsOnTheWay(s lp.Solver) error {
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	p := randomProblem(99, 12, true)
	sol, err := s.Solve(ctx, p, nil, lp.Settings{Gap: AskedGap, Progress: func(lp.Iteration) { cancel() }})
	if err != nil {
		return fmt.Errorf("error %v, want a status", err)
	}
	if r := lp.Check(p, sol); r.Shape != nil {
		return r.Shape
	}
	switch sol.Status {
	case lp.Cancelled, lp.Optimal:
		return honest(p, sol)
	}
	return fmt.Errorf("status %v, want %v", sol.Status, lp.Cancelled)
}

// honest judges an answer that is not final: unless it is raw it is a layout, and its bound is what its displacements prove.
func honest(p *lp.Problem, sol *lp.Solution) error {
	if sol.Raw {
		return nil
	}
	return lp.Check(p, sol).Err(Equilibrium*10, Strength, math.Inf(1))
}

func untouched(s lp.Solver) error {
	for seed := range uint64(4) {
		p := randomProblem(seed, 5, true)
		before := clone(p)
		if _, err := solve(s, p); err != nil {
			return err
		}
		if !reflect.DeepEqual(p, before) {
			return fmt.Errorf("problem %d was changed", seed)
		}
	}
	return nil
}

func repeatable(s lp.Solver) error {
	p := randomProblem(7, 8, true)
	var sols [3]*lp.Solution
	var errs [3]error
	done := make(chan bool)
	for i := range sols {
		go func() {
			sols[i], errs[i] = solve(s, p)
			done <- true
		}()
	}
	for range sols {
		<-done
	}
	for i := range sols {
		if errs[i] != nil {
			return errs[i]
		}
		if !reflect.DeepEqual(sols[i], sols[0]) {
			return fmt.Errorf("two solves of one problem differ: objectives %v and %v", sols[i].Objective, sols[0].Objective)
		}
	}
	return nil
}

func limitedIterations(s lp.Solver) error {
	p := randomProblem(5, 12, true)
	sol, err := s.Solve(context.Background(), p, nil, lp.Settings{Gap: AskedGap, Iterations: 1})
	if err != nil {
		return fmt.Errorf("error %v, want a status", err)
	}
	if r := lp.Check(p, sol); r.Shape != nil {
		return r.Shape
	}
	switch sol.Status {
	case lp.IterationLimit, lp.Optimal, lp.Trouble:
		return honest(p, sol)
	}
	return fmt.Errorf("status %v, want %v", sol.Status, lp.IterationLimit)
}

func loose(s lp.Solver) error {
	for seed := range uint64(6) {
		p := randomProblem(seed, 7, seed%2 == 0)
		sol, err := s.Solve(context.Background(), p, nil, lp.Settings{Gap: 1e-3})
		if err != nil {
			return err
		}
		if sol.Status != lp.Optimal {
			return fmt.Errorf("problem %d: status %v", seed, sol.Status)
		}
		if err := lp.Check(p, sol).Err(Equilibrium, Strength, 1e-3); err != nil {
			return fmt.Errorf("problem %d: %w", seed, err)
		}
	}
	return nil
}
