package bench

import (
	"time"

	"boughwork/ground/layout"
)

// The stages of layout.Progress that the clock must know by name.
const (
	stageCandidates = "candidates"
	stageLayout     = "layout"
)

// clock adds up the time of each stage of a layout from its reports. The rounds of the stage "layout" are reported when
// they end, all other stages when they begin; so the time between two reports belongs to the later one if either is of a
// round, and else to the earlier one. What comes before the first round belongs to it, save what "candidates" takes up to
// the next report: counting them and, if nothing is reported between, the first round.
type clock struct {
	stage string
	since time.Time
	spent map[string]time.Duration
}

func newClock(now time.Time) *clock {
	return &clock{stage: stageCandidates, since: now, spent: map[string]time.Duration{}}
}

// report notes a report of a stage.
func (c *clock) report(p layout.Progress, now time.Time) {
	owner := c.stage
	if owner != stageCandidates && (owner == stageLayout || p.Stage == stageLayout) {
		owner = p.Stage
	}
	c.spent[owner] += now.Sub(c.since)
	c.stage, c.since = p.Stage, now
}

// stop gives the rest of the time to the last stage.
func (c *clock) stop(now time.Time) {
	c.spent[c.stage] += now.Sub(c.since)
	c.since = now
}

// add adds the times of another clock that has stopped.
func (c *clock) add(o *clock) {
	for stage, t := range o.spent {
		c.spent[stage] += t
	}
}

// share returns the share of the time of each stage; they add up to 1.
func (c *clock) share() map[string]float64 {
	var total time.Duration
	for _, t := range c.spent {
		total += t
	}
	out := map[string]float64{}
	for stage, t := range c.spent {
		if total > 0 {
			out[stage] = rounded(t.Seconds()/total.Seconds(), shareDigits)
		}
	}
	return out
}
