package api

import (
	"fmt"
	"net/http"
	"testing"

	"github.com/labstack/echo/v4"

	"borewright/service/problem"
)

func TestWrappedRouterErrorsKeepTheirStatus(t *testing.T) {
	for status, want := range map[int]*problem.Kind{
		http.StatusNotFound:         notFound,
		http.StatusMethodNotAllowed: methodNotAllowed,
		http.StatusTeapot:           internal, // what we never asked the framework for is ours to answer for
	} {
		plain := echo.NewHTTPError(status, "a text of the framework")
		for _, err := range []error{plain, fmt.Errorf("context: %w", plain)} {
			if got := explain(err); got.kind != want || got.detail == "a text of the framework" {
				t.Errorf("%v becomes %s %q, want %s", err, got.kind.Name, got.detail, want.Name)
			}
		}
	}
}

func TestProblemKindsAreDistinctAndErrors(t *testing.T) {
	seen := map[string]bool{}
	for _, k := range problemKinds {
		if seen[k.Name] || k.Status < 400 || k.Status > 599 || http.StatusText(k.Status) == "" || k.Title == "" {
			t.Errorf("%+v", *k)
		}
		seen[k.Name] = true
	}
}

// KindNames is for the test that provokes every kind from outside.
func KindNames() []string {
	var names []string
	for _, k := range problemKinds {
		names = append(names, k.Name)
	}
	return names
}
