package lp

import (
	"fmt"
	"math"
)

// Settings are the tolerances and limits of a solve. The zero value of a field means its default.
type Settings struct {
	// Gap is the relative gap (objective - bound) / objective at which a solve stops. Default 1e-6: two orders below
	// the default gap of a whole study (1e-3), and reached in a few more iterations since convergence is fast at the end.
	Gap float64
	// Absolute is an absolute gap, in units of the objective, that is good enough as well. Default 0: none. For problems
	// whose objective may be as good as zero.
	Absolute float64
	// Ceiling is an objective above which an answer is of no use: a solve may end, with status IterationLimit, as soon as
	// it sees that the objective must be larger. Default 0: none.
	Ceiling float64
	// Residual is the largest unbalanced force that is left at a row, relative to the largest load. Default 1e-9: an
	// order below the 1e-8 that the record promises.
	Residual float64
	// Iterations is the largest number of interior-point iterations. Default 200: four times what hard cases need.
	Iterations int
	// Progress, if not nil, is called after every iteration.
	Progress func(Iteration)
}

// Iteration is a report of one iteration.
type Iteration struct {
	Number           int
	Objective, Bound float64
	Residual         float64
}

// Closed reports whether an objective and a bound are near enough to each other.
func (s Settings) Closed(objective, bound float64) bool {
	return objective-bound <= math.Max(s.Gap*math.Abs(objective), s.Absolute)
}

// WithDefaults fills fields that are zero, and validates the rest.
func (s Settings) WithDefaults() (Settings, error) {
	if s.Gap == 0 {
		s.Gap = 1e-6
	}
	if s.Residual == 0 {
		s.Residual = 1e-9
	}
	if s.Iterations == 0 {
		s.Iterations = 200
	}
	switch {
	case !(s.Gap > 0 && s.Gap < 1):
		return s, fmt.Errorf("lp: gap %g: want a number between 0 and 1", s.Gap)
	case !(s.Residual > 0 && s.Residual < 1):
		return s, fmt.Errorf("lp: residual %g: want a number between 0 and 1", s.Residual)
	case !(s.Absolute >= 0):
		return s, fmt.Errorf("lp: absolute gap %g: want zero or a positive number", s.Absolute)
	case !(s.Ceiling >= 0):
		return s, fmt.Errorf("lp: ceiling %g: want zero or a positive number", s.Ceiling)
	case s.Iterations < 0:
		return s, fmt.Errorf("lp: %d iterations: want a positive number", s.Iterations)
	}
	return s, nil
}
