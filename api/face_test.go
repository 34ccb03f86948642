package api_test

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"log/slog"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"borewright/api"
	"borewright/service"
	"borewright/service/answer"
	"borewright/service/document"
)

// answerer stands in for the service where a test needs it to fail.
type answerer struct {
	json    func(dst, body []byte, door document.Door) ([]byte, error)
	convert func(quantity, to string) (service.Conversion, error)
}

func (a answerer) AnswerIn(dst, body []byte, door document.Door, _ *answer.Report) ([]byte, error) {
	return a.json(dst, body, door)
}

func (a answerer) Ask(dst []byte, q *service.Query) (service.Reply, error) {
	body, err := a.json(dst, nil, q.Door)
	return service.Reply{Body: body, Text: q.Pick != ""}, err
}

func (a answerer) Catalog(kind string) ([]service.CatalogEntry, bool) {
	if _, err := a.json(nil, nil, document.SectionDoor); err != nil {
		panic(err)
	}
	return service.New().Catalog(kind)
}

// Desk is none: a batch over it meets a fault of ours.
func (a answerer) Desk() *service.Desk { panic("there is no desk") }

func (a answerer) Convert(quantity, to string) (service.Conversion, error) {
	return a.convert(quantity, to)
}

// failing answers everything with err.
func failing(err error) answerer {
	return answerer{
		json:    func(dst, _ []byte, _ document.Door) ([]byte, error) { return dst, err },
		convert: func(string, string) (service.Conversion, error) { return service.Conversion{}, err },
	}
}

// echoing answers every posted body with itself.
var echoing = answerer{
	json:    func(dst, body []byte, _ document.Door) ([]byte, error) { return append(dst, body...), nil },
	convert: service.New().Convert,
}

// newFace is the HTTP face over a, ready, logging into the buffer.
func newFace(t testing.TB, a api.Answerer) (*api.API, *bytes.Buffer) {
	t.Helper()
	var logged bytes.Buffer
	scrape := http.HandlerFunc(func(w http.ResponseWriter, _ *http.Request) {
		w.Header().Set("Content-Type", "text/plain; version=0.0.4")
		fmt.Fprintln(w, "up 1")
	})
	face, err := api.New(api.Options{Service: a, Logger: jsonLog(&logged), Scrape: scrape})
	if err != nil {
		t.Fatal(err)
	}
	face.Ready()
	return face, &logged
}

func jsonLog(w io.Writer) *slog.Logger { return slog.New(slog.NewJSONHandler(w, nil)) }

func encode(t testing.TB, v any) string {
	t.Helper()
	b, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// ask sends one request; headers are name, value, name, value ...
func ask(face http.Handler, method, target, body string, headers ...string) *http.Response {
	var from io.Reader
	if body != "" {
		from = strings.NewReader(body)
	}
	r := httptest.NewRequest(method, target, from)
	for i := 0; i < len(headers); i += 2 {
		r.Header.Add(headers[i], headers[i+1])
	}
	w := httptest.NewRecorder()
	face.ServeHTTP(w, r)
	return w.Result()
}

func post(face http.Handler, target, body string) *http.Response {
	return ask(face, http.MethodPost, target, body, "Content-Type", "application/json")
}

func text(t testing.TB, res *http.Response) string {
	t.Helper()
	b, err := io.ReadAll(res.Body)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// problem is what a client reads of a problem document.
type problem struct {
	Type, Title, Detail string
	Status              int
	RequestID           string `json:"request_id"`
	Errors              []struct{ Pointer, Parameter, Code, Detail string }
}

// wantProblem reads the problem document of an answer and checks what holds for
// every one of them.
func wantProblem(t testing.TB, res *http.Response, status int, name string) problem {
	t.Helper()
	body := text(t, res)
	var p problem
	if err := json.Unmarshal([]byte(body), &p); err != nil {
		t.Fatalf("status %d, no problem document: %v in %q", res.StatusCode, err, body)
	}
	if res.StatusCode != status || p.Status != status || p.Type != "/problems/"+name {
		t.Errorf("got status %d and %s, want %d and %s: %s", res.StatusCode, p.Type, status, name, body)
	}
	for header, want := range map[string]string{
		"Content-Type": "application/problem+json", "Cache-Control": "no-store", "X-Content-Type-Options": "nosniff", "X-Request-Id": p.RequestID,
	} {
		if got := res.Header.Get(header); got != want || got == "" {
			t.Errorf("%s: %q, want %q", header, got, want)
		}
	}
	if p.Title == "" || p.Detail == "" {
		t.Errorf("title or detail is missing: %s", body)
	}
	return p
}
