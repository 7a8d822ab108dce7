package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"runtime/debug"
	"strings"

	"github.com/spf13/cobra"

	"boughwork/geom"
)

// The exit statuses.
const (
	exitOK         = 0 // done
	exitInput      = 1 // wrong input or usage, or a file that cannot be read or written
	exitNoLayout   = 2 // the loads cannot be carried: no layout exists
	exitStopped    = 3 // stopped before the gap was reached: cancelled, limit of rounds, numerical trouble
	exitUnverified = 4 // the record does not hold what it says
)

const exitWords = `Exit status: 0 done; 1 wrong input or usage, or a file that cannot be read or written; 2 no layout exists (the
loads cannot be carried); 3 stopped early (cancelled, limit of rounds, numerical trouble), with the best layout so
far; 4 the record does not hold what it says.`

// version is the version of the program; records carry it.
const version = "0.1.0"

// madeBy is what a record says of the program.
const madeBy = "boughwork " + version

// exit is an error that carries an exit status. Its text, if any, has been told to the user already.
type exit int

func (e exit) Error() string { return fmt.Sprintf("exit status %d", int(e)) }

// refused is input that cannot be used, with located issues.
type refused geom.Issues

func (r refused) Error() string { return geom.Issues(r).Err().Error() }

// run is the whole program: it reads args, writes results to stdout and everything else to stderr, and returns the
// exit status.
func run(ctx context.Context, stdout, stderr io.Writer, args []string) int {
	root := command()
	root.SetOut(stdout)
	root.SetErr(stderr)
	root.SetArgs(args)
	err := root.ExecuteContext(ctx)
	var code exit
	var issues refused
	switch {
	case err == nil:
		return exitOK
	case errors.As(err, &code):
		return int(code)
	case errors.As(err, &issues):
		for _, i := range issues {
			fmt.Fprintln(stderr, i)
		}
	default:
		fmt.Fprintf(stderr, "error: %s\n", strings.TrimSpace(err.Error()))
	}
	return exitInput
}

// command returns the root command with all commands in it.
func command() *cobra.Command {
	root := &cobra.Command{
		Use:   "boughwork COMMAND",
		Short: "least-volume layouts for branching roof supports, with a certified bound",
		Long: `boughwork reads a brief (a site plan, loads, material, settings) and finds the bars that carry the roof with the
least material, with a bound that no layout on the same ground structure can go below.

` + exitWords,
		Version:       version + " (" + build() + ")",
		SilenceErrors: true,
		SilenceUsage:  true,
		Args:          knownCommand,
		RunE:          func(c *cobra.Command, _ []string) error { return c.Help() },
	}
	root.SetVersionTemplate("boughwork {{.Version}}\n")
	root.SetHelpTemplate(helpTemplate)
	root.SuggestionsMinimumDistance = 2
	root.CompletionOptions.DisableDefaultCmd = true
	root.AddCommand(newCommand(), growCommand(), verifyCommand(), benchCommand(), settingsCommand())
	return root
}

// knownCommand refuses a word that is no command, with the commands that are near it.
func knownCommand(root *cobra.Command, args []string) error {
	if len(args) == 0 {
		return nil
	}
	hint := "`boughwork help` lists the commands"
	if near := root.SuggestionsFor(args[0]); len(near) > 0 {
		hint = fmt.Sprintf("did you mean %q?", near[0])
	}
	return fmt.Errorf("there is no command %q; %s", args[0], hint)
}

// build names the toolchain and the revision that the program was built from, as far as they are known.
func build() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "unknown build"
	}
	words := []string{info.GoVersion}
	for _, s := range info.Settings {
		if s.Key == "vcs.revision" && len(s.Value) >= 12 {
			words = append(words, "revision "+s.Value[:12])
		}
	}
	return strings.Join(words, ", ")
}
