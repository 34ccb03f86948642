package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"log/slog"
	"net"
	"net/http"
	"os"
	"strings"
	"time"

	"borewright/api"
	"borewright/service"
)

// serveFlags are what an operator can say about serve.
type serveFlags struct {
	listen        string
	adminListen   string
	auth          choice
	validate      choice
	logRequests   choice
	maxConcurrent int
	batchSpool    int64
	batchDeadline time.Duration
	shutdownGrace time.Duration
	drainDelay    time.Duration
}

// defaultListen is where serve listens unless told otherwise.
const defaultListen = "127.0.0.1:8080"

func readServeFlags(p *process, args []string) (*serveFlags, error) {
	f := &serveFlags{
		auth:        choice{"", []string{"off"}},
		validate:    choice{"never", []string{"never", "always"}},
		logRequests: choice{"on", []string{"on", "off"}},
	}
	fs := flag.NewFlagSet("serve", flag.ContinueOnError)
	fs.StringVar(&f.listen, "listen", defaultListen, "address to listen on, host:port; port 0 takes a free one")
	fs.StringVar(&f.adminListen, "admin-listen", "", "address for /metrics and profiling, host:port; they are then not on the other one")
	fs.Var(&f.logRequests, "log-requests", "on or off: one line of JSON a request on stderr")
	fs.IntVar(&f.maxConcurrent, "max-concurrent", api.DefaultMaxConcurrent, "how many requests are answered at the same time; others wait for half a second and are then turned away")
	fs.Var(&f.auth, "auth", "off: answer whoever reaches the address. Must be said when the address is not loopback")
	fs.Var(&f.validate, "validate", "never or always: let the OpenAPI validator judge every request beside the strict reader")
	fs.Int64Var(&f.batchSpool, "batch-spool", api.DefaultBatchSpool, "bytes of answers kept for each client of a batch that does not read them yet, in a temporary file")
	fs.DurationVar(&f.batchDeadline, "batch-deadline", api.DefaultBatchDeadline, "how long a batch that is answered as one JSON document may take")
	fs.DurationVar(&f.shutdownGrace, "shutdown-grace", 15*time.Second, "how long requests may still run after the drain delay")
	fs.DurationVar(&f.drainDelay, "drain-delay", 500*time.Millisecond, "how long to answer on after a stop signal, not ready any more, so that a load balancer can look elsewhere")
	show := fs.Bool("print-config", false, "print each setting with where it came from, and end")
	from, err := parseServer(p, fs, args)
	if err != nil {
		return nil, err
	}
	if *show {
		printConfig(p, fs, from)
		return nil, errHelp
	}
	if f.maxConcurrent < 1 {
		return nil, errors.New("--max-concurrent must be at least 1")
	}
	if f.batchSpool < 1<<20 {
		return nil, errors.New("--batch-spool must be at least 1048576 bytes")
	}
	if f.batchDeadline <= 0 {
		return nil, errors.New("--batch-deadline must be positive")
	}
	if f.shutdownGrace <= 0 || f.drainDelay < 0 {
		return nil, errors.New("--shutdown-grace must be positive, --drain-delay must not be negative")
	}
	return f, nil
}

// serve answers requests until a signal stops it.
func serve(p *process, args []string) int {
	f, err := readServeFlags(p, args)
	if errors.Is(err, errHelp) {
		return exitOK
	}
	if err != nil {
		return p.usage("serve: %v; borewright serve --help lists the flags", err)
	}
	addr, err := listenAddress(f)
	if err != nil {
		return p.usage("serve: %v", err)
	}
	log := slog.New(slog.NewJSONHandler(p.stderr, nil))
	registry := newRegistry()
	o := api.Options{
		Service: service.New(), Logger: log, ValidateAlways: f.validate.value == "always",
		Metrics: api.NewMetrics(registry), MaxConcurrent: f.maxConcurrent, BatchSpool: f.batchSpool, BatchDeadline: f.batchDeadline,
	}
	if f.logRequests.value == "on" {
		o.RequestLog = log
	}
	if f.adminListen == "" {
		o.Scrape = scrapeHandler(registry)
	}
	face, err := api.New(o)
	if err != nil {
		return p.fault("serve: %v", err)
	}
	stopAdmin, err := serveAdmin(f, registry, log)
	if err != nil {
		return p.usage("serve: %v", err)
	}
	defer stopAdmin()
	listener, err := net.ListenTCP("tcp", addr)
	if err != nil {
		return p.fault("serve: cannot listen on %s: %v; another --listen address may be free, port 0 always is", f.listen, err)
	}
	l := &lifecycle{face: face, server: api.Server(face, log), log: log, signals: p.signals(), flags: f}
	// The address is open, so whoever reads of it may ask at once.
	face.Ready()
	welcome(p, listener.Addr().(*net.TCPAddr))
	if err := l.run(listener); err != nil {
		return p.fault("serve: %v", err)
	}
	return exitOK
}

// fault says on stderr why the program could not do its work.
func (p *process) fault(format string, args ...any) int {
	fmt.Fprintf(p.stderr, "borewright: "+format+"\n", args...)
	return exitFault
}

// listenAddress resolves --listen once, so that what has been checked is what
// will be listened on, and refuses to open an address to others unasked.
func listenAddress(f *serveFlags) (*net.TCPAddr, error) {
	return openAddress(f, "listen", f.listen)
}

func openAddress(f *serveFlags, name, listen string) (*net.TCPAddr, error) {
	addr, err := net.ResolveTCPAddr("tcp", listen)
	if err != nil {
		return nil, fmt.Errorf("--%s %s is no address: %w", name, listen, err)
	}
	if !addr.IP.IsLoopback() && f.auth.value != "off" {
		return nil, fmt.Errorf("refuses to start: %s can be reached from other machines, and this release asks nobody for a key. "+
			"Listen on a loopback address, or say --auth=off if everyone who can reach it may use it", listen)
	}
	return addr, nil
}

// sampleRequest is the first call that a new user pastes.
const sampleRequest = `{"section":{"shape":"circle","diameter":"150 mm"},` +
	`"fluid":{"density":"998.2 kg/m3","dynamic_viscosity":"1.002 mPa.s"},"flow":{"volume_flow":"60 m3/h"},` +
	`"roughness":"0.05 mm","length":"100 m"}`

// welcome tells a person where the service is, and one call to paste. An
// address that means "all of them" is not one that a client can ask.
func welcome(p *process, addr *net.TCPAddr) {
	host := addr.IP.String()
	if addr.IP.IsUnspecified() {
		host = "127.0.0.1"
	}
	base := "http://" + net.JoinHostPort(host, fmt.Sprint(addr.Port))
	fmt.Fprintf(p.stdout, "Borewright answers on %s\n\nTry:\n  curl -s %s/v1/segment -H 'Content-Type: application/json' -d '%s'\n\n",
		base, base, strings.ReplaceAll(sampleRequest, "'", `'\''`))
}

// lifecycle is one server from the first connection to the last answer.
type lifecycle struct {
	face    *api.API
	server  *http.Server
	log     *slog.Logger
	signals <-chan os.Signal
	flags   *serveFlags
}

// errSecondSignal ends the process at once, with requests still running.
var errSecondSignal = errors.New("stopped at once by a second signal")

// run serves until a signal comes or serving fails.
func (l *lifecycle) run(listener net.Listener) error {
	served := make(chan error, 1)
	go func() { served <- l.server.Serve(listener) }()
	l.log.Info("ready", "address", listener.Addr().String())
	select {
	case err := <-served:
		return err
	case s := <-l.signals:
		l.log.Info("stopping", "signal", s.String(), "drain_delay_s", l.flags.drainDelay.Seconds(), "shutdown_grace_s", l.flags.shutdownGrace.Seconds())
	}
	return l.stop()
}

// stop says not ready, waits for those who still come, then for those who are
// still being answered, and closes.
func (l *lifecycle) stop() error {
	l.face.Drain()
	select {
	case <-time.After(l.flags.drainDelay):
	case <-l.signals:
		return errors.Join(errSecondSignal, l.server.Close())
	}
	ctx, cancel := context.WithTimeout(context.Background(), l.flags.shutdownGrace)
	defer cancel()
	done := make(chan error, 1)
	go func() { done <- l.server.Shutdown(ctx) }()
	select {
	case err := <-done:
		if err != nil {
			return fmt.Errorf("requests were still running after %v and are cut off: %w", l.flags.shutdownGrace, errors.Join(err, l.server.Close()))
		}
		l.log.Info("stopped")
		return nil
	case <-l.signals:
		return errors.Join(errSecondSignal, l.server.Close())
	}
}
