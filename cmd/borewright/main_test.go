package main

import (
	"strings"
	"testing"
)

func TestCommands(t *testing.T) {
	for _, c := range []struct {
		args   []string
		code   int
		stdout string
		stderr string
	}{
		{nil, exitUsage, "", "Usage:"},
		{[]string{"help"}, exitOK, "serve", ""},
		{[]string{"--help"}, exitOK, "serve", ""},
		{[]string{"help", "me"}, exitUsage, "", "no arguments"},
		{[]string{"version"}, exitOK, "borewright ", ""},
		{[]string{"version", "--long"}, exitUsage, "", "no arguments"},
		{[]string{"sevre"}, exitUsage, "", `"sevre"`},
		{[]string{"serve", "--help"}, exitOK, "BOREWRIGHT_SHUTDOWN_GRACE", ""},
	} {
		var out, errs strings.Builder
		p := &process{stdout: &out, stderr: &errs, getenv: func(string) string { return "" }}
		code := dispatch(p, c.args)
		if code != c.code || !strings.Contains(out.String(), c.stdout) || !strings.Contains(errs.String(), c.stderr) || (out.Len() > 0) != (c.stdout != "") {
			t.Errorf("%q: exit code %d, want %d; %q %q", c.args, code, c.code, out.String(), errs.String())
		}
	}
}

func TestHelpNamesEveryCommand(t *testing.T) {
	var out strings.Builder
	writeHelp(&out)
	for _, c := range commands() {
		if !strings.Contains(out.String(), "  "+c.name) || c.summary == "" {
			t.Errorf("help does not name %s", c.name)
		}
	}
}
