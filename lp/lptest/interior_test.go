package lptest_test

import (
	"testing"

	"boughwork/lp/interior"
	"boughwork/lp/lptest"
)

// TestInterior fails if the interior-point method breaks any promise of a solver.
func TestInterior(t *testing.T) { lptest.Run(t, interior.Solver{}) }
