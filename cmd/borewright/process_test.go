package main

import (
	"bufio"
	"bytes"
	"io"
	"os"
	"os/exec"
	"slices"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"
)

// TestMain makes this test binary the program itself when it is told so, so that
// the tests start real processes without building one.
func TestMain(m *testing.M) {
	if os.Getenv("TEST_AS_BOREWRIGHT") == "yes" {
		main()
	}
	os.Exit(m.Run())
}

// started is a running program.
type started struct {
	t              testing.TB
	cmd            *exec.Cmd
	base           string // http://host:port
	stderr         *buffer
	stdout         *buffer
	exited         chan struct{} // closed when it has ended
	code           int           // valid once exited is closed
	untilAnnounced time.Duration
}

// buffer is a bytes.Buffer that the test may read while the process writes.
type buffer struct {
	mu sync.Mutex
	b  bytes.Buffer
}

func (b *buffer) Write(p []byte) (int, error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	return b.b.Write(p)
}

func (b *buffer) String() string {
	b.mu.Lock()
	defer b.mu.Unlock()
	return b.b.String()
}

func program(t testing.TB, env []string, args ...string) *exec.Cmd {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(self, args...)
	// What an operator has set on this machine must not reach the tests.
	own := slices.DeleteFunc(os.Environ(), func(v string) bool { return strings.HasPrefix(v, "BOREWRIGHT_") })
	cmd.Env = append(append(own, "TEST_AS_BOREWRIGHT=yes"), env...)
	return cmd
}

// finish runs the program to its end.
func finish(t *testing.T, env []string, args ...string) (code int, stdout, stderr string) {
	t.Helper()
	cmd := program(t, env, args...)
	var out, errs bytes.Buffer
	cmd.Stdout, cmd.Stderr = &out, &errs
	timer := time.AfterFunc(20*time.Second, func() { _ = cmd.Process.Kill() })
	defer timer.Stop()
	if err := cmd.Run(); err != nil && cmd.ProcessState == nil {
		t.Fatal(err)
	}
	return cmd.ProcessState.ExitCode(), out.String(), errs.String()
}

const announcement = "Borewright answers on "

// startServing starts serve on a free loopback port and reads its address.
func startServing(t testing.TB, env []string, args ...string) *started {
	t.Helper()
	s := &started{t: t, stderr: &buffer{}, stdout: &buffer{}, exited: make(chan struct{})}
	s.cmd = program(t, env, append([]string{"serve", "--listen", "127.0.0.1:0"}, args...)...)
	s.cmd.Stderr = s.stderr
	pipe, err := s.cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	began := time.Now()
	if err := s.cmd.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = s.cmd.Process.Kill(); <-s.exited })
	announced := make(chan string, 1)
	go s.follow(pipe, announced)
	select {
	case s.base = <-announced:
		s.untilAnnounced = time.Since(began)
	case <-s.exited:
		t.Fatalf("serve ended with %d: %s", s.code, s.stderr)
	case <-time.After(20 * time.Second):
		t.Fatal("serve announces nothing")
	}
	return s
}

// follow reads what the program prints until it ends.
func (s *started) follow(pipe io.Reader, announced chan<- string) {
	lines := bufio.NewReader(pipe)
	for {
		line, err := lines.ReadString('\n')
		_, _ = io.WriteString(s.stdout, line)
		if addr, ok := strings.CutPrefix(line, announcement); ok {
			announced <- strings.TrimSpace(addr)
		}
		if err != nil {
			break
		}
	}
	_ = s.cmd.Wait()
	s.code = s.cmd.ProcessState.ExitCode()
	close(s.exited)
}

func (s *started) signal(sig syscall.Signal) {
	s.t.Helper()
	if err := s.cmd.Process.Signal(sig); err != nil {
		s.t.Fatal(err)
	}
}

// wait waits for the end and gives the exit code.
func (s *started) wait(limit time.Duration) int {
	s.t.Helper()
	select {
	case <-s.exited:
		return s.code
	case <-time.After(limit):
		s.t.Fatalf("still running after %v; log: %s", limit, s.stderr)
		return -1
	}
}
