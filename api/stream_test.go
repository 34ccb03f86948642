package api_test

import (
	"bufio"
	"encoding/json"
	"fmt"
	"io"
	"log/slog"
	"net"
	"net/http"
	"runtime"
	"strings"
	"testing"
	"time"

	"borewright/api"
	"borewright/service"
)

// batchServer is a real server on loopback with a spool of the given size, 0 for the
// usual one.
func batchServer(t *testing.T, spool int64) string {
	t.Helper()
	face, err := api.New(api.Options{Service: service.New(), BatchSpool: spool, BatchPatience: 500 * time.Millisecond})
	if err != nil {
		t.Fatal(err)
	}
	face.Ready()
	server := api.Server(face, slog.New(slog.DiscardHandler))
	listener, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	go func() { _ = server.Serve(listener) }() // ended by Close
	t.Cleanup(func() { _ = server.Close() })
	return listener.Addr().String()
}

// patient is a connection for a test that moves many bytes.
func patient(t *testing.T, address string) net.Conn {
	t.Helper()
	c := dial(t, address)
	if err := c.SetDeadline(time.Now().Add(time.Minute)); err != nil {
		t.Fatal(err)
	}
	return c
}

// send sends a whole request whose body is a head and a line again and again.
func send(w io.Writer, media, head, line string, rows int) error {
	b := bufio.NewWriterSize(w, 1<<20)
	fmt.Fprintf(b, "POST /v1/segments HTTP/1.1\r\nHost: x\r\nContent-Type: %s\r\nContent-Length: %d\r\n\r\n%s", media, len(head)+rows*len(line), head)
	for range rows {
		if _, err := b.WriteString(line); err != nil {
			return err
		}
	}
	return b.Flush()
}

// sendThenRead sends everything before it reads a byte, as many clients do.
func sendThenRead(t *testing.T, address, media, head, line string, rows int) *http.Response {
	t.Helper()
	conn := patient(t, address)
	if err := send(conn, media, head, line, rows); err != nil {
		t.Fatalf("the server stopped reading: %v", err)
	}
	res, err := http.ReadResponse(bufio.NewReader(conn), nil)
	if err != nil {
		t.Fatal(err)
	}
	return res
}

// countLines counts the lines of a stream and gives the last.
func countLines(t *testing.T, r io.Reader) (n int, last string) {
	t.Helper()
	lines := bufio.NewScanner(r)
	lines.Buffer(nil, 1<<20)
	for lines.Scan() {
		n, last = n+1, lines.Text()
	}
	if err := lines.Err(); err != nil {
		t.Fatalf("after %d lines: %v", n, err)
	}
	return n, last
}

const ndjson = "application/x-ndjson"

func TestClientThatSendsAllBeforeItReads(t *testing.T) {
	const rows = 30000 // 60 MB of answers: no socket holds them
	res := sendThenRead(t, batchServer(t, 0), ndjson, "", oneLine+"\n", rows)
	if n, _ := countLines(t, res.Body); n != rows || res.Trailer.Get("X-Rows-Failed") != "0" {
		t.Errorf("%d rows, trailer %v", n, res.Trailer)
	}
}

func TestFullSpoolEndsTheStreamWithItsCause(t *testing.T) {
	const rows = 200_000 // more than the sockets and the spool hold between them
	res := sendThenRead(t, batchServer(t, 1<<20), ndjson, "", oneLine+"\n", rows)
	n, last := countLines(t, res.Body)
	var row struct {
		Row     int
		Problem struct{ Type string }
	}
	if err := json.Unmarshal([]byte(last), &row); err != nil {
		t.Fatal(err)
	}
	if row.Problem.Type != "/problems/spool_full" || row.Row != n || n >= rows || n < 500 || res.Trailer.Get("X-Rows-Failed") != "1" {
		t.Errorf("%d rows, the last %s, trailer %v", n, last, res.Trailer)
	}
}

// slow is a reader who takes his time.
type slow struct {
	in    io.Reader
	pause time.Duration
}

func (s slow) Read(p []byte) (int, error) {
	time.Sleep(s.pause)
	return s.in.Read(p)
}

// A client that reads while it sends slows the service down, however far it is behind,
// and loses nothing.
func TestSlowClientGetsEverything(t *testing.T) {
	const rows = 20000 // 40 MB of answers through a spool of 1 MiB
	conn := patient(t, batchServer(t, 1<<20))
	sent := make(chan error, 1)
	go func() { sent <- send(conn, ndjson, "", oneLine+"\n", rows) }()
	res, err := http.ReadResponse(bufio.NewReaderSize(slow{conn, time.Millisecond}, 64<<10), nil)
	if err != nil {
		t.Fatal(err)
	}
	n, last := countLines(t, res.Body)
	if err := <-sent; err != nil || n != rows || res.Trailer.Get("X-Rows-Failed") != "0" {
		t.Errorf("%d rows, %v, trailer %v, the last %.100s", n, err, res.Trailer, last)
	}
}

// A refusal reaches a client that goes on sending what nobody will read.
func TestRefusedStreamIsReadOn(t *testing.T) {
	res := sendThenRead(t, batchServer(t, 0), "text/csv", "colour\n", strings.Repeat("x", 999)+"\n", 12000)
	body, err := io.ReadAll(res.Body)
	if err != nil || res.StatusCode != 422 || !strings.Contains(string(body), "unknown_name") || res.Header.Get("Trailer") != "" {
		t.Errorf("%d %v %s, %v", res.StatusCode, res.Header, body, err)
	}
}

// A client that goes away ends the work, whether it was sending, waiting or not
// reading; the server goes on.
func TestClientThatGoesAway(t *testing.T) {
	address := batchServer(t, 0)
	before := runtime.NumGoroutine()
	for range 5 {
		conn := patient(t, address)
		fmt.Fprintf(conn, "POST /v1/segments HTTP/1.1\r\nHost: x\r\nContent-Type: application/x-ndjson\r\nContent-Length: 1000000\r\n\r\n%s\n", oneLine)
		if err := conn.Close(); err != nil {
			t.Fatal(err)
		}
		conn = patient(t, address)
		if err := send(conn, ndjson, "", oneLine+"\n", 20000); err != nil {
			t.Fatal(err)
		}
		if err := conn.Close(); err != nil {
			t.Fatal(err)
		}
	}
	for began := time.Now(); runtime.NumGoroutine() > before; time.Sleep(10 * time.Millisecond) {
		if time.Since(began) > 5*time.Second {
			t.Fatalf("%d goroutines, before %d", runtime.NumGoroutine(), before)
		}
	}
	res, err := http.Post("http://"+address+"/v1/segments", "application/json", strings.NewReader("["+oneLine+"]"))
	if err != nil || res.StatusCode != 200 {
		t.Fatal(res, err)
	}
	_ = res.Body.Close()
}

// A JSON answer that the spool does not hold is refused as a whole; the same rows
// stream.
func TestJSONAnswerBeyondTheSpool(t *testing.T) {
	face, err := api.New(api.Options{Service: service.New(), BatchSpool: 1 << 20})
	if err != nil {
		t.Fatal(err)
	}
	face.Ready()
	rows := strings.Repeat(oneLine+"\n", 1000)
	p := wantProblem(t, batchOf(face, "/v1/segments", ndjson, "application/json", rows), 413, "body_too_large")
	if !strings.Contains(p.Detail, "ask for NDJSON or CSV") {
		t.Errorf("%s", p.Detail)
	}
	for _, accept := range []string{ndjson, "text/csv"} {
		if res := batchOf(face, "/v1/segments", ndjson, accept, rows); res.StatusCode != 200 || !strings.Contains(text(t, res), "ok") {
			t.Errorf("%s: %d", accept, res.StatusCode)
		}
	}
}
