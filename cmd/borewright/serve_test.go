package main

import (
	"bufio"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"net"
	"net/http"
	"regexp"
	"strings"
	"sync"
	"sync/atomic"
	"syscall"
	"testing"
	"time"
)

func get(t testing.TB, url string) (int, string) {
	t.Helper()
	res, err := http.Get(url)
	if err != nil {
		t.Fatal(err)
	}
	defer res.Body.Close()
	body, err := io.ReadAll(res.Body)
	if err != nil {
		t.Fatal(err)
	}
	return res.StatusCode, string(body)
}

// BenchmarkServeReady is the time from starting the process to its first answer.
func BenchmarkServeReady(b *testing.B) {
	for b.Loop() {
		s := startServing(b, nil, "--drain-delay", "0s")
		if status, _ := get(b, s.base+"/readyz"); status != 200 {
			b.Fatal(status)
		}
		b.StopTimer()
		_ = s.cmd.Process.Kill()
		<-s.exited
		b.StartTimer()
	}
}

func TestServeIsReadyAndPrintsACallToPaste(t *testing.T) {
	s := startServing(t, nil)
	if status, body := get(t, s.base+"/readyz"); status != 200 {
		t.Fatalf("announced and not ready: %d %s", status, body)
	}
	t.Logf("announced after %v", s.untilAnnounced) // BenchmarkServeReady measures it
	call := regexp.MustCompile(`curl -s (\S+) -H '([^:]+): ([^']+)' -d '([^']+)'`).FindStringSubmatch(s.stdout.String())
	if call == nil {
		t.Fatalf("no call to paste in %q", s.stdout)
	}
	status, body := postJSON(t, call[1], call[4])
	if status != 200 || call[2] != "Content-Type" || call[3] != "application/json" {
		t.Errorf("the call to paste is answered with %d %s", status, body)
	}
	s.signal(syscall.SIGTERM)
	if code := s.wait(5 * time.Second); code != exitOK {
		t.Errorf("exit code %d: %s", code, s.stderr)
	}
	for line := range strings.Lines(s.stderr.String()) {
		if !json.Valid([]byte(line)) {
			t.Errorf("no JSON in the log: %q", line)
		}
	}
}

func postJSON(t *testing.T, url, body string) (int, string) {
	t.Helper()
	res, err := http.Post(url, "application/json", strings.NewReader(body))
	if err != nil {
		t.Fatal(err)
	}
	defer res.Body.Close()
	answer, err := io.ReadAll(res.Body)
	if err != nil {
		t.Fatal(err)
	}
	return res.StatusCode, string(answer)
}

// TestAnswersDoNotDependOnTheLocale compares whole answers of two processes.
func TestAnswersDoNotDependOnTheLocale(t *testing.T) {
	german := startServing(t, []string{"LC_ALL=de_DE.UTF-8", "LANG=de_DE.UTF-8"})
	plain := startServing(t, []string{"LC_ALL=C"})
	for _, ask := range []func(s *started) (int, string){
		func(s *started) (int, string) { return postJSON(t, s.base+"/v1/segment", sampleRequest) },
		func(s *started) (int, string) { return get(t, s.base+"/v1/convert?quantity=0.5+in&to=mm&pick=value") },
	} {
		statusA, a := ask(german)
		statusB, b := ask(plain)
		if statusA != 200 || statusB != 200 || a != b {
			t.Errorf("de_DE answers %d %s\nC answers %d %s", statusA, a, statusB, b)
		}
	}
	if _, got := get(t, german.base+"/v1/convert?quantity=0.5+in&to=mm&pick=value"); got != "12.7" {
		t.Errorf("half an inch is %q mm, want 12.7", got)
	}
}

// TestStopUnderLoadLosesNothing keeps clients busy through a stop. They stop
// sending when /readyz says so, as a load balancer would.
func TestStopUnderLoadLosesNothing(t *testing.T) {
	s := startServing(t, nil, "--drain-delay", "1s")
	var sent, lost atomic.Int64
	var firstLoss atomic.Value
	var unready atomic.Bool
	var clients sync.WaitGroup
	for range 8 {
		clients.Go(func() {
			client := &http.Client{Transport: &http.Transport{}, Timeout: 10 * time.Second}
			for !unready.Load() {
				sent.Add(1)
				if err := sendSample(client, s.base); err != nil {
					lost.Add(1)
					firstLoss.CompareAndSwap(nil, err.Error())
				}
			}
		})
	}
	for sent.Load() < 100 {
		if status, _ := get(t, s.base+"/readyz"); status != 200 {
			t.Fatalf("not ready before the stop: %d", status)
		}
	}
	before := sent.Load()
	s.signal(syscall.SIGTERM)
	for status := 200; status == 200; {
		status, _ = get(t, s.base+"/readyz")
	}
	during := sent.Load()
	for sent.Load() < during+20 && lost.Load() == 0 { // the drain delay still answers
		get(t, s.base+"/livez")
	}
	unready.Store(true)
	clients.Wait()
	if code := s.wait(10 * time.Second); code != exitOK || lost.Load() > 0 {
		t.Errorf("exit code %d, %d of %d requests lost (%d before the signal), first: %v", code, lost.Load(), sent.Load(), before, firstLoss.Load())
	}
}

func sendSample(client *http.Client, base string) error {
	res, err := client.Post(base+"/v1/segment", "application/json", strings.NewReader(sampleRequest))
	if err != nil {
		return err
	}
	defer res.Body.Close()
	if _, err := io.ReadAll(res.Body); err != nil {
		return err
	}
	if res.StatusCode != 200 {
		return fmt.Errorf("status %d", res.StatusCode)
	}
	return nil
}

// half sends half a request, so that one is being served when the signal comes.
func half(t *testing.T, s *started) (c net.Conn, rest string) {
	t.Helper()
	c, err := net.Dial("tcp", strings.TrimPrefix(s.base, "http://"))
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = c.Close() })
	if err := c.SetDeadline(time.Now().Add(20 * time.Second)); err != nil {
		t.Fatal(err)
	}
	// With Expect the server says when the handler has begun to read.
	fmt.Fprintf(c, "POST /v1/segment HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\nExpect: 100-continue\r\nContent-Length: %d\r\n\r\n", len(sampleRequest))
	line, err := bufio.NewReaderSize(io.LimitReader(c, 25), 25).ReadString('\n')
	if err != nil || !strings.Contains(line, "100") {
		t.Fatalf("%q %v", line, err)
	}
	n := len(sampleRequest) / 2
	if _, err := io.WriteString(c, sampleRequest[:n]); err != nil {
		t.Fatal(err)
	}
	return c, sampleRequest[n:]
}

// untilRefused waits until nobody listens any more.
func untilRefused(t *testing.T, s *started) {
	t.Helper()
	for began := time.Now(); time.Since(began) < 10*time.Second; {
		c, err := net.Dial("tcp", strings.TrimPrefix(s.base, "http://"))
		if errors.Is(err, syscall.ECONNREFUSED) {
			return
		}
		if err == nil {
			_ = c.Close()
		}
	}
	t.Fatal("still listening after 10 s")
}

func TestRequestInFlightIsAnsweredAfterTheSignal(t *testing.T) {
	s := startServing(t, nil, "--drain-delay", "0s")
	c, rest := half(t, s)
	s.signal(syscall.SIGINT)
	untilRefused(t, s)
	if _, err := io.WriteString(c, rest); err != nil {
		t.Fatal(err)
	}
	res, err := http.ReadResponse(bufio.NewReader(c), nil)
	if err != nil || res.StatusCode != 200 {
		t.Fatalf("%v %v", res, err)
	}
	if code := s.wait(5 * time.Second); code != exitOK {
		t.Errorf("exit code %d: %s", code, s.stderr)
	}
}

func TestSecondSignalEndsAtOnce(t *testing.T) {
	for name, args := range map[string][]string{
		"while draining":           {"--drain-delay", "1h"},
		"while requests still run": {"--drain-delay", "0s", "--shutdown-grace", "1h"},
	} {
		t.Run(name, func(t *testing.T) {
			s := startServing(t, nil, args...)
			half(t, s)
			s.signal(syscall.SIGTERM)
			if args[1] == "0s" {
				untilRefused(t, s)
			} else {
				for status := 200; status == 200; {
					status, _ = get(t, s.base+"/readyz")
				}
			}
			s.signal(syscall.SIGTERM)
			if code := s.wait(2 * time.Second); code != exitFault || !strings.Contains(s.stderr.String(), "second signal") {
				t.Errorf("exit code %d: %s", code, s.stderr)
			}
		})
	}
}

func TestGraceIsBounded(t *testing.T) {
	s := startServing(t, nil, "--drain-delay", "0s", "--shutdown-grace", "50ms")
	half(t, s)
	s.signal(syscall.SIGTERM)
	if code := s.wait(5 * time.Second); code != exitFault || !strings.Contains(s.stderr.String(), "still running after 50ms") {
		t.Errorf("exit code %d: %s", code, s.stderr)
	}
}

func TestServeRefusesToStart(t *testing.T) {
	taken, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	defer taken.Close()
	for _, c := range []struct {
		name string
		env  []string
		args []string
		code int
		says string
	}{
		{"all addresses", nil, []string{"--listen", "0.0.0.0:0"}, exitUsage, "--auth=off"},
		{"all addresses, short", nil, []string{"--listen", ":0"}, exitUsage, "--auth=off"},
		{"all addresses of version 6", nil, []string{"--listen", "[::]:0"}, exitUsage, "--auth=off"},
		{"an address of the network, from the environment", []string{"BOREWRIGHT_LISTEN=192.0.2.1:0"}, nil, exitUsage, "--auth=off"},
		{"a port in use", nil, []string{"--listen", taken.Addr().String()}, exitFault, "address already in use"},
		{"no address", nil, []string{"--listen", "127.0.0.1"}, exitUsage, "--listen 127.0.0.1"},
		{"a port that is none", nil, []string{"--listen", "127.0.0.1:99999"}, exitUsage, "99999"},
		{"an unknown flag", nil, []string{"--lisen", "127.0.0.1:0"}, exitUsage, "lisen"},
		{"a stray argument", nil, []string{"now"}, exitUsage, "now"},
		{"a word that auth does not know", nil, []string{"--auth=on"}, exitUsage, "say off"},
		{"a word that validate does not know", []string{"BOREWRIGHT_VALIDATE=sometimes"}, nil, exitUsage, "BOREWRIGHT_VALIDATE"},
		{"a duration without unit", []string{"BOREWRIGHT_DRAIN_DELAY=5"}, nil, exitUsage, "BOREWRIGHT_DRAIN_DELAY"},
		{"a grace of nothing", nil, []string{"--shutdown-grace", "0s"}, exitUsage, "--shutdown-grace"},
	} {
		t.Run(c.name, func(t *testing.T) {
			code, stdout, stderr := finish(t, c.env, append([]string{"serve"}, c.args...)...)
			if code != c.code || !strings.Contains(stderr, c.says) || stdout != "" {
				t.Errorf("exit code %d, want %d; says %q %q, want %q", code, c.code, stdout, stderr, c.says)
			}
		})
	}
}

func TestServeOpensToOthersWhenTold(t *testing.T) {
	for name, env := range map[string][]string{"flag": nil, "environment": {"BOREWRIGHT_AUTH=off"}} {
		t.Run(name, func(t *testing.T) {
			args := []string{"--listen", "0.0.0.0:0"} // the later --listen wins
			if env == nil {
				args = append(args, "--auth=off")
			}
			s := startServing(t, env, args...)
			if !strings.HasPrefix(s.base, "http://127.0.0.1:") {
				t.Errorf("announces %s, which nobody can ask", s.base)
			}
			if status, _ := get(t, s.base+"/livez"); status != 200 {
				t.Errorf("status %d", status)
			}
		})
	}
}

func TestValidatorCanJudgeEveryRequest(t *testing.T) {
	s := startServing(t, nil, "--validate=always")
	if status, body := postJSON(t, s.base+"/v1/segment", sampleRequest); status != 200 {
		t.Errorf("%d %s", status, body)
	}
}
