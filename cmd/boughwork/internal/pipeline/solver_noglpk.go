//go:build !glpk

package pipeline

import (
	"errors"

	"boughwork/lp"
)

// glpkSolver says what a build without the tag lacks.
func glpkSolver() (lp.Solver, error) {
	return nil, errors.New("solver glpk: this build has no GLPK; install its library and headers (Debian: apt-get install libglpk-dev, " +
		"and a C compiler) and run with `go run -tags glpk ./cmd/boughwork ...`, or leave the solver out: the program's own needs nothing")
}
