package main

import (
	"errors"
	"flag"
	"fmt"
	"io"
	"strings"
)

// environmentName is where a flag is read from when it is not on the command
// line: --drain-delay is BOREWRIGHT_DRAIN_DELAY.
func environmentName(flagName string) string {
	return "BOREWRIGHT_" + strings.ToUpper(strings.ReplaceAll(flagName, "-", "_"))
}

// errHelp is not a failure: the flags were asked for and have been printed.
var errHelp = errors.New("help was asked for")

// parseFlags reads args, and the environment for each flag that args do not
// name. Nothing is ignored: a stray argument is an error.
func parseFlags(p *process, fs *flag.FlagSet, args []string) error {
	fs.SetOutput(io.Discard) // errors are printed once, by the command
	if err := fs.Parse(args); errors.Is(err, flag.ErrHelp) {
		printFlags(p, fs)
		return errHelp
	} else if err != nil {
		return err
	}
	if fs.NArg() > 0 {
		return fmt.Errorf("unexpected argument %q", fs.Arg(0))
	}
	return readEnvironment(p, fs)
}

// parseFileFlags is parseFlags for a command that also takes one file, before or
// behind its flags.
func parseFileFlags(p *process, fs *flag.FlagSet, args []string) (string, error) {
	fs.SetOutput(io.Discard)
	file := ""
	for {
		if err := fs.Parse(args); errors.Is(err, flag.ErrHelp) {
			printFlags(p, fs)
			return "", errHelp
		} else if err != nil {
			return "", err
		}
		if fs.NArg() == 0 {
			break
		}
		if file != "" {
			return "", fmt.Errorf("unexpected argument %q", fs.Arg(0))
		}
		file, args = fs.Arg(0), fs.Args()[1:]
	}
	if file == "" {
		return "", errors.New("name the file to read, or - for standard input")
	}
	return file, readEnvironment(p, fs)
}

func readEnvironment(p *process, fs *flag.FlagSet) error {
	given := map[string]bool{}
	fs.Visit(func(f *flag.Flag) { given[f.Name] = true })
	var wrong []error
	fs.VisitAll(func(f *flag.Flag) {
		name := environmentName(f.Name)
		value := p.getenv(name)
		if given[f.Name] || value == "" {
			return
		}
		if err := fs.Set(f.Name, value); err != nil {
			wrong = append(wrong, fmt.Errorf("invalid value %q in %s: %w", value, name, err))
		}
	})
	return errors.Join(wrong...)
}

func printFlags(p *process, fs *flag.FlagSet) {
	fmt.Fprintf(p.stdout, "Usage: borewright %s [FLAGS]\n\n", fs.Name())
	fs.VisitAll(func(f *flag.Flag) {
		fmt.Fprintf(p.stdout, "  --%s\n      %s", f.Name, f.Usage)
		if f.DefValue != "" {
			fmt.Fprintf(p.stdout, " (default %s)", f.DefValue)
		}
		fmt.Fprintf(p.stdout, "\n      environment: %s\n", environmentName(f.Name))
	})
}

// choice is a flag that takes one of a few words.
type choice struct {
	value   string
	allowed []string
}

func (c *choice) String() string { return c.value }

func (c *choice) Set(v string) error {
	for _, a := range c.allowed {
		if v == a {
			c.value = v
			return nil
		}
	}
	return fmt.Errorf("say %s", strings.Join(c.allowed, " or "))
}
