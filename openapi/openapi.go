// Package openapi is the contract: the OpenAPI document, its JSON form and the
// answer types generated from it.
package openapi

//go:generate go tool oapi-codegen --config oapi-codegen.yaml openapi.yaml

import (
	_ "embed"
	"encoding/json"
	"fmt"
	"sync"

	"go.yaml.in/yaml/v3"
)

//go:embed openapi.yaml
var document []byte

// YAML is the document as it is written.
func YAML() []byte { return document }

// JSON is the document in JSON, made once from the YAML.
func JSON() ([]byte, error) { return asJSON() }

var asJSON = sync.OnceValues(func() ([]byte, error) {
	var tree any
	if err := yaml.Unmarshal(document, &tree); err != nil {
		return nil, fmt.Errorf("openapi.yaml: %w", err)
	}
	return json.Marshal(tree)
})
