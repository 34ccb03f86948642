package main

import (
	"bytes"
	"errors"
	"flag"
	"fmt"
	"os"
	"slices"
	"strings"

	"go.yaml.in/yaml/v3"
)

// origin says where the value of a flag came from, for those who wonder.
type origin map[string]string

// parseServer reads the flags of a server: the command line first, then the
// environment, then the file that --config names, then the defaults. Every name can
// stand in each of them; what is unknown or twice is refused.
func parseServer(p *process, fs *flag.FlagSet, args []string) (origin, error) {
	file := fs.String("config", "", "YAML file of further flags, one name: value a line")
	if err := parseFlags(p, fs, args); err != nil {
		return nil, err
	}
	from := origin{}
	fs.Visit(func(f *flag.Flag) { // set by either: the environment only where the command line is silent
		from[f.Name] = "command line"
		if name := environmentName(f.Name); !onCommandLine(args, f.Name) {
			from[f.Name] = "environment " + name
		}
	})
	if *file != "" {
		if err := readConfigFile(fs, *file, from); err != nil {
			return nil, err
		}
	}
	return from, nil
}

// onCommandLine reports whether a flag stands in the arguments.
func onCommandLine(args []string, name string) bool {
	return slices.ContainsFunc(args, func(a string) bool {
		a, _, _ = strings.Cut(strings.TrimLeft(a, "-"), "=")
		return a == name
	})
}

// readConfigFile sets the flags that neither the command line nor the environment set.
func readConfigFile(fs *flag.FlagSet, path string, from origin) error {
	data, err := os.ReadFile(path)
	if err != nil {
		return fmt.Errorf("--config: %w", err)
	}
	var root yaml.Node
	if err := yaml.NewDecoder(bytes.NewReader(data)).Decode(&root); err != nil {
		return fmt.Errorf("--config %s: %w", path, err)
	}
	if len(root.Content) != 1 || root.Content[0].Kind != yaml.MappingNode {
		return fmt.Errorf("--config %s: the file holds lines of name: value", path)
	}
	var wrong []error
	seen := map[string]bool{}
	pairs := root.Content[0].Content
	for i := 0; i < len(pairs); i += 2 {
		name, value := pairs[i].Value, pairs[i+1]
		at := fmt.Sprintf("%s, line %d", path, pairs[i].Line)
		switch f := fs.Lookup(name); {
		case f == nil || name == "config" || name == "print-config":
			wrong = append(wrong, fmt.Errorf("%s: %q is no setting", at, name))
		case seen[name]:
			wrong = append(wrong, fmt.Errorf("%s: %s stands twice", at, name))
		case value.Kind != yaml.ScalarNode:
			wrong = append(wrong, fmt.Errorf("%s: %s takes one value", at, name))
		case from[name] == "":
			if err := fs.Set(name, value.Value); err != nil {
				wrong = append(wrong, fmt.Errorf("%s: invalid value %q of %s: %w", at, value.Value, name, err))
			}
			from[name] = "file " + at
		}
		seen[name] = true
	}
	return errors.Join(wrong...)
}

// printConfig shows each effective value and where it came from.
func printConfig(p *process, fs *flag.FlagSet, from origin) {
	fs.VisitAll(func(f *flag.Flag) {
		if f.Name == "print-config" {
			return
		}
		where := from[f.Name]
		if where == "" {
			where = "default"
		}
		fmt.Fprintf(p.stdout, "%s: %q # %s\n", f.Name, f.Value.String(), where)
	})
}
