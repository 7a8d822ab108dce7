package lptest

import (
	"errors"
	"fmt"

	"boughwork/lp"
)

// oracleProblems is how many small random problems go to gonum's simplex as well.
const oracleProblems = 24

// smallProblem returns a random problem of up to some 60 variables.
func smallProblem(seed uint64) *lp.Problem {
	for try := uint64(0); ; try++ {
		p := randomProblem(5000+100*seed+try, 1+int(seed)%4, seed%2 == 0)
		if variables(p) <= oracleVariables {
			return p
		}
	}
}

// oracleVariables is the size up to which problems go to gonum's simplex.
const oracleVariables = 70

// variables counts areas and forces.
func variables(p *lp.Problem) int { return p.Bars.Len() * (1 + len(p.Cases)) }

// oracle compares the solver with gonum's simplex.
func oracle() []check {
	var out []check
	for seed := range uint64(oracleProblems) {
		out = append(out, check{fmt.Sprintf("as gonum's simplex, %d", seed), func(s lp.Solver) error {
			return agrees(s, smallProblem(seed))
		}})
	}
	return append(out, check{"as gonum's simplex on what cannot be carried", func(s lp.Solver) error {
		for _, p := range []*lp.Problem{hinge(), square(), cable(), hangerOnly(kept(4), 10)} {
			if _, err := Simplex(p); !errors.Is(err, ErrInfeasible) {
				return fmt.Errorf("gonum: %v, want %v", err, ErrInfeasible)
			}
		}
		return nil
	}})
}

// agrees compares the solver's objective with the oracle's.
func agrees(s lp.Solver, p *lp.Problem) error {
	want, err := Simplex(p)
	if err != nil {
		return err
	}
	got, err := optimal(s, p)
	if err != nil {
		return err
	}
	if !near(got, want, costUnit(p)) {
		return fmt.Errorf("objective %.12g, gonum's simplex %.12g", got, want)
	}
	return nil
}
