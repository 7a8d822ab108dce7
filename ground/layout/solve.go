// Package layout turns a ground structure into the layout linear program, solves it by member and case adding, certifies
// the result and keeps it as a record.
package layout

import (
	"boughwork/geom"
	"boughwork/lp"
)

// Options are the settings of a layout study. The zero value of a field means its default.
type Options struct {
	Gap       float64   // relative gap over all cases and all candidates at which to stop; default 1e-3
	Solver    lp.Solver // default: the interior-point method
	MaxRounds int       // largest number of rounds of member adding; default 200
	// Progress, if not nil, is called from the goroutine that called Solve, at every change worth showing.
	Progress func(Progress)
}

// Progress is a report while a layout is being found.
type Progress struct {
	Stage         string  // "candidates", "layout", "cases", "tidying"
	Done          float64 // share of the stage that is done, 0 to 1; an estimate
	Round         int
	Cases, AllOf  int // cases in the program so far, of all
	Bars          int // bars in the program now
	Iterations    int // of the solver, all rounds so far
	Volume, Bound float64
	Gap           float64
}

// Result is a layout in SI units.
type Result struct {
	Status    lp.Status
	Solver    string
	Bars      []Bar
	Objective float64 // m3
	Volume    float64 // m3, bars that cost
	Bound     float64 // m3, over all candidates and all cases
	Gap       float64
	// WorstViolation is the largest price / cost - 1 over all candidates before the displacements were scaled.
	WorstViolation float64
	Displacement   [][]geom.Vec // [case][node], m3/N, scaled to be feasible; zero at supports
	Governs        []bool       // [case]: the layout was solved for it
	Candidates     int64        // -1 if the study ended before they were counted
	Rounds         []Round
	Collapse       *Collapse // evidence with Status NoEquilibrium
}

// Bar is a bar of the layout.
type Bar struct {
	A, B  int
	Area  float64   // m2
	Force []float64 // N per case, tension positive
	Kept  bool
}

// Round is one round of member adding.
type Round struct {
	Cases, Bars   int
	Volume, Bound float64
}

// Collapse is the evidence that no layout exists.
type Collapse struct {
	Case        int        // the case whose loads drive the motion
	Motion      []geom.Vec // [node], scaled so that the largest component is 1
	Work        float64    // of the loads on the motion, less what feet and kept members can absorb, J
	LeastVolume float64    // any layout needs at least this much, m3; +Inf if no bar resists the motion at all
	// Others are motions of further cases, where only several together prove it: bars that weigh can hold down one side
	// of a roof that tips, but not both. Scaled as Motion is.
	Others []CaseMotion
}

// CaseMotion is a motion that the loads of a case drive.
type CaseMotion struct {
	Case   int
	Motion []geom.Vec
}

// Meta is what a record says beside the result.
type Meta struct {
	MadeBy      string // program and version
	BriefSHA256 string
	Context     RecordContext
}
