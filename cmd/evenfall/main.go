// Command evenfall helps people who observe stars late in their lives: what to
// take on which night, what to point at next, what it will look like. This
// package reads flags, wires the parts together, prints and sets the exit
// status; nothing else in the program does.
package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	_ "time/tzdata" // zones for display, on machines without their own

	_ "evenfall/tui/early" // before anything asks the terminal

	"evenfall/astro/clock"
	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/tui/term"
)

// Exit statuses, as promised to scripts.
const (
	exitDone    = 0
	exitRefused = 1 // a cell, row or key was refused; the rest is printed
	exitUsage   = 2
	exitFailure = 3 // disk, lock
	// 128 and the signal's number where one ended the program
)

// usageError is a mistake in the words of a call.
type usageError struct{ error }

func usagef(format string, a ...any) error { return usageError{fmt.Errorf(format, a...)} }

// errRefused says that something in the input was refused and reported, and
// the rest printed.
var errRefused = errors.New("some of the input was refused")

// world is what the program touches outside itself.
type world struct {
	in       io.Reader
	out, err io.Writer
	clock    clock.Clock
	width    int // columns of the terminal; 0: output is no terminal
	models   func(targets.Population) moment.Models
	terminal bool // both input and output are a terminal
}

func main() {
	w := world{in: os.Stdin, out: os.Stdout, err: os.Stderr, clock: clock.System{}, models: moment.NewModelsFor}
	w.width, w.terminal = terminalSize()
	os.Exit(execute(w, os.Args[1:]))
}

// execute runs one call and returns the exit status.
func execute(w world, args []string) int {
	err := rootCommand(w, args).Execute()
	var usage usageError
	var signalled term.Signalled
	switch {
	case errors.As(err, &signalled):
		fmt.Fprintln(w.err, "evenfall:", err)
		return signalled.Status()
	case err == nil:
		return exitDone
	case errors.Is(err, errRefused):
		return exitRefused
	case errors.As(err, &usage):
		fmt.Fprintln(w.err, "evenfall:", err)
		return exitUsage
	}
	fmt.Fprintln(w.err, "evenfall:", err)
	return exitFailure
}
