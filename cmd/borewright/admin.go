package main

import (
	"fmt"
	"log/slog"
	"net"
	"net/http"
	"net/http/pprof"

	"github.com/prometheus/client_golang/prometheus"
	"github.com/prometheus/client_golang/prometheus/collectors"
	"github.com/prometheus/client_golang/prometheus/promhttp"

	"borewright/api"
)

// newRegistry holds the metrics of the process and of the Go runtime; the service
// adds its own.
func newRegistry() *prometheus.Registry {
	r := prometheus.NewRegistry()
	r.MustRegister(collectors.NewGoCollector(), collectors.NewProcessCollector(collectors.ProcessCollectorOpts{}))
	return r
}

func scrapeHandler(r *prometheus.Registry) http.Handler {
	return promhttp.HandlerFor(r, promhttp.HandlerOpts{Registry: r})
}

// serveAdmin answers metrics and profiling on an address of their own, where one is
// named, so that they need not be where clients are.
func serveAdmin(f *serveFlags, r *prometheus.Registry, log *slog.Logger) (stop func(), err error) {
	if f.adminListen == "" {
		return func() {}, nil
	}
	addr, err := openAddress(f, "admin-listen", f.adminListen)
	if err != nil {
		return nil, err
	}
	listener, err := net.ListenTCP("tcp", addr)
	if err != nil {
		return nil, fmt.Errorf("cannot listen on %s: %w", f.adminListen, err)
	}
	mux := http.NewServeMux()
	mux.Handle("GET /metrics", scrapeHandler(r))
	mux.HandleFunc("GET /debug/pprof/", pprof.Index)
	mux.HandleFunc("GET /debug/pprof/profile", pprof.Profile)
	mux.HandleFunc("GET /debug/pprof/symbol", pprof.Symbol)
	mux.HandleFunc("GET /debug/pprof/trace", pprof.Trace)
	server := api.Server(mux, log)
	server.WriteTimeout = 0 // a profile takes as long as it was asked to
	go func() { _ = server.Serve(listener) }()
	log.Info("admin ready", "address", listener.Addr().String())
	return func() { _ = server.Close() }, nil
}
