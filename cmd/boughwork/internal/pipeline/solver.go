package pipeline

import (
	"fmt"

	"boughwork/lp"
	"boughwork/lp/interior"
)

// Solver returns the solver of the given name: interior, or glpk in a build with the tag glpk.
func Solver(name string) (lp.Solver, error) {
	switch name {
	case "interior":
		return interior.Solver{}, nil
	case "glpk":
		return glpkSolver()
	}
	return nil, fmt.Errorf("solver %q: want interior or glpk", name)
}
