package main

import (
	"fmt"
	"runtime"
	"runtime/debug"
)

func printVersion(p *process, args []string) int {
	if len(args) > 0 {
		return p.usage("version takes no arguments")
	}
	fmt.Fprintf(p.stdout, "borewright %s, %s, %s/%s\n", buildVersion(), runtime.Version(), runtime.GOOS, runtime.GOARCH)
	return exitOK
}

// buildVersion is the module's version, or "(devel)" for a build from a checkout.
func buildVersion() string {
	if info, ok := debug.ReadBuildInfo(); ok && info.Main.Version != "" {
		return info.Main.Version
	}
	return "(unknown)"
}
