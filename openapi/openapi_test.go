package openapi_test

import (
	"bytes"
	"encoding/json"
	"reflect"
	"testing"

	"go.yaml.in/yaml/v3"

	"borewright/openapi"
)

// TestJSONIsTheSameDocument reads both forms and compares them as JSON sees them.
func TestJSONIsTheSameDocument(t *testing.T) {
	first, err := openapi.JSON()
	if err != nil {
		t.Fatal(err)
	}
	var fromYAML any
	if err := yaml.Unmarshal(openapi.YAML(), &fromYAML); err != nil {
		t.Fatal(err)
	}
	var got any
	if err := json.Unmarshal(first, &got); err != nil {
		t.Fatal(err)
	}
	if want := asJSONSees(fromYAML); !reflect.DeepEqual(got, want) {
		t.Error("the JSON form differs from the YAML form")
	}
	if bytes.Contains(first, []byte("map[")) {
		t.Error("the JSON form shows a Go map")
	}
	again, err := openapi.JSON()
	if err != nil || !bytes.Equal(first, again) {
		t.Errorf("the second time the document is another one, %v", err)
	}
}

// asJSONSees turns the whole numbers of YAML into the one kind that JSON has.
func asJSONSees(v any) any {
	switch v := v.(type) {
	case map[string]any:
		out := map[string]any{}
		for k, child := range v {
			out[k] = asJSONSees(child)
		}
		return out
	case []any:
		out := make([]any, len(v))
		for i, child := range v {
			out[i] = asJSONSees(child)
		}
		return out
	case int:
		return float64(v)
	}
	return v
}
