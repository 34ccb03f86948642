package api_test

import (
	"errors"
	"fmt"
	"net/http"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/service/document"
)

func TestRefusalsOfTheService(t *testing.T) {
	violation := document.Violation{Pointer: "/section/width", Code: "wrong_dimension", Detail: "5 kg is a mass; say a length"}
	for _, c := range []struct {
		name   string
		err    error
		status int
		kind   string
	}{
		{"read and refused", &document.Refusal{Violations: []document.Violation{violation}}, 422, "invalid_input"},
		{"not readable", &document.Refusal{Malformed: true, Violations: []document.Violation{violation}}, 400, "malformed_body"},
		{"wrapped by someone", fmt.Errorf("context: %w", &document.Refusal{Violations: []document.Violation{violation}}), 422, "invalid_input"},
		{"refused without a word", &document.Refusal{}, 422, "invalid_input"},
		{"solver gave up", &calc.Error{Kind: calc.ErrNoConvergence, Quantity: "secret"}, 500, "calculation_failed"},
		{"result overflowed", fmt.Errorf("secret: %w", calc.ErrNonFinite), 500, "calculation_failed"},
		{"domain error that nobody gave a pointer", fmt.Errorf("secret: %w", calc.ErrDomain), 500, "internal"},
		{"defect", errors.New("secret"), 500, "internal"},
	} {
		t.Run(c.name, func(t *testing.T) {
			face, logged := newFace(t, failing(c.err))
			p := wantProblem(t, post(face, "/v1/segment", "{}"), c.status, c.kind)
			if strings.Contains(fmt.Sprint(p), "secret") {
				t.Errorf("the client is shown the cause: %v", p)
			}
			seen := strings.Contains(logged.String(), "secret") && strings.Contains(logged.String(), p.RequestID)
			if seen != (c.status == 500) {
				t.Errorf("our faults, and only they, are logged with cause and request id; logged: %q", logged)
			}
		})
	}
}

func TestPanicIsAnsweredAndLogged(t *testing.T) {
	face, logged := newFace(t, answerer{json: func([]byte, []byte, document.Door) ([]byte, error) { panic("secret") }})
	p := wantProblem(t, post(face, "/v1/segment", "{}"), 500, "internal")
	if strings.Contains(fmt.Sprint(p), "secret") || !strings.Contains(logged.String(), "panic: secret") || !strings.Contains(logged.String(), "problem_test.go") {
		t.Errorf("client %v, log %s", p, logged)
	}
	wantProblem(t, post(face, "/v1/segment", "{}"), 500, "internal") // still alive
}

func TestViolationsAreListedUpToHundred(t *testing.T) {
	for _, n := range []int{1, 2, 100, 101, 5000} {
		list := make([]document.Violation, n)
		for i := range list {
			list[i] = document.Violation{Pointer: fmt.Sprintf("/fittings/%d", i), Code: "blank", Detail: "say something"}
		}
		face, _ := newFace(t, failing(&document.Refusal{Violations: list}))
		p := wantProblem(t, post(face, "/v1/segment", "{}"), 422, "invalid_input")
		if len(p.Errors) != min(n, 100) {
			t.Errorf("%d violations, %d listed", n, len(p.Errors))
		}
		if n > 1 && !strings.HasPrefix(p.Detail, fmt.Sprint(n)+" ") {
			t.Errorf("%d violations, detail %q", n, p.Detail)
		}
		for i, e := range p.Errors {
			if e.Pointer != fmt.Sprintf("#/fittings/%d", i) || e.Parameter != "" || e.Code == "" || e.Detail == "" {
				t.Fatalf("violation %d reads %+v", i, e)
			}
		}
	}
}

func TestPointersAreFragments(t *testing.T) {
	for pointer, want := range map[string]string{
		"":                  "#",
		"/":                 "#/",
		"/section/width":    "#/section/width",
		"/a~1b/~0":          "#/a~1b/~0",
		"/c%d":              "#/c%25d",
		"/e^f":              "#/e%5Ef",
		"/ ":                "#/%20",
		`/i\j`:              "#/i%5Cj",
		`/k"l`:              "#/k%22l",
		"/g|h":              "#/g%7Ch",
		"/größe":            "#/gr%C3%B6%C3%9Fe",
		"/[{}]<>#`":         "#/%5B%7B%7D%5D%3C%3E%23%60",
		"/!$&'()*+,;=:@?-.": "#/!$&'()*+,;=:@?-.",
	} {
		face, _ := newFace(t, failing(&document.Refusal{Violations: []document.Violation{{Pointer: pointer, Code: "c", Detail: "d"}}}))
		p := wantProblem(t, post(face, "/v1/segment", "{}"), 422, "invalid_input")
		if p.Errors[0].Pointer != want {
			t.Errorf("%q becomes %q, want %q", pointer, p.Errors[0].Pointer, want)
		}
	}
}

func TestRequestID(t *testing.T) {
	face, _ := newFace(t, echoing)
	long := strings.Repeat("a", 64)
	for _, given := range []string{"a", "Job-7.step_2", long} {
		if got := ask(face, "GET", "/livez", "", "X-Request-Id", given).Header.Get("X-Request-Id"); got != given {
			t.Errorf("%q comes back as %q", given, got)
		}
	}
	seen := map[string]bool{}
	for _, given := range []string{"", long + "a", "a b", "a\"b", "é", "a/b", "<x>", "@", "[", "`", "{"} {
		got := ask(face, "GET", "/livez", "", "X-Request-Id", given).Header.Get("X-Request-Id")
		if got == given || got == "" || seen[got] {
			t.Errorf("%q gets the name %q", given, got)
		}
		seen[got] = true
	}
	if got := ask(face, "GET", "/livez", "", "X-Request-Id", "a", "X-Request-Id", "b").Header.Values("X-Request-Id"); len(got) != 1 || got[0] == "a" || got[0] == "b" {
		t.Errorf("two names give %q", got)
	}
	if p := wantProblem(t, ask(face, "GET", "/nowhere", "", "X-Request-Id", "mine"), http.StatusNotFound, "not_found"); p.RequestID != "mine" {
		t.Errorf("the problem has %q", p.RequestID)
	}
}
