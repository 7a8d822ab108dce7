package bench

import (
	"context"
	"math"
	"slices"
	"time"

	"boughwork/ground"
	"boughwork/ground/layout"
	"boughwork/lp"
)

// Job is a problem that is to be solved and measured.
type Job struct {
	Name      string
	Structure *ground.Structure
	Options   layout.Options // gap, solver and rounds; Progress is told of every run
	Runs      int            // how often; less than 1 is once
}

// Figures are what a job came to: one line of output. The layout is the same in every run; Seconds is the median of the
// runs that were finished, PeakMB the largest, Share that of all of them.
type Figures struct {
	Name        string   `json:"name"`
	Nodes       int      `json:"nodes"`
	Candidates  int64    `json:"candidates"`
	Cases       int      `json:"cases"`
	CasesSolved int      `json:"cases_solved"` // cases that the layout was solved for
	Volume      *float64 `json:"volume"`       // m3; null if there is no layout
	// Objective is what the bound belongs to, m3. It is left out if it is the volume: it differs where joints or bars in the
	// roof cost.
	Objective  *float64           `json:"objective,omitempty"`
	Bound      float64            `json:"bound"` // m3
	Gap        *float64           `json:"gap"`   // share of the objective; null if there is no layout
	Rounds     int                `json:"rounds"`
	Iterations int                `json:"iterations"` // of the solver in all rounds
	Seconds    float64            `json:"seconds"`    // wall time
	Runs       int                `json:"runs"`       // that were finished
	PeakMB     float64            `json:"peak_mb"`    // largest resident memory, MB of 1e6 bytes
	Status     string             `json:"status"`
	Share      map[string]float64 `json:"share"` // of the wall time, by stage
	Outcome    lp.Status          `json:"-"`
}

// The digits of the figures: more would be noise.
const (
	volumeDigits = 9 // significant
	gapDigits    = 4 // significant
	shareDigits  = 3 // significant
	timeDigits   = 4 // significant
	memoryDigits = 4 // significant
)

// once is one run.
type once struct {
	result     *layout.Result
	iterations int
	took       time.Duration
	peak       float64
	clock      *clock
}

// Run solves a job as often as it says. If the context ends, the figures are of the runs before, or of the one that was
// stopped if there are none, and the status says so. The error is that of a structure that makes no sense.
func Run(ctx context.Context, job Job) (Figures, error) {
	var runs []once
	var stopped bool
	for range max(1, job.Runs) {
		r, err := run(ctx, job)
		if err != nil {
			return Figures{}, err
		}
		stopped = r.result.Status == lp.Cancelled
		if stopped && len(runs) > 0 {
			break
		}
		runs = append(runs, r)
		if stopped {
			break
		}
	}
	f := figures(job, runs)
	if stopped {
		f.Outcome, f.Status = lp.Cancelled, lp.Cancelled.String()
		if len(runs) == 1 && runs[0].result.Status == lp.Cancelled {
			f.Runs = 0
		}
	}
	return f, nil
}

// run solves a job once.
func run(ctx context.Context, job Job) (once, error) {
	forget()
	begun := time.Now()
	out := once{clock: newClock(begun)}
	opt := job.Options
	opt.Progress = func(p layout.Progress) {
		out.clock.report(p, time.Now())
		out.iterations = max(out.iterations, p.Iterations)
		if job.Options.Progress != nil {
			job.Options.Progress(p)
		}
	}
	var err error
	out.result, err = layout.Solve(ctx, job.Structure, opt)
	end := time.Now()
	out.clock.stop(end)
	out.took, out.peak = end.Sub(begun), peak()
	return out, err
}

// figures sums up the runs of a job, of which there is one at least.
func figures(job Job, runs []once) Figures {
	last := runs[len(runs)-1]
	res := last.result
	f := Figures{
		Name: job.Name, Nodes: len(job.Structure.Nodes), Candidates: res.Candidates, Cases: len(job.Structure.Cases),
		Bound: rounded(res.Bound, volumeDigits), Rounds: len(res.Rounds), Iterations: last.iterations,
		Runs: len(runs), Outcome: res.Status, Status: res.Status.String(),
	}
	for _, governs := range res.Governs {
		if governs {
			f.CasesSolved++
		}
	}
	if len(res.Bars) > 0 {
		volume, gap := rounded(res.Volume, volumeDigits), rounded(res.Gap, gapDigits)
		f.Volume, f.Gap = &volume, &gap
		if objective := rounded(res.Objective, volumeDigits); objective != volume {
			f.Objective = &objective
		}
	}
	total := newClock(time.Time{})
	var seconds []float64
	for _, r := range runs {
		seconds = append(seconds, r.took.Seconds())
		f.PeakMB = max(f.PeakMB, rounded(r.peak, memoryDigits))
		total.add(r.clock)
	}
	f.Seconds, f.Share = rounded(median(seconds), timeDigits), total.share()
	return f
}

// median returns the middle one of some numbers, or the mean of the two in the middle.
func median(v []float64) float64 {
	v = slices.Sorted(slices.Values(v))
	n := len(v)
	return (v[(n-1)/2] + v[n/2]) / 2
}

// rounded returns v to so many significant digits.
func rounded(v float64, digits int) float64 {
	if v == 0 || math.IsInf(v, 0) || math.IsNaN(v) {
		return v
	}
	scale := math.Pow(10, float64(digits)-1-math.Floor(math.Log10(math.Abs(v))))
	return math.Round(v*scale) / scale
}
