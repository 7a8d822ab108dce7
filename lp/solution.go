package lp

import "context"

// Status is the outcome of a solve. It is not an error: an error is for input that makes no sense.
type Status uint8

// The outcomes.
const (
	Optimal        Status = iota // gap reached
	NoEquilibrium                // the loads cannot be carried: Solution.Displacement is the collapse motion
	Unbounded                    // cannot happen while all costs are positive; reported by a general solver
	IterationLimit               // best iterate so far
	Cancelled                    // the context ended; best iterate so far
	Trouble                      // numerical trouble before the gap was reached; best iterate so far
)

// String returns the word for the status that the record and the terminal use.
func (s Status) String() string {
	return [...]string{"optimal", "no equilibrium", "unbounded", "iteration limit", "cancelled", "numerical trouble"}[s]
}

// Solution is what a solver returns.
type Solution struct {
	Status Status
	Area   []float64   // a_i, one a bar
	Force  [][]float64 // q_ik as Force[k][i], tension positive
	// Displacement is u_k as Displacement[k][row]. With Status NoEquilibrium it is a motion that the loads drive and
	// that no bar resists: sum_k f_k . u_k > 0 while v_i <= 0 up to rounding for every bar.
	Displacement [][]float64
	Objective    float64 // sum c_i a_i
	Bound        float64 // dual value of Displacement after scaling to feasibility over the bars of this problem
	Iterations   int
	// Warm is a point on the way to the solution from which a similar problem is best started: the solution itself is too
	// near the border. Nil if the solver has none.
	Warm *Start
	// Raw is true if Area and Force do not satisfy equilibrium (nothing feasible was found).
	Raw bool
}

// Gap returns (objective - bound) / objective, or 0 if the objective is 0.
func (s *Solution) Gap() float64 {
	if s.Objective == 0 {
		return 0
	}
	return (s.Objective - s.Bound) / s.Objective
}

// Solver solves layout programs. The conformance suite lptest.Run says what every solver must promise.
type Solver interface {
	// Name returns a short name for messages and the record.
	Name() string
	// Solve solves p. It returns an error only for a malformed problem; every outcome of the mathematics is a Status.
	// start may be nil. Cancelling ctx ends the solve within a second with Status Cancelled.
	Solve(ctx context.Context, p *Problem, start *Start, set Settings) (*Solution, error)
}

// Start is a primal and dual point to start from, in the order of the problem that it is for; a solver may ignore it.
// Forces are to be near equilibrium; areas may be too small and displacements too large: the solver mends that.
type Start struct {
	Area         []float64
	Force        [][]float64
	Displacement [][]float64
}
