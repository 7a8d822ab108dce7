//go:build !(glpk && cgo)

package glpk

import (
	"context"
	"errors"

	"boughwork/lp"
)

// errBuild is the answer of a build without GLPK.
var errBuild = errors.New("solver glpk: this build has no GLPK; install the library GLPK 5 with its header glpk.h (Debian: " +
	"apt-get install libglpk-dev) and a C compiler, and build with CGO_ENABLED=1 and the tag: go build -tags glpk ./cmd/boughwork")

// Available reports whether this build has GLPK.
const Available = false

// Solve returns an error that says how to build with GLPK.
func (Solver) Solve(context.Context, *lp.Problem, *lp.Start, lp.Settings) (*lp.Solution, error) {
	return nil, errBuild
}
