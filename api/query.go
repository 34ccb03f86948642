package api

import (
	"fmt"
	"net/url"
	"slices"
	"strings"

	"borewright/service/document"
)

// readQuery reads a query string strictly: each known name at most once and not
// blank, and no other. Values come in the order of known, "" where not given.
func readQuery(raw string, known ...string) ([]string, error) {
	values := make([]string, len(known))
	var wrong []document.Violation
	for part := range strings.SplitSeq(raw, "&") {
		if part == "" {
			continue
		}
		if v := readParameter(part, known, values); v != nil {
			wrong = append(wrong, *v)
		}
	}
	if wrong != nil {
		return nil, &document.Refusal{Violations: wrong}
	}
	return values, nil
}

// readParameter puts one name=value in its place, or says what is wrong with it.
func readParameter(part string, known, values []string) *document.Violation {
	rawName, rawValue, _ := strings.Cut(part, "=")
	name, errName := url.QueryUnescape(rawName)
	value, errValue := url.QueryUnescape(rawValue)
	i := slices.Index(known, name)
	switch {
	case errName != nil || errValue != nil:
		return &document.Violation{Parameter: part, Code: "malformed_query", Detail: "a % must be followed by two hexadecimal digits; write a percent sign as %25"}
	case name == "":
		return &document.Violation{Parameter: part, Code: "blank_name", Detail: "a value without a name"}
	case i < 0:
		return &document.Violation{Parameter: name, Code: "unknown_parameter", Detail: unknownParameter(known)}
	case strings.TrimSpace(value) == "":
		return &document.Violation{Parameter: name, Code: "blank", Detail: "a value is missing behind " + name + "="}
	case values[i] != "":
		return &document.Violation{Parameter: name, Code: "repeated_parameter", Detail: name + " stands twice; give it once"}
	}
	values[i] = value
	return nil
}

func unknownParameter(known []string) string {
	if len(known) == 0 {
		return "this path takes no query parameters"
	}
	return fmt.Sprintf("this path takes only %s", strings.Join(known, ", "))
}
