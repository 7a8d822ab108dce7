package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"boughwork/cmd/boughwork/internal/pipeline"
	"boughwork/ground/layout"
	"boughwork/lp"
)

func growCommand() *cobra.Command {
	var out, gap, solver string
	var set []string
	var quiet bool
	c := &cobra.Command{
		Use:   "grow BRIEF",
		Short: "find the layout of a brief, verify it and write the results",
		Long: `Read the brief (YAML, TOML or JSON) and its site plan, find the layout with the least volume, verify the record by
itself, and write the results: layout.json, overlay.geojson, sheet.svg, bars.csv, joints.csv, reactions.csv, cases.csv and
summary.txt. Progress goes to the standard error, the summary to the standard output. Ctrl-C stops the work and keeps
the best layout so far.

` + exitWords,
		Args: exactly(1, "the file of a brief, as in `boughwork grow brief.yaml`"),
		RunE: func(c *cobra.Command, args []string) error {
			for _, named := range []struct{ flag, key, value string }{{"gap", "solve.gap", gap}, {"solver", "solve.solver", solver}} {
				if c.Flags().Changed(named.flag) {
					set = append(set, named.key+"="+named.value)
				}
			}
			job := pipeline.Job{Brief: args[0], Overrides: set, Out: out, MadeBy: madeBy}
			var obs pipeline.Observer
			if !quiet {
				obs = newProgress(c.ErrOrStderr())
			}
			return grow(c, job, obs)
		},
	}
	f := c.Flags()
	f.StringVarP(&out, "out", "o", "", "`folder` of the results (default out/ and the title, in the working folder)")
	f.StringArrayVar(&set, "set", nil, "`key=value` above the brief, for example grid.deck_spacing_m=3; may be repeated")
	f.StringVar(&gap, "gap", "", "`share` between layout and bound at which to stop (solve.gap)")
	f.StringVar(&solver, "solver", "", "interior, or glpk in a build with the tag glpk (solve.solver)")
	f.BoolVarP(&quiet, "quiet", "q", false, "no progress; warnings and the summary only")
	return c
}

// grow runs the job, prints its summary and turns its outcome into an exit status.
func grow(c *cobra.Command, job pipeline.Job, obs pipeline.Observer) error {
	if obs == nil {
		obs = silent{&lines{w: c.ErrOrStderr()}}
	}
	outcome, err := pipeline.Grow(c.Context(), job, obs)
	if errors.Is(err, pipeline.ErrInput) {
		return exit(exitInput) // the issues have been told
	}
	if err != nil {
		return err
	}
	fmt.Fprint(c.OutOrStdout(), outcome.Summary)
	fmt.Fprintf(c.OutOrStdout(), "done in %s\n", seconds(outcome.Took))
	return status(outcome.Record, outcome.Verdict)
}

// status returns the exit status of a record as an error, or nil.
func status(rec *layout.Record, verdict *layout.Report) error {
	switch {
	case !verdict.OK():
		return exit(exitUnverified)
	case rec.Status == lp.NoEquilibrium.String():
		return exit(exitNoLayout)
	case rec.Status != lp.Optimal.String():
		return exit(exitStopped)
	}
	return nil
}
