package api

import (
	"errors"
	"fmt"
	"net/http"

	"github.com/labstack/echo/v4"

	"borewright/calc"
	"borewright/service/document"
	"borewright/service/problem"
)

// The ways in which a request can fail. The status of each stands here, or with the
// service, and nowhere else.
var (
	malformedBody     = problem.MalformedBody
	notFound          = &problem.Kind{Name: "not_found", Status: http.StatusNotFound, Title: "Nothing stands at this path"}
	methodNotAllowed  = &problem.Kind{Name: "method_not_allowed", Status: http.StatusMethodNotAllowed, Title: "This path does not take this method"}
	bodyTooLarge      = &problem.Kind{Name: "body_too_large", Status: http.StatusRequestEntityTooLarge, Title: "The body is too large"}
	uriTooLong        = &problem.Kind{Name: "uri_too_long", Status: http.StatusRequestURITooLong, Title: "The URL is too long"}
	unsupportedMedia  = &problem.Kind{Name: "unsupported_media_type", Status: http.StatusUnsupportedMediaType, Title: "The body comes in a form that is not read here"}
	invalidInput      = problem.InvalidInput
	calculationFailed = problem.CalculationFailed
	internal          = &problem.Kind{Name: "internal", Status: http.StatusInternalServerError, Title: "Something is wrong on our side"}
	tooSlow           = &problem.Kind{Name: "too_slow", Status: http.StatusServiceUnavailable, Title: "The batch takes too long for one document"}
	overloaded        = &problem.Kind{Name: "overloaded", Status: http.StatusServiceUnavailable, Title: "Too many requests at once"}
	notReady          = &problem.Kind{Name: "not_ready", Status: http.StatusServiceUnavailable, Title: "Not ready"}
)

// problemKinds lists every kind; a test provokes each of them.
var problemKinds = []*problem.Kind{
	malformedBody, notFound, methodNotAllowed, bodyTooLarge, uriTooLong, unsupportedMedia, invalidInput, calculationFailed, internal, tooSlow, overloaded, notReady,
}

// ourFault is what a client reads where the cause is ours: the log has the cause
// under the request id, and the client never sees it.
const ourFault = "this is a fault of the service and not of the request; report it with the request_id"

// refusal is a request that the HTTP face itself turns away.
type refusal struct {
	kind       *problem.Kind
	detail     string
	violations []document.Violation
	unread     bool // more of the body may be on its way
}

func (r *refusal) Error() string { return r.kind.Name + ": " + r.detail }

// explain decides what a client is told about an error: the one place where
// errors become statuses.
func explain(err error) *refusal {
	var read *document.Refusal
	var own *refusal
	var routed *echo.HTTPError
	switch {
	case errors.As(err, &read):
		kind := invalidInput
		if read.Malformed {
			kind = malformedBody
		}
		return &refusal{kind: kind, detail: summary(read.Violations), violations: read.Violations}
	case errors.As(err, &own):
		return own
	case errors.Is(err, calc.ErrNoConvergence), errors.Is(err, calc.ErrNonFinite):
		return &refusal{kind: calculationFailed, detail: ourFault}
	case errors.As(err, &routed):
		return routing(routed.Code)
	}
	return &refusal{kind: internal, detail: ourFault}
}

// routing words what the router found. It refuses in two ways only; any other
// status would be a surprise from the framework, and ours to answer for.
func routing(status int) *refusal {
	switch status {
	case http.StatusNotFound:
		return &refusal{kind: notFound, detail: "/openapi.json lists the paths"}
	case http.StatusMethodNotAllowed:
		return &refusal{kind: methodNotAllowed, detail: "the Allow header lists the methods of this path"}
	}
	return &refusal{kind: internal, detail: ourFault}
}

// summary says in one sentence what the list of violations says in full.
func summary(list []document.Violation) string {
	switch n := len(list); {
	case n == 0:
		return "the request cannot be read"
	case n == 1:
		return list[0].Detail
	case n > maxViolations:
		return fmt.Sprintf("%d things are wrong with the request; the first %d are listed", n, maxViolations)
	default:
		return fmt.Sprintf("%d things are wrong with the request", n)
	}
}
