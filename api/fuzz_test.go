package api_test

import (
	"encoding/json"
	"io"
	"math"
	"net/http"
	"net/http/httptest"
	"net/url"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"borewright/api"
	"borewright/service"
)

// FuzzHandler sends anything to the door. It must never be our fault, and what
// comes back must be readable.
func FuzzHandler(f *testing.F) {
	files, err := filepath.Glob("../testdata/demo/requests/*.json")
	if err != nil || len(files) == 0 {
		f.Fatalf("no demo requests: %v", err)
	}
	for _, file := range files {
		body, err := os.ReadFile(file)
		if err != nil {
			f.Fatal(err)
		}
		door, _, _ := strings.Cut(filepath.Base(file), "-")
		f.Add("POST", "/v1/"+door, body, "application/json")
	}
	f.Add("GET", "/v1/convert?quantity=120+gal_us/min&to=m3/h", []byte(nil), "")
	f.Add("GET", "/v1/convert?quantity=1e308+km&to=nm&pick=value", []byte(nil), "")
	f.Add("HEAD", "/openapi.json?x", []byte(nil), "")
	f.Add("OPTIONS", "//v1/%2e%2e/segment;", []byte("{"), "application/json; charset=utf-8")
	face, err := api.New(api.Options{Service: service.New()})
	if err != nil {
		f.Fatal(err)
	}
	face.Ready()
	f.Fuzz(func(t *testing.T, method, target string, body []byte, contentType string) {
		r, ok := anyRequest(method, target, body, contentType)
		if !ok {
			return // net/http would not let it through to the handler
		}
		w := httptest.NewRecorder()
		face.ServeHTTP(w, r)
		checkReadable(t, r, w.Result())
	})
}

func anyRequest(method, target string, body []byte, contentType string) (*http.Request, bool) {
	u, err := url.ParseRequestURI(target)
	if err != nil || method == "" || strings.ContainsAny(method, " \r\n\t") {
		return nil, false
	}
	return &http.Request{
		Method: method, URL: u, RequestURI: target, Proto: "HTTP/1.1", ProtoMajor: 1, ProtoMinor: 1,
		Header: http.Header{"Content-Type": {contentType}}, Host: "localhost",
		Body: io.NopCloser(strings.NewReader(string(body))), ContentLength: int64(len(body)),
	}, true
}

func checkReadable(t *testing.T, r *http.Request, res *http.Response) {
	t.Helper()
	body := text(t, res)
	if res.StatusCode >= 500 {
		t.Fatalf("%s %s: %d %s", r.Method, r.RequestURI, res.StatusCode, body)
	}
	if r.Method == http.MethodHead || res.StatusCode == http.StatusNoContent {
		return
	}
	switch media := res.Header.Get("Content-Type"); media {
	case "application/problem+json":
		wantProblem(t, &http.Response{StatusCode: res.StatusCode, Header: res.Header, Body: io.NopCloser(strings.NewReader(body))},
			res.StatusCode, problemName(body))
	case "application/json":
		// JSON has no NaN and no infinity, so a valid document holds none.
		if !json.Valid([]byte(body)) {
			t.Fatalf("%s %s: no JSON: %s", r.Method, r.RequestURI, body)
		}
	case "text/plain; charset=utf-8":
		if v, err := strconv.ParseFloat(body, 64); err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
			t.Fatalf("%s %s: no number: %q", r.Method, r.RequestURI, body)
		}
	case "application/yaml":
	default:
		t.Fatalf("%s %s: unknown media type %q", r.Method, r.RequestURI, media)
	}
}

func problemName(body string) string {
	var p problem
	if json.Unmarshal([]byte(body), &p) != nil {
		return "unreadable"
	}
	return strings.TrimPrefix(p.Type, "/problems/")
}
