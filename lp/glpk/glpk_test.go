package glpk_test

import (
	"testing"

	"boughwork/lp/glpk"
	"boughwork/lp/lptest"
)

// TestConformance fails if GLPK, as this package states the problem to it, breaks any promise of a solver.
func TestConformance(t *testing.T) {
	if !glpk.Available {
		t.Skip("this build has no GLPK (tag glpk)")
	}
	lptest.Run(t, glpk.Solver{})
}
