package api_test

import (
	"errors"
	"net/http"
	"strings"
	"testing"
	"time"

	"borewright/api"
	"borewright/calc"
	"borewright/service"
	"borewright/service/document"
)

// TestEveryKindOfProblem provokes each kind from outside; one without an entry
// here fails.
func TestEveryKindOfProblem(t *testing.T) {
	face, _ := newFace(t, echoing)
	refuse := func(err error) *api.API { f, _ := newFace(t, failing(err)); return f }
	unready, err := api.New(api.Options{Service: echoing})
	if err != nil {
		t.Fatal(err)
	}
	busy, release := busyFace(t)
	defer release()
	hasty, err := api.New(api.Options{Service: service.New(), BatchDeadline: time.Nanosecond})
	if err != nil {
		t.Fatal(err)
	}
	provoke := map[string]struct {
		status int
		answer *http.Response
	}{
		"malformed_body":         {400, post(refuse(&document.Refusal{Malformed: true}), "/v1/segment", "{")},
		"not_found":              {404, ask(face, "GET", "/nowhere", "")},
		"method_not_allowed":     {405, ask(face, "DELETE", "/v1/segment", "")},
		"body_too_large":         {413, post(face, "/v1/segment", strings.Repeat(" ", 1<<20+1))},
		"uri_too_long":           {414, ask(face, "GET", "/v1/convert?quantity="+strings.Repeat("1", 8<<10), "")},
		"unsupported_media_type": {415, ask(face, "POST", "/v1/segment", "{}", "Content-Type", "text/plain")},
		"invalid_input":          {422, post(refuse(&document.Refusal{}), "/v1/segment", "{}")},
		"calculation_failed":     {500, post(refuse(calc.ErrNoConvergence), "/v1/segment", "{}")},
		"internal":               {500, post(refuse(errors.New("x")), "/v1/segment", "{}")},
		"too_slow":               {503, batchOf(hasty, "/v1/segments", "application/json", "", "["+oneLine+"]")},
		"overloaded":             {503, post(busy, "/v1/segment", "{}")},
		"not_ready":              {503, ask(unready, "GET", "/readyz", "")},
	}
	for _, name := range api.KindNames() {
		p, ok := provoke[name]
		if !ok {
			t.Errorf("no request provokes %s", name)
			continue
		}
		wantProblem(t, p.answer, p.status, name)
	}
}

func TestMediaTypes(t *testing.T) {
	face, _ := newFace(t, echoing)
	for _, accepted := range []string{"application/json", "application/json; charset=utf-8", "Application/JSON;charset=\"UTF-8\"", "application/json;"} {
		if res := ask(face, "POST", "/v1/segment", "{}", "Content-Type", accepted); res.StatusCode != 200 {
			t.Errorf("%q: %d %s", accepted, res.StatusCode, text(t, res))
		}
	}
	for _, refused := range []string{
		"", "text/plain", "text/json", "application/xml", "application/json; charset=latin1", "application/json; version=2",
		"application/x-www-form-urlencoded", "application/json, text/plain", "application/problem+json", "application/json; charset",
	} {
		wantProblem(t, ask(face, "POST", "/v1/segment", "{}", "Content-Type", refused), 415, "unsupported_media_type")
	}
	wantProblem(t, ask(face, "POST", "/v1/segment", "{}"), 415, "unsupported_media_type")
	wantProblem(t, ask(face, "POST", "/v1/segment", "{}", "Content-Type", "application/json", "Content-Type", "text/plain"), 415, "unsupported_media_type")
	wantProblem(t, ask(face, "POST", "/v1/segment", "{}", "Content-Type", "application/json", "Content-Encoding", "gzip"), 415, "unsupported_media_type")
}

func TestMethods(t *testing.T) {
	face, _ := newFace(t, echoing)
	for _, path := range []string{"/v1/section", "/v1/fluid", "/v1/regime", "/v1/friction", "/v1/segment"} {
		for _, method := range []string{"PUT", "DELETE", "PATCH", "BREW"} {
			res := ask(face, method, path, "")
			if allow := res.Header.Get("Allow"); res.StatusCode != 405 || !strings.Contains(allow, "POST") || !strings.Contains(allow, "GET") {
				t.Errorf("%s %s: %d, Allow %q", method, path, res.StatusCode, allow)
			}
		}
	}
	for _, path := range []string{"/openapi.json", "/openapi.yaml", "/livez", "/readyz", "/v1/convert?quantity=1+m&to=mm", "/v1/convert?quantity=1+m&to=mm&pick=value"} {
		got, head := ask(face, "GET", path, ""), ask(face, "HEAD", path, "")
		body := text(t, got)
		if got.StatusCode != 200 || head.StatusCode != 200 || text(t, head) != "" || head.ContentLength != int64(len(body)) || body == "" {
			t.Errorf("%s: GET %d with %d bytes, HEAD %d with length %d", path, got.StatusCode, len(body), head.StatusCode, head.ContentLength)
		}
		wantProblem(t, post(face, path, "{}"), 405, "method_not_allowed")
		if res := ask(face, "OPTIONS", path, ""); res.StatusCode != 204 || !strings.Contains(res.Header.Get("Allow"), "GET") {
			t.Errorf("OPTIONS %s: %d %q", path, res.StatusCode, res.Header.Get("Allow"))
		}
	}
	if res := ask(face, "HEAD", "/nowhere", ""); res.StatusCode != 404 || text(t, res) != "" {
		t.Errorf("HEAD of nothing: %d", res.StatusCode)
	}
}

func TestQueriesAreReadStrictly(t *testing.T) {
	face, _ := newFace(t, echoing)
	for _, c := range []struct{ query, parameter, code string }{
		{"to=mm", "quantity", "missing"},
		{"quantity=1+m", "to", "missing"},
		{"quantity=&to=mm", "quantity", "blank"},
		{"quantity=1+m&to=%20", "to", "blank"},
		{"quantity=1+m&to", "to", "blank"},
		{"quantity=1+m&to=mm&to=mm", "to", "repeated_parameter"},
		{"quantity=1+m&to=mm&typo=3", "typo", "unknown_parameter"},
		{"quantity=1+m&to=mm&To=mm", "To", "unknown_parameter"},
		{"quantity=1+m&to=mm&=3", "=3", "blank_name"},
		{"quantity=1+m&to=%zz", "to=%zz", "malformed_query"},
		{"quantity=1+m&to=mm&pick=unit", "pick", "unknown_value"},
	} {
		p := wantProblem(t, ask(face, "GET", "/v1/convert?"+c.query, ""), 422, "invalid_input")
		found := false
		for _, e := range p.Errors {
			found = found || e.Parameter == c.parameter && e.Code == c.code && e.Detail != "" && e.Pointer == ""
		}
		if !found {
			t.Errorf("%s: no %s at %s in %+v", c.query, c.code, c.parameter, p.Errors)
		}
	}
	for _, path := range []string{"/v1/section", "/v1/regime", "/v1/friction", "/v1/segment"} {
		p := wantProblem(t, post(face, path+"?working=yes&b=1", "{}"), 422, "invalid_input")
		if len(p.Errors) != 2 || p.Errors[0].Parameter != "working" || p.Errors[1].Parameter != "b" {
			t.Errorf("%s: %+v", path, p.Errors)
		}
	}
	wantProblem(t, ask(face, "GET", "/readyz?verbose", ""), 422, "invalid_input")
}
