// Package glpk solves the layout program with the simplex method of the C library GLPK 5, as a second opinion on the
// project's own solver: nothing is shared but the statement of the problem. It returns a vertex, exact to rounding. It is
// built with the tag glpk (cgo); without the tag Solve returns an error that says what to install.
package glpk

// Solver is GLPK's primal simplex method, and the dual where that fails. The zero value is ready for use, from several goroutines. A start is not used.
//
// Both stall on programs of a few hundred bars and three or more cases, which are very degenerate: Status IterationLimit or
// Trouble, sometimes after minutes.
//
// Settings.Iterations counts interior-point iterations, each of which costs as much as a pivot on every row; so the limit
// on pivots is Iterations times the number of rows of the program. Progress is called about five times a second.
type Solver struct{}

// Name returns "glpk".
func (Solver) Name() string { return "glpk" }
