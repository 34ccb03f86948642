// Command borewright answers what pressure a line takes, as a service and on the
// command line.
package main

import (
	"fmt"
	"io"
	"os"
	"os/signal"
	"syscall"
)

// The exit codes, the same for every command.
const (
	exitOK       = 0
	exitFindings = 1 // the program did its work and found something
	exitUsage    = 2 // arguments or input that cannot be used
	exitFault    = 3 // the program could not do its work
)

// process is what a command has of the world.
type process struct {
	stdin          io.Reader
	stdout, stderr io.Writer
	terminal       bool // a person reads stdout
	getenv         func(string) string
	// signals is asked for by a command that stops in good order; the others are
	// stopped by the signal itself.
	signals func() <-chan os.Signal
}

// command is one word behind borewright.
type command struct {
	name, summary string
	run           func(p *process, args []string) int
}

// commands lists them in the order of the help.
func commands() []command {
	return []command{
		{"serve", "answer requests over HTTP", serve},
		{"calc", "answer a request document, NDJSON or CSV without a server", calculate},
		{"healthcheck", "ask a server on this machine whether it is ready", healthcheck},
		{"version", "print the version", printVersion},
		{"help", "print this help", printHelp},
	}
}

func main() {
	p := &process{stdin: os.Stdin, stdout: os.Stdout, stderr: os.Stderr, terminal: isTerminal(os.Stdout), getenv: os.Getenv, signals: stopSignals}
	os.Exit(dispatch(p, os.Args[1:]))
}

// stopSignals are the signals by which people and supervisors stop a process. Two
// places: a second one must be seen while the first is being served.
func stopSignals() <-chan os.Signal {
	signals := make(chan os.Signal, 2)
	signal.Notify(signals, os.Interrupt, syscall.SIGTERM)
	return signals
}

// isTerminal reports whether a file is one that people look at. The null device is of
// the same kind, and nobody looks at it.
func isTerminal(f *os.File) bool {
	info, err := f.Stat()
	if err != nil || info.Mode()&os.ModeCharDevice == 0 {
		return false
	}
	null, err := os.Stat(os.DevNull)
	return err != nil || !os.SameFile(info, null)
}

func dispatch(p *process, args []string) int {
	if len(args) == 0 {
		writeHelp(p.stderr)
		return exitUsage
	}
	name := args[0]
	if name == "-h" || name == "--help" || name == "-help" {
		name = "help"
	}
	for _, c := range commands() {
		if c.name == name {
			return c.run(p, args[1:])
		}
	}
	return p.usage("there is no command %q; borewright help lists them", name)
}

// usage says on stderr why the arguments cannot be used.
func (p *process) usage(format string, args ...any) int {
	fmt.Fprintf(p.stderr, "borewright: "+format+"\n", args...)
	return exitUsage
}

func printHelp(p *process, args []string) int {
	if len(args) > 0 {
		return p.usage("help takes no arguments; borewright COMMAND --help tells about one command")
	}
	writeHelp(p.stdout)
	return exitOK
}

func writeHelp(w io.Writer) {
	fmt.Fprintln(w, "Borewright puts a defensible pressure drop on every line of a design.")
	fmt.Fprintln(w, "\nUsage: borewright COMMAND [FLAGS]")
	fmt.Fprintln(w)
	for _, c := range commands() {
		fmt.Fprintf(w, "  %-10s %s\n", c.name, c.summary)
	}
	fmt.Fprintln(w, "\nborewright COMMAND --help lists the flags of a command.")
	fmt.Fprintln(w, "Exit codes: 0 done, 1 findings, 2 unusable arguments or input, 3 the program could not do its work.")
}
