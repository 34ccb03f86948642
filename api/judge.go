package api

import (
	"bytes"
	"errors"
	"io"
	"net/http"
	"strings"

	"github.com/getkin/kin-openapi/openapi3"
	"github.com/getkin/kin-openapi/openapi3filter"
	"github.com/getkin/kin-openapi/routers"
	"github.com/labstack/echo/v4"

	"borewright/service/document"
)

// judge holds requests against the OpenAPI document by kin-openapi. The strict
// reader should refuse all that it refuses; where the two disagree, one of them
// has a fault, and the safe answer is a refusal.
type judge struct{ contract *openapi3.T }

func newJudge(contract []byte) (*judge, error) {
	doc, err := openapi3.NewLoader().LoadFromData(contract)
	if err != nil {
		return nil, err
	}
	return &judge{contract: doc}, nil
}

// The options of kin: all violations at once, and the body left as it came.
func judgeOptions() *openapi3filter.Options {
	return &openapi3filter.Options{MultiError: true, SkipSettingDefaults: true, RejectWhenRequestBodyNotSpecified: true}
}

// request judges a request of one route whose body has been read.
func (j *judge) request(r *http.Request, path string, body []byte) error {
	item := j.contract.Paths.Value(path)
	if item == nil || item.GetOperation(r.Method) == nil {
		return errors.New(r.Method + " " + path + " is not in the document")
	}
	again := r.Clone(r.Context())
	again.Body = io.NopCloser(bytes.NewReader(body))
	return openapi3filter.ValidateRequest(r.Context(), &openapi3filter.RequestValidationInput{
		Request: again,
		Route:   &routers.Route{Spec: j.contract, Path: path, PathItem: item, Method: r.Method, Operation: item.GetOperation(r.Method)},
		Options: judgeOptions(),
	})
}

// judged lets the judge look at a request that the strict reader accepted.
func (a *API) judged(c echo.Context, body []byte) error {
	err := a.judge.request(c.Request(), c.Path(), body)
	if err == nil {
		return nil
	}
	list := contradictions(err, nil)
	for _, v := range list {
		a.log.Error("the strict reader accepts what the document refuses",
			"request_id", c.Response().Header().Get(requestIDHeader), "route", c.Path(), "pointer", v.Pointer, "cause", v.Detail)
	}
	return &document.Refusal{Violations: list}
}

// contradictions flattens what kin found, which comes as one error or as many.
func contradictions(err error, list []document.Violation) []document.Violation {
	var many openapi3.MultiError
	if errors.As(err, &many) {
		for _, e := range many {
			list = contradictions(e, list)
		}
		return list
	}
	v := document.Violation{Code: "contradicts_document", Detail: "the OpenAPI document does not allow this"}
	var schema *openapi3.SchemaError
	var request *openapi3filter.RequestError
	switch {
	case errors.As(err, &schema):
		v.Detail += ": " + schema.Reason
		for _, name := range schema.JSONPointer() {
			v.Pointer += "/" + strings.NewReplacer("~", "~0", "/", "~1").Replace(name)
		}
	case errors.As(err, &request):
		v.Detail += ": " + request.Reason
	}
	return append(list, v)
}
