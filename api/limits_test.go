package api_test

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"log/slog"
	"net"
	"net/http"
	"strings"
	"testing"
	"time"

	"borewright/api"
)

// serveFace starts a real server on a free loopback port.
func serveFace(t *testing.T) string {
	t.Helper()
	face, _ := newFace(t, echoing)
	listener, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	server := api.Server(face, slog.New(slog.DiscardHandler))
	served := make(chan error, 1)
	go func() { served <- server.Serve(listener) }()
	t.Cleanup(func() {
		if err := server.Close(); err != nil {
			t.Error(err)
		}
		if err := <-served; !errors.Is(err, http.ErrServerClosed) {
			t.Error(err)
		}
	})
	return listener.Addr().String()
}

// dial opens a connection that no test waits on for long.
func dial(t *testing.T, addr string) net.Conn {
	t.Helper()
	c, err := net.Dial("tcp", addr)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = c.Close() })
	if err := c.SetDeadline(time.Now().Add(10 * time.Second)); err != nil {
		t.Fatal(err)
	}
	return c
}

func answerOf(t *testing.T, c net.Conn) *http.Response {
	t.Helper()
	res, err := http.ReadResponse(bufio.NewReader(c), nil)
	if err != nil {
		t.Fatal(err)
	}
	return res
}

const postHead = "POST /v1/segment HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\n"

func TestBodyAtTheLimitIsRead(t *testing.T) {
	face, _ := newFace(t, echoing)
	for _, size := range []int{1, 4095, 4096, 1<<20 - 1, 1 << 20} {
		body := strings.Repeat("x", size)
		if res := post(face, "/v1/segment", body); res.StatusCode != 200 || text(t, res) != body {
			t.Errorf("%d bytes: %d", size, res.StatusCode)
		}
	}
	wantProblem(t, post(face, "/v1/segment", strings.Repeat("x", 1<<20+1)), 413, "body_too_large")
}

// TestLengthBeyondTheLimit sends only the head: the answer must come before the body.
func TestLengthBeyondTheLimit(t *testing.T) {
	c := dial(t, serveFace(t))
	fmt.Fprintf(c, postHead+"Content-Length: 20000000\r\n\r\n")
	res := answerOf(t, c)
	wantProblem(t, res, 413, "body_too_large")
	if !res.Close {
		t.Error("the connection stays open, with a body on it that nobody reads")
	}
}

// TestClientThatReadsLast sends all before it reads, as many scripts do.
func TestClientThatReadsLast(t *testing.T) {
	addr := serveFace(t)
	body := bytes.Repeat([]byte("x"), 10<<20)
	for name, head := range map[string]string{
		"length": fmt.Sprintf("Content-Length: %d\r\n\r\n", len(body)),
		"chunks": fmt.Sprintf("Transfer-Encoding: chunked\r\n\r\n%x\r\n", len(body)),
	} {
		t.Run(name, func(t *testing.T) {
			c := dial(t, addr)
			if _, err := io.WriteString(c, postHead+head); err != nil {
				t.Fatal(err)
			}
			if _, err := c.Write(body); err != nil {
				t.Fatalf("the connection ends while sending, and takes the answer with it: %v", err)
			}
			wantProblem(t, answerOf(t, c), 413, "body_too_large")
		})
	}
}

// TestClientThatAsksFirst waits for 100 Continue and is told no instead.
func TestClientThatAsksFirst(t *testing.T) {
	c := dial(t, serveFace(t))
	began := time.Now()
	fmt.Fprintf(c, postHead+"Expect: 100-continue\r\nContent-Length: 20000000\r\n\r\n")
	wantProblem(t, answerOf(t, c), 413, "body_too_large")
	if _, err := c.Read(make([]byte, 1)); err != io.EOF {
		t.Errorf("the connection is not closed: %v", err)
	}
	if took := time.Since(began); took > 1500*time.Millisecond {
		t.Errorf("took %v: the server waits for a body that never comes", took)
	}
}

func TestBodyThatEndsEarly(t *testing.T) {
	c := dial(t, serveFace(t))
	fmt.Fprintf(c, postHead+"Content-Length: 100\r\n\r\n{}")
	if err := c.(*net.TCPConn).CloseWrite(); err != nil {
		t.Fatal(err)
	}
	p := wantProblem(t, answerOf(t, c), 400, "malformed_body")
	if len(p.Errors) != 1 || p.Errors[0].Code != "incomplete_body" {
		t.Errorf("%+v", p)
	}
}

func TestURLAtTheLimit(t *testing.T) {
	face, _ := newFace(t, echoing)
	const start = "/v1/convert?to=mm&quantity=1+m"
	fits := start + strings.Repeat("+", 8<<10-len(start))
	if res := ask(face, "GET", fits, ""); res.StatusCode != 200 {
		t.Errorf("%d bytes: %d %s", len(fits), res.StatusCode, text(t, res))
	}
	wantProblem(t, ask(face, "GET", fits+"+", ""), 414, "uri_too_long")
	wantProblem(t, ask(face, "GET", "/"+strings.Repeat("a", 8<<10), ""), 414, "uri_too_long")
}

func TestHeadersBeyondTheLimit(t *testing.T) {
	c := dial(t, serveFace(t))
	fmt.Fprintf(c, "GET /livez HTTP/1.1\r\nHost: x\r\nX-Long: %s\r\n\r\n", strings.Repeat("a", 64<<10))
	if res := answerOf(t, c); res.StatusCode != http.StatusRequestHeaderFieldsTooLarge {
		t.Errorf("status %d", res.StatusCode)
	}
}

func TestServerSetsEveryTimeout(t *testing.T) {
	s := api.Server(http.NotFoundHandler(), slog.New(slog.DiscardHandler))
	if s.ReadHeaderTimeout <= 0 || s.ReadTimeout <= 0 || s.WriteTimeout <= 0 || s.IdleTimeout <= 0 || s.MaxHeaderBytes <= 0 {
		t.Errorf("a timeout or the header limit is missing: %v %v %v %v %d", s.ReadHeaderTimeout, s.ReadTimeout, s.WriteTimeout, s.IdleTimeout, s.MaxHeaderBytes)
	}
}

func TestReadinessFollowsTheLife(t *testing.T) {
	face, err := api.New(api.Options{Service: echoing})
	if err != nil {
		t.Fatal(err)
	}
	res := ask(face, "GET", "/readyz", "")
	if wantProblem(t, res, 503, "not_ready"); res.Header.Get("Retry-After") != "1" {
		t.Errorf("Retry-After %q", res.Header.Get("Retry-After"))
	}
	face.Ready()
	if res := ask(face, "GET", "/readyz", ""); res.StatusCode != 200 || res.Header.Get("Connection") != "" {
		t.Errorf("ready: %d, Connection %q", res.StatusCode, res.Header.Get("Connection"))
	}
	face.Drain()
	face.Ready() // too late: a server never comes back from draining
	wantProblem(t, ask(face, "GET", "/readyz", ""), 503, "not_ready")
	for _, res := range []*http.Response{ask(face, "GET", "/livez", ""), post(face, "/v1/segment", "{}")} {
		if res.StatusCode != 200 || res.Header.Get("Connection") != "close" {
			t.Errorf("draining: %d, Connection %q", res.StatusCode, res.Header.Get("Connection"))
		}
	}
}
