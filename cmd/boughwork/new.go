package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"boughwork/cmd/boughwork/internal/starter"
)

func newCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "new DIR",
		Short: "write a brief and a site plan to start from",
		Long: `Write brief.yaml and site.geojson into the folder DIR, which is made if need be. They are small, invented, commented,
and run as they are. Files that are there already are never overwritten.`,
		Args: exactly(1, "the folder to write into, as in `boughwork new mystudy`"),
		RunE: func(c *cobra.Command, args []string) error {
			paths, err := starter.Write(args[0])
			if err != nil {
				return err
			}
			out := c.OutOrStdout()
			for _, p := range paths {
				fmt.Fprintf(out, "wrote %s\n", p)
			}
			fmt.Fprintf(out, "next: boughwork grow %s\n", paths[0])
			return nil
		},
	}
}

// exactly refuses any other number of arguments than n and says what is wanted.
func exactly(n int, want string) cobra.PositionalArgs {
	return func(c *cobra.Command, args []string) error {
		if len(args) != n {
			return fmt.Errorf("%s: found %d arguments; want %s", c.CommandPath(), len(args), want)
		}
		return nil
	}
}
