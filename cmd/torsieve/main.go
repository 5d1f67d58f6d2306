// Command torsieve turns ligands into Boltzmann-weighted ensembles of
// conformers. It knows options, messages, exit statuses, the terminal and the
// clock, and which tiers there are; it knows no chemistry.
package main

import (
	"context"
	"errors"
	"os"
	"os/signal"
	"syscall"

	"gonum.org/v1/gonum/blas/blas64"
)

// Exit statuses, as README.md promises them.
const (
	exitDone    = 0
	exitNothing = 1   // unreadable input, wrong options
	exitPartly  = 2   // finished, but something failed or was refused
	exitStopped = 130 // by a signal
)

// errInterrupted is the cause of a context that a signal ended.
var errInterrupted = errors.New("stopped by a signal")

func main() {
	blas64.Use(fastProducts{})
	ctx, cancel := context.WithCancelCause(context.Background())
	signals := make(chan os.Signal, 2)
	signal.Notify(signals, os.Interrupt, syscall.SIGTERM, syscall.SIGHUP)
	go func() {
		<-signals
		cancel(errInterrupted)
		<-signals // the second one does not wait
		os.Exit(exitStopped)
	}()
	os.Exit(run(ctx, os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
}
