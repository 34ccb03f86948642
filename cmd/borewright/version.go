package main

import (
	"fmt"
	"runtime"

	"borewright/service"
)

func printVersion(p *process, args []string) int {
	if len(args) > 0 {
		return p.usage("version takes no arguments")
	}
	fmt.Fprintf(p.stdout, "borewright %s, method revision %d, %s, %s/%s\n", service.Version, service.MethodRevision, runtime.Version(), runtime.GOOS, runtime.GOARCH)
	return exitOK
}
