package main

import (
	"encoding/json"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"
	"text/tabwriter"
	"time"

	"github.com/spf13/cobra"

	"boughwork/cmd/boughwork/internal/bench"
	"boughwork/cmd/boughwork/internal/brief"
	"boughwork/cmd/boughwork/internal/pipeline"
	"boughwork/ground/layout"
	"boughwork/lp"
)

// mostRuns bounds --runs: more says no more about the median.
const mostRuns = 1000

func benchCommand() *cobra.Command {
	var gap string
	var runs int
	var list, quiet bool
	c := &cobra.Command{
		Use:   "bench [NAME...]",
		Short: "solve problems of known size and measure time and memory",
		Long: `Solve problems of known size, measure what that takes, and print one JSON object a line: candidates, volume, bound,
gap, seconds, the peak of memory in MB (1e6 bytes), the share of the time of each stage. A NAME is one of those that
--list lists, or the file of a brief (.yaml, .yml, .toml, .json), whose study is then solved without writing files. Without
names the small problems are run: ` + strings.Join(bench.Small, ", ") + `.
Progress goes to the standard error. Ctrl-C stops the work and prints what there is.

` + exitWords,
		RunE: func(c *cobra.Command, args []string) error {
			if list {
				return listProblems(c.OutOrStdout())
			}
			if runs < 1 || runs > mostRuns {
				return fmt.Errorf("--runs: found %d; want a number from 1 to %d", runs, mostRuns)
			}
			if len(args) == 0 {
				args = bench.Small
			}
			obs := pipeline.Observer(silent{&lines{w: c.ErrOrStderr()}})
			if !quiet {
				obs = newProgress(c.ErrOrStderr())
			}
			jobs, err := benchJobs(args, gap, obs)
			if err != nil {
				return err
			}
			return measure(c, jobs, runs, obs)
		},
	}
	f := c.Flags()
	f.BoolVar(&list, "list", false, "list the problems with their nodes, load cases and gaps, and solve nothing")
	f.StringVar(&gap, "gap", "", "`share` between layout and bound at which to stop, in place of that of the problem")
	f.IntVar(&runs, "runs", 1, "solve each problem so `often` and give the median of the times")
	f.BoolVarP(&quiet, "quiet", "q", false, "no progress; the figures and what is wrong only")
	return c
}

// listProblems writes the table of named problems.
func listProblems(w io.Writer) error {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintln(t, "name\tnodes\tcases\tgap")
	for _, p := range bench.Problems {
		s := p.Build()
		fmt.Fprintf(t, "%s\t%d\t%d\t%g\n", p.Name, len(s.Nodes), len(s.Cases), p.Gap)
	}
	return t.Flush()
}

// benchJobs makes the structures of all names before any is solved, so that a wrong name costs no waiting. gap is "" for
// that of each problem.
func benchJobs(names []string, gap string, obs pipeline.Observer) ([]bench.Job, error) {
	share, err := shareOfGap(gap)
	if err != nil {
		return nil, err
	}
	jobs := make([]bench.Job, len(names))
	for i, name := range names {
		if bench.IsBrief(name) {
			continue
		}
		p, err := bench.Find(name)
		if err != nil {
			return nil, err
		}
		jobs[i] = bench.Job{Name: name, Structure: p.Build(), Options: layout.Options{Gap: p.Gap}}
	}
	for i, name := range names {
		if !bench.IsBrief(name) {
			continue
		}
		job, issues, err := bench.Study(name)
		for _, issue := range issues {
			obs.Issue(issue)
		}
		if issues.Err() != nil {
			return nil, exit(exitInput) // the issues have been told
		}
		if err != nil {
			return nil, err
		}
		jobs[i] = job
	}
	for i := range jobs {
		if share > 0 {
			jobs[i].Options.Gap = share
		}
	}
	return jobs, nil
}

// shareOfGap reads the flag --gap within the limits of the key of a brief; 0 means that it was not given.
func shareOfGap(text string) (float64, error) {
	if text == "" {
		return 0, nil
	}
	at := slices.IndexFunc(brief.Table, func(k brief.Key) bool { return k.Path == "solve.gap" })
	limits := brief.Table[at].Limits
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || !(v >= limits.Min && v <= limits.Max) {
		return 0, fmt.Errorf("--gap: found %q; want %s", text, limits)
	}
	return v, nil
}

// measure runs the jobs in order and prints the figures of each when it is done. The exit status is that of the first
// that did not reach its gap; a job that was stopped is the last.
func measure(c *cobra.Command, jobs []bench.Job, runs int, obs pipeline.Observer) error {
	out := json.NewEncoder(c.OutOrStdout())
	var worst error
	for _, job := range jobs {
		job.Runs = runs
		job.Options.Progress = func(p layout.Progress) { obs.Step(benchStep(job.Name, p)) }
		obs.Begin(job.Name)
		begun := time.Now()
		f, err := bench.Run(c.Context(), job)
		if err != nil {
			obs.End(job.Name, "stopped", time.Since(begun))
			return fmt.Errorf("%s: %w", job.Name, err)
		}
		obs.End(job.Name, f.Status, time.Since(begun))
		if err := out.Encode(f); err != nil {
			return err
		}
		switch {
		case worst != nil || f.Outcome == lp.Optimal:
		case f.Outcome == lp.NoEquilibrium:
			worst = exit(exitNoLayout)
		default:
			worst = exit(exitStopped)
		}
		if c.Context().Err() != nil {
			break
		}
	}
	return worst
}

// benchStep turns a report from the search for a layout into one for an observer. Only the rounds move the bar: other
// stages come between them, each with a share of its own.
func benchStep(name string, p layout.Progress) pipeline.Step {
	s := pipeline.Step{Stage: name, Round: p.Round, Cases: p.Cases, AllOf: p.AllOf, Bars: p.Bars, Volume: p.Volume, Bound: p.Bound, Gap: p.Gap}
	if p.Stage == "layout" {
		s.Done = p.Done
	} else {
		s.Part = p.Stage
	}
	return s
}
