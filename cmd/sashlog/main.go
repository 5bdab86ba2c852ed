// Command sashlog reads the sensor logs of a mixed-mode building and says
// whether it really runs in open mode. See README.md for how to use it; the
// verbs are wired here and hold no domain logic.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"
	"time"
	_ "time/tzdata" // local times must resolve on machines without a zone base

	"sashlog/configs"
)

// Exit codes of the contract.
const (
	exitDone        = 0
	exitRejected    = 1 // done, but more readings were rejected than the site tolerates
	exitUsage       = 2 // bad usage or site file
	exitSource      = 3 // a source could not be read
	exitWrite       = 4 // could not write, or a fault of ours
	exitInterrupted = 130
)

// gcPercent trades very little time for a third of the memory: nearly all of
// what an audit holds are columns that live until the end.
const gcPercent = 10

func main() {
	if os.Getenv("GOGC") == "" {
		debug.SetGCPercent(gcPercent)
	}
	os.Exit(run(os.Args[1:], process{stdout: os.Stdout, stderr: os.Stderr, env: os.Getenv, now: time.Now}))
}

// process is what a command may touch of the world outside.
type process struct {
	stdout, stderr io.Writer
	env            func(string) string
	now            func() time.Time
}

// run executes one command line and returns its exit code. It recovers panics:
// they are faults of ours, and earlier outputs stay.
func run(args []string, p process) (code int) {
	defer func() {
		if fault := recover(); fault != nil {
			fmt.Fprintf(p.stderr, "sashlog: a fault in sashlog itself: %v\nhint: nothing was overwritten; please report this with the lines below\n%s", fault, debug.Stack())
			code = exitWrite
		}
	}()
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	root := newRoot(p)
	root.SetArgs(args)
	root.SetOut(p.stdout)
	root.SetErr(p.stderr)
	err := root.ExecuteContext(ctx)
	if ctx.Err() != nil && err != nil {
		fmt.Fprintln(p.stderr, "sashlog: interrupted; nothing was overwritten")
		return exitInterrupted
	}
	return report(p.stderr, err)
}

// failure is an error with the exit code it leads to.
type failure struct {
	code int
	err  error
}

func (f *failure) Error() string { return f.err.Error() }
func (f *failure) Unwrap() error { return f.err }

func fail(code int, err error) error {
	if err == nil {
		return nil
	}
	return &failure{code, err}
}

// report prints an error as help and returns its exit code.
func report(stderr io.Writer, err error) int {
	var f *failure
	var problems configs.Problems
	switch {
	case err == nil:
		return exitDone
	case errors.As(err, &problems):
		for _, problem := range problems {
			fmt.Fprintln(stderr, printable(problem.Error()))
		}
		fmt.Fprintf(stderr, "sashlog: %d %s to mend first\n", len(problems), plural(len(problems), "problem", "problems"))
		return exitUsage
	case errors.As(err, &f):
		fmt.Fprintln(stderr, "sashlog: "+printable(f.Error()))
		return f.code
	}
	fmt.Fprintf(stderr, "sashlog: %s\nhint: sashlog --help lists the commands\n", printable(err.Error()))
	return exitUsage
}

func plural(n int, one, many string) string {
	if n == 1 {
		return one
	}
	return many
}
