package api_test

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"net/http"
	"net/http/httptest"
	"sort"
	"strconv"
	"strings"
	"testing"

	"github.com/getkin/kin-openapi/openapi3"
	"github.com/getkin/kin-openapi/openapi3filter"
	"github.com/getkin/kin-openapi/routers"

	"borewright/api"
	"borewright/openapi"
	"borewright/service"
)

// loadContract is the OpenAPI document as kin-openapi reads it.
func loadContract(t testing.TB) *openapi3.T {
	t.Helper()
	data, err := openapi.JSON()
	if err != nil {
		t.Fatal(err)
	}
	doc, err := openapi3.NewLoader().LoadFromData(data)
	if err != nil {
		t.Fatal(err)
	}
	return doc
}

func init() { openapi3filter.RegisterBodyDecoder("text/html", openapi3filter.PlainBodyDecoder) }

// judgeResponse holds one answer against the document; an undocumented status is
// a fault too.
func judgeResponse(doc *openapi3.T, r *http.Request, path string, res *http.Response, body []byte) error {
	item := doc.Paths.Value(path)
	if item == nil || item.GetOperation(r.Method) == nil {
		return fmt.Errorf("%s %s is not in the document", r.Method, path)
	}
	options := &openapi3filter.Options{IncludeResponseStatus: true, MultiError: true}
	return openapi3filter.ValidateResponse(context.Background(), &openapi3filter.ResponseValidationInput{
		RequestValidationInput: &openapi3filter.RequestValidationInput{
			Request: r, Options: options,
			Route: &routers.Route{Spec: doc, Path: path, PathItem: item, Method: r.Method, Operation: item.GetOperation(r.Method)},
		},
		Status: res.StatusCode, Header: res.Header, Body: io.NopCloser(bytes.NewReader(body)), Options: options,
	})
}

// operation is one method of one path of the document.
type operation struct {
	method, path string
	*openapi3.Operation
}

func operations(doc *openapi3.T) []operation {
	var list []operation
	for path, item := range doc.Paths.Map() {
		for method, op := range item.Operations() {
			list = append(list, operation{method, path, op})
		}
	}
	sort.Slice(list, func(i, j int) bool { return list[i].path+list[i].method < list[j].path+list[j].method })
	return list
}

func (o operation) String() string { return o.method + " " + o.path }

// bodies gives the request examples of an operation by name.
func (o operation) bodies(t testing.TB) map[string]string {
	t.Helper()
	list := map[string]string{}
	if o.RequestBody == nil {
		return list
	}
	media := o.RequestBody.Value.Content.Get("application/json")
	if media.Example != nil {
		list["example"] = encode(t, media.Example)
	}
	for name, e := range media.Examples {
		list[name] = encode(t, e.Value.Value)
	}
	return list
}

// target is the path with the example of its query, or the examples of its query
// parameters where they can stand together.
func (o operation) target() string {
	if o.path == "/v1/catalog/{kind}" {
		return "/v1/catalog/substances"
	}
	if whole, ok := o.Extensions["x-example-query"].(string); ok {
		return o.path + "?" + whole
	}
	var query []string
	for _, p := range o.Parameters {
		if v, ok := p.Value.Example.(string); ok && p.Value.In == "query" && p.Value.Name != "pick" {
			query = append(query, p.Value.Name+"="+strings.ReplaceAll(strings.ReplaceAll(v, " ", "%20"), "+", "%2B"))
		}
	}
	if query == nil {
		return o.path
	}
	return o.path + "?" + strings.Join(query, "&")
}

// provoke makes the request of an operation that should end in the status, and
// the face to send it to.
func provoke(t *testing.T, o operation, status int) (*api.API, *http.Request) {
	t.Helper()
	face, _ := newFace(t, service.New())
	body, target, media := "", o.target(), "application/json"
	for _, b := range o.bodies(t) {
		body = b
	}
	switch status {
	case 200:
	case 304:
	case 400:
		body = "{"
	case 404:
		target = "/v1/catalog/nothing"
	case 413:
		body = strings.Repeat(" ", 1<<20+1)
		if o.path == "/v1/segments" {
			body = strings.Repeat(" ", 64<<20+1)
		}
	case 414:
		target += "?" + strings.Repeat("a", 8<<10)
	case 415:
		media = "text/plain"
	case 422:
		target, _, _ = strings.Cut(target, "?")
		target += "?no_such_name=1"
	case 500:
		face, _ = newFace(t, failing(errors.New("provoked")))
	case 503:
		if o.path != "/readyz" {
			busy, release := busyFace(t)
			t.Cleanup(release)
			face = busy
			break
		}
		unready, err := api.New(api.Options{Service: service.New()})
		if err != nil {
			t.Fatal(err)
		}
		face = unready
	default:
		t.Errorf("%s documents status %d, and no test provokes it", o, status)
		return nil, nil
	}
	r := httptest.NewRequest(o.method, target, strings.NewReader(body))
	if o.method == http.MethodPost {
		r.Header.Set("Content-Type", media)
	}
	if status == http.StatusNotModified {
		r.Header.Set("If-None-Match", "*")
	}
	return face, r
}

// TestEveryDocumentedStatus provokes each status of each operation, and holds
// the answer against the document.
func TestEveryDocumentedStatus(t *testing.T) {
	doc := loadContract(t)
	for _, o := range operations(doc) {
		for code := range o.Responses.Map() {
			t.Run(o.String()+" "+code, func(t *testing.T) {
				status, err := strconv.Atoi(code)
				if err != nil {
					t.Fatalf("%q is no status; a range would hide one", code)
				}
				face, r := provoke(t, o, status)
				if face == nil {
					return
				}
				w := httptest.NewRecorder()
				face.ServeHTTP(w, r)
				if w.Code != status {
					t.Fatalf("status %d: %s", w.Code, w.Body)
				}
				if err := judgeResponse(doc, r, o.path, w.Result(), w.Body.Bytes()); err != nil {
					t.Errorf("%v\nanswer: %s", err, w.Body)
				}
			})
		}
	}
}

// TestEveryRouteIsDocumented compares the routes of the face with the paths of the document, both ways.
func TestEveryRouteIsDocumented(t *testing.T) {
	documented := map[string]bool{}
	for _, o := range operations(loadContract(t)) {
		documented[o.String()] = true
	}
	face, _ := newFace(t, service.New())
	for _, route := range face.Routes() {
		route = strings.Replace(route, ":kind", "{kind}", 1)
		if strings.HasPrefix(route, "GET /docs/") {
			continue // what the page is made of
		}
		if strings.HasPrefix(route, "HEAD ") {
			continue // HEAD is GET without a body, and every GET has it
		}
		if !documented[route] {
			t.Errorf("%s is routed and not in the document", route)
		}
		delete(documented, route)
	}
	for o := range documented {
		t.Errorf("%s is in the document and not routed", o)
	}
}

// TestEveryExampleIsAnswered sends the examples of the document to the real handler.
func TestEveryExampleIsAnswered(t *testing.T) {
	doc := loadContract(t)
	face, err := api.New(api.Options{Service: service.New(), ValidateAlways: true})
	if err != nil {
		t.Fatal(err)
	}
	for _, o := range operations(doc) {
		if o.method != http.MethodPost {
			continue
		}
		examples := o.bodies(t)
		if len(examples) == 0 {
			t.Errorf("%s shows no example", o)
		}
		for name, body := range examples {
			r := httptest.NewRequest(o.method, o.path, strings.NewReader(body))
			r.Header.Set("Content-Type", "application/json")
			w := httptest.NewRecorder()
			face.ServeHTTP(w, r)
			if w.Code != 200 {
				t.Errorf("%s, example %s: %d %s", o, name, w.Code, w.Body)
				continue
			}
			if err := judgeResponse(doc, r, o.path, w.Result(), w.Body.Bytes()); err != nil {
				t.Errorf("%s, example %s: %v\nanswer: %s", o, name, err, w.Body)
			}
		}
	}
}

// TestJudgeSeesAFault feeds the judge answers that break the document.
func TestJudgeSeesAFault(t *testing.T) {
	doc := loadContract(t)
	r := httptest.NewRequest(http.MethodPost, "/v1/segment", nil)
	for name, c := range map[string]struct {
		status int
		media  string
		body   string
	}{
		"an undocumented status":  {418, "application/json", "{}"},
		"an answer without keys":  {200, "application/json", "{}"},
		"another media type":      {200, "text/html", "{}"},
		"a problem without title": {422, "application/problem+json", `{"type":"/problems/x","status":422}`},
		"a problem with more":     {422, "application/problem+json", `{"type":"/problems/invalid_input","title":"t","status":422,"detail":"d","request_id":"r","cause":"c"}`},
	} {
		res := &http.Response{StatusCode: c.status, Header: http.Header{"Content-Type": {c.media}}}
		if judgeResponse(doc, r, "/v1/segment", res, []byte(c.body)) == nil {
			t.Errorf("%s passes", name)
		}
	}
}

// TestValidateAlwaysRefusesWhatTheReaderLetsThrough puts a reader that accepts
// everything before the judge.
func TestValidateAlwaysRefusesWhatTheReaderLetsThrough(t *testing.T) {
	var logged bytes.Buffer
	face, err := api.New(api.Options{Service: echoing, Logger: jsonLog(&logged), ValidateAlways: true})
	if err != nil {
		t.Fatal(err)
	}
	p := wantProblem(t, post(face, "/v1/section", `{"section":{"shape":"circle","diameter":-1},"lenght":3}`), 422, "invalid_input")
	if len(p.Errors) == 0 || !strings.Contains(logged.String(), "the strict reader accepts what the document refuses") {
		t.Errorf("%+v, log %s", p, logged.String())
	}
	if res := post(face, "/v1/section", `{"section":{"shape":"circle","diameter":1}}`); res.StatusCode != 200 {
		t.Errorf("a right request: %d %s", res.StatusCode, text(t, res))
	}
}
