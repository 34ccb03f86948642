package api

import (
	"bytes"
	"encoding/json"
	"net/http"

	"github.com/labstack/echo/v4"

	"borewright/service/document"
	"borewright/service/problem"
)

// maxViolations bounds the list of a problem: a body of nonsense would otherwise
// be answered with a longer one.
const maxViolations = 100

// problemDocument is the body of every refusal (RFC 9457).
type problemDocument struct {
	Type      string         `json:"type"`
	Title     string         `json:"title"`
	Status    int            `json:"status"`
	Detail    string         `json:"detail"`
	RequestID string         `json:"request_id"`
	Errors    []problemError `json:"errors,omitempty"`
}

// problemError is one violation: where, what, and what would be right.
type problemError struct {
	Pointer   string `json:"pointer,omitempty"`
	Parameter string `json:"parameter,omitempty"`
	Code      string `json:"code"`
	Detail    string `json:"detail"`
}

// fail answers an error. It is the one place that writes problem documents, and
// the one that logs their causes.
func (a *API) fail(err error, c echo.Context) {
	r := explain(err)
	res := c.Response()
	if res.Committed {
		a.cutOffAnswer(err, c)
	}
	a.logCause(err, r, c)
	h := res.Header()
	h.Set("Content-Type", "application/problem+json")
	h.Set("Cache-Control", "no-store")
	unread := r.unread || r.kind == bodyTooLarge
	switch {
	case r.kind == notReady, r.kind == overloaded, r.kind == tooSlow:
		h.Set("Retry-After", "1")
	case unread:
		h.Set("Connection", "close")
	}
	if err := send(c, r.kind.Status, r.document(h.Get(requestIDHeader))); err != nil {
		a.log.Warn("the problem document did not reach its client", "request_id", h.Get(requestIDHeader), "cause", err)
		return
	}
	if unread {
		drain(c)
	}
}

// cutOffAnswer ends the connection: half an answer is out and cannot be taken
// back, and no client shall take it for a whole one. Mostly the client has gone.
func (a *API) cutOffAnswer(err error, c echo.Context) {
	a.log.Warn("an answer was cut off", "request_id", c.Response().Header().Get(requestIDHeader), "route", c.Path(), "cause", err.Error())
	panic(http.ErrAbortHandler)
}

func (a *API) logCause(err error, r *refusal, c echo.Context) {
	if r.kind != internal && r.kind != calculationFailed {
		return
	}
	args := []any{"request_id", c.Response().Header().Get(requestIDHeader), "method", c.Request().Method, "route", c.Path(), "cause", err.Error()}
	if p, ok := err.(*panicked); ok {
		args = append(args, "stack", string(p.stack))
	}
	a.log.Error("request failed by our fault", args...)
}

func (r *refusal) document(requestID string) []byte {
	d := problemDocument{
		Type: r.kind.Type(), Title: r.kind.Title, Status: r.kind.Status, Detail: r.detail, RequestID: requestID,
	}
	for _, v := range r.violations[:min(len(r.violations), maxViolations)] {
		d.Errors = append(d.Errors, newProblemError(v))
	}
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false) // "<" in a detail is for people to read; the media type keeps browsers from running it
	if err := enc.Encode(d); err != nil {
		panic(err) // strings and one int: the encoder has nothing to refuse
	}
	return bytes.TrimSuffix(b.Bytes(), []byte("\n"))
}

func newProblemError(v document.Violation) problemError {
	e := problemError{Parameter: v.Parameter, Code: v.Code, Detail: v.Detail}
	if v.Parameter == "" {
		e.Pointer = problem.Fragment(v.Pointer)
	}
	return e
}
