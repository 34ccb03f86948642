package api

import (
	"errors"
	"fmt"
	"net/http"

	"github.com/labstack/echo/v4"

	"borewright/calc"
	"borewright/service/document"
)

// problemKind is one way a request can fail: its stable name, and what a person
// reads first. The status stands here and nowhere else.
type problemKind struct {
	name   string
	status int
	title  string
}

var (
	malformedBody     = &problemKind{"malformed_body", http.StatusBadRequest, "The body is not one readable document"}
	notFound          = &problemKind{"not_found", http.StatusNotFound, "Nothing stands at this path"}
	methodNotAllowed  = &problemKind{"method_not_allowed", http.StatusMethodNotAllowed, "This path does not take this method"}
	bodyTooLarge      = &problemKind{"body_too_large", http.StatusRequestEntityTooLarge, "The body is too large"}
	uriTooLong        = &problemKind{"uri_too_long", http.StatusRequestURITooLong, "The URL is too long"}
	unsupportedMedia  = &problemKind{"unsupported_media_type", http.StatusUnsupportedMediaType, "The body must be JSON"}
	invalidInput      = &problemKind{"invalid_input", http.StatusUnprocessableEntity, "The request cannot be answered as it stands"}
	calculationFailed = &problemKind{"calculation_failed", http.StatusInternalServerError, "The calculation failed"}
	internal          = &problemKind{"internal", http.StatusInternalServerError, "Something is wrong on our side"}
	notReady          = &problemKind{"not_ready", http.StatusServiceUnavailable, "Not ready"}
)

// problemKinds lists every kind; a test provokes each of them.
var problemKinds = []*problemKind{
	malformedBody, notFound, methodNotAllowed, bodyTooLarge, uriTooLong, unsupportedMedia, invalidInput, calculationFailed, internal, notReady,
}

// ourFault is what a client reads where the cause is ours: the log has the cause
// under the request id, and the client never sees it.
const ourFault = "this is a fault of the service and not of the request; report it with the request_id"

// refusal is a request that the HTTP face itself turns away.
type refusal struct {
	kind       *problemKind
	detail     string
	violations []document.Violation
}

func (r *refusal) Error() string { return r.kind.name + ": " + r.detail }

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
		return &refusal{kind, summary(read.Violations), read.Violations}
	case errors.As(err, &own):
		return own
	case errors.Is(err, calc.ErrNoConvergence), errors.Is(err, calc.ErrNonFinite):
		return &refusal{calculationFailed, ourFault, nil}
	case errors.As(err, &routed):
		return routing(routed.Code)
	}
	return &refusal{internal, ourFault, nil}
}

// routing words what the router found. It refuses in two ways only; any other
// status would be a surprise from the framework, and ours to answer for.
func routing(status int) *refusal {
	switch status {
	case http.StatusNotFound:
		return &refusal{notFound, "/openapi.json lists the paths", nil}
	case http.StatusMethodNotAllowed:
		return &refusal{methodNotAllowed, "the Allow header lists the methods of this path", nil}
	}
	return &refusal{internal, ourFault, nil}
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
