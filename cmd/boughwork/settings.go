package main

import (
	"github.com/spf13/cobra"

	"boughwork/cmd/boughwork/internal/brief"
)

func settingsCommand() *cobra.Command {
	var markdown bool
	c := &cobra.Command{
		Use:   "settings",
		Short: "list every key of a brief with its unit, default and meaning",
		Long: `List every key of a brief: what it takes, its default, the environment variable that overrides it, what it means.
[] in a key stands for an element of a list.`,
		Args: cobra.NoArgs,
		RunE: func(c *cobra.Command, _ []string) error {
			if markdown {
				return brief.WriteMarkdown(c.OutOrStdout())
			}
			return brief.WriteText(c.OutOrStdout())
		},
	}
	c.Flags().BoolVar(&markdown, "markdown", false, "write a Markdown table instead, as in the README")
	return c
}
