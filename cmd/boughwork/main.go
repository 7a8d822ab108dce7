// Command boughwork turns a site plan and a few loads into a least-volume layout of the bars that carry a roof, with a
// certified bound on how good it is, and into files for other tools. `boughwork help` lists the commands.
package main

import (
	"context"
	"os"
	"os/signal"
	"syscall"
)

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	// The first Ctrl-C asks the work to stop and keeps what it has; a second one ends the program at once.
	context.AfterFunc(ctx, stop)
	os.Exit(run(ctx, os.Stdout, os.Stderr, os.Args[1:]))
}
