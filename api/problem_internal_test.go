package api

import (
	"fmt"
	"net/http"
	"testing"

	"github.com/labstack/echo/v4"
)

func TestWrappedRouterErrorsKeepTheirStatus(t *testing.T) {
	for status, want := range map[int]*problemKind{
		http.StatusNotFound:         notFound,
		http.StatusMethodNotAllowed: methodNotAllowed,
		http.StatusTeapot:           internal, // what we never asked the framework for is ours to answer for
	} {
		plain := echo.NewHTTPError(status, "a text of the framework")
		for _, err := range []error{plain, fmt.Errorf("context: %w", plain)} {
			if got := explain(err); got.kind != want || got.detail == "a text of the framework" {
				t.Errorf("%v becomes %s %q, want %s", err, got.kind.name, got.detail, want.name)
			}
		}
	}
}

func TestProblemKindsAreDistinctAndErrors(t *testing.T) {
	seen := map[string]bool{}
	for _, k := range problemKinds {
		if seen[k.name] || k.status < 400 || k.status > 599 || http.StatusText(k.status) == "" || k.title == "" {
			t.Errorf("%+v", *k)
		}
		seen[k.name] = true
	}
}

// KindNames is for the test that provokes every kind from outside.
func KindNames() []string {
	var names []string
	for _, k := range problemKinds {
		names = append(names, k.name)
	}
	return names
}
