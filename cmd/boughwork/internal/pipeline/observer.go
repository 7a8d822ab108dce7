// Package pipeline holds the order of the stages of a study, from the brief to the files. It is the only place that
// knows that order; the commands, the page and the trials all go through it.
package pipeline

import (
	"time"

	"boughwork/geom"
)

// The stages of a study in their order.
const (
	StageBrief  = "brief"
	StageSite   = "site"
	StageGround = "ground structure"
	StageLayout = "layout"
	StageVerify = "verify"
	StageFiles  = "files"
)

// Stages lists the stages in their order.
var Stages = []string{StageBrief, StageSite, StageGround, StageLayout, StageVerify, StageFiles}

// Observer is told what happens in a study, from the goroutine that runs it.
type Observer interface {
	// Begin says that a stage begins.
	Begin(stage string)
	// Step says how far the stage is.
	Step(Step)
	// End says that the stage is over, with what came out of it in a few words and the time it took.
	End(stage, result string, took time.Duration)
	// Issue is something that is wrong or worth saying.
	Issue(geom.Issue)
}

// Step is how far a stage is. Volumes in m3; a volume or a bound that is not known yet is 0.
type Step struct {
	Stage         string
	Part          string  // what the stage is at, one word; may be empty
	Done          float64 // share of the stage that is done, 0 to 1; an estimate
	Round         int
	Cases, AllOf  int
	Bars          int
	Volume, Bound float64
	Gap           float64
}

// quiet is an observer that does nothing.
type quiet struct{}

func (quiet) Begin(string)                      {}
func (quiet) Step(Step)                         {}
func (quiet) End(string, string, time.Duration) {}
func (quiet) Issue(geom.Issue)                  {}
