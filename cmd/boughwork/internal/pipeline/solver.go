package pipeline

import (
	"errors"
	"fmt"

	"boughwork/lp"
	"boughwork/lp/glpk"
	"boughwork/lp/interior"
)

// errNoGLPK says what a build without GLPK lacks, before any work is done.
var errNoGLPK = errors.New("solver glpk: this build has no GLPK; install its library and header (Debian: apt-get install libglpk-dev) and a " +
	"C compiler, and run with the tag: go run -tags glpk ./cmd/boughwork ...; or leave the solver out, the program's own needs nothing")

// Solver returns the solver of the given name: interior, or glpk in a build with the tag glpk.
func Solver(name string) (lp.Solver, error) {
	switch name {
	case "interior":
		return interior.Solver{}, nil
	case "glpk":
		if !glpk.Available {
			return nil, errNoGLPK
		}
		return glpk.Solver{}, nil
	}
	return nil, fmt.Errorf("solver %q: want interior or glpk", name)
}
