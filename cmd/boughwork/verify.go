package main

import (
	"fmt"
	"os"

	"github.com/spf13/cobra"

	"boughwork/ground/layout"
)

func verifyCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "verify RECORD",
		Short: "judge a layout.json again, with nothing but the record",
		Long: `Judge a record with nothing but the record: equilibrium in every case, strength, limits of the footings, volume,
every candidate bar against the displacements, and the bound.

Exit status: 0 the record holds what it says; 1 it cannot be read; 4 it does not hold what it says.`,
		Args: exactly(1, "the file of a record, as in `boughwork verify layout.json`"),
		RunE: func(c *cobra.Command, args []string) error {
			rec, err := readRecord(args[0])
			if err != nil {
				return err
			}
			report, err := layout.Verify(rec)
			if err != nil {
				return fmt.Errorf("%s: %w", args[0], err)
			}
			out := c.OutOrStdout()
			fmt.Fprintf(out, "%s: %s, status %s, %d bars, %d cases\n", args[0], rec.Title, rec.Status, len(rec.Bars), len(rec.Cases))
			for _, check := range report.Checks {
				word := "holds "
				if !check.OK {
					word = "FAILED"
				}
				fmt.Fprintf(out, "  %s  %s: %.3g, at most %.3g; %s\n", word, check.Name, check.Value, check.Limit, check.Text)
			}
			if !report.OK() {
				fmt.Fprintln(out, "the record does not hold what it says")
				return exit(exitUnverified)
			}
			fmt.Fprintln(out, "the record holds what it says")
			return nil
		},
	}
}

func readRecord(path string) (*layout.Record, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, fmt.Errorf("cannot read the record: %w", err)
	}
	defer f.Close()
	rec, err := layout.Read(f)
	if err != nil {
		return nil, fmt.Errorf("%s: %w; `boughwork grow` writes records", path, err)
	}
	return rec, nil
}
