package main

import (
	"context"
	"errors"
	"flag"
	"net"
	"net/http"
	"time"
)

// healthcheck asks a server on this machine whether it is ready, for a container
// that has no other program to ask with.
func healthcheck(p *process, args []string) int {
	fs := flag.NewFlagSet("healthcheck", flag.ContinueOnError)
	listen := fs.String("listen", defaultListen, "address that the server listens on; the wildcard is asked on loopback")
	timeout := fs.Duration("timeout", 3*time.Second, "how long to wait for the answer")
	err := parseFlags(p, fs, args)
	if errors.Is(err, errHelp) {
		return exitOK
	}
	if err != nil {
		return p.usage("healthcheck: %v", err)
	}
	if *timeout <= 0 {
		return p.usage("healthcheck: --timeout must be positive")
	}
	host, port, err := net.SplitHostPort(*listen)
	if err != nil {
		return p.usage("healthcheck: --listen %s is no address: %v", *listen, err)
	}
	if ip := net.ParseIP(host); host == "" || ip != nil && ip.IsUnspecified() {
		host = "127.0.0.1"
	}
	ctx, cancel := context.WithTimeout(context.Background(), *timeout)
	defer cancel()
	request, err := http.NewRequestWithContext(ctx, http.MethodGet, "http://"+net.JoinHostPort(host, port)+"/readyz", nil)
	if err != nil {
		return p.usage("healthcheck: %v", err)
	}
	res, err := (&http.Client{Transport: &http.Transport{}, CheckRedirect: asItIs}).Do(request) // no proxy between
	if err != nil {
		return p.notHealthy("%v", err)
	}
	_ = res.Body.Close()
	if res.StatusCode != http.StatusOK {
		return p.notHealthy("%s answers %s", request.URL, res.Status)
	}
	return exitOK
}

// asItIs follows no redirect: a server that sends the question elsewhere is not the
// one that was asked.
func asItIs(*http.Request, []*http.Request) error { return http.ErrUseLastResponse }

func (p *process) notHealthy(format string, args ...any) int {
	p.usage("healthcheck: "+format, args...)
	return exitFindings
}
